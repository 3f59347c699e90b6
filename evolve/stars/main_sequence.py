"""Main-sequence stars of any mass: a stand-in between zero age and the end of hydrogen.

A serious history of an evolved donor wants the user's own track (`star = "track"`).
"""

from math import log

from evolve.constants import GRAVITATIONAL_TIME, T_SUN
from evolve.errors import DomainError
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure
from evolve.stars.tables import cubics, evaluate, interval
from evolve.stars.zero_age import lifetime, zero_age_luminosity, zero_age_radius

ZETA_MASSES = (0.4, 0.6, 0.8, 1.0, 1.3)
ZETA_CURVE = cubics(ZETA_MASSES, (-1.0 / 3.0, 0.0, 1.0, 2.6, 4.0))
BEND = 1.583
"""Mass above which the radius at the end grows by Demircan & Kahraman's ratio [solMass]."""
CONVECTIVE = (0.2, 1.25)
"""Masses with a convective envelope and so with braking [solMass]."""
LOG_LIGHT = log(2.4)


class MainSequenceKeys(NamedTuple):
    """Keys of a main-sequence star. zeta_ad below -1 stands for "by mass"."""

    burnt: Annotated[float, Key("", 0.0, 1.0, "burnt fraction at the start")] = 0.0
    age: Annotated[float, Key("yr", 0.0, 1e15, "age at the start, in place of `burnt`")] = 0.0
    zeta_ad: Annotated[
        float, Key("", -2.0, 50.0, "adiabatic d ln R / d ln m; -2: by mass, -1/3 to 4")
    ] = -2.0


def adiabatic_exponent(mass):
    """zeta_ad by mass: -1/3 to 0.4, 0 at 0.6, 1 at 0.8, 2.6 at 1.0, 4 from 1.3 solar masses.

    Representative values from memory, joined by a monotone cubic.
    """
    if mass <= ZETA_MASSES[0]:
        return -1.0 / 3.0
    if mass >= ZETA_MASSES[-1]:
        return 4.0
    place = interval(ZETA_MASSES, mass)
    return evaluate(ZETA_CURVE, place, mass - ZETA_MASSES[place])


def structure(mass, radius, phase, keys):
    """A star on its way from zero age (phase 0) to the end of the main sequence (phase 1).

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float
        Burnt fraction of the central hydrogen; grows by 1/lifetime(m) a year, with the
        present mass, untouched by loss and gain.
    keys : MainSequenceKeys

    Returns
    -------
    Structure
        R_eq = R_zero rho^(0.53 tau + 0.47 tau^3), L = L_zero 2.4^tau; thermal = growth +
        ln(R_eq/R) R L/(G m2).

    Notes
    -----
    rho = 1.6 below 1.583 solar masses and 1.61 m^0.83/R_zero above; the exponents are set so
    that one solar mass has the Sun's radius and luminosity at 4.57 Gyr. A stand-in: it knows
    neither the hook at the end nor the mixing of an accretor, and does not join the model
    `dwarf`, whose relaxation is 26 times faster at 0.8 solar masses.

    References
    ----------
    Tout et al. 1996, MNRAS 281, 257; Hurley, Pols & Tout 2000, MNRAS 315, 543, eq. 4;
    Demircan & Kahraman 1991, Ap&SS 181, 313 (radius at the end; all coefficients from memory).
    """
    m = 0.1 if mass < 0.1 else (100.0 if mass > 100.0 else mass)
    tau = 0.0 if phase < 0.0 else (1.0 if phase > 1.0 else phase)
    start = zero_age_radius(m)
    stretch = log(1.6) if m < BEND else log(1.61 * m**0.83 / start)
    years = lifetime(m)
    equilibrium = start * 2.718281828459045 ** (stretch * tau * (0.53 + 0.47 * tau * tau))
    luminosity = zero_age_luminosity(m) * 2.718281828459045 ** (LOG_LIGHT * tau)
    growth = stretch * (0.53 + 1.41 * tau * tau) / years if phase < 1.0 else 0.0
    relaxation = radius * luminosity / (GRAVITATIONAL_TIME * m * m)
    thermal = growth + relaxation * log(equilibrium / radius)
    zeta = adiabatic_exponent(m) if keys.zeta_ad < -1.0 else keys.zeta_ad
    temperature = T_SUN * (luminosity / (radius * radius)) ** 0.25
    low, high = CONVECTIVE
    convective = 1.0 if low <= m <= high else 0.0
    envelope = convective * (m if m <= 0.35 else m * (0.35 / m) ** 6)
    depth = convective * (radius if m <= 0.35 else 0.3 * radius)
    return Structure(
        radius, equilibrium, luminosity, temperature, zeta, thermal, 1.0 / years, 0.0, convective,
        envelope, depth,
    )  # fmt: skip


def prepare(mass, values):
    """Keys; the age and the burnt fraction exclude each other."""
    if values.get("age") and values.get("burnt"):
        raise DomainError("give one of burnt and age, not both")
    given = {name: values[name] for name in MainSequenceKeys._fields if values.get(name) is not None}
    if given.get("age", 0.0) >= lifetime(mass):
        raise DomainError(
            f"age {given['age']:.4g} yr exceeds the main-sequence lifetime of {mass:g} Msun, "
            f"{lifetime(mass):.4g} yr"
        )
    return MainSequenceKeys(**given)


def start_phase(mass, values):
    """Burnt fraction at the start."""
    if values.get("age"):
        return values["age"] / lifetime(mass)
    return values.get("burnt") or 0.0


MODEL = StarModel(
    structure=structure,
    keys=MainSequenceKeys,
    prepare=prepare,
    texts={},
    relaxing=True,
    phase="burnt",
    start_phase=start_phase,
    overflows=True,
    mass_range=(0.1, 100.0),
    gyration=0.075,
    kind="gas",
    sources=("tout-1996", "hurley-pols-tout-2000", "demircan-kahraman-1991"),
    validity="0.1..100 solar masses, Z = 0.02, until hydrogen is exhausted; a stand-in",
)

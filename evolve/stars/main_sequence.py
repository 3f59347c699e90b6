"""Main-sequence stars of any mass, as they burn their hydrogen: a stand-in.

A serious history of an evolved donor wants a track of the user's own (`star = "track"`).
"""

from math import exp, isnan, log, nan, sqrt
from typing import Annotated, NamedTuple

from evolve.errors import DomainError
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure
from evolve.stars.curves import cubics, interval
from evolve.stars.relaxation import relaxation_rate
from evolve.stars.surface import RADIATIVE, convective_envelope, effective_temperature, given
from evolve.stars.zero_age import zero_age_luminosity, zero_age_radius

BRIGHTENING = log(2.4)
"""ln of the factor by which the luminosity grows from zero age to the end."""
SMALL_GROWTH = log(1.6)
"""ln of the factor by which the radius does, below `BEND`."""
BEND = 1.583
"""Mass [solMass] from which on the final radius is that of Demircan & Kahraman."""
ZETA_MASSES = (0.4, 0.6, 0.8, 1.0, 1.3)
ZETA_CUBICS = cubics(ZETA_MASSES, (-1.0 / 3.0, 0.0, 1.0, 2.6, 4.0))
"""Adiabatic exponents by mass [solMass]: representative values from memory."""


class MainSequenceKeys(NamedTuple):
    """Keys of a main-sequence star. `zeta_ad` NaN: by the mass. `phase_high`: the end."""

    burnt: Annotated[float, Key("", 0.0, 1.0, "burnt fraction at the start; default 0")] = nan
    age: Annotated[
        float, Key("yr", 0.0, 1e13, "at the start, in place of the burnt fraction")
    ] = nan
    zeta_ad: Annotated[
        float,
        Key("", -10.0, 100.0, "d ln R / d ln m on losing mass at once; default by the mass"),
    ] = nan
    phase_low: float = 0.0
    phase_high: float = 1.0


def lifetime(mass):
    """Time a star spends on the main sequence at solar composition.

    Parameters
    ----------
    mass : float  [solMass]
        0.1..100.

    Returns
    -------
    float  [yr]
        0.95 of the time to the base of the giant branch.

    References
    ----------
    Hurley, Pols & Tout 2000, MNRAS 315, 543, eq. 4 for Z = 0.02 (coefficients from memory).
    """
    m2 = mass * mass
    m4 = m2 * m2
    m7 = m4 * m2 * mass
    rise = 1593.890 + 2706.708 * m4 + 146.6143 * m4 * mass * sqrt(mass) + m7
    return 0.95e6 * rise / (0.04141960 * m2 + 0.3426349 * m7)


def adiabatic_exponent(mass):
    """Answer of the radius to sudden mass loss, by mass.

    Parameters
    ----------
    mass : float  [solMass]

    Returns
    -------
    float
        -1/3 up to 0.4 solMass, 0 at 0.6, 1 at 0.8, 2.6 at 1.0, 4 from 1.3 on; monotone between.

    References
    ----------
    Hjellming & Webbink 1987, ApJ 318, 794 (trend; the values are representative, from memory).
    """
    last = len(ZETA_MASSES) - 1
    if mass < ZETA_MASSES[0]:
        mass = ZETA_MASSES[0]
    elif mass > ZETA_MASSES[last]:
        mass = ZETA_MASSES[last]
    i = interval(ZETA_MASSES, mass)
    x = mass - ZETA_MASSES[i]
    i *= 4
    c = ZETA_CUBICS
    return c[i] + x * (c[i + 1] + x * (c[i + 2] + x * c[i + 3]))


def structure(mass, radius, phase, keys):
    """A main-sequence star on its way from zero age to the exhaustion of hydrogen.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float
        Burnt fraction tau, 0 at zero age, 1 where the main sequence ends. Trial states
        outside have the values of the ends.
    keys : MainSequenceKeys

    Returns
    -------
    Structure
        `equilibrium` R_zero rho^(0.53 tau + 0.47 tau^3), rho = 1.6 below 1.583 solMass and
        1.61 m^0.83/R_zero above; `luminosity` L_zero 2.4^tau; `thermal` ln(R_eq/R) R L/(G m^2)
        plus the growth of R_eq; `phase_rate` 1/lifetime of the present mass.

    Notes
    -----
    A stand-in, made so that one solar mass has the Sun's radius and luminosity at 4.57 Gyr.
    Loss and gain of mass leave tau as it is: no rejuvenation, no memory of a larger core. A
    history of an evolved donor that matters wants the user's own track.

    It does not join the model of a dwarf: at 0.8 solMass it relaxes 26 times more slowly, on
    the Kelvin-Helmholtz time of the whole star. Convective (so that braking acts) below 1.25
    solMass; the flag jumps there.

    References
    ----------
    Tout, Pols, Eggleton & Han 1996, MNRAS 281, 257 (zero age); Hurley, Pols & Tout 2000, MNRAS
    315, 543 (lifetime); Demircan & Kahraman 1991, Ap&SS 181, 313 (final radius); all three
    with coefficients from memory. D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391 (three
    terms of the radius).
    """
    tau = phase
    if tau < 0.0:
        tau = 0.0
    elif tau > 1.0:
        tau = 1.0
    span = lifetime(mass)
    start = zero_age_radius(mass)
    growth = SMALL_GROWTH
    if mass > BEND:
        growth = log(1.61 * mass**0.83 / start)
    square = tau * tau
    equilibrium = start * exp(growth * tau * (0.53 + 0.47 * square))
    luminosity = zero_age_luminosity(mass) * exp(BRIGHTENING * tau)
    thermal = relaxation_rate(mass * mass, radius, equilibrium, luminosity)
    thermal += growth * (0.53 + 1.41 * square) / span
    zeta = keys.zeta_ad
    if isnan(zeta):
        zeta = adiabatic_exponent(mass)
    envelope, depth = convective_envelope(mass, radius)
    return Structure(
        radius, equilibrium, luminosity, effective_temperature(radius, luminosity), zeta, thermal,
        1.0 / span, 0.0, 1.0 if mass < RADIATIVE else 0.0, envelope, depth,
    )  # fmt: skip


def start_phase(mass, values):
    """Burnt fraction at the start.

    Parameters
    ----------
    mass : float  [solMass]
    values : dict
        `burnt` or `age` [yr].

    Returns
    -------
    float

    Raises
    ------
    DomainError
        Both are given, or the main sequence of this mass is over at that age.
    """
    burnt, age = given(values, "burnt"), given(values, "age")
    if isnan(age):
        return 0.0 if isnan(burnt) else burnt
    if not isnan(burnt):
        raise DomainError("give burnt or age, not both: one follows from the other")
    span = lifetime(mass)
    if age >= span:
        raise DomainError(
            f"at age {age:.4g} yr the main sequence of {mass:g} solMass is over; it lasts "
            f"{span:.4g} yr"
        )
    return age / span


def prepare(mass, values):
    """The keys of a main-sequence star from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start.
    values : dict
        Optionally `burnt` or `age`, `zeta_ad`.

    Returns
    -------
    MainSequenceKeys

    Raises
    ------
    DomainError
        As `start_phase`.
    """
    start_phase(mass, values)
    return MainSequenceKeys(
        given(values, "burnt"), given(values, "age"), given(values, "zeta_ad")
    )


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
    gyration=0.075,  # n = 3 polytrope
    kind="gas",
    sources=(
        "tout-1996", "hurley-pols-tout-2000", "demircan-kahraman-1991",
        "dantona-mazzitelli-ritter-1989",
    ),
    validity="0.1..100 solMass, Z = 0.02, to the end of the main sequence: a stand-in for a track",
)  # fmt: skip

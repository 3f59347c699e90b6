"""Red giants of low mass: radius and luminosity follow from the degenerate helium core."""

from math import exp, isnan, log, nan, sqrt
from typing import Annotated, NamedTuple

from evolve.errors import DomainError
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.relaxation import relaxation_rate
from evolve.stars.surface import effective_temperature, given

CORE_MASSES = (0.16, 0.45)
"""Between these core masses [solMass] the relations hold."""
THINNEST = 0.01
"""An envelope [solMass] below this is exhausted."""
BURNING = 1.37e-11
"""Growth of the core by shell burning [solMass/yr per solLum], X = 0.7."""
CORE_RADIUS = 0.02
"""Of a cold helium core of 0.2 solMass [solRad], good to 25 % throughout: it is 1 % of R."""


class GiantKeys(NamedTuple):
    """Keys of a giant.

    `rappaport` is 1 for the relation of 1995, else 0; `phase_low` and `phase_high` are the
    core masses [solMass] between which the relations hold. `zeta_ad` NaN: by core fraction.
    """

    core_mass: Annotated[float, Key("solMass", 0.16, 0.45, "of the helium core at the start")]
    zeta_ad: Annotated[
        float,
        Key("", -10.0, 100.0, "d ln R / d ln m on losing mass at once; default by core fraction"),
    ] = nan
    rappaport: float = 0.0
    phase_low: float = CORE_MASSES[0]
    phase_high: float = CORE_MASSES[1]


def condensed_polytrope(core_fraction):
    """Adiabatic exponent of a star with a deep convective envelope around a point-like core.

    Parameters
    ----------
    core_fraction : float
        m_core/m, 0..1; held at 0.99 beyond.

    Returns
    -------
    float
        -1/3 without a core, 0 at 0.214, 0.57 at 0.5.

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620, eq. 61 (from memory), a fit to
    Hjellming & Webbink 1987, ApJ 318, 794.
    """
    m = core_fraction if core_fraction < 0.99 else 0.99
    rest = 1.0 - m
    cube = rest * rest * rest
    # 0.2 m/(1 + rest^-6) without dividing by a small number
    sixth = 0.2 * m * cube * cube / (1.0 + cube * cube)
    return 2.0 * m / (3.0 * rest) - rest / (3.0 * (1.0 + 2.0 * m)) - 0.03 * m + sixth


def core_luminosity(core_mass):
    """Luminosity of a giant by its core.

    Parameters
    ----------
    core_mass : float  [solMass]
        0.16..0.45.

    Returns
    -------
    float  [solLum]
        ln L = 3.50 + 8.11 y - 0.61 y^2 - 2.13 y^3, y = ln(core_mass/0.25).

    References
    ----------
    Webbink, Rappaport & Savonije 1983, ApJ 270, 678, table 2, Population I (from memory).
    """
    y = log(core_mass / 0.25)
    return exp(3.50 + y * (8.11 + y * (-0.61 - 2.13 * y)))


def core_radius_webbink(core_mass):
    """Radius of a giant by its core, and its logarithmic slope.

    Parameters
    ----------
    core_mass : float  [solMass]
        0.16..0.45.

    Returns
    -------
    radius : float  [solRad]
        ln R = 2.53 + 5.10 y - 0.05 y^2 - 1.71 y^3, y = ln(core_mass/0.25).
    slope : float
        d ln R / d ln core_mass.

    References
    ----------
    Webbink, Rappaport & Savonije 1983, ApJ 270, 678, table 2, Population I (from memory).
    """
    y = log(core_mass / 0.25)
    return exp(2.53 + y * (5.10 + y * (-0.05 - 1.71 * y))), 5.10 + y * (-0.10 - 5.13 * y)


def core_radius_rappaport(core_mass):
    """Radius of a giant by its core, and its logarithmic slope.

    Parameters
    ----------
    core_mass : float  [solMass]
        0.15..1.15 in the publication; the star here uses 0.16..0.45.

    Returns
    -------
    radius : float  [solRad]
        5500 core_mass^4.5/(1 + 4 core_mass^4) + 0.5: good to a factor 1.8.
    slope : float
        d ln R / d ln core_mass.

    References
    ----------
    Rappaport, Podsiadlowski, Joss, Di Stefano & Han 1995, MNRAS 273, 731, eq. 5, Population I
    (from memory).
    """
    fourth = core_mass * core_mass
    fourth *= fourth
    whole = 1.0 + 4.0 * fourth
    variable = 5500.0 * fourth * sqrt(core_mass) / whole
    radius = variable + 0.5
    return radius, variable / radius * (4.5 - 16.0 * fourth / whole)


def nuclear_structure(mass, radius, phase, keys):
    """A giant whose radius its core alone decides.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float
        Not used.
    phase : float  [solMass]
        Core mass. Trial states outside 0.16..0.45 have the values of the ends.
    keys : GiantKeys

    Returns
    -------
    Structure
        `radius` R(core mass), `zeta` 0, `thermal` its growth with the core, `phase_rate`
        1.37e-11 L solMass/yr.

    Notes
    -----
    The envelope follows its core without delay and does not answer the loss of mass: the limit
    of `structure` for transfer slower than the thermal time of the envelope.

    References
    ----------
    Webbink, Rappaport & Savonije 1983, ApJ 270, 678; Rappaport et al. 1995, MNRAS 273, 731.
    """
    core = phase
    if core < keys.phase_low:
        core = keys.phase_low
    elif core > keys.phase_high:
        core = keys.phase_high
    luminosity = core_luminosity(core)
    if keys.rappaport > 0.0:
        size, slope = core_radius_rappaport(core)
    else:
        size, slope = core_radius_webbink(core)
    burning = BURNING * luminosity
    envelope = mass - core
    if envelope < 0.0:
        envelope = 0.0
    return Structure(
        size, size, luminosity, effective_temperature(size, luminosity), 0.0,
        slope * burning / core, burning, core, 1.0, envelope, size - CORE_RADIUS,
    )  # fmt: skip


def structure(mass, radius, phase, keys):
    """A giant that relaxes to the radius that its core demands.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
        Integrated.
    phase : float  [solMass]
        Core mass.
    keys : GiantKeys

    Returns
    -------
    Structure
        `equilibrium` R(core mass), `zeta` the key zeta_ad or that of a condensed polytrope,
        `thermal` ln(R_eq/R) R L/(G m m_envelope) plus the growth with the core.

    Notes
    -----
    The thermal time of the envelope is so short that overflow on the nuclear time sees R(core
    mass), whatever the mass; where that is not stable the transfer goes on the thermal time
    by itself, and is dynamical where zeta does not exceed zeta_lobe. Cores are degenerate in
    stars up to about 2.3 solMass; solar composition. An envelope below 0.01 solMass relaxes as
    if it had that much.

    References
    ----------
    As `nuclear_structure`; Soberman, Phinney & van den Heuvel 1997, A&A 327, 620 (zeta); D'Antona,
    Mazzitelli & Ritter 1989, A&A 225, 391 (three terms of the radius).
    """
    nuclear = nuclear_structure(mass, radius, phase, keys)
    zeta = keys.zeta_ad
    if isnan(zeta):
        zeta = condensed_polytrope(nuclear.core_mass / mass)
    envelope = nuclear.envelope_mass
    if envelope < THINNEST:
        envelope = THINNEST
    thermal = nuclear.thermal + relaxation_rate(
        mass * envelope, radius, nuclear.radius, nuclear.luminosity
    )
    return Structure(
        radius, nuclear.radius, nuclear.luminosity,
        effective_temperature(radius, nuclear.luminosity), zeta, thermal, nuclear.phase_rate,
        nuclear.core_mass, 1.0, nuclear.envelope_mass, radius,
    )  # fmt: skip


def start_phase(mass, values):
    """Core mass at the start [solMass]: the key `core_mass`."""
    return float(values["core_mass"])


def prepare(mass, values):
    """The keys of a giant from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start.
    values : dict
        `core_mass`, `relation` ("webbink-1983" or "rappaport-1995"), optionally `zeta_ad`.

    Returns
    -------
    GiantKeys

    Raises
    ------
    DomainError
        If the core leaves no envelope.
    """
    core = start_phase(mass, values)
    if mass - core < THINNEST:
        raise DomainError(
            f"a core of {core:g} in a star of {mass:g} solMass leaves no envelope; at least "
            f"{THINNEST:g} solMass is needed"
        )
    rappaport = 1.0 if values.get("relation") == "rappaport-1995" else 0.0
    return GiantKeys(core, given(values, "zeta_ad"), rappaport)


MODEL = StarModel(
    structure=structure,
    keys=GiantKeys,
    prepare=prepare,
    texts={
        "relation": Text(
            ("webbink-1983", "rappaport-1995"), "webbink-1983", "radius by core mass"
        )
    },
    relaxing=True,
    phase="core",
    start_phase=start_phase,
    overflows=True,
    mass_range=(0.16, 2.3),
    gyration=0.1,
    kind="gas",
    sources=(
        "webbink-rappaport-savonije-1983", "rappaport-1995", "soberman-1997",
        "dantona-mazzitelli-ritter-1989",
    ),
    validity="degenerate helium cores of 0.16..0.45 solMass, Population I, up to 2.3 solMass",
)  # fmt: skip

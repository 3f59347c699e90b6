"""Giants with a degenerate helium core: radius and luminosity follow from the core alone."""

from math import exp, log

from evolve.constants import T_SUN
from evolve.errors import DomainError
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure, Text

CORE_RANGE = (0.16, 0.45)
"""Core masses within which the relations mean anything [solMass]."""
CORE_GROWTH = 1.37e-11
"""Growth of the core per luminosity, X = 0.7 [solMass/yr/solLum]; from memory."""
THINNEST = 0.01
"""An envelope below this counts as gone [solMass]."""


class GiantKeys(NamedTuple):
    """Keys of a giant. zeta_ad below -1 stands for "by core fraction"."""

    core_mass: Annotated[float, Key("solMass", 0.16, 0.45, "mass of the helium core at the start")]
    zeta_ad: Annotated[
        float, Key("", -2.0, 50.0, "adiabatic d ln R / d ln m; -2: of a condensed polytrope")
    ] = -2.0
    rappaport: float = 0.0


def core_luminosity(core):
    """Luminosity by core mass, Population I.

    Parameters
    ----------
    core : float  [solMass]

    Returns
    -------
    float  [solLum]
        ln L = 3.50 + 8.11 y - 0.61 y^2 - 2.13 y^3, y = ln(core/0.25); from memory.

    References
    ----------
    Webbink, Rappaport & Savonije 1983, ApJ 270, 678, table 2.
    """
    y = log(core / 0.25)
    return exp(3.50 + y * (8.11 + y * (-0.61 - 2.13 * y)))


def polytrope_exponent(core_fraction):
    """Adiabatic exponent of a condensed polytrope by the share of its core in its mass.

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620, eq. 61 (fit to Hjellming & Webbink
    1987; from memory).
    """
    f = core_fraction if core_fraction < 0.999 else 0.999
    rest = 1.0 - f
    return (
        2.0 / 3.0 * f / rest - rest / (3.0 * (1.0 + 2.0 * f)) - 0.03 * f
        + 0.2 * f / (1.0 + rest**-6)
    )  # fmt: skip


def structure(mass, radius, phase, keys):
    """A giant whose radius is a function of its core mass.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float
        Ignored.
    phase : float  [solMass]
        Core mass; grows by 1.37e-11 L a year.
    keys : GiantKeys

    Returns
    -------
    Structure
        ln R = 2.53 + 5.10 y - 0.05 y^2 - 1.71 y^3, y = ln(core/0.25) (from memory), or
        R = 5500 core^4.5/(1 + 4 core^4) + 0.5. zeta = 0: the radius does not answer mass loss;
        `thermal` is the growth with the core.

    Notes
    -----
    Population I, cores of 0.16..0.45 solar masses. Overflow on the nuclear time only; the
    adiabatic answer (`zeta_ad`, or of a condensed polytrope) decides what happens when that
    is not stable.

    References
    ----------
    Webbink, Rappaport & Savonije 1983, ApJ 270, 678; Rappaport et al. 1995, MNRAS 273, 731.
    """
    core = phase
    y = log(core / 0.25)
    luminosity = exp(3.50 + y * (8.11 + y * (-0.61 - 2.13 * y)))
    if keys.rappaport > 0.0:
        fourth = core * core * core * core
        shape = 1.0 + 4.0 * fourth
        bulk = 5500.0 * fourth * core**0.5 / shape
        size = bulk + 0.5
        slope = bulk / size * (4.5 - 16.0 * fourth / shape)
    else:
        size = exp(2.53 + y * (5.10 + y * (-0.05 - 1.71 * y)))
        slope = 5.10 - 0.10 * y - 5.13 * y * y
    rate = CORE_GROWTH * luminosity
    temperature = T_SUN * (luminosity / (size * size)) ** 0.25
    envelope = mass - core if mass > core else 0.0
    return Structure(
        size, size, luminosity, temperature, 0.0, slope * rate / core, rate, core, 1.0, envelope,
        size,
    )  # fmt: skip


def prepare(mass, values):
    """Keys; the star must have an envelope."""
    core = values["core_mass"]
    if core > mass - THINNEST:
        raise DomainError(
            f"core_mass {core:g} Msun leaves no envelope of {THINNEST} Msun at least in {mass:g} Msun"
        )
    zeta = values.get("zeta_ad")
    flag = 1.0 if values["relation"] == "rappaport-1995" else 0.0
    return GiantKeys(core, -2.0 if zeta is None else zeta, flag)


MODEL = StarModel(
    structure=structure,
    keys=GiantKeys,
    prepare=prepare,
    texts={
        "relation": Text(("webbink-1983", "rappaport-1995"), "webbink-1983", "radius by core mass")
    },
    relaxing=False,
    phase="core",
    start_phase=lambda mass, values: values["core_mass"],
    overflows=True,
    mass_range=(0.17, 5.0),
    gyration=0.1,
    kind="gas",
    sources=("webbink-rappaport-savonije-1983", "rappaport-1995", "soberman-1997"),
    validity="Population I giants with degenerate helium cores of 0.16..0.45 solar masses",
)

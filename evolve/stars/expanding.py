"""A star that grows exponentially, whatever drives it."""

from math import log

from evolve.constants import GRAVITATIONAL_TIME, T_SUN
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure
from evolve.stars.zero_age import zero_age_luminosity


class ExpandingKeys(NamedTuple):
    """Keys of an expanding star."""

    radius: Annotated[float, Key("solRad", 0.0, 1e5, "equilibrium radius at the start", True)]
    growth_time: Annotated[float, Key("yr", 0.0, 1e15, "time in which it grows e times", True)]
    zeta_ad: Annotated[float, Key("", -1.0, 50.0, "adiabatic d ln R / d ln m")] = 0.0
    luminosity: Annotated[
        float, Key("solLum", 0.0, 1e8, "luminosity; by the zero-age main sequence if not given")
    ] = 0.0
    largest: Annotated[
        float, Key("", 1.0, 1e6, "where the growth ends, over the starting radius")
    ] = 100.0


def structure(mass, radius, phase, keys):
    """A star whose equilibrium radius is R0 exp(t/growth_time) until it is `largest` times R0.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float
        ln of the equilibrium radius over the starting one.
    keys : ExpandingKeys

    Returns
    -------
    Structure
        thermal = growth + ln(R_eq/R) L R/(G m2).

    Notes
    -----
    Constant luminosity, no core: no common envelope. Convective, for braking and tides.

    References
    ----------
    None: the user's choice. Split of the response: D'Antona, Mazzitelli & Ritter 1989, A&A
    225, 391.
    """
    from_start = phase
    growing = 1.0
    if from_start >= log(keys.largest):
        from_start, growing = log(keys.largest), 0.0
    equilibrium = keys.radius * 2.718281828459045**from_start
    relaxation = radius * keys.luminosity / (GRAVITATIONAL_TIME * mass * mass)
    growth = growing / keys.growth_time
    thermal = growth + relaxation * log(equilibrium / radius)
    temperature = T_SUN * (keys.luminosity / (radius * radius)) ** 0.25
    return Structure(
        radius, equilibrium, keys.luminosity, temperature, keys.zeta_ad, thermal, growth, 0.0, 1.0,
        mass, radius,
    )  # fmt: skip


def prepare(mass, values):
    """Keys with, if none is given, a luminosity."""
    given = {name: values[name] for name in ExpandingKeys._fields if values.get(name) is not None}
    given.setdefault("luminosity", zero_age_luminosity(min(max(mass, 0.1), 100.0)))
    return ExpandingKeys(**given)


MODEL = StarModel(
    structure=structure,
    keys=ExpandingKeys,
    prepare=prepare,
    texts={},
    relaxing=True,
    phase="growth",
    start_phase=lambda mass, values: 0.0,
    overflows=True,
    mass_range=(1e-3, 1e4),
    gyration=0.1,
    kind="gas",
    sources=("tout-1996",),
    validity="a stand-in for whatever makes a star grow; no core, constant luminosity",
)

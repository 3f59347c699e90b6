"""A star that grows by itself, exponentially: for whatever drives a star into its lobe."""

from math import exp, log, nan
from typing import Annotated, NamedTuple

from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure
from evolve.stars.relaxation import relaxation_rate
from evolve.stars.surface import effective_temperature, given, given_light, light


class ExpandingKeys(NamedTuple):
    """Keys of an expanding star. `folds` is ln of `largest`."""

    radius: Annotated[float, Key("solRad", 0.0, 1e5, "R_eq at the start", open_low=True)]
    growth_time: Annotated[
        float, Key("yr", 0.0, 1e15, "in which R_eq grows by a factor e", open_low=True)
    ]
    zeta_ad: Annotated[
        float, Key("", -10.0, 100.0, "d ln R / d ln m on losing mass at once")
    ] = 0.0
    luminosity: Annotated[
        float,
        Key("solLum", 0.0, 1e9, "constant; default: zero-age of the starting mass", open_low=True),
    ] = nan
    temperature: Annotated[
        float, Key("K", 0.0, 1e7, "effective at the start; in place of luminosity", open_low=True)
    ] = nan
    largest: Annotated[float, Key("", 3.0, 1e6, "R_eq at most, over that at the start")] = 100.0
    folds: float = log(100.0)


def structure(mass, radius, phase, keys):
    """A star whose equilibrium radius grows exponentially, whatever its mass.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float
        Time since the start over the growth time; trial states before -1 count as -1.
    keys : ExpandingKeys

    Returns
    -------
    Structure
        `equilibrium` R_0 exp(phase), at most `largest` times R_0; `thermal` ln(R_eq/R) R L/(G m^2)
        plus the growth.

    Notes
    -----
    The growth fades over the two growth times around the cap, linearly, so that nothing jumps.
    The luminosity is constant. No core: nothing is left of such a star by a common envelope.
    Counts as convective throughout; braking acts where it is asked for (an extrapolation).

    References
    ----------
    D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391 (three terms of the radius).
    """
    fold, growth = phase, 1.0
    if fold < -1.0:
        fold = -1.0
    beyond = phase - keys.folds + 1.0
    if beyond >= 2.0:
        fold, growth = keys.folds, 0.0
    elif beyond > 0.0:
        fold, growth = phase - 0.25 * beyond * beyond, 1.0 - 0.5 * beyond
    equilibrium = keys.radius * exp(fold)
    luminosity = keys.luminosity
    thermal = growth / keys.growth_time
    thermal += relaxation_rate(mass * mass, radius, equilibrium, luminosity)
    return Structure(
        radius, equilibrium, luminosity, effective_temperature(radius, luminosity), keys.zeta_ad,
        thermal, 1.0 / keys.growth_time, 0.0, 1.0, mass, radius,
    )  # fmt: skip


def start_phase(mass, values):
    """The growth so far, at the start: 0."""
    return 0.0


def prepare(mass, values):
    """The keys of an expanding star from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start.
    values : dict
        `radius`, `growth_time`, and optionally `zeta_ad`, `largest`, `luminosity` or
        `temperature`.

    Returns
    -------
    ExpandingKeys

    Raises
    ------
    DomainError
        A radius in words; luminosity and temperature both given.
    """
    radius = given(values, "radius")
    luminosity, temperature = light(mass, radius, *given_light(values))
    largest = given(values, "largest", 100.0)
    return ExpandingKeys(
        radius, given(values, "growth_time"), given(values, "zeta_ad", 0.0), luminosity,
        temperature, largest, log(largest),
    )  # fmt: skip


MODEL = StarModel(
    structure=structure,
    keys=ExpandingKeys,
    prepare=prepare,
    texts={},
    relaxing=True,
    phase="growth",
    start_phase=start_phase,
    overflows=True,
    mass_range=(1e-6, 1e6),
    gyration=0.1,
    kind="gas",
    sources=("dantona-mazzitelli-ritter-1989", "tout-1996"),
    validity="a stand-in for any growing star; no core, constant luminosity",
)

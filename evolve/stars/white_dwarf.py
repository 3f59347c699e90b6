"""Cold white dwarfs and the degenerate donors they become."""

from math import sqrt
from typing import Annotated, NamedTuple

from evolve.constants import T_SUN
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure
from evolve.stars.surface import given

LIMIT = 1.44
"""Where the radius vanishes [solMass]."""
HEAVIEST = 1.43
"""Trial states beyond this mass [solMass] are held there: the formula ends at 1.44."""
LIGHT = 0.00057
"""Below about this mass [solMass] degeneracy no longer rules; the radius then falls with it."""
LOW = (LIGHT / LIMIT) ** (2.0 / 3.0)


class WhiteDwarfKeys(NamedTuple):
    """Keys of a white dwarf."""

    temperature: Annotated[
        float, Key("K", 0.0, 1e6, "effective, constant", open_low=True)
    ] = 1e4


def structure(mass, radius, phase, keys):
    """A cold white dwarf on its mass-radius relation.

    Parameters
    ----------
    mass : float  [solMass]
        Held at 1.43 in trial states beyond.
    radius, phase : float
        Not used.
    keys : WhiteDwarfKeys

    Returns
    -------
    Structure
        `radius` [solRad] 0.0114 [(m/1.44)^(-2/3) - (m/1.44)^(2/3)]^(1/2)
        [1 + 3.5 (m/0.00057)^(-2/3) + 0.00057/m]^(-2/3), `zeta` its derivative.

    Notes
    -----
    Zero temperature, no envelope of hydrogen, mean composition: a hot white dwarf of low mass
    is larger. The temperature only sets the luminosity. 3..4 % below the zero-temperature ideal
    electron gas from 0.2 to 0.6 solMass, 11 % at 1.3.

    References
    ----------
    Eggleton, in Verbunt & Rappaport 1988, ApJ 332, 193, eq. 15.
    """
    if mass > HEAVIEST:
        mass = HEAVIEST
    u = (mass / LIMIT) ** (2.0 / 3.0)
    inverse = 1.0 / u
    v = LOW * inverse
    w = LIGHT / mass
    spread = inverse - u
    whole = 1.0 + 3.5 * v + w
    size = 0.0114 * sqrt(spread) * whole ** (-2.0 / 3.0)
    zeta = (7.0 / 3.0 * v + w) / (1.5 * whole) - (inverse + u) / (3.0 * spread)
    relative = keys.temperature / T_SUN
    square = size * relative * relative
    return Structure(
        size, size, square * square, keys.temperature, zeta, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0
    )


def prepare(mass, values):
    """The keys of a white dwarf from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        Not used.
    values : dict
        Optionally `temperature`.

    Returns
    -------
    WhiteDwarfKeys
    """
    return WhiteDwarfKeys(given(values, "temperature", 1e4))


MODEL = StarModel(
    structure=structure,
    keys=WhiteDwarfKeys,
    prepare=prepare,
    texts={},
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=True,
    # Below, the radius shrinks again with the mass: a planet, for which this is no fit.
    mass_range=(0.002, HEAVIEST),
    gyration=0.2,
    kind="white-dwarf",
    sources=("verbunt-rappaport-1988",),
    validity="cold and degenerate, 0.002..1.43 solMass; a hot one of low mass is larger",
)

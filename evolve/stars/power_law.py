"""A star whose radius is a power of its mass, of the user's choice."""

from math import nan
from typing import Annotated, NamedTuple

from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure
from evolve.stars.surface import given, given_light, light


class PowerLawKeys(NamedTuple):
    """Keys of a power law. `start_mass` [solMass] is the mass at which it has `radius`."""

    radius: Annotated[float, Key("solRad", 0.0, 1e6, "at the starting mass", open_low=True)]
    exponent: Annotated[float, Key("", -10.0, 20.0, "d ln R / d ln m")]
    luminosity: Annotated[
        float, Key("solLum", 0.0, 1e9, "constant; default: zero-age of the mass", open_low=True)
    ] = nan
    temperature: Annotated[
        float, Key("K", 0.0, 1e7, "effective, constant; in place of luminosity", open_low=True)
    ] = nan
    start_mass: float = 1.0


def structure(mass, radius, phase, keys):
    """A star of radius R0 (m/m0)^zeta.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Not used.
    keys : PowerLawKeys

    Returns
    -------
    Structure
        Counts as convective throughout; braking acts where it is asked for.

    Notes
    -----
    A stand-in of the user's own: nothing here knows whether such a star exists. It answers mass
    loss at once with its exponent and has no thermal time.

    References
    ----------
    Tout, Pols, Eggleton & Han 1996, MNRAS 281, 257 (luminosity, if none is given).
    """
    size = keys.radius * (mass / keys.start_mass) ** keys.exponent
    luminosity, temperature = light(mass, size, keys.luminosity, keys.temperature)
    return Structure(
        size, size, luminosity, temperature, keys.exponent, 0.0, 0.0, 0.0, 1.0, mass, size
    )


def prepare(mass, values):
    """The keys of a power-law star from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start, where the star has its `radius`.
    values : dict
        `radius`, `exponent`, and optionally `luminosity` or `temperature`.

    Returns
    -------
    PowerLawKeys

    Raises
    ------
    DomainError
        Luminosity and temperature both given.
    """
    luminosity, temperature = given_light(values)
    return PowerLawKeys(
        given(values, "radius"), given(values, "exponent"), luminosity, temperature, mass
    )


MODEL = StarModel(
    structure=structure,
    keys=PowerLawKeys,
    prepare=prepare,
    texts={},
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(1e-10, 1e10),
    gyration=0.205,  # n = 3/2 polytrope
    kind="gas",
    sources=("tout-1996",),
    validity="as far as the user's own exponent goes",
)

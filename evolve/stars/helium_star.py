"""Helium stars: burning helium in the centre, or semi-degenerate donors that no longer do."""

from math import isnan, nan, sqrt
from typing import Annotated, NamedTuple

from evolve.errors import DomainError
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.surface import effective_temperature, given, light

BURNING = (0.212, 0.654)
"""Factor [solRad] and exponent of the radius of a burning star."""
SEMI_DEGENERATE = (0.029, -0.19)
BURNING_MASSES = (0.3, 5.0)
SEMI_DEGENERATE_MASSES = (0.005, 0.35)


class HeliumStarKeys(NamedTuple):
    """Keys of a helium star: R = factor m^exponent [solRad] between two masses [solMass].

    `temperature` is 0 for a burning star, whose luminosity follows from its mass.
    """

    temperature: Annotated[
        float,
        Key("K", 0.0, 1e6, "of a semi-degenerate star, constant; default 10000 K", open_low=True),
    ] = nan
    factor: float = BURNING[0]
    exponent: float = BURNING[1]
    mass_low: float = BURNING_MASSES[0]
    mass_high: float = BURNING_MASSES[1]


def helium_luminosity(mass):
    """Luminosity of a star on the helium main sequence at its zero age.

    Parameters
    ----------
    mass : float  [solMass]
        0.3..5.

    Returns
    -------
    float  [solLum]
        15262 m^10.25/(m^9 + 29.54 m^7.5 + 31.18 m^6 + 0.0469).

    References
    ----------
    Hurley, Pols & Tout 2000, MNRAS 315, 543, eq. 77 (coefficients from memory).
    """
    root = sqrt(mass)
    m6 = mass * mass * mass
    m6 *= m6
    m75 = m6 * mass * root
    rise = 15262.0 * m75 * mass * mass * root * sqrt(root)
    return rise / (m75 * mass * root + 29.54 * m75 + 31.18 * m6 + 0.0469)


def structure(mass, radius, phase, keys):
    """A helium star whose radius is a power of its mass.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Not used.
    keys : HeliumStarKeys

    Returns
    -------
    Structure
        `radius` [solRad] 0.212 m^0.654 burning, 0.029 m^-0.19 semi-degenerate.

    Notes
    -----
    Both fits are from memory. The burning one was made for 0.5..5 solMass and is carried on to
    0.3, where helium no longer burns; it knows no age and always is in equilibrium. It agrees to
    4 % with the zero-age radii of Hurley, Pols & Tout 2000, eq. 78 (from memory), from 1 to 5
    solMass, but exceeds them by 22 % at 0.5 and by more below. Which of the two a star is the
    config says: it never switches by mass.

    References
    ----------
    Kippenhahn & Weigert 1990, Stellar Structure and Evolution (burning, a fit to their
    sequence); Savonije, de Kool & van den Heuvel 1986, A&A 155, 51 (semi-degenerate); Hurley,
    Pols & Tout 2000, MNRAS 315, 543 (luminosity of a burning star).
    """
    size = keys.factor * mass**keys.exponent
    if keys.temperature > 0.0:
        luminosity, temperature = light(mass, size, 0.0, keys.temperature)
    else:
        luminosity = helium_luminosity(mass)
        temperature = effective_temperature(size, luminosity)
    return Structure(
        size, size, luminosity, temperature, keys.exponent, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0
    )


def prepare(mass, values):
    """The keys of a helium star from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start.
    values : dict
        `semi_degenerate`, "true" or "false" (the default); `temperature` if it is.

    Returns
    -------
    HeliumStarKeys

    Raises
    ------
    DomainError
        A mass at which there is no such star; a temperature for a burning star.
    """
    degenerate = values.get("semi_degenerate") == "true"
    temperature = given(values, "temperature")
    if degenerate:
        what, relation, (low, high) = "semi-degenerate", SEMI_DEGENERATE, SEMI_DEGENERATE_MASSES
        temperature = 1e4 if isnan(temperature) else temperature
    else:
        what, relation, (low, high) = "burning", BURNING, BURNING_MASSES
        if not isnan(temperature):
            raise DomainError(
                "temperature belongs to a semi-degenerate helium star; that of a burning one "
                "follows from its mass"
            )
        temperature = 0.0
    if not low <= mass <= high:
        raise DomainError(
            f"a {what} helium star of {mass:g} solMass is outside its range, {low:g} to {high:g}"
        )
    return HeliumStarKeys(temperature, *relation, low, high)


MODEL = StarModel(
    structure=structure,
    keys=HeliumStarKeys,
    prepare=prepare,
    texts={
        "semi_degenerate": Text(
            ("true", "false"), "false", "a donor that no longer burns, partly degenerate"
        )
    },
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(SEMI_DEGENERATE_MASSES[0], BURNING_MASSES[1]),
    gyration=0.075,  # n = 3 polytrope
    kind="helium",
    sources=(
        "kippenhahn-weigert-1990", "savonije-dekool-vandenheuvel-1986", "hurley-pols-tout-2000",
    ),
    validity="burning 0.3..5 solMass (fitted from 0.5 on), semi-degenerate 0.005..0.35 solMass",
)  # fmt: skip

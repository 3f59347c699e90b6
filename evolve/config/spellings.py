"""Units as people spell them: every spelling known, products and powers of them, factors.

A unit text is a product of spellings with whole powers and at most one stroke, as astropy
writes it and as people type it: "Msun/yr", "solMass solRad2 / yr2", "g cm^2/s", "1/yr".
"""

import re
from functools import lru_cache
from math import pi

from evolve.constants import (
    AU_SI,
    G_SI,
    GM_EARTH_SI,
    GM_JUPITER_SI,
    L_SUN_SI,
    M_SUN_SI,
    PC_SI,
    R_EARTH_SI,
    R_JUPITER_SI,
    R_SUN_SI,
    YEAR_SI,
)

# Powers of mass, length, time, temperature, angle.
_MASS, _LENGTH, _TIME = (1, 0, 0, 0, 0), (0, 1, 0, 0, 0), (0, 0, 1, 0, 0)
_TEMPERATURE, _ANGLE = (0, 0, 0, 1, 0), (0, 0, 0, 0, 1)
_ENERGY, _POWER, _FORCE = (1, 2, -2, 0, 0), (1, 2, -3, 0, 0), (1, 1, -2, 0, 0)
_FREQUENCY = (0, 0, -1, 0, 0)
PURE = (0, 0, 0, 0, 0)
"""The powers of a pure number."""

_TABLE = (
    ("Msun solMass M_sun", M_SUN_SI, _MASS),
    ("Mjup jupiterMass M_jup", GM_JUPITER_SI / G_SI, _MASS),
    ("Mearth earthMass M_earth", GM_EARTH_SI / G_SI, _MASS),
    ("kg kilogram", 1.0, _MASS),
    ("g gram", 1e-3, _MASS),
    ("Rsun solRad R_sun", R_SUN_SI, _LENGTH),
    ("Rearth earthRad R_earth", R_EARTH_SI, _LENGTH),
    ("Rjup jupiterRad R_jup", R_JUPITER_SI, _LENGTH),
    ("au AU", AU_SI, _LENGTH),
    ("km", 1e3, _LENGTH),
    ("m meter", 1.0, _LENGTH),
    ("cm", 1e-2, _LENGTH),
    ("pc parsec", PC_SI, _LENGTH),
    ("kpc", 1e3 * PC_SI, _LENGTH),
    ("Mpc", 1e6 * PC_SI, _LENGTH),
    ("s second", 1.0, _TIME),
    ("min minute", 60.0, _TIME),
    ("h hr hour", 3600.0, _TIME),
    ("d day", 86400.0, _TIME),
    ("yr year", YEAR_SI, _TIME),
    ("kyr", 1e3 * YEAR_SI, _TIME),
    ("Myr", 1e6 * YEAR_SI, _TIME),
    ("Gyr", 1e9 * YEAR_SI, _TIME),
    ("K Kelvin", 1.0, _TEMPERATURE),
    ("rad radian", 1.0, _ANGLE),
    ("deg degree", pi / 180.0, _ANGLE),
    ("Lsun solLum L_sun", L_SUN_SI, _POWER),
    ("W", 1.0, _POWER),
    ("erg", 1e-7, _ENERGY),
    ("J", 1.0, _ENERGY),
    ("dyn", 1e-5, _FORCE),
    ("N", 1.0, _FORCE),
    ("Hz", 1.0, _FREQUENCY),
    ("mHz", 1e-3, _FREQUENCY),
)

SPELLINGS = {
    spelling: (factor, powers)
    for spellings, factor, powers in _TABLE
    for spelling in spellings.split()
}
"""Spelling -> (value in SI, powers of mass, length, time, temperature, angle)."""

_PART = re.compile(r"([A-Za-z_]+)(?:(?:\^|\*\*)?\(?([+-]?[0-9]{1,2})\)?)?")


class UnknownUnit(ValueError):
    """A unit text that cannot be read; `spelling` is the part of it that is not known."""

    def __init__(self, spelling):
        super().__init__(spelling)
        self.spelling = spelling


@lru_cache(maxsize=512)
def unit_value(text):
    """What a unit text stands for.

    Parameters
    ----------
    text : str
        Such as "Msun/yr"; "" is the pure number.

    Returns
    -------
    factor : float
        The unit in SI (kg, m, s, K, rad).
    powers : tuple of int
        Of mass, length, time, temperature, angle.

    Raises
    ------
    UnknownUnit
    """
    numerator, stroke, denominator = text.partition("/")
    above, below, powers = _product(numerator, text)
    if stroke:
        if not denominator.strip():
            raise UnknownUnit(text)
        more_below, more_above, others = _product(_without_brackets(denominator), text)
        above, below = above * more_above, below * more_below
        powers = tuple(a - b for a, b in zip(powers, others))
    return above / below, powers


def _without_brackets(text):
    text = text.strip()
    return text[1:-1] if text.startswith("(") and text.endswith(")") else text


def _product(text, whole):
    """What the product `text`, a part of the unit `whole`, stands for.

    Returns
    -------
    above, below : float
        The spellings with positive and with negative powers, in SI: their quotient is the
        unit, the same to the bit however it is spelled.
    powers : tuple of int
    """
    above = below = 1.0
    powers = PURE
    rest = text.strip()
    if rest == "1":
        return above, below, powers
    while rest:
        match = _PART.match(rest)
        if match is None:
            raise UnknownUnit(whole)
        spelling, power = match[1], int(match[2] or 1)
        if spelling not in SPELLINGS or abs(power) > 8:
            raise UnknownUnit(spelling)
        size, own = SPELLINGS[spelling]
        if power > 0:
            above *= size**power
        else:
            below *= size**-power
        powers = tuple(a + power * b for a, b in zip(powers, own))
        rest = rest[match.end() :].lstrip(" .*")
    return above, below, powers


__all__ = ["PURE", "SPELLINGS", "UnknownUnit", "unit_value"]

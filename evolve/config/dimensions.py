"""The kinds of quantity: the internal unit of each, what people may write, what they read."""

from functools import lru_cache
from typing import NamedTuple

from evolve.config.spellings import unit_value


class Dimension(NamedTuple):
    """One kind of quantity.

    Attributes
    ----------
    name : str
    unit : str
        The internal unit, as astropy spells it.
    bare : str or None
        The unit of a number without one; None where a unit must be given.
    allowed : tuple of str
        The spellings that messages propose.
    ladder : tuple of (str, float)
        Units for people, small to large, each used from that many of itself on.
    """

    name: str
    unit: str
    bare: str | None
    allowed: tuple[str, ...]
    ladder: tuple[tuple[str, float], ...]


_TIMES = ("s", "min", "h", "d", "yr", "kyr", "Myr", "Gyr")

DIMENSIONS = {
    dimension.name: dimension
    for dimension in (
        Dimension("number", "", "", (), (("", 0.0),)),
        Dimension(
            "mass", "solMass", "Msun", ("Msun", "Mjup", "kg", "g"),
            (("g", 0.0), ("kg", 0.1), ("Mearth", 0.1), ("Mjup", 0.5), ("Msun", 0.1)),
        ),
        Dimension(
            "length", "solRad", "Rsun", ("Rsun", "au", "Rearth", "Rjup", "km"),
            (("m", 0.0), ("km", 0.1), ("Rearth", 0.1), ("Rsun", 0.1), ("au", 4.0), ("pc", 0.1)),
        ),
        Dimension("time", "yr", None, _TIMES, tuple((unit, 1.0) for unit in _TIMES)),
        Dimension("rate", "solMass / yr", "Msun/yr", ("Msun/yr", "g/s"), (("Msun/yr", 0.0),)),
        Dimension(
            "speed", "solRad / yr", "km/s", ("km/s", "m/s", "cm/s"),
            (("cm/s", 0.0), ("m/s", 0.1), ("km/s", 0.1)),
        ),
        Dimension("temperature", "K", "K", ("K",), (("K", 0.0),)),
        Dimension("luminosity", "solLum", "Lsun", ("Lsun", "erg/s"), (("Lsun", 0.0),)),
        Dimension("angle", "rad", "deg", ("deg", "rad"), (("deg", 0.0),)),
        Dimension(
            "distance", "pc", "pc", ("pc", "kpc", "Mpc"),
            (("au", 0.0), ("pc", 0.1), ("kpc", 1.0), ("Mpc", 1.0)),
        ),
        Dimension("spin", "rad / yr", "rad/yr", ("rad/s", "rad/yr", "deg/d"), (("rad/s", 0.0),)),
        Dimension("frequency", "Hz", "Hz", ("Hz", "mHz", "1/yr"), (("mHz", 0.0), ("Hz", 0.1))),
    )
}  # fmt: skip
"""Name -> Dimension. Rates, temperatures and luminosities are shown in one unit only, with
an exponent where need be, as the trade writes them."""

@lru_cache(maxsize=256)
def dimension_of(unit):
    """The dimension whose internal unit is `unit`.

    Parameters
    ----------
    unit : str
        The name of a dimension, or a unit text.

    Returns
    -------
    Dimension
        Where no dimension has this unit, one made for it, in which bare numbers count in
        the unit itself.
    """
    if unit in DIMENSIONS:
        return DIMENSIONS[unit]
    asked = unit_value(unit)
    for dimension in DIMENSIONS.values():
        if unit_value(dimension.unit) == asked:
            return dimension
    return Dimension(f"quantity in {unit}", unit, unit, (unit,), ((unit, 0.0),))


def internal_unit(unit):
    """The internal unit for what a unit measures; the unit itself where there is none."""
    powers = unit_value(unit)[1]
    units = (dimension.unit for dimension in DIMENSIONS.values())
    return next((internal for internal in units if unit_value(internal)[1] == powers), unit)


def allowed_units(dimension):
    """What may be written for a quantity, as half a sentence of a message."""
    dimension = as_dimension(dimension)
    if dimension.unit == "":
        return "allowed: a pure number"
    units = ", ".join(dimension.allowed)
    if dimension.bare is None:
        return f'allowed: a text with a unit, such as "8.5 h" (units: {units})'
    example = f'"1 {dimension.allowed[0]}"'
    return f"allowed: such as {example} (units: {units}), or a bare number in {dimension.bare}"


def as_dimension(dimension):
    """A Dimension as it is; else that of a name or a unit text."""
    return dimension if isinstance(dimension, Dimension) else dimension_of(dimension)


def noun(dimension):
    """What messages call a quantity of a dimension."""
    return "pure number" if dimension.unit == "" else dimension.name


__all__ = [
    "DIMENSIONS", "Dimension", "allowed_units", "as_dimension", "dimension_of",
    "internal_unit", "noun",
]  # fmt: skip

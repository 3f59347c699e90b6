"""Quantities at the door: texts with units to internal numbers, and back for people.

Inside the package every number is in solMass, solRad, yr, solLum, K, rad, and parsecs for
distances. Here, and only here, texts become such numbers.
"""

import re
from math import inf, isfinite
from numbers import Real

from evolve.config.dimensions import (
    DIMENSIONS,
    allowed_units,
    as_dimension,
    dimension_of,
    noun,
)
from evolve.config.spellings import SPELLINGS, UnknownUnit, unit_value
from evolve.config.words import kind_of, nearest, shown
from evolve.errors import ConfigError


_NUMBER = r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
_QUANTITY = re.compile(rf"\s*({_NUMBER})\s*(.*?)\s*")
_SPREAD = re.compile(
    rf"\s*({_NUMBER})\s*"
    rf"(?:(?:\+-|\+/-|±)\s*({_NUMBER})|\+\s*({_NUMBER})\s*,?\s*-\s*({_NUMBER}))\s*(.*?)\s*"
)


class QuantityError(ConfigError):
    """A quantity that cannot be read; `reason` is the message without the value."""

    def __init__(self, value, reason):
        self.reason = reason
        super().__init__(f"{shown(value)}: {reason}")


def conversion_factor(from_unit, to_unit):
    """The number by which values in one unit are multiplied to be in another.

    Parameters
    ----------
    from_unit, to_unit : str
        Unit texts, such as "solMass / yr" and "g/s".

    Returns
    -------
    float

    Raises
    ------
    ConfigError
        If `to_unit` is unknown or measures something else; the message says what fits.
    """
    factor, powers = unit_value(from_unit)
    dimension = dimension_of(from_unit)
    asked, asked_powers = _known_unit(to_unit, to_unit, dimension)
    if asked_powers != powers:
        raise QuantityError(to_unit, _wrong_dimension(to_unit, dimension))
    return factor / asked


def parse_quantity(value, dimension):
    """A quantity as written, in internal units.

    Parameters
    ----------
    value : str, number, or object with `to_value(unit)` (an astropy Quantity)
        "0.6 Msun"; a bare number counts in the unit that the dimension has for it.
    dimension : str or Dimension
        A name of `DIMENSIONS`, or a unit text (see `dimension_of`).

    Returns
    -------
    float
        Finite.

    Raises
    ------
    QuantityError
        A ConfigError that says what is allowed.
    """
    dimension = as_dimension(dimension)
    if isinstance(value, str):
        match = _QUANTITY.fullmatch(value)
        if match is None:
            raise QuantityError(value, f"not a number with a unit; {allowed_units(dimension)}")
        number = float(match[1]) * _factor(value, match[2], dimension)
    elif isinstance(value, Real) and not isinstance(value, bool):
        number = _float(value) * _factor(value, "", dimension)
    elif hasattr(value, "to_value"):
        number = _from_object(value, dimension)
    else:
        raise QuantityError(value, f"{kind_of(value)} is no {noun(dimension)}; "
                            f"{allowed_units(dimension)}")  # fmt: skip
    if not isfinite(number):
        raise QuantityError(value, f"not a finite number; {allowed_units(dimension)}")
    return number


def parse_uncertain(value, dimension):
    """A quantity with its errors: "0.60+-0.02 Msun", "0.60 +0.02 -0.03 Msun".

    Parameters
    ----------
    value : str, number, or object with `to_value(unit)`
        Without errors, both are 0.
    dimension : str or Dimension

    Returns
    -------
    value, plus, minus : float
        In internal units; the errors are >= 0.

    Raises
    ------
    QuantityError
    """
    dimension = as_dimension(dimension)
    match = _SPREAD.fullmatch(value) if isinstance(value, str) else None
    if match is None:
        return parse_quantity(value, dimension), 0.0, 0.0
    number, both, above, below, unit = match.groups()
    parts = [float(number), float(both or above), float(both or below)]
    factor = _factor(value, unit, dimension)
    if min(parts[1:]) < 0.0 or not all(isfinite(part * factor) for part in parts):
        raise QuantityError(value, "the errors must be finite and not negative")
    return tuple(part * factor for part in parts)


def best_unit(value, dimension):
    """A value in the unit that brings it, where there is one, between 0.1 and 1000.

    Parameters
    ----------
    value : float
        In internal units.
    dimension : str or Dimension

    Returns
    -------
    number : float
    unit : str
    """
    dimension = as_dimension(dimension)
    best = None
    for unit, start in dimension.ladder:
        number = value * conversion_factor(dimension.unit, unit)
        if best is None or abs(number) >= start:
            best = number, unit
    return best if value and isfinite(value) else (float(value), dimension.bare or dimension.unit)


def human(value, dimension, digits=4):
    """A value as people read it: "2.34 Myr", "1.2e-09 Msun/yr".

    Parameters
    ----------
    value : float
        In internal units.
    dimension : str or Dimension
    digits : int
        Significant ones.
    """
    number, unit = best_unit(value, dimension)
    text = f"{number:.{digits}g}"
    if "e" in text and 1.0 <= abs(number) < 1e6:
        text = f"{float(text):.0f}"
    return f"{text} {unit}".rstrip()


def exact_text(value, dimension):
    """The shortest text that `parse_quantity` turns into exactly this value.

    Parameters
    ----------
    value : float
        In internal units.
    dimension : str or Dimension

    Returns
    -------
    str or float
        A float for a pure number.
    """
    dimension = as_dimension(dimension)
    if dimension.unit == "":
        return float(value)
    steps = [unit for unit, _ in dimension.ladder]
    units = [best_unit(value, dimension)[1], dimension.bare, *steps]
    texts = [_exact_in(value, dimension, unit) for unit in dict.fromkeys(filter(None, units))]
    # The rounding of a factor can leave a value without a text in every unit but its own.
    texts = [text for text in texts if text] or [f"{value!r} {dimension.unit}"]
    best = texts[0]  # of the unit that people read; another must be clearly shorter
    return min(texts, key=lambda text: len(text) + 2 * (text is not best))


def _exact_in(value, dimension, unit):
    """The shortest exact text in one unit; None if there is none."""
    number = value * conversion_factor(dimension.unit, unit)
    for digits in range(1, 18):
        text = f"{float(f'{number:.{digits}g}')!r}".removesuffix(".0") + f" {unit}"
        if parse_quantity(text, dimension) == value:
            return text
    return None


def _factor(value, unit, dimension):
    """From the unit as written to the internal one; exactly 1 where they are the same."""
    if not unit:
        if dimension.bare is None:
            reason = f"a {dimension.name} needs its unit; {allowed_units(dimension)}"
            raise QuantityError(value, reason)
        unit = dimension.bare
    size, powers = _known_unit(value, unit, dimension)
    internal, internal_powers = unit_value(dimension.unit)
    if powers != internal_powers:
        raise QuantityError(value, _wrong_dimension(unit, dimension))
    return size / internal


def _known_unit(value, unit, dimension):
    """Size and powers of a unit as written, or a message with the nearest known one."""
    try:
        return unit_value(unit)
    except UnknownUnit as error:
        near = nearest(unit, dimension.allowed) or nearest(error.spelling, SPELLINGS)
        hint = f'; did you mean "{near}"?' if near else ""
        reason = f'unknown unit "{error.spelling}"; {allowed_units(dimension)}{hint}'
        raise QuantityError(value, reason) from None


def _wrong_dimension(unit, dimension):
    powers = unit_value(unit)[1]
    names = [d.name for d in DIMENSIONS.values() if unit_value(d.unit)[1] == powers]
    is_of = f"a unit of {names[0]}" if names and unit else "no unit that fits"
    return f'"{unit}" is {is_of}, not of {noun(dimension)}; {allowed_units(dimension)}'


def _float(value):
    try:
        return float(value)
    except OverflowError:  # a whole number of hundreds of digits
        return inf


def _from_object(value, dimension):
    """The number of an object that carries its unit along."""
    try:
        return float(value.to_value(dimension.unit))
    except Exception as error:  # whatever the foreign object raises is a wrong value here
        reason = f"cannot be converted to {dimension.unit} ({error})"
        raise QuantityError(value, f"{reason}; {allowed_units(dimension)}") from None


__all__ = [
    "QuantityError", "best_unit", "conversion_factor", "exact_text", "human", "parse_quantity",
    "parse_uncertain",
]  # fmt: skip

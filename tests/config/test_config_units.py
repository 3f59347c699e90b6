"""Units: against astropy's own values, and texts there and back."""

from math import inf, nan, pi

import astropy.units as u
import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from evolve.config.dimensions import DIMENSIONS
from evolve.config.spellings import SPELLINGS
from evolve.config.units import (
    QuantityError,
    best_unit,
    conversion_factor,
    exact_text,
    human,
    parse_quantity,
    parse_uncertain,
)
from evolve.errors import ConfigError

NAMES_UNKNOWN_TO_ASTROPY = {"Mjup", "Rjup", "Mearth", "Rearth", "Kelvin"}
NUMBERS = st.floats(1e-12, 1e12)


@pytest.mark.parametrize("spelling", sorted(set(SPELLINGS) - NAMES_UNKNOWN_TO_ASTROPY))
def test_every_spelling_is_astropys_unit(spelling):
    factor, _ = SPELLINGS[spelling]
    # 1e-6: astropy's earthMass and jupiterMass rest on the same GM and G; the rest is exact
    assert factor == pytest.approx(u.Unit(spelling).si.scale, rel=1e-6)


@pytest.mark.parametrize(
    ("spelling", "meant"),
    [("Mjup", "jupiterMass"), ("Rjup", "jupiterRad"), ("Mearth", "earthMass"), ("Rearth", "earthRad")],
)
def test_planetary_spellings(spelling, meant):
    assert SPELLINGS[spelling][0] == pytest.approx(u.Unit(meant).si.scale, rel=1e-6)


@pytest.mark.parametrize(
    ("text", "dimension", "expected"),
    [
        ("0.6 Msun", "mass", 0.6),
        ("0.6Msun", "mass", 0.6),
        (" +6e-1  solMass ", "mass", 0.6),
        (".6", "mass", 0.6),
        (0.6, "mass", 0.6),
        (np.float32(0.5), "mass", 0.5),
        (np.int64(2), "mass", 2.0),
        ("1e-8 Msun/yr", "rate", 1e-8),
        ("1e-8 solMass / yr", "rate", 1e-8),
        ("1e-8 Msun yr-1", "rate", 1e-8),
        ("1 Msun/Myr", "rate", 1e-6),
        ("10 Gyr", "time", 1e10),
        ("1 pc", "distance", 1.0),
        ("180 deg", "angle", pi),
        (180, "angle", pi),
        ("5772 K", "temperature", 5772.0),
        ("3", "number", 3.0),
        ("0.5 1/yr", "1/yr", 0.5),
    ],
)
def test_texts_in_internal_units_are_exact(text, dimension, expected):
    assert parse_quantity(text, dimension) == expected


@pytest.mark.parametrize(
    ("text", "dimension"),
    [
        ("8.5 h", "time"), ("80 min", "time"), ("3 d", "time"), ("5 s", "time"),
        ("0.4 au", "length"), ("12 km", "length"), ("1.1 R_jup", "length"),
        ("3e33 g", "mass"), ("2e30 kg", "mass"), ("30 M_jup", "mass"),
        ("1e17 g/s", "rate"), ("1200 km/s", "speed"), ("3 cm/s", "speed"),
        ("4e33 erg/s", "luminosity"), ("2 kpc", "distance"), ("2 mHz", "frequency"),
    ],
)  # fmt: skip
def test_texts_agree_with_astropy(text, dimension):
    number, unit = text.split()
    expected = (float(number) * u.Unit(unit)).to_value(DIMENSIONS[dimension].unit)
    assert parse_quantity(text, dimension) == pytest.approx(expected, rel=1e-6)


def test_bare_numbers_count_in_the_stated_unit():
    assert parse_quantity(1200, "speed") == parse_quantity("1200 km/s", "speed")
    assert parse_quantity(2, "length") == 2.0
    assert parse_quantity(90, "angle") == pytest.approx(pi / 2, rel=1e-15)


def test_astropy_quantities_are_accepted():
    assert parse_quantity(8.5 * u.h, "time") == pytest.approx(8.5 / 8766.0, rel=1e-14)
    assert parse_quantity(3 * u.solMass, "mass") == 3.0
    # c in km/s, SI definition of the metre
    assert parse_quantity(299792.458 * u.km / u.s, "speed") == pytest.approx(1.3598865e7, rel=1e-7)


@pytest.mark.parametrize(
    ("value", "dimension", "fragments"),
    [
        (8.5, "time", ["8.5", "needs its unit", '"8.5 h"', "Gyr"]),
        ("8.5", "time", ["needs its unit"]),
        ("0.6 Msum", "mass", ['unknown unit "Msum"', "Msun, Mjup, kg, g", 'did you mean "Msun"?']),
        ("0.6 MSUN", "mass", ['did you mean "Msun"?']),
        ("5 hours", "time", ['did you mean "hour"?']),
        ("5 furlongs", "length", ['unknown unit "furlongs"', "Rsun"]),
        ("0.6 h", "mass", ['"h" is a unit of time, not of mass', "Msun"]),
        ("3 Msun", "number", ["not of pure number"]),
        ("0.6 Msun/", "mass", ["unknown unit"]),
        ("1,5 Msun", "mass", ["unknown unit"]),
        ("heavy", "mass", ["not a number with a unit", "Msun"]),
        ("", "mass", ["not a number with a unit"]),
        (nan, "mass", ["not a finite number"]),
        (inf, "mass", ["not a finite number"]),
        ("1e999 Msun", "mass", ["not a finite number"]),
        (True, "mass", ["true/false is no mass"]),
        (np.True_, "mass", ["is no mass"]),
        ([1], "mass", ["a list is no mass"]),
        (None, "mass", ["NoneType"]),
        (3 * u.h, "mass", ["cannot be converted to solMass"]),
        ([3, 4] * u.kg, "mass", ["cannot be converted to solMass"]),
    ],
)
def test_wrong_quantities(value, dimension, fragments):
    with pytest.raises(ConfigError) as caught:
        parse_quantity(value, dimension)
    for fragment in fragments:
        assert fragment in str(caught.value)


@pytest.mark.parametrize(
    ("text", "dimension", "expected"),
    [
        ("0.60+-0.02 Msun", "mass", (0.60, 0.02, 0.02)),
        ("0.60 +- 0.02 Msun", "mass", (0.60, 0.02, 0.02)),
        ("0.60 +/- 0.02", "mass", (0.60, 0.02, 0.02)),
        ("0.60±0.02 Msun", "mass", (0.60, 0.02, 0.02)),
        ("0.60+0.02-0.03 Msun", "mass", (0.60, 0.02, 0.03)),
        ("0.60 +0.02 -0.03 Msun", "mass", (0.60, 0.02, 0.03)),
        ("1e-9 +1e-10 -2e-10 Msun/yr", "rate", (1e-9, 1e-10, 2e-10)),
        ("0.60 Msun", "mass", (0.60, 0.0, 0.0)),
        (0.6, "mass", (0.6, 0.0, 0.0)),
    ],
)
def test_quantities_with_errors(text, dimension, expected):
    assert parse_uncertain(text, dimension) == expected


def test_errors_share_the_unit_of_the_value():
    value, plus, minus = parse_uncertain("1.9 +0.1 -0.05 h", "time")
    assert value * 8766 == pytest.approx(1.9, rel=1e-14)
    assert plus / value == pytest.approx(0.1 / 1.9, rel=1e-14)
    assert minus / value == pytest.approx(0.05 / 1.9, rel=1e-14)


@pytest.mark.parametrize("text", ["0.6+-0.02 h", "0.6+--0.02 Msun", "0.6+-0.02+-0.1 Msun", "0.6+-1e999 Msun"])
def test_wrong_errors(text):
    with pytest.raises(QuantityError, match="Msun|finite"):
        parse_uncertain(text, "mass")


@pytest.mark.parametrize(
    ("value", "dimension", "expected"),
    [
        (2.34e6, "time", "2.34 Myr"),
        (10e9, "time", "10 Gyr"),
        (3.083 / 8766, "time", "3.083 h"),
        (50 / 525960, "time", "50 min"),
        (0.75, "mass", "0.75 Msun"),
        (0.02, "mass", "20.95 Mjup"),
        (12 / 695700, "length", "12 km"),
        (0.01, "length", "1.091 Rearth"),
        (2.5, "length", "2.5 Rsun"),
        (2000.0, "length", "9.301 au"),
        (1.2e-9, "rate", "1.2e-09 Msun/yr"),
        (15000.0, "temperature", "15000 K"),
        (pi / 3, "angle", "60 deg"),
        (2500.0, "distance", "2.5 kpc"),
        (0.0, "mass", "0 Msun"),
        (0.25, "number", "0.25"),
    ],
)
def test_texts_for_people(value, dimension, expected):
    assert human(value, dimension) == expected


@given(st.floats(4e-8, 9e11))
def test_times_are_shown_between_a_tenth_and_a_thousand(value):
    number, unit = best_unit(value, "time")
    assert 0.1 <= number < 1000 and parse_quantity(f"{number!r} {unit}", "time") == pytest.approx(value)


@given(st.floats(2e-10, 2e5))
def test_lengths_are_shown_between_a_tenth_and_a_thousand(value):
    number, _ = best_unit(value, "length")
    assert 0.1 <= number < 1000


@given(NUMBERS, st.sampled_from(sorted(DIMENSIONS)))
def test_exact_texts_read_back_to_the_bit(value, dimension):
    assert parse_quantity(exact_text(value, dimension), dimension) == value


@given(NUMBERS, st.sampled_from(["s", "min", "h", "d", "kyr", "Myr", "Gyr"]))
def test_factors_there_and_back(value, unit):
    there = value * conversion_factor("yr", unit)
    assert there * conversion_factor(unit, "yr") == pytest.approx(value, rel=1e-15)


def test_factors_of_compound_units():
    for unit, other in [
        ("solMass solRad2 / yr2", "dyn cm"),
        ("solMass solRad2 / yr", "g cm2 / s"),
        ("1 / yr", "Hz"),
        ("solMass / yr", "g/s"),
        ("solLum", "erg/s"),
        ("rad / yr", "deg/d"),
    ]:
        expected = u.Unit(unit).to(other)
        assert conversion_factor(unit, other) == pytest.approx(expected, rel=1e-9)


def test_a_factor_to_something_else_is_refused():
    with pytest.raises(ConfigError, match='"h" is a unit of time, not of mass'):
        conversion_factor("solMass", "h")
    with pytest.raises(ConfigError, match='did you mean "day"'):
        conversion_factor("yr", "days")

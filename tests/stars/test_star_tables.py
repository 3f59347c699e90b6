"""Tables of stars, the curves through them, and the user's track."""

from math import exp, log, nan

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.interpolate import PchipInterpolator
from star_helpers import BARE_TRACK, TRACK

from evolve.errors import DomainError
from evolve.stars import MODELS
from evolve.stars.curves import cubics, interval
from evolve.stars.tables import builtin, checked

GOOD = {"mass": [0.1, 0.2, 0.3, 0.4], "radius": [1.0, 2.0, 3.0, 4.0]}


# Curves -----------------------------------------------------------------------------------


@st.composite
def rows(draw, count=st.integers(3, 12)):
    n = draw(count)
    steps = draw(st.lists(st.floats(1e-2, 10.0), min_size=n - 1, max_size=n - 1))
    x = [sum(steps[:i]) for i in range(n)]
    y = draw(st.lists(st.integers(-50_000, 50_000), min_size=n, max_size=n))
    y = [value / 1000.0 for value in y]
    return x, y


def read(x, coefficients, point):
    i = interval(x, point)
    c, d = coefficients[4 * i : 4 * i + 4], point - x[i]
    return c[0] + d * (c[1] + d * (c[2] + d * c[3]))


@given(table=rows(), share=st.floats(0.0, 1.0))
def test_curves_agree_with_scipys_monotone_cubic(table, share):
    x, y = table
    point = x[-1] * share
    expected = float(PchipInterpolator(x, y)(point))
    assert read(tuple(x), cubics(x, y), point) == pytest.approx(expected, rel=1e-9, abs=1e-9)


@given(table=rows(), share=st.floats(0.0, 1.0))
def test_curves_stay_between_their_rows(table, share):
    x, y = table
    point = x[-1] * share
    i = interval(tuple(x), point)
    low, high = sorted((y[i], y[i + 1]))
    assert low - 1e-9 <= read(tuple(x), cubics(x, y), point) <= high + 1e-9


def test_several_curves_lie_side_by_side():
    x, y, z = (0.0, 1.0, 3.0), (1.0, 2.0, 0.0), (5.0, 4.0, 3.0)
    both, one, two = cubics(x, y, z), cubics(x, y), cubics(x, z)
    assert both == (*one[:4], *two[:4], *one[4:], *two[4:])


@given(table=rows(), point=st.floats(-20.0, 120.0))
def test_interval(table, point):
    x = table[0]
    i = interval(tuple(x), point)
    assert 0 <= i <= len(x) - 2
    assert x[i] <= point or i == 0
    assert point < x[i + 1] or i == len(x) - 2


# Tables -----------------------------------------------------------------------------------


def test_builtin_table():
    table = builtin("dwarf")
    assert list(table) == ["mass", "radius", "luminosity"]
    assert checked(table, "mass", tuple(table))["mass"][0] == 0.01
    assert len(table["mass"]) == 27 and table["radius"][-1] == 0.95


@pytest.mark.parametrize("change, words", [
    ({"mass": [0.1, 0.2, 0.2, 0.4]}, "mass must rise.*row 3 has 0.2 after 0.2"),
    ({"mass": [0.1, 0.2, 0.3, 0.25]}, "mass must rise.*row 4 has 0.25 after 0.3"),
    ({"radius": [1.0, 2.0, nan, 4.0]}, "radius in row 3 is nan, not finite"),
    ({"radius": [1.0, -2.0, 3.0, 4.0]}, "radius in row 2 is -2, not above 0"),
    ({"radius": [0.0, 2.0, 3.0, 4.0]}, "radius in row 1 is 0, not above 0"),
    ({"radius": [1.0, 2.0, 3.0]}, "radius has 3 rows, its column mass 4"),
    ({"mass": [0.1, 0.2, 0.3], "radius": [1.0, 2.0, 3.0]}, "has 3 rows; 4 or more are needed"),
    ({"extra": [1.0, 2.0, 3.0, float("inf")]}, "extra in row 4 is inf, not finite"),
])  # fmt: skip
def test_tables_that_make_no_star(change, words):
    with pytest.raises(DomainError, match=words):
        checked(GOOD | change, "mass", ("mass", "radius"))


def test_a_missing_column_is_named():
    with pytest.raises(DomainError, match="no column radius"):
        checked({"mass": GOOD["mass"]}, "mass", ("mass", "radius"))


def test_the_dwarf_refuses_a_bad_table():
    bad = GOOD | {"luminosity": [1.0, 2.0, 3.0, -4.0]}
    with pytest.raises(DomainError, match="luminosity in row 4 is -4"):
        MODELS["dwarf"].prepare(0.2, {"table": bad})


# Track ------------------------------------------------------------------------------------

MODEL = MODELS["track"]


def star(age, mass=5.0, radius=1.0, **values):
    keys = MODEL.prepare(5.0, {"table": TRACK, **values})
    return MODEL.structure(mass, radius, age, keys)


@pytest.mark.parametrize("row", range(6))
def test_track_meets_its_rows(row):
    found = star(TRACK["age"][row])
    assert found.equilibrium == pytest.approx(TRACK["radius"][row], rel=1e-12)
    assert found.luminosity == pytest.approx(TRACK["luminosity"][row], rel=1e-12)
    assert found.core_mass == pytest.approx(TRACK["core_mass"][row], abs=1e-12)
    assert found.zeta == pytest.approx(TRACK["zeta_ad"][row], rel=1e-12)
    assert found.phase_rate == 1.0


def test_track_between_rows_is_the_monotone_cubic_in_age():
    curve = PchipInterpolator(TRACK["age"], [log(r) for r in TRACK["radius"]])
    for age in (3e5, 2.6e6, 4.2e6, 4.49e6):
        assert star(age).equilibrium == pytest.approx(exp(float(curve(age))), rel=1e-10)


def test_overflow_shrinks_a_track_only_by_the_exponent_asked_for():
    assert star(3e6, mass=4.0).equilibrium == star(3e6, mass=4.8).equilibrium
    track_mass = 4.9  # of the row at 2.5e6 yr
    found = star(2.5e6, mass=4.0, zeta_eq=0.7).equilibrium
    assert found == pytest.approx(4.5 * (4.0 / track_mass) ** 0.7, rel=1e-12)


def test_keys_go_before_columns_and_stand_in_for_them():
    assert star(1e6, zeta_ad=0.5).zeta == 0.5
    bare = {"table": BARE_TRACK}

    def read(**values):
        return MODEL.structure(5.0, 2.6, 0.0, MODEL.prepare(5.0, bare | values))

    assert read().zeta == 0.0 and read().core_mass == 0.0
    # zero-age luminosity of 5 solMass, Tout et al. 1996 (from memory)
    assert read().luminosity == pytest.approx(530.13, rel=1e-5)
    assert read(luminosity=600.0).luminosity == pytest.approx(600.0, rel=1e-12)
    assert read(temperature=11544.0).luminosity == pytest.approx(16 * 2.6**2, rel=1e-12)


def test_convective_while_cool():
    """Convective envelopes below about 6500 K."""
    cool, hot = star(4.4e6, radius=200.0), star(4.4e6, radius=10.0)
    assert cool.temperature < 6500.0 < hot.temperature
    assert (cool.convective, hot.convective) == (1.0, 0.0)
    assert cool.envelope_mass == pytest.approx(5.0 - 0.7, rel=1e-9)


def test_start_of_a_track():
    assert MODEL.start_phase(5.0, {"table": TRACK, "age": None}) == 0.0
    assert MODEL.start_phase(5.0, {"table": TRACK, "age": 2e6}) == 2e6


@pytest.mark.parametrize("mass, values, words", [
    (5.0, {"age": 5e6}, "age 5e.06 yr is outside the table of ages, 0 to 4.5e.06"),
    (5.0, {"age": 4.5e6}, "age 4.5e.06 yr is outside"),
    (3.0, {}, "mass 3 is not the track's: 5 solMass at an age of 0 yr"),
    (5.0, {"table": TRACK | {"core_mass": [0.0, 0.0, 0.2, 0.5, 0.7, 4.3]}}, "core_mass in row 6 is 4.3"),
    (5.0, {"table": TRACK | {"radius": [1.0, 1.0, 0.0, 1.0, 1.0, 1.0]}}, "radius in row 3 is 0"),
    (5.0, {"table": TRACK | {"luminosity": [1.0] * 5 + [-1.0]}}, "luminosity in row 6 is -1"),
    (5.0, {"temperature": 5000.0}, "table has luminosities"),
])  # fmt: skip
def test_tracks_that_make_no_star(mass, values, words):
    with pytest.raises(DomainError, match=words):
        MODEL.prepare(mass, {"table": TRACK} | values)

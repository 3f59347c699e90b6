"""The Roche potential and the Lagrange points."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from evolve.constants import AU_SI, GM_EARTH_SI, GM_SUN_SI
from evolve.errors import DomainError
from evolve.orbit.roche import axis_points, inner_distance, lagrange_points, potential

ratios = st.floats(-8.0, 8.0).map(lambda exponent: 10.0**exponent)

# m_donor/m_accretor; x of L1, of the point beyond the companion and of that behind the
# donor, from the donor; minus their potentials. Roots found with mpmath, 30 digits.
AXIS = [
    (0.01, 0.141474913183126, 1.99422436938398, -0.156220686426991,
     1.58332126767, 1.504949376899, 1.576726206074),
    (0.05, 0.231254584056804, 1.97221618494956, -0.273189382472749,
     1.704804662578, 1.523774813729, 1.673346871003),
    (0.1, 0.282487412885492, 1.94692655117491, -0.34699199940271,
     1.785135831553, 1.545288793222, 1.725768490703),
    (0.2, 0.341444321046224, 1.90249844643398, -0.438076781077482,
     1.874495342549, 1.582523744501, 1.768170286466),
    (0.5, 0.429248428481473, 1.80302796065835, -0.582380722213662,
     1.972785310316, 1.66072378584, 1.773729067776),
    (1.0, 0.5, 1.69840614455492, -0.69840614455492,
     2.0, 1.728398112043, 1.728398112043),
    (2.0, 0.570751571518527, 1.58238072221366, -0.803027960658354,
     1.972785310316, 1.773729067776, 1.66072378584),
    (5.0, 0.658555678953776, 1.43807678107748, -0.902498446433978,
     1.874495342549, 1.768170286466, 1.582523744501),
    (10.0, 0.717512587114508, 1.34699199940271, -0.946926551174913,
     1.785135831553, 1.725768490703, 1.545288793222),
    (50.0, 0.824557121370997, 1.19867822382174, -0.988561677031385,
     1.624726055743, 1.611689295518, 1.50979915799),
    (100.0, 0.858525086816874, 1.15622068642699, -0.994224369383978,
     1.58332126767, 1.576726206074, 1.504949376899),
]  # fmt: skip


@pytest.mark.parametrize("row", AXIS)
def test_points_on_the_axis(row):
    mass_ratio, inner, front, back, *depths = row
    assert axis_points(mass_ratio) == pytest.approx((back, inner, front), abs=1e-14)
    assert inner_distance(mass_ratio) == pytest.approx(inner, abs=1e-15)
    computed = potential(np.array([inner, front, back]), 0.0, 0.0, mass_ratio)
    assert -computed == pytest.approx(np.array(depths), abs=1e-12)


@pytest.mark.parametrize("row", AXIS)
def test_second_point_lies_beyond_the_lighter_star(row):
    mass_ratio, inner, front, back, *_ = row
    first, second, third, *_ = lagrange_points(mass_ratio)
    expected = (inner, back, front) if mass_ratio < 1.0 else (inner, front, back)
    assert (first.x, second.x, third.x) == pytest.approx(expected, abs=1e-14)
    assert first.potential < second.potential <= third.potential
    assert second.x_centre == pytest.approx(second.x - 1.0 / (1.0 + mass_ratio), abs=1e-15)


def test_equilateral_points_of_the_lighter_star_lead_and_trail():
    for mass_ratio, sign in ((0.2, -1.0), (5.0, 1.0)):
        leading, trailing = lagrange_points(mass_ratio)[3:]
        assert (leading.x, leading.y) == pytest.approx((0.5, sign * 3.0**0.5 / 2.0))
        assert (trailing.x, trailing.y) == pytest.approx((0.5, -sign * 3.0**0.5 / 2.0))
        # turning from x towards y, the lighter star is ahead of the heavier one's far side:
        # cross product of its position and the point's, both from the centre of mass
        lighter = -1.0 / (1.0 + mass_ratio) if mass_ratio < 1.0 else mass_ratio / (1 + mass_ratio)
        assert lighter * leading.y > 0.0 > lighter * trailing.y


@given(ratios)
def test_forces_vanish_at_all_five_points(mass_ratio):
    own, other = mass_ratio / (1.0 + mass_ratio), 1.0 / (1.0 + mass_ratio)
    for point in lagrange_points(mass_ratio):
        near, far = math.hypot(point.x, point.y), math.hypot(1.0 - point.x, point.y)
        along = -own * point.x / near**3 + other * (1.0 - point.x) / far**3 + point.x_centre
        across = point.y * (1.0 - own / near**3 - other / far**3)
        # the rounding of x, of the order of the machine's, times the slope of the force
        slope = 2.0 * own / near**3 + 2.0 * other / far**3 + 1.0
        assert abs(along) < 2e-15 * slope and abs(across) < 2e-15 * slope


@given(ratios)
def test_exchange_of_the_stars_mirrors_the_points(mass_ratio):
    back, inner, front = axis_points(mass_ratio)
    mirrored = axis_points(1.0 / mass_ratio)
    assert (1.0 - front, 1.0 - inner, 1.0 - back) == pytest.approx(mirrored, abs=1e-14)
    for one, two in zip(lagrange_points(mass_ratio), lagrange_points(1.0 / mass_ratio)):
        assert one.potential == pytest.approx(two.potential, rel=1e-14)


coordinates = st.floats(-2.0, 3.0).filter(lambda value: min(abs(value), abs(value - 1.0)) > 1e-2)


@given(ratios, coordinates, st.floats(-2.0, 2.0), st.floats(-2.0, 2.0))
def test_potential_is_the_textbook_formula(mass_ratio, x, y, z):
    # two point masses and the centrifugal force about their centre of mass
    own, other = mass_ratio / (1.0 + mass_ratio), 1.0 / (1.0 + mass_ratio)
    near = (x * x + y * y + z * z) ** 0.5
    far = ((x - 1.0) ** 2 + y * y + z * z) ** 0.5
    expected = -own / near - other / far - ((x - other) ** 2 + y * y) / 2.0
    assert potential(x, y, z, mass_ratio) == pytest.approx(expected, rel=1e-12)
    mirrored = potential(1.0 - x, y, z, 1.0 / mass_ratio)
    assert mirrored == pytest.approx(expected, rel=1e-12)


def test_potential_of_equal_masses_at_the_inner_point_is_exactly_two():
    assert inner_distance(1.0) == pytest.approx(0.5, abs=1e-16)
    assert potential(0.5, 0.0, 0.0, 1.0) == pytest.approx(-2.0, abs=1e-15)


def test_potential_is_bottomless_at_the_centres():
    values = potential(np.array([0.0, 1.0]), 0.0, 0.0, 0.3)
    assert np.all(values == -np.inf)


# Distances from the Earth, a = 1 au; the Moon's mass counted with the Earth's or not.
# Roots found with mpmath; commonly quoted as 1.5 million km.
@pytest.mark.parametrize(
    ("with_moon", "first", "second"), [(0.0, 1491551.0, 1501532.0), (1.0, 1497621.0, 1507683.0)]
)
def test_sun_and_earth(with_moon, first, second):
    moon = with_moon / 81.30057  # of the Earth's mass (Luzum et al. 2011, from memory)
    mass_ratio = GM_EARTH_SI * (1.0 + moon) / GM_SUN_SI
    points = lagrange_points(mass_ratio)
    au = AU_SI / 1e3
    assert points[0].x * au == pytest.approx(first, abs=1.0)
    assert -points[1].x * au == pytest.approx(second, abs=1.0)
    assert points[0].x * au == pytest.approx(1.5e6, rel=0.01)
    assert -points[1].x * au == pytest.approx(1.5e6, rel=0.01)


def test_earth_and_moon():
    # a = 384400 km, mass ratio 81.30057 (Luzum et al. 2011, Celest. Mech. 110, 293, from
    # memory); published rounded: 326400, 448900, -381700 km from the Earth's centre
    first, second, third, *_ = (384400.0 * point.x for point in lagrange_points(81.30057))
    assert (first, second, third) == pytest.approx((326380.9, 448914.9, -381675.4), abs=0.2)
    assert (first, second, third) == pytest.approx((326400.0, 448900.0, -381700.0), rel=1e-3)


@pytest.mark.parametrize("mass_ratio", [1e-8, 1e-12, 1e-20])
def test_points_beside_a_very_light_body(mass_ratio):
    # h (1 -+ h/3 - h2/9), h = (mu/3)^(1/3): the series in Murray & Dermott 1999, eqs 3.83, 3.88
    # (from memory); the next term is of the order h3
    first, second, third, *_ = lagrange_points(mass_ratio)
    mu = mass_ratio / (1.0 + mass_ratio)
    h = (mu / (3.0 * (1.0 - mu))) ** (1.0 / 3.0)
    assert first.x / h == pytest.approx(1.0 - h / 3.0 - h * h / 9.0, abs=h**3 + 1e-15)
    assert -second.x / h == pytest.approx(1.0 + h / 3.0 - h * h / 9.0, abs=h**3 + 1e-15)
    assert third.x - 1.0 == pytest.approx(1.0 - 7.0 / 12.0 * mu, abs=mu**1.5 + 1e-15)


@pytest.mark.parametrize("mass_ratio", [0.0, -1.0, math.inf, math.nan])
def test_senseless_mass_ratios_are_refused(mass_ratio):
    for function in (lagrange_points, inner_distance, axis_points):
        with pytest.raises(DomainError, match="mass ratio"):
            function(mass_ratio)

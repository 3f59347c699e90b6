"""Winds and their capture against published formulas, evaluated independently."""

from math import log10, sqrt

from hypothesis import given
from hypothesis import strategies as st
from law_helpers import close, make_orbit, make_star

from evolve.constants import AU_SI, KM_S, R_SUN_SI, G
from evolve.laws import find, winds

AU = AU_SI / R_SUN_SI
OTHER, ORBIT = make_star(1.0), make_orbit(30.0, 1.0, 100.0)


def rate(name, mass, radius=1.0, luminosity=1.0, temperature=0.0, **keys):
    law = find("wind", name)
    star = make_star(mass, radius, luminosity=luminosity, temperature=temperature)
    return law.function(star, OTHER, ORBIT, law.keys(**keys))


def test_reimers():
    # Reimers 1975: 4e-13 eta L R/M
    assert rate("reimers-1975", 1.0, 100.0, 1e3, eta=1.0) == close(4e-8, rel=1e-12)
    assert rate("reimers-1975", 0.8, 150.0, 2e3, eta=0.5) == close(7.5e-8, rel=1e-12)
    # McDonald & Zijlstra 2015: eta = 0.477 in globular clusters
    assert rate("reimers-1975", 1.0, 100.0, 1e3) == close(4e-8 * 0.477, rel=1e-12)


def test_constant():
    assert rate("constant", 1.0, rate=3e-7) == 3e-7


def test_nieuwenhuijzen_dejager():
    # Nieuwenhuijzen & de Jager 1990 (constants from memory)
    name = "nieuwenhuijzen-dejager-1990"
    assert rate(name, 20.0, 500.0, 1e5) == close(3.752585e-6, rel=1e-6)
    assert rate(name, 60.0, 20.0, 1e6) == close(5.732427e-6, rel=1e-6)
    assert rate(name, 60.0, 20.0, 1e6, strength=0.5) == close(2.8662135e-6, rel=1e-6)


def test_vink():
    # Vink, de Koter & Lamers 2001, eq. 24 and 25 (constants from memory)
    name = "vink-2001"
    assert rate(name, 30.0, 10.0, 1e5, 4e4) == close(1.456483e-7, rel=1e-6)
    assert rate(name, 60.0, 20.0, 1e6, 4e4) == close(9.163324e-6, rel=1e-6)
    assert rate(name, 30.0, 10.0, 1e5, 2e4) == close(4.088140e-7, rel=1e-6)
    assert rate(name, 30.0, 10.0, 1e5, 4e4, metallicity=0.004) == close(
        1.456483e-7 * 0.2**0.85, rel=1e-6
    )
    assert rate(name, 30.0, 10.0, 1e5, 4e4, strength=3.0) == close(3 * 1.456483e-7, rel=1e-6)


def test_vink_holds_its_hot_end_and_blends_at_the_others():
    name = "vink-2001"
    assert rate(name, 30.0, 10.0, 1e5, 7e4) == rate(name, 30.0, 10.0, 1e5, 5e4)
    # away from the points where the logarithms vanish, evaluated independently
    assert rate(name, 40.0, 10.0, 3e5, 3e4) == close(5.7416840217e-7, rel=1e-9)
    assert rate(name, 40.0, 10.0, 3e5, 1.5e4) == close(2.3173214010e-6, rel=1e-9)
    # cold: the rate of 1990, passed over to between 10000 and 12500 K
    mean = rate("nieuwenhuijzen-dejager-1990", 30.0, 50.0, 1e5)
    lower, middle, upper = (rate(name, 30.0, 50.0, 1e5, t) for t in (1e4, 11250.0, 12500.0))
    assert lower == close(mean, rel=1e-9) and upper == close(
        4.088140e-7 * (12500.0 / 2e4) ** 1.07, rel=1e-6
    )
    assert middle == close(sqrt(lower * upper), rel=1e-9)
    assert rate(name, 30.0, 50.0, 1e5, 9e3) == close(
        rate("nieuwenhuijzen-dejager-1990", 30.0, 50.0, 1e5), rel=1e-9
    )
    # halfway through the bi-stability jump: the geometric mean of its two edges
    edges = [rate(name, 30.0, 10.0, 1e5, t) for t in (22500.0, 25000.0, 27500.0)]
    assert edges[1] == close(sqrt(edges[0] * edges[2]), rel=1e-9)
    assert edges[0] > 3.0 * edges[2]  # the jump upwards as the star cools


@given(st.floats(8e3, 6e4))
def test_vink_is_continuous_in_the_temperature(temperature):
    near = [rate("vink-2001", 25.0, 8.0, 8e4, temperature + step) for step in (0.0, 1.0)]
    assert abs(log10(near[1] / near[0])) < 2e-3  # at most 0.7 dex over 1000 K


def speed_km_s(mass, radius, luminosity, temperature, separation):
    return winds.wind_speed(mass, radius, luminosity, temperature, separation) * KM_S


def test_speed_far_away_is_a_multiple_of_the_escape_speed():
    # v_esc = 617.7 km/s at the Sun's surface; Lamers, Snow & Lindholm 1995: 2.6, 1.3, 0.7 of it
    # and the middle of the blends between them
    for temperature, ratio in [
        (4e4, 2.6), (27500.0, 2.6), (25000.0, 1.95), (22500.0, 1.3), (2e4, 1.3), (12500.0, 1.3),
        (11250.0, 1.0), (1e4, 0.7), (5e3, 0.7),
    ]:  # fmt: skip
        assert speed_km_s(1.0, 1.0, 0.0, temperature, 1e9) == close(ratio * 617.7, rel=1e-3)


def test_speed_near_the_star_and_near_the_eddington_limit():
    fast = speed_km_s(20.0, 10.0, 0.0, 4e4, 1e9)
    assert speed_km_s(20.0, 10.0, 0.0, 4e4, 20.0) == close(0.5 * fast, rel=1e-6)
    assert speed_km_s(20.0, 10.0, 0.0, 4e4, 10.01) == close(0.05 * fast, rel=1e-6)
    # Gamma = 2.60e-5 L/m: 0.5 at L/m = 19231
    assert speed_km_s(20.0, 10.0, 0.5 / 2.60e-5 * 20.0, 4e4, 1e9) == close(
        sqrt(0.5) * fast, rel=1e-6
    )
    assert speed_km_s(20.0, 10.0, 1e9, 4e4, 1e9) == close(sqrt(0.1) * fast, rel=1e-6)


def captured(m1, m2, separation, km_s, e=0.0, **keys):
    law = find("capture", "bondi-hoyle")
    keys = law.keys(speed=km_s / KM_S, **keys)
    return law.function(make_star(m1), make_star(m2), make_orbit(m1, m2, separation, e), keys)


def test_captured_share():
    # Boffin & Jorissen 1988 with alpha = 3/2, evaluated independently
    assert captured(1.5, 1.0, 2.0 * AU, 15.0) == close(0.2019262, rel=1e-6)
    assert captured(20.0, 1.4, 50.0, 1500.0) == close(4.006558e-6, rel=1e-6)
    assert captured(20.0, 1.4, 50.0, 1500.0, 0.5) == close(4.626375e-6, rel=1e-6)
    assert captured(20.0, 1.4, 50.0, 1500.0, efficiency=0.75) == close(2.003279e-6, rel=1e-6)


def test_slow_winds_are_not_caught_more_than_whole():
    assert captured(1.0, 2.0, 100.0, 5.0) == 0.8


def test_speed_by_itself_is_that_of_the_star():
    law = find("capture", "bondi-hoyle")
    star = make_star(25.0, 7.0, luminosity=8e4, temperature=38000.0)
    hole, orbit = make_star(15.0), make_orbit(25.0, 15.0, 40.0)
    own = winds.wind_speed(25.0, 7.0, 8e4, 38000.0, 40.0)
    assert law.function(star, hole, orbit, law.keys()) == law.function(
        star, hole, orbit, law.keys(speed=own)
    )
    # the formula itself, in the limit of a fast wind
    fast = 1e4 * own
    assert law.function(star, hole, orbit, law.keys(speed=fast)) == close(
        0.75 * (G * 15.0 / (40.0 * fast**2)) ** 2, rel=1e-6
    )


def test_reimers_wind_is_slow():
    assert winds.DEFAULT_SPEEDS["reimers-1975"] * KM_S == close(15.0)
    assert set(winds.DEFAULT_SPEEDS) <= set(winds.TABLE)

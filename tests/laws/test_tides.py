"""Tides: the balance of angular momentum and energy, limits, and the Darwin condition."""

from math import pi, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st
from law_helpers import close, make_orbit, make_star

from evolve.constants import G
from evolve.laws import tides
from evolve.laws.tides import TidesKeys, darwin_margin, eccentricity_rate, hut_1981, spin_momentum

masses = st.floats(0.05, 30.0)
eccentricities = st.floats(0.0, 0.9)
FIXED = TidesKeys(k_over_t=1e-3)


def state(m, m_other, e, ratio, separation=10.0, radius=1.0):
    orbit = make_orbit(m, m_other, separation, e)
    return make_star(m, radius, spin=ratio * orbit.omega), make_star(m_other), orbit


def separation_rate(star, other, orbit):
    """d ln a/dt of a pair of constant masses, from the torque and de/dt."""
    torque = -hut_1981(star, other, orbit, FIXED)
    e, rate = orbit.eccentricity, eccentricity_rate(star, other, orbit, FIXED)
    return 2.0 * torque / orbit.angular_momentum + 2.0 * e * rate / (1.0 - e * e)


@given(masses, masses, eccentricities, st.floats(0.0, 5.0))
def test_shrinking_is_the_published_one(m, m_other, e, ratio):
    # Hut 1981, eq. 9: -6 K Q (1+Q) (R/a)^8 s^(-15/2) [f1 - s^(3/2) f2 spin/n]; an independent
    # formula that torque and de/dt must reproduce
    star, other, orbit = state(m, m_other, e, ratio)
    s, mass_ratio = 1.0 - e * e, m_other / m
    f1 = 1 + 31 / 2 * e**2 + 255 / 8 * e**4 + 185 / 16 * e**6 + 25 / 64 * e**8
    f2 = 1 + 15 / 2 * e**2 + 45 / 8 * e**4 + 5 / 16 * e**6
    scale = 6.0 * 1e-3 * mass_ratio * (1.0 + mass_ratio) * 10.0**-8 * s**-7.5
    expected = -scale * (f1 - s**1.5 * f2 * ratio)
    assert separation_rate(star, other, orbit) == pytest.approx(
        expected, rel=1e-9, abs=1e-10 * scale * f1
    )


@given(masses, masses, eccentricities, st.floats(0.0, 5.0))
def test_energy_never_rises(m, m_other, e, ratio):
    star, other, orbit = state(m, m_other, e, ratio)
    orbital = G * m * m_other / (2.0 * orbit.separation) * separation_rate(star, other, orbit)
    spinning = hut_1981(star, other, orbit, FIXED) * star.spin
    assert orbital + spinning <= 1e-12 * (abs(orbital) + abs(spinning))


@given(masses, masses)
def test_a_synchronous_circular_orbit_stays(m, m_other):
    star, other, orbit = state(m, m_other, 0.0, 1.0)
    per_omega = 3.0 * 1e-3 * m_other**2 / m * 1e-6 * orbit.omega
    assert abs(hut_1981(star, other, orbit, FIXED)) <= 1e-12 * per_omega
    assert eccentricity_rate(star, other, orbit, FIXED) == 0.0


def test_torque_of_a_still_star_on_a_circle():
    # Hut 1981, eq. 11 at e = 0, spin 0: 3 K Q^2 m R^2 (R/a)^6 n
    star, other, orbit = state(2.0, 1.0, 0.0, 0.0, radius=3.0)
    expected = 3.0 * 1e-3 * 0.25 * 2.0 * 9.0 * 0.3**6 * orbit.omega
    assert hut_1981(star, other, orbit, FIXED) == close(expected, rel=1e-12)


def test_eccentricity_grows_only_for_fast_spins():
    # to the first order in e it changes sign at a spin of 18/11 of the orbit
    for ratio, sign in ((18.0 / 11.0 - 0.01, -1.0), (18.0 / 11.0 + 0.01, 1.0)):
        assert sign * eccentricity_rate(*state(1.0, 1.0, 1e-4, ratio), FIXED) > 0.0


def test_friction_of_a_giant():
    # Zahn 1977, Rasio et al. 1996 (constant from memory), by hand: tau = 0.431 (0.8 30
    # (40 - 15)/(3 25))^(1/3) = 0.862 yr; synchronous, so no tide is too fast
    orbital = 2.0 * pi / 0.1
    rate = tides.friction_rate(1.0, 40.0, 25.0, 0.8, 30.0, orbital, orbital)
    assert rate == close(2.0 / 21.0 * 0.8 / 0.862, rel=1e-12)
    # a tide of 0.1 yr on a still star: F = 1/(1 + (2 0.862/0.1)^2)
    slow = tides.friction_rate(1.0, 40.0, 25.0, 0.8, 30.0, orbital, 0.0)
    assert slow / rate == close(1.0 / (1.0 + 17.24**2), rel=1e-12)


def test_no_convective_envelope_no_friction():
    assert tides.friction_rate(1.0, 1.0, 1.0, 0.0, 0.3, 1.0, 2.0) == 0.0
    star = make_star(10.0, 5.0, luminosity=5e3, spin=1.0)
    orbit, keys = make_orbit(10.0, 5.0, 20.0, 0.2), TidesKeys()
    assert hut_1981(star, make_star(5.0), orbit, keys) == 0.0
    assert eccentricity_rate(star, make_star(5.0), orbit, keys) == 0.0


def test_darwin_limit_is_where_angular_momentum_is_least():
    # J_orb + I n of synchronous orbits has its minimum at J_orb = 3 I n (Hut 1980)
    m1, m2, gyration, radius = 1.0, 0.1, 0.1, 1.0
    inertia = gyration * m1 * radius**2
    reduced = m1 * m2 / (m1 + m2)
    separation = sqrt(3.0 * inertia / reduced)  # J_orb = reduced a^2 n

    def whole(a):
        orbit = make_orbit(m1, m2, a)
        return orbit.angular_momentum + spin_momentum(m1, radius, gyration, orbit.omega)

    assert whole(separation) < whole(separation * 1.01)
    assert whole(separation) < whole(separation * 0.99)
    orbit = make_orbit(m1, m2, separation)
    spin = spin_momentum(m1, radius, gyration, orbit.omega)
    assert darwin_margin(orbit.angular_momentum, spin) == pytest.approx(0.0, abs=1e-12)
    assert darwin_margin(2.0 * orbit.angular_momentum, spin) == close(1.0)

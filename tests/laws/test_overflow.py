"""Overflow: exact nozzle, smoothness at contact, orders of magnitude, absurd trial states."""

from math import exp, isfinite, log10, pi

import pytest
from law_helpers import close, make_orbit, make_star
from hypothesis import given
from hypothesis import strategies as st

from evolve.constants import ATOMIC_MASS_SI, BOLTZMANN_SI, G_SI, M_SUN_SI, R_SUN_SI, YEAR_SI
from evolve.laws import overflow
from evolve.orbit.nozzle import nozzle

ACCRETOR, ORBIT = make_star(0.75), make_orbit(0.6, 0.75, 1.6)
AUTO, GIVEN = overflow.AtmosphereKeys(), overflow.AtmosphereKeys(1e-4, 1e-8)


def donor(radius=0.55, lobe=0.55, temperature=4000.0, mass=0.6):
    return make_star(mass, radius, lobe, temperature=temperature)


def rate(x, keys=GIVEN):
    """The atmosphere's rate at an excess of x scale heights of 1e-4 R."""
    return overflow.atmosphere(donor(lobe=0.55 * (1.0 - 1e-4 * x)), ACCRETOR, ORBIT, keys)


@pytest.mark.parametrize("logarithm", [-1.3, -1.0, -0.5, -0.1, 0.0, 0.2, 0.7, 1.0, 1.3])
def test_fits_of_the_nozzle_against_exact_equipotentials(logarithm):
    # mass_ratio here is other over self; the exact function takes self over other
    mass_ratio = 10.0**logarithm
    exact = nozzle(1.0 / mass_ratio)
    mass, radius, temperature = 0.6, 0.55, 4000.0
    kelvin = BOLTZMANN_SI * temperature / (1.3 * ATOMIC_MASS_SI)  # in SI, written out anew
    height = kelvin * radius * R_SUN_SI / (G_SI * mass * M_SUN_SI) / exact.gravity
    density = 2.0 / 3.0 * G_SI * mass * M_SUN_SI / (radius * R_SUN_SI) ** 2 / (0.01 * kelvin)
    flow = 2.0 * pi / exp(0.5) * exact.area * (radius * R_SUN_SI) ** 3
    flow *= kelvin**1.5 * density / (G_SI * mass * M_SUN_SI) * YEAR_SI / M_SUN_SI
    found_height, found_rate = overflow.photosphere(mass, radius, radius, temperature, mass_ratio)
    assert found_height == close(height, rel=0.004)
    assert found_rate == close(flow, rel=0.008)


def test_fits_are_held_outside_their_range():
    for edge, beyond in ((20.0, 1e3), (0.05, 1e-3)):
        held = overflow.photosphere(0.6, 0.55, 0.55, 4000.0, edge)
        inside = overflow.photosphere(0.6, 0.55, 0.55, 4000.0, edge**0.98)
        assert overflow.photosphere(0.6, 0.55, 0.55, 4000.0, beyond) == close(held, rel=1e-12)
        assert held[0] != inside[0] and held[1] != inside[1]


def test_red_dwarf_numbers():
    # Ritter 1988: H/R about 1e-4 and a rate of about 1e-8 solMass/yr for a 0.6 solMass donor
    height, at_contact = overflow.photosphere(0.6, 0.55, 0.55, 4000.0, 1.25)
    assert height == close(1.5e-4, rel=0.05)
    assert at_contact == close(1.0e-8, rel=0.05)


def test_ritters_own_fit_of_the_cross_section():
    # Ritter 1988: f = 1.23 + 0.5 log q for 0.5..10, q = accretor over donor
    reference = overflow.photosphere(0.6, 0.55, 0.55, 4000.0, 1.0)[1]
    for mass_ratio in (0.5, 2.0, 5.0, 10.0):
        own = overflow.photosphere(0.6, 0.55, 0.55, 4000.0, mass_ratio)[1] / reference
        assert own == close((1.23 + 0.5 * log10(mass_ratio)) / 1.23, rel=0.035)


def test_exponential_below_contact():
    assert rate(0.0) == close(1e-8, rel=1e-10)
    assert rate(-3.0) / rate(-5.0) == close(exp(2.0), rel=1e-9)


def test_cubic_above_contact():
    assert rate(10.0) == close(1e-8 * (1 + 10 + 50 + 1000 / 6), rel=1e-9)


def test_three_derivatives_join_at_contact():
    # one-sided differences of order 0 to 3 agree with those of exp, up to the step
    h = 1e-2
    above = [rate(i * h) / 1e-8 for i in range(4)]
    below = [rate(-i * h) / 1e-8 for i in range(4)]
    for side, sign in ((above, 1.0), (below, -1.0)):
        third = (side[3] - 3 * side[2] + 3 * side[1] - side[0]) / (sign * h) ** 3
        assert third == pytest.approx(1.0, abs=3.0 * h)


def test_excess_counts_in_the_scale_heights_of_the_rate():
    for keys in (AUTO, GIVEN):
        star = donor(lobe=0.551)
        x = overflow.excess(star, ACCRETOR, ORBIT, keys)
        at_contact = keys.reference_rate or overflow.photosphere(0.6, 0.55, 0.551, 4000.0, 1.25)[1]
        assert x < 0.0
        assert overflow.atmosphere(star, ACCRETOR, ORBIT, keys) == close(
            at_contact * exp(x), rel=1e-12
        )


def test_one_key_may_be_given_without_the_other():
    only_height = overflow.AtmosphereKeys(scale_height=2e-4)
    only_rate = overflow.AtmosphereKeys(reference_rate=3e-8)
    star = donor()
    own = overflow.photosphere(0.6, 0.55, 0.55, 4000.0, 1.25)[1]
    assert overflow.atmosphere(star, ACCRETOR, ORBIT, only_height) == close(own)
    assert overflow.atmosphere(star, ACCRETOR, ORBIT, only_rate) == close(3e-8)
    assert overflow.excess(donor(lobe=0.5501), ACCRETOR, ORBIT, only_height) == close(
        (1.0 - 0.5501 / 0.55) / 2e-4, rel=1e-9
    )


def test_star_without_a_temperature():
    assert overflow.photosphere(0.6, 0.55, 0.55, 0.0, 1.25) == (1e-4, 1e-8)


def test_mean_weight_passes_smoothly_through_ten_thousand_kelvin():
    assert overflow.mean_weight(9000.0) == 1.3 and overflow.mean_weight(11000.0) == 0.62
    # a cubic in ln T, evaluated independently
    assert overflow.mean_weight(9500.0) == close(1.1785088864, rel=1e-9)
    assert overflow.mean_weight(10500.0) == close(0.7126895316, rel=1e-9)
    for edge, value in ((9000.0, 1.3), (11000.0, 0.62)):
        for factor in (0.999, 0.9999, 1.0001, 1.001):
            assert overflow.mean_weight(edge * factor) == pytest.approx(value, abs=1e-3)


lengths = st.floats(1e-8, 3e6)
absurd = st.tuples(
    st.floats(1e-6, 1e3), lengths, lengths, st.floats(0.0, 1e9), st.floats(1e-6, 1e3)
)


@given(absurd)
def test_finite_for_absurd_trial_states(state):
    mass, radius, lobe, temperature, other = state
    star, accretor = donor(radius, lobe, temperature, mass), make_star(other)
    for keys in (AUTO, GIVEN, overflow.AtmosphereKeys(scale_height=1e-9)):
        result = overflow.atmosphere(star, accretor, ORBIT, keys)
        assert isfinite(result) and result >= 0.0
        assert isfinite(overflow.excess(star, accretor, ORBIT, keys))
    assert isfinite(overflow.polytrope(star, accretor, ORBIT, overflow.PolytropeKeys()))


@given(st.floats(-50.0, 1e3), st.floats(1e-3, 10.0))
def test_rate_rises_with_the_excess(x, step):
    assert rate(x + step) > rate(x)


def test_polytrope():
    # k (m/P) ((R - R_L)/R)^3 above contact; Paczynski & Sienkiewicz 1972
    keys = overflow.PolytropeKeys(k=10.0)
    period = 2.0 * pi / ORBIT.omega
    above = overflow.polytrope(donor(lobe=0.55 * (1.0 - 1e-3)), ACCRETOR, ORBIT, keys)
    assert above == close(10.0 * 0.6 / period * 1e-9, rel=1e-9)
    assert overflow.polytrope(donor(lobe=0.5501), ACCRETOR, ORBIT, keys) == 0.0

"""Ceilings of accretion, and the bend where acceptance meets them."""

import pytest
from hypothesis import given
from hypothesis import strategies as st
from law_helpers import close, make_orbit, make_star

from evolve.constants import G_PER_MSUN, R_SUN_SI, SECONDS_PER_YEAR
from evolve.laws import acceptance, find
from evolve.laws.acceptance import accepted, burning_share, radiative_efficiency

ORBIT, DONOR = make_orbit(1.4, 1.0, 3.0), make_star(1.0)
KILOMETRE = 1e3 / R_SUN_SI


def eddington(mass, radius_km=10.0, **keys):
    law = find("ceiling", "eddington")
    star = make_star(mass, radius_km * KILOMETRE)
    return law.function(star, DONOR, ORBIT, law.keys(**keys))


def test_eddington_rate_of_neutron_stars():
    # 4 pi c R/kappa, kappa = 0.2 (1+X) cm2/g, in cgs: independent evaluation
    assert eddington(1.4) == close(1.75853e-8, rel=1e-4)
    assert eddington(1.4, hydrogen=1.0) == close(1.49475e-8, rel=1e-4)
    assert eddington(1.4, hydrogen=0.0) == close(2.98950e-8, rel=1e-4)
    assert eddington(1.4, 12.0) == close(2.11024e-8, rel=1e-4)
    assert eddington(2.0) == eddington(1.4)  # whatever the mass
    assert eddington(1.4) * G_PER_MSUN / SECONDS_PER_YEAR == close(1.1080e18, rel=1e-4)


def test_eddington_rate_of_black_holes():
    # L_Edd = 4 pi G m c/kappa (2.05869e38 erg/s for 1.4 solMass, X = 0.7) over 0.0572 c^2
    expected = 2.05869e38 * 10.0 / 1.4 / (0.0572 * 2.99792458e10**2)
    expected *= SECONDS_PER_YEAR / G_PER_MSUN
    hole = eddington(10.0, 0.0, black_hole=1.0)
    assert hole == close(expected, rel=1e-3)
    assert hole == close(4.5e-7, rel=0.02)
    assert eddington(20.0, black_hole=1.0) == close(2.0 * hole)
    assert eddington(10.0, black_hole=1.0, spin=0.9) == close(
        hole * radiative_efficiency(0.0) / radiative_efficiency(0.9)
    )


def test_fixed_rate():
    law = find("ceiling", "rate")
    assert law.function(make_star(1.0), DONOR, ORBIT, law.keys(rate=3e-8)) == 3e-8


def test_a_point_has_no_ceiling():
    assert eddington(1.0, 0.0) == acceptance.NO_CEILING


@pytest.mark.parametrize(
    "spin, efficiency", [(0.0, 0.0572), (0.5, 0.0821), (0.9, 0.1558), (0.998, 0.321)]
)
def test_radiative_efficiency(spin, efficiency):
    # Bardeen, Press & Teukolsky 1972; 1 - sqrt(8/9) without spin
    assert radiative_efficiency(spin) == pytest.approx(efficiency, abs=1e-4 if spin < 0.99 else 1e-3)


def test_radiative_efficiency_at_both_ends():
    assert radiative_efficiency(0.0) == close(1.0 - (8.0 / 9.0) ** 0.5, rel=1e-14)
    assert radiative_efficiency(1.0) == close(1.0 - 3.0**-0.5, rel=1e-6)


def test_burning_band():
    # Nomoto et al. 2007 (from memory): 3.066e-7 (m - 0.5357) to 6.682e-7 (m - 0.4453)
    law = find("ceiling", "hydrogen-burning-band")
    for mass, lower, upper in [(1.0, 1.42354e-7, 3.70651e-7), (0.5, 0.0, 3.65505e-8), (0.4, 0, 0)]:
        arguments = (make_star(mass), DONOR, ORBIT, law.keys())
        assert law.second(*arguments) == close(lower, rel=1e-5)
        assert law.function(*arguments) == close(upper, rel=1e-5)


rates, shares = st.floats(0.0, 1e-3), st.floats(0.0, 1.0)


@given(rates, shares, st.floats(0.0, 1e-4))
def test_accepted_is_the_minimum_within_a_quarter_of_the_width(reaching, share, ceiling):
    kept, exact = accepted(reaching, share, ceiling), min(share * reaching, ceiling)
    rounding = 1e-15 * ceiling
    assert exact - acceptance.RAMP * ceiling / 4.0 - rounding <= kept <= exact + rounding
    assert accepted(reaching, share, ceiling, 0.0) == exact


def test_accepted_has_no_kink():
    # slopes either side of both ends of the bend, and of its middle
    ceiling, share = 1e-8, 0.5
    for place in (0.99, 1.0, 1.01):
        middle, step = place * ceiling / share, 1e-6 * ceiling
        left = accepted(middle, share, ceiling) - accepted(middle - step, share, ceiling)
        right = accepted(middle + step, share, ceiling) - accepted(middle, share, ceiling)
        assert left / step == pytest.approx(right / step, abs=1e-4)
    slope = (accepted(1e-9, share, ceiling) - accepted(0.0, share, ceiling)) / 1e-9
    assert slope == close(share)


def test_burning_share_across_the_lower_edge():
    edge = 1e-7
    assert burning_share(0.94 * edge, 0.2, edge) == 0.2
    assert burning_share(1.06 * edge, 0.2, edge) == 1.0
    assert burning_share(edge, 0.2, edge) == close(0.6)
    assert burning_share(1e-12, 0.2, 0.0) == 1.0
    assert burning_share(0.0, 0.2, edge) == 0.2


@given(st.floats(0.9, 1.1), shares)
def test_burning_share_rises(relative, share):
    below, above = (burning_share(x * 1e-7, share, 1e-7) for x in (relative, relative + 1e-3))
    assert share - 1e-12 <= below <= above + 1e-12 and above <= 1.0 + 1e-12

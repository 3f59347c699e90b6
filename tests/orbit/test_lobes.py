"""The fits that an integration calls: rows computed elsewhere, the exact lobe, properties."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from evolve.orbit import lobes
from evolve.orbit.roche import exact_lobe_fraction, lagrange_points

ratios = st.floats(-8.0, 8.0).map(lambda exponent: 10.0**exponent)

# m_self/m_other, Eggleton 1983 eq. 2, Paczynski 1971 (0.46224 (m/M)^(1/3)): the published
# formulas evaluated with mpmath
FITS = [
    (0.01, 0.102009034782, 0.0992570122),
    (0.1, 0.206772924143, 0.207843969),
    (0.2, 0.251747521088, 0.254380943),
    (0.5, 0.320788120335, 0.320499905),
    (1.0, 0.37892051838, 0.366880805),
    (2.0, 0.440004237533, 0.403804576),
    (5.0, 0.520751079425, 0.434985293),
    (10.0, 0.578168730333, 0.447786257),
    (100.0, 0.720262867656, 0.46071024),
]

# d ln(R_L/a)/d ln q of Eggleton's fit, differentiated with mpmath
SLOPES = [
    (0.01, 0.3183895114),
    (0.1, 0.2908957415),
    (0.2, 0.276375307),
    (0.5, 0.2515156909),
    (1.0, 0.2284592645),
    (2.0, 0.2023552804),
    (5.0, 0.1651172799),
    (10.0, 0.1368183407),
]

# lighter/heavier, L2 from the centre of mass: roots found with mpmath
OUTER = [(1.0, 1.19841), (0.5, 1.24905), (0.2, 1.27141), (0.1, 1.25608), (0.01, 1.14632)]


@pytest.mark.parametrize(("mass_ratio", "eggleton", "paczynski"), FITS)
def test_fits_as_published(mass_ratio, eggleton, paczynski):
    assert lobes.lobe_fraction(mass_ratio) == pytest.approx(eggleton, rel=3e-12)
    assert lobes.lobe_fraction_paczynski(mass_ratio) == pytest.approx(paczynski, rel=2e-9)


@pytest.mark.parametrize(("mass_ratio", "slope"), SLOPES)
def test_slope(mass_ratio, slope):
    assert lobes.lobe_slope(mass_ratio) == pytest.approx(slope, abs=6e-11)


@given(ratios)
def test_slope_is_that_of_the_fit(mass_ratio):
    step = 1e-4
    above, below = (lobes.lobe_fraction(mass_ratio * math.exp(s)) for s in (step, -step))
    difference = math.log(above / below) / (2.0 * step)
    assert lobes.lobe_slope(mass_ratio) == pytest.approx(difference, abs=1e-8)


@given(ratios, ratios)
def test_the_heavier_the_star_the_larger_its_lobe(one, two):
    low, high = sorted((one, two))
    assert lobes.lobe_fraction(low) <= lobes.lobe_fraction(high)
    assert lobes.lobe_slope(low) >= lobes.lobe_slope(high)
    assert 0.0 < lobes.lobe_slope(high) < 1.0 / 3.0


@pytest.mark.parametrize("decades", [(-3.0, 3.0), (-8.0, 8.0)])
def test_eggleton_is_within_its_accuracy(decades):
    # "better than 1 per cent over the whole range", Eggleton 1983
    deviation = [
        lobes.lobe_fraction(q) / exact_lobe_fraction(q) - 1.0 for q in np.logspace(*decades, 41)
    ]
    assert max(np.abs(deviation)) < 0.0085
    assert max(deviation) > 0.008 and min(deviation) < -0.0049  # and it is a fit, not the lobe


def test_paczynski_is_within_its_accuracy():
    # "about 2 per cent", Paczynski 1971, here below mass ratio 0.8
    ratios_scanned = np.logspace(-2.0, math.log10(lobes.PACZYNSKI_LIMIT), 25)
    deviation = [
        lobes.lobe_fraction_paczynski(q) / exact_lobe_fraction(q) - 1.0 for q in ratios_scanned
    ]
    assert max(np.abs(deviation)) < 0.022
    assert lobes.lobe_fraction_paczynski(1.0) < 0.97 * exact_lobe_fraction(1.0)


@pytest.mark.parametrize(("mass_ratio", "distance"), OUTER)
def test_outer_point(mass_ratio, distance):
    assert lobes.outer_point(mass_ratio, 1.0) == pytest.approx(distance, abs=6e-6)


@given(ratios)
def test_outer_point_balances_and_does_not_ask_which_star_is_which(mass_ratio):
    distance = lobes.outer_point(0.7 * mass_ratio, 0.7)
    assert distance == pytest.approx(lobes.outer_point(0.7, 0.7 * mass_ratio), rel=1e-15)
    second = lagrange_points(mass_ratio)[1]
    assert distance == pytest.approx(abs(second.x_centre), rel=1e-14)
    lighter = min(mass_ratio, 1.0) / (1.0 + mass_ratio)
    beyond = distance - (1.0 - lighter)
    pull = (1.0 - lighter) / (distance + lighter) ** 2 + lighter / beyond**2
    # the lighter star's pull magnifies the rounding of `beyond`
    assert pull == pytest.approx(distance, rel=1e-12)


@pytest.mark.parametrize("name", ["lobe_fraction", "lobe_slope", "lobe_fraction_paczynski"])
def test_compiled_and_plain_agree(name):
    numba = pytest.importorskip("numba")
    plain = getattr(lobes, name)
    compiled = numba.njit(plain)
    for mass_ratio in np.logspace(-8, 8, 33).tolist():
        assert compiled(mass_ratio) == pytest.approx(plain(mass_ratio), rel=1e-13)


def test_outer_point_compiled_and_plain_agree():
    compiled = pytest.importorskip("numba").njit(lobes.outer_point)
    for mass_ratio in np.logspace(-8, 8, 33).tolist():
        expected = lobes.outer_point(mass_ratio, 1.0)
        assert compiled(mass_ratio, 1.0) == pytest.approx(expected, rel=1e-13)

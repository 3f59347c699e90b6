"""Exact lobe volumes: rows computed elsewhere, a second quadrature, nozzle factors."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import dblquad

from evolve.errors import DomainError
from evolve.orbit import volumes
from evolve.orbit.roche import (
    axis_points,
    exact_lobe_fraction,
    inner_distance,
    lobe_summary,
    nozzle,
    potential,
    star_level,
)

# m_self/m_other, R_L/a: mpmath, 30 digits, two quadratures that agree to the last column
EXACT = [
    (0.01, 0.101242448652000705),
    (0.1, 0.205400738332226816),
    (0.2, 0.250644828104502398),
    (0.5, 0.320651313034126285),
    (1.0, 0.379863240927440327),
    (2.0, 0.441982969697002946),
    (5.0, 0.523330965970386927),
    (10.0, 0.58031373475583606),
    (100.0, 0.718169028637708643),
]


@pytest.mark.parametrize(("mass_ratio", "radius"), EXACT)
def test_exact_lobe(mass_ratio, radius):
    assert exact_lobe_fraction(mass_ratio) == pytest.approx(radius, rel=1e-14)


@pytest.mark.parametrize("mass_ratio", [1e-8, 1e-4, 1e4, 1e6, 1e8])
def test_twice_the_nodes_change_nothing(mass_ratio, monkeypatch):
    radius = exact_lobe_fraction(mass_ratio)
    monkeypatch.setattr(volumes, "ORDER", 2 * volumes.ORDER)
    assert exact_lobe_fraction.__wrapped__(mass_ratio) == pytest.approx(radius, rel=1e-14)


def _bisect(inside, low, high):
    """Arrays of roots of a condition that holds from `low` up to them."""
    for _ in range(60):
        middle = 0.5 * (low + high)
        good = inside(middle)
        low, high = np.where(good, middle, low), np.where(good, high, middle)
    return 0.5 * (low + high)


def _slice_quadrature(phi, back, tip, slices=60, azimuths=48):
    """Mean radius of the lobe from slices across the axis: V = Int A(x) dx, A = Int rho2/2 dphi."""
    level = phi(tip, 0.0, 0.0)
    start = -_bisect(lambda x: phi(-x, 0.0, 0.0) < level, 1e-6, -back)
    nodes, weights = np.polynomial.legendre.leggauss(slices)
    half = 0.5 * (tip - start)
    x = (0.5 * (tip + start) + half * nodes)[:, None]
    angle = (np.arange(azimuths) + 0.5) * (np.pi / 2.0 / azimuths)
    cosine, sine = np.cos(angle), np.sin(angle)
    # no lobe reaches farther from the axis than its inner point from the star
    high = np.full((slices, azimuths), tip)
    rho = _bisect(lambda r: phi(x, r * cosine, r * sine) < level, 0.0 * high, high)
    area = 4.0 * np.sum(rho**2 / 2.0, axis=1) * (np.pi / 2.0 / azimuths)
    return (3.0 * half * np.sum(weights * area) / (4.0 * np.pi)) ** (1.0 / 3.0)


@pytest.mark.parametrize("mass_ratio", [0.003, 0.05, 0.3, 1.0, 3.0, 40.0])
def test_slices_across_the_axis_give_the_same_volume(mass_ratio):
    own, other = mass_ratio / (1.0 + mass_ratio), 1.0 / (1.0 + mass_ratio)

    def phi(x, y, z):
        near, far = (x * x + y * y + z * z) ** 0.5, ((x - 1) ** 2 + y * y + z * z) ** 0.5
        return -own / near - other / far - ((x - other) ** 2 + y * y) / 2.0

    back, tip, _ = axis_points(mass_ratio)
    radius = exact_lobe_fraction(mass_ratio)
    assert _slice_quadrature(phi, back, tip) == pytest.approx(radius, rel=1e-9)


def test_lobe_of_a_very_light_star_is_that_of_hill():
    # Hill's limit of the potential, lengths in units of a (m/M)^(1/3); the correction is of
    # the order of that factor, so two mass ratios tell the limit to about its square
    tip = 3.0 ** (-1.0 / 3.0)

    def phi(x, y, z):
        return -((x * x + y * y + z * z) ** -0.5) - (3.0 * x * x - z * z) / 2.0

    limit = _slice_quadrature(phi, -tip, tip, slices=200)
    small, large = (
        exact_lobe_fraction(q) * ((1.0 + q) / q) ** (1.0 / 3.0) for q in (1e-8, 1e-7)
    )
    factor = 10.0 ** (1.0 / 3.0)
    assert (factor * small - large) / (factor - 1.0) == pytest.approx(limit, rel=1e-4)


def test_lobe_of_a_very_heavy_star_is_that_of_a_star_at_break_up():
    # Without a companion the critical surface has the equatorial radius 1 and, from the
    # formula r(colatitude) of 1/r + r2 sin2/2 = 3/2, the mean radius below
    nodes, weights = np.polynomial.legendre.leggauss(200)
    cosine, weight = 0.5 * (nodes + 1.0), 0.5 * weights
    square = 1.0 - cosine**2
    radius = _bisect(lambda r: 1.0 / r + 0.5 * r * r * square > 1.5, 0.0 * cosine, 0.0 * cosine + 1)
    mean = np.sum(weight * radius**3) ** (1.0 / 3.0)
    assert exact_lobe_fraction(1e8) == pytest.approx(mean, rel=1e-4)


@settings(max_examples=20, deadline=None)
@given(st.floats(-8.0, 7.9))
def test_the_heavier_the_star_the_larger_its_lobe(exponent):
    mass_ratio = 10.0**exponent
    own, more = exact_lobe_fraction(mass_ratio), exact_lobe_fraction(1.2 * mass_ratio)
    assert own < more < 0.815
    assert own < inner_distance(mass_ratio)


@settings(max_examples=10, deadline=None)
@given(st.floats(-3.0, 3.0), st.floats(0.05, 0.999))
def test_volume_grows_with_the_level(exponent, share):
    mass_ratio = 10.0**exponent
    lobe = exact_lobe_fraction(mass_ratio)
    tip = potential(inner_distance(mass_ratio), 0.0, 0.0, mass_ratio)
    lower, upper = (star_level(mass_ratio, lobe * part) for part in (share, 0.5 * (1.0 + share)))
    assert lower < upper < tip
    assert star_level(mass_ratio, lobe) == pytest.approx(tip, rel=1e-14)


def test_level_of_a_small_star_is_that_of_a_sphere():
    # a point mass, the companion's potential and the mean centrifugal term
    mass_ratio, radius = 0.5, 0.01
    own, other = 1.0 / 3.0, 2.0 / 3.0
    sphere = -own / radius - other - other**2 / 2.0 - radius**2 / 3.0
    assert star_level(mass_ratio, radius) == pytest.approx(sphere, abs=1e-6)


@pytest.mark.parametrize("mass_ratio", [0.1, 0.5, 1.0, 4.0])
def test_area_of_the_nozzle_is_that_of_an_isothermal_gas(mass_ratio):
    # Int exp[-(Phi - Phi_1)/c2] dy dz in the plane x = x1, for cold gas
    tip, sound = inner_distance(mass_ratio), 1e-5
    level = potential(tip, 0.0, 0.0, mass_ratio)
    reach = 8.0 * sound**0.5

    def density(z, y):
        return np.exp(-(potential(tip, y, z, mass_ratio) - level) / sound)

    section = 4.0 * dblquad(density, 0.0, reach, 0.0, reach, epsabs=1e-13, epsrel=1e-7)[0]
    own = mass_ratio / (1.0 + mass_ratio)
    expected = section * own / (2.0 * np.pi * sound * exact_lobe_fraction(mass_ratio) ** 3)
    assert nozzle(mass_ratio).area == pytest.approx(expected, rel=1e-4)


@pytest.mark.parametrize("mass_ratio", [0.1, 0.5, 1.0, 4.0])
def test_gravity_at_the_lobe_is_the_slope_of_the_level(mass_ratio):
    lobe = exact_lobe_fraction(mass_ratio)
    own = mass_ratio / (1.0 + mass_ratio)

    def slope(depth):
        drop = star_level(mass_ratio, lobe) - star_level(mass_ratio, lobe * (1.0 - depth))
        return drop / (lobe * depth) * lobe**2 / own

    # the slope approaches its value at the lobe in powers of the root of the depth
    roots = np.array([0.01, 0.02, 0.03, 0.04])
    limit = np.polyfit(roots, [slope(root**2) for root in roots], 3)[-1]
    assert nozzle(mass_ratio).gravity == pytest.approx(limit, rel=5e-5)


def test_area_agrees_with_the_published_fit():
    # Ritter 1988, A&A 202, 93: F(q) = 1.23 + 0.5 log q for 0.5 < q < 10, from memory, where
    # q = m_accretor/m_donor; the reading with the masses exchanged misses by up to 60 %
    for q in (0.5, 1.0, 2.0, 5.0, 10.0):
        assert nozzle(1.0 / q).area == pytest.approx(1.23 + 0.5 * np.log10(q), rel=0.02)


@pytest.mark.parametrize("mass_ratio", [1e-9, 1e9])
def test_mass_ratios_beyond_the_panels_are_refused(mass_ratio):
    with pytest.raises(DomainError, match="outside"):
        exact_lobe_fraction(mass_ratio)


@pytest.mark.parametrize("radius", [0.0, -0.1, 0.4])
def test_radii_beyond_the_lobe_are_refused(radius):
    with pytest.raises(DomainError, match="Roche lobe"):
        star_level(1.0, radius)


@pytest.mark.parametrize("mass_ratio", [0.25, 1.0, 4.0])
def test_summary_holds_both_stars_views(mass_ratio):
    summary, exchanged = lobe_summary(mass_ratio), lobe_summary(1.0 / mass_ratio)
    assert summary.donor == pytest.approx(exchanged.accretor, rel=1e-14, nan_ok=True)
    assert summary.accretor == pytest.approx(exchanged.donor, rel=1e-14, nan_ok=True)
    assert summary.donor.exact == exact_lobe_fraction(mass_ratio)
    assert (summary.donor.exact < summary.accretor.exact) == (mass_ratio < 1.0)
    assert summary.donor.eggleton == pytest.approx(
        summary.donor.exact * (1.0 + summary.donor.eggleton_deviation), rel=1e-14
    )
    assert np.isnan(summary.donor.paczynski) == (mass_ratio >= 0.8)
    assert summary.outer == pytest.approx(abs(summary.points[1].x_centre), rel=1e-14)

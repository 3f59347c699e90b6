"""Outlines for drawing lie on their equipotential, close, and enclose what they should."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from evolve.errors import DomainError
from evolve.orbit.roche import (
    exact_lobe_fraction,
    inner_distance,
    lagrange_points,
    level_outline,
    lobe_outlines,
    potential,
    star_level,
    star_outline,
)


def _levels(curve, mass_ratio):
    return potential(curve[:, 0], curve[:, 1], 0.0, mass_ratio)


def _area(curve):
    x, y = curve.T
    return abs(np.sum(x[:-1] * y[1:] - x[1:] * y[:-1])) / 2.0


@pytest.mark.parametrize("mass_ratio", [1e-6, 0.1, 1.0, 20.0, 1e6])
def test_lobes_lie_on_the_level_of_the_inner_point_and_meet_there(mass_ratio):
    own, other = lobe_outlines(mass_ratio, points=60)
    level = lagrange_points(mass_ratio)[0].potential
    tip = inner_distance(mass_ratio)
    for curve in (own, other):
        assert curve.shape == (119, 2)
        assert np.array_equal(curve[0], curve[-1])
        assert _levels(curve, mass_ratio) == pytest.approx(np.full(119, level), rel=1e-13)
        assert np.array_equal(curve[:60, 1], -curve[-1:-61:-1, 1])
    assert own[:, 0].max() == pytest.approx(tip, abs=1e-15)
    assert other[:, 0].min() == pytest.approx(tip, abs=1e-15)
    assert own[:, 0].min() < 0.0 and other[:, 0].max() > 1.0


def test_exchange_of_the_stars_mirrors_the_lobes():
    own, other = lobe_outlines(0.3, points=40)
    mirrored_other, mirrored_own = lobe_outlines(1.0 / 0.3, points=40)
    assert _area(own) == pytest.approx(_area(mirrored_own), rel=1e-12)
    assert _area(other) == pytest.approx(_area(mirrored_other), rel=1e-12)
    assert own[:, 0].min() == pytest.approx(1.0 - mirrored_own[:, 0].max(), abs=1e-13)


@settings(max_examples=15, deadline=None)
@given(st.floats(-3.0, 3.0), st.floats(0.05, 1.0))
def test_a_star_lies_on_its_level_inside_its_lobe(exponent, share):
    mass_ratio = 10.0**exponent
    radius = share * exact_lobe_fraction(mass_ratio)
    curve = star_outline(mass_ratio, radius, points=30)
    level = star_level(mass_ratio, radius)
    assert _levels(curve, mass_ratio) == pytest.approx(np.full(59, level), rel=1e-11)
    distance = np.hypot(*curve.T)
    assert distance.max() == pytest.approx(curve[:, 0].max(), rel=1e-12)  # points at the other
    # flattened by rotation and drawn out towards the companion, so large in this plane
    assert 0.9 * radius < distance.min() and radius * (1.0 - 1e-12) <= distance.max()


def test_a_full_star_is_the_lobe_and_a_small_one_a_circle():
    full = star_outline(0.4, exact_lobe_fraction(0.4), points=80)
    assert full == pytest.approx(lobe_outlines(0.4, points=80)[0], abs=1e-12)
    small = star_outline(0.4, 1e-3)
    assert np.hypot(*small.T) == pytest.approx(np.full(len(small), 1e-3), rel=1e-8)


@pytest.mark.parametrize("mass_ratio", [0.2, 1.0, 7.0])
def test_level_around_both_stars_opens_at_the_second_point(mass_ratio):
    first, second, *_ = lagrange_points(mass_ratio)
    widest = level_outline(mass_ratio, second.potential, "both", points=80)
    end = widest[:, 0].min() if second.x < 0.0 else widest[:, 0].max()
    assert end == pytest.approx(second.x, abs=1e-12)
    between = 0.5 * (first.potential + second.potential)
    waist = level_outline(mass_ratio, between, "both", points=80)
    assert _levels(waist, mass_ratio) == pytest.approx(np.full(159, between), rel=1e-13)
    lobes_area = sum(_area(curve) for curve in lobe_outlines(mass_ratio, points=80))
    assert lobes_area < _area(waist) < _area(widest)


@pytest.mark.parametrize("who", ["self", "other"])
def test_deep_levels_enclose_one_star(who):
    level = lagrange_points(0.5)[0].potential - 0.7
    curve = level_outline(0.5, level, who, points=40)
    assert _levels(curve, 0.5) == pytest.approx(np.full(79, level), rel=1e-13)
    centre = {"self": 0.0, "other": 1.0}[who]
    assert curve[:, 0].min() < centre < curve[:, 0].max()


def test_levels_without_a_closed_outline_are_refused():
    first, second, *_ = lagrange_points(0.5)
    for who, level in (
        ("self", first.potential + 0.01),
        ("other", first.potential + 0.01),
        ("both", first.potential - 0.01),
        ("both", second.potential + 0.01),
    ):
        with pytest.raises(DomainError, match=f"around {who}"):
            level_outline(0.5, level, who)
    with pytest.raises(DomainError, match="shrinks to a point"):
        level_outline(0.5, -1e12, "self")
    with pytest.raises(DomainError, match="Roche lobe"):
        star_outline(0.5, 0.5)

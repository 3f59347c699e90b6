"""Outlines in the orbital plane, for drawing: lobes, stars, any closed equipotential.

Frame and units of `evolve.orbit.potential` (origin at the star itself, the other star at
x = 1); mass_ratio = m_self / m_other. An outline is an array (2 n - 1, 2) of x, y [a] that
runs once around and ends where it began.
"""

import numpy as np
from scipy.optimize import brentq

from evolve.errors import DomainError
from evolve.orbit.potential import axis_points, depth, depth_offset, inner_distance, shares
from evolve.orbit.volumes import falling_root, front_of_star

NEAREST = 1e-9
"""Closest to a centre [a] that an outline can be drawn."""


def _half_width(own, other, level, x):
    """Half the width at abscissae within a closed region: the root nearest to the axis."""

    def squared_radii(y):
        return x * x + y * y, (1.0 - x) ** 2 + y * y

    def steepness(y):
        near, far = squared_radii(y)
        slope = -3.0 * y * (own / near**2.5 + other / far**2.5)
        return own / near**1.5 + other / far**1.5 - 1.0, slope

    def above(y):
        near, far = squared_radii(y)
        slope = y * (1.0 - own / near**1.5 - other / far**1.5)
        return depth(own, other, x, y, 0.0) - level, slope

    # the potential rises from the axis up to here, where the centrifugal force takes over
    return falling_root(above, falling_root(steepness, np.ones_like(x)))


def _outline(own, other, level, back, front, points):
    """Closed curve between two crossings of the axis, denser towards its ends."""
    x = 0.5 * (back + front) - 0.5 * (front - back) * np.cos(np.linspace(0.0, np.pi, points))
    y = np.zeros(points)
    y[1:-1] = _half_width(own, other, level, x[1:-1])
    return np.column_stack([np.concatenate([x, x[-2::-1]]), np.concatenate([y, -y[-2::-1]])])


def _crossing(own, other, level, start, end):
    """Where the axis is crossed between a centre (`start`) and a Lagrange point (`end`)."""

    def above(x):
        return float(depth(own, other, x, 0.0, 0.0)) - level

    if above(end) >= 0.0:
        return end
    near = start + NEAREST * np.sign(end - start)
    if above(near) <= 0.0:
        raise DomainError("the potential is so low that its outline shrinks to a point")
    return brentq(above, near, end, xtol=1e-15)


def level_outline(mass_ratio, level, around="self", points=200):
    """Outline of a closed equipotential.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other.
    level : float  [G M / a]
        Potential. Around one star it lies at or below that of L1, around both between L1
        and L2, where the region opens to the outside.
    around : {"self", "other", "both"}
        What it encloses.
    points : int
        Abscissae, at least 3.

    Returns
    -------
    ndarray (2 points - 1, 2)  [a]

    Raises
    ------
    DomainError
        If there is no such closed curve, or the mass ratio makes no sense.
    """
    own, other = shares(mass_ratio)
    back, tip, front = axis_points(mass_ratio)
    height = -level - depth_offset(other)
    at_tip, at_back, at_front = (
        float(depth(own, other, x, 0.0, 0.0)) for x in (tip, back, front)
    )
    slack = 1e-12 * at_tip
    if around == "both":
        fits = max(at_back, at_front) - slack <= height <= at_tip + slack
    else:
        fits = height >= at_tip - slack
    if not fits:
        raise DomainError(
            f"at mass ratio {mass_ratio:g} no closed outline around {around} has the "
            f"potential {level:.9g} G M/a (L1 lies at {-at_tip - depth_offset(other):.9g})"
        )
    start, end = {"self": (0.0, 0.0), "other": (1.0, 1.0), "both": (0.0, 1.0)}[around]
    left = tip if around == "other" else back
    right = tip if around == "self" else front
    left = _crossing(own, other, height, start, left)
    right = _crossing(own, other, height, end, right)
    return _outline(own, other, height, left, right, points)


def lobe_outlines(mass_ratio, points=200):
    """Outlines of both Roche lobes; they meet at the inner Lagrange point.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other.
    points : int
        Abscissae of each, at least 3.

    Returns
    -------
    tuple of ndarray (2 points - 1, 2)  [a]
        The lobe of the star itself, that of the other star, in the same frame.

    Raises
    ------
    DomainError
        If the mass ratio makes no sense.
    """
    own, other = shares(mass_ratio)
    tip = inner_distance(mass_ratio)
    level = -float(depth(own, other, tip, 0.0, 0.0)) - depth_offset(other)
    return tuple(level_outline(mass_ratio, level, who, points) for who in ("self", "other"))


def star_outline(mass_ratio, radius, points=200):
    """Outline of a star that fills its lobe partly or wholly.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, 1e-8 to 1e8.
    radius : float  [a]
        Volume-equivalent radius, above 0 and at most that of the exact lobe. (The fitted
        lobe may be larger by 0.83 %: scale a star by its share of the lobe's radius.)
    points : int
        Abscissae, at least 3.

    Returns
    -------
    ndarray (2 points - 1, 2)  [a]

    Raises
    ------
    DomainError
        If the radius or the mass ratio is outside its range.
    """
    return outline_at_front(mass_ratio, front_of_star(mass_ratio, radius), points)


def outline_at_front(mass_ratio, front, points=200):
    """Outline of a star whose surface crosses the axis at `front` [a], ndarray (2 points - 1, 2)
    [a]; see `star_outline`."""
    own, other = shares(mass_ratio)
    level = float(depth(own, other, front, 0.0, 0.0))
    back = _crossing(own, other, level, 0.0, axis_points(mass_ratio)[0])
    return _outline(own, other, level, back, front, points)


__all__ = ["level_outline", "lobe_outlines", "outline_at_front", "star_outline"]

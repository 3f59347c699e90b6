"""Volumes inside equipotentials of the Roche potential: exact lobes, no fit.

Frame and units of `evolve.orbit.potential`; mass_ratio = m_self / m_other.

Method: the volume in spherical coordinates about the star with the polar axis towards its
companion, V = (1/3) Int r^3 dOmega. Seen so, the cone at the inner Lagrange point is an
ordinary smooth end (theta = 0) of the integrand, and Gauss-Legendre panels, narrower
towards the places where a light companion or a light star bends the surface sharply,
converge exponentially: from mass ratio 1e-8 to 1e8 twice as many nodes change the radius of
the lobe by less than 1e-14 of itself. (A star that almost fills its lobe is rounded off near
the cone on a smaller scale than the panels: its radius is good to 1e-9.)
"""

from functools import lru_cache
from typing import NamedTuple

import numpy as np
from scipy.optimize import brentq

from evolve.errors import DomainError
from evolve.orbit.potential import depth, depth_offset, inner_distance, shares

ORDER = 24
"""Gauss-Legendre nodes of a panel."""
GROWTH = 4.0
"""Ratio of consecutive edges of the graded panels."""
LIGHTEST, HEAVIEST = 1e-8, 1e8
"""Mass ratios between which the panels are known to resolve the surface."""


class Surface(NamedTuple):
    """An equipotential about a star: radii [a], slopes of `depth` along them, weights [sr]."""

    radius: np.ndarray
    slope: np.ndarray
    weight: np.ndarray


def falling_root(function, high):
    """Root of a falling function between 0 and `high`, for arrays: Newton kept in brackets.

    Parameters
    ----------
    function : callable
        Gives the values and the slopes at an array; positive below the root.
    high : ndarray
        Upper ends, all > 0. Where the function is nowhere positive the answer tends to 0.

    Returns
    -------
    ndarray
    """
    low, high = np.zeros_like(high), high.copy()
    place = 0.7 * high
    for _ in range(100):
        value, slope = function(place)
        low, high = np.where(value > 0.0, place, low), np.where(value > 0.0, high, place)
        with np.errstate(divide="ignore", invalid="ignore"):
            newton = place - value / slope
        inside = (newton >= low) & (newton <= high)
        new = np.where(inside, newton, 0.5 * (low + high))
        done = np.all(np.abs(new - place) <= 4e-16 * np.abs(new))
        place = new
        if done:
            break
    return place


def _panels(edges):
    """Nodes and weights of Gauss-Legendre quadrature on consecutive panels."""
    nodes, weights = np.polynomial.legendre.leggauss(ORDER)
    half, middle = np.diff(edges) / 2.0, (edges[1:] + edges[:-1]) / 2.0
    return (middle[:, None] + half[:, None] * nodes).ravel(), np.outer(half, weights).ravel()


def _graded(scale, end):
    """Edges from 0 to `end`, the first panel `scale` wide and each next one wider."""
    edges = [0.0]
    while scale < 0.6 * end:
        edges.append(scale)
        scale *= GROWTH
    return np.array([*edges, end])


def _directions(mass_ratio):
    """cos(theta), cos2(theta) + sin2(theta) cos2(phi), and weights, for all directions.

    A light companion makes a narrow cone towards itself and, all around the star, an edge
    in the orbital plane, both as wide as its own lobe looks from the star; the surface of
    a light star comes near a second cone at its back. By symmetry a quarter of the
    azimuths stands for all.
    """
    front = min(1.0, (3.0 * mass_ratio) ** (-1.0 / 3.0))
    back = min(front, mass_ratio ** (1.0 / 6.0))
    half = np.pi / 2.0
    edges = np.concatenate([_graded(front, half), np.pi - _graded(back, half)[-2::-1]])
    theta, theta_weight = _panels(edges)
    phi, phi_weight = _panels(_graded(front, half))
    cosine, sine = np.cos(theta)[:, None], np.sin(theta)[:, None]
    in_plane = cosine**2 + (sine * np.cos(phi)) ** 2
    return cosine, in_plane, 4.0 * sine * theta_weight[:, None] * phi_weight


def _along_ray(own, other, radius, cosine, in_plane):
    """`depth` and its slope at a radius in given directions (same formula, polar form)."""
    excess = radius * (radius - 2.0 * cosine)
    w = np.sqrt((radius - cosine) ** 2 + (1.0 - cosine) * (1.0 + cosine))
    x, square = radius * cosine, radius * radius
    tide = -(x * excess * (2.0 + w) / (1.0 + w) + square) / (w * (1.0 + w))
    pull = -cosine * excess * (1.0 + w + w * w) / ((1.0 + w) * w**3) - radius / w**3
    value = own / radius + other * tide + 0.5 * in_plane * square
    return value, -own / square + other * pull + in_plane * radius


def surface(mass_ratio, front):
    """The equipotential about the star that crosses the axis at `front`.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, 1e-8 to 1e8.
    front : float  [a]
        Distance at which it crosses the axis towards the other star; at most that of the
        inner Lagrange point, where it is the lobe.

    Returns
    -------
    Surface
        Each field of shape (polar angles, azimuths).

    Raises
    ------
    DomainError
        If the mass ratio is outside the range.
    """
    own, other = shares(mass_ratio)
    if not LIGHTEST <= mass_ratio <= HEAVIEST:
        raise DomainError(
            f"a mass ratio of {mass_ratio:g} is outside {LIGHTEST:g} to {HEAVIEST:g}, "
            "where exact volumes are known to be accurate"
        )
    cosine, in_plane, weight = _directions(mass_ratio)
    level = _along_ray(own, other, front, 1.0, 1.0)[0]

    def above(radius):
        value, slope = _along_ray(own, other, radius, cosine, in_plane)
        return value - level, slope

    radius = falling_root(above, np.full(in_plane.shape, float(front)))
    return Surface(radius, above(radius)[1], weight)


def radius_at_front(mass_ratio, front):
    """Volume-equivalent radius [a] of a star whose surface crosses the axis at `front` [a]: the
    inverse of `front_of_star`, without its search. Raises DomainError as `surface` does."""
    shape = surface(mass_ratio, front)
    return float((np.sum(shape.weight * shape.radius**3) / (4.0 * np.pi)) ** (1.0 / 3.0))


@lru_cache(maxsize=256)
def exact_lobe_fraction(mass_ratio):
    """Volume-equivalent radius of the Roche lobe over the separation, by quadrature.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, 1e-8 to 1e8.

    Returns
    -------
    float
        R_L/a, to 1e-14 of itself.

    Raises
    ------
    DomainError
        If the mass ratio is outside the range.
    """
    return radius_at_front(mass_ratio, inner_distance(mass_ratio))


def front_of_star(mass_ratio, radius):
    """Where the surface of a star of given volume-equivalent radius crosses the axis.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, 1e-8 to 1e8.
    radius : float  [a]
        Volume-equivalent radius, above 0 and at most `exact_lobe_fraction`.

    Returns
    -------
    float  [a]
        Distance from the star, towards the other one.

    Raises
    ------
    DomainError
        If the radius or the mass ratio is outside its range.
    """
    lobe, tip = exact_lobe_fraction(mass_ratio), inner_distance(mass_ratio)
    if not 0.0 < radius <= lobe * (1.0 + 1e-12):
        raise DomainError(
            f"a radius of {radius:g} a is not above 0 and at most that of the Roche lobe, "
            f"{lobe:.6g} a at mass ratio {mass_ratio:g}"
        )
    if radius >= lobe:
        return tip
    # the front is the farthest point of the surface, so never nearer than the mean radius
    return brentq(
        lambda front: radius_at_front(mass_ratio, front) - radius,
        radius * (1.0 - 1e-9),
        tip,
        xtol=1e-300,
        rtol=1e-13,
    )


def star_level(mass_ratio, radius):
    """Potential on the surface of a star of given volume-equivalent radius.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, 1e-8 to 1e8.
    radius : float  [a]
        Volume-equivalent radius, above 0 and at most `exact_lobe_fraction`.

    Returns
    -------
    float  [G M / a]

    Raises
    ------
    DomainError
        If the radius or the mass ratio is outside its range.
    """
    own, other = shares(mass_ratio)
    front = front_of_star(mass_ratio, radius)
    return float(-(depth(own, other, front, 0.0, 0.0) + depth_offset(other)))


__all__ = [
    "HEAVIEST",
    "LIGHTEST",
    "Surface",
    "exact_lobe_fraction",
    "falling_root",
    "front_of_star",
    "star_level",
    "surface",
]

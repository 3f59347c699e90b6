"""The Roche potential of two point masses in a synchronous circular orbit, its five points.

Frame: it turns with the orbit; origin at the star that is meant ("self", the donor where
there is one), the other star at x = 1, the orbit in the plane z = 0, turning from x towards
y. Lengths in units of the separation a, potentials in units of G M / a with the physical
sign: deep is negative, matter at rest flows to lower values. Everywhere

    mass_ratio = m_self / m_other.

Any two massive bodies will do, a star and its planet as well.
"""

from typing import NamedTuple

import numpy as np
from scipy.optimize import brentq

from evolve.errors import DomainError


class LagrangePoint(NamedTuple):
    """A point of balance: name, position from the star and from the centre of mass, potential.

    L1 lies between the stars, L2 beyond the lighter, L3 beyond the heavier one (equal
    masses: L2 beyond the other star), L4 leads and L5 trails the lighter star by 60 degrees.
    `x`, `y` [a] from the star itself, `x_centre` [a] along the same axis from the centre
    of mass (`y` is the same from both), `potential` [G M / a].
    """

    name: str
    x: float
    y: float
    x_centre: float
    potential: float


def shares(mass_ratio):
    """Shares of both stars in the total mass, for a mass ratio that makes sense.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other.

    Returns
    -------
    tuple of float
        (m_self/M, m_other/M).

    Raises
    ------
    DomainError
        If the mass ratio is not a finite number above 0.
    """
    if not (mass_ratio > 0.0 and np.isfinite(mass_ratio)):
        raise DomainError(f"a mass ratio of {mass_ratio} is not a finite number above 0")
    return mass_ratio / (1.0 + mass_ratio), 1.0 / (1.0 + mass_ratio)


def depth(own, other, x, y, z):
    """Minus the potential, counted from a constant that leaves all digits to a light star.

    Parameters
    ----------
    own, other : float
        Shares of the mass, from `shares`.
    x, y, z : float or ndarray  [a]
        Positions; the shapes must broadcast.

    Returns
    -------
    float or ndarray  [G M / a]
        own/r + other (1/r_other - 1 - x) + (x2 + y2)/2, positive.

    Notes
    -----
    Near the origin the middle term is a tide, of second order in r. Written as it stands it
    would lose all its digits beside a heavy companion; here it is rearranged, with
    w = r_other and s = w2 - 1, so that nothing cancels.
    """
    square = x * x + y * y + z * z
    excess = square - 2.0 * x
    w = np.sqrt((1.0 - x) ** 2 + y * y + z * z)
    with np.errstate(divide="ignore"):
        tide = -(x * excess * (2.0 + w) / (1.0 + w) + square) / (w * (1.0 + w))
        return own / np.sqrt(square) + other * tide + 0.5 * (x * x + y * y)


def depth_offset(other):
    """What `depth` leaves out: potential = -(depth + depth_offset)  [G M / a]."""
    return other + 0.5 * other * other


def potential(x, y, z, mass_ratio):
    """Roche potential, centrifugal term about the centre of mass included.

    Parameters
    ----------
    x, y, z : float or ndarray  [a]
        Positions from the star; the shapes must broadcast.
    mass_ratio : float
        m_self / m_other.

    Returns
    -------
    float or ndarray  [G M / a]
        Negative; -inf at the centre of a star.

    Raises
    ------
    DomainError
        If the mass ratio is not a finite number above 0.
    """
    own, other = shares(mass_ratio)
    x, y, z = (np.asarray(value, dtype=float) for value in (x, y, z))
    return -(depth(own, other, x, y, z) + depth_offset(other))[()]


def _beside_lighter(lighter, sign):
    """Distance from the lighter star to L1 (sign -1) or L2 (+1)."""
    heavier, target = 1.0 - lighter, lighter ** (1.0 / 3.0)

    def excess(distance):
        far = 1.0 + sign * distance
        return distance * (heavier * (1.0 + far) / far**2 + 1.0) ** (1.0 / 3.0) - target

    return brentq(excess, 0.0, 0.8, xtol=1e-300, rtol=1e-15)


def _behind_heavier(lighter):
    """Distance from the heavier star to L3."""

    def pull(distance):
        own = (1.0 - lighter) / distance**2 - distance
        return own + lighter * (1.0 / (1.0 + distance) ** 2 - 1.0)

    return brentq(pull, 0.5, 1.0, xtol=1e-300, rtol=1e-15)


def inner_distance(mass_ratio):
    """Distance from the star to the inner Lagrange point.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other.

    Returns
    -------
    float  [a]

    Raises
    ------
    DomainError
        If the mass ratio is not a finite number above 0.
    """
    own, other = shares(mass_ratio)
    distance = _beside_lighter(min(own, other), -1.0)
    return distance if own <= other else 1.0 - distance


def axis_points(mass_ratio):
    """Abscissae of the three points on the axis, in rising order.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other.

    Returns
    -------
    tuple of float  [a]
        (beyond the star itself, < 0; between the stars; beyond the other star, > 1).

    Raises
    ------
    DomainError
        If the mass ratio is not a finite number above 0.
    """
    own, other = shares(mass_ratio)
    lighter = min(own, other)
    beyond, behind = _beside_lighter(lighter, 1.0), _behind_heavier(lighter)
    near, far = (beyond, behind) if own <= other else (behind, beyond)
    return -near, inner_distance(mass_ratio), 1.0 + far


def lagrange_points(mass_ratio):
    """The five Lagrange points.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, any.

    Returns
    -------
    tuple of LagrangePoint
        L1 to L5.

    Raises
    ------
    DomainError
        If the mass ratio is not a finite number above 0.

    Notes
    -----
    The distance of L1 and L2 from the lighter star is accurate to about 1e-15 of itself,
    however light that star is.
    """
    own, other = shares(mass_ratio)
    back, between, front = axis_points(mass_ratio)
    second, third = (back, front) if own < other else (front, back)
    leading = 3.0**0.5 / 2.0 if own >= other else -(3.0**0.5) / 2.0
    places = (between, 0.0), (second, 0.0), (third, 0.0), (0.5, leading), (0.5, -leading)
    return tuple(
        LagrangePoint(f"L{i}", x, y, x - other, float(potential(x, y, 0.0, mass_ratio)))
        for i, (x, y) in enumerate(places, start=1)
    )


__all__ = [
    "LagrangePoint",
    "axis_points",
    "depth",
    "depth_offset",
    "inner_distance",
    "lagrange_points",
    "potential",
    "shares",
]

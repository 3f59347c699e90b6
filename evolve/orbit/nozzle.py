"""The nozzle at the inner Lagrange point, from the exact potential and the exact lobe.

Units of `evolve.orbit.potential`; mass_ratio = m_self / m_other. What laws of overflow take
from published fits can be held against it.
"""

from typing import NamedTuple

import numpy as np

from evolve.orbit.potential import inner_distance, shares
from evolve.orbit.volumes import exact_lobe_fraction, surface


class Nozzle(NamedTuple):
    """Factors of the flow through the inner Lagrange point: `area` f and `gravity` g."""

    area: float
    gravity: float


def nozzle(mass_ratio):
    """Exact factors of the flow through the inner Lagrange point.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other (the inverse of the q that Ritter's fits are written in).

    Returns
    -------
    Nozzle
        `area` f: cross-section of an isothermal flow at the point, 2 pi f c_T2 R_L3/(G m).
        `gravity` g: gradient of the potential with the volume-equivalent radius at the
        lobe, d Phi/d R = g G m/R_L2 (1 for a sphere); the scale height is divided by it.

    Raises
    ------
    DomainError
        If the mass ratio is outside 1e-8 to 1e8.

    Notes
    -----
    Across the axis the potential at the point rises as Omega2 [(A-1) y2 + A z2]/2 with
    A = (m_self/M)/x1^3 + (m_other/M)/(1-x1)^3, so that the isothermal density falls as a
    Gaussian, f = (m_self/M) / [(R_L/a)^3 sqrt(A (A-1))]. g follows from the derivative of
    the volume, d V/d Phi = Int r2/|d Phi/d r| dOmega.

    References
    ----------
    Ritter 1988, A&A 202, 93 (definitions of both factors); Meyer & Meyer-Hofmeister 1983,
    A&A 121, 29 (cross-section of the nozzle; from memory).
    """
    own, other = shares(mass_ratio)
    tip, lobe = inner_distance(mass_ratio), exact_lobe_fraction(mass_ratio)
    bend = own / tip**3 + other / (1.0 - tip) ** 3
    area = own / (lobe**3 * (bend * (bend - 1.0)) ** 0.5)
    shape = surface(mass_ratio, tip)
    growth = float(np.sum(shape.weight * shape.radius**2 / -shape.slope))
    return Nozzle(area, 4.0 * np.pi * lobe**4 / (own * growth))


__all__ = ["Nozzle", "nozzle"]

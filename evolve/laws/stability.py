"""Stability of overflow: how the lobe answers when the donor loses mass.

Plain functions. Mass ratios here are donor over accretor. Overflow is stable on the
dynamical time while the star's exponent, zeta = d ln R / d ln m, exceeds the lobe's.
"""

from math import exp, log, sqrt
from typing import NamedTuple

from evolve.orbit.lobes import lobe_slope, outer_point


class Shares(NamedTuple):
    """How one unit of overflow leaves: what is missing to 1 is accepted.

    accretor, donor (fast, isotropic), ring, outer_point, multiple: shares, each 0..1.
    ring_radius: radius of the ring over the separation. mean: the multiple, in J/M.
    """

    accretor: float = 0.0
    donor: float = 0.0
    ring: float = 0.0
    outer_point: float = 0.0
    multiple: float = 0.0
    ring_radius: float = 2.25
    mean: float = 1.0


def loss_parameter(mass_ratio, shares):
    """Angular momentum lost per unit of overflow, times m_donor/J.

    Parameters
    ----------
    mass_ratio : float
        m_donor / m_accretor.
    shares : Shares

    Returns
    -------
    float
        d ln J / d ln m_donor by expulsion; >= 0. Circular orbit.

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
    """
    q, whole = mass_ratio, 1.0 + mass_ratio
    loss = (shares.donor + shares.accretor * q * q + shares.multiple * shares.mean * q) / whole
    loss += shares.ring * sqrt(shares.ring_radius) * whole
    if shares.outer_point > 0.0:
        loss += shares.outer_point * outer_point(q, 1.0) ** 2 * whole
    return loss


def accepted_share(shares):
    """The share of overflow that is not expelled.

    Parameters
    ----------
    shares : Shares

    Returns
    -------
    float
        1 minus the sum of the shares.
    """
    return 1.0 - sum(shares[:5])


def zeta_lobe(mass_ratio, accepted=1.0, loss=0.0, slope=lobe_slope):
    """Answer of the lobe to overflow: d ln R_L / d ln m_donor.

    Parameters
    ----------
    mass_ratio : float
        m_donor / m_accretor.
    accepted : float
        Share of one more unit of overflow that the accretor keeps (0 above a ceiling).
    loss : float
        `loss_parameter`, or nu of a consequential law.
    slope : callable
        d ln(R_L/a) / d ln(mass ratio).

    Returns
    -------
    float
        2 loss - 2 + 2 eps q + (1-eps) q/(1+q) + (1 + eps q) slope(q), eps what is accepted.

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
    """
    q = mass_ratio
    orbit = 2.0 * (loss - 1.0 + accepted * q) + (1.0 - accepted) * q / (1.0 + q)
    return orbit + (1.0 + accepted * q) * slope(q)


def _bisected(function, low, high):
    """The root of `function` of ln q between two points at which its sign differs."""
    rising = function(high) > 0.0
    while high - low > 1e-14 * (1.0 + abs(low)):
        middle = 0.5 * (low + high)
        if not low < middle < high:
            break
        if (function(middle) > 0.0) == rising:
            high = middle
        else:
            low = middle
    return 0.5 * (low + high)


def critical_mass_ratios(zeta, accepted=1.0, loss=None, slope=lobe_slope, span=(1e-3, 1e3)):
    """Mass ratios at which overflow passes between stable and unstable.

    Parameters
    ----------
    zeta : float
        The star's exponent d ln R / d ln m.
    accepted : float
        Share that the accretor keeps.
    loss : callable or None
        mass ratio -> loss, as `loss_parameter` gives it; None for no loss.
    slope : callable
        d ln(R_L/a) / d ln(mass ratio).
    span : (float, float)
        Mass ratios searched.

    Returns
    -------
    tuple of float
        Every m_donor/m_accretor with zeta_lobe = zeta, ascending; empty if there is none.
        Overflow is stable where `zeta_lobe` is the smaller of the two.

    Notes
    -----
    400 samples in ln q, then bisection to 1e-14; a pair of roots closer than 3.5 % is missed.

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
    """

    def difference(logarithm):
        q = exp(logarithm)
        return zeta_lobe(q, accepted, loss(q) if loss else 0.0, slope) - zeta

    start, end, count = log(span[0]), log(span[1]), 400
    points = [start + (end - start) * index / count for index in range(count + 1)]
    values = [difference(point) for point in points]
    return tuple(
        exp(_bisected(difference, points[index], points[index + 1]))
        for index in range(count)
        if (values[index] > 0.0) != (values[index + 1] > 0.0)
    )


__all__ = ["Shares", "accepted_share", "critical_mass_ratios", "loss_parameter", "zeta_lobe"]

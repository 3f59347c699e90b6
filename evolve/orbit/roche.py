"""Exact Roche geometry under one name, and the summary of a pair that people ask for.

Everything here refers to a synchronous circular orbit and to mass_ratio = m_self / m_other;
lengths in units of the separation, potentials in units of G M / a. It uses numpy and scipy;
what an integration needs stands in `evolve.orbit.lobes`.

References
----------
Eggleton 1983, ApJ 268, 368; Paczynski 1971, ARA&A 9, 183; Ritter 1988, A&A 202, 93.
"""

from math import nan
from typing import NamedTuple

from evolve.orbit.lobes import (
    PACZYNSKI_LIMIT,
    lobe_fraction,
    lobe_fraction_paczynski,
    lobe_slope,
    outer_point,
)
from evolve.orbit.nozzle import Nozzle, nozzle
from evolve.orbit.outlines import level_outline, lobe_outlines, star_outline
from evolve.orbit.potential import (
    LagrangePoint,
    axis_points,
    inner_distance,
    lagrange_points,
    potential,
)
from evolve.orbit.volumes import exact_lobe_fraction, star_level


class Lobe(NamedTuple):
    """Radius of one lobe over the separation: exact and by the fits.

    `exact`, `eggleton`, `paczynski` are R_L/a (the last nan from mass ratio 0.8 of that
    star, where it is not meant to be used), the deviations fit/exact - 1, and `slope` is
    d ln(R_L/a) / d ln(mass ratio of that star) of Eggleton's fit.
    """

    exact: float
    eggleton: float
    paczynski: float
    eggleton_deviation: float
    paczynski_deviation: float
    slope: float


class LobeSummary(NamedTuple):
    """Roche geometry of a pair with the donor as the star itself.

    `mass_ratio` m_donor/m_accretor; `donor` and `accretor` the two lobes; `points` the five
    Lagrange points (x from the donor towards the accretor); `outer` the distance of L2 from
    the centre of mass [a].
    """

    mass_ratio: float
    donor: Lobe
    accretor: Lobe
    points: tuple[LagrangePoint, ...]
    outer: float


def _lobe(mass_ratio):
    exact, eggleton = exact_lobe_fraction(mass_ratio), lobe_fraction(mass_ratio)
    paczynski = lobe_fraction_paczynski(mass_ratio) if mass_ratio < PACZYNSKI_LIMIT else nan
    return Lobe(
        exact=exact,
        eggleton=eggleton,
        paczynski=paczynski,
        eggleton_deviation=eggleton / exact - 1.0,
        paczynski_deviation=paczynski / exact - 1.0,
        slope=lobe_slope(mass_ratio),
    )


def lobe_summary(mass_ratio):
    """Lobes, their fits and the Lagrange points of a pair.

    Parameters
    ----------
    mass_ratio : float
        m_donor / m_accretor, 1e-8 to 1e8.

    Returns
    -------
    LobeSummary

    Raises
    ------
    DomainError
        If the mass ratio is outside the range.
    """
    mass_ratio = float(mass_ratio)
    return LobeSummary(
        mass_ratio=mass_ratio,
        donor=_lobe(mass_ratio),
        accretor=_lobe(1.0 / mass_ratio),
        points=lagrange_points(mass_ratio),
        outer=outer_point(mass_ratio, 1.0),
    )


__all__ = [
    "LagrangePoint",
    "Lobe",
    "LobeSummary",
    "Nozzle",
    "axis_points",
    "exact_lobe_fraction",
    "inner_distance",
    "lagrange_points",
    "level_outline",
    "lobe_outlines",
    "lobe_summary",
    "nozzle",
    "potential",
    "star_level",
    "star_outline",
]

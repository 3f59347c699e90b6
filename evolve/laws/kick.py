"""Sudden loss of mass, with or without a kick: the orbit after a supernova or a collapse."""

from math import atan2, cos, hypot, pi, sin, sqrt
from typing import NamedTuple

from evolve.constants import G


class Aftermath(NamedTuple):
    """The orbit after a sudden change of one component.

    separation     semi-major axis [solRad]; < 0 for a hyperbolic orbit
    eccentricity   above 1 where unbound
    tilt           of the orbital plane against the old one [rad], -pi..pi
    speed          of the new centre of mass against the old one [solRad/yr]
    bound          whether the pair stays together
    """

    separation: float
    eccentricity: float
    tilt: float
    speed: float
    bound: bool


def sudden_change(
    mass_before, mass_after, mass_other, separation, kick=0.0, polar=0.0, azimuth=0.0,
    eccentricity=0.0, anomaly=0.0,
):  # fmt: skip
    """The orbit after one star of a pair changes its mass at once, and is kicked.

    Parameters
    ----------
    mass_before, mass_after : float  [solMass]
        Of the star that explodes or collapses.
    mass_other : float  [solMass]
        Of its companion, which is left alone.
    separation : float  [solRad]
        Semi-major axis before.
    kick : float  [solRad/yr]
        Speed of the kick.
    polar : float  [rad]
        Angle between the kick and the transverse direction in the orbital plane: on a circle,
        at periastron and at apastron that of the star's orbital velocity.
    azimuth : float  [rad]
        Of the kick about that direction: 0 away from the companion, pi/2 along the normal of
        the orbital plane.
    eccentricity : float
        Before, 0 <= e < 1.
    anomaly : float  [rad]
        True anomaly at that moment; of no account on a circle.

    Returns
    -------
    Aftermath

    Notes
    -----
    Without a kick the pair stays bound while it loses less than half its mass, and
    a/a0 = (M - dM)/(M - 2 dM), e = dM/(M - dM).

    References
    ----------
    Blaauw 1961, Bull. Astron. Inst. Netherlands 15, 265; Hills 1983, ApJ 267, 322.
    """
    before, after = mass_before + mass_other, mass_after + mass_other
    distance = separation * (1.0 - eccentricity**2) / (1.0 + eccentricity * cos(anomaly))
    scale = sqrt(G * before / (separation * (1.0 - eccentricity**2)))
    swing, sweep = scale * eccentricity * sin(anomaly), scale * (1.0 + eccentricity * cos(anomaly))
    # relative velocity of the star after it: outward, along its way, normal to the plane
    radial = swing + kick * sin(polar) * cos(azimuth)
    along = sweep + kick * cos(polar)
    normal = kick * sin(polar) * sin(azimuth)
    square = along * along + radial * radial + normal * normal
    inverse = 2.0 / distance - square / (G * after)
    # e^2 by the eccentricity vector, which keeps its digits where 1 - h^2/(G M a) loses them
    transverse = along * along + normal * normal
    aside = transverse * distance / (G * after) - 1.0
    across = radial * sqrt(transverse) * distance / (G * after)
    # in the old centre-of-mass frame the star has other/before of the relative velocity
    drift = [
        (mass_after * (was * mass_other / before + new - was) - mass_other * was * mass_before / before)
        / after
        for was, new in ((swing, radial), (sweep, along), (0.0, normal))
    ]
    return Aftermath(
        separation=1.0 / inverse if inverse != 0.0 else float("inf"),
        eccentricity=hypot(aside, across),
        tilt=atan2(normal, along),
        speed=hypot(*drift),
        bound=inverse > 0.0,
    )


def true_anomaly(mean, eccentricity):
    """True anomaly from the mean one, by bisection of Kepler's equation.

    Parameters
    ----------
    mean : float  [rad]
        0..2 pi.
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float  [rad]
        -pi..pi.

    References
    ----------
    Kepler's equation, M = E - e sin E; tan(f/2) = sqrt((1+e)/(1-e)) tan(E/2).
    """
    low, high = 0.0, 2.0 * pi
    for _ in range(60):  # to the last bit of a float
        middle = 0.5 * (low + high)
        low, high = (low, middle) if middle - eccentricity * sin(middle) > mean else (middle, high)
    half = 0.5 * (low + high) / 2.0
    return 2.0 * atan2(sqrt(1.0 + eccentricity) * sin(half), sqrt(1.0 - eccentricity) * cos(half))


def collapsed_mass(mass, coefficient=0.084):
    """Gravitational mass of a neutron star that a white dwarf of some mass collapses to.

    Parameters
    ----------
    mass : float  [solMass]
        Of the white dwarf, taken as the baryonic mass.
    coefficient : float  [1/solMass]
        From memory.

    Returns
    -------
    float  [solMass]
        m' with m' + coefficient m'^2 = m; the difference leaves as neutrinos.

    References
    ----------
    Lattimer & Yahil 1989, ApJ 340, 426.
    """
    return 2.0 * mass / (1.0 + sqrt(1.0 + 4.0 * coefficient * mass))


__all__ = ["Aftermath", "collapsed_mass", "sudden_change", "true_anomaly"]

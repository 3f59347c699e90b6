"""Sudden loss of mass, with or without a kick: the orbit after a supernova or a collapse."""

from math import atan2, cos, hypot, sin, sqrt
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
    mass_before, mass_after, mass_other, separation, kick=0.0, polar=0.0, azimuth=0.0
):
    """The orbit after one star of a circular pair changes its mass at once, and is kicked.

    Parameters
    ----------
    mass_before, mass_after : float  [solMass]
        Of the star that explodes or collapses.
    mass_other : float  [solMass]
        Of its companion, which is left alone.
    separation : float  [solRad]
        Of the circular orbit before.
    kick : float  [solRad/yr]
        Speed of the kick.
    polar : float  [rad]
        Angle between the kick and the star's orbital velocity.
    azimuth : float  [rad]
        Of the kick about that velocity: 0 towards or away from the companion, pi/2 along
        the normal of the orbital plane.

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
    speed = sqrt(G * before / separation)
    along = speed + kick * cos(polar)
    radial, normal = kick * sin(polar) * cos(azimuth), kick * sin(polar) * sin(azimuth)
    square = along * along + radial * radial + normal * normal
    inverse = 2.0 / separation - square / (G * after)
    # e^2 by the eccentricity vector, which keeps its digits where 1 - h^2/(G M a) loses them
    transverse = along * along + normal * normal
    aside = transverse * separation / (G * after) - 1.0
    across = radial * sqrt(transverse) * separation / (G * after)
    own = speed * mass_other / before
    companion = -speed * mass_before / before
    drift = sqrt(
        (mass_after * (own + kick * cos(polar)) + mass_other * companion) ** 2
        + (mass_after * radial) ** 2
        + (mass_after * normal) ** 2
    )
    return Aftermath(
        separation=1.0 / inverse if inverse != 0.0 else float("inf"),
        eccentricity=hypot(aside, across),
        tilt=atan2(normal, along),
        speed=drift / after,
        bound=inverse > 0.0,
    )


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


__all__ = ["Aftermath", "collapsed_mass", "sudden_change"]

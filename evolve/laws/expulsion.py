"""Expulsion: the specific angular momentum that expelled matter carries off.

In these laws `star` is the donor of the overflow (or of the captured wind), `other` the
accretor that does not keep it. Where the orbit is eccentric the mean over a revolution is
meant.
"""

from math import sqrt

from evolve.constants import G
from evolve.laws.contract import Annotated, Key, Law, NamedTuple, NoKeys
from evolve.orbit.lobes import outer_point


class RingKeys(NamedTuple):
    """Keys of the ring around both stars."""

    ring: Annotated[float, Key("", 1.0, 100.0, "radius of the ring over the separation")] = 2.25


class MultipleKeys(NamedTuple):
    """Keys of a chosen multiple of the mean."""

    multiple: Annotated[float, Key("", 0.0, 100.0, "in units of J/M of the pair")] = 1.0


def from_accretor(star, other, orbit, keys):
    """Matter re-emitted by the accretor, fast and isotropic.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
        The accretor.
    orbit : Orbit
    keys : NoKeys

    Returns
    -------
    float  [solRad2/yr]
        J m_donor/(m_accretor M).

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
    """
    return orbit.angular_momentum * star.mass / (other.mass * orbit.total_mass)


def from_donor(star, other, orbit, keys):
    """Matter that leaves the donor, fast and isotropic (the Jeans mode).

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
        The accretor.
    orbit : Orbit
    keys : NoKeys

    Returns
    -------
    float  [solRad2/yr]
        J m_accretor/(m_donor M).

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
    """
    return orbit.angular_momentum * other.mass / (star.mass * orbit.total_mass)


def from_ring(star, other, orbit, keys):
    """Matter that leaves from a ring around both stars, in Kepler motion about their mass.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
        The accretor.
    orbit : Orbit
    keys : RingKeys

    Returns
    -------
    float  [solRad2/yr]
        sqrt(G M g a), g a the radius of the ring.

    Notes
    -----
    As Jdot/J: -sqrt(g) mdot M/(m1 m2) / sqrt(1-e^2). Papers often write gamma for sqrt(g).

    References
    ----------
    Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
    """
    return sqrt(G * orbit.total_mass * keys.ring * orbit.separation)


def from_outer_point(star, other, orbit, keys):
    """Matter that leaves through the outer Lagrange point, corotating there.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
        The accretor.
    orbit : Orbit
        Taken as circular.
    keys : NoKeys

    Returns
    -------
    float  [solRad2/yr]
        x_L^2 Omega, x_L the distance of the point from the centre of mass.

    Notes
    -----
    The point lies beyond the lighter star and changes sides where the masses are equal.

    References
    ----------
    Shu, Lubow & Anderson 1979, ApJ 229, 223.
    """
    distance = orbit.separation * outer_point(star.mass, other.mass)
    return distance * distance * orbit.omega


def as_multiple(star, other, orbit, keys):
    """Matter that carries off a chosen multiple of the pair's mean.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
        The accretor.
    orbit : Orbit
    keys : MultipleKeys

    Returns
    -------
    float  [solRad2/yr]
        k J/M.

    References
    ----------
    None: a number to try.
    """
    return keys.multiple * orbit.angular_momentum / orbit.total_mass


_SOBERMAN = ("soberman-1997",)

TABLE = {
    "accretor": Law(from_accretor, NoKeys, _SOBERMAN, "fast winds and jets of the accretor"),
    "donor": Law(from_donor, NoKeys, _SOBERMAN, "matter that is fast when it leaves the donor"),
    "ring": Law(from_ring, RingKeys, _SOBERMAN, "matter that leaves slowly, from a ring"),
    "outer-point": Law(
        from_outer_point, NoKeys, ("shu-1979",), "circular orbits; slow loss through the point"
    ),
    "multiple": Law(as_multiple, MultipleKeys, (), "any: a way to try a number"),
}

"""Consequential loss: angular momentum lost because matter flows, in place of expulsion's."""

from evolve.laws.contract import Law, NoKeys

COEFFICIENT = 0.35
"""nu m_wd [solMass], from memory."""


def schreiber_2016(star, other, orbit, keys):
    """Angular momentum lost per unit of overflow, stronger on lighter white dwarfs.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
        The white dwarf.
    orbit : Orbit
    keys : NoKeys

    Returns
    -------
    float  [solRad2/yr]
        nu J/m_donor, nu = 0.35/m_wd (solMass; from memory).

    Notes
    -----
    An empirical law: it was chosen so that low-mass white dwarfs become dynamically unstable
    and disappear, as observed. In place of the torque of the expelled matter.

    References
    ----------
    Schreiber, Zorotovic & Wijnen 2016, MNRAS 455, L16.
    """
    return COEFFICIENT * orbit.angular_momentum / (star.mass * other.mass)


TABLE = {
    "schreiber-2016": Law(
        schreiber_2016,
        NoKeys,
        ("schreiber-2016",),
        "cataclysmic variables: a white dwarf that expels what it receives",
    ),
}

"""Tides in the limit of weak friction: a constant small lag in time.

The torque acts on the spin of `star`, its opposite on the orbit; each star brings its own.
"""

from math import pi, sqrt

from evolve.laws.contract import Annotated, Key, Law, NamedTuple

TURNOVER = 0.431  # yr, from memory
DARWIN = 3.0
"""A pair can be synchronous and stable while its orbit has this many times the spins' J."""


class TidesKeys(NamedTuple):
    """Keys of the tides."""

    k_over_t: Annotated[
        float,
        Key("1/yr", 0.0, 1e12, "apsidal constant over tidal time; 0: from convective turnover"),
    ] = 0.0


def friction_rate(
    mass, radius, luminosity, envelope_mass, envelope_depth, orbital_frequency, spin
):
    """k/T of a star with a convective envelope, from the turnover time of its eddies.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    luminosity : float  [solLum]
    envelope_mass : float  [solMass]
        Of the convective envelope.
    envelope_depth : float  [solRad]
        Of the convective envelope.
    orbital_frequency, spin : float  [rad/yr]

    Returns
    -------
    float  [1/yr]
        (2/21) (F/tau) m_env/m; 0 without a convective envelope or without light.

    Notes
    -----
    tau = 0.431 yr [m_env R_env (R - R_env/2)/(3 L)]^(1/3) (solar units; constant from
    memory); eddies that turn over more slowly than the tide help less, F = 1/(1 +
    (2 tau/P_t)^2), 1/P_t = |n - spin|/(2 pi).

    References
    ----------
    Zahn 1977, A&A 57, 383; Rasio et al. 1996, ApJ 470, 1187.
    """
    if envelope_mass <= 0.0 or envelope_depth <= 0.0 or luminosity <= 0.0:
        return 0.0
    heated = envelope_mass * envelope_depth * (radius - 0.5 * envelope_depth)
    turnover = TURNOVER * (heated / (3.0 * luminosity)) ** (1.0 / 3.0)
    slow = turnover * abs(orbital_frequency - spin) / pi
    return 2.0 / 21.0 * envelope_mass / (mass * turnover * (1.0 + slow * slow))


def hut_1981(star, other, orbit, keys):
    """Tidal torque on the spin of a star, averaged over the orbit.

    Parameters
    ----------
    star : Star
        The star that is deformed; its spin is used.
    other : Star
        The companion that raises the tide.
    orbit : Orbit
    keys : TidesKeys

    Returns
    -------
    float  [solMass solRad2 / yr2]
        > 0 spins the star up; the orbit feels the opposite.

    Notes
    -----
    3 (k/T) Q^2 m R^2 (R/a)^6 n s^-6 [f2(e) - s^(3/2) f5(e) spin/n], Q = m_other/m, s = 1-e^2.
    Spin parallel to the orbit; equilibrium tide; no resonance.

    References
    ----------
    Hut 1981, A&A 99, 126, eq. 11.
    """
    friction = keys.k_over_t
    if friction <= 0.0:
        friction = friction_rate(
            star.mass, star.radius, star.luminosity, star.envelope_mass,
            star.envelope_depth, orbit.omega, star.spin,
        )  # fmt: skip
    e2 = orbit.eccentricity * orbit.eccentricity
    s = (1.0 - orbit.eccentricity) * (1.0 + orbit.eccentricity)
    f2 = 1.0 + e2 * (7.5 + e2 * (5.625 + e2 * 0.3125))
    f5 = 1.0 + e2 * (3.0 + e2 * 0.375)
    mass_ratio = other.mass / star.mass
    relative = star.radius * star.radius / (orbit.separation * orbit.separation)
    strength = 3.0 * friction * mass_ratio * mass_ratio * star.mass * star.radius * star.radius
    strength *= (relative / (s * s)) ** 3
    return strength * (f2 * orbit.omega - s * sqrt(s) * f5 * star.spin)


def eccentricity_rate(star, other, orbit, keys):
    """Change of the eccentricity by the tide raised on a star, averaged over the orbit.

    Parameters
    ----------
    star : Star
        The star that is deformed; its spin is used.
    other : Star
        The companion that raises the tide.
    orbit : Orbit
    keys : TidesKeys

    Returns
    -------
    float  [1/yr]
        < 0 unless the star spins faster than about 18/11 of the orbit.

    Notes
    -----
    -27 (k/T) Q (1+Q) (R/a)^8 e s^(-13/2) [f3(e) - (11/18) s^(3/2) f4(e) spin/n].

    References
    ----------
    Hut 1981, A&A 99, 126, eq. 10.
    """
    friction = keys.k_over_t
    if friction <= 0.0:
        friction = friction_rate(
            star.mass, star.radius, star.luminosity, star.envelope_mass,
            star.envelope_depth, orbit.omega, star.spin,
        )  # fmt: skip
    e2 = orbit.eccentricity * orbit.eccentricity
    s = (1.0 - orbit.eccentricity) * (1.0 + orbit.eccentricity)
    f3 = 1.0 + e2 * (3.75 + e2 * (1.875 + e2 * 0.078125))
    f4 = 1.0 + e2 * (1.5 + e2 * 0.125)
    mass_ratio = other.mass / star.mass
    root = s * sqrt(s)
    relative = star.radius * star.radius / (orbit.separation * orbit.separation)
    strength = -27.0 * friction * mass_ratio * (1.0 + mass_ratio) * relative**4
    strength *= orbit.eccentricity / (s * s * s * s * s * root)
    return strength * (f3 - 11.0 / 18.0 * root * f4 * star.spin / orbit.omega)


def spin_momentum(mass, radius, gyration, spin):
    """Angular momentum of a star's rotation.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    gyration : float
        k2 of I = k2 m R2.
    spin : float  [rad/yr]

    Returns
    -------
    float  [solMass solRad2 / yr]
    """
    return gyration * mass * radius * radius * spin


def darwin_margin(orbital_momentum, synchronous_momentum):
    """How far a synchronous pair is from the loss of its last stable orbit.

    Parameters
    ----------
    orbital_momentum : float  [solMass solRad2 / yr]
    synchronous_momentum : float  [solMass solRad2 / yr]
        (I_A + I_B) n: of both spins at the orbital frequency.

    Returns
    -------
    float
        J_orb / (3 (I_A + I_B) n) - 1; below 0 no synchronous orbit is stable.

    References
    ----------
    Darwin 1879, Proc. R. Soc. London 29, 168; Hut 1980, A&A 92, 167.
    """
    return orbital_momentum / (DARWIN * synchronous_momentum) - 1.0


TABLE = {
    "hut-1981": Law(
        hut_1981,
        TidesKeys,
        ("hut-1981", "zahn-1977", "rasio-1996"),
        "weak friction, spin parallel to the orbit; k/T by itself for convective envelopes only",
        second=eccentricity_rate,
    ),
}

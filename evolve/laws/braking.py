"""Magnetic braking: the torque of a magnetised wind on a star with a convective envelope.

Every law uses the star's own spin. Where the stars corotate the spin is the orbit's mean
motion and the torque is passed on to the orbit.
"""

from math import log10, sqrt

from evolve.constants import CM_PER_RSUN, S_PER_YEAR, T_SUN, TORQUE_CGS
from evolve.laws.contract import Annotated, Key, Law, NamedTuple

# the factor that turns (g) (cm)^4 (s)^-3, written in internal units, into a torque
_MOMENT = CM_PER_RSUN**2 / S_PER_YEAR
RAPPAPORT = -3.8e-30 * _MOMENT
VERBUNT = -0.5e-28 * _MOMENT
SATURATED = -2.7e47 / (S_PER_YEAR**3 * TORQUE_CGS)  # from memory, as is the next
CRITICAL_SPIN = 2.9e-5 * S_PER_YEAR
IVANOVA = -6e30 / TORQUE_CGS  # from memory, as are the next two
SPIN_SUN = 3e-6 * S_PER_YEAR
SPIN_LIMIT = 10.0

_STRENGTH = Key("", 0.0, 1e6, "factor on the torque")


class RappaportKeys(NamedTuple):
    """Keys of the braking law of 1983."""

    gamma: Annotated[float, Key("", 0.0, 4.0, "exponent of the stellar radius")] = 3.0
    strength: Annotated[float, _STRENGTH] = 1.0


class VerbuntKeys(NamedTuple):
    """Keys of the braking law of 1981."""

    f: Annotated[
        float, Key("", 0.0, 10.0, "spin-down of Sun-like stars; 0.73 or 1.78", open_low=True)
    ] = 0.73
    k2: Annotated[
        float, Key("", 0.0, 0.4, "squared radius of gyration over R2 in that spin-down")
    ] = 0.1
    strength: Annotated[float, _STRENGTH] = 1.0


class BrakingKeys(NamedTuple):
    """Keys of a braking law that has nothing but a strength."""

    strength: Annotated[float, _STRENGTH] = 1.0


def rappaport_verbunt_joss_1983(star, other, orbit, keys):
    """Braking torque with a free exponent of the radius.

    Parameters
    ----------
    star : Star
        The star that is braked.
    other : Star
    orbit : Orbit
    keys : RappaportKeys

    Returns
    -------
    float  [solMass solRad2 / yr2]
        <= 0.

    Notes
    -----
    -3.8e-30 m R_sun^4 (R/R_sun)^gamma Omega^3 dyn cm, with m in g, R_sun in cm, Omega in
    1/s. The spin-down of slowly rotating Sun-like stars, carried on to short periods.

    References
    ----------
    Rappaport, Verbunt & Joss 1983, ApJ 275, 713, eq. 36.
    """
    spin = star.spin
    return RAPPAPORT * keys.strength * star.mass * star.radius**keys.gamma * spin * spin * spin


def verbunt_zwaan_1981(star, other, orbit, keys):
    """Braking torque from the spin-down of Sun-like stars with age.

    Parameters
    ----------
    star : Star
        The star that is braked.
    other : Star
    orbit : Orbit
    keys : VerbuntKeys

    Returns
    -------
    float  [solMass solRad2 / yr2]
        <= 0.

    Notes
    -----
    -0.5e-28 f^-2 k2 m R^4 Omega^3 dyn cm (cgs), from an equatorial speed of f 1e14 t^(-1/2)
    cm/s, t in s: f = 0.73 (Smith 1979) or 1.78 (Skumanich 1972). Constants from memory;
    consistent with that spin-down.

    References
    ----------
    Verbunt & Zwaan 1981, A&A 100, L7.
    """
    square = star.radius * star.radius
    spin = star.spin
    result = VERBUNT * keys.strength * keys.k2 / (keys.f * keys.f)
    return result * star.mass * square * square * spin * spin * spin


def andronov_2003(star, other, orbit, keys):
    """Braking torque that saturates: the cube of the spin, above a critical spin its first power.

    Parameters
    ----------
    star : Star
        The star that is braked.
    other : Star
    orbit : Orbit
    keys : BrakingKeys

    Returns
    -------
    float  [solMass solRad2 / yr2]
        <= 0.

    Notes
    -----
    -2.7e47 (R/m)^(1/2) Omega min(Omega, Omega_crit)^2 dyn cm (R, m solar, Omega in 1/s),
    Omega_crit = 2.9e-5 /s times tau_sun/tau, the turnover time tau/tau_sun =
    10^(-1.49 l - 0.54 l^2), l = log10 m, held outside 0.09..1.3 solMass. Constants from
    memory. The turnover times are those of Wright et al. 2011, not of the paper of 2003.

    References
    ----------
    Sills, Pinsonneault & Terndrup 2000, ApJ 534, 335; Andronov, Pinsonneault & Sills 2003,
    ApJ 582, 358; Wright et al. 2011, ApJ 743, 48.
    """
    spin = star.spin
    logarithm = log10(min(max(star.mass, 0.09), 1.3))
    critical = CRITICAL_SPIN * 10.0 ** (logarithm * (1.49 + 0.54 * logarithm))
    lower = min(spin, critical)
    return SATURATED * keys.strength * sqrt(star.radius / star.mass) * spin * lower * lower


def ivanova_taam_2003(star, other, orbit, keys):
    """Braking torque of a wind that flows along a dipole: steep for slow, shallow for fast spin.

    Parameters
    ----------
    star : Star
        The star that is braked; its temperature is used.
    other : Star
    orbit : Orbit
    keys : BrakingKeys

    Returns
    -------
    float  [solMass solRad2 / yr2]
        <= 0.

    Notes
    -----
    -6e30 R^4 (T/T_sun)^(1/2) w^3 dyn cm up to w = 10, and w^1.3 10^1.7 in place of the cube
    above (R solar, w = Omega/Omega_sun, Omega_sun = 3e-6 /s). Constants from memory.

    References
    ----------
    Ivanova & Taam 2003, ApJ 599, 516.
    """
    square = star.radius * star.radius
    relative = star.spin / SPIN_SUN
    if relative <= SPIN_LIMIT:
        rotation = relative * relative * relative
    else:
        rotation = relative**1.3 * SPIN_LIMIT**1.7
    return IVANOVA * keys.strength * square * square * sqrt(star.temperature / T_SUN) * rotation


TABLE = {
    "rappaport-verbunt-joss-1983": Law(
        rappaport_verbunt_joss_1983,
        RappaportKeys,
        ("rappaport-verbunt-joss-1983",),
        "stars with a convective envelope, 0.2..1.25 solMass; calibrated on slow rotation",
    ),
    "verbunt-zwaan-1981": Law(
        verbunt_zwaan_1981,
        VerbuntKeys,
        ("verbunt-zwaan-1981",),
        "stars with a convective envelope, about 0.3..1.25 solMass; calibrated on slow rotation",
    ),
    "andronov-2003": Law(
        andronov_2003,
        BrakingKeys,
        ("sills-2000", "andronov-2003", "wright-2011"),
        "low-mass main-sequence stars, 0.09..1.3 solMass (turnover time held outside)",
    ),
    "ivanova-taam-2003": Law(
        ivanova_taam_2003,
        BrakingKeys,
        ("ivanova-taam-2003",),
        "low-mass stars with a convective envelope and a known temperature",
    ),
}

"""Winds: how much a star loses, how fast it is at the companion, how much that catches."""

from math import log10, sqrt

from evolve.constants import KM_S, C, G
from evolve.laws.contract import Annotated, Key, Law, NamedTuple

EDDINGTON_FACTOR = 2.60e-5  # electron scattering: Gamma = this times L/m
LARGEST_EDDINGTON = 0.9
HOT_RATIO, COOL_RATIO, COOLEST_RATIO = 2.6, 1.3, 0.7  # v_inf/v_esc; the last from memory
SLOWEST = 0.05
LARGEST_CAPTURE = 0.8

# Vink et al. 2001, from memory; each side's constant with its own v_inf/v_esc put in
_HOT = -6.697 - 1.226 * log10(HOT_RATIO / 2.0)
_COOL = -6.688 - 1.601 * log10(COOL_RATIO / 2.0)
_LOG_4E4, _LOG_2E4, _LOG_30, _LOG_SOLAR = log10(4e4), log10(2e4), log10(30.0), log10(0.02)
_NIEUWENHUIJZEN = 10.0**-14.02  # from memory, with its three exponents

_STRENGTH = Key("", 0.0, 1e6, "factor on the rate")

DEFAULT_SPEEDS = {"reimers-1975": 15.0 / KM_S}
"""Speed at the companion [solRad/yr] of a wind law that has one of its own; the others take
`wind_speed`, the star's escape speed times a ratio that goes by temperature."""


class ConstantKeys(NamedTuple):
    """Keys of a wind of constant rate."""

    rate: Annotated[float, Key("solMass/yr", 0.0, 1.0, "mass lost in the wind")]


class ReimersKeys(NamedTuple):
    """Keys of Reimers' wind of cool giants."""

    eta: Annotated[
        float, Key("", 0.0, 1e4, "efficiency; 0.477 fits globular clusters, 1 the first sample")
    ] = 0.477


class NieuwenhuijzenKeys(NamedTuple):
    """Keys of the wind fitted over the whole Hertzsprung-Russell diagram."""

    strength: Annotated[float, _STRENGTH] = 1.0


class VinkKeys(NamedTuple):
    """Keys of the line-driven wind of hot stars."""

    metallicity: Annotated[
        float, Key("", 0.0, 0.1, "mass fraction Z of heavy elements", open_low=True)
    ] = 0.02
    strength: Annotated[float, _STRENGTH] = 1.0


class CaptureKeys(NamedTuple):
    """Keys of the capture of a wind."""

    speed: Annotated[
        float, Key("solRad/yr", 0.0, C, "of the wind at the companion; 0: from the star")
    ] = 0.0
    efficiency: Annotated[
        float, Key("", 0.0, 4.0, "2 for Hoyle-Lyttleton, 1 for Bondi, 1.5 between")
    ] = 1.5


def constant(star, other, orbit, keys):
    """A wind of constant rate.

    Parameters
    ----------
    star, other : Star
    orbit : Orbit
    keys : ConstantKeys

    Returns
    -------
    float  [solMass/yr]
        >= 0.

    References
    ----------
    None: the rate is the user's.
    """
    return keys.rate


def reimers_1975(star, other, orbit, keys):
    """Wind of a cool giant, from its luminosity, radius and mass.

    Parameters
    ----------
    star : Star
        The star that blows.
    other : Star
    orbit : Orbit
    keys : ReimersKeys

    Returns
    -------
    float  [solMass/yr]
        4e-13 eta L R / m (solar units).

    References
    ----------
    Reimers 1975, Mem. Soc. R. Sci. Liege 8, 369; eta: McDonald & Zijlstra 2015, MNRAS 448, 502.
    """
    return 4e-13 * keys.eta * star.luminosity * star.radius / star.mass


def nieuwenhuijzen_dejager_1990(star, other, orbit, keys):
    """Wind of any star of the Hertzsprung-Russell diagram, a mean relation.

    Parameters
    ----------
    star : Star
        The star that blows.
    other : Star
    orbit : Orbit
    keys : NieuwenhuijzenKeys

    Returns
    -------
    float  [solMass/yr]
        10^-14.02 L^1.24 m^0.16 R^0.81 (solar units).

    Notes
    -----
    Constants from memory.

    References
    ----------
    Nieuwenhuijzen & de Jager 1990, A&A 231, 134.
    """
    size = star.mass**0.16 * star.radius**0.81
    return _NIEUWENHUIJZEN * keys.strength * star.luminosity**1.24 * size


def _blend(temperature, low, high):
    """Weight that rises from 0 at `low` to 1 at `high` as a cubic."""
    if temperature <= low:
        return 0.0
    if temperature >= high:
        return 1.0
    x = (temperature - low) / (high - low)
    return x * x * (3.0 - 2.0 * x)


def vink_2001(star, other, orbit, keys):
    """Line-driven wind of an O or B star, on both sides of the bi-stability jump.

    Parameters
    ----------
    star : Star
        The star that blows.
    other : Star
    orbit : Orbit
    keys : VinkKeys

    Returns
    -------
    float  [solMass/yr]
        >= 0; 0 without a luminosity.

    Notes
    -----
    Hot side, 27500..50000 K, v_inf/v_esc = 2.6:
    log = -6.697 + 2.194 log(L/1e5) - 1.313 log(m/30) - 1.226 log(2.6/2)
    + 0.933 log(T/4e4) - 10.92 log^2(T/4e4) + 0.85 log(Z/0.02).
    Cool side, 12500..22500 K, v_inf/v_esc = 1.3:
    log = -6.688 + 2.210 log(L/1e5) - 1.339 log(m/30) - 1.601 log(1.3/2)
    + 1.07 log(T/2e4) + 0.85 log(Z/0.02).
    Constants from memory. Ours: between the sides the logarithms are blended, each side
    held at its own edge temperature; from 12500 down to 10000 K the rate passes over, in the
    same way, to that of Nieuwenhuijzen & de Jager, which holds below; 50000 K holds above.

    References
    ----------
    Vink, de Koter & Lamers 2001, A&A 369, 574, eq. 24 and 25; Nieuwenhuijzen & de Jager
    1990, A&A 231, 134.
    """
    if star.luminosity <= 0.0:
        return 0.0
    luminosity, temperature = log10(star.luminosity), star.temperature
    mass = log10(star.mass)
    hot = _blend(temperature, 22500.0, 27500.0)
    warm = _blend(temperature, 10000.0, 12500.0)
    line_driven = 0.0
    if hot > 0.0:
        t = log10(min(max(temperature, 27500.0), 50000.0)) - _LOG_4E4
        side = _HOT + 2.194 * (luminosity - 5.0) - 1.313 * (mass - _LOG_30)
        line_driven += hot * (side + t * (0.933 - 10.92 * t))
    if hot < 1.0:
        t = log10(min(max(temperature, 12500.0), 22500.0)) - _LOG_2E4
        side = _COOL + 2.210 * (luminosity - 5.0) - 1.339 * (mass - _LOG_30)
        line_driven += (1.0 - hot) * (side + 1.07 * t)
    line_driven += 0.85 * (log10(keys.metallicity) - _LOG_SOLAR)
    if warm < 1.0:
        mean = -14.02 + 1.24 * luminosity + 0.16 * mass + 0.81 * log10(star.radius)
        line_driven = warm * line_driven + (1.0 - warm) * mean
    return keys.strength * 10.0**line_driven


def wind_speed(mass, radius, luminosity, temperature, separation):
    """Speed of a star's wind at the distance of its companion.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
        > 0.
    luminosity : float  [solLum]
    temperature : float  [K]
    separation : float  [solRad]

    Returns
    -------
    float  [solRad/yr]

    Notes
    -----
    v_inf max(1 - R/a, 0.05), v_inf = r v_esc, v_esc^2 = 2 G m (1 - Gamma)/R, Gamma =
    2.60e-5 L/m (electrons), at most 0.9. r = 2.6 above 27500 K, 1.3 in 12500..22500 K, 0.7
    below 10000 K (this one from memory), in between cubics in T.

    References
    ----------
    Castor, Abbott & Klein 1975, ApJ 195, 157 (velocity law); Lamers, Snow & Lindholm 1995,
    ApJ 455, 269 (the ratios r).
    """
    ratio = (
        COOLEST_RATIO
        + (COOL_RATIO - COOLEST_RATIO) * _blend(temperature, 10000.0, 12500.0)
        + (HOT_RATIO - COOL_RATIO) * _blend(temperature, 22500.0, 27500.0)
    )
    gamma = min(EDDINGTON_FACTOR * luminosity / mass, LARGEST_EDDINGTON)
    escape = sqrt(2.0 * G * mass * (1.0 - gamma) / radius)
    return ratio * escape * max(1.0 - radius / separation, SLOWEST)


def bondi_hoyle(star, other, orbit, keys):
    """Share of a wind that the companion catches by gravity, averaged over the orbit.

    Parameters
    ----------
    star : Star
        The star that blows.
    other : Star
        The companion.
    orbit : Orbit
    keys : CaptureKeys

    Returns
    -------
    float
        0..0.8.

    Notes
    -----
    min(0.8, (w/2) (G m_other/(a v^2))^2 (1 + G M/(a v^2))^(-3/2) / sqrt(1-e^2)), w the
    efficiency, v the speed of the wind. The formula is for winds much faster than the
    orbit and exceeds 1 for slow ones, hence the cap.

    References
    ----------
    Bondi & Hoyle 1944, MNRAS 104, 273; Boffin & Jorissen 1988, A&A 205, 155.
    """
    speed = keys.speed
    if speed <= 0.0:
        speed = wind_speed(
            star.mass, star.radius, star.luminosity, star.temperature, orbit.separation
        )
    scale = G / (orbit.separation * speed * speed)
    focus, slow = scale * other.mass, 1.0 + scale * orbit.total_mass
    e = orbit.eccentricity
    share = 0.5 * keys.efficiency * focus * focus / (slow * sqrt(slow * (1.0 - e) * (1.0 + e)))
    return min(share, LARGEST_CAPTURE)


TABLE = {
    "constant": Law(constant, ConstantKeys, (), "a rate known from elsewhere"),
    "reimers-1975": Law(
        reimers_1975,
        ReimersKeys,
        ("reimers-1975", "mcdonald-zijlstra-2015"),
        "red giants (K and M), before the superwind of the asymptotic giant branch",
    ),
    "nieuwenhuijzen-dejager-1990": Law(
        nieuwenhuijzen_dejager_1990,
        NieuwenhuijzenKeys,
        ("nieuwenhuijzen-dejager-1990",),
        "luminous stars of spectral types O to M, solar composition",
    ),
    "vink-2001": Law(
        vink_2001,
        VinkKeys,
        ("vink-2001", "nieuwenhuijzen-dejager-1990"),
        "O and B stars, 12500..50000 K, log L 4.5..6.25, Z 1/30..3 solar; below by the law of 1990",
    ),
}

CAPTURE_TABLE = {
    "bondi-hoyle": Law(
        bondi_hoyle,
        CaptureKeys,
        (
            "bondi-hoyle-1944",
            "boffin-jorissen-1988",
            "castor-abbott-klein-1975",
            "lamers-snow-lindholm-1995",
        ),
        "winds faster than the orbital motion; the share is capped at 0.8",
    ),
}

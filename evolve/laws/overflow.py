"""Overflow: the flow through the inner Lagrange point.

Three laws. `atmosphere`: the photosphere's exponential tail flows before the star touches
its lobe. `polytrope`: nothing below contact, a cubic above. `locked`: no law of the rate
at all. It demands that the radius equals the lobe, and the rate is whatever keeps it so,
which only the sum of all laws can tell; so its entry in the table has no function.
"""

from math import exp, log, log10, pi, sqrt

from evolve.constants import (
    ATOMIC_MASS_SI,
    BOLTZMANN_SI,
    M_SUN_SI,
    R_SUN_SI,
    YEAR_SI,
    G,
)
from evolve.laws.contract import Annotated, Key, Law, NamedTuple, NoKeys

SOUND = BOLTZMANN_SI / ATOMIC_MASS_SI * (YEAR_SI / R_SUN_SI) ** 2
"""k/m_u: square of the isothermal sound speed, times mu/T [solRad2 yr-2 K-1]."""
OPACITY = 0.01 * M_SUN_SI / R_SUN_SI**2
"""0.1 cm2/g in solRad2/solMass: the order of magnitude of a photosphere's opacity. The
reference rate goes as its inverse, which shifts the radius by only H ln(opacity)."""
REFERENCE = 4.0 * pi / (3.0 * exp(0.5) * OPACITY)
LARGEST_EXCESS = 1e6
"""(R - R_L)/H above this counts as this much. H/R above 1e-6 never gets there."""
COOL_WEIGHT, HOT_WEIGHT = 1.3, 0.62
COLD, WARM = log(9e3), log(1.1e4)
LARGEST_LOG = log10(20.0)  # of the mass ratio, either way: the range of the fits
THICKEST = 0.25
"""No atmosphere counts as thicker than this over the radius: none flows from a star that is
smaller than a tenth of its lobe."""
FALLBACK_HEIGHT, FALLBACK_RATE = 1e-4, 1e-8


class AtmosphereKeys(NamedTuple):
    """Keys of the flow from an exponential atmosphere."""

    scale_height: Annotated[
        float,
        Key("", 0.0, 0.1, "pressure scale height H over R; 0: from the star's temperature"),
    ] = 0.0
    reference_rate: Annotated[
        float, Key("solMass/yr", 0.0, 1.0, "rate at R = R_L; 0: from the star's temperature")
    ] = 0.0


class PolytropeKeys(NamedTuple):
    """Keys of the flow from a polytropic envelope."""

    k: Annotated[
        float, Key("", 0.0, 1e4, "factor of the cubic; 10..16 for a convective donor", True)
    ] = 14.0


def mean_weight(temperature):
    """Mean molecular weight of a photosphere of about solar composition.

    Parameters
    ----------
    temperature : float  [K]

    Returns
    -------
    float
        1.3 (neutral) below 9000 K, 0.62 (ionised) above 11000 K, in between a cubic in the
        logarithm of the temperature: a step would be a jump of the rate.

    References
    ----------
    Ritter 1988, A&A 202, 93 (takes one value; these two are textbook numbers).
    """
    if temperature <= 9e3:
        return COOL_WEIGHT
    if temperature >= 1.1e4:
        return HOT_WEIGHT
    x = (log(temperature) - COLD) / (WARM - COLD)
    return COOL_WEIGHT + (HOT_WEIGHT - COOL_WEIGHT) * x * x * (3.0 - 2.0 * x)


def photosphere(mass, radius, lobe, temperature, mass_ratio):
    """Scale height of a donor's atmosphere, and the rate at which it flows at contact.

    Parameters
    ----------
    mass : float  [solMass]
    radius, lobe : float  [solRad]
    temperature : float  [K]
        Below 1 K (a star that has none): the answer is then 1e-4 and 1e-8.
    mass_ratio : float
        m_other / m_self.

    Returns
    -------
    height : float
        Pressure scale height on the way to the inner Lagrange point, over the radius,
        k T R/(mu m_u G m g); at most 0.25, for a star that hardly holds its atmosphere.
    rate : float  [solMass/yr]
        F0 = (2 pi/sqrt(e)) f R_L^3/(G m) (k T/(mu m_u))^(3/2) rho_ph, with rho_ph =
        (2/3) (G m/R^2) mu m_u/(kappa k T) and kappa = 0.1 cm2/g.

    Notes
    -----
    With l = log10 mass_ratio, held outside 0.05..20: the cross-section of the nozzle is
    f = 1.222 + 0.543 l + 0.043 l^2 - 0.052 l^3, within 0.7 % of the exact one (Ritter's own
    fit: 1.23 + 0.5 l for 0.5..10). How fast the potential rises with the volume-equivalent
    radius of the star is g = 0.830 - 0.0226 l - 0.0410 l^2 + 0.0161 l^3, within 0.4 %.

    References
    ----------
    Ritter 1988, A&A 202, 93; the fits are to the exact equipotentials.
    """
    if temperature < 1.0:
        return FALLBACK_HEIGHT, FALLBACK_RATE
    x = log10(mass_ratio)
    if x < -LARGEST_LOG:
        x = -LARGEST_LOG
    elif x > LARGEST_LOG:
        x = LARGEST_LOG
    square = SOUND * temperature / mean_weight(temperature)  # of the isothermal sound speed
    gradient = 0.830 + x * (-0.0226 + x * (-0.0410 + 0.0161 * x))
    nozzle = 1.222 + x * (0.543 + x * (0.043 - 0.052 * x))
    area = lobe * lobe * lobe / (radius * radius)
    height = min(square * radius / (G * mass * gradient), THICKEST)
    return height, REFERENCE * nozzle * sqrt(square) * area


def excess(star, other, orbit, keys):
    """How far a star reaches beyond its lobe, in scale heights of its atmosphere.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
    orbit : Orbit
    keys : AtmosphereKeys

    Returns
    -------
    float
        x = (R - R_L)/H, < 0 within the lobe. Not capped.

    References
    ----------
    Ritter 1988, A&A 202, 93.
    """
    height = keys.scale_height
    if height <= 0.0:
        height = photosphere(
            star.mass, star.radius, star.lobe, star.temperature, other.mass / star.mass
        )[0]
    return (1.0 - star.lobe / star.radius) / height


def atmosphere(star, other, orbit, keys):
    """Isothermal flow of an exponential atmosphere through the inner Lagrange point.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
    orbit : Orbit
    keys : AtmosphereKeys

    Returns
    -------
    float  [solMass/yr]
        F0 exp(x) below contact, F0 (1 + x + x^2/2 + x^3/6) above, x = (R - R_L)/H.

    Notes
    -----
    The continuation above contact joins with three derivatives. Like the flow from the
    deep, adiabatic layers (Kolb & Ritter 1990) it goes as the cube of the excess, and
    unlike the exponential it stays finite for any trial state of an integration; x counts
    as 1e6 at most.

    References
    ----------
    Ritter 1988, A&A 202, 93; Kolb & Ritter 1990, A&A 236, 385.
    """
    height, rate = keys.scale_height, keys.reference_rate
    if height <= 0.0 or rate <= 0.0:
        own_height, own_rate = photosphere(
            star.mass, star.radius, star.lobe, star.temperature, other.mass / star.mass
        )
        if height <= 0.0:
            height = own_height
        if rate <= 0.0:
            rate = own_rate
    x = (1.0 - star.lobe / star.radius) / height
    if x <= 0.0:
        return rate * exp(x)
    if x > LARGEST_EXCESS:
        x = LARGEST_EXCESS
    return rate * (1.0 + x * (1.0 + x * (0.5 + x / 6.0)))


def polytrope(star, other, orbit, keys):
    """Adiabatic flow of a convective envelope through the inner Lagrange point.

    Parameters
    ----------
    star : Star
        The donor.
    other : Star
    orbit : Orbit
    keys : PolytropeKeys

    Returns
    -------
    float  [solMass/yr]
        0 below contact, k (m/P) ((R - R_L)/R)^3 above.

    References
    ----------
    Paczynski & Sienkiewicz 1972, Acta Astron. 22, 73.
    """
    depth = 1.0 - star.lobe / star.radius
    if depth <= 0.0:
        return 0.0
    return keys.k * star.mass * orbit.omega / (2.0 * pi) * depth * depth * depth


TABLE = {
    "atmosphere": Law(
        atmosphere,
        AtmosphereKeys,
        ("ritter-1988", "kolb-ritter-1990"),
        "donors with a thin photosphere (H much below R); mass ratios 0.05..20, held outside",
        second=excess,
    ),
    "polytrope": Law(
        polytrope,
        PolytropeKeys,
        ("paczynski-sienkiewicz-1972",),
        "donors with a convective envelope (adiabatic index 5/3), R - R_L much below R",
    ),
    "locked": Law(
        None,
        NoKeys,
        (),
        "the rate that keeps R = R_L, solved for by the equations of the pair; stable overflow",
    ),
}

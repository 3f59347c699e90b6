"""The disc around an accretor: its size, whether there is one, when it is stable.

Plain functions. Mass ratios here are donor over accretor, as long as a donor overflows.
All constants from memory.
"""

from math import log10

from evolve.constants import CM_PER_RSUN, G_PER_MSUN, S_PER_YEAR

_RATE = S_PER_YEAR / G_PER_MSUN  # 1 g/s in solMass/yr
_LENGTH = CM_PER_RSUN / 1e10  # 1 solRad in 1e10 cm
HELIUM_FACTOR = 10.0
"""Discs of helium turn unstable at rates about this much higher (to a factor of a few)."""


def disc_radius(mass_ratio, separation):
    """Outer radius of a disc that tides cut off.

    Parameters
    ----------
    mass_ratio : float
        m_donor / m_accretor.
    separation : float  [solRad]

    Returns
    -------
    float  [solRad]
        0.6 a/(1+q), meant for q of 0.03..1.

    References
    ----------
    Warner 1995, Cataclysmic Variable Stars, eq. 2.61.
    """
    return 0.6 * separation / (1.0 + mass_ratio)


def circularisation_radius(mass_ratio, separation):
    """Radius of the circular orbit that overflowing matter settles into.

    Parameters
    ----------
    mass_ratio : float
        m_donor / m_accretor.
    separation : float  [solRad]

    Returns
    -------
    float  [solRad]
        (1+q) (0.5 - 0.227 log10 q)^4 a; without a disc where it is inside the accretor.

    References
    ----------
    Frank, King & Raine 2002, Accretion Power in Astrophysics, eq. 4.21.
    """
    return (1.0 + mass_ratio) * (0.5 - 0.227 * log10(mass_ratio)) ** 4 * separation


def forms_disc(mass_ratio, separation, radius_accretor):
    """Whether overflowing matter circles the accretor rather than hit it.

    Parameters
    ----------
    mass_ratio : float
        m_donor / m_accretor.
    separation, radius_accretor : float  [solRad]

    Returns
    -------
    bool

    References
    ----------
    Frank, King & Raine 2002, Accretion Power in Astrophysics, sec. 4.5.
    """
    return circularisation_radius(mass_ratio, separation) > radius_accretor


def critical_rate(mass_accretor, radius, viscosity=0.1, helium=False):
    """Rate above which a disc that only its own heat ionises is hot and stable throughout.

    Parameters
    ----------
    mass_accretor : float  [solMass]
    radius : float  [solRad]
        Outer radius of the disc.
    viscosity : float
        alpha of the hot state.
    helium : bool
        A disc of helium: ten times the rate, good to a factor of a few.

    Returns
    -------
    float  [solMass/yr]
        8.07e15 (R/1e10 cm)^2.64 m^-0.89 (alpha/0.1)^-0.01 g/s.

    References
    ----------
    Lasota, Dubus & Kruk 2008, A&A 486, 523.
    """
    rate = 8.07e15 * (radius * _LENGTH) ** 2.64 * mass_accretor**-0.89
    return rate * (viscosity / 0.1) ** -0.01 * _RATE * (HELIUM_FACTOR if helium else 1.0)


def critical_rate_irradiated(mass_accretor, radius, irradiation=1e-3):
    """The same for a disc that the X-rays of its accretor heat.

    Parameters
    ----------
    mass_accretor : float  [solMass]
    radius : float  [solRad]
        Outer radius of the disc.
    irradiation : float
        Constant C of the heating.

    Returns
    -------
    float  [solMass/yr]
        9.5e14 (R/1e10 cm)^2.39 m^-0.64 (C/1e-3)^-0.36 g/s.

    References
    ----------
    Lasota, Dubus & Kruk 2008, A&A 486, 523.
    """
    rate = 9.5e14 * (radius * _LENGTH) ** 2.39 * mass_accretor**-0.64
    return rate * (irradiation / 1e-3) ** -0.36 * _RATE


__all__ = [
    "circularisation_radius",
    "critical_rate",
    "critical_rate_irradiated",
    "disc_radius",
    "forms_disc",
]

"""The zero-age main sequence: luminosity and radius of a star that has burnt nothing yet.

Coefficients of Tout et al. 1996 for Z = 0.02, from memory of the publication (they give the
values remembered from it, 0.698 solLum and 0.888 solRad at one solar mass). The fits hold for
0.1..100 solMass, to about 3 % in luminosity and 1 % in radius.
"""

from math import sqrt


def zero_age_luminosity(mass):
    """Luminosity on the zero-age main sequence at solar composition.

    Parameters
    ----------
    mass : float  [solMass]
        Fitted for 0.1..100; the formula is carried on outside.

    Returns
    -------
    float  [solLum]

    References
    ----------
    Tout, Pols, Eggleton & Han 1996, MNRAS 281, 257, eq. 1 (coefficients from memory).
    """
    root = sqrt(mass)
    m2 = mass * mass
    m3 = m2 * mass
    m5 = m3 * m2
    m8 = m5 * m3
    rise = 0.39704170 * m5 * root + 8.52762600 * m8 * m3
    fall = 0.00025546 + m3 + 5.43288900 * m5 + 5.56357900 * m5 * m2 + 0.78866060 * m8
    return rise / (fall + 0.00586685 * m8 * mass * root)


def zero_age_radius(mass):
    """Radius on the zero-age main sequence at solar composition.

    Parameters
    ----------
    mass : float  [solMass]
        Fitted for 0.1..100; the formula is carried on outside.

    Returns
    -------
    float  [solRad]

    References
    ----------
    Tout, Pols, Eggleton & Han 1996, MNRAS 281, 257, eq. 2 (coefficients from memory).
    """
    root = sqrt(mass)
    m2 = mass * mass
    m25 = m2 * root
    m65 = m2 * m2 * m25
    m85 = m65 * m2
    m11 = m85 * m25
    m195 = m85 * m11
    m19 = m195 / root
    rise = 1.71535900 * m25 + 6.59778800 * m65 + 10.08855000 * m11
    rise += 1.01249500 * m19 + 0.07490166 * m195
    fall = 0.01077422 + 3.08223400 * m2 + 17.84778000 * m85 + m19 / root + 0.00022582 * m195
    return rise / fall


__all__ = ["zero_age_luminosity", "zero_age_radius"]

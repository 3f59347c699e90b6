"""Radius and luminosity of the zero-age main sequence, and its lifetime."""


def zero_age_luminosity(mass):
    """Luminosity at zero age, solar composition (Z = 0.02).

    Parameters
    ----------
    mass : float  [solMass]
        0.1..100.

    Returns
    -------
    float  [solLum]
        Good to 3 % of the models fitted. Coefficients from memory.

    References
    ----------
    Tout et al. 1996, MNRAS 281, 257, eq. 1.
    """
    m3 = mass * mass * mass
    m5, m7, m8 = m3 * mass * mass, m3 * m3 * mass, m3 * m3 * mass * mass
    root = mass**0.5
    numerator = 0.39704170 * m5 * root + 8.52762600 * m8 * m3
    return numerator / (
        0.00025546 + m3 + 5.43288900 * m5 + 5.56357900 * m7 + 0.78866060 * m8
        + 0.00586685 * m8 * mass * root
    )  # fmt: skip


def zero_age_radius(mass):
    """Radius at zero age, solar composition (Z = 0.02).

    Parameters
    ----------
    mass : float  [solMass]
        0.1..100.

    Returns
    -------
    float  [solRad]
        Good to 1 % of the models fitted. Coefficients from memory.

    References
    ----------
    Tout et al. 1996, MNRAS 281, 257, eq. 2.
    """
    root = mass**0.5
    m2 = mass * mass
    m8 = m2 * m2 * m2 * m2
    m19 = m8 * m8 * m2 * mass
    numerator = (
        1.71535900 * m2 * root + 6.59778800 * m2 * m2 * m2 * root + 10.08855000 * m8 * m2 * mass
        + 1.01249500 * m19 + 0.07490166 * m19 * root
    )  # fmt: skip
    return numerator / (
        0.01077422 + 3.08223400 * m2 + 17.84778000 * m8 * root + m8 * m8 * m2 * root
        + 0.00022582 * m19 * root
    )  # fmt: skip


def lifetime(mass):
    """Time on the main sequence, solar composition (Z = 0.02).

    Parameters
    ----------
    mass : float  [solMass]
        0.1..100.

    Returns
    -------
    float  [yr]
        0.95 of the time to the base of the giant branch. Coefficients from memory.

    References
    ----------
    Hurley, Pols & Tout 2000, MNRAS 315, 543, eq. 4.
    """
    m2 = mass * mass
    m4 = m2 * m2
    m7 = m4 * m2 * mass
    myr = (1593.890 + 2706.708 * m4 + 146.6143 * m4 * mass * mass**0.5 + m7) / (
        0.04141960 * m2 + 0.3426349 * m7
    )
    return 0.95e6 * myr

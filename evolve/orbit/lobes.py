"""Radius of a Roche lobe by the published fits, and the outer Lagrange point.

Called in the innermost loop of an integration: floats in, float out, only arithmetic and
`math`, and every function compiles under numba. In all of them

    mass_ratio = mass of the star whose lobe is meant / mass of the other star,

and lengths are in units of the separation. The exact lobes stand in `evolve.orbit.roche`.

References
----------
Eggleton 1983, ApJ 268, 368; Paczynski 1971, ARA&A 9, 183.
"""

from math import log1p

PACZYNSKI = 2.0 / 3.0 ** (4.0 / 3.0)
PACZYNSKI_LIMIT = 0.8
"""Mass ratio (self over other) above which Paczynski's one-third power is not used."""


def lobe_fraction(mass_ratio):
    """Volume-equivalent radius of the Roche lobe over the separation, Eggleton's fit.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, > 0.

    Returns
    -------
    float
        R_L/a.

    Notes
    -----
    Against the exact lobe of a synchronous circular orbit the fit is off by -0.51 % (mass
    ratio 3.6) to +0.83 % (0.028) between 1e-5 and 1e6, by -0.53 % at
    1e-6 and -0.64 % at 1e-8.

    References
    ----------
    Eggleton 1983, ApJ 268, 368, eq. 2.
    """
    cube_root = mass_ratio ** (1.0 / 3.0)
    square = cube_root * cube_root
    return 0.49 * square / (0.6 * square + log1p(cube_root))


def lobe_slope(mass_ratio):
    """Logarithmic slope of `lobe_fraction`: d ln(R_L/a) / d ln(m_self/m_other).

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, > 0.

    Returns
    -------
    float
        Falls from 1/3 (light star) to 0 (heavy star).

    Notes
    -----
    Analytic derivative of Eggleton 1983, eq. 2.
    """
    cube_root = mass_ratio ** (1.0 / 3.0)
    logarithm = log1p(cube_root)
    rest = 2.0 * logarithm - cube_root / (1.0 + cube_root)
    return rest / (3.0 * (0.6 * cube_root * cube_root + logarithm))


def lobe_fraction_paczynski(mass_ratio):
    """Roche-lobe radius over the separation, Paczynski's one-third power.

    Parameters
    ----------
    mass_ratio : float
        m_self / m_other, > 0; meant for less than 0.8 (`PACZYNSKI_LIMIT`).

    Returns
    -------
    float
        R_L/a = 2/3^(4/3) (m_self/M)^(1/3).

    Notes
    -----
    Within 2.2 % of the exact lobe for mass ratios of 0.01 to 0.8; too small by 3.4 % at 1,
    by 5.3 % at 1e-4.
    With it the mean density of a star that fills its lobe depends on the period alone.

    References
    ----------
    Paczynski 1971, ARA&A 9, 183.
    """
    return PACZYNSKI * (mass_ratio / (1.0 + mass_ratio)) ** (1.0 / 3.0)


def outer_point(mass_self, mass_other):
    """Distance of the outer Lagrange point from the centre of mass, over the separation.

    The point lies on the axis beyond the lighter star, whichever of the two that is, so
    the order of the arguments does not matter.

    Parameters
    ----------
    mass_self, mass_other : float  [solMass]
        > 0.

    Returns
    -------
    float
        x_L/a: 1.198 for equal masses, at most 1.272 (mass ratio 0.218), towards 1 for a
        very light star.

    Notes
    -----
    With mu the lighter star's share of the mass, attraction and centrifugal force at the
    distance d beyond it balance where mu = d^3 [(1-mu)(2+d)/(1+d)^2 + 1]; the right side
    rises steadily, and its cube root is so nearly linear in d that Newton's method
    converges from the start value (mu/3)^(1/3) for every mu.
    """
    total = mass_self + mass_other
    lighter, heavier = mass_self / total, mass_other / total
    if lighter > heavier:
        lighter, heavier = heavier, lighter
    target = lighter ** (1.0 / 3.0)
    distance = target / 3.0 ** (1.0 / 3.0)
    for _ in range(8):
        beyond = 1.0 + distance
        bracket = heavier * (1.0 + beyond) / (beyond * beyond) + 1.0
        root = bracket ** (1.0 / 3.0)
        slope = root - distance * heavier * (2.0 + beyond) / (
            3.0 * beyond * beyond * beyond * root * root
        )
        step = (target - distance * root) / slope
        distance += step
        if abs(step) <= 1e-13 * distance:
            break
    return heavier + distance


__all__ = [
    "PACZYNSKI_LIMIT",
    "lobe_fraction",
    "lobe_fraction_paczynski",
    "lobe_slope",
    "outer_point",
]

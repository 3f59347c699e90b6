"""How fast a star that is out of equilibrium returns to it."""

from math import exp, log

from evolve.constants import GRAVITATIONAL_TIME

FARTHEST = 1.5
"""Trial states with ln(R/R_eq) beyond this, either way, relax as if it were there."""
MOST = exp(FARTHEST)


def relaxation_rate(masses, radius, equilibrium, luminosity):
    """Rate at which a radius returns to its equilibrium on the Kelvin-Helmholtz time.

    Parameters
    ----------
    masses : float  [solMass2]
        m^2, or m times the mass of the envelope of a giant.
    radius, equilibrium : float  [solRad]
    luminosity : float  [solLum]

    Returns
    -------
    float  [1/yr]
        ln(R_eq/R) R L/(G m^2), with ln(R/R_eq) bounded to +-1.5: > 0 below equilibrium.

    References
    ----------
    D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391 (the thermal term of the radius).
    """
    ratio = radius / equilibrium
    if ratio > MOST:
        ratio = MOST
    elif ratio < 1.0 / MOST:
        ratio = 1.0 / MOST
    return -log(ratio) * ratio * equilibrium * luminosity / (GRAVITATIONAL_TIME * masses)


__all__ = ["FARTHEST", "MOST", "relaxation_rate"]

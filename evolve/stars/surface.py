"""What the surface and the envelope of a star are like where its model does not tell."""

from math import isnan, nan, sqrt

from evolve.constants import T_SUN
from evolve.errors import DomainError
from evolve.stars.zero_age import zero_age_luminosity

FULLY_CONVECTIVE = 0.35
"""Main-sequence stars up to this mass [solMass] are convective to the centre."""
RADIATIVE = 1.25
"""From this mass [solMass] on they have no convective envelope."""


def effective_temperature(radius, luminosity):
    """Effective temperature from radius and luminosity.

    Parameters
    ----------
    radius : float  [solRad]
    luminosity : float  [solLum]

    Returns
    -------
    float  [K]
        5772 (L/R^2)^(1/4).

    References
    ----------
    IAU 2015 Resolution B3 (nominal solar values).
    """
    return T_SUN * sqrt(sqrt(luminosity) / radius)


def light(mass, radius, luminosity, temperature):
    """Luminosity and temperature of a star whose model knows neither.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    luminosity : float  [solLum]
        Constant; 0 if it is not given.
    temperature : float  [K]
        Constant; 0 if it is not given.

    Returns
    -------
    luminosity : float  [solLum]
    temperature : float  [K]
        From whichever of the two is given; from the zero-age luminosity of the mass without.

    References
    ----------
    Tout, Pols, Eggleton & Han 1996, MNRAS 281, 257.
    """
    if temperature > 0.0:
        square = temperature * temperature / (T_SUN * T_SUN)
        return radius * radius * square * square, temperature
    if luminosity <= 0.0:
        luminosity = zero_age_luminosity(mass)
    return luminosity, effective_temperature(radius, luminosity)


def given(values, name, default=nan):
    """A number of a config, or the default where it is absent or None.

    Parameters
    ----------
    values : dict
    name : str
    default : float

    Returns
    -------
    float

    Raises
    ------
    DomainError
        If a word stands where the model needs a number.
    """
    value = values.get(name)
    if value is None or (isinstance(value, float) and isnan(value)):
        return default
    if isinstance(value, str):
        raise DomainError(f'{name} = "{value}" leaves open what this model starts from')
    return float(value)


def given_light(values):
    """Luminosity and temperature of a config, 0 for what is not given.

    Parameters
    ----------
    values : dict

    Returns
    -------
    (float, float)  [solLum], [K]

    Raises
    ------
    DomainError
        If both are given: with the radius, one follows from the other.
    """
    luminosity, temperature = given(values, "luminosity", 0.0), given(values, "temperature", 0.0)
    if luminosity > 0.0 and temperature > 0.0:
        raise DomainError("give luminosity or temperature, not both: the radius ties them")
    return luminosity, temperature


def convective_envelope(mass, radius):
    """Mass and depth of the convective envelope of a low-mass main-sequence star.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]

    Returns
    -------
    envelope_mass : float  [solMass]
    envelope_depth : float  [solRad]

    Notes
    -----
    The whole star up to 0.35 solMass, nothing from 1.25 on; between, the share s^3 of the mass
    and s of the radius, s = (1.25 - m)/0.9: an interpolation of this package, which gives the
    Sun a depth of 0.278 R (0.287 by helioseismology) and 0.021 of its mass (0.02 in solar
    models). Between it may be off by a factor of about two in mass.

    References
    ----------
    Christensen-Dalsgaard, Gough & Thompson 1991, ApJ 378, 413 (depth in the Sun).
    """
    if mass <= FULLY_CONVECTIVE:
        return mass, radius
    share = (RADIATIVE - mass) / (RADIATIVE - FULLY_CONVECTIVE)
    if share <= 0.0:
        return 0.0, 0.0
    return mass * share * share * share, radius * share


__all__ = [
    "FULLY_CONVECTIVE", "RADIATIVE", "convective_envelope", "effective_temperature", "given",
    "given_light", "light",
]  # fmt: skip

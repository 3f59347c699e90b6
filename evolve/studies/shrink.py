"""How long gravitational waves take to merge two masses, and what is seen meanwhile."""

from typing import NamedTuple

import numpy as np

from evolve.errors import ConfigError
from evolve.laws.waves import (
    eccentricity_derivative,
    merger_time,
    period_derivative,
    separation_derivative,
    separation_of_eccentricity,
    wave_frequency_derivative,
)
from evolve.orbit.kepler import chirp_mass, separation_from_period
from evolve.orbit.kepler import period as kepler_period
from evolve.studies.draws import distribution, draw

FRACTIONS = (1.0, 0.5, 0.2, 0.1, 0.05, 0.02, 0.01, 1e-3, 1e-4, 1e-5, 1e-6)
"""Shares of the time to merge at which the table of remaining times stands."""


class Shrinkage(NamedTuple):
    """What waves do to a pair of point masses.

    merger_time [yr]; period [yr]; separation [solRad]; eccentricity; period_derivative (s/s);
    separation_derivative [solRad/yr]; eccentricity_derivative [1/yr]; wave_frequency
    (2/P) [1/yr]; wave_frequency_derivative [1/yr2], of a circular orbit, else NaN;
    chirp_mass [solMass]; table: dict of ndarray (n,): remaining_time [yr], period [yr],
    separation [solRad], eccentricity.
    """

    merger_time: float
    period: float
    separation: float
    eccentricity: float
    period_derivative: float
    separation_derivative: float
    eccentricity_derivative: float
    wave_frequency: float
    wave_frequency_derivative: float
    chirp_mass: float
    table: dict


SCALARS = Shrinkage._fields[:-1]


def shrink(mass_a, mass_b, *, period=None, separation=None, eccentricity=0.0):
    """Time to merge by gravitational waves alone, present rates, and the way there.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    period : float, optional  [yr]
    separation : float, optional  [solRad]
        Exactly one of the two.
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    Shrinkage

    Raises
    ------
    ConfigError
        For values that make no orbit.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224.
    """
    separation = _separation(mass_a, mass_b, period, separation, eccentricity)
    return Shrinkage(
        **_scalars(mass_a, mass_b, separation, eccentricity),
        table=remaining_times(mass_a, mass_b, separation, eccentricity),
    )


def _separation(mass_a, mass_b, period, separation, eccentricity):
    problems = [
        f"{name} = {value:g}: a mass must be positive and finite"
        for name, value in (("mass_a", mass_a), ("mass_b", mass_b))
        if not (0.0 < value < float("inf"))
    ]
    if (period is None) == (separation is None):
        problems.append("give one of period and separation, not both")
    else:
        name, value = ("period", period) if separation is None else ("separation", separation)
        if not 0.0 < value < float("inf"):
            problems.append(f"{name} = {value:g}: must be positive and finite")
    if not 0.0 <= eccentricity < 1.0:
        problems.append(f"eccentricity = {eccentricity:g}: allowed is 0 <= e < 1")
    if problems:
        raise ConfigError(problems)
    return separation_from_period(period, mass_a + mass_b) if separation is None else separation


def remaining_times(mass_a, mass_b, separation, eccentricity=0.0, fractions=FRACTIONS):
    """Period, separation and eccentricity when a share of the time to merge is left.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    separation : float  [solRad]
    eccentricity : float
    fractions : sequence of float
        Of the time to merge, 0 < fraction <= 1.

    Returns
    -------
    dict of ndarray
        remaining_time [yr], period [yr], separation [solRad], eccentricity.

    Notes
    -----
    Circular: a ~ T^(1/4). Eccentric: the eccentricity is the one at which what is left of
    Peters' integral equals the time, found along Peters' a(e).
    """
    total = merger_time(mass_a, mass_b, separation, eccentricity)
    times = np.array(fractions) * total
    if eccentricity == 0.0:
        separations, eccentricities = separation * np.array(fractions) ** 0.25, np.zeros(len(times))
    else:
        found = [
            _eccentricity_left(mass_a, mass_b, separation, eccentricity, time, total)
            for time in times
        ]
        eccentricities = np.array(found)
        separations = np.array(
            [separation_of_eccentricity(e, separation, eccentricity) for e in found]
        )
    return {
        "remaining_time": times,
        "period": kepler_period(separations, mass_a + mass_b),
        "separation": separations,
        "eccentricity": eccentricities,
    }


def _eccentricity_left(mass_a, mass_b, separation, eccentricity, time, total):
    from scipy.optimize import brentq

    if time >= total:
        return eccentricity

    def excess(logarithm):
        e = np.exp(logarithm)
        a = separation_of_eccentricity(e, separation, eccentricity)
        return np.log(merger_time(mass_a, mass_b, a, e) / time)

    return float(np.exp(brentq(excess, np.log(eccentricity) - 60.0, np.log(eccentricity))))


def shrink_uncertain(masses, orbit, eccentricity, count=1000, seed=1):
    """Distributions of the answers of `shrink` for inputs with errors.

    Parameters
    ----------
    masses : sequence of two (value, plus, minus)  [solMass]
    orbit : (str, (value, plus, minus))
        "period" [yr] or "separation" [solRad].
    eccentricity : (value, plus, minus)
    count, seed : int

    Returns
    -------
    dict of Distribution
        By the names of Shrinkage's scalars. Draws outside of what makes an orbit count as
        missing.
    """
    generator = np.random.default_rng(seed)
    kind, measured = orbit
    drawn = [draw(generator, *value, count) for value in (*masses, measured, eccentricity)]
    results = {name: np.full(count, np.nan) for name in SCALARS}
    for index, (mass_a, mass_b, size, e) in enumerate(zip(*drawn, strict=True)):
        if min(mass_a, mass_b, size) <= 0.0 or not 0.0 <= e < 1.0:
            continue
        separation = size if kind == "separation" else separation_from_period(size, mass_a + mass_b)
        for name, value in _scalars(mass_a, mass_b, separation, e).items():
            results[name][index] = value
    return {name: distribution(values) for name, values in results.items()}


def _scalars(mass_a, mass_b, separation, e):
    years = kepler_period(separation, mass_a + mass_b)
    return {
        "merger_time": merger_time(mass_a, mass_b, separation, e),
        "period": years,
        "separation": separation,
        "eccentricity": e,
        "period_derivative": period_derivative(mass_a, mass_b, separation, e),
        "separation_derivative": separation_derivative(mass_a, mass_b, separation, e),
        "eccentricity_derivative": eccentricity_derivative(mass_a, mass_b, separation, e),
        "wave_frequency": 2.0 / years,
        "wave_frequency_derivative": (
            wave_frequency_derivative(mass_a, mass_b, years) if e == 0.0 else float("nan")
        ),
        "chirp_mass": chirp_mass(mass_a, mass_b),
    }


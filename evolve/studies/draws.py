"""Draws of uncertain quantities, and what a set of drawn answers says."""

from typing import NamedTuple

import numpy as np

QUANTILES = (0.025, 0.16, 0.5, 0.84, 0.975)


class Distribution(NamedTuple):
    """A drawn answer: median, the ranges that hold 68 and 95 % of the draws, and how many.

    `missing` counts the draws that had no answer (NaN); they are left out of the quantiles.
    """

    median: float
    low_68: float
    high_68: float
    low_95: float
    high_95: float
    count: int
    missing: int


def draw(generator, value, plus, minus, count):
    """Draws of a measured value, normal on each side with that side's error.

    Parameters
    ----------
    generator : numpy.random.Generator
    value, plus, minus : float
        The value and its errors upward and downward, >= 0, in any unit.
    count : int

    Returns
    -------
    ndarray (count,)
        In the same unit. A side is taken with a probability that keeps the density
        continuous at the value (plus/(plus + minus) upward).
    """
    deviates = np.abs(generator.standard_normal(count))
    upward = generator.random(count) * (plus + minus) < plus
    return value + np.where(upward, plus * deviates, -minus * deviates)


def distribution(values):
    """The Distribution of drawn answers.

    Parameters
    ----------
    values : array_like (n,)
        NaN where a draw had no answer.

    Returns
    -------
    Distribution
        NaN throughout if no draw had one.
    """
    values = np.asarray(values, dtype=float)
    there = values[np.isfinite(values)]
    if not there.size:
        return Distribution(*[float("nan")] * 5, values.size, values.size)
    low95, low68, median, high68, high95 = np.quantile(there, QUANTILES).tolist()
    return Distribution(
        median, low68, high68, low95, high95, values.size, values.size - there.size
    )

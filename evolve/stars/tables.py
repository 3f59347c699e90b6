"""Tables of stars: reading the built-in ones, judging a user's, smooth monotone curves.

Curves are piecewise cubics with a continuous slope that never overshoot a monotone table:
the kinks of a linear table cost an integrator steps and accuracy.
"""

import csv
from functools import lru_cache
from importlib.resources import files
from math import isfinite

from evolve.errors import DomainError

FEWEST_ROWS = 4


@lru_cache(maxsize=8)
def built_in(name):
    """Columns of a table that comes with the package.

    Parameters
    ----------
    name : str
        File name within `evolve/stars/data`, without the suffix.

    Returns
    -------
    dict of tuple of float
        In internal units, by column name.
    """
    lines = (files("evolve.stars") / "data" / f"{name}.csv").read_text("utf-8").splitlines()
    rows = list(csv.reader(line for line in lines if line.strip() and line[0] != "#"))
    names = [cell.split("[")[0].strip() for cell in rows[0]]
    return {
        column: tuple(float(row[place]) for row in rows[1:]) for place, column in enumerate(names)
    }


def judge(table, rising, positive):
    """Refuse a table that makes no star.

    Parameters
    ----------
    table : dict of sequence of float
        Column -> values.
    rising : str
        The column that must increase strictly.
    positive : sequence of str
        The columns that must be positive.

    Raises
    ------
    DomainError
        One sentence that names column and row (the first row of values is 1).
    """
    if len(table[rising]) < FEWEST_ROWS:
        raise DomainError(
            f"the table has {len(table[rising])} rows; {FEWEST_ROWS} at least are needed"
        )
    for column, values in table.items():
        for row, value in enumerate(values, 1):
            if not isfinite(value):
                raise DomainError(f"column {column}, row {row}: {value} is not finite")
            if column in positive and value <= 0.0:
                raise DomainError(f"column {column}, row {row}: {value:g} is not positive")
    pairs = zip(table[rising], table[rising][1:], strict=False)
    for row, (before, after) in enumerate(pairs, 2):
        if after <= before:
            raise DomainError(
                f"column {rising}, row {row}: {after:g} does not exceed {before:g} before it; "
                "rows must rise strictly"
            )


def slopes(x, y):
    """Slopes at the knots of a monotone piecewise cubic.

    Parameters
    ----------
    x, y : sequence of float (n,)
        n >= 2, x strictly increasing.

    Returns
    -------
    list of float (n,)

    Notes
    -----
    Inside, the weighted harmonic mean of the neighbouring chords, 0 at an extremum; at the
    ends a three-point formula, limited so as not to overshoot.

    References
    ----------
    Fritsch & Butland 1984, SIAM J. Sci. Stat. Comput. 5, 300 (as PCHIM of SLATEC has it).
    """
    steps = [b - a for a, b in zip(x, x[1:], strict=False)]
    chords = [(b - a) / h for a, b, h in zip(y, y[1:], steps, strict=False)]
    if len(chords) == 1:
        return [chords[0], chords[0]]
    inner = []
    for i in range(1, len(chords)):
        left, right = chords[i - 1], chords[i]
        if left * right <= 0.0:
            inner.append(0.0)
            continue
        w1, w2 = 2.0 * steps[i] + steps[i - 1], steps[i] + 2.0 * steps[i - 1]
        inner.append((w1 + w2) / (w1 / left + w2 / right))
    first = _end_slope(steps[0], steps[1], chords[0], chords[1])
    last = _end_slope(steps[-1], steps[-2], chords[-1], chords[-2])
    return [first, *inner, last]


def _end_slope(h0, h1, chord, following):
    slope = ((2.0 * h0 + h1) * chord - h0 * following) / (h0 + h1)
    if slope * chord <= 0.0:
        return 0.0
    if chord * following <= 0.0 and abs(slope) > 3.0 * abs(chord):
        return 3.0 * chord
    return slope


def cubics(x, y):
    """Coefficients of the monotone cubic through a table, for `evaluate`.

    Parameters
    ----------
    x, y : sequence of float (n,)

    Returns
    -------
    tuple of float (4 (n - 1),)
        Four an interval, highest power of (x - x_left) first.
    """
    slope = slopes(x, y)
    found = []
    for i in range(len(x) - 1):
        h = x[i + 1] - x[i]
        chord = (y[i + 1] - y[i]) / h
        found += [
            (slope[i] + slope[i + 1] - 2.0 * chord) / (h * h),
            (3.0 * chord - 2.0 * slope[i] - slope[i + 1]) / h,
            slope[i],
            y[i],
        ]
    return tuple(found)


def interval(knots, x):
    """The interval of increasing knots that holds x; the first or last for x outside.

    Parameters
    ----------
    knots : tuple or ndarray of float (n,)
    x : float

    Returns
    -------
    int
        0..n-2.
    """
    low, high = 0, len(knots) - 1
    while high - low > 1:
        middle = (low + high) // 2
        if knots[middle] <= x:
            low = middle
        else:
            high = middle
    return low


def evaluate(coefficients, place, distance):
    """A monotone cubic in the interval `place`, `distance` beyond its left knot."""
    i = 4 * place
    return (
        (coefficients[i] * distance + coefficients[i + 1]) * distance + coefficients[i + 2]
    ) * distance + coefficients[i + 3]

"""Columns between two rows: a monotone cubic in time that never looks across a chapter's end."""

import numpy as np

from evolve.history.columns import COLUMNS

BISECTIONS = 60
"""Halvings of a step in search of a value: more than a float has digits."""


def chapter_of_rows(history):
    """First and last row of the chapter that each row lies in, two ndarray (n,)."""
    first = np.zeros(len(history), dtype=int)
    last = np.full(len(history), len(history) - 1)
    for chapter in history.chapters:
        rows = slice(chapter.first_row, chapter.last_row + 1)
        first[rows], last[rows] = chapter.first_row, chapter.last_row
    return first, last


def column_between(history, name, row, share):
    """A column between a row and the next.

    Parameters
    ----------
    history : History
    name : str
    row : ndarray (m,) of int
        Never the last row of a chapter, except where `share` is zero.
    share : ndarray (m,)
        Of the time from that row to the next; zero gives the row itself, exactly.

    Returns
    -------
    ndarray (m,)
        In the column's unit. Flags keep the value of the row.

    Notes
    -----
    The monotone piecewise cubic of Fritsch & Butland 1984, SIAM J. Sci. Stat. Comput. 5, 300
    (from memory), in the logarithm of the column where these rows and their neighbours are
    positive. It makes no extremum that the rows do not have. Measured on the red-dwarf demo
    against a run at rtol 1e-9: in the median as far off as the rows themselves (4e-6 in the
    period), at worst eight times (1e-4, in the radius just after detachment), where a straight
    line would be sixty times as far off.
    """
    values = history.columns[name]
    result = values[row].copy()
    inner = (share > 0.0) & (not COLUMNS[name].flags)
    if not inner.any():
        return result
    row, share = row[inner], share[inner]
    first, last = (ends[row] for ends in chapter_of_rows(history))
    rows = np.stack([np.maximum(row - 1, first), row, row + 1, np.minimum(row + 2, last)])
    time, stencil = history.columns["time"][rows], values[rows]
    with np.errstate(all="ignore"):
        logarithmic = (stencil > 0.0).all(axis=0) & (name != "time")
        work = np.where(logarithmic, np.log(stencil), stencil)
        between = _cubic(time, work, share)
        between = np.where(logarithmic, np.exp(between), between)
    low, high = np.minimum(stencil[1], stencil[2]), np.maximum(stencil[1], stencil[2])
    result[inner] = np.clip(between, low, high)  # the logarithm's last digit
    return result


def _cubic(time, values, share):
    """The Hermite cubic between the middle two of four rows; times and values (4, m)."""
    step, rise = np.diff(time, axis=0), np.diff(values, axis=0)
    before, here, after = rise / step
    with_before, with_after = np.isfinite(before), np.isfinite(after)
    ahead = np.where(with_after, _end_slope(step[1], step[2], here, after), here)
    behind = np.where(with_before, _end_slope(step[1], step[0], here, before), here)
    left = np.where(with_before, _slope(step[0], step[1], before, here), ahead) * step[1]
    right = np.where(with_after, _slope(step[1], step[2], here, after), behind) * step[1]
    rise = rise[1]
    return values[1] + share * (
        left + share * (3.0 * rise - 2.0 * left - right + share * (left + right - 2.0 * rise))
    )


def _slope(before, after, slope_before, slope_after):
    """Slope at a row between two steps: zero at an extremum, else a harmonic mean."""
    weight_before, weight_after = 2.0 * after + before, after + 2.0 * before
    mean = (weight_before + weight_after) / (
        weight_before / slope_before + weight_after / slope_after
    )
    return np.where(slope_before * slope_after > 0.0, mean, 0.0)


def _end_slope(step, following, slope, slope_following):
    """Slope at the outer end of a step, of the parabola that runs on through the next one.

    Between none and thrice the slope of the step, within which the cubic is monotone.
    """
    found = slope + step * (slope - slope_following) / (step + following)
    return slope * np.clip(np.where(slope == 0.0, 0.0, found / slope), 0.0, 3.0)


def share_at(history, name, row, value):
    """Where between a row and the next a column takes a value, as a share of the time.

    Parameters
    ----------
    history : History
    name : str
    row : ndarray (m,) of int
        Never the last row of a chapter.
    value : ndarray (m,)
        Between the values of the two rows, and equal to neither.

    Returns
    -------
    ndarray (m,)
    """
    values = history.columns[name]
    if name == "time":
        return (value - values[row]) / (values[row + 1] - values[row])
    rising = values[row + 1] > values[row]
    low, high = np.zeros(len(row)), np.ones(len(row))
    for _ in range(BISECTIONS if len(row) else 0):
        middle = 0.5 * (low + high)
        short = (column_between(history, name, row, middle) < value) == rising
        low, high = np.where(short, middle, low), np.where(short, high, middle)
    return 0.5 * (low + high)

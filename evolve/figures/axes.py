"""Axes: of studies, and of time where a thousand years and ten gigayears both show."""

import numpy as np

from evolve.config.units import human
from evolve.figures.style import plain_log_ticks


NO_TIME = 1e-15
"""Times below this many years are steps to the next float, not times."""


def stretched_time(time, curves, weight=1.0):
    """Positions of rows on an axis that is wide where the curves move.

    Parameters
    ----------
    time : ndarray (n,)  [yr]
    curves : list of ndarray (n,)
        What is plotted, in the scale of its panel (logarithms where that is logarithmic).
    weight : float
        How much of the axis belongs to time itself.

    Returns
    -------
    ndarray (n,)
        From 0 to 1, increasing: the length of the path of all curves, each scaled to its
        own range.
    """
    if len(time) < 2:
        return np.zeros(len(time))
    span = max(time[-1] - time[0], 1e-300)
    squares = (weight * np.diff(time) / span) ** 2
    for curve in curves:
        curve = np.where(np.isfinite(curve), curve, np.nan)
        extent = np.nanmax(curve) - np.nanmin(curve) if np.isfinite(curve).any() else 0.0
        if extent > 0.0:
            steps = np.nan_to_num(np.diff(curve) / extent)
            squares = squares + np.minimum(np.abs(steps), 0.15) ** 2
    position = np.concatenate([[0.0], np.cumsum(np.sqrt(squares))])
    return position / position[-1] if position[-1] else position


def time_ticks(position, time, count=6):
    """Where to tick a stretched axis, and the times to write there.

    Parameters
    ----------
    position, time : ndarray (n,)
    count : int

    Returns
    -------
    positions : list of float
    labels : list of str
        With units; where three digits do not tell a time from the one before, the time left
        to the end instead.
    """
    wanted = np.linspace(0.0, 1.0, count)
    return wanted.tolist(), time_labels(np.interp(wanted, position, time), time[-1])


def time_labels(times, end):
    """Times in words, each told from the one before: by the time left to the end where three
    digits do not do it."""
    labels = []
    for value in times:
        label = human(value, "time", 3) if value > NO_TIME else "0"
        if label in labels:
            left = end - value
            label = f"end \u2212 {human(left, 'time', 2)}" if left > 0.0 else "end"
        labels.append(label)
    return labels


def named(name, unit):
    """A label: a name with its unit."""
    return f"{name} [{unit}]" if unit else name


def positions(scale):
    """Positions of a study's axis, ndarray: its numbers, or places for words."""
    words = scale.values.dtype.kind in "OU"
    return np.arange(len(scale.values), dtype=float) if words else scale.values.astype(float)


def label_scale(axis, scale, which):
    """Make the x or y axis of a panel that of a study.

    Words become ticks; the axis is logarithmic where the numbers are spaced so.
    """
    x = positions(scale)
    if scale.values.dtype.kind in "OU":
        getattr(axis, f"set_{which}ticks")(x, [str(word) for word in scale.values])
    elif len(x) > 2 and (x > 0.0).all() and np.allclose(np.diff(np.log(x)), np.log(x[1] / x[0])):
        getattr(axis, f"set_{which}scale")("log")
        plain_log_ticks(getattr(axis, f"{which}axis"))
    getattr(axis, f"set_{which}label")(named(scale.key, scale.unit))

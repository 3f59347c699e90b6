"""Abscissas on which a phase of a thousand years and one of ten gigayears both show."""

import numpy as np

from evolve.config.units import human


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
    times = np.interp(wanted, position, time)
    labels = []
    for value in times:
        label = human(value, "time", 3) if value else "0"
        if label in labels:
            left = time[-1] - value
            label = f"end \u2212 {human(left, 'time', 2)}" if left > 0.0 else "end"
        labels.append(label)
    return wanted.tolist(), labels

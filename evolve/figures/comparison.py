"""The comparison figure: histories on a common abscissa, and how far they are from the first."""

import numpy as np

from evolve.figures.style import DASHES, SERIES, label_of, new_figure, plain_log_ticks, styled
from evolve.history.columns import COLUMNS

SHOWN = ("period", "mass_A", "mass_B", "overflow_A", "overflow_B", "separation")
LOGARITHMIC = ("period", "overflow_A", "overflow_B", "separation")
FLOOR = 1e-14
"""Rates below this many solMass/yr are not drawn."""


@styled
def comparison_figure(comparison):
    """Curves of a comparison, and beside each its relative difference from the first history.

    Parameters
    ----------
    comparison : evolve.studies.compare.Comparison
        Its curves are read off every history by interpolation on a common abscissa.

    Returns
    -------
    matplotlib.figure.Figure
        Left the curves, right (y - y_first)/y_first in percent.
    """
    names, curves = comparison.names, comparison.curves
    shown = [name for name in SHOWN if name in curves and _moves(curves[name])]
    figure = new_figure(7.0, 1.35 * len(shown) + 0.6)
    grid = np.atleast_2d(figure.subplots(len(shown), 2, sharex=True, width_ratios=(3, 2)))
    x = curves["abscissa"]
    for (left, right), column in zip(grid, shown, strict=True):
        values = np.asarray(curves[column], dtype=float)
        if column.startswith("overflow"):
            values = np.where(values > FLOOR, values, np.nan)
        for number, (name, curve) in enumerate(zip(names, values, strict=True)):
            style = {"color": SERIES[number % len(SERIES)], "ls": DASHES[number % len(DASHES)]}
            left.plot(x, curve, label=name, **style)
            if number:
                with np.errstate(divide="ignore", invalid="ignore"):
                    right.plot(x, 100.0 * (curve / values[0] - 1.0), **style)
        if column in LOGARITHMIC:
            left.set_yscale("log")
            if not column.startswith("overflow"):
                plain_log_ticks(left.yaxis)
        left.set_ylabel(label_of(column, column.replace("_", " of ")))
        right.axhline(0.0, color="0.6", lw=0.6, zorder=0)
        right.set_ylabel("difference [%]")
    _abscissa(grid[-1], comparison, x)
    grid[0, 0].legend(loc="lower left", bbox_to_anchor=(0.0, 1.0), ncols=3, borderaxespad=0.2)
    grid[0, 1].set_title(f"relative to {names[0]}", loc="right", fontsize=7, color="0.35", pad=3)
    return figure


def _moves(values):
    values = np.asarray(values, dtype=float)
    good = values[np.isfinite(values)]
    return good.size > 0 and (good.max() > 0.0)


def _abscissa(axes, comparison, x):
    name, unit = comparison.abscissa
    words = f"{name.replace('_', ' ').replace(':', ' ')} [{unit}]"
    if name in COLUMNS:
        words = label_of(name, "time since the start" if name == "time" else None)
    for axis in axes:
        axis.set_xlabel(words)
        if (x > 0.0).all() and x.max() > 100.0 * x.min():
            axis.set_xscale("log")

"""Figure of a search for origins: the space searched, and the best histories through the
observation."""

import numpy as np

from evolve.figures.axes import label_scale, positions
from evolve.figures.style import DASHES, SERIES, label_of, new_figure, plain_log_ticks, styled

MARKERS = "osD^v<>P*X"
WORST = 300.0
"""Mismatches [standard deviations] are not told apart beyond this."""


@styled
def origin_figure(found):
    """The map of mismatches with the regions' best starts; the histories of these.

    Parameters
    ----------
    found : evolve.studies.origin.Origins

    Returns
    -------
    matplotlib.figure.Figure
        Left, the smallest mismatch of any branch over the first two axes (of more, the best
        along the others), in standard deviations (root of the summed squares), with a line
        where it is three; over a single axis, a line for each branch. Starts that fit are
        numbered as the command prints them, with their ranges; crosses mark the nearest
        misses if none fits. Right, the observation and the histories of these starts, over
        the first two observed columns, or over time.
    """
    figure = new_figure(7.6, 3.5)
    left, right = figure.subplots(1, 2)
    shown = (found.fitting or found.origins[:3])[: len(MARKERS)]
    axes = [scale for scale in found.scales if len(scale.values) > 1][:2] or found.scales[:1]
    (_line if len(axes) == 1 else _map)(figure, left, found, axes)
    for number, entry in enumerate(shown):
        _start(left, number, entry, axes, found)
    _histories(right, found, shown)
    return figure


def _best(found, axes, maps):
    """Smallest root mismatch of some branches over the axes shown; NaN where there is none."""
    total = np.min(maps, axis=0) if maps else np.full([len(s.values) for s in found.scales], np.inf)
    keys = [scale.key for scale in axes]
    others = tuple(n for n, scale in enumerate(found.scales) if scale.key not in keys)
    best = np.min(total, axis=others) if others else total
    return np.sqrt(np.where(np.isfinite(best), best, np.nan))


def _map(figure, axis, found, axes):
    from matplotlib.colors import LogNorm

    cells = _best(found, axes, list(found.maps.values()))
    x, y = (positions(scale) for scale in axes)
    mesh = axis.pcolormesh(
        x, y, np.clip(cells, 0.3, WORST).T, cmap="cividis", norm=LogNorm(0.3, WORST), shading="nearest"
    )
    bar = figure.colorbar(mesh, ax=axis, label="mismatch [standard deviations]")
    bar.ax.yaxis.set_major_formatter(lambda value, _: f"{value:g}")
    if min(cells.shape) > 1 and np.nanmin(cells, initial=WORST) < 3.0 < np.nanmax(cells, initial=0.0):
        bar.add_lines(axis.contour(x, y, cells.T, levels=[3.0], colors="white", linewidths=0.9))
    empty = np.nonzero(np.isnan(cells))
    axis.plot(x[empty[0]], y[empty[1]], "x", color="0.5", ms=3)
    title = "space searched" + ("   x  no match on any branch" if len(empty[0]) else "")
    axis.set_title(title, loc="left", fontsize=7, color="0.35", pad=3)
    label_scale(axis, axes[0], "x")
    label_scale(axis, axes[1], "y")


def _line(figure, axis, found, axes):
    x = positions(axes[0])
    for number, (branch, cells) in enumerate(found.maps.items()):
        axis.plot(x, np.clip(_best(found, axes, [cells]), 0.03, None), marker=".", lw=0.9,
                  color=SERIES[1 + number % (len(SERIES) - 1)], ls=DASHES[number % len(DASHES)],
                  label=branch_words(branch))  # fmt: skip
    axis.axhline(3.0, color="0.6", lw=0.7, ls=":")
    axis.set_yscale("log")
    axis.set_ylabel("mismatch [standard deviations]")
    axis.legend(loc="best", fontsize=6)
    axis.set_title("space searched", loc="left", fontsize=7, color="0.35", pad=3)
    label_scale(axis, axes[0], "x")


def branch_words(branch):
    """A branch in words: ("overflow_A", 1, "rising") is "overflow of A, contact 1, period rising"."""
    regime, contacts, word = branch
    count = f", contact {contacts}" if regime.startswith("overflow") else ""
    return f"{regime.replace('_', ' of ')}{count}, period {word}"


def _start(axis, number, entry, axes, found):
    """A best start with its ranges, in the space searched."""
    x, dx = _place(entry, axes[0])
    if len(axes) > 1:
        y, dy = _place(entry, axes[1])
    else:
        y, dy = max(entry.match.mismatch**0.5, 0.03), None
    colour = SERIES[1 + number % (len(SERIES) - 1)]
    style = {"marker": MARKERS[number], "ms": 5, "color": colour, "mec": "white", "mew": 0.6}
    axis.errorbar([x], [y], xerr=dx, yerr=dy, elinewidth=1.0, capsize=2, zorder=4, **style)
    axis.annotate(str(number + 1), (x, y), textcoords="offset points", xytext=(4, 4), fontsize=7,
                  color="white" if len(axes) > 1 else "black", zorder=5)  # fmt: skip


def _place(entry, scale):
    """(position, errors) of a start on an axis."""
    value = entry.start[scale.key]
    if not isinstance(value, (int, float)):
        return float(np.nonzero(scale.values == value)[0][0]), None
    low, high = entry.ranges.get(scale.key, (value, value))
    return value, [[max(value - low, 0.0)], [max(high - value, 0.0)]]


def _histories(axis, found, shown):
    columns = [item.column for item in found.observed][:2]
    columns = columns if len(columns) == 2 else ["time", *columns]
    for number, entry in enumerate(shown):
        colour = SERIES[1 + number % (len(SERIES) - 1)]
        axis.plot(entry.track[columns[0]], entry.track[columns[1]], lw=0.9, color=colour,
                  ls=DASHES[number % len(DASHES)],
                  label=f"{number + 1}  {branch_words(entry.match.branch)}")  # fmt: skip
        there = {**entry.match.state, "time": entry.match.time}
        axis.plot(there[columns[0]], there[columns[1]], marker=MARKERS[number], ms=5, color=colour,
                  mec="white", mew=0.6, zorder=4)  # fmt: skip
    seen = {item.column: item for item in found.observed}
    _observation(axis, *(seen.get(name) for name in columns))
    axis.set_xlabel(label_of(columns[0]))
    axis.set_ylabel(label_of(columns[1]))
    axis.set_title("histories of the best starts", loc="left", fontsize=7, color="0.35", pad=3)
    axis.legend(loc="best", fontsize=6)
    for which, name in zip("xy", columns, strict=True):
        _frame(axis, which, name, seen.get(name), shown)


def _observation(axis, x, y):
    """A value with its errors, a band, or a limit."""
    values = [item if item and not item.sense else None for item in (x, y)]
    if all(values):
        axis.errorbar(
            [x.value], [y.value], xerr=[[x.minus], [x.plus]], yerr=[[y.minus], [y.plus]], fmt="k+",
            elinewidth=1.2, capsize=2.5, zorder=6, label="observed",
        )  # fmt: skip
        return
    for item, span, line in ((x, axis.axvspan, axis.axvline), (y, axis.axhspan, axis.axhline)):
        if item and item.sense:
            line(item.value, color="black", lw=1.0, ls=":", label=f"observed {item.sense} this")
        elif item:
            span(item.value - item.minus, item.value + item.plus, color="0.85", lw=0, zorder=0,
                 label="observed")  # fmt: skip


def _frame(axis, which, column, item, shown):
    """The range of the histories, logarithmic where it is wide; flows down to what matters."""
    values = np.concatenate([entry.track[column] for entry in shown]) if shown else np.ones(1)
    there = values[np.isfinite(values) & (values > 0.0)]
    if there.size and there.size > 0.3 * values.size and column != "time":
        low, high = there.min(), there.max()
        if item:
            low, high = max(low, 1e-3 * item.value), max(high, item.value + item.plus)
        if high > 8.0 * low:
            getattr(axis, f"set_{which}scale")("log")
            if high < 1e4 and low > 1e-3:
                plain_log_ticks(getattr(axis, f"{which}axis"))
            getattr(axis, f"set_{which}lim")(0.8 * low, 1.25 * high)

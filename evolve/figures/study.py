"""Figures of a study: lines over one axis, a map over two, a histogram over draws."""

import numpy as np

from evolve.errors import ConfigError
from evolve.figures.axes import label_scale, named, positions
from evolve.figures.style import DASHES, SERIES, new_figure, styled


@styled
def sweep_figure(result, name=None):
    """One result of a study over its axes.

    Parameters
    ----------
    result : evolve.studies.study_archive.StudyResult
    name : str, optional
        Of the result; the first by default.

    Returns
    -------
    matplotlib.figure.Figure
        Lines for one axis, a map with contours for two, a histogram with quantiles for draws
        alone. Axes of length one are left out; of more than two, the first two are shown, each
        further one at its first value. Failed points are marked.

    Raises
    ------
    ConfigError
    """
    name = name or next(iter(result.values))
    if name not in result.values:
        raise ConfigError(f'no result "{name}"; there are {", ".join(result.values)}')
    values, failed = result.values[name], np.isnan(result.values[name])
    scales, keep = [], []
    for scale in result.scales:
        shown = len(scale.values) > 1 and (len(scales) < 2 and scale.key != "draw")
        if shown:
            scales.append(scale)
        keep.append(slice(None) if shown else slice(None) if scale.key == "draw" else 0)
    values, failed = values[tuple(keep)], failed[tuple(keep)]
    label = named(name, result.units[name])
    drawn = bool(result.scales) and result.scales[-1].key == "draw"
    if not scales:
        return _histogram(values.ravel(), label)
    if drawn:
        with np.errstate(all="ignore"):
            spread = np.nanquantile(values, (0.16, 0.5, 0.84), axis=-1)
        values, failed = spread[1], failed.all(axis=-1)
    if len(scales) == 1:
        return _lines(scales[0], values, failed, label, spread if drawn else None)
    return _map(scales, values, failed, label)


def _wide(values):
    there = values[np.isfinite(values) & (values > 0.0)]
    return there.size == np.isfinite(values).sum() > 0 and there.max() > 30.0 * there.min()


def _lines(scale, values, failed, label, spread):
    figure = new_figure(4.6, 3.2)
    axis = figure.subplots()
    x = positions(scale)
    if spread is not None:
        axis.fill_between(x, spread[0], spread[2], color="0.85", lw=0, label="68 % of the draws")
        axis.legend(loc="best")
    axis.plot(x, values, color=SERIES[0], linestyle=DASHES[0], marker="o", ms=3)
    axis.plot(x[failed], np.full(failed.sum(), 0.03), "x", color=SERIES[1], ms=4, clip_on=False,
              transform=axis.get_xaxis_transform())  # fmt: skip
    if failed.any():
        axis.set_title("x  no value", loc="right", fontsize=7, color=SERIES[1], pad=2)
    if _wide(values):
        axis.set_yscale("log")
    label_scale(axis, scale, "x")
    axis.set_ylabel(label)
    return figure


def _map(scales, values, failed, label):
    from matplotlib.colors import LogNorm

    figure = new_figure(4.9, 3.6)
    axis = figure.subplots()
    x, y = (positions(scale) for scale in scales)
    norm = LogNorm() if _wide(values) else None
    mesh = axis.pcolormesh(
        x, y, np.ma.masked_invalid(values.T), cmap="cividis", norm=norm, shading="nearest"
    )
    bar = figure.colorbar(mesh, ax=axis, label=label)
    if min(values.shape) > 2 and np.isfinite(values).sum() > 3 and np.nanmax(values) > np.nanmin(values):
        lines = axis.contour(
            x, y, np.ma.masked_invalid(values.T), colors="white", linewidths=0.5, norm=norm
        )
        bar.add_lines(lines)
    places = np.nonzero(failed)
    axis.plot(x[places[0]], y[places[1]], "x", color=SERIES[1], ms=4)
    if failed.any():
        axis.set_title("x  no value", loc="right", fontsize=7, color=SERIES[1], pad=2)
    label_scale(axis, scales[0], "x")
    label_scale(axis, scales[1], "y")
    return figure


def _histogram(values, label):
    figure = new_figure(4.6, 3.0)
    axis = figure.subplots()
    there = values[np.isfinite(values)]
    if not there.size:
        axis.text(0.5, 0.5, "no draw has a value", transform=axis.transAxes, ha="center")
        return figure
    axis.hist(there, bins="auto", color="0.8", edgecolor="0.4", lw=0.5)
    for quantile, dash in ((0.16, ":"), (0.5, "-"), (0.84, ":")):
        axis.axvline(np.quantile(there, quantile), color=SERIES[1], ls=dash, lw=1.0)
    missing = values.size - there.size
    note = f"{there.size} draws" + (f", {missing} without a value" if missing else "")
    axis.set_title(note + "; lines: 16, 50, 84 %", loc="right", fontsize=7, color="0.35", pad=2)
    axis.set_xlabel(label)
    axis.set_ylabel("draws")
    return figure

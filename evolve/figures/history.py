"""The history figure: period, masses, rates and fill through time; and rate against period."""

import numpy as np

from evolve.config.units import human
from evolve.constants import HOURS_PER_YEAR
from evolve.errors import ConfigError
from evolve.figures.axes import stretched_time, time_ticks
from evolve.figures.style import (
    COMPONENT,
    DASHES,
    REGIME,
    REGIME_WORDS,
    SERIES,
    label_of,
    new_figure,
    plain_log_ticks,
    styled,
)
from evolve.studies.compare import abscissa_of

RATE_FLOOR, RATE_OF_INTEREST = 1e-5, 1e-13
"""Rates below this share of the largest, and below this many Msun/yr, are not drawn."""
QUIET = ("start", "end", "masses_equal")
EVENT_WORDS = {
    "period_minimum": "P min", "period_maximum": "P max", "braking_stops": "braking stops",
    "unstable_overflow": "unstable", "both_lobes_filled": "both lobes filled",
}  # fmt: skip
OBSERVED_GAP = (2.15, 3.18)
"""Edges of the observed period gap [h], Knigge 2006 (MNRAS 373, 484)."""


@styled
def history_figure(histories, names=None, on="time"):
    """Period, masses, rates and fill of one history, or of several overlaid.

    Parameters
    ----------
    histories : History or sequence of History
    names : sequence of str, optional
        For the legend, where there are several.
    on : str
        Abscissa: "time" (stretched where things happen for one history, logarithmic for
        several), "time_since:EVENT", or a column.

    Returns
    -------
    matplotlib.figure.Figure
    """
    histories = histories if isinstance(histories, (list, tuple)) else [histories]
    names = names or [history.title or f"history {n}" for n, history in enumerate(histories, 1)]
    flows = any(_rates(history) for history in histories)
    heights = {"period": 3, "mass": 2, "rate": 3, "fill": 2}
    if not flows:
        del heights["rate"]
    figure = new_figure(7.0, 0.72 * sum(heights.values()))
    axes = figure.subplots(len(heights), 1, sharex=True, height_ratios=list(heights.values()))
    panels = dict(zip(heights, axes, strict=True))
    alone = len(histories) == 1
    for number, history in enumerate(histories):
        rows, x = _abscissa(history, on, alone)
        _draw(panels, history, rows, x, None if alone else number)
    _finish(panels, histories, names, on, alone)
    if alone:
        rows, x = _abscissa(histories[0], on, True)
        _chapters(panels, histories[0], rows, x)
        _events(panels, histories[0], rows, x)
    return figure


def _abscissa(history, on, alone):
    if on != "time":
        return abscissa_of(history, on)
    rows, time = slice(None), history["time"]
    if not alone:
        return rows, time
    return rows, places_in_time(history)


def places_in_time(history):
    """Place of every row on the time axis of a history drawn alone, ndarray (n,), 0 to 1."""
    curves = [np.log(history["period"]), history["mass_A"], history["mass_B"],
              history["fill_A"], history["fill_B"], *_log_rates(history)]  # fmt: skip
    return stretched_time(history["time"], curves)


def _rates(history):
    """The rates worth drawing: (name, component, values), NaN where they are negligible."""
    found = []
    for c in "AB":
        for name in ("overflow", "wind", "captured"):
            values = history.columns.get(f"{name}_{c}")
            if values is not None and values.max() > 0.0:
                found.append((name, c, values))
    largest = max((values.max() for _, _, values in found), default=0.0)
    floor = min(RATE_FLOOR * largest, RATE_OF_INTEREST)
    return [(n, c, np.where(v > floor, v, np.nan)) for n, c, v in found]


def _log_rates(history):
    return [np.log(values) for _, _, values in _rates(history)]


def _draw(panels, history, rows, x, number):
    color = None if number is None else SERIES[number % len(SERIES)]
    dash = {} if number is None else {"linestyle": DASHES[number % len(DASHES)]}

    def of(c):
        return {"color": color or COMPONENT[c], "lw": 1.2 if c == "A" else 0.9, **dash}

    panels["period"].plot(x, history["period"][rows], color=color or "black", **dash)
    for c in "AB":
        panels["mass"].plot(x, history[f"mass_{c}"][rows], label=c, **of(c))
        panels["fill"].plot(x, history[f"fill_{c}"][rows], label=c, **of(c))
    for name, c, values in _rates(history):
        style = {"overflow": {}, "wind": {"alpha": 0.6}, "captured": {"linestyle": ":"}}[name]
        panels["rate"].plot(x, values[rows], label=f"{name} of {c}", **{**of(c), **style})


def _finish(panels, histories, names, on, alone):
    period, masses, fill = (panels[name] for name in ("period", "mass", "fill"))
    period.set_yscale("log")
    _period_ticks(period)
    masses.set_ylabel(label_of("mass_A", "mass"))
    if rates := panels.get("rate"):
        rates.set_ylabel(label_of("overflow_A", "mass flow"))
        rates.set_yscale("log")
        if alone and len(rates.lines) > 1:
            rates.legend(ncols=3, loc="best")
    fill.set_ylabel(r"$R\,/\,R_L$")
    fill.axhline(1.0, color="0.6", lw=0.6, zorder=0)
    fill.set_ylim(0.0, max(1.15, min(1.3, fill.get_ylim()[1])))
    if alone:
        masses.legend(ncols=2, loc="best", title=None)
    else:
        handles = [line for line in period.lines[: len(histories)]]
        period.legend(handles, names, loc="best")
        masses.set_title("A thick, B thin", loc="right", fontsize=7, color="0.35", pad=2)
    _label_abscissa(fill, histories, on, alone)


def _period_ticks(axis):
    """Periods in plain numbers, over many decades each with its own unit."""
    from matplotlib.ticker import FuncFormatter, LogLocator, NullFormatter

    low, high = axis.get_ylim()
    wide = high / low > 50.0
    subs = (1.0,) if wide else (1.0, 1.5, 2.0, 3.0, 4.0, 5.0, 7.0)
    axis.yaxis.set_major_locator(LogLocator(subs=subs))
    axis.yaxis.set_minor_formatter(NullFormatter())
    if wide:
        axis.set_ylabel("period")
        axis.yaxis.set_major_formatter(
            FuncFormatter(lambda value, _: human(value / HOURS_PER_YEAR, "time", 3))
        )
    else:
        axis.set_ylabel("period [h]")
        axis.yaxis.set_major_formatter(FuncFormatter(lambda value, _: f"{value:g}"))


def _label_abscissa(axis, histories, on, alone):
    if on == "time" and alone:
        time = histories[0]["time"]
        _, position = _abscissa(histories[0], on, True)
        axis.set_xlim(0.0, 1.0)
        axis.set_xticks(*time_ticks(position, time))
        axis.set_xlabel("time since the start (axis stretched where things change)")
    elif on == "time":
        axis.set_xscale("log")
        firsts = [history["time"][history["time"] > 1e-5 * history["time"][-1]] for history in histories]
        axis.set_xlim(min(values[0] for values in firsts if len(values)), None)
        axis.set_xlabel("time since the start [yr]")
    elif on.startswith("time_since:"):
        axis.set_xlabel(f"time since {on.removeprefix('time_since:').replace('_', ' ')} [yr]")
    else:
        axis.set_xlabel(label_of(on))
        if on == "period":
            axis.set_xscale("log")
            plain_log_ticks(axis.xaxis)
            axis.invert_xaxis()


def _chapters(panels, history, rows, x):
    start = rows.start or 0
    for chapter in history.chapters:
        first, last = chapter.first_row - start, chapter.last_row - start
        if first < 0 or last >= len(x):
            continue
        left, right = x[first], x[last]
        for panel in panels.values():
            panel.axvspan(left, right, color=REGIME[chapter.regime], lw=0, zorder=-5)
        extent = abs(x[-1] - x[0]) or 1.0
        if abs(right - left) > 0.1 * extent:
            fill = panels["fill"]
            fill.text(0.5 * (left + right), 0.55, REGIME_WORDS[chapter.regime],
                           transform=fill.get_xaxis_transform(), ha="center", va="bottom",
                           fontsize=6.5, color="0.35")  # fmt: skip


def _events(panels, history, rows, x):
    """Names of the events along the top, kept apart from each other."""
    start, extent = rows.start or 0, abs(x[-1] - x[0]) or 1.0
    taken = []
    for event in history.events:
        row = event.row - start
        if event.name in QUIET or not 0 <= row < len(x):
            continue
        for panel in panels.values():
            panel.axvline(x[row], color="0.55", lw=0.5, ls=(0, (2, 2)), zorder=-1)
        place = float(x[row])
        if taken and place - taken[-1] < 0.022 * extent:
            place = taken[-1] + 0.022 * extent
        taken.append(place)
        words = EVENT_WORDS.get(event.name, event.name.replace("_", " "))
        words += f" ({event.component})" if event.component and event.name == "contact" else ""
        top = panels["period"].get_xaxis_transform()
        panels["period"].annotate(
            words, (x[row], 1.0), (place, 1.02), xycoords=top, textcoords=top, rotation=60, fontsize=6.5, va="bottom",
            ha="left", annotation_clip=False, color="0.2",
        )  # fmt: skip


@styled
def rate_period_figure(histories, names=None, gap=False):
    """Overflow rate against orbital period, in the direction of an observer's diagram.

    Parameters
    ----------
    histories : History or sequence of History
    names : sequence of str, optional
    gap : bool
        Mark the observed period gap of cataclysmic variables (Knigge 2006).

    Returns
    -------
    matplotlib.figure.Figure
        Dotted, the rate above which the disc around the accretor is steady.

    Raises
    ------
    ConfigError
        If no matter flows in any of them.
    """
    histories = histories if isinstance(histories, (list, tuple)) else [histories]
    names = names or [history.title or f"history {n}" for n, history in enumerate(histories, 1)]
    if not any(np.isfinite(_total_overflow(history)).any() for history in histories):
        raise ConfigError(f"{' and '.join(names)}: no overflow to draw against the period")
    figure = new_figure(4.6, 3.4)
    axis = figure.subplots()
    for number, (history, name) in enumerate(zip(histories, names, strict=True)):
        rate = _total_overflow(history)
        axis.plot(
            history["period"], rate, label=name, color=SERIES[number % len(SERIES)],
            linestyle=DASHES[number % len(DASHES)],
        )  # fmt: skip
        _critical_rate(axis, history, SERIES[number % len(SERIES)], first=number == 0)
    axis.set_xscale("log")
    axis.set_yscale("log")
    axis.set_xlabel("period [h]")
    axis.set_ylabel(label_of("overflow_A", "overflow"))
    if gap:
        axis.axvspan(*OBSERVED_GAP, color="0.88", lw=0, zorder=-5)
        axis.text(np.sqrt(np.prod(OBSERVED_GAP)), 0.02, "observed gap", fontsize=6.5, ha="center",
                  va="bottom", transform=axis.get_xaxis_transform(), color="0.35")  # fmt: skip
    if len(axis.lines) > 1:
        axis.legend(loc="best")
    plain_log_ticks(axis.xaxis)
    return figure


def _critical_rate(axis, history, colour, first):
    """The rate above which the accretor's disc is steady, where matter flows."""
    critical = history.columns.get("disc_critical_rate")
    if critical is None:
        return
    flowing = np.where(np.isfinite(_total_overflow(history)), critical, np.nan)
    if np.isfinite(flowing).any():
        label = "steady disc above" if first else None
        axis.plot(history["period"], flowing, color=colour, lw=0.8, ls=":", alpha=0.8, label=label)


def _total_overflow(history):
    total = sum(history.columns.get(f"overflow_{c}", 0.0) for c in "AB") + 0.0 * history["time"]
    floor = min(RATE_FLOOR * max(total.max(), 1e-300), RATE_OF_INTEREST)
    return np.where(total > floor, total, np.nan)

"""The stability figure: how donor and lobe answer mass loss, and on which times things happen."""

import numpy as np

from evolve.errors import ConfigError
from evolve.figures.axes import time_ticks
from evolve.figures.history import places_in_time
from evolve.figures.style import SERIES, new_figure, styled
from evolve.history.columns import KIND

KIND_COLOUR = {"nuclear": "#E3F1EA", "thermal": "#FCF0D6", "dynamical": "#F6D5C9", "angular_momentum": "#DCEAF5"}
KIND_WORDS = {"nuclear": "nuclear", "thermal": "thermal", "dynamical": "dynamical", "angular_momentum": "driven by the orbit"}
TIMES = {
    "transfer_time": r"$m/\dot m$", "thermal_time": "thermal time", "dynamical_time": "dynamical time",
}  # fmt: skip
LONGEST = 1e14
"""Times above this many years are those of a flow that is none."""
MARKED = ("unstable_overflow", "contact", "detachment", "common_envelope")


@styled
def stability_figure(history):
    """zeta of the donor and of its lobe through time, the kind of transfer behind them, and below
    the times of transfer, thermal relaxation and free fall.

    Parameters
    ----------
    history : History

    Returns
    -------
    matplotlib.figure.Figure
        While detached, of the component nearer to its lobe. The transfer is unstable where
        zeta_star lies below zeta_lobe.

    Raises
    ------
    ConfigError
        Of a history in which no component can overflow.
    """
    missing = [name for name in ("zeta_star", "zeta_lobe", "overflow_kind") if name not in history.columns]
    if missing:
        raise ConfigError(
            f"the history has no column {missing[0]}: the stability figure needs a star that can overflow"
        )
    x = places_in_time(history)
    figure = new_figure(7.0, 4.4)
    above, below = figure.subplots(2, 1, sharex=True, height_ratios=(3, 2))
    above.plot(x, history["zeta_star"], color=SERIES[1], label=r"$\zeta$ of the donor")
    above.plot(x, history["zeta_lobe"], color="black", ls=(0, (5, 1.5)), label=r"$\zeta$ of its lobe")
    above.set_ylabel(r"$\zeta = \mathrm{d}\ln R\,/\,\mathrm{d}\ln m$")
    for colour, (name, words) in zip((SERIES[0], SERIES[5], SERIES[6]), TIMES.items(), strict=True):
        if name in history.columns:
            shown = np.where(history[name] < LONGEST, history[name], np.nan)
            below.plot(x, shown, color=colour, label=words, lw=1.0)
    below.set_yscale("log")
    below.set_ylabel("time [yr]")
    _kinds((above, below), history, x)
    _marks((above, below), history, x)
    above.legend(loc="lower left", bbox_to_anchor=(0.0, 1.0), ncols=6, borderaxespad=0.2)
    below.legend(loc="best", ncols=3)
    below.set_xlim(0.0, 1.0)
    below.set_xticks(*time_ticks(x, history["time"]))
    below.set_xlabel("time since the start (axis stretched where things change)")
    return figure


def _kinds(panels, history, x):
    """Bands behind the curves, one colour a kind of transfer, each named once."""
    kinds = history["overflow_kind"].astype(int)
    starts = np.concatenate([[0], np.flatnonzero(np.diff(kinds)) + 1, [len(kinds)]])
    named = set()
    for first, last in zip(starts[:-1], starts[1:], strict=True):
        kind = KIND[kinds[first]]
        if kind not in KIND_COLOUR:
            continue
        right = x[min(last, len(x) - 1)]
        for panel in panels:
            label = KIND_WORDS[kind] if kind not in named and panel is panels[0] else None
            panel.axvspan(x[first], right, color=KIND_COLOUR[kind], lw=0, zorder=-5, label=label)
        named.add(kind)


def _marks(panels, history, x):
    for event in history.events:
        if event.name in MARKED:
            strong = event.name == "unstable_overflow"
            for panel in panels:
                panel.axvline(x[event.row], color="#B03A00" if strong else "0.55", lw=1.0 if strong else 0.5,
                              ls=(0, (2, 2)), zorder=-1)  # fmt: skip
            if strong:
                panels[0].annotate("unstable", (x[event.row], 0.98), (3, 0), rotation=90, fontsize=6.5,
                                   xycoords=panels[0].get_xaxis_transform(), va="top",
                                   textcoords="offset points", color="#B03A00")  # fmt: skip

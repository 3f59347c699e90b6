"""The ledger: who takes the angular momentum and the mass, through time and in total."""

import numpy as np

from evolve.figures.axes import stretched_time, time_ticks
from evolve.figures.style import SERIES, new_figure, styled
from evolve.history.ledger import LAW_WORDS


@styled
def ledger_figure(history):
    """Angular momentum taken from the orbit by each law, through time, and the masses moved.

    Parameters
    ----------
    history : History

    Returns
    -------
    matplotlib.figure.Figure
        Above, what is left of the orbit's angular momentum with each law's part stacked on it,
        by the ledger at the chapters' ends and the torques between them; below, the totals.
    """
    figure = new_figure(7.0, 4.6)
    through, totals = figure.subplots(2, 1, height_ratios=(3, 1.6))
    laws = _laws(history)
    x = stretched_time(
        history["time"], [np.log(history["period"]), history["mass_A"], history["mass_B"]]
    )
    base = history["angular_momentum"]
    through.fill_between(x, 0.0, base, color="0.88", lw=0, label="left in the orbit")
    for place, law in enumerate(laws):
        taken = _taken(history, law)
        top = base + np.maximum(taken, 0.0)
        through.fill_between(
            x, base, top, color=SERIES[(place + 1) % len(SERIES)], alpha=0.8, lw=0, label=LAW_WORDS.get(law, law)
        )
        base = top
    through.set_xlim(0.0, 1.0)
    through.set_ylim(0.0, None)
    through.set_xticks(*time_ticks(x, history["time"]))
    through.set_xlabel("time since the start (axis stretched where things change)")
    through.set_ylabel(r"$J$ [$M_\odot R_\odot^2\,\mathrm{yr}^{-1}$]")
    through.legend(loc="lower left", bbox_to_anchor=(0.0, 1.0), ncols=4, borderaxespad=0.2)
    _totals(totals, history)
    return figure


def _laws(history):
    entries = history.ledger.angular_momentum
    names = dict.fromkeys(name.rpartition("_")[0] or name for name in entries)
    return [law for law in names if abs(history.ledger.total(law, "angular_momentum")) > 0.0]


def _taken(history, law):
    """What a law has taken from the orbit so far, by row: exact at the ends of chapters, between
    them in the proportion of its torque's integral."""
    taken, before = np.zeros(len(history)), 0.0
    torque = history.columns.get(f"torque_{law}")
    parts = [
        values for name, values in history.ledger.angular_momentum.items()
        if (name.rpartition("_")[0] or name) == law
    ]  # fmt: skip
    for number, chapter in enumerate(history.chapters):
        rows = slice(chapter.first_row, chapter.last_row + 1)
        change = -sum(float(values[number]) for values in parts)
        if torque is None or chapter.first_row == chapter.last_row:
            taken[rows] = before + change
        else:
            time, rate = history["time"][rows], -torque[rows]
            steps = 0.5 * (rate[1:] + rate[:-1]) * np.diff(time)
            path = np.concatenate([[0.0], np.cumsum(steps)])
            share = path / path[-1] if path[-1] else np.linspace(0.0, 1.0, len(path))
            taken[rows] = before + change * share
        before += change
    return taken


def _totals(axis, history):
    """Masses moved, as bars with their values."""
    entries = {
        name: history.ledger.total(name, "mass")
        for name in history.ledger.mass
        if abs(history.ledger.total(name, "mass")) > 0.0
    }
    if not entries:
        axis.set_axis_off()
        axis.text(0.5, 0.5, "no mass moved", ha="center", transform=axis.transAxes, color="0.5")
        return
    names = list(entries)[::-1]
    values = [entries[name] for name in names]
    axis.barh(range(len(names)), values, color="0.6", height=0.6)
    axis.set_yticks(range(len(names)), [name.replace("_", " ") for name in names])
    for place, value in enumerate(values):
        axis.annotate(f"{value:.4g}", (max(value, 0.0), place), (3, 0), textcoords="offset points",
                      va="center", fontsize=6.5)  # fmt: skip
    axis.margins(x=0.12)
    axis.axvline(0.0, color="0.3", lw=0.6)
    axis.set_xlabel(r"mass [$M_\odot$]")

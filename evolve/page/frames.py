"""What the page's moving panel shows: few rows of a history, with the outlines of lobes and stars."""

from functools import lru_cache

import numpy as np

from evolve.config.units import human
from evolve.constants import HOURS_PER_YEAR
from evolve.figures.history import places_in_time
from evolve.history import Chapter, Event, History
from evolve.orbit.lobes import lobe_fraction
from evolve.orbit.outlines import lobe_outlines, outline_at_front
from evolve.orbit.potential import inner_distance
from evolve.orbit.volumes import exact_lobe_fraction, radius_at_front
from evolve.page.story import time

MOST_ROWS, FRAMES, POINTS = 3000, 121, 25
SMALLEST, STEP = 0.02, 0.7
"""Stars smaller than this share of the distance are circles; step of ln q between tables."""
SCALE = 1000
"""Coordinates are whole thousandths of the distance: the page stays small."""


def thinned(history, most=MOST_ROWS):
    """The history with fewer rows: dense where it moves, with every event and chapter's end.

    Parameters
    ----------
    history : History
    most : int
        Rows kept, besides those of events and chapters.

    Returns
    -------
    History
        The same one if it is short.
    """
    if len(history) <= most:
        return history
    kept = chosen_rows(history, most)
    place = {int(row): n for n, row in enumerate(kept)}
    return History(
        {name: values[kept] for name, values in history.columns.items()},
        [Event(e.name, e.component, e.time, place[e.row], e.residual) for e in history.events],
        [
            Chapter(c.regime, c.start, c.end, place[c.first_row], place[c.last_row], c.ended_by)
            for c in history.chapters
        ],
        history.ledger, history.outcome, history.message, history.complete, history.title,
        history.note, history.config_text, history.config_files, history.statistics,
        history.sources, history.warnings, history.versions, history.references,
    )  # fmt: skip


def chosen_rows(history, most):
    """Rows evenly along the path of the curves, with all events and ends of chapters."""
    x = places_in_time(history)
    even = np.searchsorted(x, np.linspace(0.0, 1.0, most)).clip(0, len(x) - 1)
    marks = [event.row for event in history.events]
    marks += [row for chapter in history.chapters for row in (chapter.first_row, chapter.last_row)]
    return np.unique(np.concatenate([even, marks]))


def frames(history):
    """The panel's data, as JSON has it.

    Parameters
    ----------
    history : History
        Thinned.

    Returns
    -------
    dict
        x: place on the axis; time, period, separation, masses, rate: words; distance [solRad];
        size: the largest distance; A, B: upper halves of the outlines of lobe and star, pairs
        of thousandths of the distance from the component, its companion towards +x; radius:
        of the stars in distances; centre: of mass, from A.
    """
    rows = chosen_rows(history, FRAMES)
    x, distance = places_in_time(history), _distances(history)
    flow = sum(history.columns.get(f"overflow_{c}", np.zeros(len(history))) for c in "AB")
    found = {
        "x": [round(float(v), 5) for v in x[rows]],
        "time": [time(v, 5, "0 yr") for v in history["time"][rows]],
        "period": [human(v / HOURS_PER_YEAR, "time", 4) for v in history["period"][rows]],
        "separation": [human(v, "length", 4) for v in history["separation"][rows]],
        "rate": [f"{v:.2e} Msun/yr" if v > 0.0 else "none" for v in flow[rows]],
        "distance": [float(f"{v:.6g}") for v in distance[rows]],
        "centre": [round(float(v), 4) for v in (history["mass_B"] / (history["mass_A"] + history["mass_B"]))[rows]],
    }  # fmt: skip
    ratios = (history["mass_A"] / history["mass_B"])[rows]
    lobes = [_lobes(ratio) for ratio in ratios]
    for c, place, ratio in (("A", 0, ratios), ("B", 1, 1.0 / ratios)):
        radii = history[f"radius_{c}"][rows] / distance[rows]
        found[f"mass_{c}"] = [human(v, "mass", 4) for v in history[f"mass_{c}"][rows]]
        found[f"radius_{c}"] = [float(f"{radius:.4g}") for radius in radii]
        found[c] = {
            "lobe": [pair[place] for pair in lobes],
            "star": [_star(q, radius) for q, radius in zip(ratio, radii, strict=True)],
        }
    return found


def _distances(history):
    eccentricity = history.columns.get("eccentricity", 0.0)
    return history["separation"] * (1.0 - eccentricity)


def _lobes(ratio):
    """Upper halves of the outlines of both lobes, each in the frame of its own star."""
    own, other = (outline[:POINTS] for outline in lobe_outlines(ratio, POINTS))
    return _flat(own), _flat(np.column_stack([1.0 - other[::-1, 0], other[::-1, 1]]))


def _star(ratio, radius):
    """Upper half of the outline of a star; nothing of one that is drawn as a circle."""
    if radius < SMALLEST:
        return []
    return _flat(outline_at_front(ratio, _front(ratio, radius), POINTS)[:POINTS])


def _front(ratio, radius):
    """Where a star's surface crosses the axis [a], from tables: a search takes too long here."""
    fill = min(radius / lobe_fraction(ratio), 1.0)
    place = np.log(ratio) / STEP
    low = int(np.floor(place))
    lower, upper = (np.interp(np.sqrt(1.0 - fill), *_shares_of_the_way(low + n)) for n in (0, 1))
    return inner_distance(ratio) * (lower + (place - low) * (upper - lower))


@lru_cache(maxsize=256)
def _shares_of_the_way(number):
    """Front of a star over the distance of the inner Lagrange point, against sqrt(1 - R/R_L), at
    the mass ratio exp(STEP number); it hardly depends on that, so few are enough."""
    ratio = float(np.exp(STEP * number))
    tip, lobe = inner_distance(ratio), exact_lobe_fraction(ratio)
    shares = 1.0 - np.linspace(0.0, 1.0, 11)[:-1] ** 2
    fills = [min(radius_at_front(ratio, share * tip) / lobe, 1.0) for share in shares]
    return np.sqrt(1.0 - np.array(fills)), shares


def _flat(half):
    """x, y, x, y ... in whole thousandths."""
    return [int(v) for v in np.rint(SCALE * half).ravel()]

"""The pair to scale: exact lobes, the stars in them, Lagrange points, the centre of mass."""

import numpy as np

from evolve.config.units import human
from evolve.constants import HOURS_PER_YEAR
from evolve.figures.style import COMPONENT, new_figure, styled
from evolve.orbit.roche import exact_lobe_fraction, lagrange_points, lobe_outlines, star_outline

NICE = (1.0, 2.0, 5.0)
OUT_OF_SIGHT = 15.0
"""A pair so many times smaller than another cannot be drawn on its scale."""
SMALLEST = 0.004
"""Stars smaller than this share of the picture are drawn as a dot of this size."""


@styled
def pair_figure(history, epochs=("start", "end")):
    """The pair in its orbital plane at some epochs, all at one scale.

    Parameters
    ----------
    history : History
    epochs : sequence of str or Epoch
        Names of events, or states as `history.at` gives them.

    Returns
    -------
    matplotlib.figure.Figure
        One panel an epoch. Lobes are the exact ones of a synchronous circular orbit; a star has
        the shape of the equipotential of its volume. An eccentric pair is shown at periastron.
        Where a pair shrinks or grows beyond sight, each panel has a scale of its own.
    """
    states = [(name, history.at(name)) if isinstance(name, str) else ("", name) for name in epochs]
    distances = [_distance(state) for _, state in states]
    common = max(distances) < OUT_OF_SIGHT * min(distances)
    figure = new_figure(7.0, 2.1 * len(states))
    axes = np.atleast_1d(figure.subplots(len(states), 1))
    for axis, (name, state), distance in zip(axes, states, distances, strict=True):
        width = 2.3 * (max(distances) if common else distance)
        _draw(axis, state, width)
        axis.set_title(_caption(name, state), loc="left", fontsize=7.5, pad=3)
        axis.set_xlim(-0.62 * width, 0.62 * width)
        axis.set_ylim(-0.24 * width, 0.24 * width)
        if not common or axis is axes[-1]:
            _scale_bar(axis, width)
    return figure


def _distance(state):
    return state["separation"] * (1.0 - state.get("eccentricity", 0.0))


def _caption(name, state):
    words = [name.replace("_", " ")] if name else []
    words += [human(state["time"], "time", 4), "P = " + human(state["period"] / HOURS_PER_YEAR, "time", 4)]
    words.append(", ".join(f"{c} {human(state[f'mass_{c}'], 'mass', 3)}" for c in "AB"))
    return "   ".join(words)


def _draw(axis, state, width):
    """A stands to the left; lengths in solar radii about the centre of mass."""
    a = _distance(state)
    ratio = state["mass_A"] / state["mass_B"]
    shift = -a / (1.0 + ratio)  # of A from the centre of mass
    own, other = lobe_outlines(ratio)
    for outline in (own, other):
        axis.plot(a * outline[:, 0] + shift, a * outline[:, 1], color="0.35", lw=0.8)
    for c, q, place, sign in (("A", ratio, shift, 1.0), ("B", 1.0 / ratio, shift + a, -1.0)):
        _star(axis, state, c, q, a, place, sign, width)
    for point in lagrange_points(ratio):
        x, y = a * point.x + shift, a * point.y
        axis.plot(x, y, "+", color="0.5", ms=4, mew=0.6)
        if abs(x) < 0.6 * width and abs(y) < 0.22 * width:
            axis.annotate(point.name, (x, y), (2, 2), textcoords="offset points", fontsize=5.5, color="0.45")
    axis.plot(0.0, 0.0, "x", color="black", ms=3.5, mew=0.8)
    axis.set_aspect("equal")
    axis.set_axis_off()


def _star(axis, state, c, q, a, place, sign, width):
    radius = state[f"radius_{c}"]
    limit = exact_lobe_fraction(q)
    if radius < SMALLEST * width:
        axis.plot(place, 0.0, "o", color=COMPONENT[c], ms=2.5, mew=0)
    else:
        outline = star_outline(q, min(radius / a, limit))
        axis.fill(
            sign * a * outline[:, 0] + place, a * outline[:, 1], color=COMPONENT[c], alpha=0.75, lw=0
        )
    axis.annotate(
        c, (place, -1.12 * limit * a), ha="center", va="top", fontsize=7, color=COMPONENT[c],
        annotation_clip=False,
    )  # fmt: skip


def _scale_bar(axis, width):
    wanted = 0.2 * width
    power = 10.0 ** np.floor(np.log10(wanted))
    length = max(step * power for step in NICE if step * power <= wanted)
    x, y = -0.6 * width, -0.21 * width
    axis.plot([x, x + length], [y, y], color="black", lw=1.2, clip_on=False)
    axis.annotate(
        human(length, "length", 3), (x + 0.5 * length, y), (0, 3), textcoords="offset points",
        ha="center", fontsize=6.5,
    )  # fmt: skip

"""A map of the Roche potential of a mass ratio, with lobes and Lagrange points."""

import numpy as np

from evolve.figures.style import COMPONENT, new_figure, styled
from evolve.orbit.roche import lagrange_points, lobe_outlines, potential

HALF, POINTS = 1.45, 420
"""Half width of the map [a], and points of its grid a side."""


@styled
def lobe_figure(*mass_ratios):
    """Equipotentials in the orbital plane, lobes and Lagrange points, a panel a mass ratio.

    Parameters
    ----------
    *mass_ratios : float
        m_A / m_B, A to the left; one or two.

    Returns
    -------
    matplotlib.figure.Figure
        Lengths in the separation, from the centre of mass. Drawn are the equipotentials
        through L1 (the lobes), L2 and L3, and some below and above.
    """
    figure = new_figure(3.4 * len(mass_ratios) if len(mass_ratios) > 1 else 4.4, 3.6 if len(mass_ratios) > 1 else 4.2)
    axes = np.atleast_1d(figure.subplots(1, len(mass_ratios), sharey=True))
    for axis, ratio in zip(axes, mass_ratios, strict=True):
        _map(axis, float(ratio))
    axes[0].set_ylabel("y [a]")
    return figure


def _map(axis, ratio):
    shift = -1.0 / (1.0 + ratio)  # of A from the centre of mass
    x = np.linspace(-HALF, HALF, POINTS)
    grid = potential(x[None, :] - shift, x[:, None], 0.0, ratio)
    points = lagrange_points(ratio)
    heights = sorted({round(point.potential, 12) for point in points})
    deep = heights[0] - np.array([2.0, 1.0, 0.5, 0.2])
    low, high = heights[0] - 1.0, heights[-1]
    axis.contourf(x, x, np.clip(grid, low, high), levels=np.linspace(low, high, 11), cmap="Greys_r", alpha=0.35)
    axis.contour(x, x, grid, levels=deep, colors="0.6", linewidths=0.5, linestyles="solid")
    axis.contour(x, x, grid, levels=heights[1:-1], colors="0.25", linewidths=0.8, linestyles="dashed")
    for outline, c in zip(lobe_outlines(ratio), "AB", strict=True):
        axis.plot(outline[:, 0] + shift, outline[:, 1], color=COMPONENT[c], lw=1.4)
    for c, place in (("A", shift), ("B", 1.0 + shift)):
        axis.plot(place, 0.0, "o", color=COMPONENT[c], ms=3)
        axis.annotate(c, (place, 0.0), (4, 3), textcoords="offset points", color=COMPONENT[c])
    for point in points:
        axis.plot(point.x + shift, point.y, "+", color="black", ms=5, mew=0.8)
        axis.annotate(point.name, (point.x + shift, point.y), (3, 3), textcoords="offset points", fontsize=7)
    axis.plot(0.0, 0.0, "x", color="black", ms=4, mew=0.8)
    axis.set_aspect("equal")
    axis.set_xlabel("x from the centre of mass [a]")
    axis.set_title(rf"$m_A/m_B = {ratio:g}$", loc="left", fontsize=8, pad=3)
    axis.set_xlim(-HALF, HALF)
    axis.set_ylim(-HALF, HALF)


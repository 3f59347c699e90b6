"""The pair to scale and the ledger: what the artists hold."""

from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.figures.ledger import ledger_figure
from evolve.figures.pair import pair_figure
from evolve.orbit.roche import exact_lobe_fraction

CONFIGS = Path(__file__).parents[2] / "configs"


@pytest.fixture(scope="module")
def history():
    return evolve.run(CONFIGS / "red_dwarf.toml")


def test_the_pair_stands_to_scale(history):
    figure = pair_figure(history, ["start", "contact", "end"])
    assert len(figure.axes) == 3
    for axis, name in zip(figure.axes, ("start", "contact", "end"), strict=True):
        state = history.at(name)
        own = axis.lines[0].get_xydata()
        # the lobe's own area in the plane is near pi R_L^2 (it is flattened by 5..12 %)
        x, y = own[:, 0], own[:, 1]
        area = 0.5 * abs(np.sum(x[:-1] * y[1:] - x[1:] * y[:-1]))
        lobe = exact_lobe_fraction(state["mass_A"] / state["mass_B"]) * state["separation"]
        assert area == pytest.approx(np.pi * lobe**2, rel=0.15)
        assert axis.get_aspect() == 1.0
    first, *others = [axis.get_xlim() for axis in figure.axes]
    assert all(limits == first for limits in others)  # one common scale
    titles = [axis.get_title(loc="left") for axis in figure.axes]
    assert "4.7 h" in titles[0] and "contact" in titles[1]


def test_the_ledger_stacks_to_the_momentum_at_the_start(history):
    figure = ledger_figure(history)
    through, totals = figure.axes
    stack = through.collections
    start = history["angular_momentum"][0]
    top = stack[-1].get_paths()[0].vertices[:, 1].max()
    assert top == pytest.approx(start, rel=1e-5)  # trapezia between the ends of chapters
    words = [text.get_text() for text in through.get_legend().get_texts()]
    assert words == ["left in the orbit", "gravitational waves", "magnetic braking", "expelled matter"]
    lengths = sorted(bar.get_width() for bar in totals.patches)
    assert lengths[-1] == pytest.approx(history.ledger.total("overflow_A", "mass"))


@pytest.mark.parametrize("name", ["eccentric_pair", "massive_black_hole", "common_envelope"])
def test_histories_that_are_hard_to_draw(name):
    """A merger in seconds after 300 Myr, a mass ratio that turns, a star that becomes another."""
    hard = evolve.run(CONFIGS / f"{name}.toml")
    assert len(pair_figure(hard).axes) == 2
    assert len(ledger_figure(hard).axes) == 2

"""The history figure and rate against period: what the artists hold, labels, units, bytes."""

from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.figures.axes import stretched_time, time_ticks
from evolve.figures.history import history_figure, rate_period_figure
from evolve.figures.style import save_figure

CONFIGS = Path(__file__).parents[2] / "configs"


@pytest.fixture(scope="module")
def red_dwarf():
    return evolve.run(CONFIGS / "red_dwarf.toml")


@pytest.fixture(scope="module")
def merging():
    return evolve.run(CONFIGS / "eccentric_pair.toml")


def test_panels_hold_the_columns(red_dwarf):
    figure = history_figure(red_dwarf, on="time_since:contact")
    row = red_dwarf.at("contact").row
    period, masses, rates, fill = figure.axes
    np.testing.assert_array_equal(period.lines[0].get_ydata(), red_dwarf["period"][row:])
    np.testing.assert_array_equal(masses.lines[0].get_ydata(), red_dwarf["mass_A"][row:])
    drawn = rates.lines[0].get_ydata()
    kept = np.isfinite(drawn)
    np.testing.assert_array_equal(drawn[kept], red_dwarf["overflow_A"][row:][kept])
    assert period.get_ylabel() == "period [h]" and "M_\\odot" in masses.get_ylabel()
    assert rates.get_yscale() == "log" and "yr" in rates.get_ylabel()
    assert fill.get_xlabel() == "time since contact [yr]"


def test_events_are_named_and_chapters_shaded(red_dwarf):
    figure = history_figure(red_dwarf)
    words = [text.get_text() for axis in figure.axes for text in axis.texts]
    for expected in ("contact (A)", "braking stops", "detachment", "P min", "overflow of A"):
        assert expected in words
    assert sum(1 for patch in figure.axes[0].patches) == len(red_dwarf.chapters)


def test_no_panel_for_flows_where_nothing_flows(merging):
    figure = history_figure(merging)
    assert len(figure.axes) == 3
    labels = [label.get_text() for label in figure.axes[-1].get_xticklabels()]
    assert len(set(labels)) == len(labels)  # a merger in seconds after 300 Myr


def test_several_are_overlaid_with_their_names(red_dwarf, merging):
    figure = history_figure([red_dwarf, red_dwarf], ["one", "two"])
    texts = [text.get_text() for text in figure.axes[0].get_legend().get_texts()]
    assert texts == ["one", "two"]


def test_gap_is_marked_by_choice(red_dwarf):
    bare, marked = (rate_period_figure(red_dwarf, gap=gap) for gap in (False, True))
    assert not bare.axes[0].patches
    (band,) = marked.axes[0].patches
    assert band.get_extents().width > 0.0
    assert "observed gap" in [text.get_text() for text in marked.axes[0].texts]


@pytest.mark.parametrize("suffix", [".png", ".svg", ".pdf"])
def test_the_same_figure_gives_the_same_bytes(red_dwarf, tmp_path, suffix):
    paths = [tmp_path / f"{n}{suffix}" for n in range(2)]
    for path in paths:
        save_figure(history_figure(red_dwarf), path)
    assert paths[0].read_bytes() == paths[1].read_bytes()
    assert not list(tmp_path.glob("*.part"))


def test_stretched_time_rises_and_gives_room_to_what_changes():
    time = np.concatenate([np.linspace(0.0, 1e3, 50), np.linspace(2e3, 1e10, 50)])
    curve = np.concatenate([np.linspace(0.0, 1.0, 50), np.ones(50)])
    position = stretched_time(time, [curve])
    assert (np.diff(position) >= 0.0).all() and position[0] == 0.0 and position[-1] == 1.0
    assert position[49] > 0.3  # a thousand years of ten billion
    where, labels = time_ticks(position, time)
    assert where[0] == 0.0 and labels[0] == "0" and labels[-1] == "10 Gyr"

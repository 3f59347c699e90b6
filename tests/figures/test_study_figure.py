"""Figures of a study: lines, map, histogram; failed points are seen."""

import numpy as np
import pytest

from evolve.errors import ConfigError
from evolve.figures.study import sweep_figure
from evolve.studies.study_archive import Scale, StudyResult


def result(*scales, values):
    shape = tuple(len(scale.values) for scale in scales)
    return StudyResult(
        list(scales), {"contact.time": np.asarray(values, dtype=float).reshape(shape)},
        {"contact.time": "yr"}, np.ones(shape, dtype=int), {}, {}, {}, "", "", "", "",
    )  # fmt: skip


MASSES = Scale("A.mass", np.array([0.3, 0.5, 0.7]), "Msun")
PERIODS = Scale("orbit.period", np.geomspace(3.0, 30.0, 5), "h")
DRAWS = Scale("draw", np.arange(200), "")


def test_one_axis_gives_lines_with_units():
    figure = sweep_figure(result(PERIODS, values=[1e6, 1e7, np.nan, 1e9, 1e10]))
    (axis,) = figure.axes
    assert axis.get_xlabel() == "orbit.period [h]" and axis.get_ylabel() == "contact.time [yr]"
    assert axis.get_xscale() == "log" and axis.get_yscale() == "log"
    np.testing.assert_array_equal(axis.lines[0].get_ydata(), [1e6, 1e7, np.nan, 1e9, 1e10])
    assert axis.lines[1].get_xdata() == pytest.approx([PERIODS.values[2]])  # the failed point


def test_two_axes_give_a_map():
    values = np.outer([1.0, 2.0, 3.0], [1.0, 2.0, 3.0, 4.0, 5.0])
    values[1, 2] = np.nan
    figure = sweep_figure(result(MASSES, PERIODS, values=values))
    axis, bar = figure.axes
    assert axis.get_xlabel() == "A.mass [Msun]" and axis.get_ylabel() == "orbit.period [h]"
    assert bar.get_ylabel() == "contact.time [yr]"
    np.testing.assert_array_equal(axis.collections[0].get_array().filled(np.nan), np.ma.masked_invalid(values.T).filled(np.nan))
    assert axis.lines[0].get_xdata() == pytest.approx([0.5])


def test_draws_alone_give_a_histogram_with_quantiles():
    values = np.linspace(0.0, 1.0, 200)
    figure = sweep_figure(result(DRAWS, values=values))
    (axis,) = figure.axes
    assert [line.get_xdata()[0] for line in axis.lines] == pytest.approx([0.16, 0.5, 0.84], abs=1e-3)


def test_draws_over_an_axis_give_their_median_and_spread():
    values = np.stack([np.linspace(0.0, x, 200) for x in (1.0, 2.0, 3.0)])
    figure = sweep_figure(result(MASSES, DRAWS, values=values))
    assert figure.axes[0].lines[0].get_ydata() == pytest.approx([0.5, 1.0, 1.5])


def test_unknown_results_are_named():
    with pytest.raises(ConfigError, match="contact.time"):
        sweep_figure(result(PERIODS, values=np.ones(5)), "colour")

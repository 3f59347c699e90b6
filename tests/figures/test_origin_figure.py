"""The figure of a search for origins shows the map, the starts, the observation."""

import numpy as np
import pytest

from evolve.studies.observed import Match, Observed
from evolve.studies.origin import Origins
from evolve.studies.refine import Origin
from evolve.studies.study_archive import Scale

pytest.importorskip("matplotlib")
from evolve.figures.origin import branch_words, origin_figure  # noqa: E402

FALLING, RISING = ("detached", 0, "falling"), ("overflow_A", 1, "rising")
SCALES = [
    Scale("orbit.period", np.geomspace(1.0, 10.0, 6), "h"),
    Scale("B.mass", np.linspace(0.6, 1.0, 5), "Msun"),
]


def entry(branch, period, mass, fits=True):
    track = {"time": np.array([0.0, 1e6, 2e6]), "period": np.array([3.0, 2.0, 1.0]),
             "mass_A": np.array([0.4, 0.2, 0.1])}  # fmt: skip
    match = Match(branch, 0.5, 1e6, {"period": 0.1}, {"period": 2.0, "mass_A": 0.2}, (), ())
    ranges = {"orbit.period": (0.9 * period, 1.2 * period)}
    return Origin({"orbit.period": period, "B.mass": mass}, ranges,
                  {"orbit.period": "h", "B.mass": "Msun"}, match, fits, track)  # fmt: skip


def found(origins, scales=SCALES):
    shape = tuple(len(scale.values) for scale in scales)
    cells = np.random.default_rng(1).uniform(0.1, 1e4, shape)
    other = np.full(shape, np.inf)
    cells[..., 0] = np.inf
    observed = (Observed("period", 2.0, 0.1, 0.2, ""), Observed("mass_A", 0.2, 0.02, 0.02, ""))
    return Origins(origins, scales, {FALLING: cells, RISING: other}, observed, {}, "")


def test_a_map_of_two_axes_with_starts_and_ranges():
    figure = origin_figure(found([entry(FALLING, 2.0, 0.7), entry(RISING, 5.0, 0.9)]))
    left, right = figure.axes[:2]
    mesh = left.collections[0].get_array()
    assert mesh.mask.sum() == 6 and mesh.shape == (5, 6)  # where no history has any branch
    assert left.get_xlabel() == "orbit.period [h]" and left.get_xscale() == "log"
    assert {text.get_text() for text in left.texts} == {"1", "2"}
    points = [line.get_xydata() for line in left.lines if len(line.get_xdata()) == 1]
    assert any(np.allclose(point, [[2.0, 0.7]]) for point in points)
    words = [text.get_text() for text in right.get_legend().get_texts()]
    assert words[:2] == ["1  " + branch_words(FALLING), "2  " + branch_words(RISING)]
    assert "observed" in words
    assert right.get_xlabel().startswith("orbital period")


def test_one_axis_is_a_line_for_each_branch():
    one = found([entry(FALLING, 2.0, 0.7)], SCALES[:1])
    figure = origin_figure(one)
    left = figure.axes[0]
    assert left.get_ylabel() == "mismatch [standard deviations]"
    assert len(left.get_legend().get_texts()) == 2


def test_misses_are_drawn_too_and_nothing_found_is_no_error():
    assert origin_figure(found([entry(FALLING, 2.0, 0.7, fits=False)]))
    assert origin_figure(found([])._replace(maps={}))

"""Epochs by event and by value, between rows, and tables sampled from a history."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

import evolve
from evolve.errors import ConfigError
from evolve.history.epoch import sampled
from synthetic import ROWS, TIMES, assert_same, period_at, synthetic

HISTORY = synthetic()


@pytest.mark.parametrize(
    ("label", "chapter"),
    [("contact", 0), ("contact[1]", 0), ("contact[2]", 2), ("contact[-1]", 2), ("contact[-2]", 0),
     ("detachment", 1), (" end ", 3)],
)  # fmt: skip
def test_an_event_by_name_and_number(label, chapter):
    epoch = HISTORY.at(label)
    row = (chapter + 1) * ROWS - 1
    assert epoch.row == row
    assert epoch == {name: pytest.approx(v[row], rel=0, nan_ok=True) for name, v in HISTORY.columns.items()}


@pytest.mark.parametrize("label", ["contact[3]", "contact[0]", "contact[-3]", "merger", "contact[", ""])
def test_an_event_that_is_not_there(label):
    with pytest.raises(ConfigError) as caught:
        HISTORY.at(label)
    assert f'no event "{label}"' in str(caught.value)
    assert "start, contact[1..2], detachment, end" in str(caught.value)


def test_a_history_without_events_says_so():
    with pytest.raises(ConfigError, match="there are none"):
        synthetic(events=[]).at("contact")


@pytest.mark.parametrize(
    "asked", [{}, {"event": "contact", "period": 4.0}, {"period": 4.0, "mass_A": 0.5}]
)
def test_one_question_at_a_time(asked):
    with pytest.raises(ConfigError, match="give one event"):
        HISTORY.at(**asked)


def test_unknown_column():
    with pytest.raises(ConfigError, match='no column "periods"; there are time, donor'):
        HISTORY.at(periods=4.0)


@pytest.mark.parametrize("value", ["4 h", None, "x", [4.0, 5.0]])
def test_a_value_that_is_no_number(value):
    with pytest.raises(ConfigError, match="period = .*: give a number, in h"):
        HISTORY.at(period=value)


@pytest.mark.parametrize(
    "asked",
    [{"time": -1.0}, {"time": 2e9}, {"period": 20.0}, {"period": float("nan")},
     {"mass_A": 0.0}, {"period": float("inf")}],
)  # fmt: skip
def test_no_extrapolation(asked):
    ((column, _),) = asked.items()
    with pytest.raises(ConfigError, match=f"{column} never is .*it lies between"):
        HISTORY.at(**asked)


@given(st.floats(0.0, TIMES[-1], allow_subnormal=False))
def test_any_time_gives_that_time_and_lies_between_its_rows(time):
    epoch = HISTORY.at(time=time)
    assert epoch["time"] == time
    row, following = epoch.row, min(epoch.row + 1, len(HISTORY) - 1)
    for name in ("mass_A", "mass_B", "period", "overflow_A", "torque_waves"):
        low, high = sorted((HISTORY[name][row], HISTORY[name][following]))
        assert low <= epoch[name] <= high, name


@given(st.floats(0.01, 0.99), st.integers(0, 3))
def test_between_rows_smooth_columns_come_back_to_far_less_than_a_step(share, chapter):
    """Steps change the period by up to 7 per cent; a straight line would be 6e-4 off."""
    time = TIMES[chapter] + share * (TIMES[chapter + 1] - TIMES[chapter])
    assert HISTORY.at(time=time)["period"] == pytest.approx(period_at(time), rel=3e-5)
    assert HISTORY.at(time=time)["mass_A"] == pytest.approx(0.6 * np.exp(-time / 3e9), rel=1e-9)


@given(st.floats(period_at(TIMES[1]), 8.0))
def test_a_period_gives_that_period_at_the_time_it_is_passed(period):
    epoch = HISTORY.at(period=period)
    assert epoch["period"] == period
    assert period_at(epoch["time"]) == pytest.approx(period, rel=1e-9)


def test_first_passage_not_a_later_one():
    """7.95 h is passed in the second chapter, and again in the third after a jump up."""
    below = np.nonzero(HISTORY["period"] < 7.95)[0]
    assert ROWS < below[0] < 2 * ROWS and HISTORY["period"][2 * ROWS] > 7.95
    assert HISTORY.at(period=7.95).row == below[0] - 1


def test_a_value_that_a_row_has_is_that_row_exactly():
    epoch = HISTORY.at(mass_A=HISTORY["mass_A"][17])
    assert epoch.row == 17
    assert all(np.array_equal(epoch[n], v[17], equal_nan=True) for n, v in HISTORY.columns.items())


def test_a_value_inside_a_jump_gives_the_state_after_it():
    """No state between two chapters is physical."""
    before, after = HISTORY["period"][2 * ROWS - 1], HISTORY["period"][2 * ROWS]
    history = synthetic()
    history.columns["period"] = np.where(np.arange(4 * ROWS) < 2 * ROWS, before, after)
    epoch = history.at(period=0.5 * (before + after))
    assert epoch.row == 2 * ROWS and epoch["period"] == after
    assert epoch["donor"] == 0.0


def test_nothing_is_mixed_across_a_chapters_end():
    """Near the end of a chapter the overflow keeps the course of its own chapter."""
    time = TIMES[2] - 1e-3 * (TIMES[2] - TIMES[1])
    epoch = HISTORY.at(time=time)
    assert epoch["donor"] == 1.0
    assert epoch["overflow_A"] == pytest.approx(1e-9 * np.exp(-time / 2e8), rel=1e-6)


def test_flags_are_found_where_they_are_and_never_passed():
    assert HISTORY.at(donor=1).row == ROWS
    assert HISTORY.at(overflow_kind=2).row == ROWS
    with pytest.raises(ConfigError, match="overflow_kind never is 1; it is 0, 2"):
        HISTORY.at(overflow_kind=1)


def test_infinite_and_missing_values_are_not_interpolated():
    """The transfer time is infinite while detached: passing 1e9 yr is the row after that."""
    epoch = HISTORY.at(transfer_time=1e9)
    assert epoch.row == ROWS and epoch["transfer_time"] == 6e8
    with pytest.raises(ConfigError, match="zeta_lobe never is -0.5; it lies between -0.3 and -0.3"):
        HISTORY.at(zeta_lobe=-0.5)
    empty = synthetic()
    empty.columns["zeta_lobe"] = np.full(len(empty), np.nan)
    with pytest.raises(ConfigError, match="it has no value in this history"):
        empty.at(zeta_lobe=0.0)


def test_rates_too_small_to_multiply():
    history = synthetic()
    history.columns["overflow_A"] = np.geomspace(1e-250, 1e-200, len(history))
    assert history.at(overflow_A=3e-230)["overflow_A"] == 3e-230


def test_one_row_and_two_rows():
    whole = synthetic()
    for rows in (1, 2):
        history = synthetic(columns={n: v[:rows] for n, v in whole.columns.items()}, chapters=[])
        assert history.at(time=0.0)["period"] == 8.0
        assert len(sampled(history, rows=2)["time"]) == 2
    middle = history.at(time=0.25 * history["time"][1])
    expected = history["period"][0] ** 0.75 * history["period"][1] ** 0.25
    assert middle["period"] == pytest.approx(expected, rel=1e-12)


def test_no_extremum_that_the_rows_do_not_have():
    """Flat, then a steep rise, then flat: where a spline rings."""
    values = np.where(np.arange(4 * ROWS) < 6, 1.0, 100.0)
    history = synthetic()
    history.columns["period"] = values
    found = sampled(history, rows=3001)["period"]
    assert found.min() == 1.0 and found.max() == 100.0 and (np.diff(found) >= 0.0).all()


def test_the_first_step_of_a_chapter_does_not_overshoot():
    """A slow rise before a steep fall: the parabola through the three would turn in the step."""
    history = synthetic()
    history.columns["period"] = np.where(np.arange(4 * ROWS) == 1, 1.1, 1.0)
    history.columns["period"][2:] = 0.1
    step = history["time"][1]
    found = [history.at(time=share * step)["period"] for share in np.linspace(0.01, 0.99, 50)]
    assert (np.diff(found) > 0.0).all() and found[-1] < 1.1


def test_between_rows_of_a_real_history_as_good_as_the_rows():
    """A pair of white dwarfs spiralling in, against Peters 1964, Phys. Rev. 136, B1224, eq. 5.10:
    P^(8/3) falls linearly in time on a circular orbit of constant masses."""
    white = {"mass": "0.3 Msun", "star": "white-dwarf"}
    config = {
        "A": white, "B": {**white, "mass": "0.6 Msun"}, "orbit": {"period": "0.5 h"},
        "numerics": {"rtol": 1e-9}, "end": {"period_below": "0.2 h"},
    }  # fmt: skip
    history = evolve.run(config)
    last = history.chapters[0].end
    power = history["period"][history.chapters[0].last_row] ** (8.0 / 3.0)
    share = np.linspace(0.0, 1.0, 101)[1:-1]
    found = [history.at(time=time)["period"] for time in share * last]
    expected = (0.5 ** (8.0 / 3.0) * (1.0 - share) + power * share) ** (3.0 / 8.0)
    assert found == pytest.approx(expected, rel=1e-5)


def test_sampling_in_time():
    table = sampled(HISTORY, every=3e8)
    assert table["time"].tolist() == [0.0, 3e8, 6e8, 9e8, 1e9]
    assert set(table) == set(HISTORY.columns)
    assert table["period"][1] == HISTORY.at(time=3e8)["period"]


def test_a_step_that_divides_the_span_gives_the_last_row_once():
    assert sampled(HISTORY, every=1e8)["time"].tolist() == [1e8 * n for n in range(11)]
    assert len(sampled(HISTORY, every=1e9 / 3.0)["time"]) == 4
    assert 29 * (1e9 / 29) < 1e9
    assert len(sampled(HISTORY, every=1e9 / 29)["time"]) == 30
    assert sampled(HISTORY, every=5e9)["time"].tolist() == [0.0, 1e9]


def test_rows_on_a_column():
    table = sampled(HISTORY, rows=7, on="mass_A")
    assert np.diff(table["mass_A"]) == pytest.approx(np.diff(table["mass_A"])[0], rel=1e-12)
    assert table["time"] == pytest.approx(-3e9 * np.log(table["mass_A"] / 0.6), rel=1e-8)
    assert (table["mass_A"][0], table["mass_A"][-1]) == (0.6, HISTORY["mass_A"][-1])


def test_without_a_wish_the_rows_themselves():
    assert all(sampled(HISTORY)[n] is v for n, v in HISTORY.columns.items())


def test_sampling_changes_nothing():
    history = synthetic()
    sampled(history, rows=100)
    sampled(history, every=1e8)["period"][:] = 0.0
    history.at(period=7.0)
    assert_same(history, synthetic())


@pytest.mark.parametrize(
    ("wish", "message"),
    [({"every": 0.0}, "positive"), ({"every": -1.0}, "positive"), ({"every": float("nan")}, "positive"),
     ({"rows": 1}, "2 or more"), ({"rows": -5}, "2 or more"), ({"every": 1e-3}, "rows; 1000000 is the most"),
     ({"rows": 10**9}, "1000000 is the most"), ({"every": 1e8, "rows": 5}, "not both"),
     ({"every": 1e8, "on": "period"}, "not both"), ({"rows": 5, "on": "radius"}, 'no column "radius"'),
     ({"rows": 5, "on": "zeta_lobe"}, "not defined throughout"), ({"rows": 5, "on": "donor"}, "a flag")],
)  # fmt: skip
def test_wishes_that_cannot_be(wish, message):
    with pytest.raises(ConfigError, match=message):
        sampled(HISTORY, **wish)


def test_near_zero_no_logarithm_bends_the_course():
    """A straight line through zero in the middle of a step, as of a period's derivative."""
    history = synthetic()
    time = history["time"]
    history.columns["period"] = time - 0.5 * (time[40] + time[41])
    for share in (0.1, 0.5, 0.9):
        between = time[41] + share * (time[42] - time[41])
        expected = history["period"][41] + (between - time[41])
        assert history.at(time=between)["period"] == pytest.approx(expected, rel=1e-9)

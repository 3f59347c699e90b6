"""run_many: in order, the same for any number of workers, a bad config is one failed outcome."""

import itertools

import numpy as np
import pytest

import evolve


def pair(mass):
    return {
        "A": {"mass": mass, "star": "compact", "kind": "point-mass"},
        "B": {"mass": 1.0, "star": "compact", "kind": "point-mass"},
        "orbit": {"separation": 1.0},
    }


MASSES = [1.0, 2.0, -1.0, 3.0, 1.5]


def merger_time(history):
    return float(history["time"][-1])


@pytest.mark.parametrize("workers", [1, 2])
def test_results_come_in_order_and_a_bad_config_is_one_failure(workers):
    found = list(
        evolve.run_many(map(pair, MASSES), workers=workers, reduce=merger_time, engine="plain")
    )
    assert [outcome.index for outcome in found] == list(range(5))
    assert found[2].value is None and "A.mass" in found[2].error
    good = [outcome.value for outcome in found if not outcome.error]
    expected = [evolve.run(pair(m))["time"][-1] for m in MASSES if m > 0]
    np.testing.assert_array_equal(good, expected)  # to the bit


def test_whole_histories_reach_the_caller():
    (outcome,) = evolve.run_many([pair(1.0)], workers=2)
    assert outcome.value.outcome == "merger" and outcome.value.ledger.residuals


def test_endless_configs_are_read_as_they_are_needed():
    some = itertools.islice(evolve.run_many(map(pair, itertools.count(1)), reduce=merger_time), 3)
    times = [outcome.value for outcome in some]
    assert times == sorted(times, reverse=True)


def test_workers_must_be_positive():
    with pytest.raises(evolve.ConfigError, match="workers"):
        list(evolve.run_many([], workers=0))

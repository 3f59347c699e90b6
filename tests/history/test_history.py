"""Columns, events, differences, and what other packages get to see."""

import subprocess
import sys

import numpy as np
import pytest
from astropy import units as u

from evolve.errors import ConfigError, MissingExtra
from evolve.history import COLUMNS, largest_differences
from synthetic import ROWS, TIMES, synthetic


@pytest.mark.parametrize("name", COLUMNS)
def test_every_column_has_a_singular_unit_that_astropy_reads_and_a_name(name):
    column = COLUMNS[name]
    u.Unit(column.unit)
    assert column.long_name and "{" not in column.long_name
    assert column.unit not in ("days", "hours", "seconds", "years")


@pytest.mark.parametrize("name", [name for name in COLUMNS if name.startswith("torque")])
def test_torques_are_angular_momenta_per_time(name):
    assert u.Unit(COLUMNS[name].unit).is_equivalent(u.N * u.m)
    momentum = u.Unit(COLUMNS["angular_momentum"].unit)
    assert u.Unit(COLUMNS[name].unit) == momentum / u.yr


def test_flags_have_words_without_blanks_and_fit_in_a_byte():
    flagged = {name: column.flags for name, column in COLUMNS.items() if column.flags}
    assert set(flagged) == {"donor", "overflow_kind"}
    for flags in flagged.values():
        assert all(0 <= value < 128 for value in flags)
        assert all(" " not in word for word in flags.values())


def test_columns_and_units():
    history = synthetic()
    assert history.units["period"] == "h" and history.units["time"] == "yr"
    assert len(history) == len(history["period"]) == 4 * ROWS
    with pytest.raises(KeyError, match="periode.*there are time, donor"):
        history["periode"]


def test_event_times():
    history = synthetic()
    assert history.event_times("contact").tolist() == [TIMES[1], TIMES[3]]
    assert history.event_times("merger").tolist() == []


def test_incomplete_or_not_it_says_so_in_a_word():
    assert "step_limit" in repr(synthetic(outcome="step_limit", complete=False))


def test_differences_of_a_history_with_itself_are_zero():
    """Infinite and missing values too: they are the same on both sides."""
    history = synthetic()
    assert set(largest_differences(history, history).values()) == {0.0}


def test_differences_are_relative_to_the_largest_value():
    one, other = synthetic(), synthetic()
    other.columns["period"][3] += 0.5
    largest = one["period"].max()
    found = largest_differences(one, other)
    assert found.pop("period") == pytest.approx(0.5 / largest, rel=1e-12)
    assert set(found.values()) == {0.0}


@pytest.mark.parametrize("strange", [np.nan, np.inf])
def test_a_value_that_only_one_has_is_infinitely_different(strange):
    one, other = synthetic(), synthetic()
    other.columns["period"][3] = strange
    assert largest_differences(one, other)["period"] == np.inf
    assert largest_differences(other, one)["period"] == np.inf


def test_infinities_of_both_signs_differ():
    one, other = synthetic(), synthetic()
    other.columns["transfer_time"][0] = -np.inf
    assert largest_differences(one, other)["transfer_time"] == np.inf


def test_columns_and_rows_that_one_lacks():
    one, other = synthetic(), synthetic()
    del other.columns["period"]
    other.columns["mass_A"] = other.columns["mass_A"][:-1]
    found = largest_differences(one, other)
    assert found["period"] == found["mass_A"] == np.inf and found["mass_B"] == 0.0
    assert largest_differences(other, one)["period"] == np.inf


def test_zero_everywhere_does_not_divide():
    one, other = synthetic(), synthetic()
    one.columns["overflow_A"] = np.zeros(len(one))
    other.columns["overflow_A"] = np.full(len(one), 1e-9)
    assert largest_differences(one, other)["overflow_A"] == 1e-9


def test_to_xarray():
    data = synthetic().to_xarray()
    assert data["period"].dims == ("time",) and data["period"].attrs["units"] == "h"
    assert data["donor"].attrs["flag_meanings"] == "none A B both"
    assert float(data["period"].sel(time=0.0)) == 8.0


def test_to_pandas():
    frame = synthetic().to_pandas()
    assert list(frame.columns)[:3] == ["time", "donor", "mass_A"] and len(frame) == 4 * ROWS


@pytest.mark.parametrize("package", ["pandas", "xarray"])
def test_a_missing_package_is_named_with_its_cure(monkeypatch, package):
    monkeypatch.setitem(sys.modules, package, None)
    with pytest.raises(MissingExtra, match=f"{package} is needed.*pip install"):
        getattr(synthetic(), f"to_{package}")()


def test_importing_histories_stays_light():
    code = (
        "import sys, evolve.history; "
        "print(sorted({'scipy', 'h5py', 'pandas', 'xarray', 'matplotlib'} & set(sys.modules)))"
    )
    result = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert result.stdout.strip() == "[]"


def test_saving_twice_needs_leave(tmp_path):
    history = synthetic()
    history.save(tmp_path / "x.h5")
    with pytest.raises(ConfigError, match="exists"):
        history.save(tmp_path / "x.h5")
    history.save(tmp_path / "x.h5", replace=True)

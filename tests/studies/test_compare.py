"""`compare`: conservative against fully re-emitted transfer, as the closed forms say."""

import math

import numpy as np
import pytest

import evolve
from evolve.errors import ConfigError
from evolve.studies.compare import compare


def transfer(share):
    """1.0 + 1.4 Msun pushed by the donor's own expansion down to 0.5 Msun."""
    return evolve.run(
        {
            "A": {"mass": 1.0, "star": "expanding", "radius": 1.0, "growth_time": "1 Gyr",
                  "zeta_ad": 20.0},
            "B": {"mass": 1.4, "star": "compact", "kind": "point-mass"},
            "orbit": {"contact": True},
            "waves": {"law": "off"},
            "overflow": {"law": "locked"},
            "acceptance": {"share": share},
            "end": {"time": "1000 Gyr", "A": {"mass_below": 0.5}},
            "numerics": {"rtol": 1e-9},
        }
    )  # fmt: skip


@pytest.fixture(scope="module")
def found():
    return compare([transfer(1.0), transfer(0.0)], ["conservative", "re-emitted"], on="mass_A")


def line(found, group, quantity):
    return next(x for x in found.lines if (x.group, x.quantity) == (group, quantity))


def test_ends_differ_as_the_closed_forms_say(found):
    """Conservative: a (mA mB)^2 stays. Re-emitted: a/a0 = (q0/q)^2 (1+q0)/(1+q) exp(2 (q-q0))
    (Soberman, Phinney & van den Heuvel 1997, A&A 327, 620)."""
    ends = line(found, "end", "separation").values
    start = found.curves["separation"][:, -1]
    conservative = (1.0 * 1.4) ** 2 / (0.5 * 1.9) ** 2
    q0, q = 1.0 / 1.4, 0.5 / 1.4
    re_emitted = (q0 / q) ** 2 * (1 + q0) / (1 + q) * math.exp(2 * (q - q0))
    assert ends[0] / start[0] == pytest.approx(conservative, rel=1e-6)
    assert ends[1] / start[1] == pytest.approx(re_emitted, rel=1e-6)
    difference = found.differences(line(found, "end", "separation"))
    assert difference == (0.0, ends[1] - ends[0])


def test_common_abscissa(found):
    assert found.abscissa == ("mass_A", "solMass")
    grid = found.curves["abscissa"]
    assert grid[0] == pytest.approx(0.5) and grid[-1] == pytest.approx(1.0)
    # on it, a (mA mB)^2 is constant in the conservative history
    invariant = found.curves["separation"][0] * (grid * (2.4 - grid)) ** 2
    np.testing.assert_allclose(invariant, invariant[0], rtol=1e-3)  # rows interpolated straight


def test_ledger_and_durations_stand_side_by_side(found):
    accepted = line(found, "ledger", "accepted_B").values
    assert accepted[0] == pytest.approx(0.5, rel=1e-9) and accepted[1] == pytest.approx(0.0, abs=1e-12)
    assert line(found, "durations", "overflow_A").values[0] > 0.0


def test_time_since_an_event():
    histories = [transfer(1.0), transfer(0.5)]
    found = compare(histories, ["a", "b"], on="time_since:contact", points=50)
    assert found.curves["abscissa"][0] == 0.0
    assert found.curves["mass_A"].shape == (2, 50)


@pytest.mark.parametrize("on", ["colour", "time_since:merger"])
def test_unknown_abscissa_is_refused_with_what_there_is(on):
    history = transfer(1.0)
    with pytest.raises(ConfigError, match="mass_A|contact"):
        compare([history, history], ["a", "b"], on=on)


def test_one_history_is_no_comparison():
    with pytest.raises(ConfigError, match="two histories"):
        compare([transfer(1.0)], ["a"])

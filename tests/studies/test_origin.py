"""Origins: synthetic starts are found again; both branches where there are two; plain misses."""

import textwrap

import numpy as np
import pytest

import evolve
from evolve.errors import ConfigError
from evolve.studies.observed import matches, read_observed
from evolve.studies.origin import origin

PAIR = """
    [base]
    A = {{ mass = "0.15 Msun", star = "white-dwarf" }}
    B = {{ mass = "0.8 Msun", star = "white-dwarf" }}
    orbit = {{ period = "40 min" }}
    overflow = {{ law = "locked" }}
    end = {{ time = "3 Gyr", A = {{ mass_below = "0.01 Msun" }} }}
    [vary]
    "orbit.period" = {{ from = "20 min", to = "90 min", count = 5, spacing = "log" }}
    "B.mass" = {{ from = "0.6 Msun", to = "1.0 Msun", count = 5 }}
    [observed]
    {observed}
"""


def study(folder, observed, text=PAIR):
    path = folder / "study.toml"
    path.write_text(textwrap.dedent(text.format(observed=observed)))
    return path


def run(period, mass):
    return evolve.run(
        {
            "A": {"mass": 0.15, "star": "white-dwarf"}, "B": {"mass": mass, "star": "white-dwarf"},
            "orbit": {"period": f"{period!r} min"}, "overflow": {"law": "locked"},
            "end": {"time": "3 Gyr", "A": {"mass_below": 0.01}},
        }
    )  # fmt: skip


STARTS = [(float(p), float(m)) for p, m in zip(
    np.random.default_rng(8).uniform(25, 80, 10), np.random.default_rng(9).uniform(0.65, 0.95, 10),
    strict=True,
)]  # fmt: skip


@pytest.mark.slow
@pytest.mark.parametrize(("period", "mass"), STARTS)
def test_synthetic_starts_are_recovered_within_one_per_cent(tmp_path, period, mass):
    """Age, period and masses of a pair somewhere on its way lead back to where it started."""
    history = run(period, mass)
    epoch = history.at(mass_A=0.06)
    observed = (
        f'time = ["{epoch["time"]!r} yr", "{0.01 * epoch["time"]!r} yr"]\n    '
        f'period = ["{epoch["period"]!r} h", "{0.01 * epoch["period"]!r} h"]\n    '
        f'mass_B = ["{epoch["mass_B"]!r} Msun", "0.005 Msun"]\n    '
        f'mass_A = ["0.06 Msun", "0.001 Msun"]'
    )
    best = origin(study(tmp_path, observed)).origins[0]
    assert best.fits
    assert best.start["orbit.period"] == pytest.approx(period, rel=0.01)
    assert best.start["B.mass"] == pytest.approx(mass, rel=0.01)
    low, high = best.ranges["B.mass"]
    assert low < best.start["B.mass"] < high
    assert best.match.branch == ("overflow_A", 1, "rising")
    assert "contact" in best.match.before


def test_both_branches_before_and_after_the_period_minimum(tmp_path):
    """10 min happens twice: while waves shrink the pair, and again when transfer widens it."""
    found = origin(study(tmp_path, 'period = ["10 min", "0.2 min"]\n    mass_B = ["0.85 Msun", "0.06 Msun"]'))
    branches = {entry.match.branch for entry in found.fitting}
    assert ("detached", 0, "falling") in branches
    assert ("overflow_A", 1, "rising") in branches


def test_when_nothing_fits_it_says_what_came_nearest(tmp_path):
    found = origin(study(tmp_path, 'period = ["10 min", "0.1 min"]\n    mass_A = ["0.4 Msun", "0.01 Msun"]'))
    assert found.origins and not found.fitting
    assert found.origins[0].match.deviations["mass_A"] < -3.0


def test_limits_and_asymmetric_errors():
    observed = read_observed(
        {"overflow_A": "< 1e-9 Msun/yr", "mass_A": ["0.17 Msun", "0.02 Msun", "0.05 Msun"],
         "period": "1.9 +0.1 -0.2 h"}, "study",
    )  # fmt: skip
    rate, mass, period = observed
    assert rate.deviation(np.array([0.0, 1e-10, 1e-9])) == pytest.approx([0.0, 0.0, 0.0])
    assert rate.deviation(1e-8) == pytest.approx(20.0)  # a decade above, 0.05 dex a sigma
    assert mass.deviation(0.19) == pytest.approx(1.0) and mass.deviation(0.12) == pytest.approx(-1.0)
    assert period.value == pytest.approx(1.9) and period.minus == pytest.approx(0.2)


def test_a_history_matches_itself():
    history = run(40.0, 0.8)
    row = len(history) // 2
    observed = read_observed(
        {"period": [f"{float(history['period'][row])!r} h", "0.001 h"],
         "mass_A": [f"{float(history['mass_A'][row])!r} Msun", "0.001 Msun"]}, "study",
    )  # fmt: skip
    best = min(matches(history, observed), key=lambda match: match.mismatch)
    assert best.mismatch < 1e-12 and best.time == pytest.approx(history["time"][row])


@pytest.mark.parametrize(
    ("observed", "said"),
    [
        ("colour = [1, 2]", "no such column"),
        ('period = ["1.9 h"]', "allowed"),
        ('period = "1.9 h"', "error above 0"),
        ('period = ["1.9 Msun", "0.1 Msun"]', "Msun"),
        ('overflow_A = "< 0 Msun/yr"', "above 0"),
    ],
)
def test_wrong_observations(tmp_path, observed, said):
    with pytest.raises(ConfigError, match=said):
        origin(study(tmp_path, observed))


BRAKED = """
    [base]
    A = {{ mass = "0.4 Msun", star = "dwarf" }}
    B = {{ mass = "0.75 Msun", star = "white-dwarf" }}
    orbit = {{ period = "7 h" }}
    braking = {{ law = "rappaport-verbunt-joss-1983", gamma = 3.0 }}
    end = {{ time = "0.3 Gyr", event = "contact" }}
    [vary]
    "braking.strength" = {{ from = 0.2, to = 3.0, count = 5, spacing = "log" }}
    "orbit.period" = {{ from = "6 h", to = "8 h", count = 3 }}
    [observed]
    {observed}
"""


def test_a_parameter_of_a_law_may_be_free(tmp_path):
    """The strength of the braking follows from how far the period fell in a known time.

    Waves do a hundredth of it; the rest is P^(10/3) falling in proportion to strength x time
    (from dJ/dt of 1983 at constant R).
    """
    true = evolve.run(
        {"A": {"mass": 0.4, "star": "dwarf"}, "B": {"mass": 0.75, "star": "white-dwarf"},
         "orbit": {"period": "7.3 h"}, "end": {"time": "0.1 Gyr"},
         "braking": {"law": "rappaport-verbunt-joss-1983", "gamma": 3.0, "strength": 0.8}}
    )  # fmt: skip
    rows = [len(true) // 2, len(true) - 1]
    fall = [(7.3 ** (10 / 3) - true["period"][row] ** (10 / 3)) / true["time"][row] for row in rows]
    assert fall[0] == pytest.approx(fall[1], rel=0.03)
    now, rate = float(true["period"][-1]), float(true["period_derivative"][-1])
    found = origin(study(
        tmp_path,
        f'time = ["0.1 Gyr", "1e5 yr"]\n    period = ["{now!r} h", "0.002 h"]\n    '
        f"period_derivative = [{rate!r}, {abs(rate) / 1e3!r}]",
        BRAKED,
    ))  # fmt: skip
    best = found.origins[0]
    assert best.fits and best.start["braking.strength"] == pytest.approx(0.8, rel=0.01)
    assert best.start["orbit.period"] == pytest.approx(7.3, rel=0.01)
    low, high = best.ranges["braking.strength"]
    assert low < 0.8 < high and best.match.branch == ("detached", 0, "falling")
    assert set(best.track) == {"time", "period", "period_derivative"}


def test_points_without_a_history_are_told_and_the_rest_is_searched(tmp_path):
    found = origin(study(
        tmp_path, 'period = ["10 min", "0.2 min"]',
        PAIR.replace('from = "0.6 Msun"', 'from = "-0.2 Msun"').replace("count = 5", "count = 3"),
    ))  # fmt: skip
    assert len(found.messages) == 3 and "mass" in found.messages[0]
    assert found.fitting
    for cells in found.maps.values():
        assert cells.shape == (3, 3)


def test_two_workers_find_the_same(tmp_path):
    path = study(tmp_path, 'period = ["10 min", "0.2 min"]', PAIR.replace("count = 5", "count = 2"))
    one, two = origin(path), origin(path, workers=2)
    assert [entry.start for entry in one.origins] == [entry.start for entry in two.origins]
    assert [entry.ranges for entry in one.origins] == [entry.ranges for entry in two.origins]

"""The compiled engine: against published numbers, against the same walk plain, and when it fails."""

import os
import subprocess
import sys

import numpy as np
import pytest
from engine_helpers import CONFIGS, RED_DWARF, distance, names_of, walked_history

import evolve
from evolve.errors import MissingExtra

pytest.importorskip("numba")
COMPILED = {"numerics.engine": "compiled"}


def compiled(config, **changes):
    changes = {key.replace("__", "."): value for key, value in changes.items()}
    return evolve.run(evolve.read_config(config).with_values({**COMPILED, **changes}))


@pytest.fixture(scope="module")
def red_dwarf():
    return compiled(RED_DWARF)


def test_the_gap(red_dwarf):
    """Edges 3.083 h and 2.018 h, minimum 70.0 min, each to 1 %: check values of this track."""
    assert red_dwarf.statistics["engine"] == "compiled" and not red_dwarf.warnings
    assert red_dwarf.at("braking_stops")["period"] == pytest.approx(3.083, rel=0.01)
    again = [event for event in red_dwarf.events if event.name == "contact"][1]
    assert red_dwarf["period"][again.row] == pytest.approx(2.018, rel=0.01)
    assert 60.0 * red_dwarf["period"].min() == pytest.approx(70.0, rel=0.01)


def test_the_ledger_closes(red_dwarf):
    """To the rounding of a difference Jacobian, whose rows for the sum and for its parts differ."""
    residuals = red_dwarf.ledger.residuals
    assert abs(residuals["angular_momentum"]) < 1e-8
    assert max(abs(residuals["mass_A"]), abs(residuals["mass_B"])) < 1e-9


def test_the_same_bits_twice(red_dwarf):
    again = compiled(RED_DWARF)
    for name, column in red_dwarf.columns.items():
        np.testing.assert_array_equal(column, again[name])


def test_results_converge():
    """The minimum period as rtol falls: within ten tolerances of the finest."""
    minima = [compiled(RED_DWARF, numerics__rtol=rtol)["period"].min() for rtol in (1e-4, 1e-7, 1e-9)]
    assert abs(minima[0] / minima[2] - 1.0) < 1e-3
    assert abs(minima[1] / minima[2] - 1.0) < 1e-6


@pytest.mark.parametrize("eccentricity", [0.0, 0.6])
def test_inspirals_against_peters(eccentricity):
    """Peters 1964: closed form for circles, mpmath for ellipses (see test_inspirals)."""
    from test_inspirals import pair, peters_time

    config = {**pair(1.4, 1.4, eccentricity, separation=3.0)}
    config["numerics"] = {"rtol": 1e-9, "engine": "compiled"}
    history = evolve.run(config)
    assert history.outcome == "merger" and history.statistics["engine"] == "compiled"
    assert history["time"][-1] == pytest.approx(peters_time(1.4, 1.4, 3.0, eccentricity), rel=1e-6)


def test_compiled_and_plain_are_the_same_walk(red_dwarf, monkeypatch):
    """Same functions: only fused operations differ, which steps of 1e-6 magnify a little."""
    plain = walked_history(RED_DWARF, monkeypatch)
    assert names_of(plain) == names_of(red_dwarf)
    assert distance(plain, red_dwarf) < 1e-6
    assert plain.statistics["steps"] == pytest.approx(red_dwarf.statistics["steps"], abs=5)


@pytest.mark.slow
@pytest.mark.parametrize("path", CONFIGS, ids=lambda path: path.stem)
def test_every_demo(path):
    """Each demo runs compiled to the end that solve_ivp finds, through the same events."""
    one, other = compiled(path), evolve.run(path)
    assert one.statistics["engine"] == "compiled" and not one.warnings
    assert names_of(one) == names_of(other) and one.outcome == other.outcome
    assert distance(one, other) < 5e-3  # LSODA's own distance from a fine run reaches 3e-3
    assert abs(one.ledger.residuals["angular_momentum"]) < 1e-6
    assert abs(one.ledger.residuals["mass_A"]) < 1e-9 and abs(one.ledger.residuals["mass_B"]) < 1e-9
    for name in ("mass_A", "mass_B", "period"):
        assert one[name][-1] == pytest.approx(other[name][-1], rel=3e-3), name


# When it cannot, or must not ------------------------------------------------------------------

LAW = '''
from typing import NamedTuple
from evolve.laws.contract import Orbit, Star

def steady(star, other, orbit, keys):
    """A torque that falls with the mass [solMass solRad2 / yr2]."""
    return {body}
'''


def with_law(tmp_path, body):
    (tmp_path / "own.py").write_text(LAW.format(body=body))
    text = RED_DWARF.read_text().replace("rappaport-verbunt-joss-1983", "own.py:steady")
    path = tmp_path / "own.toml"
    path.write_text("\n".join(line for line in text.splitlines() if not line.startswith("gamma")))
    config = evolve.read_config(path, allow_code=True)
    return config.with_values({**COMPILED, "end.time": "1 Myr"})


def test_a_users_own_law_compiles(tmp_path):
    history = evolve.run(with_law(tmp_path, "-1e-5 * star.mass"), allow_code=True)
    assert history.statistics["engine"] == "compiled" and not history.warnings
    spent = history.ledger.angular_momentum["braking_A"].sum()
    average = 0.5 * (history["mass_A"][0] + history["mass_A"][-1])
    assert spent == pytest.approx(-1e-5 * average * 1e6, rel=0.01)


def test_what_does_not_compile_runs_plain_and_says_so(tmp_path):
    history = evolve.run(with_law(tmp_path, '-1e-5 * float("%r" % star.mass)'), allow_code=True)
    assert history.statistics["engine"] == "plain" and history.complete
    assert any("do not compile" in warning for warning in history.warnings)


def test_without_numba(monkeypatch):
    monkeypatch.setitem(sys.modules, "numba", None)
    with pytest.raises(MissingExtra, match="fast"):
        compiled(RED_DWARF)
    (outcome,) = evolve.run_many([evolve.read_config(RED_DWARF).with_values({"end.time": "1 Myr"})])
    assert outcome.value.statistics["engine"] == "plain"


RUN = """
import evolve
config = evolve.read_config({config!r}).with_values({{"numerics.engine": "compiled", "end.time": "1 Myr"}})
history = evolve.run(config)
print(history.outcome, history.statistics["engine"], history["period"][-1])
"""


@pytest.mark.slow
def test_damaged_machine_code_is_compiled_anew(tmp_path):
    """Cut short on disk, or in a folder that cannot be written: the same history all the same."""

    def told(folder):
        environment = {**os.environ, "XDG_CACHE_HOME": str(folder)}
        code = RUN.format(config=str(RED_DWARF))
        done = subprocess.run(
            [sys.executable, "-c", code], env=environment, capture_output=True, text=True, check=True
        )
        return done.stdout

    first = told(tmp_path)
    kept = list(tmp_path.glob("evolve/__pycache__/*.nbc"))
    assert first.startswith("time compiled") and len(kept) == 3
    for path in kept:
        path.write_bytes(path.read_bytes()[:1000])
    assert told(tmp_path) == first
    assert all(path.stat().st_size > 1000 for path in tmp_path.glob("evolve/__pycache__/*.nbc"))
    (tmp_path / "file").write_text("")
    assert told(tmp_path / "file") == first


def test_interrupted_between_calls_keeps_what_was_computed():
    def interrupt(time, end, regime, steps):
        if time > 1e7:
            raise KeyboardInterrupt

    config = evolve.read_config(RED_DWARF).with_values(COMPILED)
    history = evolve.run(config, progress=interrupt)
    assert history.outcome == "interrupted" and not history.complete
    assert 1e7 < history["time"][-1] < 1e10 and len(history["time"]) > 10


def test_limits():
    limited = compiled(RED_DWARF, numerics__max_evaluations=1000)
    assert limited.outcome == "step_limit" and limited["time"][-1] > 1e6
    fine = compiled(RED_DWARF, numerics__max_step="1e5 yr", end__time="2 Myr")
    assert np.diff(fine["time"]).max() <= 1e5 * (1 + 1e-9)


# Many -----------------------------------------------------------------------------------------


def period_minimum(history):
    return float(history["period"].min())


def test_many_are_the_same_for_any_number_of_workers():
    base = evolve.read_config(RED_DWARF)
    configs = [base.with_values({"A.mass": mass}) for mass in (0.5, 0.55, 0.6)]
    alone = list(evolve.run_many(configs, reduce=period_minimum, engine="compiled"))
    shared = list(evolve.run_many(configs, workers=2, reduce=period_minimum, engine="compiled", block=1))
    assert alone == shared and not any(outcome.error for outcome in alone)
    plain = list(evolve.run_many(configs[:1], reduce=period_minimum, engine="plain"))
    assert alone[0].value == pytest.approx(plain[0].value, rel=1e-5)


def test_an_unknown_engine_is_refused():
    with pytest.raises(evolve.ConfigError, match="engine"):
        list(evolve.run_many([], engine="fast"))

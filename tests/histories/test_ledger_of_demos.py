"""The ledger closes, and agrees with a quadrature of the dense output."""

from pathlib import Path

import numpy as np
import pytest
from scipy.integrate import solve_ivp

import evolve
from evolve.system.pair import Pair, Switches

CONFIGS = sorted(Path(__file__).parents[2].joinpath("configs").glob("*.toml"))


@pytest.mark.parametrize("path", CONFIGS, ids=lambda path: path.stem)
def test_every_demo_closes(path):
    history = evolve.run(path)
    residuals = history.ledger.residuals
    assert abs(residuals["angular_momentum"]) < 1e-6
    assert abs(residuals["mass_A"]) < 1e-9 and abs(residuals["mass_B"]) < 1e-9
    assert history.complete


@pytest.mark.parametrize("path", CONFIGS, ids=lambda path: path.stem)
def test_signs(path):
    history = evolve.run(path)
    for entry, change in history.ledger.angular_momentum.items():
        if entry.startswith(("waves", "braking", "expelled")):
            assert (change <= 0.0).all(), entry
    for entry, mass in history.ledger.mass.items():
        assert (mass >= 0.0).all() or entry.startswith("jump"), entry


def test_against_a_quadrature_of_the_dense_output():
    """Radau through part of the red-dwarf transfer: Gauss-Legendre over every step of its
    dense output must give what the ledger's slots integrated along the way."""
    config = evolve.read_config(CONFIGS[[p.stem for p in CONFIGS].index("red_dwarf")])
    pair = Pair(config.with_values({"overflow.law": "locked", "orbit.contact": True}))
    switches = Switches(flow_A=True, braking_A=True)
    n = len(pair.layout.core)
    start = np.array(pair.start + [0.0] * len(pair.layout.ledger))
    solution = solve_ivp(
        pair.right_side(switches), (0.0, 5e7), start, "Radau", rtol=1e-9, dense_output=True,
        atol=np.where(np.arange(start.size) < n, 1e-12, 1e30),
    )  # fmt: skip
    nodes, weights = np.polynomial.legendre.leggauss(5)
    names = pair.layout.ledger
    sums = dict.fromkeys(names, 0.0)
    for left, right in zip(solution.t[:-1], solution.t[1:], strict=True):
        for node, weight in zip(nodes, weights, strict=True):
            time = 0.5 * (left + right) + 0.5 * (right - left) * node
            rates = pair.right_side(switches)(time, solution.sol(time))
            for name, rate in zip(names, rates[n:], strict=True):
                sums[name] += 0.5 * (right - left) * weight * rate
    for slot, name in enumerate(names):
        assert solution.y[n + slot, -1] == pytest.approx(sums[name], rel=1e-6, abs=1e-9)

"""The books: totals, shares and what they leave open, on numbers that a head can add."""

import numpy as np
import pytest

from evolve.history import Ledger

START = {"mass_A": 2.0, "mass_B": 1.0, "angular_momentum": 10.0}


def ledger(end, **mass):
    momentum = {
        "waves": np.array([-1.0, -2.0]), "braking_A": np.array([-0.5, 0.0]),
        "braking_B": np.array([0.0, -0.5]), "expelled_A": np.array([0.0, -1.0]),
    }  # fmt: skip
    return Ledger(momentum, {n: np.array(v) for n, v in mass.items()}, START, end)


BOOKS = ledger(
    {"mass_A": 1.4, "mass_B": 1.35, "angular_momentum": 5.0},
    overflow_A=[0.0, 0.5], wind_A=[0.1, 0.0], captured_B=[0.05, 0.0], accepted_B=[0.05, 0.3],
    expelled_B=[0.0, 0.2],
)  # fmt: skip


def test_totals_of_one_component_and_of_both():
    assert BOOKS.total("waves") == -3.0
    assert BOOKS.total("braking_A") == -0.5
    assert BOOKS.total("braking") == -1.0
    assert BOOKS.total("overflow") == 0.5


def test_the_same_name_in_both_books():
    assert BOOKS.total("expelled") == -1.0
    assert BOOKS.total("expelled", "mass") == 0.2


def test_shares_sum_to_one():
    assert BOOKS.share("waves") == pytest.approx(0.6, rel=1e-15)
    assert BOOKS.share("waves") + BOOKS.share("braking") + BOOKS.share("expelled") == 1.0


def test_a_share_of_nothing_is_zero():
    assert Ledger({"waves": np.zeros(2)}, {}, START, START).share("waves") == 0.0


def test_books_that_close():
    """2.0 - 0.5 - 0.1 = 1.4; 1.0 + 0.35 = 1.35; 10 - 5 = 5."""
    assert max(abs(value) for value in BOOKS.residuals.values()) < 1e-15


def test_a_hole_in_the_books_shows_with_its_sign():
    open_books = ledger(
        {"mass_A": 1.9, "mass_B": 1.0, "angular_momentum": 6.0}, overflow_A=[0.0, 0.2]
    )
    residuals = open_books.residuals
    assert residuals["mass_A"] == pytest.approx(0.05, rel=1e-12)
    assert residuals["mass_B"] == 0.0
    assert residuals["angular_momentum"] == pytest.approx(0.1, rel=1e-12)


def test_sudden_changes_are_booked():
    books = ledger({"mass_A": 1.5, "mass_B": 1.0, "angular_momentum": 5.0}, jump_A=[-0.5, 0.0])
    assert books.residuals["mass_A"] == 0.0


def test_an_unknown_entry_is_told_what_there_is():
    with pytest.raises(KeyError, match="no \"tides\"; it has waves, braking_A.*overflow_A"):
        BOOKS.total("tides")
    with pytest.raises(KeyError, match="no \"overflow\"; it has waves, braking_A, braking_B, expe"):
        BOOKS.share("overflow")

"""Results: one number of a history, by name.

    EVENT.QUANTITY       contact.time, contact[2].period, contact[-1].mass_A
    end.QUANTITY         of the last row; end.reason is the outcome
    max.COLUMN, min.COLUMN
    duration.REGIME      years spent detached, in overflow_A, overflow_B, inspiral
    count.EVENT
    ledger.LAW           change of the orbit's angular momentum by a law
"""

import re
from typing import NamedTuple

import numpy as np

from evolve.config.schema import EVENTS
from evolve.config.words import nearest
from evolve.errors import ConfigError
from evolve.history.columns import COLUMNS
from evolve.history.ledger import MOMENTUM_UNIT
from evolve.integrate.outcomes import SENTENCES

OUTCOMES = ("", *SENTENCES, "refused")
"""Ends of a history by their code; "refused" is a point that makes no config."""
REGIMES = ("detached", "overflow_A", "overflow_B", "inspiral")
FORMS = "EVENT.QUANTITY, end.QUANTITY, max.COLUMN, min.COLUMN, duration.REGIME, count.EVENT, ledger.LAW"
_NAME = re.compile(r"([a-z_]+)(?:\[(-?\d+)\])?\.([A-Za-z_]+)")


class Result(NamedTuple):
    """A result's name, its parts, its unit."""

    name: str
    of: str
    number: int
    quantity: str
    unit: str


def parse_result(name):
    """The Result that a name means.

    Raises
    ------
    ConfigError
        Saying what is allowed.
    """
    match = _NAME.fullmatch(name) if isinstance(name, str) else None
    if match is None:
        raise ConfigError(f"allowed: {FORMS}")
    of, number, quantity = match[1], int(match[2] or 1), match[3]
    if of == "ledger":
        return Result(name, of, number, quantity, MOMENTUM_UNIT)
    if of == "duration":
        _known(quantity, REGIMES, "regime")
        return Result(name, of, number, quantity, "yr")
    if of == "count":
        _known(quantity, EVENTS, "event")
        return Result(name, of, number, quantity, "")
    if (of, quantity) == ("end", "reason"):
        return Result(name, of, number, quantity, "")
    _known(quantity, COLUMNS, "column")
    if of not in ("max", "min", "end"):
        _known(of, ("start", *EVENTS), "event")
    return Result(name, of, number, quantity, COLUMNS[quantity].unit)


def _known(word, words, what):
    if word not in words:
        near = nearest(word, words)
        hint = f'; did you mean "{near}"?' if near else ""
        raise ConfigError(f'"{word}" is no {what}; allowed: {FORMS}{hint}')


def uninterrupted(history):
    """A history as it is; Ctrl-C, which `integrate` turns into an end, goes on to the study.

    Raises
    ------
    KeyboardInterrupt
    """
    if history.outcome == "interrupted":
        raise KeyboardInterrupt
    return history


def value_of(history, result):
    """The number of a history that a result means; NaN where it has none.

    Parameters
    ----------
    history : History
    result : Result

    Returns
    -------
    float
        In the result's unit; of end.reason the place in OUTCOMES.
    """
    of, quantity = result.of, result.quantity
    if of == "ledger":
        try:
            return history.ledger.total(quantity, "angular_momentum")
        except KeyError:
            return 0.0
    if of == "duration":
        return float(sum(c.end - c.start for c in history.chapters if c.regime == quantity))
    if of == "count":
        return float(sum(event.name == quantity for event in history.events))
    if quantity == "reason":
        return float(OUTCOMES.index(history.outcome))
    if quantity not in history.columns:
        return float("nan")
    values = history[quantity]
    if of in ("max", "min"):
        there = values[np.isfinite(values)]
        return float(getattr(np, of)(there)) if there.size else float("nan")
    row = len(values) - 1 if of == "end" else _row(history, of, result.number)
    return float("nan") if row is None else float(values[row])


def _row(history, event, number):
    rows = [e.row for e in history.events if e.name == event]
    place = number - 1 if number > 0 else number
    return rows[place] if rows and -len(rows) <= place < len(rows) else None

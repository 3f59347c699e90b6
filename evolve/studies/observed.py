"""What was observed of a pair, and where a history comes nearest to it, on each of its branches."""

from typing import NamedTuple

import numpy as np

from evolve.config.units import conversion_factor, dimension_of, parse_quantity, parse_uncertain
from evolve.errors import ConfigError
from evolve.history.between import column_between
from evolve.history.columns import COLUMNS

FITS = 3.0
"""A match fits if no observed quantity is off by more standard deviations than this."""
LIMIT_WIDTH = 0.05
"""A limit that is broken counts one standard deviation per this much of log10."""
FINE = 8
"""Points looked at between two rows of a history."""
HOPELESS = 1e6


class Observed(NamedTuple):
    """One observed quantity: column, value, errors upward and downward, in the column's unit.

    sense: "" for a value, "<" or ">" for a limit.
    """

    column: str
    value: float
    plus: float
    minus: float
    sense: str

    def deviation(self, x):
        """How many standard deviations x is off; arrays too."""
        if self.sense:
            with np.errstate(divide="ignore", invalid="ignore"):
                off = np.log10(np.abs(x) / self.value) / LIMIT_WIDTH
            off = np.nan_to_num(off if self.sense == "<" else -off, nan=0.0, neginf=0.0)
            return np.clip(off, 0.0, HOPELESS)
        gap = x - self.value
        return np.where(gap > 0.0, gap / self.plus, gap / self.minus)


class Match(NamedTuple):
    """Where a history comes nearest to what was observed, on one branch.

    branch      (regime, contacts so far, "falling" or "rising" period)
    mismatch    sum of squared deviations
    time        [yr] since the start
    deviations  column -> standard deviations
    state       column -> value there, for what was observed
    before, after   names of the events passed and to come
    """

    branch: tuple
    mismatch: float
    time: float
    deviations: dict
    state: dict
    before: tuple
    after: tuple


def read_observed(table, name):
    """The [observed] table of a study, checked.

    Raises
    ------
    ConfigError
        With every problem.
    """
    found, problems = [], []
    for column, written in table.items():
        try:
            found.append(_observed(column, written))
        except ConfigError as error:
            problems.append(f"{name}: observed.{column} = {written!r}: {error}")
    if not found and not problems:
        problems.append(f"{name}: [observed]: empty; allowed: columns with value and error")
    if problems:
        raise ConfigError(problems)
    return tuple(found)


def _observed(column, written):
    if column not in COLUMNS:
        raise ConfigError(f"no such column; there are {', '.join(COLUMNS)}")
    unit = COLUMNS[column].unit
    base = "yr" if unit == "h" else unit
    factor, dimension = conversion_factor(base, unit) if unit else 1.0, dimension_of(base)
    if isinstance(written, str) and written.strip()[:1] in ("<", ">"):
        sense, limit = written.strip()[0], parse_quantity(written.strip()[1:].strip(), dimension)
        if not limit > 0.0:
            raise ConfigError("allowed: a limit above 0")
        return Observed(column, limit * factor, 0.0, 0.0, sense)
    if isinstance(written, list):
        parts = [parse_quantity(value, dimension) for value in written]
        if len(parts) not in (2, 3):
            raise ConfigError("allowed: [value, error] or [value, error up, error down]")
        value, plus, minus = parts[0], abs(parts[1]), abs(parts[-1])
    else:
        value, plus, minus = parse_uncertain(written, dimension)
    if not (plus > 0.0 and minus > 0.0):
        raise ConfigError('allowed: a value with an error above 0, or a limit such as "< 1e-9 Msun/yr"')
    return Observed(column, value * factor, plus * factor, minus * factor, "")


# Along one history ------------------------------------------------------------------------


def matches(history, observed, only=None):
    """The best match of each branch of a history, or of `only` one, list of Match."""
    if any(item.column not in history.columns for item in observed):
        return []
    best = {}
    for first, last, branch in _branches(history):
        if only not in (None, branch):
            continue
        rows, shares = _fine(first, last)
        total = _mismatch(history, observed, rows, shares)
        place = int(np.argmin(total))
        found = _sharpened(history, observed, rows + shares, place, first, last)
        if branch not in best or found[0] < best[branch][0]:
            best[branch] = found
    return [_match(history, observed, branch, *found) for branch, found in best.items()]


def _mismatch(history, observed, rows, shares):
    """Sum of squared deviations between rows, ndarray."""
    total = np.zeros(len(rows))
    for item in observed:
        total += item.deviation(column_between(history, item.column, rows, shares)) ** 2
    return np.where(np.isfinite(total), total, HOPELESS)


def _sharpened(history, observed, positions, place, first, last):
    """(mismatch, row, share) of the minimum next to the best of the points looked at."""
    low, high = positions[max(place - 1, 0)], positions[min(place + 1, len(positions) - 1)]
    for _ in range(6):
        between = np.linspace(low, high, 9)
        rows = np.minimum(between.astype(int), max(last - 1, first))
        total = _mismatch(history, observed, rows, between - rows)
        best = int(np.argmin(total))
        low, high = between[max(best - 1, 0)], between[min(best + 1, 8)]
    return float(total[best]), int(rows[best]), float(between[best] - rows[best])


def _branches(history):
    """(first row, last row, branch) of stretches with one regime and one sense of the period."""
    contacts = 0
    for chapter in history.chapters:
        if chapter.regime.startswith("overflow"):
            contacts += any(e.name == "contact" and e.row in (chapter.first_row - 1, chapter.first_row)
                            for e in history.events)  # fmt: skip
        rising = history["period_derivative"][chapter.first_row : chapter.last_row + 1] > 0.0
        turns = np.nonzero(np.diff(rising))[0] + 1
        bounds = [0, *turns.tolist(), len(rising)]
        for start, stop in zip(bounds, bounds[1:], strict=False):
            word = "rising" if rising[start] else "falling"
            yield chapter.first_row + start, chapter.first_row + stop - 1, (chapter.regime, contacts, word)


def _fine(first, last):
    """Rows and shares of steps that look between the rows."""
    if first == last:
        return np.array([first]), np.zeros(1)
    rows = np.repeat(np.arange(first, last), FINE)
    shares = np.tile(np.arange(FINE) / FINE, last - first)
    return np.append(rows, last), np.append(shares, 0.0)


def _match(history, observed, branch, mismatch, row, share):
    rows, shares = np.array([row]), np.array([share])
    state = {i.column: float(column_between(history, i.column, rows, shares)[0]) for i in observed}
    time = float(column_between(history, "time", rows, shares)[0])
    names = [(event.name, event.time) for event in history.events if event.name not in ("start", "end")]
    return Match(
        branch, mismatch, time,
        {item.column: float(item.deviation(state[item.column])) for item in observed}, state,
        tuple(name for name, at in names if at <= time),
        tuple(name for name, at in names if at > time),
    )  # fmt: skip

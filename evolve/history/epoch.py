"""The state of a history at one epoch, and tables sampled from it."""

import re

import numpy as np

from evolve.errors import ConfigError
from evolve.history.between import chapter_of_rows, column_between, share_at
from evolve.history.columns import COLUMNS

MOST_ROWS = 1_000_000
"""Longest table that is sampled: more is a slip of the unit, and would fill the memory."""


class Epoch(dict):
    """Column -> value at one epoch; `row` is the row that holds it or the one before."""

    row = 0


def row_of_event(history, label):
    """The row of an event given as "name" or "name[number]".

    Raises
    ------
    ConfigError
        Saying which events there are.
    """
    match = re.fullmatch(r"(\w+)(?:\[(-?\d+)\])?", label.strip())
    name, number = (match[1], int(match[2] or 1)) if match else (label, 1)
    found = [event for event in history.events if event.name == name]
    place = number - 1 if number > 0 else number
    if number == 0 or not -len(found) <= place < len(found):
        counts = {}
        for event in history.events:
            counts[event.name] = counts.get(event.name, 0) + 1
        told = ", ".join(n if k == 1 else f"{n}[1..{k}]" for n, k in counts.items())
        raise ConfigError(f'no event "{label}" in this history; there are {told or "none"}')
    return found[place].row


def state_at(history, row=None, column=None, value=None):
    """The state in a row, or where a column first takes a value.

    Between two rows of a chapter columns run as `evolve.history.between` says; flags keep the
    value of the row before. Where a column jumps across the value, from one chapter to the
    next, the state is that after the jump.

    Returns
    -------
    Epoch

    Raises
    ------
    ConfigError
    """
    if row is None:
        value = _number(_known(history, column), value)
        rows, shares = _places(history, column, np.array([value]))
    else:
        rows, shares = np.array([row]), np.zeros(1)
    epoch = Epoch(
        {name: float(column_between(history, name, rows, shares)[0]) for name in history.columns}
    )
    if shares[0] > 0.0:
        epoch[column] = value
    epoch.row = int(rows[0])
    return epoch


def _known(history, column):
    if column not in history.columns:
        raise ConfigError(f'no column "{column}"; there are {", ".join(history.columns)}')
    return column


def _number(column, value):
    try:
        return float(value)
    except (TypeError, ValueError) as error:
        unit = COLUMNS[column].unit
        what = f"a number, in {unit}" if unit else "a number"
        raise ConfigError(f"{column} = {value!r}: give {what}") from error


def _places(history, column, values):
    """Where a column first has each of some values: the rows before, and shares of their steps."""
    ends = chapter_of_rows(history)[1]
    rows, between = np.array([_first_passage(history, column, v, ends) for v in values]).T
    shares, inner = np.zeros(len(rows)), between > 0
    shares[inner] = share_at(history, column, rows[inner], values[inner])
    return rows, shares


def _first_passage(history, column, value, ends):
    """The row that has the value, and 0; or the last row before it, and 1."""
    values = history.columns[column]
    side = np.sign(values - value)
    hits = np.nonzero(side == 0.0)[0]
    crossed = np.nonzero(side[:-1] * side[1:] < 0.0)[0]
    if COLUMNS[column].flags:
        crossed = crossed[:0]
    if hits.size and (not crossed.size or hits[0] <= crossed[0]):
        return int(hits[0]), 0
    if not crossed.size:
        raise ConfigError(f"{column} never is {value:g}; {_range_of(column, values)}")
    row = int(crossed[0])
    if row == ends[row] or not np.isfinite(values[row : row + 2]).all():
        return row + 1, 0
    return row, 1


def _range_of(column, values):
    finite = values[np.isfinite(values)]
    if not finite.size:
        return "it has no value in this history"
    if COLUMNS[column].flags:
        return "it is " + ", ".join(f"{value:g}" for value in np.unique(finite))
    unit = COLUMNS[column].unit
    return f"it lies between {finite.min():.6g} and {finite.max():.6g} {unit}".rstrip()


def sampled(history, every=None, rows=None, on="time"):
    """A table of a history at evenly spaced values of a column.

    Parameters
    ----------
    history : History
    every : float, optional  [yr]
        Step in time, from the first row; the last row is there too.
    rows : int, optional
        Number of rows, from the first value of the column to its last.
    on : str
        The column whose values are evenly spaced; with `every` it is "time". For a column
        that turns, its first passages.

    Returns
    -------
    dict of ndarray
        All columns. The history is left as it is.

    Raises
    ------
    ConfigError
    """
    _known(history, on)
    if every is None and rows is None:
        return dict(history.columns)
    grid = _steps(history["time"], every, rows, on) if every is not None else None
    if grid is None:
        grid = _even(history[on], rows, on)
    row, share = _places(history, on, grid)
    table = {name: column_between(history, name, row, share) for name in history.columns}
    table[on] = np.where(share > 0.0, grid, table[on])
    return table


def _steps(time, every, rows, on):
    if rows is not None or on != "time":
        raise ConfigError("give a step in time (every), or a number of rows on a column; not both")
    if not every > 0.0:
        raise ConfigError(f"every = {every:g} yr: give a positive time")
    number = (time[-1] - time[0]) / every
    _limit(number)
    grid = time[0] + every * np.arange(int(number) + 1)
    return np.append(grid[grid < time[-1] - 1e-9 * every], time[-1])


def _even(values, rows, on):
    if rows < 2:
        raise ConfigError(f"rows = {rows}: give 2 or more")
    _limit(rows)
    if COLUMNS[on].flags or not np.isfinite(values).all():
        why = "is a flag" if COLUMNS[on].flags else "is not defined throughout this history"
        raise ConfigError(f"rows on {on}: this column {why}; choose another, such as time")
    return np.linspace(values[0], values[-1], rows)


def _limit(number):
    if number > MOST_ROWS:
        raise ConfigError(f"that would be {number:.3g} rows; {MOST_ROWS} is the most")

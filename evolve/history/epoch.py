"""The state of a history at one epoch, and tables sampled from it."""

import re

import numpy as np

from evolve.errors import ConfigError
from evolve.history.columns import COLUMNS

LOGARITHMIC = ("solMass / yr",)
"""Columns of these units are interpolated in the logarithm where they are positive."""


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
    match = re.fullmatch(r"([a-z_]+)(?:\[(-?\d+)\])?", label.strip())
    name, number = (match[1], int(match[2] or 1)) if match else (label, 1)
    found = [event for event in history.events if event.name == name]
    place = number - 1 if number > 0 else number
    if number == 0 or not -len(found) <= place < len(found):
        counts = {}
        for event in history.events:
            counts[event.name] = counts.get(event.name, 0) + 1
        told = ", ".join(n if k == 1 else f"{n}[1..{k}]" for n, k in counts.items())
        raise ConfigError(f'no event "{label}" in this history; there are {told}')
    return found[place].row


def state_at(history, row=None, column=None, value=None):
    """The state in a row, or where a column first takes a value.

    Between two rows a column runs straight in time, rates in the logarithm; flags keep the
    value of the row before. The rows are the solver's steps, so this is as fine as the
    history was computed.

    Returns
    -------
    Epoch

    Raises
    ------
    ConfigError
    """
    if row is not None:
        epoch = Epoch({name: float(values[row]) for name, values in history.columns.items()})
        epoch.row = row
        return epoch
    if column not in history.columns:
        raise ConfigError(f'no column "{column}"; there are {", ".join(history.columns)}')
    values = history.columns[column]
    row, share = _first_passage(column, values, float(value))
    epoch = Epoch(
        {name: _between(name, data, row, share) for name, data in history.columns.items()}
    )
    epoch.row = row
    return epoch


def _first_passage(column, values, value):
    above = values - value
    hits = np.nonzero(above == 0.0)[0]
    crossed = np.nonzero(above[:-1] * above[1:] < 0.0)[0]
    if hits.size and (not crossed.size or hits[0] <= crossed[0]):
        return int(hits[0]), 0.0
    if not crossed.size:
        unit = COLUMNS[column].unit
        low, high = np.nanmin(values), np.nanmax(values)
        raise ConfigError(
            f"{column} never is {value:g} {unit}".rstrip()
            + f"; it runs from {low:.6g} to {high:.6g} {unit}".rstrip()
        )
    row = int(crossed[0])
    return row, float(above[row] / (above[row] - above[row + 1]))


def _between(name, values, row, share):
    left = float(values[row])
    if share == 0.0 or COLUMNS[name].flags:
        return left
    right = float(values[row + 1])
    if COLUMNS[name].unit in LOGARITHMIC and left > 0.0 and right > 0.0:
        return left ** (1.0 - share) * right**share
    return left + share * (right - left)


def sampled(history, every=None, rows=None, on="time"):
    """A table of a history at evenly spaced values of a column.

    Parameters
    ----------
    history : History
    every : float, optional  [yr]
        Step in time.
    rows : int, optional
        Number of rows.
    on : str
        The column whose values are evenly spaced; "time" with `every`. For a column that
        turns, its first passages.

    Returns
    -------
    dict of ndarray
        All columns. The history is left as it is.

    Raises
    ------
    ConfigError
    """
    if every is None and rows is None:
        return dict(history.columns)
    values = history[on] if on in history.columns else None
    if values is None:
        raise ConfigError(f'no column "{on}"; there are {", ".join(history.columns)}')
    if every is not None:
        if not every > 0.0:
            raise ConfigError("--every must be a positive time")
        grid = np.arange(values[0], values[-1], every)
    else:
        if rows < 2:
            raise ConfigError("--rows must be 2 at least")
        grid = np.linspace(values[0], values[-1], rows)
    epochs = [state_at(history, column=on, value=value) for value in grid[:-1]]
    epochs.append(state_at(history, column=on, value=grid[-1]))
    return {name: np.array([epoch[name] for epoch in epochs]) for name in history.columns}

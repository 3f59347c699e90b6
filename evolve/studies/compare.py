"""Histories side by side: events, durations, extreme rates, ends, ledgers, and differences."""

from typing import NamedTuple

import numpy as np

from evolve.errors import ConfigError

EVENT_COLUMNS = ("period", "mass_A", "mass_B", "overflow_A", "overflow_B")
END_COLUMNS = ("period", "mass_A", "mass_B", "separation", "eccentricity", "angular_momentum")
RATES = ("overflow_A", "overflow_B", "wind_A", "wind_B")


class Line(NamedTuple):
    """One line of the table: a quantity, its unit, a value of each history (NaN: none)."""

    group: str
    quantity: str
    unit: str
    values: tuple


class Comparison(NamedTuple):
    """Histories side by side.

    names       of the histories, the first being what the others are compared with
    lines       list of Line
    outcomes    how each ended
    abscissa    name and unit of the common abscissa, or None
    curves      column -> ndarray (n_histories, n_points) on the abscissa; "abscissa" itself
    units       of the curves
    """

    names: tuple
    lines: list
    outcomes: tuple
    abscissa: tuple | None
    curves: dict
    units: dict

    def differences(self, line):
        """Each value of a line minus the first."""
        return tuple(value - line.values[0] for value in line.values)


def compare(histories, names, on="time", points=200):
    """Compare histories.

    Parameters
    ----------
    histories : sequence of History
        At least two.
    names : sequence of str
    on : str
        The common abscissa: a column, or "time_since:EVENT".
    points : int

    Returns
    -------
    Comparison

    Raises
    ------
    ConfigError
        For fewer than two histories, an unknown abscissa, or one that has no span in common.
    """
    if len(histories) < 2:
        raise ConfigError("a comparison needs two histories at least, or --vary KEY=V1,V2")
    lines = [
        *_event_lines(histories), *_duration_lines(histories), *_rate_lines(histories),
        *_end_lines(histories), *_ledger_lines(histories),
    ]  # fmt: skip
    abscissa, curves, units = common_curves(histories, names, on, points)
    return Comparison(
        tuple(names), lines, tuple(h.outcome for h in histories), abscissa, curves, units
    )


def _labels(histories):
    """Names of the events, numbered, in the order in which they first come in any history."""
    labels = []
    for history in histories:
        seen = {}
        for event in history.events:
            if event.name in ("start", "end"):
                continue
            number = seen[event.name] = seen.get(event.name, 0) + 1
            label = event.name if number == 1 else f"{event.name}[{number}]"
            if label not in labels:
                labels.append(label)
    return labels


def _row_at(history, label):
    name, _, number = label.partition("[")
    found = [event for event in history.events if event.name == name]
    number = int(number.rstrip("]")) if number else 1
    return found[number - 1].row if len(found) >= number else None


def _value(history, column, row):
    if row is None or column not in history.columns:
        return float("nan")
    return float(history[column][row])


def _unit(histories, column):
    return next((h.units[column] for h in histories if column in h.units), "")


def _line(histories, group, label, column, rows):
    values = tuple(_value(h, column, row) for h, row in zip(histories, rows, strict=True))
    return Line(group, f"{label}.{column}" if label else column, _unit(histories, column), values)


def _event_lines(histories):
    for label in _labels(histories):
        rows = [_row_at(history, label) for history in histories]
        for column in ("time", *EVENT_COLUMNS):
            line = _line(histories, "events", label, column, rows)
            if any(value for value in line.values if value == value):
                yield line


def _duration_lines(histories):
    for regime in ("detached", "overflow_A", "overflow_B", "inspiral"):
        values = tuple(
            float(sum(ch.end - ch.start for ch in history.chapters if ch.regime == regime))
            for history in histories
        )
        if any(values):
            yield Line("durations", regime, "yr", values)


def _rate_lines(histories):
    for column in RATES:
        if any(column in history.columns for history in histories):
            values = tuple(
                float(history[column].max()) if column in history.columns else float("nan")
                for history in histories
            )
            yield Line("largest", column, _unit(histories, column), values)


def _end_lines(histories):
    rows = [len(history["time"]) - 1 for history in histories]
    for column in ("time", *END_COLUMNS):
        if any(column in history.columns for history in histories):
            yield _line(histories, "end", "", column, rows)


def _ledger_lines(histories):
    for kind, unit in (("angular_momentum", "solMass solRad2 / yr"), ("mass", "solMass")):
        entries = dict.fromkeys(e for h in histories for e in getattr(h.ledger, kind))
        for entry in entries:
            values = tuple(
                float(np.sum(getattr(history.ledger, kind).get(entry, 0.0)))
                for history in histories
            )
            if any(values):
                yield Line("ledger", entry, unit, values)


# On a common abscissa --------------------------------------------------------------------


def abscissa_of(history, on):
    """The rows of a history that make `on` monotone, and its values there.

    Parameters
    ----------
    history : History
    on : str
        A column, or "time_since:EVENT".

    Returns
    -------
    rows : slice
    values : ndarray (n,)
        Monotone: of a column that turns, the longest stretch between two turns.

    Raises
    ------
    ConfigError
    """
    if on.startswith("time_since:"):
        row = _row_at(history, on.removeprefix("time_since:"))
        if row is None:
            raise ConfigError(f"--on {on}: a history has no such event; it has {_told(history)}")
        return slice(row, None), history["time"][row:] - history["time"][row]
    if on not in history.columns:
        raise ConfigError(f"--on {on}: no such column; there are {', '.join(history.columns)}")
    values = history[on]
    steps = np.sign(np.diff(values))
    best, start = slice(0, 1), 0
    for end in range(1, len(steps) + 1):
        if end == len(steps) or steps[end] != steps[start]:
            if steps[start] and end - start > best.stop - best.start - 1:
                best = slice(start, end + 1)
            start = end
    return best, values[best]


def _told(history):
    return ", ".join(dict.fromkeys(event.name for event in history.events))


def common_curves(histories, names, on, points):
    """Columns that all histories have, on an abscissa that all of them cover.

    Returns
    -------
    abscissa : (name, unit)
    curves : dict of ndarray (n_histories, points)
        And "abscissa", ndarray (points,).
    units : dict of str
    """
    spans = [abscissa_of(history, on) for history in histories]
    low = max(values.min() for _, values in spans)
    high = min(values.max() for _, values in spans)
    if not low < high:
        raise ConfigError(f"--on {on}: {' and '.join(names)} have no span of it in common")
    unit = "yr" if on.startswith("time") else histories[0].units[on]
    grid = np.linspace(low, high, points)
    shared = [c for c in histories[0].columns if all(c in h.columns for h in histories)]
    curves = {"abscissa": grid}
    for column in shared:
        if column == on:
            continue
        curves[column] = np.array([
            _interpolated(grid, values, history[column][rows])
            for history, (rows, values) in zip(histories, spans, strict=True)
        ])  # fmt: skip
    return (on, unit), curves, {column: histories[0].units[column] for column in curves if column != "abscissa"}


def _interpolated(grid, abscissa, values):
    order = slice(None) if abscissa[-1] >= abscissa[0] else slice(None, None, -1)
    return np.interp(grid, abscissa[order], values[order])

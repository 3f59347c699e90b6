"""The [draw] table: keys whose values are drawn, and from what."""

from math import isfinite
from typing import NamedTuple

from evolve.config.words import kind_of, nearest

KINDS = ("normal", "uniform", "log-uniform")
COUNT, SEED = 200, 1


class Drawn(NamedTuple):
    """What a key is drawn from, in the unit written.

    kind        "normal": value, plus, minus; "uniform" and "log-uniform": low, high, 0
    unit        as written; "" without one
    """

    kind: str
    first: float
    second: float
    third: float
    unit: str

    def text(self, number):
        """A drawn number as a config has it: a text with its unit, or the number."""
        return f"{float(number)!r} {self.unit}" if self.unit else float(number)


class Draws(NamedTuple):
    """The whole table: key -> Drawn, how many draws, their seed."""

    keys: dict
    count: int
    seed: int


def read_draws(reading, table, path="draw"):
    """The [draw] table of a config or study, checked.

    Parameters
    ----------
    reading : object with `problem(path, reason, *written)`
    table : dict
        As TOML gives it.

    Returns
    -------
    Draws
        Without the keys that were wrong.
    """
    keys = {}
    count = _whole(reading, table, "count", COUNT, 2, path)
    seed = _whole(reading, table, "seed", SEED, 0, path)
    for key, written in table.items():
        if key in ("count", "seed"):
            continue
        if drawn := _drawn(reading, f'{path}."{key}"', written):
            keys[key] = drawn
    return Draws(keys, count, seed)


def _whole(reading, table, key, default, low, path):
    value = table.get(key, default)
    if isinstance(value, bool) or not isinstance(value, int) or value < low:
        reading.problem(f"{path}.{key}", f"allowed: a whole number, {low} or more", value)
        return default
    return value


def _drawn(reading, path, written):
    """One entry; None, and a problem noted, where it is wrong."""
    allowed = f"allowed: a table with one of {', '.join(KINDS)} = [two quantities]"
    if not isinstance(written, dict) or len(written) != 1:
        reading.problem(path, f"{kind_of(written)} is wrong here; {allowed}", written)
        return None
    ((kind, pair),) = written.items()
    if kind not in KINDS:
        near = nearest(kind, KINDS)
        hint = f'; did you mean "{near}"?' if near else ""
        reading.problem(path, f'"{kind}" is unknown; {allowed}{hint}', written)
        return None
    if not isinstance(pair, list) or len(pair) != 2:
        reading.problem(path, f"{allowed}", written)
        return None
    first, second = (number_and_unit(value) for value in pair)
    if first is None or second is None or first[1] != second[1]:
        reading.problem(path, "allowed: two finite quantities in the same unit", written)
        return None
    (a, unit), (b, _) = first, second
    if kind == "normal":
        if b < 0.0:
            reading.problem(path, "the standard deviation must not be negative", written)
            return None
        return Drawn(kind, a, b, b, unit)
    if not a < b or (kind == "log-uniform" and a <= 0.0):
        reading.problem(path, "allowed: low < high, and above 0 for log-uniform", written)
        return None
    return Drawn(kind, a, b, 0.0, unit)


def number_and_unit(value):
    """Number and unit of "0.75 Msun", or of a bare number; None if it is neither."""
    if isinstance(value, bool):
        return None
    if isinstance(value, (int, float)):
        return (float(value), "") if isfinite(value) else None
    if not isinstance(value, str):
        return None
    number, _, unit = value.strip().partition(" ")
    try:
        found = float(number)
    except ValueError:
        return None
    return (found, unit.strip()) if isfinite(found) else None

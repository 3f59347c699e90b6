"""A study: a config, axes over its keys, draws, and what to keep of each history."""

import hashlib
import json
from pathlib import Path
from typing import NamedTuple

import numpy as np

from evolve.config import Config, read_config
from evolve.config.draws import Draws, number_and_unit, read_draws
from evolve.config.read import config_of_parts, parse_toml
from evolve.config.words import nearest, shown
from evolve.errors import ConfigError
from evolve.studies.results import parse_result
from evolve.studies.uncertain import numbers

TABLES = ("config", "base", "vary", "draw", "keep", "observed", "title", "note")
SPACINGS = ("linear", "log")
MOST_POINTS = 10**8


class Axis(NamedTuple):
    """One axis: a key of the config, the values as a config has them, numbers and unit.

    `numbers` are the values in their unit; for words, their place in `values`.
    """

    key: str
    values: tuple
    numbers: np.ndarray
    unit: str


class Study(NamedTuple):
    """What a study file says, checked.

    base        Config of every point before its values are set
    axes        tuple of Axis; the points are their product, and the draws the last axis
    draws       Draws, or None
    keep        tuple of Result: what is kept of each history
    histories   whether whole histories are kept too
    observed    dict of what was observed, for `origin`
    text        canonical text: two studies with the same text have the same results
    title, note
    """

    base: Config
    axes: tuple
    draws: Draws | None
    keep: tuple
    histories: bool
    observed: dict
    text: str
    title: str
    note: str

    @property
    def shape(self):
        """Lengths of the axes, the draws last."""
        lengths = tuple(len(axis.values) for axis in self.axes)
        return lengths + ((self.draws.count,) if self.draws else ())

    @property
    def size(self):
        """Number of points."""
        return int(np.prod(self.shape, dtype=np.int64))

    @property
    def digest(self):
        """SHA-256 of the canonical text."""
        return hashlib.sha256(self.text.encode()).hexdigest()

    def drawn(self):
        """The draws of every key, ndarray (count,), the same ones at each grid point."""
        if not self.draws:
            return {}
        generator = np.random.default_rng(self.draws.seed)
        return {
            key: numbers(generator, drawn, self.draws.count)
            for key, drawn in self.draws.keys.items()
        }

    def points(self, indices):
        """Changes of the config at points, by their numbers in C order.

        Yields
        ------
        dict
            Key -> value.
        """
        drawn = self.drawn()
        for index in indices:
            places = np.unravel_index(index, self.shape) if self.shape else ()
            changes = {
                axis.key: axis.values[place] for axis, place in zip(self.axes, places, strict=False)
            }
            if drawn:
                for key, values in drawn.items():
                    changes[key] = self.draws.keys[key].text(values[places[-1]])
            yield changes


class _Problems:
    def __init__(self, name):
        self.name, self.problems = name, []

    def problem(self, path, reason, *written):
        value = "".join(f" = {shown(value)}" for value in written)
        self.problems.append(f"{self.name}: {path}{value}: {reason}")


def read_study(path, needs=("keep",), allow_code=False):
    """Read and check a study file.

    Parameters
    ----------
    path : str or Path
    needs : sequence of str
        The tables that must be there.
    allow_code : bool
        Whether the config may name a law in a Python file.

    Returns
    -------
    Study

    Raises
    ------
    ConfigError
        With every problem: file, key, value, what is allowed.
    """
    from evolve.config.files import read_text

    path = Path(path)
    raw = parse_toml(read_text(path, "study"), str(path))
    found = _Problems(str(path))
    for key in raw:
        if key not in TABLES:
            near = nearest(key, TABLES)
            hint = f'; did you mean "{near}"?' if near else ""
            found.problem(key, f"unknown; allowed: {', '.join(TABLES)}{hint}", raw[key])
    for key in needs:
        if not isinstance(raw.get(key), dict):
            found.problem(f"[{key}]", "missing")
    if ("config" in raw) == ("base" in raw):
        found.problem("config", 'allowed: one of config = "FILE" and [base]')
    if found.problems:
        raise ConfigError(found.problems)
    base = _base(path, raw, allow_code)
    axes = tuple(
        axis for key, written in raw.get("vary", {}).items()
        if (axis := _axis(found, key, written))
    )  # fmt: skip
    draws = read_draws(found, raw["draw"]) if raw.get("draw") else None
    keep = raw.get("keep", {})
    results = tuple(_results(found, keep.get("results", [])))
    if "keep" in needs and not results and not found.problems:
        found.problem("keep.results", 'allowed: a list such as ["contact.time", "end.period"]')
    if found.problems:
        raise ConfigError(found.problems)
    canonical = {"base": base.raw, "files": base.files, **{k: raw[k] for k in TABLES[2:] if k in raw}}
    study = Study(
        base, axes, draws, results, bool(keep.get("histories", False)), raw.get("observed", {}),
        json.dumps(canonical, sort_keys=True), raw.get("title", ""), raw.get("note", ""),
    )  # fmt: skip
    if study.size > MOST_POINTS:
        raise ConfigError(f"{path}: {study.size} points; allowed: {MOST_POINTS} at most")
    _try_axes(path, study)
    return study


def _base(path, raw, allow_code):
    if "base" in raw:
        if not isinstance(raw["base"], dict):
            raise ConfigError(f"{path}: base: allowed: a table with the keys of a config")
        return config_of_parts(raw["base"], {}, path.parent, f"{path} [base]", allow_code)
    if not isinstance(raw["config"], str):
        raise ConfigError(f"{path}: config = {shown(raw['config'])}: allowed: the path of a config")
    return read_config(path.parent / raw["config"], allow_code=allow_code)


def _axis(found, key, written):
    path = f'vary."{key}"'
    allowed = "allowed: { values = [...] } or { from, to, count, spacing }"
    if not isinstance(written, dict):
        found.problem(path, allowed, written)
        return None
    if set(written) == {"values"}:
        values = written["values"]
        if not isinstance(values, list) or not values:
            found.problem(path, "allowed: a list of values, one at least", written)
            return None
        return _listed(key, values)
    if not {"from", "to", "count"} <= set(written) <= {"from", "to", "count", "spacing"}:
        found.problem(path, allowed, written)
        return None
    return _spaced(found, path, key, written)


def _listed(key, values):
    parts = [number_and_unit(value) for value in values]
    units = {part[1] for part in parts if part}
    if all(parts) and len(units) == 1:
        return Axis(key, tuple(values), np.array([part[0] for part in parts]), units.pop())
    return Axis(key, tuple(values), np.arange(len(values), dtype=float), "")


def _spaced(found, path, key, written):
    low, high = number_and_unit(written["from"]), number_and_unit(written["to"])
    count, spacing = written["count"], written.get("spacing", "linear")
    if low is None or high is None or low[1] != high[1]:
        found.problem(path, "from, to: allowed: two quantities in the same unit", written)
    elif isinstance(count, bool) or not isinstance(count, int) or count < 1:
        found.problem(f"{path}.count", "allowed: a whole number, 1 or more", count)
    elif spacing not in SPACINGS:
        found.problem(f"{path}.spacing", f"allowed: {', '.join(SPACINGS)}", spacing)
    elif spacing == "log" and not (low[0] > 0.0 and high[0] > 0.0):
        found.problem(path, "spacing log: allowed: values above 0", written)
    else:
        space = np.geomspace if spacing == "log" else np.linspace
        steps = space(low[0], high[0], count)
        unit = low[1]
        values = tuple(f"{float(x)!r} {unit}" if unit else float(x) for x in steps)
        return Axis(key, values, steps, unit)
    return None


def _results(found, written):
    if not isinstance(written, list):
        found.problem("keep.results", "allowed: a list of results", written)
        return
    for name in written:
        try:
            yield parse_result(name)
        except ConfigError as error:
            found.problem("keep.results", str(error), name)


def _try_axes(path, study):
    """Every key must be one: the corners of the axes are tried, so that a slip shows at once."""
    problems = []
    for axis in study.axes:
        for value in dict.fromkeys((axis.values[0], axis.values[-1])):
            try:
                study.base.with_values({axis.key: value})
            except ConfigError as error:
                problems += [f"{path}: vary: {line}" for line in error.problems]
    for key, drawn in study.draws.keys.items() if study.draws else ():
        try:
            study.base.with_values({key: drawn.text(drawn.first)})
        except ConfigError as error:
            problems += [f"{path}: draw: {line}" for line in error.problems]
    unknown = [line for line in dict.fromkeys(problems) if "unknown" in line]
    if unknown:
        raise ConfigError(unknown)


__all__ = ["Axis", "Study", "read_study"]

"""One region of starting values: its best start, and how far from it the match still holds."""

from functools import cached_property, lru_cache
from typing import NamedTuple

import numpy as np

from evolve.config.read import config_of_parts
from evolve.errors import EvolveError
from evolve.integrate import integrate
from evolve.studies.observed import FITS, HOPELESS, Match, matches
from evolve.studies.results import uninterrupted

TRIES = 60
"""Histories the optimiser may ask for, for each free value."""


class Origin(NamedTuple):
    """A region of starting values whose history passes through the observation.

    start       key -> number, in the axis's unit (or the word) of the best start
    ranges      key -> (low, high) where the mismatch exceeds the best by less than one, the
                other values held; the ends of the axis where it never does
    units       key -> unit
    match       Match
    fits        whether every quantity is within three standard deviations
    track       observed column (and time) -> ndarray along the history of the best start
    """

    start: dict
    ranges: dict
    units: dict
    match: Match
    fits: bool
    track: dict


class Search(NamedTuple):
    """What is searched: the base config in parts, the axes, what was observed."""

    parts: tuple
    axes: tuple
    observed: tuple


class Direction(NamedTuple):
    """A free value: its axis, place among the axes, ends and step in the searchable scale."""

    key: str
    unit: str
    place: int
    scale: np.ndarray
    log: bool

    def number(self, x):
        """The value at a position of the scale, held in the axis."""
        x = min(max(x, self.scale.min()), self.scale.max())
        return float(np.exp(x)) if self.log else float(x)


def directions(axes):
    """The axes that are searched between their points: numbers, two or more."""
    found = []
    for place, axis in enumerate(axes):
        numeric = axis.unit != "" or all(type(value) in (int, float) for value in axis.values)
        if len(axis.values) > 1 and numeric:
            log = bool((axis.numbers > 0.0).all())
            scale = np.log(axis.numbers) if log else axis.numbers
            found.append(Direction(axis.key, axis.unit, place, scale, log))
    return found


def refine(search, branch, place):
    """The Origin near a point of the grid.

    Parameters
    ----------
    search : Search
    branch : tuple
        Of the match: it must stay on it.
    place : tuple of int
        The grid's point, by the axes.

    Returns
    -------
    Origin or None
        None if the branch is lost, which a minimum of the grid does not allow.
    """
    from scipy.optimize import minimize

    valley = _Valley(search, branch, place)
    start, step = valley.start, valley.step
    if len(start):
        simplex = np.vstack([start, *(start + row for row in np.diag(0.5 * step))])
        answer = minimize(
            valley.mismatch, start, method="Nelder-Mead",
            options={"initial_simplex": simplex, "xatol": 1e-4, "fatol": 1e-4,
                     "maxfev": TRIES * len(start)},
        )  # fmt: skip
        best = answer.x if answer.fun <= valley.mismatch(start) else start
    else:
        best = start
    match, track = valley.look(tuple(best.tolist()))
    if match is None:
        return None
    return Origin(
        valley.changes(best, texts=False), valley.ranges(best, match.mismatch + 1.0),
        {axis.key: axis.unit for axis in search.axes}, match,
        max(abs(d) for d in match.deviations.values()) <= FITS, track,
    )  # fmt: skip


class _Valley:
    """The mismatch on one branch as a function of the free values, the words of a grid point held."""

    def __init__(self, search, branch, place):
        self.search, self.branch = search, branch
        self.free = directions(search.axes)
        free = {direction.place for direction in self.free}
        self.fixed = {
            axis.key: axis.values[at]
            for n, (axis, at) in enumerate(zip(search.axes, place, strict=True))
            if n not in free
        }
        self.start = np.array([d.scale[place[d.place]] for d in self.free])
        self.low = np.array([d.scale.min() for d in self.free])
        self.high = np.array([d.scale.max() for d in self.free])
        self.step = np.array([np.abs(np.diff(d.scale)).max() for d in self.free])
        self.step *= np.where(self.start + 0.5 * self.step > self.high, -1.0, 1.0)  # inward
        self.look = lru_cache(maxsize=4096)(self._look)

    @cached_property
    def base(self):
        return config_of_parts(*self.search.parts)

    def changes(self, x, texts=True):
        """Key -> value, as a config has it or as a number."""
        found = {}
        for direction, position in zip(self.free, x, strict=True):
            number = direction.number(position)
            text = f"{number!r} {direction.unit}" if direction.unit else number
            found[direction.key] = text if texts else number
        return found | self.fixed

    def _look(self, x):
        """(match, track) of a start; (None, None) where there is none on this branch."""
        try:
            history = integrate(self.base.with_values(self.changes(x)), many=True)
        except EvolveError:
            return None, None
        found = matches(uninterrupted(history), self.search.observed, self.branch)
        if not found:
            return None, None
        columns = ["time", *(item.column for item in self.search.observed)]
        return found[0], {name: history[name].astype(np.float32) for name in columns}

    def mismatch(self, x):
        """Sum of squared deviations; outside the axes it grows with the distance."""
        match, _ = self.look(tuple(np.clip(x, self.low, self.high).tolist()))
        outside = np.sum(np.abs((x - np.clip(x, self.low, self.high)) / self.step)) if len(x) else 0.0
        return (HOPELESS if match is None else match.mismatch) + 1e3 * outside

    def ranges(self, best, level):
        """Where the mismatch stays below `level` along each axis, the others held."""
        found = {}
        for n, direction in enumerate(self.free):
            ends = [self._end(best, n, bound, level) for bound in (self.low[n], self.high[n])]
            found[direction.key] = tuple(sorted(direction.number(end) for end in ends))
        return found

    def _end(self, best, n, bound, level):
        x, inside, outside = best.copy(), best[n], bound
        x[n] = bound
        if self.mismatch(x) <= level:
            return bound
        while abs(outside - inside) > 1e-3 * abs(self.step[n]):
            x[n] = 0.5 * (inside + outside)
            inside, outside = (inside, x[n]) if self.mismatch(x) > level else (x[n], outside)
        return inside

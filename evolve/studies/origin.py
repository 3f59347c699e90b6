"""Which starting pairs pass through an observed one.

The free starting values are the axes of the study. A grid of histories finds, on each branch
(regime, how many contacts, period falling or rising), where the mismatch has a minimum; a
scipy optimiser refines each between the grid's points.
"""

from functools import partial
from itertools import product
from typing import NamedTuple

import numpy as np

from evolve.config.units import conversion_factor, dimension_of, parse_quantity, parse_uncertain
from evolve.errors import ConfigError
from evolve.history.between import column_between
from evolve.history.columns import COLUMNS
from evolve.integrate import integrate
from evolve.studies.many import run_many
from evolve.studies.study import read_study

FITS = 3.0
"""A match fits if no observed quantity is off by more standard deviations than this."""
LIMIT_WIDTH = 0.05
"""A limit that is broken counts one standard deviation per this much of log10."""
FINE = 8
"""Points looked at between two rows of a history."""
HOPELESS = 1e6
A_BRANCH, REFINED = 2, 6
"""So many minima of the grid are refined on one branch, and altogether."""


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


class Origin(NamedTuple):
    """A region of starting values whose history passes through the observation.

    start       key -> number, in the axis's unit
    ranges      key -> (low, high) where the mismatch exceeds the best by less than one, the
                other values held; the ends of the axis where it never does
    units       key -> unit
    match       Match
    fits        whether every quantity is within three standard deviations
    """

    start: dict
    ranges: dict
    units: dict
    match: Match
    fits: bool


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


def matches(history, observed):
    """The best match of each branch of a history, list of Match."""
    if any(item.column not in history.columns for item in observed):
        return []
    best = {}
    for first, last, branch in _branches(history):
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


# Over the starting values -------------------------------------------------------------------


def origin(study, workers=1, progress=None):
    """Starting pairs that pass through the observed one.

    Parameters
    ----------
    study : Study, str or Path
        Its axes are the free starting values, [observed] what was seen.
    workers : int
    progress : callable, optional
        Called with the number of histories of the grid done.

    Returns
    -------
    list of Origin
        Those that fit first, then the nearest misses; by mismatch.

    Raises
    ------
    ConfigError
    """
    if not hasattr(study, "axes"):
        study = read_study(study, needs=("vary", "observed"))
    observed = read_observed(study.observed, study.base.name)
    if study.draws:
        raise ConfigError("a study of origins takes no [draw]; its axes are [vary]")
    grid = _grid(study, observed, workers, progress)
    found = [
        _refined(study, observed, branch, start) for branch, start in _minima(study, grid)
    ]
    return _distinct(sorted(found, key=lambda entry: (not entry.fits, entry.match.mismatch)))


def _grid(study, observed, workers, progress):
    """Branch -> array of mismatches over the axes."""
    grid = {}
    configs = (_changed(study, change) for change in study.points(range(study.size)))
    reduce = partial(matches, observed=observed)
    for outcome in run_many(configs, workers, reduce):
        for match in outcome.value or []:
            cells = grid.setdefault(match.branch, np.full(study.size, np.inf))
            cells[outcome.index] = match.mismatch
        if progress:
            progress(outcome.index + 1)
    return {branch: cells.reshape(study.shape) for branch, cells in grid.items()}


def _changed(study, change):
    """The config of a point, or what run_many refuses with the reason."""
    try:
        return study.base.with_values(change)
    except ConfigError:
        return {}


def _minima(study, grid):
    """(branch, grid place) of local minima of the mismatch, the better ones first."""
    found = []
    for branch, cells in grid.items():
        for place in product(*(range(n) for n in study.shape)):
            here = cells[place]
            if not np.isfinite(here) or here >= HOPELESS:
                continue
            around = tuple(slice(max(i - 1, 0), i + 2) for i in place)
            if here <= np.min(cells[around]):
                found.append((here, branch, place))
    found.sort(key=lambda item: item[0])
    chosen, taken = [], {}
    for _, branch, place in found:
        taken[branch] = taken.get(branch, 0) + 1
        if taken[branch] <= A_BRANCH and len(chosen) < REFINED:
            chosen.append((branch, place))
    return chosen


def _coordinates(study):
    """Axes with a range to search, and their numbers in a searchable scale."""
    free = [axis for axis in study.axes if len(axis.values) > 1 and _is_number(axis)]
    return free, [np.log(a.numbers) if (a.numbers > 0.0).all() else a.numbers for a in free]


def _is_number(axis):
    return axis.unit != "" or all(isinstance(value, float) for value in axis.values)


def _refined(study, observed, branch, place):
    from scipy.optimize import minimize

    free, scales = _coordinates(study)
    fixed = {
        axis.key: axis.values[at]
        for axis, at in zip(study.axes, place, strict=True)
        if axis not in free
    }
    at = {axis.key: n for axis, n in zip(study.axes, place, strict=True)}
    start = np.array([scale[at[axis.key]] for axis, scale in zip(free, scales, strict=True)])
    low = np.array([scale.min() for scale in scales])
    high = np.array([scale.max() for scale in scales])
    step = np.array([np.abs(np.diff(scale)).max() for scale in scales])

    def numbers(x):
        x = np.clip(x, low, high)
        return {
            axis.key: float(np.exp(v)) if (axis.numbers > 0.0).all() else float(v)
            for axis, v in zip(free, x, strict=True)
        }

    def match_at(x):
        change = {k: _text(study, k, v) for k, v in numbers(x).items()} | fixed
        try:
            history = integrate(study.base.with_values(change))
        except ConfigError:
            return None
        return next((m for m in matches(history, observed) if m.branch == branch), None)

    def mismatch(x):
        match = match_at(x)
        outside = np.sum(np.abs(x - np.clip(x, low, high)) / step)
        return (HOPELESS if match is None else match.mismatch) + 1e3 * outside

    simplex = np.vstack([start, *(start + row for row in np.diag(0.5 * step))])
    answer = minimize(
        mismatch, start, method="Nelder-Mead",
        options={"initial_simplex": simplex, "xatol": 1e-4, "fatol": 1e-4, "maxfev": 50 * len(free)},
    )  # fmt: skip
    match = match_at(answer.x) or match_at(start)
    ranges = _ranges(free, answer.x, low, high, step, mismatch, match.mismatch + 1.0)
    return Origin(
        {**numbers(answer.x), **fixed}, ranges, {axis.key: axis.unit for axis in study.axes}, match,
        max(abs(d) for d in match.deviations.values()) <= FITS,
    )  # fmt: skip


def _text(study, key, number):
    axis = next(axis for axis in study.axes if axis.key == key)
    return f"{number!r} {axis.unit}" if axis.unit else number


def _ranges(free, best, low, high, step, mismatch, level):
    """Where the mismatch stays below `level` along each axis, the others held."""
    found = {}
    for n, axis in enumerate(free):
        ends = []
        for bound in (low[n], high[n]):
            inside, outside = best[n], bound
            x = best.copy()
            x[n] = bound
            if mismatch(x) > level:
                while abs(outside - inside) > 1e-3 * step[n]:
                    x[n] = 0.5 * (inside + outside)
                    inside, outside = (inside, x[n]) if mismatch(x) > level else (x[n], outside)
            else:
                inside = bound
            ends.append(float(np.exp(inside)) if (axis.numbers > 0.0).all() else float(inside))
        found[axis.key] = tuple(sorted(ends))
    return found


def _distinct(origins):
    """Without those that refined to the same start on the same branch."""
    kept = []
    for entry in origins:
        same = any(
            other.match.branch == entry.match.branch and _close(other.start, entry.start)
            for other in kept
        )
        if not same:
            kept.append(entry)
    return kept


def _close(one, other):
    return all(
        abs(one[k] - other[k]) <= 0.01 * abs(one[k]) if isinstance(one[k], float) else one[k] == other[k]
        for k in one
    )

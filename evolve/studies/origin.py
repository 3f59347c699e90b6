"""Which starting pairs pass through an observed one.

The free values (of the start, or of a law) are the axes of the study. A grid of histories
finds, on each branch (regime, how many contacts, period falling or rising), where the mismatch
has a minimum; a scipy optimiser refines each between the grid's points.
"""

from functools import partial
from itertools import islice, product
from typing import NamedTuple

import numpy as np

from evolve.errors import ConfigError
from evolve.studies.blocks import Pace, Task, computed, executor, parts_of
from evolve.studies.observed import HOPELESS, matches, read_observed
from evolve.studies.refine import Search, refine
from evolve.studies.study import read_study
from evolve.studies.study_archive import scales_of

A_BRANCH, REFINED = 4, 12
"""So many minima of the grid are refined on one branch, and altogether."""


class Origins(NamedTuple):
    """What a search found.

    origins   list of Origin: those that fit first, then the nearest misses; by mismatch
    scales    list of Scale: the axes searched
    maps      branch -> ndarray over the scales: mismatch, inf where no history has the branch
    observed  tuple of Observed
    messages  dict: number of a point that has no history (C order) -> the reason
    title
    """

    origins: list
    scales: list
    maps: dict
    observed: tuple
    messages: dict
    title: str

    @property
    def fitting(self):
        """The origins that fit, list."""
        return [entry for entry in self.origins if entry.fits]


def origin(study, workers=1, cluster=None, progress=None):
    """Starting pairs that pass through the observed one.

    Parameters
    ----------
    study : Study, str or Path
        Its axes are the free values, [observed] what was seen.
    workers : int
        Processes.
    cluster : str, optional
        Address of a dask.distributed scheduler, in place of processes here.
    progress : callable, optional
        Called as progress(done, total, what): what is "history", then "region".

    Returns
    -------
    Origins

    Raises
    ------
    ConfigError
    MachineError
        If workers die.
    """
    if not hasattr(study, "axes"):
        study = read_study(study, needs=("vary", "observed"))
    if workers < 1:
        raise ConfigError(f"workers = {workers}: allowed: 1 or more")
    observed = read_observed(study.observed, study.base.name)
    if study.draws:
        raise ConfigError("a study of origins takes no [draw]; its axes are [vary]")
    progress = progress or (lambda done, total, what: None)
    maps, messages = _grid(study, observed, (workers, cluster), progress)
    search = Search(parts_of(study.base), study.axes, observed)
    found = _refined(search, _minima(maps), (workers, cluster), progress)
    found.sort(key=lambda entry: (not entry.fits, entry.match.mismatch))
    return Origins(_distinct(found), scales_of(study), maps, observed, messages, study.title)


def _grid(study, observed, where, progress):
    """(branch -> array of mismatches over the axes, messages of failed points)."""
    maps, messages, done = {}, {}, 0
    task, pace = Task(parts_of(study.base), partial(matches, observed=observed), True), Pace()
    progress(0, study.size, "history")
    for rows in computed(task, _blocks(study, pace), pace, *where):
        for row in rows:
            if row.message:
                messages[row.index] = row.message
            for match in row.value or []:
                cells = maps.setdefault(match.branch, np.full(study.size, np.inf))
                cells[row.index] = match.mismatch
        done += len(rows)
        progress(done, study.size, "history")
    ordered = {branch: maps[branch].reshape(study.shape) for branch in sorted(maps)}
    return ordered, dict(sorted(messages.items()))


def _blocks(study, pace):
    changes, first = study.points(range(study.size)), 0
    while first < study.size:
        some = list(range(first, min(first + pace.size, study.size)))
        yield some, list(islice(changes, len(some)))
        first += len(some)


def _minima(maps):
    """(branch, place) of local minima of the mismatch, the better ones first."""
    found = []
    for branch, cells in maps.items():
        for place in product(*(range(n) for n in cells.shape)):
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


def _refined(search, minima, where, progress):
    found = []
    progress(0, len(minima), "region")
    for number, entry in enumerate(_each(search, minima, *where), 1):
        found += [entry] if entry else []
        progress(number, len(minima), "region")
    return found


def _each(search, minima, workers, cluster):
    if workers == 1 and not cluster:
        for minimum in minima:
            yield refine(search, *minimum)
        return
    with executor(workers, cluster) as (pool, _):
        for future in [pool.submit(refine, search, *minimum) for minimum in minima]:
            yield future.result()


def _distinct(origins):
    """Without those that lie, on the same branch, in the region of a better one."""
    kept = []
    for entry in origins:
        if not any(_same_region(other, entry) for other in kept):
            kept.append(entry)
    return kept


def _same_region(better, entry):
    if better.match.branch != entry.match.branch or better.fits != entry.fits:
        return False
    for key, value in entry.start.items():
        best = better.start[key]
        low, high = better.ranges.get(key, (best, best))
        near = isinstance(best, float) and abs(value - best) <= 0.01 * abs(best)
        if not (near or value == best or isinstance(best, float) and low <= value <= high):
            return False
    return True

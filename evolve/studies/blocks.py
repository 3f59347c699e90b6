"""Blocks of a study's points: on this process, on others, on a cluster.

What a point gives depends on nothing but the point, so blocks may be of any size and come back
in any order. A block takes about a second: long enough to make its transport cheap, short
enough that a kill loses little.
"""

from concurrent.futures import FIRST_COMPLETED, BrokenExecutor, ProcessPoolExecutor, wait
from contextlib import contextmanager
from time import perf_counter
from typing import Any, Callable, NamedTuple

from evolve.config.read import config_of_parts
from evolve.errors import EvolveError, MachineError, MissingExtra
from evolve.integrate import integrate
from evolve.studies.journal import clipped
from evolve.studies.many import AHEAD, worker_starts
from evolve.studies.results import OUTCOMES, uninterrupted

SECONDS, LARGEST = 0.5, 512
"""Time that a block should take, and the most points it may have."""
REFUSED = OUTCOMES.index("refused")


class Task(NamedTuple):
    """What every worker must know of a study.

    parts   (raw, files, folder, name, allow_code) of the base config
    reduce  history -> what is kept of it; a function of a module, or a partial of one
    many    whether there are so many points that a compilation pays
    """

    parts: tuple
    reduce: Callable
    many: bool


class Row(NamedTuple):
    """One point: its number, what is kept of its history (None if it has none), its end (by
    OUTCOMES), its reason if it failed."""

    index: int
    value: Any
    code: int
    message: str


class Pace:
    """The size of the next block, from what the last ones took."""

    def __init__(self):
        self.size = 1

    def heed(self, seconds, points):
        """Take notice of a block; sizes at most double, so that one fast point fools nobody."""
        wanted = int(SECONDS * points / max(seconds, 1e-9))
        self.size = min(max(wanted, 1), 2 * self.size, LARGEST)


def computed(task, blocks, pace, workers=1, cluster=None):
    """Rows of blocks, each block as soon as it is done.

    Parameters
    ----------
    task : Task
    blocks : iterator of (indices, changes)
        Made as they are needed, with few of them in flight.
    pace : Pace
    workers : int
    cluster : str, optional
        Address of a dask.distributed scheduler, in place of processes here.

    Yields
    ------
    list of Row

    Raises
    ------
    MachineError
        If worker processes die or the cluster cannot be reached.
    """
    if workers == 1 and not cluster:
        for block in blocks:
            seconds, rows = run_block(task, *block)
            pace.heed(seconds, len(rows))
            yield rows
        return
    with executor(workers, cluster) as (pool, lanes):
        waiting = set()
        for block in blocks:
            waiting.add(pool.submit(run_block, task, *block))
            if len(waiting) >= AHEAD * lanes:
                done, waiting = wait(waiting, return_when=FIRST_COMPLETED)
                yield from _taken(done, pace)
        while waiting:
            done, waiting = wait(waiting, return_when=FIRST_COMPLETED)
            yield from _taken(done, pace)


def _taken(done, pace):
    for future in done:
        seconds, rows = future.result()
        pace.heed(seconds, len(rows))
        yield rows


@contextmanager
def executor(workers, cluster=None):
    """(executor, number of lanes) of processes or of a cluster's workers.

    What is not begun is dropped after a fault.

    Raises
    ------
    MachineError
        As `computed`.
    """
    if cluster:
        with _client(cluster) as client, _failing("the cluster"):
            lanes = max(sum(client.nthreads().values()), 1)
            yield client.get_executor(pure=False), lanes
        return
    pool = ProcessPoolExecutor(workers, initializer=worker_starts)
    try:
        with _failing("a worker process"):
            yield pool, workers
    finally:
        pool.shutdown(wait=True, cancel_futures=True)


@contextmanager
def _failing(what):
    try:
        yield
    except (EvolveError, KeyboardInterrupt, GeneratorExit):
        raise
    except BrokenExecutor as error:
        raise MachineError(f"{what} died; what was done is kept, the same command goes on") from error
    except Exception as error:
        # a cluster fails in many ways, each with an exception of its own
        raise MachineError(
            f"{what} failed ({type(error).__name__}: {error}); what was done is kept, the same "
            "command goes on"
        ) from error


def _client(address):
    try:
        from distributed import Client
    except ImportError as error:
        raise MissingExtra("dask[distributed]", "cluster") from error
    try:
        return Client(address, set_as_default=False)
    except (OSError, ValueError) as error:
        raise MachineError(f"--cluster {address}: no dask scheduler answers there ({error})") from error


def run_block(task, indices, changes):
    """(seconds, rows) of some points; what a worker does.

    A point that makes no config, or whose pair cannot start, is "refused" and has no value.
    """
    start = perf_counter()
    base = config_of_parts(*task.parts)
    rows = [run_point(task, base, *point) for point in zip(indices, changes, strict=True)]
    return perf_counter() - start, rows


def run_point(task, base, index, change):
    """The Row of one point."""
    try:
        history = uninterrupted(integrate(base.with_values(change), many=task.many))
    except EvolveError as error:
        return Row(index, None, REFUSED, clipped(str(error)))
    message = "" if history.complete else clipped(history.message)
    return Row(index, task.reduce(history), OUTCOMES.index(history.outcome), message)


def parts_of(config):
    """A config in what can be sent to another process."""
    return config.raw, config.files, config.folder, config.name, config.allow_code

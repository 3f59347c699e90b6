"""Many histories: the one call every study uses."""

import os
import threading
from collections import deque
from concurrent.futures import ProcessPoolExecutor
from typing import Any, NamedTuple

from evolve.config import Config, read_config
from evolve.config.schema import ENGINES
from evolve.errors import ConfigError, EvolveError
from evolve.integrate import integrate

AHEAD = 4
"""Blocks in flight a worker: enough to keep it busy, few enough to keep memory flat."""


class Outcome(NamedTuple):
    """One of many: its number, its history (or what `reduce` made of it), why there is none."""

    index: int
    value: Any
    error: str


def run_many(configs, workers=1, reduce=None, block=8, engine="auto"):
    """Histories of many configs, in their order.

    Parameters
    ----------
    configs : iterable of Config, dict or path
        Read as it is needed; may be endless. Those that differ in values only are compiled
        once.
    engine : str
        "auto": as each config has it, and if that says nothing, compiled where numba is there;
        "compiled" or "plain". Never chosen by the number of workers.
    workers : int
        Processes. The results do not depend on it.
    reduce : callable, optional
        history -> what is kept of it; a function of a module, to reach the workers.
    block : int
        Configs a worker is given at once.

    Yields
    ------
    Outcome
        One bad config gives one failed outcome, with its reason.

    Raises
    ------
    ConfigError
        If `workers` is no positive number.
    """
    if workers < 1:
        raise ConfigError(f"workers = {workers}: allowed: 1 or more")
    if engine not in ENGINES:
        raise ConfigError(f"engine = {engine!r}: allowed: {', '.join(ENGINES)}")
    blocks = _blocks(configs, block if workers > 1 else 1)
    if workers == 1:
        for first, parts in blocks:
            yield from _run_block(first, parts, engine, reduce)
        return
    with ProcessPoolExecutor(workers, initializer=worker_starts) as pool:
        yield from in_order(
            (pool.submit(_run_block, first, parts, engine, reduce) for first, parts in blocks),
            AHEAD * workers,
        )


def in_order(futures, ahead):
    """Results of futures, in the order of their submission, with few of them in flight."""
    waiting = deque()
    for future in futures:
        waiting.append(future)
        if len(waiting) >= ahead:
            yield from waiting.popleft().result()
    while waiting:
        yield from waiting.popleft().result()


def worker_starts():
    """What a worker process does first: one thread, Ctrl-C left to the parent, and an end when the
    parent is killed. A worker that outlived it would wait for ever, and hold a journal's lock."""
    import signal

    signal.signal(signal.SIGINT, signal.SIG_IGN)
    for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
        os.environ[name] = "1"
    threading.Thread(target=_end_with_parent, daemon=True).start()


def _end_with_parent():
    from multiprocessing import connection, parent_process

    connection.wait([parent_process().sentinel])
    os._exit(1)


def _blocks(configs, size):
    """(number of the first, parts) of blocks of configs, in what can be pickled."""
    parts, first = [], 0
    for number, config in enumerate(configs):
        parts.append(_portable(config))
        if len(parts) == size:
            yield first, parts
            parts, first = [], number + 1
    if parts:
        yield first, parts


def _portable(config):
    """A config in what can be pickled: functions of the user's own are read again."""
    if isinstance(config, Config) and config.user_laws:
        return (config.raw, config.files, config.folder, config.name, config.allow_code)
    return config


def _run_block(first, parts, engine, reduce):
    return [_run_one(first + place, part, engine, reduce) for place, part in enumerate(parts)]


def _run_one(index, part, engine, reduce):
    from evolve.config.read import config_of_parts

    try:
        config = config_of_parts(*part) if isinstance(part, tuple) else read_config(part)
        if engine not in ("auto", config.values["numerics"]["engine"]):
            config = config.with_values({"numerics.engine": engine})
        history = integrate(config, many=True)
        return Outcome(index, reduce(history) if reduce else history, "")
    except EvolveError as error:
        return Outcome(index, None, str(error))

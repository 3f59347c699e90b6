"""A sweep: one history a point of a study, what is kept of it, one archive."""

from concurrent.futures import ProcessPoolExecutor
from pathlib import Path

import numpy as np

from evolve.archive.paths import check_output
from evolve.config.read import config_of_parts
from evolve.errors import EvolveError, MissingExtra
from evolve.integrate import integrate
from evolve.studies.journal import Journal
from evolve.studies.many import AHEAD, in_order, quiet_worker
from evolve.studies.results import OUTCOMES, value_of
from evolve.studies.study import read_study
from evolve.studies.study_archive import StudyResult, write_study

BLOCK = 16
"""Points a worker is given at once."""
REFUSED = OUTCOMES.index("refused")


def sweep(study, output=None, workers=1, cluster=None, replace=False, progress=None):
    """Run a study, or what is left of it.

    Parameters
    ----------
    study : Study, str or Path
    output : str or Path, optional
        The archive; without one nothing is written, and nothing can be resumed.
    workers : int
        Processes.
    cluster : str, optional
        Address of a dask.distributed scheduler, in place of processes here.
    replace : bool
        Whether an existing archive, and a journal of another study, may be replaced.
    progress : callable, optional
        Called with the number of points done.

    Returns
    -------
    StudyResult
        The same, to the bit, for any number of workers and after any interruption.

    Raises
    ------
    ConfigError
        For a study that is wrong or has changed, or an output that cannot be written.
    """
    study = study if hasattr(study, "axes") else read_study(study)
    values = np.full((study.size, len(study.keep)), np.nan)
    codes = np.zeros(study.size, dtype=np.int16)
    messages = {}

    def note(index, numbers, code, message):
        values[index], codes[index] = numbers, code
        if message:
            messages[index] = message

    if output is None:
        _compute(study, range(study.size), workers, cluster, note, progress)
    else:
        check_output(output, replace)
        path = journal_path(output)
        if replace:
            path.unlink(missing_ok=True)
        with Journal(path, study.digest, len(study.keep)) as journal:
            for record in journal.records():
                note(*record)
            left = np.nonzero(codes == 0)[0].tolist()
            if progress:
                progress(study.size - len(left))

            def write(index, numbers, code, message):
                note(index, numbers, code, message)
                journal.add(index, numbers, code, message)

            _compute(study, left, workers, cluster, write, progress)
    result = StudyResult.of(study, values, codes, messages)
    if output is not None:
        write_study(result, output, replace)
        journal_path(output).unlink(missing_ok=True)
    return result


def journal_path(output):
    """The journal beside an archive that is to be."""
    output = Path(output)
    return output.with_name(output.name + ".journal")


def _compute(study, indices, workers, cluster, note, progress):
    parts = (study.base.raw, study.base.files, study.base.folder, study.base.name,
             study.base.allow_code)  # fmt: skip
    done = study.size - len(indices)
    for rows in _mapped(_blocks(study, indices), parts, study.keep, workers, cluster):
        for row in rows:
            note(*row)
        done += len(rows)
        if progress:
            progress(done)


def _blocks(study, indices):
    """Blocks of (indices, changes), made as they are needed."""
    for first in range(0, len(indices), BLOCK):
        some = list(indices[first : first + BLOCK])
        yield some, list(study.points(some))


def _mapped(blocks, parts, keep, workers, cluster):
    """Rows of each block, in order, here or in other processes."""
    if cluster:
        with _client(cluster) as client:
            futures = (client.submit(run_block, parts, keep, *block, pure=False) for block in blocks)
            ahead = AHEAD * max(sum(client.nthreads().values()), 1)
            yield from _listed(futures, ahead)
    elif workers == 1:
        for block in blocks:
            yield run_block(parts, keep, *block)
    else:
        with ProcessPoolExecutor(workers, initializer=quiet_worker) as pool:
            futures = (pool.submit(run_block, parts, keep, *block) for block in blocks)
            yield from _listed(futures, AHEAD * workers)


def _listed(futures, ahead):
    for row in in_order(futures, ahead):
        yield [row]


def _client(address):
    try:
        from distributed import Client
    except ImportError as error:
        raise MissingExtra("dask[distributed]", "cluster") from error
    return Client(address)


def run_block(parts, keep, indices, changes):
    """Rows (index, values, code, message) of some points; what a worker does.

    A point that makes no config, or whose pair cannot start, is "refused"; its values are NaN.
    """
    base = config_of_parts(*parts)
    return [_run_point(base, keep, index, change) for index, change in zip(indices, changes, strict=True)]


def _run_point(base, keep, index, change):
    try:
        history = integrate(base.with_values(change))
    except EvolveError as error:
        return index, [float("nan")] * len(keep), REFUSED, str(error)
    values = [value_of(history, result) for result in keep]
    message = "" if history.complete else history.message
    return index, values, OUTCOMES.index(history.outcome), message

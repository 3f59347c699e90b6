"""A sweep: one history a point of a study, what is kept of it, one archive."""

import json
from functools import partial
from hashlib import sha256
from itertools import islice
from pathlib import Path

import numpy as np

from evolve import __version__
from evolve.archive.paths import check_output, whole_file
from evolve.archive.write import archive_bytes
from evolve.errors import ConfigError
from evolve.studies.blocks import REFUSED, Pace, Task, computed, parts_of
from evolve.studies.journal import Journal
from evolve.studies.results import value_of
from evolve.studies.study import read_study
from evolve.studies.study_archive import StudyResult, study_versions, write_study

MANY = 1000
"""From so many points on a study takes the compiled engine, where there is one: its first
compilation lasts as long as some hundred histories in plain Python."""


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
        Called with the number of points done, first with those done before.

    Returns
    -------
    StudyResult
        The same, to the bit, for any number of workers and after any interruption.

    Raises
    ------
    ConfigError
        For a study that is wrong or has changed, or an output that cannot be written.
    MachineError
        If workers die; what was done is kept.
    """
    study = study if hasattr(study, "axes") else read_study(study)
    if workers < 1:
        raise ConfigError(f"workers = {workers}: allowed: 1 or more")
    found = _Found(study)
    if output is None:
        if study.histories:
            raise ConfigError("keep.histories: histories are written beside an output; give one")
        for row in _rows(study, found.left(), workers, cluster, progress):
            found.note(row.index, *_numbers(row, study))
        return found.result()
    check_output(output, replace)
    with Journal(journal_path(output), journal_digest(study), len(study.keep), replace) as journal:
        _resumed(study, found, journal, Path(output), (workers, cluster), progress)
        result = found.result()
        write_study(result, output, replace)
        journal_path(output).unlink(missing_ok=True)
    return result


def _resumed(study, found, journal, output, where, progress):
    for record in journal.records():
        found.note(*record)
    folder = histories_folder(output)
    if study.histories:
        folder.mkdir(exist_ok=True)
        found.forget(lambda index: not _history_path(folder, index).is_file())
    for row in _rows(study, found.left(), *where, progress):
        if study.histories and row.value:
            with whole_file(_history_path(folder, row.index)) as part:
                part.write_bytes(row.value[1])
        record = row.index, *_numbers(row, study)
        found.note(*record)
        journal.add(*record)


def _numbers(row, study):
    """(results, end, reason) of a row; NaN throughout where there is no history."""
    values = row.value[0] if row.value else [float("nan")] * len(study.keep)
    return values, row.code, row.message


def journal_digest(study):
    """Of the study and of what its bits rest on: a journal of other versions does not go on."""
    versions = json.dumps([__version__, study_versions()], sort_keys=True)
    return sha256(f"{study.digest} {versions}".encode()).hexdigest()


def journal_path(output):
    """The journal beside an archive that is to be."""
    output = Path(output)
    return output.with_name(output.name + ".journal")


def histories_folder(output):
    """The folder beside an archive with the archive of each history, if they are kept."""
    output = Path(output)
    return output.with_name(output.stem + "_histories")


def _history_path(folder, index):
    return folder / f"{index:08d}.h5"


class _Found:
    """What is known of a study's points so far."""

    def __init__(self, study):
        self.study = study
        self.values = np.full((study.size, len(study.keep)), np.nan)
        self.codes = np.zeros(study.size, dtype=np.int16)
        self.messages = {}

    def note(self, index, numbers, code, message):
        self.values[index], self.codes[index] = numbers, code
        if message:
            self.messages[index] = message

    def forget(self, lost):
        """Take back those points that have a history and of which `lost(index)` is true."""
        for index in np.nonzero((self.codes != 0) & (self.codes != REFUSED))[0].tolist():
            if lost(index):
                self.codes[index] = 0
                self.messages.pop(index, None)

    def left(self):
        """Numbers of the points without an answer, ndarray."""
        return np.nonzero(self.codes == 0)[0]

    def result(self):
        return StudyResult.of(self.study, self.values, self.codes, self.messages)


def _rows(study, left, workers, cluster, progress):
    pace = Pace()
    reduce = partial(kept, keep=study.keep, histories=study.histories)
    task = Task(parts_of(study.base), reduce, study.size >= MANY)
    done = study.size - len(left)
    if progress:
        progress(done)
    for rows in computed(task, _blocks(study, left, pace), pace, workers, cluster):
        yield from rows
        done += len(rows)
        if progress:
            progress(done)


def kept(history, keep, histories):
    """(results, bytes of the history's archive if it is wanted) of one history."""
    values = [value_of(history, result) for result in keep]
    return values, archive_bytes(history) if histories else b""


def _blocks(study, indices, pace):
    """(indices, changes) of blocks, made as they are needed."""
    changes, first = study.points(indices.tolist()), 0
    while first < len(indices):
        some = indices[first : first + pace.size].tolist()
        yield some, list(islice(changes, len(some)))
        first += len(some)

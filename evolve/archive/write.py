"""Writing a history to HDF5: self-describing, checksummed, whole or not at all."""

import io
import json

import numpy as np

from evolve.archive.digest import digest_of, seal_of
from evolve.archive.paths import check_output, whole_file
from evolve.history.columns import COLUMNS, attributes_of
from evolve.history.ledger import MASS_UNIT, MOMENTUM_UNIT

FORMAT = "evolve-archive"
LAYOUT = 1
LONGEST_ATTRIBUTE = 60000
"""HDF5 refuses attributes over 64 kB; longer texts become datasets of the group /texts."""


def write_archive(history, path, replace=False):
    """Write a history.

    Parameters
    ----------
    history : evolve.history.History
    path : str or Path
    replace : bool
        Whether an existing file may be replaced.

    Raises
    ------
    ConfigError
        If the path cannot be written to.
    ArchiveError
        If the machine fails; then nothing is left at the path, or what was there before.
    """
    path = check_output(path, replace)
    image = archive_bytes(history)
    with whole_file(path) as part:
        part.write_bytes(image)


def archive_bytes(history):
    """The archive of a history, made in memory: HDF5 does not survive a full disk, we do.

    Parameters
    ----------
    history : evolve.history.History

    Returns
    -------
    bytes
        Equal for equal histories.
    """
    import h5py

    image = io.BytesIO()
    with h5py.File(image, "w", track_order=True) as file:
        _root(file, history)
        _trajectory(file, history)
        _table(file, "events", "event", _event_columns(history))
        _table(file, "chapters", "chapter", _chapter_columns(history))
        _ledger(file, history)
        file.attrs["complete"] = np.int8(history.complete)
        file.attrs["digest"] = digest_of(file)
    return image.getvalue() + seal_of(image.getvalue())


def _root(file, history):
    import h5py

    from evolve import __version__

    file.attrs["format"] = FORMAT
    file.attrs["layout"] = np.int64(LAYOUT)
    file.attrs["evolve_version"] = __version__
    for name in ("title", "note", "outcome", "message"):
        _text(file, name, getattr(history, name))
    _text(file, "config", history.config_text)
    _text(file, "config_files", json.dumps(history.config_files, sort_keys=True))
    _text(file, "sources", " ".join(history.sources))
    _text(file, "warnings", json.dumps(history.warnings))
    versions = {**history.versions, "h5py": h5py.__version__, "HDF5": h5py.version.hdf5_version}
    for name, version in versions.items():
        file.attrs[f"{name}_version"] = version
    for name, value in history.statistics.items():
        file.attrs[f"numerics_{name}"] = value


def _text(file, name, text):
    """A text of the root; what UTF-8 or HDF5 cannot hold becomes U+FFFD or "?"."""
    import h5py

    text = text.replace("\0", "\ufffd").encode("utf-8", "replace").decode()
    if len(text.encode()) <= LONGEST_ATTRIBUTE:
        file.attrs[name] = text
    else:
        file.create_dataset(f"texts/{name}", data=text, dtype=h5py.string_dtype())


def _dataset(group, name, values, **attributes):
    import h5py

    values = np.asarray(values)
    if values.dtype.kind in "OU":  # texts of any length take no filters; the digest guards them
        texts = [str(x) for x in values]
        dataset = group.create_dataset(name, data=texts, dtype=h5py.string_dtype())
    else:
        packed = {"compression": "gzip", "shuffle": True, "fletcher32": True}
        dataset = group.create_dataset(name, data=values, **(packed if len(values) else {}))
    for key, value in attributes.items():
        dataset.attrs[key] = value
    return dataset


def _trajectory(file, history):
    group = file.create_group("trajectory", track_order=True)
    time = None
    for name, values in history.columns.items():
        values = values.astype(np.int8) if COLUMNS[name].flags else values
        attributes = attributes_of(name)
        if name in history.references:
            attributes["references"] = history.references[name]
        dataset = _dataset(group, name, values, **attributes)
        if time is None:
            time = dataset
            time.make_scale("time")
        else:
            dataset.dims[0].attach_scale(time)


def _table(file, name, scale, columns):
    group = file.create_group(name, track_order=True)
    length = len(next(iter(columns.values()))[0])
    index = _dataset(group, scale, np.arange(1, length + 1), long_name=f"number of the {scale}")
    index.make_scale(scale)
    for column, (values, unit, long_name) in columns.items():
        dataset = _dataset(group, column, values, units=unit, long_name=long_name)
        dataset.dims[0].attach_scale(index)


def _event_columns(history):
    events = history.events
    return {
        "name": (np.array([e.name for e in events], dtype=object), "", "what happened"),
        "component": (np.array([e.component for e in events], dtype=object), "", "to whom"),
        "time": (np.array([e.time for e in events]), "yr", "time since the start"),
        "row": (np.array([e.row for e in events], dtype=np.int64), "", "row of the trajectory"),
        "residual": (np.array([e.residual for e in events]), "", "event function at the root"),
    }


def _chapter_columns(history):
    chapters = history.chapters
    return {
        "regime": (np.array([c.regime for c in chapters], dtype=object), "", "set of equations"),
        "start": (np.array([c.start for c in chapters]), "yr", "time of the first row"),
        "end": (np.array([c.end for c in chapters]), "yr", "time of the last row"),
        "first_row": (np.array([c.first_row for c in chapters], dtype=np.int64), "", "first row"),
        "last_row": (np.array([c.last_row for c in chapters], dtype=np.int64), "", "last row"),
        "ended_by": (np.array([c.ended_by for c in chapters], dtype=object), "", "event at the end"),
    }


def _ledger(file, history):
    ledger = history.ledger
    length = len(history.chapters)
    columns = {"regime": (np.array([c.regime for c in history.chapters], dtype=object), "", "regime")}
    for entries, kind, unit in (
        (ledger.angular_momentum, "angular_momentum", MOMENTUM_UNIT),
        (ledger.mass, "mass", MASS_UNIT),
    ):
        for name, values in entries.items():
            values = np.broadcast_to(np.asarray(values, dtype=float), (length,))
            columns[f"{kind}_{name}"] = (values, unit, f"{kind.replace('_', ' ')}, {name}")
    _table(file, "ledger", "chapter", columns)
    for name, value in ledger.start.items():
        file["ledger"].attrs[f"start_{name}"] = value
    for name, value in ledger.end.items():
        file["ledger"].attrs[f"end_{name}"] = value

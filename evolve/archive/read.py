"""Reading an archive back, and saying what is wrong with one that is damaged."""

import io
import json
from pathlib import Path

import numpy as np

from evolve.archive.digest import digest_of, is_sealed, seal_fits
from evolve.archive.paths import SIGNATURE
from evolve.archive.write import FORMAT, LAYOUT
from evolve.errors import ArchiveError, ConfigError
from evolve.history import Chapter, Event, History, Ledger

CURE = "make it again with `evolve run`"


def open_history(path):
    """The history in an archive.

    Parameters
    ----------
    path : str or Path

    Returns
    -------
    History
        Equal to the one that was written, bit for bit.

    Raises
    ------
    ConfigError
        For a path that is missing or no file.
    ArchiveError
        For a file that is no archive, is damaged, or has a newer layout.
    """
    import h5py

    content = _content(Path(path))
    try:
        with h5py.File(io.BytesIO(content), "r") as file:
            _judge(path, file, content)
            return _history(file)
    except (OSError, LookupError, RuntimeError, ValueError, TypeError, AttributeError) as error:
        reason = str(error).splitlines()[0] if str(error) else type(error).__name__
        raise ArchiveError(f"{path}: is damaged ({reason}); {CURE}") from error


def _content(path):
    """The bytes of a file that may be an archive."""
    try:
        what = "is a directory" if path.is_dir() else "" if path.exists() else "no such file"
    except OSError as error:
        what = f"cannot be a file ({error.strerror})"
    if what:
        raise ConfigError(f"{path}: {what}; give the archive that `evolve run` wrote")
    try:
        content = path.read_bytes()
    except OSError as error:
        raise ArchiveError(f"{path}: cannot be read ({error.strerror or error})") from error
    if not content.startswith(SIGNATURE):
        raise ArchiveError(f"{path}: is no archive (it does not begin as HDF5 does)")
    if is_sealed(content) and not seal_fits(content):
        raise ArchiveError(f"{path}: is damaged (its checksum does not fit its bytes); {CURE}")
    return content


def _judge(path, file, content):
    """Refuse what is foreign, newer or damaged.

    Without a seal, which goes when another tool writes to the file, the bytes must end where
    HDF5 says: more are what is left of a seal.
    """
    if file.attrs.get("format") != FORMAT:
        raise ArchiveError(f'{path}: is HDF5 but no archive (its format is not "{FORMAT}")')
    layout = int(file.attrs["layout"])
    if layout > LAYOUT:
        raise ArchiveError(
            f"{path}: has the newer layout {layout}; this version reads up to {LAYOUT}: "
            "install a newer evolve"
        )
    whole = is_sealed(content) or len(content) == len(file.id.get_file_image())
    if not whole or file.attrs["digest"] != digest_of(file):
        raise ArchiveError(
            f"{path}: is damaged or was changed (its digest does not fit its contents); {CURE}"
        )


def _read_text(file, name):
    if name in file.attrs:
        return str(file.attrs[name])
    return file[f"texts/{name}"].asstr()[()]


def _texts(dataset):
    return [str(text) for text in dataset.asstr()[()]]


def _history(file):
    columns = {name: data[()].astype(np.float64) for name, data in file["trajectory"].items()}
    versions = {
        name.removesuffix("_version"): str(value)
        for name, value in file.attrs.items()
        if name.endswith("_version") and name not in ("evolve_version", "h5py_version", "HDF5_version")
    }
    return History(
        columns={"time": columns.pop("time"), **columns},
        references={
            name: str(data.attrs["references"])
            for name, data in file["trajectory"].items()
            if "references" in data.attrs
        },
        events=_events(file["events"]),
        chapters=_chapters(file["chapters"]),
        ledger=_ledger(file["ledger"]),
        outcome=_read_text(file, "outcome"),
        message=_read_text(file, "message"),
        complete=bool(file.attrs["complete"]),
        title=_read_text(file, "title"),
        note=_read_text(file, "note"),
        config_text=_read_text(file, "config"),
        config_files=json.loads(_read_text(file, "config_files")),
        statistics={
            name.removeprefix("numerics_"): value.item() if hasattr(value, "item") else value
            for name, value in file.attrs.items()
            if name.startswith("numerics_")
        },
        sources=_read_text(file, "sources").split(),
        warnings=json.loads(_read_text(file, "warnings")),
        versions=versions,
    )


def _events(group):
    return [
        Event(name, component, float(time), int(row), float(residual))
        for name, component, time, row, residual in zip(
            _texts(group["name"]), _texts(group["component"]), group["time"][()], group["row"][()],
            group["residual"][()], strict=True,
        )  # fmt: skip
    ]


def _chapters(group):
    return [
        Chapter(regime, float(start), float(end), int(first), int(last), ended_by)
        for regime, start, end, first, last, ended_by in zip(
            _texts(group["regime"]), group["start"][()], group["end"][()], group["first_row"][()],
            group["last_row"][()], _texts(group["ended_by"]), strict=True,
        )  # fmt: skip
    ]


def _ledger(group):
    entries = {"angular_momentum": {}, "mass": {}}
    for name, data in group.items():
        for kind, found in entries.items():
            if name.startswith(f"{kind}_"):
                found[name.removeprefix(f"{kind}_")] = data[()]
    ends = {
        end: {
            name.removeprefix(f"{end}_"): float(value)
            for name, value in group.attrs.items()
            if name.startswith(f"{end}_")
        }
        for end in ("start", "end")
    }
    return Ledger(**entries, **ends)

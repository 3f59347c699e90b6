"""Whether a path can be written to, and writing it whole or not at all."""

import os
from contextlib import contextmanager
from pathlib import Path

from evolve.errors import ArchiveError, ConfigError

SIGNATURE = b"\x89HDF\r\n\x1a\n"


def is_archive(path):
    """True if a file starts as HDF5 does, whatever its name."""
    try:
        with open(path, "rb") as file:
            return file.read(len(SIGNATURE)) == SIGNATURE
    except OSError:
        return False


def check_output(path, replace=False):
    """Refuse a path that cannot be written to, before anything is computed.

    Parameters
    ----------
    path : str or Path
    replace : bool
        Whether an existing file may be replaced.

    Returns
    -------
    Path

    Raises
    ------
    ConfigError
        For a directory, a missing folder, or a file that exists.
    """
    path = Path(path)
    if path.is_dir():
        raise ConfigError(f"{path}: is a directory; give the path of a file")
    if not path.parent.is_dir():
        raise ConfigError(f"{path}: there is no folder {path.parent}; make it first")
    if path.exists() and not replace:
        raise ConfigError(f"{path}: exists; give --replace to overwrite it, or another path")
    return path


@contextmanager
def whole_file(path):
    """A temporary path beside `path`; renamed to it at the end, removed after a fault.

    The file is on the disk before it has its name.
    """
    path = Path(path)
    part = path.with_name(f".{path.name}.{os.getpid()}.part")
    try:
        yield part
        with open(part, "rb+") as file:
            os.fsync(file.fileno())
        os.replace(part, path)
        folder = os.open(path.parent, os.O_RDONLY)
        try:
            os.fsync(folder)
        finally:
            os.close(folder)
    except OSError as error:
        raise ArchiveError(
            f"{path}: could not be written ({error.strerror or error}); nothing was left there"
        ) from error
    finally:
        part.unlink(missing_ok=True)

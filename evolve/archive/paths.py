"""Whether a path can be written to, and writing it whole or not at all."""

import os
from contextlib import contextmanager, suppress
from pathlib import Path
from secrets import token_hex

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
        For a directory, a missing folder, a file that exists, a device.
    ArchiveError
        For a folder that may not be written to.
    """
    path = Path(path)
    try:
        if path.is_dir():
            raise ConfigError(f"{path}: is a directory; give the path of a file")
        if not path.parent.is_dir():
            raise ConfigError(f"{path}: there is no folder {path.parent}; make it first")
        if path.exists() and not path.is_file():
            raise ConfigError(f"{path}: is no ordinary file; give another path")
        if path.exists() and not replace:
            raise ConfigError(f"{path}: exists; give --replace to overwrite it, or another path")
    except OSError as error:
        raise ConfigError(f"{path}: cannot be a file here ({error.strerror})") from error
    if not os.access(path.resolve().parent, os.W_OK):
        raise ArchiveError(f"{path}: the folder {path.parent} may not be written to")
    return path


@contextmanager
def whole_file(path):
    """A temporary path beside `path`; renamed to it at the end, removed after a fault.

    The file is on the disk before it has its name. A link stays one: what it points to is
    replaced.

    Raises
    ------
    ArchiveError
        If the machine fails; what was at the path before is still there.
    """
    target = Path(path).resolve()
    part = target.with_name(f".{target.name[:40]}.{os.getpid()}.{token_hex(4)}.part")
    try:
        yield part
        with open(part, "rb+") as file:
            os.fsync(file.fileno())
        os.replace(part, target)
    except OSError as error:
        raise ArchiveError(
            f"{path}: could not be written ({error.strerror or error}); nothing was changed there"
        ) from error
    finally:
        part.unlink(missing_ok=True)
    with suppress(OSError):  # not every file system can, and the file is there
        folder = os.open(target.parent, os.O_RDONLY)
        try:
            os.fsync(folder)
        finally:
            os.close(folder)

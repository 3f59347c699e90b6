"""The files that a config names, and how any text file is read."""

import os
from pathlib import Path

from evolve.config.words import nearest
from evolve.errors import ConfigError


def read_text(path, what="file"):
    """The text of a UTF-8 file.

    Parameters
    ----------
    path : str or Path
    what : str
        What it is meant to be, for the message.

    Raises
    ------
    ConfigError
        If it is missing, a folder, not UTF-8, or may not be read.
    """
    try:
        return Path(path).read_bytes().decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise ConfigError(
            f"{path}: not a UTF-8 text (byte {error.start} is 0x{error.object[error.start]:02x}); "
            f"allowed: a {what} saved as UTF-8"
        ) from None
    except (OSError, ValueError) as error:  # a zero byte in a path is a ValueError
        raise ConfigError(missing(path, what, error)) from None


def missing(path, what, error):
    """The message for a path that cannot be opened, with the nearest name that is there."""
    path = Path(path)
    if isinstance(error, (FileNotFoundError, NotADirectoryError)):
        try:
            near = nearest(path.name, os.listdir(path.parent))
        except OSError:
            there = f"and no folder {path.parent}; allowed: an existing {what}"
            return f"{path}: no such {what}, {there}"
        hint = f'; did you mean "{path.parent / near}"?' if near else ""
        return f"{path}: no such {what}; allowed: an existing {what}{hint}"
    if isinstance(error, IsADirectoryError):
        return f"{path}: a folder; allowed: the path of a {what}"
    return f"{path}: cannot be read ({getattr(error, 'strerror', '') or error})"


class Files:
    """The files that one config names, by the names it uses.

    Parameters
    ----------
    folder : Path or None
        Names are relative to it; None where there is no disk to look at (an archive).
    texts : dict of str to str, optional
        What is known already; it is not looked up again.

    Attributes
    ----------
    texts : dict of str to str
        Name -> text of every file that was asked for. Binary tables stand in it as CSV.
    """

    def __init__(self, folder, texts=None):
        self.folder = folder
        self._known = texts or {}
        self.texts = {}

    def path(self, name):
        """Where a named file is.

        Raises
        ------
        ConfigError
            If there is no disk to look at.
        """
        if self.folder is None:
            raise ConfigError(f"{name}: no such file in the archive")
        return Path(self.folder) / name

    def text(self, name, what, read=read_text):
        """The text of a named file; `read(path, what)` is asked if it is not known."""
        if name in self._known:
            self.texts[name] = self._known[name]
        if name not in self.texts:
            self.texts[name] = read(self.path(name), what)
        return self.texts[name]

    def fresh_text(self, name, what):
        """The text of a named file as it is on disk now."""
        self.texts[name] = read_text(self.path(name), what)
        return self.texts[name]


__all__ = ["Files", "missing", "read_text"]

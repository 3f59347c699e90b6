"""Reads a config: from a TOML file, from a dict, from the text that an archive keeps."""

import os
import re
import tomllib
from dataclasses import dataclass
from pathlib import Path

from evolve.config.check import complete
from evolve.config.files import Files, read_text
from evolve.config.settings import apply_settings, parse_setting
from evolve.config.write import completed_dict, plain_dict, toml_text
from evolve.errors import ConfigError

_PLACE = re.compile(r" \(at (?:line (\d+), column (\d+)|end of document)\)$")


@dataclass(frozen=True, eq=False, repr=False)
class Config:
    """A config, completed and checked.

    Attributes
    ----------
    values : dict
        Every key in internal units (solMass, solRad, yr, solLum, K, rad, pc); what may be
        absent and is, is None.
    text : str
        The TOML text: as it was read, or written again where keys were set.
    raw : dict
        What that text says.
    path : Path or None
        The file it was read from.
    name : str
        What messages call it.
    files : dict of str to str
        Name -> text of every file it names (tables, users' laws).
    user_laws : dict of str to evolve.laws.contract.Law
        "overflow", "braking:A" ... -> the user's own law.
    warnings : list of str
    folder : Path or None
        Names of files are relative to it; None if they come from an archive only.
    allow_code : bool
    """

    values: dict
    text: str
    raw: dict
    path: Path | None
    name: str
    files: dict
    user_laws: dict
    warnings: list
    folder: Path | None
    allow_code: bool

    def __repr__(self):
        return f"Config({self.name!r})"

    def with_values(self, changes):
        """The same config with keys changed, checked again.

        Parameters
        ----------
        changes : dict of str to value
            Such as {"A.mass": "0.7 Msun"}. A size of the orbit replaces the one there; a law
            or a star takes along the keys that only the former one had.

        Returns
        -------
        Config

        Raises
        ------
        ConfigError
        """
        if not changes:
            return self
        changes = plain_dict(changes, self.name)
        raw, notes = apply_settings(self.raw, changes, self.name)
        files = Files(self.folder, self.files)
        return _config(
            raw, toml_text(raw), self.path, self.name, files, self.allow_code, changes, notes
        )

    def completed_text(self):
        """The completed config as TOML with units for people; it reads back to `values`."""
        return toml_text(completed_dict(self))


def read_config(source, set=(), allow_code=False):
    """Read, check and complete a config.

    Parameters
    ----------
    source : str, Path, dict or Config
        The path of a TOML file, or a dict of the same keys.
    set : iterable of str, or dict
        "KEY=VALUE" such as "A.mass=0.7 Msun", or dotted keys with their values; they take the
        place of what the source says.
    allow_code : bool
        Whether functions of the user's own that the config names may be executed.

    Returns
    -------
    Config

    Raises
    ------
    ConfigError
        With one message for every problem: file, key, value, what is allowed.
    """
    changes = set if isinstance(set, dict) else dict(parse_setting(text) for text in set)
    if isinstance(source, Config):
        return source.with_values(changes)
    if isinstance(source, dict):
        return _from_dict(source, changes, allow_code)
    if not isinstance(source, (str, os.PathLike)):
        raise ConfigError(
            f"{source!r}: no config; allowed: a path, a dict, or what read_config returned"
        )
    path, name = Path(source), str(source)
    text = read_text(path, "config")
    raw = parse_toml(text, name)
    notes = []
    if changes:
        changes = plain_dict(changes, name)
        raw, notes = apply_settings(raw, changes, name)
        text = toml_text(raw)
    return _config(raw, text, path, name, Files(path.parent), allow_code, changes, notes)


def read_config_text(text, files=None, name="config"):
    """A config from the text that an archive keeps; nothing is looked up on disk.

    Parameters
    ----------
    text : str
    files : dict of str to str, optional
        `Config.files` of the run.
    name : str
        What messages call it.

    Returns
    -------
    Config

    Raises
    ------
    ConfigError
        Also if it names a user's own function: those are never executed from an archive.
    """
    return _config(parse_toml(text, name), text, None, name, Files(None, files), False)


def config_of_parts(raw, files, folder, name, allow_code=False):
    """A config from what another process was sent of it: `Config`'s fields of these names."""
    return _config(raw, toml_text(raw), None, name, Files(folder, files), allow_code)


def parse_toml(text, name):
    """The dict that a TOML text says.

    Parameters
    ----------
    text : str
    name : str
        What messages call it.

    Raises
    ------
    ConfigError
        With the line that cannot be read.
    """
    try:
        return tomllib.loads(text)
    except ValueError as error:  # a TOMLDecodeError, or a whole number of too many digits
        raise ConfigError(_syntax_message(str(error), text, name)) from None
    except RecursionError:
        raise ConfigError(f"{name}: nested too deeply; allowed: TOML") from None


def _syntax_message(message, text, name):
    place = _PLACE.search(message)
    reason = message[: place.start()] if place else message
    lines = text.split("\n")
    if place and place[1]:
        line = lines[int(place[1]) - 1].strip()
        return f"{name}, line {place[1]}, column {place[2]}: not TOML: {reason}: {line}"
    number = len(text.rstrip().split("\n"))
    return f"{name}, line {number}: not TOML: {reason} at the end: {lines[number - 1].strip()}"


def _from_dict(source, changes, allow_code):
    name = "config"
    raw, notes = plain_dict(source, name), []
    if changes:
        changes = plain_dict(changes, name)
        raw, notes = apply_settings(raw, changes, name)
    return _config(raw, toml_text(raw), None, name, Files(Path()), allow_code, changes, notes)


def _config(raw, text, path, name, files, allow_code, as_set=(), notes=()):
    completed = complete(raw, name, files, allow_code, as_set)
    return Config(
        values=completed.values,
        text=text,
        raw=raw,
        path=path,
        name=name,
        files=files.texts,
        user_laws=completed.user_laws,
        warnings=[*notes, *completed.warnings],
        folder=files.folder,
        allow_code=allow_code,
    )


__all__ = ["Config", "parse_toml", "read_config", "read_config_text"]

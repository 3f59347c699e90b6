"""Keys set beside a config: "A.mass=0.7 Msun" on the command line, or by a study."""

import copy
import tomllib

from evolve import stars
from evolve.config.schema import SECTIONS, SIZES, choice_entries, laws_of, star_entries
from evolve.config.words import kind_of
from evolve.errors import ConfigError


def parse_setting(text):
    """The key and the value of one "KEY=VALUE".

    Parameters
    ----------
    text : str
        The value is TOML, or a text that needs no quotes.

    Returns
    -------
    key : str
    value

    Raises
    ------
    ConfigError
    """
    key, sign, written = text.partition("=")
    key, written = key.strip(), written.strip()
    if not sign or not key or not written:
        raise ConfigError(f'"{text}": allowed: KEY=VALUE, such as "A.mass=0.7 Msun"')
    try:
        parsed = tomllib.loads(f"value = {written}")
    except (ValueError, RecursionError):
        return key, written
    return key, parsed["value"] if len(parsed) == 1 else written


def apply_settings(raw, changes, name):
    """A config as written, with keys changed.

    A size of the orbit takes the place of the one that was there. A law or a star takes
    along the keys that only the former one had, unless they are set too.

    Parameters
    ----------
    raw : dict
        Left alone.
    changes : dict of str to value
        Dotted key -> value.
    name : str
        What messages call the config.

    Returns
    -------
    changed : dict
    notes : list of str
        What was left out, one sentence each.

    Raises
    ------
    ConfigError
        If a key leads through something that is no table.
    """
    changed, notes = copy.deepcopy(raw), []
    for path, value in changes.items():
        table, key = _table_of(changed, path, name)
        table[key] = value
    for path in changes:
        head, _, key = path.rpartition(".")
        if path in [f"orbit.{size}" for size in SIZES]:
            table = changed["orbit"]
            others = [k for k in SIZES if k in table and f"orbit.{k}" not in changes]
        else:
            table, _ = _table_of(changed, path, name)
            others = [
                k for k in _left_behind(head, key, table) if f"{head}.{k}" not in changes
            ]
        for other in others:
            del table[other]
            notes.append(f"{name}: {head}.{other} is left out: {path} is set")
    return changed, notes


def _table_of(raw, path, name):
    """The table that holds the last part of a dotted key, made where it is missing."""
    *heads, key = path.split(".")
    table = raw
    for depth, head in enumerate(heads, start=1):
        table = table.setdefault(head, {})
        if not isinstance(table, dict):
            raise ConfigError(
                f'{name}, as set: {path}: {".".join(heads[:depth])} is {kind_of(table)} in the '
                f"config; allowed: keys of tables"
            )
    return table, key


def _left_behind(head, key, table):
    """Keys of a table that lost their owner when `key` was set in it."""
    written = table[key] if isinstance(table.get(key), str) else ""
    if head in ("A", "B") and key == "star" and written in stars.MODELS:
        known = star_entries(stars.MODELS[written])
        return [k for k in table if k not in known and k in _keys_of_stars()]
    section = SECTIONS.get(head.split(".")[0])
    choice = section and section.choices.get(key)
    if not choice or choice.standing or written not in laws_of(choice.process):
        return []
    known = choice_entries(choice, laws_of(choice.process)[written])
    of_others = {k for law in laws_of(choice.process).values() for k in choice_entries(choice, law)}
    return [k for k in table if k in of_others and k not in known and k not in section.keys]


def _keys_of_stars():
    return {key for model in stars.MODELS.values() for key in star_entries(model)}


__all__ = ["apply_settings", "parse_setting"]

"""Writes TOML: a config as it was given in Python, or completed with units for people."""

import json
import re
from numbers import Integral, Real

from evolve import stars
from evolve.config.schema import (
    END_OF_COMPONENT,
    SECTIONS,
    TOP,
    choice_entries,
    laws_of,
    star_entries,
)
from evolve.config.units import exact_text
from evolve.config.words import kind_of
from evolve.errors import ConfigError

_BARE_KEY = re.compile(r"[A-Za-z0-9_-]+")
_TO_ESCAPE = re.compile(r"[\x00-\x08\x0a-\x1f\x7f\"\\]")


def toml_text(raw):
    """A nested dict as TOML: what `tomllib` reads back as the same dict.

    Parameters
    ----------
    raw : dict
        Of texts, numbers, booleans, lists and dicts with texts as keys.

    Returns
    -------
    str
    """
    return "\n".join(_table_lines(raw, ())).strip("\n") + "\n"


def _table_lines(table, path):
    """Lines of one table: its plain keys first, then its sub-tables under their headers."""
    plain = {key: value for key, value in table.items() if not isinstance(value, dict)}
    lines = [f"{_key(key)} = {_value(value)}" for key, value in plain.items()]
    for key, value in table.items():
        if isinstance(value, dict):
            inner = (*path, _key(key))
            only_tables = value and all(isinstance(item, dict) for item in value.values())
            header = [] if only_tables else ["", f"[{'.'.join(inner)}]"]
            lines += [*header, *_table_lines(value, inner)]
    return lines


def _key(key):
    return key if _BARE_KEY.fullmatch(key) else _string(key)


def _string(text):
    def escaped(match):
        short = json.dumps(match[0])[1:-1]
        return short if match[0] != "\x7f" else "\\u007f"

    return '"' + _TO_ESCAPE.sub(escaped, text) + '"'


def _value(value):
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return _string(value)
    if isinstance(value, list):
        return "[" + ", ".join(_value(item) for item in value) + "]"
    if isinstance(value, dict):
        inside = ", ".join(f"{_key(key)} = {_value(item)}" for key, item in value.items())
        return "{ " + inside + " }" if inside else "{}"
    return repr(value)


def plain_dict(source, name, path=""):
    """A dict given in Python as one that TOML can hold: plain numbers, quantities as texts.

    Parameters
    ----------
    source : dict
        May hold numpy numbers and anything with `to_value(unit)`.
    name : str
        What messages call it.

    Raises
    ------
    ConfigError
        If a value is of no type that a config knows.
    """
    plain, problems = {}, []
    for key, value in source.items():
        here = f"{path}.{key}" if path else str(key)
        try:
            if not isinstance(key, str):
                raise ConfigError(f"{name}: {here}: {kind_of(key)} as a key; allowed: a text")
            plain[key] = _plain(value, name, here)
        except ConfigError as error:
            problems += error.problems
    if problems:
        raise ConfigError(problems)
    return plain


def _plain(value, name, path):
    if isinstance(value, (str, bool)):
        return value
    if isinstance(value, Integral):
        return int(value)
    if isinstance(value, Real):
        return float(value)
    if isinstance(value, (list, tuple)):
        return [_plain(item, name, path) for item in value]
    if isinstance(value, dict):
        return plain_dict(value, name, path)
    unit = getattr(value, "unit", None)
    if hasattr(value, "to_value") and unit is not None:
        try:
            return f"{float(value.to_value(unit))!r} {unit}".strip()
        except TypeError:  # more than one number
            pass
    raise ConfigError(
        f"{name}: {path} = {value!r}: {kind_of(value)} is wrong here; allowed: a text, a number, "
        "true or false, or a single quantity with its unit"
    )


def completed_dict(config):
    """A completed config as a dict of texts with units, which reads back to the same values.

    Parameters
    ----------
    config : evolve.config.read.Config

    Returns
    -------
    dict
    """
    values, result = config.values, {}
    for key in TOP:
        if values[key]:
            result[key] = values[key]
    for c in "AB":
        entries = star_entries(stars.MODELS[values[c]["star"]])
        result[c] = _written(values[c], entries)
        if values[c].get("table") is not None:
            result[c]["table"] = config.raw[c]["table"]
    for name, section in SECTIONS.items():
        if section.by_component:
            own = {c: _section(section, values[name][c], config.user_laws, f":{c}") for c in "AB"}
            result[name] = own["A"] if own["A"] == own["B"] else own
        else:
            result[name] = _section(section, values[name], config.user_laws, "")
    for c in "AB":
        if own := _written(values["end"][c], END_OF_COMPONENT):
            result["end"][c] = own
    return {key: table for key, table in result.items() if table}


def _section(section, values, user_laws, place):
    entries, written = dict(section.keys), {}
    for key, choice in section.choices.items():
        chosen = values[key]
        laws_here = laws_of(choice.process)
        if own := user_laws.get(f"{choice.process}{place}"):
            laws_here = {**laws_here, chosen: own}
        if isinstance(chosen, float):
            chosen = exact_text(chosen, choice.number.dimension)
        if isinstance(chosen, dict) and list(chosen.values()) == [1.0]:
            [chosen] = chosen
        written[key] = chosen
        named = laws_here if choice.standing else [chosen] if isinstance(chosen, str) else []
        for name in named:
            if name in laws_here:
                entries |= choice_entries(choice, laws_here[name])
    if written.get("law") == "off":  # of what does not act, only what was written
        entries = {key: entry for key, entry in entries.items() if values[key] != entry.default}
        written = {key: chosen for key, chosen in written.items() if chosen != "none"}
    return written | _written(values, entries)


def _written(values, entries):
    """The keys that `entries` describe, as texts; the absent ones left out."""
    return {
        key: _text(values[key], entry)
        for key, entry in entries.items()
        if values.get(key) is not None and entry.kind != "table"
    }


def _text(value, entry):
    if isinstance(value, float) and entry.dimension is not None and entry.kind == "value":
        return exact_text(value, entry.dimension)
    return value


__all__ = ["completed_dict", "plain_dict", "toml_text"]

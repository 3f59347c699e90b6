"""Words that messages are made of: a value as written, what kind it is, the nearest name."""

import json
from difflib import get_close_matches
from numbers import Real


def shown(value):
    """A value as a message quotes it: as TOML writes it, cut where it is long."""
    text = _as_toml(value)
    return text if len(text) <= 80 else text[:77] + "..."


def _as_toml(value):
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return json.dumps(value, ensure_ascii=False)
    if isinstance(value, dict):
        inside = ", ".join(f"{key} = {_as_toml(item)}" for key, item in value.items())
        return "{ " + inside + " }" if inside else "{}"
    return repr(value)


def nearest(word, words):
    """The known word nearest to a wrong one, however it is cased; None if none is near."""
    folded = {}
    for known in words:
        folded.setdefault(known.lower(), known)
    found = get_close_matches(word.lower(), folded, n=1, cutoff=0.6)
    return folded[found[0]] if found else None


def kind_of(value):
    """What sort of value was written, in TOML's words."""
    names = {bool: "true/false", list: "a list", tuple: "a list", dict: "a table", str: "a text"}
    if isinstance(value, Real) and not isinstance(value, bool):
        return "a number"
    return names.get(type(value), f"a value of type {type(value).__name__}")


__all__ = ["kind_of", "nearest", "shown"]

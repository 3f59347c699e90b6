"""What goes along while a config is checked: where it came from, what was found wrong."""

import re
from difflib import get_close_matches

from evolve.config.entries import allowed, read_entry
from evolve.config.schema import (
    END_OF_COMPONENT,
    REQUIRED,
    SECTIONS,
    TOP,
    choice_entries,
    laws_of,
    names_of,
    star_keys,
)
from evolve.config.units import QuantityError
from evolve.config.words import kind_of, shown

OWN_CODE = re.compile(r"(.+\.py):([A-Za-z_]\w*)")
"""How a user's own function is named: "my_laws.py:braking"."""

_CONTROL = re.compile(r"[\x00-\x1f\x7f]")


class Reading:
    """One config on its way through the check.

    Parameters
    ----------
    name : str
        What messages call the config.
    files : evolve.config.files.Files
    allow_code : bool
        Whether a user's own functions may be executed.
    as_set : iterable of str
        Keys that were set beside the file.

    Attributes
    ----------
    problems, warnings : list of str
    user_laws : dict of str to evolve.laws.contract.Law
        "braking:A" -> the user's own.
    """

    def __init__(self, name, files, allow_code, as_set=()):
        self.name, self.files, self.allow_code = name, files, allow_code
        self.as_set = set(as_set)
        self.problems, self.warnings, self.user_laws = [], [], {}

    def problem(self, path, reason, *written):
        """Note that something is wrong at a key, with the value written there if there is one."""
        value = "".join(f" = {shown(value)}" for value in written)
        where = f"{self.name}, as set" if path in self.as_set else self.name
        message = f"{where}: {path}{value}: {reason}"
        self.problems.append(_CONTROL.sub(lambda match: repr(match[0])[1:-1], message))

    def entry(self, entry, table, key, path):
        """The value of one key of a table, or its default; None where it is wrong."""
        if key not in table:
            if entry.default is REQUIRED:
                self.problem(path, f"missing; {allowed(entry)}")
                return None
            return entry.default
        try:
            return read_entry(entry, table[key])
        except QuantityError as error:
            self.problem(path, error.reason, table[key])
            return None

    def table(self, parent, key, path):
        """A sub-table as a dict; empty where there is none or it is no table."""
        table = parent.get(key, {})
        if isinstance(table, dict):
            return table
        self.problem(path, f"{kind_of(table)} is wrong here; allowed: a table, [{path}]", table)
        return {}

    def unknown(self, path, written, known):
        """Note a key that is not known, with the nearest that is.

        Parameters
        ----------
        path : str
        written
        known : iterable of str
            Keys of the same table.
        """
        table, _, key = path.rpartition(".")
        near = get_close_matches(key, known, n=1)
        if near:
            hint = f'; did you mean "{near[0]}"?'
        elif elsewhere := _same_key_elsewhere(path):
            hint = f'; is "{elsewhere}" meant?'
        else:
            hint = ""
        where = f"in [{table}]" if table else "at the top"
        known = ", ".join(known) or "none"
        self.problem(path, f"unknown key; allowed {where}: {known}{hint}", written)


def _same_key_elsewhere(path):
    """The path of the known key nearest to an unknown one, in any section."""
    key = path.rpartition(".")[2]
    paths = {}
    for name, section in SECTIONS.items():
        where = f"{name}.A" if section.by_component else name
        paths.update({own: f"{where}.{own}" for own in (*section.keys, *section.choices)})
        for choice in section.choices.values():
            for chosen in names_of(choice):
                law = laws_of(choice.process).get(chosen)
                paths.update({own: f"{where}.{own}" for own in choice_entries(choice, law)})
    paths |= {own: f"end.A.{own}" for own in END_OF_COMPONENT} | {own: own for own in TOP}
    paths |= {own: f"A.{own}" for own in star_keys()} | {name: name for name in SECTIONS}
    found = get_close_matches(key, paths, n=1, cutoff=0.8)
    return paths[found[0]] if found else None


__all__ = ["OWN_CODE", "Reading"]

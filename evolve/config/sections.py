"""Completes the sections of a config, with the keys that the chosen laws bring."""

from evolve.config.entries import quoted, read_entry
from evolve.config.reading import OWN_CODE
from evolve.config.schema import (
    END_OF_COMPONENT,
    SECTIONS,
    SIZES,
    Entry,
    choice_entries,
    laws_of,
    names_of,
)
from evolve.config.spellings import UnknownUnit, unit_value
from evolve.config.units import QuantityError
from evolve.config.words import kind_of, nearest, shown
from evolve.errors import ConfigError
from evolve.laws.contract import described_keys
from evolve.laws.winds import DEFAULT_SPEEDS

SHARE = Entry("share", "number", 0.0, 1.0)
ROUNDING = 1e-9
"""Shares sum to 1 within this."""


def complete_sections(reading, raw):
    """All sections but the components, completed.

    Parameters
    ----------
    reading : evolve.config.reading.Reading
    raw : dict
        The config as written.

    Returns
    -------
    dict
    """
    values = {}
    for name, section in SECTIONS.items():
        table = reading.table(raw, name, name)
        if section.by_component:
            values[name] = _by_component(reading, section, name, table, name in raw)
        elif name == "end":
            values[name] = _end(reading, section, table)
        elif name == "orbit":
            values[name] = _orbit(reading, section, table)
        else:
            values[name] = _section(reading, section, table, name)
    return values


def _by_component(reading, section, name, table, there):
    """[braking] goes for both components, [braking.A] in place of it for one.

    `there`: the table stands in the config, be it empty.
    """
    shared = {key: written for key, written in table.items() if key not in ("A", "B")}
    whole = bool(shared) or (there and not table)
    values = {}
    for c in "AB":
        own, path = shared, name
        if c in table:
            path = f"{name}.{c}"
            own = reading.table(table, c, path)
        elif c == "B" and "A" not in table:
            values[c] = dict(values["A"])  # checked already; the same problems only once
            _same_own_code(reading, name)
            continue
        values[c] = _section(reading, section, own, path, f":{c}", missing=c in table or whole)
    if shared and "A" in table and "B" in table:
        reading.warnings.append(
            f"{reading.name}: [{name}] has no effect: [{name}.A] and [{name}.B] replace it"
        )
    return values


def _same_own_code(reading, process):
    if law := reading.user_laws.get(f"{process}:A"):
        reading.user_laws[f"{process}:B"] = law


def _section(reading, section, table, path, place="", missing=False):
    """One table: its own keys, its choices, the keys of the laws chosen.

    `missing`: a table that stands there must name its law.
    """
    known = dict(section.keys)
    values, unclear = {}, False
    for key, choice in section.choices.items():
        if key == "law" and missing and key not in table:
            if not choice.when_there:
                reading.problem(f"{path}.{key}", f"missing; allowed: {quoted(names_of(choice))}")
                unclear = True
            choice = choice._replace(default=choice.when_there or choice.default)
        values[key], laws = _choose(reading, choice, table, key, path, place)
        unclear = unclear or laws is None
        if choice.standing:
            laws = [*laws_of(choice.process).values()]
        for law in laws or []:
            known |= choice_entries(choice, law)
    for key, entry in known.items():
        if key in section.autos:
            entry = entry._replace(words=("auto",))
        value = reading.entry(entry, table, key, f"{path}.{key}")
        values[key] = entry.default if value == "auto" else value
    _default_speed(values, table)
    for key, written in table.items():
        if key not in known and key not in section.choices:
            _stray(reading, section, key, table, path, values, known, unclear)
    return values


def _default_speed(values, table):
    """A wind law that has a speed of its own brings it, unless the config gives one."""
    if "speed" in values and "speed" not in table and values.get("law") in DEFAULT_SPEEDS:
        values["speed"] = DEFAULT_SPEEDS[values["law"]]


def _stray(reading, section, key, table, path, values, known, unclear):
    """A key that no chosen law has: another law's, or nobody's."""
    written = table[key]
    for choice_key, choice in section.choices.items():
        owners = {
            name: choice_entries(choice, law)[key]
            for name, law in laws_of(choice.process).items()
            if name in names_of(choice) and key in choice_entries(choice, law)
        }
        if not owners:
            continue
        chosen = values[choice_key]
        if choice_key in table and chosen == choice.none:  # switched off, its keys stay behind
            reading.entry(next(iter(owners.values())), {key: written}, key, f"{path}.{key}")
        elif not unclear:
            own = quoted(known) or "none"
            reading.problem(
                f"{path}.{key}",
                f"belongs to {' and '.join(owners)}, not to {chosen}; allowed in [{path}] beside "
                f"{choice_key} = \"{chosen}\": {own}",
                written,
            )
        return
    reading.unknown(f"{path}.{key}", written, [*section.choices, *known])


def _choose(reading, choice, table, key, path, place):
    """What a choice says, and the laws chosen; None in place of laws if it says nothing known."""
    written = table.get(key, choice.default)
    path = f"{path}.{key}"
    laws = laws_of(choice.process)
    if choice.shares and isinstance(written, dict):
        return _shares(reading, choice, written, path)
    if isinstance(written, str):
        if match := OWN_CODE.fullmatch(written):
            return written, _own_code(reading, choice, written, match, path, place)
        if written in names_of(choice):
            chosen = [] if written == choice.none else [laws[written]]
            return ({written: 1.0} if choice.shares else written), chosen
    if choice.number is not None and _may_be_number(written):
        try:
            return read_entry(choice.number, written), []
        except QuantityError as error:
            names = quoted(names_of(choice))
            reading.problem(path, f"{error.reason}; or one of {names}", written)
            return None, None
    names = quoted(names_of(choice)) + (", or a table of shares" if choice.shares else "")
    near = nearest(written, names_of(choice)) if isinstance(written, str) else None
    hint = f'; did you mean "{near}"?' if near else ""
    wrong = "unknown" if isinstance(written, str) else f"{kind_of(written)} is wrong here"
    reading.problem(path, f"{wrong}; allowed: {names}{hint}", written)
    return None, None


def _may_be_number(written):
    return not isinstance(written, str) or not written.strip()[:1].isalpha()


def _shares(reading, choice, written, path):
    """Shares of several laws of one process, which sum to 1."""
    shares, before = {}, len(reading.problems)
    for name, share in written.items():
        if name not in names_of(choice):
            reading.unknown(f"{path}.{name}", share, names_of(choice))
        else:
            shares[name] = reading.entry(SHARE, written, name, f"{path}.{name}")
    if len(reading.problems) > before:
        return None, None
    total = sum(shares.values())
    if abs(total - 1.0) > ROUNDING:
        reason = f"the shares sum to {total:.6g}; allowed: shares that sum to 1"
        reading.problem(path, reason, written)
        return None, None
    return shares, [laws_of(choice.process)[name] for name in shares]


def _own_code(reading, choice, written, match, path, place):
    """The law in a user's own file, in a list; None if it may not or cannot be loaded."""
    names = quoted(names_of(choice))
    if not choice.own_code:
        reading.problem(path, f"a function of one's own is not for here; allowed: {names}", written)
        return None
    try:
        law = _load(reading, choice, match[1], match[2])
    except ConfigError as error:
        reading.problem(path, f"{error}; built-in: {names}", written)
        return None
    reading.user_laws[f"{choice.process}{place}"] = law
    return [law]


def _load(reading, choice, file, function):
    from evolve.laws.user import load_law

    if reading.files.folder is None:
        raise ConfigError(
            f"the text of {file} in the archive is kept for the record and never executed; "
            "allowed: running the config itself, beside that file"
        )
    path = reading.files.path(file)
    if not reading.allow_code:
        raise ConfigError(
            f"{path} is code that would be executed; allowed with --allow-code "
            "(in Python: allow_code=True)"
        )
    reading.files.fresh_text(file, "file with a law")
    law = load_law(path, function, choice.process)
    for key, (record, _) in described_keys(law.keys).items():
        try:
            unit_value(record.unit)
        except UnknownUnit as error:
            raise ConfigError(
                f'{path}: key {key}: unknown unit "{error.spelling}"; allowed: such as "solMass"'
            ) from None
    return law


def _end(reading, section, table):
    values = {
        key: reading.entry(entry, table, key, f"end.{key}") for key, entry in section.keys.items()
    }
    for c in "AB":
        own = reading.table(table, c, f"end.{c}")
        values[c] = {
            key: reading.entry(entry, own, key, f"end.{c}.{key}")
            for key, entry in END_OF_COMPONENT.items()
        }
        for key in own:
            if key not in END_OF_COMPONENT:
                reading.unknown(f"end.{c}.{key}", own[key], END_OF_COMPONENT)
    for key in table:
        if key not in section.keys and key not in ("A", "B"):
            known = [*section.keys, *(f"{c}.{own}" for c in "AB" for own in END_OF_COMPONENT)]
            reading.unknown(f"end.{key}", table[key], known)
    return values


def _orbit(reading, section, table):
    """[orbit] with exactly one size; contact = true is fill = 1."""
    values = _section(reading, section, table, "orbit")
    given = [key for key in SIZES if key in table and table[key] is not False]
    if len(given) > 1:
        others = [f"orbit.{key} = {shown(table[key])}" for key in given[1:]]
        reading.problem(
            f"orbit.{given[0]}",
            f"contradicts {' and '.join(others)}; allowed: one of {', '.join(SIZES)}",
            table[given[0]],
        )
    elif not given:
        sizes = ", ".join(SIZES)
        reading.problem("orbit", f"no size; allowed: one of {sizes}, such as fill = 0.98")
    if values.pop("contact"):
        values["fill"] = 1.0
    return values


__all__ = ["complete_sections"]

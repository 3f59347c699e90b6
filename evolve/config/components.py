"""Completes the two components of a config, and judges the pair they make."""

from math import inf

from evolve import stars
from evolve.config.entries import quoted
from evolve.config.schema import COMMON, star_entries, star_keys
from evolve.config.tables import parse_table, table_text
from evolve.config.units import human
from evolve.config.words import nearest
from evolve.errors import ConfigError, DomainError

EXTREME = 1e6
"""Mass ratios beyond this, either way, are refused: the Sun and the Earth are within."""

LIMITS = {"white-dwarf": "white_dwarf", "neutron-star": "neutron_star"}
"""Kind of a star -> the key of [limits] that holds its largest mass."""


def complete_component(reading, raw, c):
    """One component, completed but for a mass that [orbit] gives.

    Parameters
    ----------
    reading : evolve.config.reading.Reading
    raw : dict
        The whole config as written.
    c : str
        "A" or "B".

    Returns
    -------
    dict or None
        None if its star model is not known.
    """
    table = reading.table(raw, c, c)
    model = stars.MODELS.get(table.get("star")) if isinstance(table.get("star"), str) else None
    if model is None:
        _no_model(reading, table, c)
        return None
    entries = star_entries(model)
    values = dict.fromkeys(COMMON)
    for key, entry in entries.items():
        values[key] = reading.entry(entry, table, key, f"{c}.{key}")
    for key, written in table.items():
        if key not in entries:
            _stray(reading, key, written, c, table["star"], entries)
    if "table" in values:
        values["table"] = _table(reading, model, values["table"], c)
    return values


def _no_model(reading, table, c):
    near = None
    if "star" in table:
        written = table["star"]
        near = nearest(written, stars.MODELS) if isinstance(written, str) else None
    hint = f'; did you mean "{near}"?' if near else ""
    wrong = "unknown" if "star" in table else "missing"
    reading.problem(
        f"{c}.star", f"{wrong}; allowed: {quoted(stars.MODELS)}{hint}",
        *([table["star"]] if "star" in table else []),
    )  # fmt: skip
    owners = star_keys()
    for key, written in table.items():
        if key not in owners:
            reading.unknown(f"{c}.{key}", written, list(owners))


def _stray(reading, key, written, c, star, entries):
    owners = star_keys().get(key)
    if owners is None:
        return reading.unknown(f"{c}.{key}", written, list(entries))
    return reading.problem(
        f"{c}.{key}",
        f"belongs to {', '.join(owners)}, not to {star}; allowed for {star}: {', '.join(entries)}",
        written,
    )


def _table(reading, model, name, c):
    """The columns of a table that a component names, or None."""
    if name is None:
        return None
    try:
        text = reading.files.text(name, "table", table_text)
        return parse_table(text, name, model.table)
    except ConfigError as error:
        reading.problem(f"{c}.table", str(error), name)
        return None


def settle_masses(reading, raw, values):
    """Both masses, of which one or two may follow from [orbit]; takes those keys out of it.

    Parameters
    ----------
    reading : evolve.config.reading.Reading
    raw : dict
    values : dict
        Completed sections and components; changed in place.

    Returns
    -------
    bool
        True if both masses are known.
    """
    ratio = values["orbit"].pop("mass_ratio")  # A over B
    total = values["orbit"].pop("total_mass")
    tables = {key: raw[key] for key in ("A", "B", "orbit") if isinstance(raw.get(key), dict)}
    written = {f"{c}.mass": "mass" in tables.get(c, {}) for c in "AB"}
    orbit = tables.get("orbit", {})
    written |= {f"orbit.{key}": key in orbit for key in ("mass_ratio", "total_mass")}
    given = [path for path, there in written.items() if there]
    rule = f"allowed: two of {', '.join(written)} (mass_ratio is A over B)"
    if len(given) < 2:
        path = "B.mass" if "A.mass" in given else "A.mass"
        reading.problem(path, f"missing; {rule}, found {given[0] if given else 'none'}")
        return False
    if len(given) > 2:
        reading.problem(
            given[-1], f"one mass too many; {rule}, found {', '.join(given)}",
            orbit[given[-1].partition(".")[2]],
        )  # fmt: skip
        return False
    masses = {c: values[c] and values[c]["mass"] for c in "AB"}
    a, b = _masses(masses["A"], masses["B"], ratio, total)
    if a is None or b is None:
        return False
    for c, mass in (("A", a), ("B", b)):
        if not 0.0 < mass < inf:
            reading.problem(
                "orbit.total_mass", f"leaves {human(mass, 'mass')} for {c}; allowed: more than "
                "the mass of the other component", orbit.get("total_mass"),
            )  # fmt: skip
            return False
        if values[c] is not None:
            values[c]["mass"] = mass
    return True


def _masses(a, b, ratio, total):
    """Both masses from whichever two of the four are known; None where they are not."""
    if ratio is not None and total is not None:
        return total * ratio / (1.0 + ratio), total / (1.0 + ratio)
    if ratio is not None:
        return (a, a / ratio) if a is not None else (b and b * ratio, b)
    if total is not None:
        return (a, total - a) if a is not None else (b and total - b, b)
    return a, b


def judge_pair(reading, raw, values):
    """Note what is wrong with two known components: masses, limits, the stars they make.

    Parameters
    ----------
    reading : evolve.config.reading.Reading
    raw : dict
        As written.
    values : dict
        Completed.
    """
    a, b = values["A"]["mass"], values["B"]["mass"]
    if not 1.0 / EXTREME <= a / b <= EXTREME:
        reading.problem(
            "A.mass", f"A/B = {a / b:.3g} is too extreme a mass ratio; allowed: from "
            f"{1 / EXTREME:g} to {EXTREME:g} (B.mass = {human(b, 'mass')})", human(a, "mass"),
        )  # fmt: skip
    for c in "AB":
        if _mass_fits(reading, values, c):
            _prepare(reading, raw, values[c], c)


def _mass_fits(reading, values, c):
    component = values[c]
    model, mass = stars.MODELS[component["star"]], component["mass"]
    kind = component.get("kind") or model.kind
    limit = values["limits"].get(LIMITS.get(kind))
    if limit is not None and mass > limit:
        reading.problem(
            f"{c}.mass",
            f"a {kind.replace('-', ' ')} beyond its limit; allowed: up to {human(limit, 'mass')} "
            f"(limits.{LIMITS[kind]})",
            human(mass, "mass"),
        )
        return False
    low, high = model.mass_range
    if not low <= mass <= high:
        reading.problem(
            f"{c}.mass",
            f"outside the range of {component['star']}; allowed: {human(low, 'mass')} to "
            f"{human(high, 'mass')}",
            human(mass, "mass"),
        )
        return False
    return True


def _prepare(reading, raw, component, c):
    """Let the model itself judge its keys."""
    model = stars.MODELS[component["star"]]
    try:
        model.prepare(component["mass"], component)
        if model.start_phase is not None:
            model.start_phase(component["mass"], component)
    except DomainError as error:
        table = reading.table(raw, c, c).get("table")
        told = f', table = "{table}"' if table else ""
        reading.problem(c, f'{error} (star = "{component["star"]}"{told})')


__all__ = ["complete_component", "judge_pair", "settle_masses"]

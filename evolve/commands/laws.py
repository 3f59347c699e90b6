"""evolve laws: every law and star, with keys, units, validity and source."""

from evolve.commands.output import Answer


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("name", nargs="?", metavar="NAME", help="of one law, star or process")


def run(arguments):
    """List them, or tell all of one."""
    from evolve.laws import TABLES
    from evolve.laws.changes import CHANGES
    from evolve.stars import MODELS

    entries = [(process, name, law) for process, laws in TABLES.items() for name, law in laws.items()]
    entries += [("star", name, model) for name, model in MODELS.items()]
    entries += [("change", name, change) for name, change in CHANGES.items()]
    if arguments.name:
        chosen = [entry for entry in entries if arguments.name in entry[:2]]
        if not chosen:
            _unknown(arguments.name, entries)
        entries = chosen
    lines, result = [], {}
    for process, name, entry in entries:
        described = _of_change(entry) if process == "change" else _described(entry)
        result.setdefault(process, {})[name] = described
        lines += _lines(process, name, described, bool(arguments.name), entry)
    return Answer(lines[:-1], result)


def _unknown(name, entries):
    from evolve.config.words import nearest
    from evolve.errors import ConfigError

    known = [entry[1] for entry in entries]
    near = nearest(name, known)
    hint = f'; did you mean "{near}"?' if near else ""
    raise ConfigError(f'no law or star is called "{name}"; there are {", ".join(known)}{hint}')


def _described(entry):
    from evolve.laws.bibliography import text
    from evolve.laws.contract import described_keys

    keys = {
        name: {
            "unit": key.unit, "low": key.low, "high": key.high,
            "default": None if default is ... else default, "needed": default is ...,
            "doc": key.doc,
        }
        for name, (key, default) in described_keys(entry.keys).items()
    }  # fmt: skip
    for name, word in getattr(entry, "texts", {}).items():
        keys[name] = {
            "words": list(word.choices or ()), "default": None if word.default is ... else word.default,
            "needed": word.default is ..., "doc": word.doc,
        }  # fmt: skip
    function = getattr(entry, "function", None) or getattr(entry, "structure", None)
    doc = (function.__doc__ or "").strip() if function else ""
    return {
        "summary": doc.splitlines()[0] if doc else entry.validity,
        "keys": {name: _as_written(about) for name, about in keys.items()},
        "validity": entry.validity,
        "sources": [text(key) for key in entry.sources],
        "docstring": doc,
    }


def _as_written(about):
    """A key as configs take it where that is not the internal unit: speeds in km/s, angles in deg."""
    from evolve.constants import KM_S, pi

    units = {"solRad/yr": ("km/s", KM_S), "speed": ("km/s", KM_S), "angle": ("deg", 180.0 / pi),
             "mass": ("solMass", 1.0), "time": ("yr", 1.0)}  # fmt: skip
    unit, factor = units.get(about.get("unit"), (about.get("unit"), 1.0))
    for name in ("low", "high", "default"):
        if isinstance(about.get(name), float) and factor != 1.0:
            about[name] *= factor
    return {**about, "unit": unit}


def _of_change(change):
    """What acts when something happens: its keys are those of a section of the config."""
    from evolve.config.schema import SECTIONS

    described = _described(change.law)
    for name, entry in SECTIONS[change.section].keys.items() if change.section else ():
        about = {"words": list(entry.words)} if entry.words else {"low": entry.low, "high": entry.high}
        described["keys"][f"{change.section}.{name}"] = {
            **about, "unit": "" if entry.dimension == "number" else entry.dimension or "",
            "default": entry.default, "needed": False, "doc": entry.doc,
        }  # fmt: skip
    described["keys"] = {name: _as_written(about) for name, about in described["keys"].items()}
    return described


def _lines(process, name, described, whole, entry):
    lines = [f"{process}: {name}", f"    {described['summary']}"]
    for key, about in described["keys"].items():
        unit = f" [{about['unit']}]" if about.get("unit") else ""
        kept = "must be given" if about["needed"] else _shown(about["default"])
        if about.get("words"):
            span = ", ".join(about["words"])
        elif "low" in about:
            span = f"{about['low']:g} to {about['high']:g}"
        else:
            span = "a text"
        lines.append(f"    key {key}{unit}: {about['doc']} ({span}; {kept})")
    lines.append(f"    valid: {described['validity']}")
    lines += [f"    source: {source}" for source in described["sources"]]
    if whole and described["docstring"]:
        lines += ["", *(f"    {line}".rstrip() for line in _dedented(described["docstring"]))]
    return [*lines, ""]


def _dedented(doc):
    from inspect import cleandoc

    return cleandoc(doc).splitlines()


def _shown(value):
    if value is None or value != value:
        return "need not be given"
    return f"default {value:g}" if isinstance(value, float) else f"default {value}"

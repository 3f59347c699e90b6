"""evolve show: what is in an archive; the state at an epoch."""

from evolve.commands.output import Answer, aligned, of_column, scalar, table


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("file", metavar="FILE.h5")
    parser.add_argument(
        "--at", metavar="EPOCH",
        help='an event ("contact", "contact[2]", "contact[-1]") or "period=4 h", "time=1 Gyr"',
    )  # fmt: skip


def run(arguments):
    """Read and tell."""
    from evolve.archive import is_archive, open_history
    from evolve.commands.summary import history_result, summary
    from evolve.studies.study_archive import is_study, open_study

    if is_archive(arguments.file) and is_study(arguments.file):
        return _study(open_study(arguments.file))
    history = open_history(arguments.file)
    if arguments.at:
        return _epoch(history, arguments.at)
    rows = [
        [f"{n + 1} {c.regime}", of_column("time", c.start), of_column("time", c.end),
         str(c.last_row - c.first_row + 1), c.ended_by]
        for n, c in enumerate(history.chapters)
    ]  # fmt: skip
    lines = summary(history)
    lines += ["", *aligned(["chapter", "from", "to", "rows", "ended by"], rows), ""]
    columns = [[name, history.units[name] or "-"] for name in history.columns]
    lines += [f"{len(history)} rows of", *aligned(["column", "unit"], columns)]
    chapters = {
        "regime": [c.regime for c in history.chapters],
        "start": [c.start for c in history.chapters],
        "end": [c.end for c in history.chapters],
        "ended_by": [c.ended_by for c in history.chapters],
    }
    units = {"regime": "", "start": "yr", "end": "yr", "ended_by": ""}
    result = {
        **history_result(history), "chapters": table(chapters, units), "rows": len(history),
        "columns": history.units,
    }  # fmt: skip
    return Answer(lines, result)


def epoch_of(history, text):
    """The epoch that a text names: an event, or a column with a value."""
    from evolve.config.units import conversion_factor, dimension_of, parse_quantity
    from evolve.errors import ConfigError

    column, equals, value = text.partition("=")
    if not equals:
        return history.at(text)
    column = column.strip()
    if column not in history.columns:
        raise ConfigError(f'no column "{column}"; there are {", ".join(history.columns)}')
    unit = history.units[column]
    base = "yr" if unit == "h" else unit
    number = parse_quantity(value.strip(), dimension_of(base))
    return history.at(**{column: number * conversion_factor(base, unit)})


def _epoch(history, text):
    epoch = epoch_of(history, text)
    rows = [[name, of_column(name, value, 6)] for name, value in epoch.items()]
    result = {name: scalar(value, history.units[name]) for name, value in epoch.items()}
    return Answer(aligned(["column", "value"], rows), {"epoch": text, "state": result})


def _study(study):
    """What is in a study's archive."""
    axes = [[s.key, str(len(s.values)), f"{s.values[0]} .. {s.values[-1]}", s.unit] for s in study.scales]
    results = [[name, study.units[name] or "-"] for name in study.values]
    lines = [study.title] if study.title else []
    lines += ["", *aligned(["axis", "points", "from .. to", "unit"], axes), ""]
    lines += aligned(["result", "unit"], results)
    lines += ["", f"{study.codes.size} points, {study.failed} failed"]
    result = {
        "title": study.title, "points": study.codes.size, "failed": study.failed,
        "axes": {s.key: {"unit": s.unit, "values": s.values} for s in study.scales},
        "results": {n: {"unit": study.units[n], "values": v} for n, v in study.values.items()},
    }  # fmt: skip
    return Answer(lines, result)

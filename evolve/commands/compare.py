"""evolve compare: histories side by side, with their differences."""

from pathlib import Path

from evolve.commands.draw import figure_path
from evolve.commands.output import Answer, aligned, quantity, table
from evolve.commands.run import add_settings


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("histories", nargs="+", metavar="CONFIG or ARCHIVE")
    parser.add_argument(
        "--vary", metavar="KEY=V1,V2,...", help="one config with a key at several values"
    )
    add_settings(parser)
    parser.add_argument(
        "--on", default="time", metavar="COLUMN",
        help="common abscissa: time, time_since:contact, period, mass_A ... (time)",
    )  # fmt: skip
    parser.add_argument("--points", type=int, default=200, metavar="N", help="on it (200)")
    parser.add_argument("--csv", metavar="FILE", help="write the curves on the abscissa")
    parser.add_argument("--draw", metavar="FILE", help="figure with the differences: .png, .svg or .pdf")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")


def run(arguments):
    """Compute what is not an archive, then compare."""
    from evolve.archive import check_output
    from evolve.errors import ConfigError
    from evolve.studies.compare import compare

    if arguments.csv:
        check_output(arguments.csv, arguments.replace)
    if arguments.draw:
        figure_path(arguments.draw, arguments.replace)
    if arguments.points < 2:
        raise ConfigError(f"--points {arguments.points}: allowed is 2 or more")
    histories, names = gathered(arguments)
    found = compare(histories, names, arguments.on, arguments.points)
    lines = _lines(found)
    if arguments.csv:
        from evolve.archive.paths import whole_file

        with whole_file(arguments.csv) as part:
            part.write_text(curves_text(found), encoding="utf-8")
        lines += ["", f"curves on {arguments.on} written to {arguments.csv}"]
    if arguments.draw:
        from evolve.figures.comparison import comparison_figure
        from evolve.figures.style import save_figure

        save_figure(comparison_figure(found), Path(arguments.draw))
        lines += ["", f"drawn to {arguments.draw}"]
    return Answer(lines, _result(found))


def gathered(arguments):
    """The histories that a command line names, and what to call them."""
    from evolve.errors import ConfigError

    if arguments.vary and len(arguments.histories) > 1:
        raise ConfigError("--vary takes one config")
    if arguments.vary:
        return _varied(arguments)
    named = [_history(path, arguments) for path in arguments.histories]
    names = [Path(path).stem for path in arguments.histories]
    if len(set(names)) < len(names):
        names = list(arguments.histories)
    return named, names


def _history(path, arguments, settings=()):
    from evolve.archive import is_archive, open_history
    from evolve.commands.progress import history_bar
    from evolve.commands.run import config_of
    from evolve.integrate import integrate

    if is_archive(path) and not (settings or arguments.set):
        return open_history(path)
    config = config_of(path, [*arguments.set, *settings], arguments.allow_code)
    with history_bar(arguments.quiet) as progress:
        return integrate(config, progress)


def _varied(arguments):
    from evolve.errors import ConfigError

    key, equals, values = arguments.vary.partition("=")
    values = [value.strip() for value in values.split(",")]
    if not equals or len(values) < 2 or not all(values):
        raise ConfigError(f"--vary {arguments.vary}: write KEY=V1,V2,... with two values at least")
    names = [f"{key.strip()}={value}" for value in values]
    return [_history(arguments.histories[0], arguments, [name]) for name in names], names


def _cell(value, unit):
    if value != value:
        return "-"
    if unit == "solMass solRad2 / yr":
        return f"{value:.5g}"
    return quantity(value, unit) if unit else f"{value:.5g}"


def _difference(line, value):
    first = line.values[0]
    if value != value or first != first:
        return "-"
    if first == 0.0:
        return "0" if value == 0.0 else _cell(value, line.unit)
    return f"{100.0 * (value / first - 1.0):+.3g} %"


def _lines(found):
    lines, group = [], ""
    head = ["", *found.names, *(f"{name} - {found.names[0]}" for name in found.names[1:])]
    if len(found.names) == 2:
        head[-1] = "difference"
    rows = []
    for line in found.lines:
        if line.group != group:
            group = line.group
            rows.append([f"[{group}]", *[""] * (len(head) - 1)])
        words = line.quantity.replace(".", ": ", 1)
        unit = f" [{line.unit}]" if line.unit == "solMass solRad2 / yr" else ""
        cells = [_cell(value, line.unit) for value in line.values]
        rows.append([f"  {words}{unit}", *cells, *(_difference(line, v) for v in line.values[1:])])
    rows.append(["[outcome]", *found.outcomes, *[""] * (len(found.names) - 1)])
    return lines + aligned(head, rows)


def curves_text(found):
    """The curves on the common abscissa as CSV."""
    on, unit = found.abscissa
    columns = [column for column in found.curves if column != "abscissa"]
    head = [f"{on} [{unit}]"] + [
        f"{column} [{found.units[column]}] of {name}" for column in columns for name in found.names
    ]
    data = [found.curves["abscissa"]] + [
        found.curves[column][n] for column in columns for n in range(len(found.names))
    ]
    rows = zip(*(values.tolist() for values in data), strict=True)
    quoted = ",".join(f'"{title}"' for title in head)
    return "\n".join([quoted, *(",".join(repr(value) for value in row) for row in rows)]) + "\n"


def _result(found):
    on, unit = found.abscissa
    return {
        "names": found.names,
        "outcomes": found.outcomes,
        "lines": [
            {
                "group": line.group, "quantity": line.quantity, "unit": line.unit,
                "values": line.values, "differences": found.differences(line),
            }
            for line in found.lines
        ],
        "curves": table(found.curves, {"abscissa": unit, **found.units}),
        "abscissa": on,
    }  # fmt: skip

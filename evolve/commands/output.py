"""An answer, for people or as JSON."""

import sys
from typing import NamedTuple

from evolve.config.units import conversion_factor, dimension_of, human
from evolve.history.columns import COLUMNS

NO_TIME = 1e-15
"""Times below this many years are steps to the next float, not times."""


class Answer(NamedTuple):
    """What a command found.

    lines     for people, one a line
    result    for --json: nested dicts of `scalar`, `table`, texts, numbers
    warnings  sentences for stderr
    status    exit status
    """

    lines: list
    result: dict
    warnings: tuple = ()
    status: int = 0


def show(answer, arguments):
    """Print an answer on stdout, its warnings on stderr."""
    if arguments.json:
        import json

        from evolve import __version__

        whole = {
            "command": arguments.command, "evolve_version": __version__,
            "result": plain(answer.result), "warnings": list(answer.warnings),
        }  # fmt: skip
        print(json.dumps(whole, allow_nan=False))
        return
    for warning in answer.warnings:
        print(f"warning: {warning}", file=sys.stderr)
    if answer.lines:
        print("\n".join(answer.lines))


def scalar(value, unit="", plus=None, minus=None):
    """A number as JSON has it."""
    return {"value": value, "unit": unit, "plus": plus, "minus": minus}


def table(columns, units):
    """A table as JSON has it."""
    return {"columns": columns, "units": units}


def plain(value):
    """Only what JSON knows: NaN and infinities become null, arrays lists."""
    if hasattr(value, "tolist"):
        value = value.tolist()
    if isinstance(value, dict):
        return {str(key): plain(entry) for key, entry in value.items()}
    if isinstance(value, (list, tuple)):
        return [plain(entry) for entry in value]
    if isinstance(value, float) and not (value - value == 0.0):
        return None
    return value


def quantity(value, unit, digits=4):
    """A number in its unit as people read it: 0.1 to 1000 in a fitting unit."""
    if value is None or value != value:
        return "-"
    if unit in ("s", "min", "h", "d"):
        value, unit = value * conversion_factor(unit, "yr"), "yr"
    if unit == "yr" and abs(value) < NO_TIME:
        return "0 yr"
    return human(value, dimension_of(unit), digits).replace(" / ", "/")


def of_column(column, value, digits=4):
    """A value of a column as people read it."""
    return quantity(value, COLUMNS[column].unit, digits)


def aligned(head, rows, indent=""):
    """Lines of a table of texts in columns; the first column to the left, others to the right."""
    rows = [[str(cell) for cell in row] for row in rows]
    widths = [max(len(row[place]) for row in [head, *rows]) for place in range(len(head))]
    lines = []
    for row in [head, *rows]:
        cells = [
            cell.ljust(width) if place == 0 else cell.rjust(width)
            for place, (cell, width) in enumerate(zip(row, widths, strict=True))
        ]
        lines.append((indent + "  ".join(cells)).rstrip())
    return lines

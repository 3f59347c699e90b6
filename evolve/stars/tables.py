"""The tables of stars: those that come with the package, and what a table must be like."""

from functools import lru_cache
from importlib.resources import files
from math import isfinite

from evolve.errors import DomainError

FEWEST_ROWS = 4


def checked(table, rising, positive=()):
    """A table whose columns make sense, or the reason why they do not.

    Parameters
    ----------
    table : dict of str to sequence of float
        Columns by name.
    rising : str
        The column that must rise from row to row.
    positive : sequence of str
        Columns that must be above 0.

    Returns
    -------
    dict of str to list of float

    Raises
    ------
    DomainError
        One sentence that names column and row (the first row of numbers is row 1).
    """
    columns = {name: [float(value) for value in column] for name, column in table.items()}
    absent = [name for name in (rising, *positive) if name not in columns]
    if absent:
        raise DomainError(f"the table has no column {', '.join(absent)}")
    rows = len(columns[rising])
    if rows < FEWEST_ROWS:
        raise DomainError(f"the table has {rows} rows; {FEWEST_ROWS} or more are needed")
    for name, column in columns.items():
        if len(column) != rows:
            raise DomainError(
                f"the table's column {name} has {len(column)} rows, its column {rising} {rows}"
            )
        for row, value in enumerate(column, start=1):
            if not isfinite(value):
                raise DomainError(f"the table's {name} in row {row} is {value}, not finite")
            if name in positive and value <= 0.0:
                raise DomainError(f"the table's {name} in row {row} is {value:g}, not above 0")
    column = columns[rising]
    for row in range(1, rows):
        if column[row] <= column[row - 1]:
            raise DomainError(
                f"the table's {rising} must rise from row to row: row {row + 1} has "
                f"{column[row]:g} after {column[row - 1]:g}"
            )
    return columns


@lru_cache
def builtin(name):
    """A table that comes with the package, by the name of its file.

    Parameters
    ----------
    name : str
        "dwarf".

    Returns
    -------
    dict of str to tuple of float
        Columns in internal units, as the header of the file names them.
    """
    text = files("evolve.stars").joinpath("data", f"{name}.csv").read_text(encoding="utf-8")
    lines = [line for line in text.splitlines() if line and not line.startswith("#")]
    names = [cell.split()[0] for cell in lines[0].split(",")]
    rows = [[float(cell) for cell in line.split(",")] for line in lines[1:]]
    return dict(zip(names, zip(*rows)))


__all__ = ["FEWEST_ROWS", "builtin", "checked"]

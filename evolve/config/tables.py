"""Tables that a user names: CSV with the units in the header, or HDF5.

    # comment
    mass [solMass], radius [solRad], luminosity [solLum]
    0.1, 0.12, 1e-3

A column without a unit is in internal units.
"""

import csv
import re
from math import isfinite
from pathlib import Path

from evolve.config.files import missing, read_text
from evolve.config.spellings import SPELLINGS, UnknownUnit, unit_value
from evolve.config.dimensions import internal_unit
from evolve.config.words import nearest
from evolve.errors import ConfigError

_HEADER = re.compile(r"\s*([A-Za-z_]\w*)\s*(?:[\[(](.*)[\])])?\s*")
_HDF5_MARK = b"\x89HDF\r\n\x1a\n"


def read_table(path, columns):
    """The columns of a table on disk, CSV or HDF5.

    Parameters
    ----------
    path : str or Path
    columns : dict of str to str
        Columns that must be there -> unit. The first must rise from row to row.

    Returns
    -------
    dict of str to list of float
        The columns asked for, in their units; further columns of numbers in internal units.

    Raises
    ------
    ConfigError
        Naming file, row and column.
    """
    return parse_table(table_text(path), str(path), columns)


def table_text(path, what="table"):
    """A table on disk as CSV text: as it stands, or as written from an HDF5 file.

    Raises
    ------
    ConfigError
    """
    try:
        with Path(path).open("rb") as file:
            binary = file.read(len(_HDF5_MARK)) == _HDF5_MARK
    except (OSError, ValueError) as error:
        raise ConfigError(missing(path, what, error)) from None
    return _text_of_hdf5(path) if binary else read_text(path, what)


def _text_of_hdf5(path):
    """Datasets of equal length at the root, named as columns, with the attribute `units`."""
    import h5py

    try:
        with h5py.File(path) as file:
            sets = {n: d for n, d in file.items() if isinstance(d, h5py.Dataset) and d.ndim == 1}
            units = {n: d.attrs.get("units", "") for n, d in sets.items()}
            numbers = {n: d[:].tolist() for n, d in sets.items() if d.dtype.kind in "iuf"}
    except OSError as error:
        raise ConfigError(f"{path}: cannot be read as HDF5 ({error})") from None
    if len({len(column) for column in numbers.values()}) != 1:
        raise ConfigError(
            f"{path}: allowed: datasets of numbers, one a column, all of one length, at the root; "
            f"found {', '.join(f'{n} ({len(c)})' for n, c in numbers.items()) or 'none'}"
        )
    header = ", ".join(f"{n} [{_text(units[n])}]" if units[n] else n for n in numbers)
    rows = [", ".join(map(repr, row)) for row in zip(*numbers.values())]
    return "\n".join([header, *rows]) + "\n"


def _text(value):
    return value.decode("utf-8", "replace") if isinstance(value, bytes) else str(value)


def parse_table(text, name, columns):
    """The columns of a table given as CSV text; see `read_table`.

    Parameters
    ----------
    text : str
    name : str
        Of the file, for messages.
    columns : dict of str to str
    """
    numbered = [
        (number, line)
        for number, line in enumerate(text.splitlines(), start=1)
        if line.strip() and not line.lstrip().startswith("#")
    ]
    if len(numbered) < 3:
        raise ConfigError(
            f"{name}: allowed: a header and at least two rows; expected {_like(columns)}"
        )
    header, factors = _header(numbered[0][1], name, columns)
    cells = list(csv.reader(line for _, line in numbered[1:]))
    lines = [number for number, _ in numbered[1:]]
    for line, row in zip(lines, cells):
        if len(row) != len(header):
            raise ConfigError(
                f"{name}, line {line}: {len(row)} values; allowed: {len(header)}, as in the header"
            )
    table = {}
    for position, column in enumerate(header):
        texts = [row[position].strip() for row in cells]
        numbers = _numbers(texts, lines, column, name, required=column in columns)
        if numbers is not None:
            table[column] = [number * factors[column] for number in numbers]
    _check_rising(table, lines, name, next(iter(columns)))
    return table


def _like(columns):
    return '"' + ", ".join(f"{column} [{unit}]" for column, unit in columns.items()) + '"'


def _header(line, name, columns):
    """Names of the columns, and the factor of each to the unit asked for."""
    names, factors = [], {}
    for cell in next(csv.reader([line])):
        match = _HEADER.fullmatch(cell)
        if match is None:
            raise ConfigError(
                f'{name}: "{cell.strip()}" is no column name; allowed: a header such as '
                f"{_like(columns)}"
            )
        column, unit = match[1], match[2]
        if column in names:
            raise ConfigError(f'{name}: the column "{column}" stands twice in the header')
        names.append(column)
        factors[column] = _factor(name, column, (unit or "").strip(), columns)
    absent = [column for column in columns if column not in names]
    if absent:
        near = [nearest(column, names) for column in absent]
        hints = "".join(f'; is "{found}" meant?' for found in near if found)
        raise ConfigError(
            f"{name}: no column {', '.join(absent)}; allowed: a header such as {_like(columns)}, "
            f"found {', '.join(names)}{hints}"
        )
    return names, factors


def _factor(name, column, unit, columns):
    """From the unit in the header to the one asked for, or to the internal one."""
    if not unit:
        return 1.0
    asked = columns.get(column)
    try:
        size, powers = unit_value(unit)
    except UnknownUnit as error:
        near = nearest(error.spelling, SPELLINGS)
        hint = f'; did you mean "{near}"?' if near else ""
        raise ConfigError(
            f'{name}: column {column}: unknown unit "{error.spelling}"; '
            f'allowed: {asked or "a unit"} or one like it{hint}'
        ) from None
    internal, internal_powers = unit_value(internal_unit(unit) if asked is None else asked)
    if powers != internal_powers:
        raise ConfigError(
            f'{name}: column {column} [{unit}]: allowed: {asked or "no unit"} or one like it'
        )
    return size / internal


def _numbers(texts, lines, column, name, required):
    """A column as floats; None if it is not asked for and holds anything else."""
    numbers = []
    for text, line in zip(texts, lines):
        try:
            number = float(text)
        except ValueError:
            number = float("nan")
        if not isfinite(number):
            if not required:
                return None
            raise ConfigError(
                f'{name}, line {line}, column {column} = "{text}": allowed: a finite number'
            )
        numbers.append(number)
    return numbers


def _check_rising(table, lines, name, column):
    values = table[column]
    for before, value, line in zip(values, values[1:], lines[1:]):
        if value <= before:
            raise ConfigError(
                f"{name}, line {line}, column {column} = {value:g}: not above the row before "
                f"({before:g}); allowed: {column} rising from row to row"
            )


__all__ = ["parse_table", "read_table", "table_text"]

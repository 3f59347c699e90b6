"""Tables of a history as text: CSV, or ECSV, which carries units and which astropy reads."""

import json

from evolve.config.units import conversion_factor
from evolve.errors import ConfigError
from evolve.history.columns import COLUMNS
from evolve.history.epoch import sampled


def table_text(history, columns=None, units=None, every=None, rows=None, on="time", form="csv"):
    """A table of a history.

    Parameters
    ----------
    history : History
    columns : sequence of str, optional
        All of them by default.
    units : dict of str, optional
        Column -> the unit it is wanted in.
    every, rows, on
        As of `evolve.history.epoch.sampled`.
    form : str
        "csv": names and units in the first line; "ecsv": Enhanced CSV 1.0.

    Returns
    -------
    str
        Numbers so that they read back exactly.

    Raises
    ------
    ConfigError
    """
    columns = list(dict.fromkeys(columns or history.columns))
    for name in columns:
        if name not in history.columns:
            raise ConfigError(f'no column "{name}"; there are {", ".join(history.columns)}')
    table = sampled(history, every, rows, on)
    wanted = {name: COLUMNS[name].unit for name in columns}
    factors = dict.fromkeys(columns, 1.0)
    for name, unit in (units or {}).items():
        if name not in columns:
            raise ConfigError(f'--unit {name}={unit}: no column "{name}" is exported')
        try:
            factors[name] = conversion_factor(COLUMNS[name].unit, unit)
        except (ConfigError, ValueError) as error:
            raise ConfigError(f"--unit {name}={unit}: {error}") from error
        wanted[name] = unit
    head = _ecsv_head(columns, wanted) if form == "ecsv" else _csv_head(columns, wanted)
    data = [_cells(name, table[name] * factors[name]) for name in columns]
    lines = [",".join(row) for row in zip(*data, strict=True)]
    return "\n".join([*head, *lines]) + "\n"


def _cells(name, values):
    """The shortest texts that read back exactly; flags as integers."""
    if COLUMNS[name].flags:
        values = values.astype(int)
    return [repr(value) for value in values.tolist()]


def _csv_head(columns, units):
    return [",".join(f"{name} [{units[name]}]" if units[name] else name for name in columns)]


def _ecsv_head(columns, units):
    head = ["%ECSV 1.0", "---", "delimiter: ','", "datatype:"]
    for name in columns:
        unit = f", unit: {json.dumps(units[name])}" if units[name] else ""
        kind = "int8" if COLUMNS[name].flags else "float64"
        told = json.dumps(COLUMNS[name].long_name)
        head.append(f"- {{name: {name}{unit}, datatype: {kind}, description: {told}}}")
    return [f"# {line}" for line in head] + [",".join(columns)]

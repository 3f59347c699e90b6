"""A history: columns, events, chapters, ledger, and the look-up of an epoch."""

from functools import cache
from typing import NamedTuple

import numpy as np

from evolve.errors import ConfigError, MissingExtra
from evolve.history.columns import COLUMNS, attributes_of
from evolve.history.epoch import row_of_event, state_at


class Event(NamedTuple):
    """Something that happened: name, component ("A", "B" or ""), time [yr], the row that
    holds the state at it, and what was left of the event function at the root."""

    name: str
    component: str
    time: float
    row: int
    residual: float


class Chapter(NamedTuple):
    """A stretch with one set of equations: regime ("detached", "overflow_A", "overflow_B",
    "inspiral"), start and end [yr], first and last row, the event that ended it."""

    regime: str
    start: float
    end: float
    first_row: int
    last_row: int
    ended_by: str


class History:
    """What happened to a pair.

    Parameters
    ----------
    columns : dict of ndarray (n,)
        By the names of `evolve.history.columns.COLUMNS`, in their units.
    events : list of Event
    chapters : list of Chapter
    ledger : Ledger
    outcome, message : str
        How it ended, in a word and in a sentence.
    complete : bool
        False if a fault or an interruption cut it short.
    title, note, config_text : str
    config_files : dict of str
        Texts of the files that the config names.
    statistics : dict of float, int or str
        Method, tolerances, steps, evaluations.
    sources : sequence of str
        Keys of the bibliography.
    warnings : list of str
    references : dict of str, optional
        Column -> keys of the bibliography, for what made it.
    versions : dict of str, optional
        Of what computed it; the present ones by default.

    Examples
    --------
    `history["period"]` is a column, `history.at("contact")["period"]` its value at an event.
    """

    def __init__(self, columns, events, chapters, ledger, outcome, message, complete, title="",
                 note="", config_text="", config_files=None, statistics=None, sources=(),
                 warnings=(), versions=None, references=None):  # fmt: skip
        self.columns = columns
        self.events, self.chapters, self.ledger = list(events), list(chapters), ledger
        self.outcome, self.message, self.complete = outcome, message, bool(complete)
        self.title, self.note, self.config_text = title, note, config_text
        self.config_files = dict(config_files or {})
        self.statistics = dict(statistics or {})
        self.references = dict(references or {})
        self.sources, self.warnings = tuple(sources), list(warnings)
        self.versions = dict(versions) if versions is not None else present_versions()

    def __getitem__(self, name):
        try:
            return self.columns[name]
        except KeyError:
            raise KeyError(f'no column "{name}"; there are {", ".join(self.columns)}') from None

    def __len__(self):
        return len(self.columns["time"])

    def __repr__(self):
        return f"<History {self.title!r}: {len(self)} rows, {self.outcome}>"

    @property
    def units(self):
        """Unit of each column, as astropy spells it."""
        return {name: COLUMNS[name].unit for name in self.columns}

    def event_times(self, name):
        """Times of all events of that name, ndarray (n,) [yr]."""
        return np.array([event.time for event in self.events if event.name == name])

    def at(self, event=None, **where):
        """The state at an event, or where a column first takes a value.

        Parameters
        ----------
        event : str, optional
            "contact" is the first, "contact[2]" the second, "contact[-1]" the last.
        **where
            One column and a value in the column's unit: `period=4.0`.

        Returns
        -------
        Epoch
            A mapping of column to value, with the `row` that holds it or precedes it.

        Raises
        ------
        ConfigError
            Saying which events there are, or the range of the column.
        """
        if (event is None) == (not where) or len(where) > 1:
            raise ConfigError('give one event ("contact") or one column with a value (period=4.0)')
        if event is not None:
            return state_at(self, row_of_event(self, event))
        ((column, value),) = where.items()
        return state_at(self, column=column, value=value)

    def save(self, path, replace=False):
        """Write an archive; see `evolve.archive`."""
        from evolve.archive import write_archive

        write_archive(self, path, replace)

    def to_pandas(self):
        """The columns as a pandas DataFrame."""
        try:
            import pandas
        except ImportError as error:
            raise MissingExtra("pandas", "all") from error
        return pandas.DataFrame(self.columns)

    def to_xarray(self):
        """The columns as an xarray Dataset along time, with units and names."""
        try:
            import xarray
        except ImportError as error:
            raise MissingExtra("xarray", "all") from error
        data = {
            name: ("time", values, attributes_of(name)) for name, values in self.columns.items()
        }
        return xarray.Dataset({n: d for n, d in data.items() if n != "time"}, {"time": data["time"]})


@cache
def present_versions(*more):
    """Versions of what computes a history here, with `more` packages."""
    import platform
    from importlib.metadata import version

    return {
        "python": platform.python_version(),
        **{name: version(name) for name in ("numpy", "scipy", *more)},
    }


def largest_differences(one, other):
    """Largest difference of each column between two histories of the same config.

    Parameters
    ----------
    one, other : History

    Returns
    -------
    dict of float
        Relative to the largest absolute value of the column in `one`; inf for a column that
        one of them lacks, where the numbers of rows differ, or where a value of only one
        is finite.
    """
    found = {}
    for name in dict.fromkeys([*one.columns, *other.columns]):
        a, b = one.columns.get(name), other.columns.get(name)
        if a is None or b is None or len(a) != len(b):
            found[name] = float("inf")
            continue
        size = np.abs(a[np.isfinite(a)])
        unequal = ~((a == b) | (np.isnan(a) & np.isnan(b)))
        a, b = a[unequal], b[unequal]
        gap = np.full(len(a), np.inf)
        np.subtract(a, b, out=gap, where=np.isfinite(a) & np.isfinite(b))
        scale = size.max() if size.any() else 1.0
        found[name] = float(np.abs(gap).max(initial=0.0) / scale)
    return found

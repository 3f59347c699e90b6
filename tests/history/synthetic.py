"""Legal histories made up of numbers, without stars, laws or an integration."""

from math import nextafter

import numpy as np
from hypothesis import strategies as st
from hypothesis.extra import numpy as hnp

from evolve.history import COLUMNS, Chapter, Event, History, Ledger

REGIMES = ("detached", "overflow_A", "detached", "overflow_A")
TIMES = (0.0, 1e6, 5e7, 2e8, 1e9)
"""Bounds of the chapters [yr]."""
ROWS = 12
"""Rows of each chapter."""


def period_at(time):
    """A period [h] that falls in every chapter and jumps up by 0.25 at each of its ends."""
    chapter = np.minimum(np.searchsorted(TIMES, time, side="left"), len(TIMES) - 1) - 1
    return 8.0 * np.exp(-np.asarray(time) / 1e9) + 0.25 * np.maximum(chapter, 0)


def synthetic(**changes):
    """A history of four chapters, detached and overflowing by turns.

    Parameters
    ----------
    **changes
        Arguments of History to have otherwise.

    Returns
    -------
    History
    """
    spans = [np.linspace(a, b, ROWS) for a, b in zip(TIMES, TIMES[1:], strict=False)]
    for span in spans[1:]:
        span[0] = nextafter(span[0], np.inf)
    time = np.concatenate(spans)
    chapters, events = [], [Event("start", "", 0.0, 0, 0.0)]
    names = ("contact", "detachment", "contact", "end")
    for n, (regime, name) in enumerate(zip(REGIMES, names, strict=True)):
        first, last = n * ROWS, (n + 1) * ROWS - 1
        chapters.append(Chapter(regime, time[first], time[last], first, last, name))
        events.append(Event(name, "A" if name != "end" else "", time[last], last, 1e-13 * n))
    donor = np.repeat([float(regime != "detached") for regime in REGIMES], ROWS)
    mass = 0.6 * np.exp(-time / 3e9)
    columns = {
        "time": time, "donor": donor, "mass_A": mass, "mass_B": 1.35 - mass,
        "period": period_at(time), "overflow_A": 1e-9 * donor * np.exp(-time / 2e8),
        "zeta_lobe": np.where(donor > 0.0, -0.3, np.nan),
        "transfer_time": np.where(donor > 0.0, 6e8, np.inf),
        "torque_waves": -1e-9 * np.exp(time / 1e9), "overflow_kind": 2.0 * donor,
    }  # fmt: skip
    arguments = {
        "columns": columns, "events": events, "chapters": chapters, "ledger": books(mass),
        "outcome": "time", "message": "The time asked for is over.", "complete": True,
        "title": "Zwei Sterne, très proches ★", "note": "a\nb", "config_text": 'title = "x"\n',
        "config_files": {"table.csv": "mass,radius\n1,1\n", "a.py": "def law(): ..."},
        "statistics": {"method": "LSODA", "rtol": 1e-6, "steps": 47},
        "sources": ("peters-1964", "eggleton-1983"), "warnings": ["one", "two ä"],
    }  # fmt: skip
    return History(**{**arguments, **changes})


def books(mass):
    """A ledger that closes: all of what A loses is accepted by B."""
    bounds = mass[[0, *(ROWS * (n + 1) - 1 for n in range(len(REGIMES)))]]
    flows = -np.diff(bounds)
    return Ledger(
        angular_momentum={"waves": np.full(4, -1.0), "braking_A": np.array([-3.0, 0.0, 0.0, -2.0])},
        mass={"overflow_A": flows, "accepted_B": flows},
        start={"mass_A": mass[0], "mass_B": 1.35 - mass[0], "angular_momentum": 100.0},
        end={"mass_A": mass[-1], "mass_B": 1.35 - mass[-1], "angular_momentum": 91.0},
    )


@st.composite
def histories(draw):
    """Any legal history: any floats in any columns, any text, chapters that cover the rows."""
    rows = draw(st.integers(1, 12))
    cuts = sorted(draw(st.sets(st.integers(1, rows - 1), max_size=3))) if rows > 1 else []
    firsts, lasts = [0, *cuts], [*(cut - 1 for cut in cuts), rows - 1]
    steps = draw(hnp.arrays(float, rows, elements=st.floats(1e-3, 1e9)))
    columns = {"time": np.cumsum(steps)}
    names = draw(st.lists(st.sampled_from([n for n in COLUMNS if n != "time"]), unique=True))
    for name in names:
        flags = COLUMNS[name].flags
        kinds = st.sampled_from([float(flag) for flag in flags]) if flags else st.floats()
        columns[name] = draw(hnp.arrays(float, rows, elements=kinds))
    text = st.text(st.characters(exclude_categories=["Cs"], exclude_characters="\0"), max_size=30)
    word = st.sampled_from(["contact", "detachment", "end", "period_minimum"])
    time = columns["time"]
    chapters = [
        Chapter(draw(st.sampled_from(REGIMES)), time[a], time[b], a, b, draw(word))
        for a, b in zip(firsts, lasts, strict=True)
    ]
    event = st.builds(
        lambda name, component, row, residual: Event(name, component, time[row], row, residual),
        word, st.sampled_from(["A", "B", ""]), st.integers(0, rows - 1), st.floats(allow_nan=False),
    )  # fmt: skip
    entry = hnp.arrays(float, len(chapters), elements=st.floats())
    entries = st.dictionaries(st.sampled_from(["waves", "braking_A", "overflow_A", "jump"]), entry)
    ends = st.fixed_dictionaries({n: st.floats(0.1, 9.0) for n in ("mass_A", "angular_momentum")})
    numbers = st.one_of(st.floats(allow_nan=False), st.integers(-(2**62), 2**62), text)
    return History(
        columns, draw(st.lists(event, max_size=6)), chapters,
        Ledger(draw(entries), draw(entries), draw(ends), draw(ends)),
        draw(word), draw(text), draw(st.booleans()), draw(text), draw(text), draw(text),
        draw(st.dictionaries(text, text, max_size=3)),
        draw(st.dictionaries(st.sampled_from(["method", "rtol", "steps"]), numbers)),
        draw(st.lists(st.sampled_from(["peters-1964", "soberman-1997"]), unique=True)),
        draw(st.lists(text, max_size=3)),
    )  # fmt: skip


def bits(values):
    """The bits of an array: -0.0 differs from 0.0, and one NaN from another."""
    return np.asarray(values, dtype=np.float64).tobytes()


def assert_same(one, other):
    """Fail unless two histories are the same to the last bit."""
    assert list(one.columns) == list(other.columns)
    for name in one.columns:
        assert bits(one[name]) == bits(other[name]), name
    for kind in ("angular_momentum", "mass"):
        ours, theirs = getattr(one.ledger, kind), getattr(other.ledger, kind)
        assert list(ours) == list(theirs)
        assert all(bits(ours[name]) == bits(theirs[name]) for name in ours)
    assert (one.ledger.start, one.ledger.end) == (other.ledger.start, other.ledger.end)
    for name in (
        "events", "chapters", "outcome", "message", "complete", "title", "note", "config_text",
        "config_files", "statistics", "sources", "warnings", "versions",
    ):  # fmt: skip
        assert getattr(one, name) == getattr(other, name), name

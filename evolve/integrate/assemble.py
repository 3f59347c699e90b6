"""From the rows of a run to a History: columns, events, chapters, ledger."""

import numpy as np

from evolve.constants import KM_S
from evolve.history import COLUMNS, Chapter, Event, History, Ledger
from evolve.history.history import present_versions
from evolve.integrate.derive import FLOW_COLUMNS, columns_of
from evolve.integrate.outcomes import GOOD
from evolve.laws.changes import CHANGES, sources_of_events


def history_of(run):
    """The History of a finished run.

    Parameters
    ----------
    run : evolve.integrate.run.Run
        After `run.run()`, whatever its outcome.

    Returns
    -------
    evolve.history.History
    """
    columns = _columns(run)
    config = run.acts[0].pair.config
    return History(
        columns=columns,
        events=_events(run),
        chapters=_chapters(run),
        ledger=_ledger(run),
        outcome=run.outcome,
        message=run.message,
        complete=run.outcome in GOOD,
        title=config.values["title"],
        note=config.values["note"],
        config_text=config.text,
        config_files=config.files,
        statistics=_statistics(run),
        sources=_sources(run, columns),
        warnings=[*config.warnings, *run.warnings],
        references=references_of(run.acts),
        versions=present_versions(*["numba"] * run.compiled),
    )


def _sources(run, columns):
    """Bibliography keys of what acted, of what happened, and of the columns that need one."""
    keys = [key for act in run.acts for key in sources_of(act.pair)]
    keys += sources_of_events(mark.name for mark in run.marks)
    keys += CHANGES["disc"].law.sources if "disc_critical_rate" in columns else ()
    return tuple(dict.fromkeys(keys))


def _columns(run):
    """The columns of all acts, one after the other; what an act lacks is 0 or NaN."""
    time = run.recorder.times()
    donor = _donor(run, len(time))
    bounds = [act.row for act in run.acts] + [len(time)]
    parts = []
    for act, first, last in zip(run.acts, bounds, bounds[1:], strict=False):
        if first == last:
            continue
        table = run.recorder.quantities(first, last)
        q = dict(zip(act.pair.layout.quantities, table.T, strict=True))
        parts.append(columns_of(act.pair, time[first:last], q, donor[first:last]))
    for part, speed in zip(parts, _systemic_speeds(run, bounds), strict=True):
        if speed is not None:
            part["systemic_speed"] = np.full(len(part["time"]), speed)
    names = dict.fromkeys(name for name in COLUMNS if any(name in part for part in parts))
    return {
        name: np.concatenate([
            part[name] if name in part else np.full(len(part["time"]), _absent(name))
            for part in parts
        ])
        for name in names
    }  # fmt: skip


def _systemic_speeds(run, bounds):
    """Speed of the centre of mass in each act [km/s]; None each without sudden changes.

    Several changes add by their squares: their directions are unrelated.
    """
    acts = [act for act, last in zip(run.acts, bounds[1:], strict=True) if act.row < last]
    squares = np.cumsum([act.speed**2 for act in acts])
    return KM_S * np.sqrt(squares) if squares[-1] > 0.0 else [None] * len(acts)


def _absent(name):
    return 0.0 if name.startswith((*FLOW_COLUMNS, "torque", "eccentricity", "core_mass")) else np.nan


def _donor(run, length):
    donor = np.zeros(length)
    code = {"overflow_A": 1.0, "overflow_B": 2.0}
    for opening in run.openings:
        donor[opening.row :] = code.get(opening.regime, 0.0)
    return donor


def _events(run):
    rows, marks = run.recorder, sorted(run.marks, key=lambda mark: mark.row)
    events = [
        Event(m.name, m.component, rows[m.row].time, m.row, m.residual) for m in marks
    ]
    return [*events, Event("end", "", rows[-1].time, len(rows) - 1, 0.0)]


def _chapters(run):
    rows, openings = run.recorder, run.openings
    chapters = []
    for number, opening in enumerate(openings):
        following = openings[number + 1] if number + 1 < len(openings) else None
        last = following.row - 1 if following else len(rows) - 1
        chapters.append(
            Chapter(
                opening.regime, rows[opening.row].time, rows[last].time, opening.row, last,
                following.event if following else "end",
            )
        )  # fmt: skip
    return chapters


def _ledger(run):
    """Differences of the ledger's integrals over each chapter, and jumps between chapters."""
    rows, chapters = run.recorder, _chapters(run)
    momentum, mass = {}, {}

    def book(entries, name, number, value):
        entries.setdefault(name, np.zeros(len(chapters)))[number] += value

    for number, chapter in enumerate(chapters):
        pair = _pair_of(run, chapter.first_row)
        slots, first = pair.layout.ledger, len(pair.layout.core)
        change = rows[chapter.last_row].state - rows[chapter.first_row].state
        for name, value in zip(slots, change[first:], strict=True):
            if name.startswith(FLOW_COLUMNS):
                book(mass, name, number, value)
            else:
                book(momentum, name.removeprefix("torque_"), number, value)
        if number and pair is not _pair_of(run, chapters[number - 1].first_row):
            before, after = (_balance_at(run, row) for row in (chapter.first_row - 1, chapter.first_row))
            book(momentum, "jump", number, after["angular_momentum"] - before["angular_momentum"])
            for c in "AB":
                book(mass, f"jump_{c}", number, after[f"mass_{c}"] - before[f"mass_{c}"])
    return Ledger(
        angular_momentum=momentum, mass=mass, start=_balance_at(run, 0),
        end=_balance_at(run, len(rows) - 1),
    )  # fmt: skip


def _pair_of(run, row):
    return [act.pair for act in run.acts if act.row <= row][-1]


def _balance_at(run, row):
    """Masses and angular momentum in a row."""
    core = zip(_pair_of(run, row).layout.core, run.recorder[row].state, strict=False)
    return {k: v for k, v in core if k in ("mass_A", "mass_B", "angular_momentum")}


def _statistics(run):
    numerics = run.numerics
    return {
        "engine": "compiled" if run.compiled else "plain",
        "method": "Rodas4" if run.compiled else numerics["method"],
        "rtol": numerics["rtol"],
        "steps": run.steps,
        "evaluations": run.evaluations,
        "jacobians": run.jacobians,
        "stretches": run.stretches,
    }


def sources_of(pair):
    """Bibliography keys of every law and star that acts in a pair, in order, once each."""
    laws = pair.laws
    chosen = [laws.waves, *laws.braking.values(), *laws.wind.values(), *laws.capture.values()]
    chosen += [laws.overflow, *laws.ceiling.values(), *(c for _, c in laws.expulsion.values())]
    chosen += [laws.consequential, *laws.tides.values()]
    keys = ["iau-2015", "eggleton-1983"]
    for entry in chosen:
        keys += getattr(getattr(entry, "law", None), "sources", ())
    for c in "AB":
        keys += pair.models[c].sources
    return tuple(dict.fromkeys(keys))


def references_of(acts):
    """Column -> bibliography keys of the laws and stars that made it."""
    found = {}

    def add(column, keys):
        found[column] = tuple(dict.fromkeys([*found.get(column, ()), *keys]))

    for act in acts:
        laws = act.pair.laws
        whole = {"torque_waves": laws.waves, "torque_consequential": laws.consequential}
        for c in "AB":
            whole |= {f"overflow_{c}": laws.overflow, f"wind_{c}": laws.wind[c]}
            whole |= {f"captured_{c}": laws.capture[c], f"accepted_{c}": laws.ceiling[c]}
            add(f"lobe_{c}", ["eggleton-1983"])
            for name in ("radius", "luminosity", "temperature"):
                add(f"{name}_{c}", act.pair.models[c].sources)
            for column, law in (("torque_braking", laws.braking[c]), ("torque_tides", laws.tides[c])):
                add(column, law.law.sources if law else ())
        for column, chosen in whole.items():
            add(column, getattr(getattr(chosen, "law", None), "sources", ()))
        for _, chosen in laws.expulsion.values():
            add("torque_expelled", chosen.law.sources)
    return {column: " ".join(keys) for column, keys in found.items() if keys}

"""From the rows of a run to a History: columns, events, chapters, ledger."""

import numpy as np

from evolve.constants import ENERGY_PER_LUMINOSITY_YEAR, G, GRAVITATIONAL_TIME, HOURS_PER_YEAR
from evolve.history import COLUMNS, Chapter, Event, History, Ledger
from evolve.integrate.outcomes import GOOD
from evolve.system.layout import OTHER

STAR_COLUMNS = ("radius", "lobe", "luminosity", "temperature")
FLOW_COLUMNS = ("overflow", "wind", "captured", "accepted", "expelled")


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
        sources=tuple(dict.fromkeys(key for act in run.acts for key in sources_of(act.pair))),
        warnings=list(config.warnings),
    )


def _columns(run):
    """The columns of all acts, one after the other; what an act lacks is 0 or NaN."""
    rows = run.recorder.rows
    time, donor = np.array([row.time for row in rows]), _donor(run, len(rows))
    bounds = [act.row for act in run.acts] + [len(rows)]
    parts = []
    for act, first, last in zip(run.acts, bounds, bounds[1:], strict=False):
        if first == last:
            continue
        table = np.array([row.quantities for row in rows[first:last]], dtype=float)
        q = dict(zip(act.pair.layout.quantities, table.T, strict=True))
        parts.append(columns_of(act.pair, time[first:last], q, donor[first:last]))
    names = dict.fromkeys(name for name in COLUMNS if any(name in part for part in parts))
    return {
        name: np.concatenate([
            part[name] if name in part else np.full(len(part["time"]), _absent(name))
            for part in parts
        ])
        for name in names
    }  # fmt: skip


def _absent(name):
    return 0.0 if name.startswith((*FLOW_COLUMNS, "torque", "eccentricity")) else np.nan


def _donor(run, length):
    donor = np.zeros(length)
    code = {"overflow_A": 1.0, "overflow_B": 2.0}
    for opening in run.openings:
        donor[opening.row :] = code.get(opening.regime, 0.0)
    return donor


def columns_of(pair, time, q, donor):
    """The columns of a trajectory from the quantities of its rows.

    Parameters
    ----------
    pair : evolve.system.pair.Pair
    time, donor : ndarray (n,)
        [yr]; 0 none, 1 A, 2 B.
    q : dict of ndarray (n,)
        The quantities by name.

    Returns
    -------
    dict of ndarray (n,)
        A column is there when its physics is on.
    """
    plan, parts = pair.plan, pair.plan.components
    columns = {"time": time, "donor": donor}
    for name in ("mass", *STAR_COLUMNS):
        columns.update({f"{name}_{c}": q[f"{name}_{c}"] for c in "AB"})
    for c in "AB":
        columns[f"fill_{c}"] = q[f"radius_{c}"] / q[f"lobe_{c}"]
        if q[f"core_mass_{c}"].any():
            columns[f"core_mass_{c}"] = q[f"core_mass_{c}"]
    columns["separation"] = q["separation"]
    columns["period"] = 2.0 * np.pi / q["omega"] * HOURS_PER_YEAR
    if plan.eccentric:
        columns["eccentricity"] = q["eccentricity"]
    columns["mass_ratio"] = _mass_ratio(q, donor)
    columns["angular_momentum"] = q["angular_momentum"]
    flows = [f"{name}_{c}" for name in FLOW_COLUMNS for c in "AB"]
    columns.update({name: q[name] for name in flows if name in q})
    columns.update(_torque_columns(q))
    if any(parts[c].overflows for c in "AB"):
        columns.update(_stability_columns(q, donor))
    total = q["mass_A"] + q["mass_B"]
    rate = 1.5 * q["separation_rate"] - 0.5 * (q["mass_rate_A"] + q["mass_rate_B"]) / total
    columns["period_derivative"] = rate * columns["period"] / HOURS_PER_YEAR
    return columns


def _torque_columns(q):
    slots = {"torque_waves": ("waves",), "torque_braking": ("braking_A", "braking_B")}
    for name in ("torque_wind", "torque_expelled", "torque_consequential"):
        slots[name] = (f"{name}_A", f"{name}_B")
    columns = {}
    for column, parts in slots.items():
        there = [q[part] for part in parts if part in q]
        if there:
            columns[column] = sum(there)
    return columns


def _mass_ratio(q, donor):
    """Donor over accretor; while detached, the component nearer to its lobe over the other."""
    by_b = _b_leads(q, donor)
    return np.where(by_b, q["mass_B"] / q["mass_A"], q["mass_A"] / q["mass_B"])


def _b_leads(q, donor):
    nearer = q["radius_B"] / q["lobe_B"] > q["radius_A"] / q["lobe_A"]
    return (donor == 2) | ((donor == 0) & nearer)


def _stability_columns(q, donor):
    by_b = _b_leads(q, donor)

    def of_donor(name):
        missing = np.full(len(donor), np.nan)
        return np.where(by_b, q.get(f"{name}_B", missing), q.get(f"{name}_A", missing))

    mass, radius, luminosity = of_donor("mass"), of_donor("radius"), of_donor("luminosity")
    with np.errstate(divide="ignore", invalid="ignore"):
        return {
            "zeta_star": of_donor("zeta"),
            "zeta_lobe": of_donor("zeta_lobe"),
            "thermal_time": np.where(
                luminosity > 0.0, GRAVITATIONAL_TIME * mass**2 / (radius * luminosity), np.nan
            ),
            "transfer_time": np.where(of_donor("overflow") > 0.0, mass / of_donor("overflow"), np.nan),
            "dynamical_time": np.sqrt(radius**3 / (G * mass)),
            "accretion_luminosity": _accretion_luminosity(q),
            "donor_density": mass / (4.0 / 3.0 * np.pi * radius**3),
        }


def _accretion_luminosity(q):
    """G m mdot / R of what reaches an accretor with a surface [solLum]."""
    power = np.zeros_like(q["mass_A"])
    for c in "AB":
        o = OTHER[c]
        reaching = q.get(f"overflow_{o}", 0.0) + q.get(f"captured_{o}", 0.0)
        surface = np.where(q[f"radius_{c}"] > 0.0, q[f"radius_{c}"], np.inf)
        power += G * q[f"mass_{c}"] * reaching / surface
    return power / ENERGY_PER_LUMINOSITY_YEAR


def _events(run):
    rows, marks = run.recorder.rows, sorted(run.marks, key=lambda mark: mark.row)
    events = [
        Event(m.name, m.component, rows[m.row].time, m.row, m.residual) for m in marks
    ]
    return [*events, Event("end", "", rows[-1].time, len(rows) - 1, 0.0)]


def _chapters(run):
    rows, openings = run.recorder.rows, run.openings
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
    rows, chapters = run.recorder.rows, _chapters(run)
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
    core = zip(_pair_of(run, row).layout.core, run.recorder.rows[row].state, strict=False)
    return {k: v for k, v in core if k in ("mass_A", "mass_B", "angular_momentum")}


def _statistics(run):
    numerics = run.numerics
    return {
        "method": numerics["method"],
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
    chosen.append(laws.consequential)
    keys = ["iau-2015", "eggleton-1983"]
    for entry in chosen:
        keys += getattr(getattr(entry, "law", None), "sources", ())
    for c in "AB":
        keys += pair.models[c].sources
    return tuple(dict.fromkeys(keys))

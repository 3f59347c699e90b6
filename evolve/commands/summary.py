"""A history in words: events, end, ledger."""

from evolve.commands.nature import COMPACT, MODELS, natures
from evolve.commands.output import NO_TIME, aligned, of_column, quantity, scalar, table
from evolve.history.ledger import FLOW_WORDS, LAW_WORDS, MASS_UNIT, MOMENTUM_UNIT

ERG_S_PER_LSUN = 3.828e33


def summary(history):
    """Lines of a history for people.

    Parameters
    ----------
    history : evolve.history.History

    Returns
    -------
    list of str
    """
    lines = [history.title] if history.title else []
    lines += ["", *event_lines(history), "", history.message, *end_lines(history)]
    if transfers := transfer_lines(history):
        lines += ["", *transfers]
    return [*lines, "", *ledger_lines(history)]


def _flow(history, row):
    return sum(float(history.columns.get(f"overflow_{c}", [0.0] * (row + 1))[row]) for c in "AB")


def _at_once(history, row):
    """The row after this one, if no time passes between them; else this one."""
    following = min(row + 1, len(history) - 1)
    step = history["time"][following] - history["time"][row]
    return following if step <= 1e-15 * history["time"][row] + NO_TIME else row


def event_lines(history):
    """The events, a line each, and what the pair is right after one that changes it at once."""
    rows = []
    for number, event in enumerate(history.events):
        name = event.name.replace("_", " ") + (f" of {event.component}" if event.component else "")
        begins = event.name in ("contact", "unstable_overflow")  # the flow is in the next row
        flowing = _at_once(history, event.row) if begins else event.row
        flowing = flowing if history["donor"][flowing] else event.row
        rows.append(_event_cells(history, name, event.row, _flow(history, flowing)))
        last = number + 1 == len(history.events) or history.events[number + 1].row != event.row
        after = _at_once(history, event.row)
        if last and _jumps(history, event.row, after):
            rows.append(_event_cells(history, "  and then", after, _flow(history, after)))
    head = ["event", "time", "period"] + ["e"] * ("eccentricity" in history.columns)
    head += ["mass A", "mass B", "overflow"]
    if all(row[-1] == "-" for row in rows):
        head, rows = head[:-1], [row[:-1] for row in rows]
    return aligned(head, rows)


def _event_cells(history, name, row, rate):
    cells = [name, quantity(history["time"][row], "yr", 5), of_column("period", history["period"][row])]
    if "eccentricity" in history.columns:
        e = float(history["eccentricity"][row])
        cells.append(f"{e:.4f}" if e >= 1e-4 else f"{e:.0e}" if e else "0")
    cells += [of_column(f"mass_{c}", history[f"mass_{c}"][row]) for c in "AB"]
    return [*cells, quantity(rate, "solMass / yr", 3) if rate > 0.0 else "-"]


def _jumps(history, row, after):
    """True if masses or separation change from one row to the next without time passing."""
    return any(
        abs(history[name][after] - history[name][row]) > 1e-6 * history[name][row]
        for name in ("separation", "mass_A", "mass_B")
    )


def end_lines(history):
    """What an observer would find at the end."""
    row, nature = len(history) - 1, natures(history)
    orbit = (
        f"orbit: period {of_column('period', history['period'][row])}, "
        f"separation {of_column('separation', history['separation'][row])}"
    )
    if history.outcome != "merger":
        orbit += f", dP/dt = {history['period_derivative'][row]:.3g} s/s"
    if "systemic_speed" in history.columns:
        orbit += f", moving at {of_column('systemic_speed', history['systemic_speed'][row], 3)}"
    lines = [orbit, *(_star_line(history, c, nature[c], row) for c in "AB")]
    return [f"  {line}" for line in [*lines, *_seen(history, row)]]


def _star_line(history, c, nature, row):
    def said(name, digits=4):
        return of_column(f"{name}_{c}", history[f"{name}_{c}"][row], digits)

    parts = [f"{c}: {nature}, {said('mass')}"]
    if history[f"radius_{c}"][row] > 0.0 and nature != "black hole":  # a hole has no surface
        parts.append(f"R = {said('radius')}")
    if history[f"core_mass_{c}"][row] > 0.0 if f"core_mass_{c}" in history.columns else False:
        parts.append(f"core {said('core_mass')}")
    if nature not in (*COMPACT.values(), MODELS["white-dwarf"], MODELS["power-law"]):
        temperature, light = (history[f"{name}_{c}"][row] for name in ("temperature", "luminosity"))
        parts.append(f"T = {_rounded(temperature)} K, L = {_rounded(light)} Lsun")
    if history[f"fill_{c}"][row] >= 0.01 and nature not in COMPACT.values():
        parts.append(f"R/R_L = {said('fill')}")
    return ", ".join(parts)


def _rounded(value):
    """Three digits, written out where that is short."""
    three = f"{value:.3g}"
    return f"{float(three):g}" if 1e-4 <= abs(value) < 1e6 else three


def _seen(history, row):
    """What the pair shows from afar, where it shows anything."""
    columns, found = history.columns, []
    if "K_A" in columns:
        found.append(
            f"seen: K_A = {of_column('K_A', columns['K_A'][row])}, "
            f"K_B = {of_column('K_B', columns['K_B'][row])}"
        )
    light = float(columns["accretion_luminosity"][row]) if "accretion_luminosity" in columns else 0.0
    if light > 0.0:
        found.append(f"accretion: {_rounded(light)} Lsun ({light * ERG_S_PER_LSUN:.2g} erg/s)")
        critical = float(columns.get("disc_critical_rate", [float("nan")])[-1])
        if critical > 0.0 and _flow(history, row) > 0.0:
            state = "steady" if _flow(history, row) > critical else "in outbursts"
            found[-1] += f", its disc {state} (critical rate {quantity(critical, 'solMass / yr', 2)})"
    strain = float(columns["wave_strain"][row]) if "wave_strain" in columns else float("nan")
    if strain > 0.0 and history.outcome != "merger":
        found.append(f"gravitational waves: {columns['wave_frequency'][row]:.3g} Hz, strain {strain:.2g}")
    return found


def transfer_lines(history):
    """Who passed how much on, how fast at most, and for how long."""
    lines = []
    for c in "AB":
        spells = [chapter for chapter in history.chapters if chapter.regime == f"overflow_{c}"]
        lasted = sum(chapter.end - chapter.start for chapter in spells)
        if lasted > NO_TIME:
            rates = history[f"overflow_{c}"]
            top = int(rates.argmax())
            moved = history.ledger.total(f"overflow_{c}", "mass")
            lines.append(
                f"overflow of {c}: {moved:.4g} Msun in {quantity(lasted, 'yr')} of contact, at most "
                f"{quantity(rates[top], 'solMass / yr', 3)} (at {quantity(history['time'][top], 'yr')})"
            )
        if f"wind_{c}" in history.columns:
            lost = history.ledger.total(f"wind_{c}", "mass")
            lines.append(f"wind of {c}: {lost:.4g} Msun" + _caught(history, c, lost))
    return lines


def _caught(history, c, lost):
    if f"captured_{c}" not in history.columns or lost <= 0.0:
        return ""
    share = history.ledger.total(f"captured_{c}", "mass") / lost
    return f", of which its companion caught {100.0 * share:.2g} %"


def _words(entry):
    law, _, component = entry.rpartition("_")
    if law:
        return f"{LAW_WORDS.get(law, law)} of {component}"
    return LAW_WORDS.get(entry, entry)


def ledger_lines(history):
    """Who took what, and what the books leave open."""
    ledger = history.ledger
    rows = [
        [_words(entry), f"{ledger.total(entry):.6g}", _percent(ledger.share(entry))]
        for entry in sorted(ledger.worth_telling("angular_momentum"), key=_law_of)
    ]
    lines = aligned([f"angular momentum [{MOMENTUM_UNIT}]", "change", "share"], rows)
    if "total_angular_momentum" in history.columns:
        first, last = (float(history["total_angular_momentum"][n]) for n in (0, -1))
        lines.append(f"orbit and spins together, which braking acts on: {first:.6g} at first, {last:.6g} at the end")
    flows = [
        [f"{FLOW_WORDS[entry[:-2]]} {entry[-1]}", f"{ledger.total(entry, 'mass'):.5g}"]
        for entry in sorted(ledger.worth_telling("mass"), key=_giver_of)
    ]
    if flows:
        lines += ["", *aligned(["mass", "Msun"], flows)]
    residuals = ledger.residuals
    lines.append("")
    lines.append(
        "the ledger closes to "
        + ", ".join(f"{abs(value):.1e} of {name.replace('_', ' ')}" for name, value in residuals.items())
    )
    return lines


def _law_of(entry):
    """Order of an entry of angular momentum: by law, A before B."""
    law = entry if entry in LAW_WORDS else entry[:-2]
    return list(LAW_WORDS).index(law) if law in LAW_WORDS else 0, entry


def _giver_of(entry):
    """Order of an entry of mass: the way of A's matter, that of B's, what changed at once."""
    flow, c = entry[:-2], entry[-1]
    giver = {"A": "B", "B": "A"}[c] if flow in ("accepted", "expelled") else c
    return flow == "jump", giver, list(FLOW_WORDS).index(flow) if flow in FLOW_WORDS else 0


def _percent(share):
    return f"{100.0 * share:.2f} %" if abs(share) >= 5e-5 else f"{100.0 * share:.1g} %"


def history_result(history):
    """A history as the result of --json: events, end, ledger, outcome."""
    events = {
        "name": [event.name for event in history.events],
        "component": [event.component for event in history.events],
        "time": [event.time for event in history.events],
    }
    units = {"name": "", "component": "", "time": "yr"}
    for column in ("period", "eccentricity", "mass_A", "mass_B", "overflow_A", "overflow_B"):
        if column in history.columns:
            events[column] = [history[column][event.row] for event in history.events]
            units[column] = history.units[column]
    last = len(history) - 1
    return {
        "title": history.title, "outcome": history.outcome, "message": history.message,
        "complete": history.complete,
        "events": table(events, units),
        "end": {n: scalar(float(v[last]), history.units[n]) for n, v in history.columns.items()},
        "ledger": {
            "angular_momentum": {
                name: scalar(history.ledger.total(name), MOMENTUM_UNIT)
                for name in history.ledger.angular_momentum
            },
            "mass": {
                name: scalar(history.ledger.total(name, "mass"), MASS_UNIT)
                for name in history.ledger.mass
            },
            "residuals": history.ledger.residuals,
        },
        "statistics": history.statistics,
    }  # fmt: skip

"""A history in words: events, end, ledger."""

from evolve.commands.output import aligned, of_column, quantity, scalar, table
from evolve.history.ledger import FLOW_WORDS, LAW_WORDS, MASS_UNIT, MOMENTUM_UNIT


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
    return [*lines, "", *ledger_lines(history)]


def _flow(history, row):
    return sum(float(history.columns.get(f"overflow_{c}", [0.0] * (row + 1))[row]) for c in "AB")


def event_lines(history):
    """The events, a line each."""
    rows = []
    for event in history.events:
        name = event.name.replace("_", " ") + (f" of {event.component}" if event.component else "")
        rate = _flow(history, event.row)
        cells = [name, quantity(event.time, "yr", 5), of_column("period", history["period"][event.row])]
        if "eccentricity" in history.columns:
            cells.append(f"{history['eccentricity'][event.row]:.4f}")
        cells += [of_column(f"mass_{c}", history[f"mass_{c}"][event.row]) for c in "AB"]
        rows.append([*cells, quantity(rate, "solMass / yr", 3) if rate > 0.0 else "-"])
    head = ["event", "time", "period"] + ["e"] * ("eccentricity" in history.columns)
    return aligned([*head, "mass A", "mass B", "overflow"], rows)


def end_lines(history):
    """What an observer would find at the end."""
    row = len(history) - 1
    found = []
    for c in "AB":
        found.append(
            f"{c}: {of_column(f'mass_{c}', history[f'mass_{c}'][row])}, "
            f"R = {of_column(f'radius_{c}', history[f'radius_{c}'][row])}, "
            f"R/R_L = {history[f'fill_{c}'][row]:.4g}"
        )
    orbit = (
        f"orbit: period {of_column('period', history['period'][row])}, "
        f"separation {of_column('separation', history['separation'][row])}"
    )
    derivative = history["period_derivative"][row]
    return [f"  {line}" for line in [orbit + f", dP/dt = {derivative:.3g} s/s", *found]]


def _words(entry):
    law, _, component = entry.rpartition("_")
    if law:
        return f"{LAW_WORDS.get(law, law)} of {component}"
    return LAW_WORDS.get(entry, entry)


def ledger_lines(history):
    """Who took what, and what the books leave open."""
    ledger = history.ledger
    rows = [
        [_words(entry), f"{ledger.total(entry):.6g}", f"{100.0 * ledger.share(entry):.2f} %"]
        for entry in ledger.worth_telling("angular_momentum")
    ]
    lines = aligned([f"angular momentum [{MOMENTUM_UNIT}]", "change", "share"], rows)
    flows = [
        [f"{FLOW_WORDS[entry[:-2]]} {entry[-1]}", quantity(ledger.total(entry, "mass"), MASS_UNIT, 5)]
        for entry in ledger.worth_telling("mass")
    ]
    if flows:
        lines += ["", *aligned(["mass", "amount"], flows)]
    residuals = ledger.residuals
    lines.append("")
    lines.append(
        "the ledger closes to "
        + ", ".join(f"{abs(value):.1e} of {name.replace('_', ' ')}" for name, value in residuals.items())
    )
    return lines


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

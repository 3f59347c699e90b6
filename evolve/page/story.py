"""What happened to a pair, in plain sentences with numbers."""

import tomllib

import numpy as np

from evolve.config.units import human
from evolve.constants import HOURS_PER_YEAR
from evolve.figures.axes import NO_TIME
from evolve.history.columns import KIND
from evolve.history.ledger import LAW_WORDS

STARS = {
    "compact": "compact object", "white-dwarf": "white dwarf", "dwarf": "low-mass star",
    "power-law": "star of a power-law radius", "giant": "giant", "main-sequence": "main-sequence star",
    "helium-star": "helium star", "expanding": "expanding star", "track": "star on its own track",
}  # fmt: skip
DRIVERS = {
    "nuclear": "the donor's nuclear evolution", "thermal": "the donor's thermal relaxation",
    "dynamical": "an unstable response of the donor", "angular_momentum": "the orbit's loss of angular momentum",
}  # fmt: skip
TOLD = {
    "common_envelope": "a common envelope formed around {}", "remnant_formed": "{} had lost its envelope: a white dwarf remained",
    "collapse": "{} collapsed", "kick": "{} was kicked", "circularised": "contact at periastron rounded the orbit",
    "unstable_overflow": "the overflow of {} became unstable", "braking_stops": "magnetic braking of {} stopped",
    "spin_orbit_instability": "the pair lost its last synchronous orbit (Darwin instability)",
    "ceiling_reached": "{} reached the most it accepts", "unbound": "the pair came apart",
}  # fmt: skip
"""Events worth a sentence of their own."""


def story(history):
    """The sentences that tell a history.

    Parameters
    ----------
    history : evolve.history.History

    Returns
    -------
    list of str
        Plain text, each a sentence with numbers and units.
    """
    found = [_start(history), _first_contact(history)]
    found += [_transfer(history, donor, first, last) for donor, first, last in transfers(history)]
    found += [_turns(history), _books(history), _shortest(history), _end(history), _observed(history)]
    return [sentence for sentence in found if sentence]


def time(value, digits=4, none="the start"):
    """A time since the start in words; a step to the next float is none."""
    return human(value, "time", digits) if value > NO_TIME else none


def period(history, row):
    """The period in a row, in words."""
    return human(history["period"][row] / HOURS_PER_YEAR, "time", 4)


def mass(value):
    """A mass in words."""
    return human(value, "mass", 4)


def _kind(history, c):
    """What component c is, by the config; "star" where that does not tell."""
    try:
        section = tomllib.loads(history.config_text)[c]
    except (tomllib.TOMLDecodeError, KeyError):
        return "star"
    if section.get("star") == "compact":
        return str(section.get("kind", "compact object")).replace("-", " ")
    return STARS.get(section.get("star"), "star")


def _start(history):
    parts = [f"a {_kind(history, c)} {c} of {mass(history[f'mass_{c}'][0])}" for c in "AB"]
    orbit = f"an orbit of {period(history, 0)}, {human(history['separation'][0], 'length', 4)} apart"
    if "eccentricity" in history.columns:
        orbit += f", with an eccentricity of {history['eccentricity'][0]:.4g}"
    whole = f"{parts[0]} and {parts[1]} start in {orbit}."
    return whole[0].upper() + whole[1:]


def _first_contact(history):
    contact = next((event for event in history.events if event.name == "contact"), None)
    if contact is None:
        over = time(history["time"][-1])
        return f"Neither star fills its Roche lobe in the {over} that follow; {_leaders(history, 0)}"
    if contact.time <= NO_TIME:
        return f"{contact.component} fills its Roche lobe from the start."
    chapter = history.chapters[0]
    return (
        f"After {time(contact.time)}, at a period of {period(history, contact.row)}, {contact.component} "
        f"fills its Roche lobe; until then {_leaders(history, 0) if chapter.regime == 'detached' else ''}"
    )


def _leaders(history, chapter):
    """Which law changed the orbit most in one chapter."""
    books = {n: float(v[chapter]) for n, v in history.ledger.angular_momentum.items()}
    whole = sum(abs(value) for value in books.values())
    if whole == 0.0:
        return "no law changed the orbit's angular momentum."
    name, value = max(books.items(), key=lambda entry: abs(entry[1]))
    change = "took" if value < 0.0 else "brought"
    of = f" ({name[-1]})" if name[-2:] in ("_A", "_B") else ""
    return (
        f"{LAW_WORDS.get(law_of(name), name)}{of} {change} {abs(value) / whole:.0%} of the angular momentum "
        "that the orbit lost or gained."
    )


def law_of(entry):
    """The law of a ledger's entry, without the component."""
    return entry[:-2] if entry[-2:] in ("_A", "_B") else entry


def transfers(history):
    """(donor, first row, last row) of every overflow; chapters that follow each other are one."""
    found = []
    for chapter in history.chapters:
        donor = chapter.regime[-1] if "overflow" in chapter.regime else ""
        if donor and found and found[-1][0] == donor and found[-1][2] + 1 == chapter.first_row:
            found[-1] = (donor, found[-1][1], chapter.last_row)
        elif donor:
            found.append((donor, chapter.first_row, chapter.last_row))
    return found


def _transfer(history, donor, first, last):
    rows, times = slice(first, last + 1), history["time"]
    lost, other = history[f"mass_{donor}"][rows], "B" if donor == "A" else "A"
    gained = history[f"mass_{other}"][last] - history[f"mass_{other}"][first]
    words = (
        f"From {time(times[first])} to {time(times[last])} {donor} passes matter on: "
        f"its mass goes from {mass(lost[0])} to {mass(lost[-1])}"
    )
    if gained > 1e-3 * (lost[0] - lost[-1]):
        words += f", {other} gains {mass(gained)}"
    overflow = history.columns.get(f"overflow_{donor}")
    if overflow is not None:
        words += f"; at most {overflow[rows].max():.3g} Msun/yr flow"
    driver = _driver(history, rows)
    return words + (f", driven by {driver}." if driver else ".")


def _driver(history, rows):
    """What drives an overflow for the largest part of the mass that it moves."""
    kinds, flow = history.columns.get("overflow_kind"), 0.0
    if kinds is None:
        return ""
    for c in "AB":
        flow = flow + history.columns.get(f"overflow_{c}", np.zeros(len(kinds)))
    moved = np.gradient(history["time"][rows]) * flow[rows] if len(kinds[rows]) > 1 else flow[rows]
    weights = {code: float(moved[kinds[rows] == code].sum()) for code in KIND if code}
    code = max(weights, key=weights.get)
    return DRIVERS[KIND[code]] if weights[code] > 0.0 else ""


def _turns(history):
    told = [
        f"{TOLD[event.name].format(event.component)} at {time(event.time)}"
        for event in history.events
        if event.name in TOLD
    ]
    if not told:
        return ""
    more = f", and {len(told) - 8} more such events" if len(told) > 8 else ""
    whole = "; ".join(told[:8]) + more + "."
    return whole[0].upper() + whole[1:]


def _books(history):
    """Who took the orbit's angular momentum in all."""
    totals = {}
    for name, values in history.ledger.angular_momentum.items():
        totals[law_of(name)] = totals.get(law_of(name), 0.0) + float(values.sum())
    whole = sum(totals.values())
    shares = sorted(((n, v / whole) for n, v in totals.items() if whole and v), key=lambda s: -abs(s[1]))
    if not shares or len(history.chapters) < 2:
        return ""
    listed = ", ".join(f"{LAW_WORDS.get(name, name)} {share:.1%}" for name, share in shares)
    return f"Of the whole change of the orbit's angular momentum, by law: {listed}."


def _shortest(history):
    row = int(np.argmin(history["period"]))
    if row in (0, len(history) - 1):
        return ""
    return f"The shortest period is {period(history, row)}, at {time(history['time'][row])}."


def _end(history):
    return f"{history.message} The history ends after {time(history['time'][-1])}."


def _observed(history):
    """What an observer would see at the end."""
    last = len(history) - 1
    words = [f"a period of {period(history, last)}", f"changing by {history['period_derivative'][last]:.3g} s/s"]
    words += [f"masses of {mass(history['mass_A'][last])} (A) and {mass(history['mass_B'][last])} (B)"]
    if "eccentricity" in history.columns:
        words.append(f"an eccentricity of {history['eccentricity'][last]:.3g}")
    for name, form in (
        ("K_A", "A moving at {:.4g} km/s"), ("K_B", "B moving at {:.4g} km/s"),
        ("wave_frequency", "gravitational waves at {:.3g} Hz"), ("wave_strain", "a strain of {:.2g}"),
    ):  # fmt: skip
        if name in history.columns and np.isfinite(history[name][last]):
            words.append(form.format(history[name][last]))
    seen = "At the end an observer would find " + ", ".join(words) + "."
    return seen + _disc(history, last)


def _disc(history, last):
    critical = history.columns.get("disc_critical_rate")
    donor = int(history["donor"][last]) if "donor" in history.columns else 0
    if critical is None or not donor or not np.isfinite(critical[last]):
        return ""
    rate = history[f"overflow_{'AB'[donor - 1]}"][last]
    state = "steady" if rate > critical[last] else "prone to outbursts"
    return (
        f" The disc would be {state}: {rate:.2g} Msun/yr flows, and it is steady above "
        f"{critical[last]:.2g} Msun/yr."
    )

"""When a pair reaches contact, which component, and what brought it there."""

from typing import NamedTuple

import numpy as np

from evolve.constants import HOURS_PER_YEAR
from evolve.integrate import integrate
from evolve.studies.draws import distribution

STATE = ("period", "separation", "eccentricity", "mass_A", "mass_B", "radius_A", "radius_B",
         "mass_ratio", "overflow_A", "overflow_B")  # fmt: skip

FINEST = 1e-13
"""No tolerance below this is asked for: it would be rounding."""


class Contact(NamedTuple):
    """The answer of `contact`.

    reached         whether a component fills its lobe within the span
    time            [yr] of contact; NaN if there is none
    time_error      [yr]: how much the time moves when the tolerance is made a tenth
    component       "A", "B" or ""
    shares          law -> share of the way to contact: of the shrinking lobe, by its part of
                    the angular momentum lost; "growth" for the star's own. They sum to one.
    state           column -> value at contact, or at the nearest approach
    nearest_fill    largest R/R_L reached
    nearest_time    [yr] when
    needed_period   [yr] the longest starting period that reaches contact within the span, all
                    else alike; NaN where the pair reaches it, or where none does
    outcome         how the history ended
    history         the history up to contact
    """

    reached: bool
    time: float
    time_error: float
    component: str
    shares: dict
    state: dict
    nearest_fill: float
    nearest_time: float
    needed_period: float
    outcome: str
    history: object


def contact(config, progress=None, search=True):
    """Time to contact of one pair.

    Parameters
    ----------
    config : evolve.config.Config
        Its end.time is the span searched.
    progress : callable, optional
        As of `evolve.integrate.integrate`.
    search : bool
        Whether to estimate the error of the time and, without contact, the period needed:
        further histories.

    Returns
    -------
    Contact
    """
    history = integrate(_to_contact(config), progress)
    event = next((e for e in history.events if e.name == "contact"), None)
    if event is None:
        return _no_contact(config, history, search)
    error = float("nan")
    if search:
        finer = max(config.values["numerics"]["rtol"] * 0.1, FINEST)
        again = integrate(_to_contact(config.with_values({"numerics.rtol": finer})))
        error = abs(_contact_time(again) - event.time)
    return Contact(
        True, event.time, error, event.component, shares_of(history, event), _state(history, event.row),
        1.0, event.time, float("nan"), history.outcome, history,
    )  # fmt: skip


def _to_contact(config):
    return config.with_values({"end.event": "contact"})


def _contact_time(history):
    return next((e.time for e in history.events if e.name == "contact"), float("nan"))


def _state(history, row):
    return {name: float(history[name][row]) for name in STATE if name in history.columns}


def shares_of(history, event):
    """Share of each law, and of the star's growth, in a component's way to contact.

    Parameters
    ----------
    history : evolve.history.History
        From its start to the contact.
    event : Event
        The contact.

    Returns
    -------
    dict of float
        Sums to one. With ln(R/R_L) = ln R - ln R_L, growth takes the change of ln R over
        that of ln(R/R_L); what is left, the shrinking of the lobe, is divided by each law's
        part of the orbit's angular-momentum loss (and, where only masses changed it, named
        "mass_changes").
    """
    row, c = event.row, event.component
    grown = np.log(history[f"radius_{c}"][row] / history[f"radius_{c}"][0])
    shrunk = -np.log(history[f"lobe_{c}"][row] / history[f"lobe_{c}"][0])
    total = grown + shrunk
    if total == 0.0:
        return {}
    lost = {}
    for entry, changes in history.ledger.angular_momentum.items():
        change = float(np.sum(changes))
        if change != 0.0:
            lost[entry] = change
    shares = {"growth": float(grown / total)} if grown else {}
    if not lost:
        return {**shares, "mass_changes": float(shrunk / total)} if shrunk else shares
    for entry, change in lost.items():
        shares[entry] = float(shrunk / total) * change / sum(lost.values())
    return shares


def _no_contact(config, history, search):
    fills = np.fmax(history["fill_A"], history["fill_B"])
    row = int(np.nanargmax(fills))
    c = "A" if history["fill_A"][row] >= history["fill_B"][row] else "B"
    needed = _needed_period(config, history) if search else float("nan")
    return Contact(
        False, float("nan"), float("nan"), c, {}, _state(history, row), float(fills[row]),
        float(history["time"][row]), needed, history.outcome, history,
    )  # fmt: skip


def _needed_period(config, history):
    """Longest starting period that reaches contact within the span, to 0.1 %, by bisection."""

    def reaches(period):
        changed = config.with_values({"orbit.period": f"{float(period)!r} yr"})
        return bool(np.isfinite(_contact_time(integrate(_to_contact(changed)))))

    start = history["period"][0] / HOURS_PER_YEAR
    fill = max(history["fill_A"][0], history["fill_B"][0])
    if not fill > 0.0:
        return float("nan")
    low, high = start * (fill / 0.999) ** 1.5, start
    if not reaches(low):
        return float("nan")
    while high / low > 1.001:
        middle = (low * high) ** 0.5
        low, high = (middle, high) if reaches(middle) else (low, middle)
    return low


def contact_distribution(configs, progress=None):
    """What drawn pairs say of the contact.

    Parameters
    ----------
    configs : iterable of Config
        One a draw.
    progress : callable, optional
        Called with the number of pairs done.

    Returns
    -------
    dict of Distribution
        time [yr], period [h], mass_A, mass_B [solMass] at contact. A draw without contact
        counts as missing.
    """
    answers = []
    for number, config in enumerate(configs, 1):
        answer = contact(config, search=False)
        state = answer.state if answer.reached else {}
        answers.append({"time": answer.time} | {
            name: state.get(name, float("nan")) for name in ("period", "mass_A", "mass_B")
        })  # fmt: skip
        if progress:
            progress(number)
    return {
        name: distribution([answer[name] for answer in answers])
        for name in ("time", "period", "mass_A", "mass_B")
    }

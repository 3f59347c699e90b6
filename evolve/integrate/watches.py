"""What ends a stretch or is noted on the way: event functions of the pair's quantities.

Every watch is a pure function of (time, quantities). One that `starts_chapter` or `ends`
is terminal; the others are noted with their state and the integration goes on.
"""

from math import log
from typing import Callable, NamedTuple

from evolve.constants import G

CONTACT_MARGIN = 1e-9
"""Contact and detachment lie this far apart (in ln R, or ln of the rate): neither may start
at its own zero, where the root of the other has just been found to a rounding error."""
WAKE, SLEEP = -30.0, -32.0
"""(R - R_L)/H at which the atmosphere's flow joins and leaves the equations."""
RUNAWAY_FILL = 1.1
RUNAWAY_DYNAMICAL_TIMES = 100.0
TINY = 1e-300


class Watch(NamedTuple):
    """One event: its name, the component, g(time, quantities), the direction of its zero.

    `terminal`: ends the stretch. `at_once`: when already past at the start of a stretch it
    fires there. `end`: the history ends with this outcome.
    """

    name: str
    component: str
    g: Callable
    direction: int
    terminal: bool = True
    at_once: bool = True
    end: str = ""


def watches_for(run):
    """The watches of the stretch that is about to start.

    Parameters
    ----------
    run : evolve.integrate.run.Run

    Returns
    -------
    list of Watch
        In order of precedence.
    """
    found = []
    for c in "AB":
        found += _lobe_watches(run, c)
        found += _braking_watches(run, c)
        found += _mass_watches(run, c)
    if not any(run.pair.models[c].overflows for c in "AB"):
        found.append(_merger_watch(run))
    found += _end_watches(run) + _noted(run)
    asked = run.end["event"]
    return [watch._replace(terminal=True) if watch.name == asked else watch for watch in found]


def _lobe_watches(run, c):
    if not run.pair.models[c].overflows:
        return []
    law = run.pair.plan.overflow
    flow, contact = run.flow(c), run.in_contact[c]
    fill_radius, lobe = run.slot(f"radius_{c}"), run.slot(f"lobe_{c}")
    excess, overflow = run.slot(f"excess_{c}"), run.slot(f"overflow_{c}")
    threshold = run.contact_rate

    def by_rate(t, q):
        return log(max(q[overflow], TINY) / threshold)

    def by_radius(t, q):
        return log(q[fill_radius] / q[lobe]) - CONTACT_MARGIN

    if law in ("polytrope", "locked"):
        if not contact:
            return [Watch("contact", c, by_radius, +1)]
        if law == "locked":
            drive = run.slot(f"drive_{c}")
            return [
                Watch("detachment", c, lambda t, q: q[drive], -1),
                _unstable(run, c, terminal=True),
            ]
        gone = Watch("detachment", c, lambda t, q: by_radius(t, q) + CONTACT_MARGIN, -1)
        return [gone, _unstable(run, c), _runaway(run, c)]
    if law == "atmosphere" and not flow:
        return [Watch("wake", c, lambda t, q: q[excess] - WAKE, +1)]
    if not contact:
        found = [Watch("contact", c, by_rate, +1)]
        if law == "atmosphere":
            found.append(Watch("sleep", c, lambda t, q: q[excess] - SLEEP, -1))
        return found
    gone = Watch("detachment", c, lambda t, q: by_rate(t, q) + CONTACT_MARGIN, -1)
    return [gone, _unstable(run, c), _runaway(run, c)]


def _unstable(run, c, terminal=False):
    zeta, zeta_lobe = run.slot(f"zeta_{c}"), run.slot(f"zeta_lobe_{c}")
    end = "unstable_overflow" if terminal else ""
    return Watch(
        "unstable_overflow", c, lambda t, q: q[zeta] - q[zeta_lobe], -1, terminal, terminal, end
    )


def _runaway(run, c):
    """R > 1.1 R_L, or a donor that empties itself within a hundred dynamical times."""
    mass, radius, lobe = run.slot(f"mass_{c}"), run.slot(f"radius_{c}"), run.slot(f"lobe_{c}")
    overflow = run.slot(f"overflow_{c}")

    def g(t, q):
        m, r = q[mass], q[radius]
        shortest = RUNAWAY_DYNAMICAL_TIMES * (r**3 / (G * m)) ** 0.5
        return max(log(r / q[lobe] / RUNAWAY_FILL), log(max(q[overflow], TINY) * shortest / m))

    return Watch("runaway", c, g, +1, end="unstable_overflow")


def _braking_watches(run, c):
    if run.pair.laws.braking[c] is None:
        return []
    mass, stops = run.slot(f"mass_{c}"), run.pair.stops_below[c]
    if run.braking(c):
        return [Watch("braking_stops", c, lambda t, q: q[mass] - stops, -1)]
    # A margin: the chapter after the stop starts with the mass exactly at the limit.
    return [Watch("braking_resumes", c, lambda t, q: q[mass] / stops - 1.0 - 1e-9, +1)]


def _mass_watches(run, c):
    low, high = run.pair.models[c].mass_range
    mass = run.slot(f"mass_{c}")
    return [
        Watch("validity", c, lambda t, q: q[mass] / low - 1.0, -1, end="validity"),
        Watch("validity", c, lambda t, q: q[mass] / high - 1.0, +1, end="validity"),
    ]


def _merger_watch(run):
    """A neutron star or a black hole that fills its lobe merges; point masses at 6GM/c2."""
    smallest = run.pair.smallest_separation()

    def g(t, q):
        periastron = q.separation * (1.0 - q.eccentricity)
        return max(q.radius_A / q.lobe_A, q.radius_B / q.lobe_B, smallest / periastron) - 1.0

    return Watch("merger", "", g, +1, end="merger")


def _end_watches(run):
    end, found = run.end, []
    log_period = run.log_period
    for c in "AB":
        if limit := end[c]["mass_below"]:
            mass = run.slot(f"mass_{c}")
            found.append(
                Watch("end", c, lambda t, q, m=mass, x=limit: q[m] / x - 1.0, -1, end="mass_below")
            )
    if limit := end["period_below"]:
        found.append(
            Watch("end", "", lambda t, q, x=log(limit): log_period(q) - x, -1, end="period_below")
        )
    if limit := end["period_above"]:
        found.append(
            Watch("end", "", lambda t, q, x=log(limit): log_period(q) - x, +1, end="period_above")
        )
    if limit := end["rate_below"]:
        for c in "AB":
            if run.in_contact[c]:
                rate = run.slot(f"overflow_{c}")
                found.append(
                    Watch(
                        "end", c, lambda t, q, r=rate, x=limit: log(max(q[r], TINY) / x), -1,
                        at_once=False, end="rate_below",
                    )  # fmt: skip
                )
    if run.inspiral:
        found.append(Watch("end", "", lambda t, q: t / end["time"] - 1.0, +1, end="time"))
    return found


def _noted(run):
    """Events that change nothing in the equations."""
    if run.inspiral:
        return []
    found = [
        Watch("period_minimum", "", period_rate, +1, terminal=False),
        Watch("period_maximum", "", period_rate, -1, terminal=False),
    ]
    if any(run.pair.models[c].overflows for c in "AB") or any(run.pair.laws.wind.values()):
        found.append(
            Watch("masses_equal", "", lambda t, q: log(q.mass_A / q.mass_B), 0, terminal=False)
        )
    return found


def period_rate(t, q):
    """d ln P / dt [1/yr]."""
    total = q.mass_A + q.mass_B
    return 1.5 * q.separation_rate - 0.5 * (q.mass_rate_A + q.mass_rate_B) / total


__all__ = ["Watch", "period_rate", "watches_for"]

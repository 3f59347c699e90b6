"""What is watched in a stretch: gauges of the pair crossing levels.

A watch that is terminal ends the stretch; the others are noted with their state and the
integration goes on.
"""

from math import log
from typing import NamedTuple

from evolve.laws.acceptance import EDGE
from evolve.stars.giant import THINNEST

CONTACT_MARGIN = 1e-9
"""Contact and detachment lie this far apart (in ln R, or ln of the rate): neither may start
at its own zero, where the root of the other has just been found to a rounding error."""
PHASE_ENDS = {
    "burnt": ("burning_ends", "validity"),
    "core": ("validity", "validity"),
    "age": ("table_end", "table_end"),
}
"""Clock of a star's model -> the event at its end, and how the history ends there."""
THERMAL = (
    ("thermal_overflow_begins", log(0.95), -1),
    ("thermal_overflow_ends", log(0.97), +1),
)
"""Overflow counts as thermal while the donor is so much smaller than its equilibrium radius:
its relaxation, not its evolution, then drives the transfer."""
STABLE_MARGIN = 1e-5
"""zeta_star - zeta_lobe at which a locked overflow counts as unstable: its rate grows as the
inverse of it, and no step reaches 0."""
CEILING_MARGIN = 1e-3
"""A ceiling counts as reached this far below it, and as left three times as far."""
ROUND = 1e-4
"""An eccentricity that falls below this is none from there on."""
WAKE, SLEEP = -30.0, -32.0
"""(R - R_L)/H at which the atmosphere's flow joins and leaves the equations."""


class Watch(NamedTuple):
    """One event: a gauge crossing a level, upward (+1), downward (-1) or either way (0).

    `terminal`: ends the stretch. `at_once`: when already past at the start of a stretch it
    fires there. `end`: the history ends with this outcome.
    """

    name: str
    component: str
    gauge: int
    level: float
    direction: int
    terminal: bool = True
    at_once: bool = True
    end: str = ""


def watches_for(run):
    """The watches of the stretch that is about to start, in order of precedence.

    Parameters
    ----------
    run : evolve.integrate.run.Run

    Returns
    -------
    list of Watch
    """
    names, watch, found = run.pair.layout.gauges, watch_maker(run), []
    for c in "AB":
        if run.pair.models[c].overflows:
            found += _lobe_watches(run, c, watch)
        found += _braking_watches(run, c, watch)
        found += _life_watches(run, c, watch)
        low, high = run.pair.mass_range(c)
        found.append(watch("validity", c, f"mass_{c}", log(low), -1, end="validity"))
        found.append(watch("validity", c, f"mass_{c}", log(high), +1, end="validity"))
    found.append(watch("merger", "", "merger", -CONTACT_MARGIN, +1, end="merger"))
    if "eccentricity" in names and not run.inspiral:
        level = log(ROUND)
        found.append(watch("circularised", "", "eccentricity", level, -1, at_once=False))
    found += _end_watches(run, watch) + noted(run)
    asked = run.end["event"]
    return [entry._replace(terminal=True) if entry.name == asked else entry for entry in found]


def watch_maker(run):
    """Makes a Watch of a gauge's name."""
    names = run.pair.layout.gauges

    def watch(name, component, gauge, level, direction, **more):
        return Watch(name, component, names.index(gauge), level, direction, **more)

    return watch


def _lobe_watches(run, c, watch):
    law, threshold = run.pair.plan.overflow, log(run.contact_rate)
    if not run.in_contact[c]:
        if law in ("polytrope", "locked"):
            return [watch("contact", c, f"fill_{c}", CONTACT_MARGIN, +1)]
        if law == "atmosphere" and not run.flow(c):
            return [watch("wake", c, f"excess_{c}", WAKE, +1)]
        found = [watch("contact", c, f"rate_{c}", threshold, +1)]
        if law == "atmosphere":
            found.append(watch("sleep", c, f"excess_{c}", SLEEP, -1))
        return found
    if law == "locked":  # nothing can be imposed on an unstable donor: it always ends
        end = "unstable_overflow"
        return [
            watch("detachment", c, f"drive_{c}", 0.0, -1),
            watch("unstable_overflow", c, f"stability_{c}", STABLE_MARGIN, -1, end=end),
            watch("runaway", c, f"runaway_{c}", 0.0, +1, end=end),
        ]
    gone = watch("detachment", c, f"rate_{c}", threshold - CONTACT_MARGIN, -1)
    if law == "polytrope":
        gone = watch("detachment", c, f"fill_{c}", -CONTACT_MARGIN, -1)
    found = [
        gone,
        watch("unstable_overflow", c, f"stability_{c}", 0.0, -1, terminal=False, at_once=False),
    ]
    if c not in run.ignored:
        found.append(watch("runaway", c, f"runaway_{c}", 0.0, +1, end="unstable_overflow"))
    return found


def _braking_watches(run, c, watch):
    if run.pair.laws.braking[c] is None or run.pair.stops_below[c] <= 0.0:
        return []
    level = log(run.pair.stops_below[c])
    if run.braking(c):
        return [watch("braking_stops", c, f"mass_{c}", level, -1)]
    # A margin: the chapter after the stop starts with the mass exactly at the limit.
    return [watch("braking_resumes", c, f"mass_{c}", level + 1e-9, +1)]


def _life_watches(run, c, watch):
    """Where a star's own clock ends, and where it becomes something else."""
    found, model = [], run.pair.models[c]
    keys, limits = run.pair.star_keys[c], run.pair.config.values["limits"]
    if run.pair.laws.braking[c] and model.phase:  # braking jumps with the envelope
        found.append(watch("envelope_changes", c, f"convective_{c}", 0.5, 0, at_once=False))
    if model.phase and hasattr(keys, "phase_high"):
        name, end = PHASE_ENDS[model.phase]
        found.append(watch(name, c, f"phase_{c}", keys.phase_high, +1, end=end))
    kick = run.pair.config.values["kick"][c]["time"]
    if kick and c not in run.kicked:
        found.append(watch("kick", c, "time", kick, +1))
    if f"envelope_{c}" in run.pair.layout.gauges:
        always = model.phase == "core"  # a track may be that of a bare core from the start
        found.append(
            watch("envelope_exhausted", c, f"envelope_{c}", THINNEST, -1, at_once=always)
        )
    kind = run.pair.config.values[c].get("kind")
    limit = {"neutron-star": "neutron_star"}.get(kind)
    if model.kind == "white-dwarf":
        limit = "white_dwarf"
    if limit:
        found.append(watch("collapse", c, f"mass_{c}", log(limits[limit]), +1))
    return found


def _end_watches(run, watch):
    end, found = run.end, []
    for c in "AB":
        if limit := end[c]["mass_below"]:
            found.append(watch("end", c, f"mass_{c}", log(limit), -1, end="mass_below"))
        if end["rate_below"] and run.in_contact[c]:
            level = log(end["rate_below"])
            found.append(
                watch("end", c, f"rate_{c}", level, -1, at_once=False, end="rate_below")
            )
    for name, direction in (("period_below", -1), ("period_above", +1)):
        if limit := end[name]:
            found.append(watch("end", "", "log_period", log(limit), direction, end=name))
    if run.inspiral:
        found.append(watch("end", "", "time", end["time"], +1, end="time"))
    return found


def noted(run):
    """Events that change nothing in the equations: a list of Watch."""
    if run.inspiral:
        return []
    watch = watch_maker(run)
    found = [
        watch("period_minimum", "", "period_rate", 0.0, +1, terminal=False),
        watch("period_maximum", "", "period_rate", 0.0, -1, terminal=False),
    ]
    for c in "AB":
        if run.in_contact[c] and run.pair.models[c].relaxing:
            for name, level, direction in THERMAL:
                found.append(watch(name, c, f"lag_{c}", level, direction, terminal=False))
        if f"ceiling_{c}" in run.pair.layout.gauges:
            for name, direction in (("ceiling_reached", +1), ("ceiling_left", -1)):
                level = log(1.0 - CEILING_MARGIN * (2 - direction))
                found.append(watch(name, c, f"ceiling_{c}", level, direction, terminal=False))
        if f"burning_{c}" in run.pair.layout.gauges:
            for name, direction in (("burning_begins", +1), ("burning_ends", -1)):
                level = direction * EDGE  # the ends of the edge, across which ever more is kept
                found.append(watch(name, c, f"burning_{c}", level, direction, terminal=False))
    if any(run.pair.models[c].overflows for c in "AB") or any(run.pair.laws.wind.values()):
        found.append(watch("masses_equal", "", "mass_ratio", 0.0, 0, terminal=False))
    if "darwin" in run.pair.layout.gauges:
        found.append(watch("spin_orbit_instability", "", "darwin", 0.0, +1, terminal=False))
    return found

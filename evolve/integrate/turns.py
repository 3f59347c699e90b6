"""Turns of a history: what each terminal event does to the pair and to what holds from then on."""

from dataclasses import replace
from math import log
from typing import NamedTuple

import numpy as np

from evolve.integrate.changes import collapse, common_envelope, remnant, sudden_loss
from evolve.integrate.watches import WAKE
from evolve.system.gauges import RUNAWAY_FILL
from evolve.system.layout import OTHER
from evolve.system.pair import OVERFILL, Pair

DETAILS = {
    "burning_ends": "the main sequence of {} is over",
    "validity": "the mass or the core mass of {} leaves its range",
    "table_end": "the last row of the table of {}",
}
"""What more there is to say of an end than its name does."""


class Act(NamedTuple):
    """From this row on the pair is this one: a star has become something else.

    `speed` is what a sudden loss or a kick then gave the pair's centre of mass [solRad/yr].
    """

    row: int
    pair: object
    speed: float = 0.0


class Turns:
    """The part of `evolve.integrate.run.Run` that answers events, by `_on_` and their name."""

    def _act(self, watch, row, residual):
        """What a terminal event does to the history."""
        c = watch.component
        if watch.name in ("wake", "sleep"):
            self._switch(f"flow_{c}", watch.name == "wake")
            return
        if watch.name == "envelope_changes":
            return  # the equations jump here: a fresh start, and nothing else
        if watch.name == "runaway":
            if not self._already("unstable_overflow", c):
                self._mark("unstable_overflow", c, row)
            return self._unstable(c)
        if watch.name != "end":
            self._mark(watch.name, c, row, residual)
        if watch.end == "unstable_overflow":
            return self._unstable(c)
        if watch.end:
            return self._finish(watch.end, DETAILS.get(watch.name, "").format(c))
        if act := getattr(self, f"_on_{watch.name}", None):
            act(c)
            self.opening_event = self.opening_event or watch.name
        return None

    def _on_contact(self, c):
        if self.in_contact[OTHER[c]]:
            self._mark("both_lobes_filled", "", len(self.recorder) - 1)
            return self._finish("both_lobes_filled")
        quantities = self.now()
        if quantities.eccentricity > 0.0:
            return self._circularise()
        self.in_contact[c] = True
        self._switch(f"flow_{c}", True)
        quantities = self.now()
        if self.law == "locked" and self._overfilled(c, quantities):
            self._mark("unstable_overflow", c, len(self.recorder) - 1)
            return self._unstable(c)
        if self.law == "locked":
            self._set(f"ln_radius_{c}", log(getattr(quantities, f"lobe_{c}")))
        elif getattr(quantities, f"zeta_{c}") <= getattr(quantities, f"zeta_lobe_{c}"):
            self._mark("unstable_overflow", c, len(self.recorder) - 1)
        return None

    def _overfilled(self, c, quantities):
        """True if a sudden change has left a star too large for R = R_L to be imposed on it."""
        most = RUNAWAY_FILL if self.pair.models[c].relaxing else 1.0 + OVERFILL
        ratio = getattr(quantities, f"radius_{c}") / getattr(quantities, f"lobe_{c}")
        return ratio > most

    def _circularise(self):
        """Contact at periastron rounds the orbit at constant J; its lobes then have grown.

        The star is detached again, and a second contact may follow.
        """
        self._mark("circularised", "", len(self.recorder) - 1)
        self._set("eccentricity_state", 0.0)
        quantities = self.now()
        for c in "AB":
            if self.law == "atmosphere" and self.pair.models[c].overflows:
                self._switch(f"flow_{c}", getattr(quantities, f"excess_{c}") > WAKE)

    def _on_circularised(self, c):
        self._set("eccentricity_state", 0.0)

    def _on_detachment(self, c):
        self.in_contact[c] = False
        if self.law in ("polytrope", "locked"):
            self._switch(f"flow_{c}", False)

    def _on_braking_stops(self, c):
        self._set(f"mass_{c}", self.pair.stops_below[c])
        self._switch(f"braking_{c}", False)

    def _on_braking_resumes(self, c):
        self._switch(f"braking_{c}", True)

    # A star becomes something else ------------------------------------------------------------

    def _on_envelope_exhausted(self, c):
        self._mark("remnant_formed", c, len(self.recorder) - 1)
        self._become(c, remnant(self.pair.config.values[c], c, self.now()))

    def _on_collapse(self, c):
        values = self.pair.config.values
        kick = {**values["kick"][c], "speed": 0.0} if values["kick"][c]["time"] else values["kick"][c]
        self._sudden(c, collapse(values[c], c, self.now(), kick))

    def _on_kick(self, c):
        self.kicked.add(c)
        values, quantities = self.pair.config.values, self.now()
        if values["kick"][c]["mass_lost"] >= getattr(quantities, f"mass_{c}"):
            return self._finish("failed", f"{c} has no such mass to lose")
        after = sudden_loss(values[c], c, quantities, values["kick"][c])
        return self._sudden(c, after, (c,))

    def _sudden(self, c, after, kept=()):
        if not after.bound:
            self._mark("unbound", "", len(self.recorder) - 1)
            return self._finish("unbound", after.parting(getattr(self.now(), f"mass_{OTHER[c]}")))
        return self._become(c, after, kept)

    def _unstable(self, c):
        """Unstable overflow: the history stops, goes on, or goes through a common envelope."""
        envelope = self.pair.config.values["envelope"]
        if envelope["follows"] == "stop" or (
            envelope["follows"] == "continue" and self.law == "locked"
        ):  # R = R_L cannot be imposed on an unstable donor
            return self._finish("unstable_overflow")
        if envelope["follows"] == "continue":
            self.ignored.add(c)
            return None
        self._mark("common_envelope", c, len(self.recorder) - 1)
        quantities = self.now()
        after = common_envelope(
            self.pair.config.values[c], c, quantities, envelope["efficiency"],
            envelope["binding"], getattr(quantities, f"radius_{OTHER[c]}"),
        )  # fmt: skip
        if after is None:
            self._mark("merger", "", len(self.recorder) - 1)
            return self._finish("merger")
        self._mark("remnant_formed", c, len(self.recorder) - 1)
        self._become(c, after)
        self.opening_event = self.opening_event or "common_envelope"
        return None

    def _become(self, c, after, kept=()):
        """Go on with the pair in which component c is what it has become.

        `kept` names c where it is the same star still, with its radius and its clock.
        """
        other, old = OTHER[c], dict(zip(self.pair.layout.core, self.state, strict=False))
        values = dict(self.pair.config.values)
        values[c] = after.values
        values[other] = {**values[other], "mass": old[f"mass_{other}"]}
        values["orbit"] = {
            "separation": after.separation, "eccentricity": after.eccentricity,
            "period": None, "fill": None,
        }  # fmt: skip
        config = replace(self.pair.config, values=values)
        self.pair = Pair(config, {s: self.pair.star_keys[s] for s in (other, *kept)}, old)
        self.engine = None
        self.acts.append(Act(len(self.recorder), self.pair, after.speed))
        self.switches = self.pair.first_switches()
        self.in_contact = {"A": False, "B": False}
        self.inspiral = self._inspirals()
        self.state = np.array(self.pair.start + [0.0] * len(self.pair.layout.ledger))
        self.ignored = set()
        self._wake()

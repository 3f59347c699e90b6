"""Chapter after chapter from the start of a history to its end."""

from typing import NamedTuple

import numpy as np

from evolve.errors import ConfigError
from evolve.integrate.course import Course
from evolve.integrate.outcomes import sentence
from evolve.integrate.recorder import Recorder
from evolve.integrate.stretch import InspiralStretch, TimeStretch
from evolve.integrate.turns import Act, Turns
from evolve.integrate.watches import CONTACT_MARGIN, WAKE, noted, watches_for

CHATTER = 25
"""So many events in a row without time passing between them are a fault, not a history."""


class Mark(NamedTuple):
    """An event: the row that holds it, and what was left of the event function there."""

    name: str
    component: str
    row: int
    residual: float


class Opening(NamedTuple):
    """The first row of a chapter, the regime that starts there, the event that opened it."""

    row: int
    regime: str
    event: str


class Run(Turns):
    """The state of one history on its way.

    Parameters
    ----------
    pair : evolve.system.pair.Pair
    progress : callable or None
        Called as progress(time, end_time, regime, steps) after every accepted step.
    compiled : bool
        Whether stretches go to the compiled engine, where it can take them.
    """

    def __init__(self, pair, progress=None, compiled=False):
        values = pair.config.values
        self.pair, self.progress = pair, progress
        self.numerics, self.end = values["numerics"], values["end"]
        self.contact_rate = values["overflow"]["contact_rate"]
        self.law = pair.plan.overflow
        self.recorder, self.marks, self.openings = Recorder(), [], []
        self.switches = pair.first_switches()
        self.in_contact = {"A": False, "B": False}
        self.inspiral = self._inspirals()
        self.time = 0.0
        self.state = np.array(pair.start + [0.0] * len(pair.layout.ledger))
        self.outcome, self.message = "", ""
        self.steps = self.evaluations = self.jacobians = self.stretches = 0
        self.idle = 0
        self.opening_event = ""
        self.ignored, self.kicked = set(), set()
        self._asked, self._quantities = (None,) * 4, None
        self.compiled, self.engine, self.warnings = compiled, None, []

    # What watches and chapters ask -----------------------------------------------------

    def flow(self, c):
        """True if component c may lose mass through its lobe in this stretch."""
        return getattr(self.switches, f"flow_{c}")

    def braking(self, c):
        """True if magnetic braking acts on component c in this stretch."""
        return getattr(self.switches, f"braking_{c}")

    @property
    def regime(self):
        """The regime of the chapter, by who is in contact."""
        if self.inspiral:
            return "inspiral"
        return next((f"overflow_{c}" for c in "AB" if self.in_contact[c]), "detached")

    def now(self):
        """The quantities at the present state, computed once."""
        asked = (self.pair, self.time, self.state, self.switches)
        if any(one is not other for one, other in zip(asked, self._asked, strict=True)):
            self._asked = asked
            self._quantities = self.pair.quantities(self.time, self.state.tolist(), self.switches)
        return self._quantities

    def _inspirals(self):
        """True if only waves act and no star can fill its lobe: then -ln a leads."""
        laws, models = self.pair.laws, self.pair.models
        others = [*laws.braking.values(), *laws.wind.values()]
        overflows = any(model.overflows for model in models.values())
        return laws.waves is not None and laws.waves.keys.strength > 0.0 and not (
            any(others) or overflows
        )

    # The loop ---------------------------------------------------------------------------

    def run(self):
        """Integrate to the end. Sets `outcome` and `message`; rows, marks and openings stay.

        Raises
        ------
        ConfigError
            If the equations fail at the start.
        """
        self.acts = [Act(0, self.pair)]
        self._begin()
        self._mark("start")
        self._wake()
        while not self.outcome:
            try:
                self._settle_at_once()
                if self.outcome:
                    break
                if self.opening_event:
                    self._open(self.opening_event)
                self._stretch()
            except KeyboardInterrupt:
                self._finish("interrupted")
            except Exception as error:  # a law, the user's own perhaps, failed: keep what is there
                self._finish("failed", f"{type(error).__name__}: {error}")
        return self

    def _begin(self):
        """The first row; where the equations fail already there is nothing to keep."""
        try:
            self._open("start")
        except Exception as error:  # a law, the user's own perhaps
            raise ConfigError(
                f"{self.pair.config.name}: the equations fail at the start: "
                f"{type(error).__name__}: {error}"
            ) from error

    def _stretch(self):
        kind = InspiralStretch if self.inspiral else TimeStretch
        stretch = kind(self.pair, self.switches, self.time, self.state)
        bound = stretch.bound(self.end["time"])
        if bound <= stretch.start:
            return self._finish("time")
        self.course = self._course(stretch)
        self.stretches += 1
        message = self.course.follow(bound)
        self._close(message)
        return None

    def _course(self, stretch):
        if self.compiled:
            from evolve.integrate.compiled_course import CompiledCourse
            from evolve.integrate.engine import CannotCompile, engine_of

            try:
                self.engine = self.engine or engine_of(self.pair, self.inspiral, self._compiling)
                return CompiledCourse(self, stretch, self.watches, self.engine)
            except CannotCompile as error:
                self.compiled = False
                self.warnings.append(f"the equations run plain, for they do not compile: {error}")
        return Course(self, stretch, self.watches)

    def _compiling(self):
        if self.progress:
            self.progress(self.time, self.end["time"], "compiling the equations", 0)

    def _close(self, message):
        """Take over what a course brought: noted events, its last state, why it stopped."""
        course = self.course
        for watch, row, residual in course.noted:
            self._mark(watch.name, watch.component, row, residual)
        if course.fired:
            watch, row, residual = course.fired
            last = self.recorder[row]
            self.time, self.state = last.time, last.state
            self.idle = self.idle + 1 if row == course.first_row else 0
            self._act(watch, row, residual)
        elif course.halt:
            self._finish(course.halt.outcome, course.halt.message)
        elif message:
            self._finish("failed", message)
        else:
            self.time, self.state = self.recorder[-1].time, self.recorder[-1].state
            self._finish("merger" if self.inspiral else "time")

    def _settle_at_once(self):
        """Events that are past already where a stretch starts happen there."""
        while not self.outcome:
            if self.idle > CHATTER:
                return self._finish("failed", "events follow each other without time passing")
            readings = self.pair.gauges(self.now())
            self.watches = watches_for(self)
            past = next(
                (
                    watch
                    for watch in self.watches
                    if watch.terminal and watch.at_once
                    and watch.direction * (readings[watch.gauge] - watch.level) > 0.0
                ),
                None,
            )  # fmt: skip
            if past is None:
                return None
            self.idle += 1
            self._act(past, len(self.recorder) - 1, 0.0)
        return None

    # Small things -------------------------------------------------------------------------

    def _wake(self):
        """Flow that is on from the start, and contact if the pair starts in it."""
        quantities = self.now()
        for c in "AB":
            if not self.pair.models[c].overflows:
                continue
            own = self.law not in ("atmosphere", "polytrope", "locked")
            awake = self.law == "atmosphere" and getattr(quantities, f"excess_{c}") > WAKE
            if own or awake:
                self._switch(f"flow_{c}", True)
            ratio = getattr(quantities, f"radius_{c}") / getattr(quantities, f"lobe_{c}")
            if self.law in ("polytrope", "locked") and abs(ratio - 1.0) <= CONTACT_MARGIN:
                self._mark("contact", c, 0)
                self._on_contact(c)
                self.opening_event = "contact"

    def _switch(self, name, on):
        self.switches = self.switches._replace(**{name: on})

    def _set(self, slot, value):
        """Put a slot of the core to an exact value, where it has that slot."""
        if slot in self.pair.layout.core:
            self.state = self.state.copy()
            self.state[self.pair.layout.core.index(slot)] = value

    def _mark(self, name, component="", row=0, residual=0.0):
        self.marks.append(Mark(name, component, row, residual))
        if name == self.end["event"]:
            self._finish("event")

    def _already(self, name, c):
        return any(mark.name == name and mark.component == c for mark in self.marks)

    def _open(self, event):
        """Start a chapter here: a row with the equations that hold from now on."""
        self.opening_event = ""
        quantities = self.now()
        row = self.recorder.add(self.time, self.state, quantities)
        self.time = self.recorder[row].time
        if self.openings and self.acts[-1].row < row:
            self._note_jumps(row, quantities)
        self.openings.append(Opening(row, self.regime, event))

    def _note_jumps(self, row, quantities):
        """Events that change nothing, met where the equations jump from one row to the next."""
        before = self.pair.gauges(self.recorder[row - 1].quantities)
        after = self.pair.gauges(quantities)
        period, rate = (self.pair.layout.gauges.index(n) for n in ("log_period", "period_rate"))
        # no extreme of the period: a flow joins at the very start, or the period itself jumps
        no_extreme = self.openings[-1].row == row - 1 or abs(after[period] - before[period]) > 1e-9
        for watch in noted(self):
            if no_extreme and watch.gauge == rate:
                continue
            old, new = before[watch.gauge] - watch.level, after[watch.gauge] - watch.level
            if old * new < 0.0 and watch.direction * (new - old) >= 0.0:
                self._mark(watch.name, watch.component, row)

    def _finish(self, outcome, detail=""):
        if self.outcome:
            return
        self.outcome = outcome
        self.message = sentence(outcome, detail)

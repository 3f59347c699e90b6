"""A stretch on the compiled engine: what `course` does around solve_ivp, in one call or a few."""

from math import inf

import numpy as np

from evolve.integrate.advance import (
    DOMAIN,
    FIRED,
    MORE,
    STEP_LIMIT,
    TOO_SMALL,
    make_buffers,
)
from evolve.integrate.course import FINEST, sharpness, smallest_sizes
from evolve.integrate.engine import FIRST
from evolve.integrate.solver import Halt

SHARE = 1000
"""Steps in one call: between calls the progress shows, and Ctrl-C is heard."""
SHARP = 2e-7
"""Tolerance that a cubic overflow and a locked tide need: they balance on small differences."""
RADII, OTHERS = (-20.0, 15.0), (-inf, inf)


class CompiledCourse:
    """A stretch on its way.

    Parameters
    ----------
    run : evolve.integrate.run.Run
    stretch : TimeStretch or InspiralStretch
    watches : list of Watch
    engine : evolve.integrate.engine.Engine

    Attributes
    ----------
    noted, fired, halt, first_row
        As those of `evolve.integrate.course.Course`.
    """

    def __init__(self, run, stretch, watches, engine):
        self.run, self.stretch, self.watches, self.engine = run, stretch, watches, engine
        self.noted, self.fired, self.halt = [], None, None
        self.first_row = len(run.recorder)
        layout = run.pair.layout
        self.core = layout.core
        self.sizes = (len(layout.quantities), len(layout.gauges))
        self.n = len(layout.core) + len(layout.ledger) + stretch.inspiral

    def follow(self, bound):
        """Integrate to `bound` or the first terminal event; the engine's complaint or ""."""
        run, stretch = self.run, self.stretch
        parameters = self.engine.numbers.copy()
        parameters[:FIRST] = [*run.switches, stretch.origin]
        control, bounds, watches = self._control(), self._bounds(), self._watches()
        buffers = make_buffers(SHARE, self.n, len(self.core), self.sizes, len(self.watches))
        x, h, state, reason = float(stretch.start), 0.0, self._packed(stretch.state), MORE
        while reason == MORE:
            left = run.numerics["max_evaluations"] - run.evaluations
            reason, slot, h, rows, events, evaluations, steps = self.engine.advance(
                self.engine.rates, self.engine.look, (x, float(bound), h, state), parameters,
                control, bounds, watches, (left, SHARE), buffers,
            )  # fmt: skip
            run.evaluations, run.steps = run.evaluations + evaluations, run.steps + steps
            xs, states, seen = (array[:rows].copy() for array in buffers[0][:3])
            if rows:
                x, state = xs[-1], states[-1]
            self._record(xs, states, seen, buffers[1][:events])
            if run.progress:
                run.progress(run.recorder.last_time, run.end["time"], run.regime, 0)
        if reason == FIRED:
            self.fired = self.noted.pop()
        return self._verdict(reason, slot)

    def _packed(self, state):
        """The state as the engine has it: in an inspiral, time follows the core."""
        if not self.stretch.inspiral:
            return state
        return np.concatenate((state[: len(self.core)], state[-1:], state[len(self.core) : -1]))

    def _record(self, xs, states, seen, found):
        """Take over rows and events."""
        if self.stretch.inspiral:
            xs, states = states[:, len(self.core)], np.delete(states, len(self.core), axis=1)
        first = self.run.recorder.extend(self.stretch.origin + xs, states, seen)
        for row, watch, residual in found.tolist():
            self.noted.append((self.watches[int(watch)], first + int(row), residual))

    def _control(self):
        """Tolerances of the core, sizes that differences are scaled to, the longest step."""
        numerics, core = self.run.numerics, self.core
        rtol = max(numerics["rtol"], FINEST)
        if sharpness(self.run.pair.plan) < 1.0:
            rtol = min(rtol, SHARP)
        atol = self._packed(self.stretch.atol(rtol))[: len(core) + self.stretch.inspiral]
        if numerics["atol"] is not None:
            atol[: len(core)] = numerics["atol"]
        floor = smallest_sizes(self.run.pair, self.stretch.state.tolist())
        longest = numerics["max_step"]
        if longest is None or self.stretch.inspiral:
            longest = inf
        return rtol, atol, np.array(floor), float(longest)

    def _bounds(self):
        """Within which a state may lie: masses and J above 0, radii in their range."""
        ranges = [RADII if name.startswith("ln_") else OTHERS for name in self.core]
        ranges[:3] = [(0.0, inf)] * 3
        return tuple(np.array(ends) for ends in zip(*ranges, strict=True))

    def _watches(self):
        columns = zip(*[(w.gauge, w.level, w.direction, w.terminal) for w in self.watches])
        kinds = (np.int64, np.float64, np.int64, np.bool_)
        return tuple(np.array(c, kind) for c, kind in zip(columns, kinds, strict=True))

    def _verdict(self, reason, slot):
        if reason == STEP_LIMIT:
            spent = self.run.evaluations
            self.halt = Halt("step_limit", f"{spent} evaluations of the equations were spent")
        elif reason == DOMAIN:
            bad = "a mass or the angular momentum" if slot < 3 else self.core[slot]
            self.halt = Halt("domain", f"{bad} left the range in which the equations hold")
        return "no step is short enough" if reason == TOO_SMALL else ""


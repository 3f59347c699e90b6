"""One call of solve_ivp: every accepted step recorded, checked and searched for events.

solve_ivp could search for events itself. It takes a third of the time of a history for it,
and evaluates every event function where the quantities are known already; so the events
are looked for here, where each accepted step is recorded, on the same interpolant.
"""

from math import isfinite

import numpy as np

from evolve.integrate.solver import IMPLICIT, CoreEquations, Halt, guarded, tolerances

FINEST = 1e-12
"""No tolerance is sharpened below this."""


def sharpness(plan):
    """Part of the tolerance asked for that the equations of a plan need.

    A cubic overflow and a locked tide balance on differences of 1e-5 and less, of radius and
    lobe, of spin and orbit: at 1e-6 they would be noise.
    """
    if any(part.tides for part in plan.components.values()):
        return 1e-3
    return 0.05 if plan.overflow == "polytrope" else 1.0


def smallest_sizes(pair, state):
    """Size of each core slot below which a step of differences does not follow it.

    A logarithm and an eccentricity count from 1; a clock that starts at 0 from a thousandth of
    where it ends.
    """
    sizes = []
    for name, value in zip(pair.layout.core, state, strict=False):
        if name.startswith("phase"):
            sizes.append(1e-3 * getattr(pair.star_keys[name[-1]], "phase_high", 1.0))
        else:
            sizes.append(1e-9 * abs(value) + name.startswith(("ln_", "ecc")))
    return sizes


class Course:
    """A stretch on its way.

    Parameters
    ----------
    run : evolve.integrate.run.Run
    stretch : TimeStretch or InspiralStretch
    watches : list of Watch

    Attributes
    ----------
    noted : list of (Watch, int, float)
        Events that changed nothing, the row that holds each, what was left of g there.
    fired : (Watch, int, float) or None
        The terminal event that ended the stretch.
    halt : Halt or None
        The fault that ended it.
    first_row : int
        Index of the first row that belongs to it.
    """

    def __init__(self, run, stretch, watches):
        self.run, self.stretch, self.watches = run, stretch, watches
        self.numerics, self.recorder = run.numerics, run.recorder
        self.noted, self.fired, self.halt = [], None, None
        self.first_row = len(self.recorder)
        self.spent = run.evaluations
        core = run.pair.layout.core
        self.radius_slots = [n for n, name in enumerate(core) if name.startswith("ln_")]
        self.values = self._readings(stretch.quantities(stretch.start, stretch.state))

    def follow(self, bound):
        """Integrate to `bound` or the first terminal event; the solver's complaint or ""."""
        from scipy.integrate import solve_ivp

        stretch, method = self.stretch, self.numerics["method"]
        core = self.run.pair.layout.core
        equations = CoreEquations(stretch.right_side, smallest_sizes(self.run.pair, stretch.state))
        rtol = max(self.numerics["rtol"] * sharpness(self.run.pair.plan), FINEST)
        atol = stretch.atol(rtol)
        if self.numerics["atol"] is not None:
            atol[: len(core)] = self.numerics["atol"]
        rtol, atol = tolerances(rtol, atol, len(core), method)
        options = {"jac": equations.jacobian} if method in IMPLICIT else {}
        if self.numerics["max_step"] is not None and not stretch.inspiral:
            options["max_step"] = self.numerics["max_step"]
        solution = solve_ivp(
            equations.right_side, (stretch.start, bound), stretch.state,
            method=guarded(method, self), rtol=rtol, atol=atol, **options,
        )  # fmt: skip
        self.run.evaluations = self.spent + solution.nfev
        return solution.message if solution.status < 0 else ""

    # Called by the guarded method --------------------------------------------------------

    def before(self, solver):
        """A Halt if the next step must not be taken."""
        self.x_before = solver.t
        if self.spent + solver.nfev > self.numerics["max_evaluations"]:
            spent = self.spent + solver.nfev
            self.halt = Halt("step_limit", f"{spent} evaluations of the equations were spent")
        return self.halt

    def accept(self, solver):
        """Record an accepted step and note its events; true if the stretch ends here."""
        x, state = solver.t, solver.y
        values = state.tolist()
        if not isfinite(sum(values)):
            self.halt = Halt("non_finite", "the state became NaN or infinite")
            return True
        stretch, run = self.stretch, self.run
        time, quantities = stretch.time(x, state), stretch.quantities(x, state)
        before, self.values = self.values, self._readings(quantities)
        crossed = [
            order
            for order, (old, new) in enumerate(zip(before, self.values, strict=True))
            if (old < 0.0 <= new or old > 0.0 >= new)
            and self.watches[order].direction * (new - old) >= 0.0
        ]
        if crossed:
            self._cross(solver, before, crossed)
        run.steps += 1
        if self.fired:  # what ends the stretch on the way to a state out of bounds comes first
            return True
        if bad := self._out_of_bounds(values):
            self.halt = Halt("domain", f"{bad} left the range in which the equations hold")
            return True
        self.recorder.add(time, stretch.kept(state), quantities)
        if run.progress:
            run.progress(time, run.end["time"], run.regime, run.steps)
        return False

    def _readings(self, quantities):
        """How far each watch's gauge is above its level."""
        readings = self.run.pair.gauges(quantities)
        return [readings[watch.gauge] - watch.level for watch in self.watches]

    def _out_of_bounds(self, values):
        """What has left the range in which the equations hold (their head bounds trials)."""
        if not (values[0] > 0.0 and values[1] > 0.0 and values[2] > 0.0):
            return "a mass or the angular momentum"
        for slot in self.radius_slots:
            if not -20.0 < values[slot] < 15.0:
                return self.run.pair.layout.core[slot]
        return ""

    # Events ------------------------------------------------------------------------------

    def _cross(self, solver, before, crossed):
        """Find the events of one step on its interpolant; note them up to a terminal one."""
        solver.t_old = self.x_before
        interpolant = solver.dense_output()
        found = sorted(
            (self._root(interpolant, order, before[order], solver.t), order) for order in crossed
        )
        for x, order in found:
            watch, state = self.watches[order], np.array(interpolant(x))
            time, quantities = self.stretch.time(x, state), self.stretch.quantities(x, state)
            row = self.recorder.add(time, self.stretch.kept(state), quantities)
            event = (watch, row, self._readings(quantities)[order])
            if watch.terminal:
                self.fired = event
                return
            self.noted.append(event)

    def _root(self, interpolant, order, start, high):
        from scipy.optimize import brentq

        stretch = self.stretch
        low, end = self.x_before, self.values[order]
        ends = {low: start, high: end}

        def g(x):
            if x in ends:
                return ends[x]
            state = np.array(interpolant(x))
            return self._readings(stretch.quantities(x, state))[order]

        if start * end > 0.0 or end == 0.0 or low == high:  # a step too short for a float
            return high
        digits = 4e-16 * max(abs(low), abs(high))
        width = max(digits, 1e-12 * (high - low))
        x = brentq(g, low, high, xtol=width, rtol=1e-15)
        # A gauge that jumps would be met again from before its jump: step past it.
        while abs(g(x)) == 0.5 and g(x) * start > 0.0 and x < high:
            x = min(x + width, high)
        return x

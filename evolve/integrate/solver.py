"""One stretch of integration with solve_ivp: a guarded method, its tolerances, its Jacobian."""

from typing import NamedTuple

import numpy as np

IMPLICIT = ("LSODA", "Radau", "BDF")


class Halt(NamedTuple):
    """Why a stretch stopped short: an end of a history and a sentence."""

    outcome: str
    message: str


def guarded(method, watch):
    """A solve_ivp method that asks `watch` before and after every step.

    solve_ivp itself knows no step limit, takes a NaN from LSODA for success and loses all
    steps to an exception. A failed step, on the other hand, ends it with everything kept.

    Parameters
    ----------
    method : str
        Name of one of scipy's methods.
    watch : object
        `watch.before(solver)` and `watch.accept(solver)` give None to go on, or a Halt.

    Returns
    -------
    type
        A subclass of the scipy class, to be passed as `method` to solve_ivp.
    """
    import scipy.integrate

    base = getattr(scipy.integrate, method)

    class Guarded(base):
        def _step_impl(self):
            if watch.before(self):
                return False, "halted"
            success, message = super()._step_impl()
            if success and watch.accept(self):
                return False, "halted"
            return success, message

    return Guarded


def tolerances(rtol, atol, n_core, method):
    """rtol and atol for one method, so that the ledger's slots do not loosen them.

    Radau, BDF and the Runge-Kutta methods measure the error by its root mean square over
    all slots, which slots free of error control dilute. LSODA takes the largest.
    """
    scale = 1.0 if method == "LSODA" else (n_core / len(atol)) ** 0.5
    return max(rtol * scale, 3e-14), atol * scale


class CoreEquations:
    """A right side with its difference Jacobian, which spends evaluations on the core only.

    Nothing depends on the ledger, and no Newton step moves a slot that stands still: their
    columns are left zero. The solver has just evaluated the right side where it asks for a
    Jacobian, so the last value is remembered.

    Parameters
    ----------
    right_side : callable
        f(x, state) -> sequence of float.
    floor : sequence of float, (n_core,)
        Smallest size of each core slot that a step of differences is scaled to.
    """

    def __init__(self, right_side, floor):
        self._function, self._floor = right_side, floor
        self._x = self._state = self._value = None

    def right_side(self, x, state):
        """f(x, state), remembered."""
        self._x, self._state = x, state
        self._value = self._function(x, state)
        return self._value

    def jacobian(self, x, state):
        """df/dstate at (x, state), shape (n, n)."""
        base = self._value
        if x != self._x or state is not self._state and (state != self._state).any():
            base = self._function(x, state)
        base = np.array(base)
        matrix = np.zeros((state.size, state.size))
        shifted = state.copy()
        for slot, floor in enumerate(self._floor):
            if base[slot] == 0.0:
                continue
            step = 1.5e-8 * max(abs(state[slot]), floor)
            shifted[slot] = state[slot] + step
            step = shifted[slot] - state[slot]
            matrix[:, slot] = (np.array(self._function(x, shifted)) - base) / step
            shifted[slot] = state[slot]
        return matrix

"""A stretch: one call of solve_ivp, in time or, for the last inspiral, in -ln a.

A merger by waves after gigayears cannot be integrated in time: the last stretch before it
is shorter than a digit of the time. There -ln a is the independent variable and time is a
slot of the state like any other.
"""

import numpy as np

LEDGER_ATOL = 1e60


class TimeStretch:
    """Integration in local time [yr] from `origin` on.

    The state is the core, then the ledger.
    """

    inspiral = False

    def __init__(self, pair, switches, origin, state):
        self.pair, self.switches, self.origin = pair, switches, origin
        self.state = state
        self.start = 0.0
        self.right_side = pair.right_side(switches)

    def time(self, x, state):
        """Time since the start of the history [yr]."""
        return self.origin + x

    def quantities(self, x, state):
        """Everything columns and events need, from the pair's equations."""
        return self.pair.quantities(self.origin + x, state.tolist(), self.switches)

    def bound(self, end_time):
        """Where the independent variable ends."""
        return end_time - self.origin

    def atol(self, rtol):
        """Absolute tolerances of core and ledger."""
        return core_and_ledger_atol(self.pair, self.state, rtol)

    def kept(self, state):
        """Core and ledger of a state."""
        return state


def shrinking_rate(mass_a, mass_b, momentum, u, mass_rate_a, mass_rate_b, torque, u_rate):
    """d ln a/dt [1/yr] of masses [solMass], J [solMass solRad2/yr], u = e/sqrt(1-e2)."""
    rate = 2.0 * torque / momentum - 2.0 * (mass_rate_a / mass_a + mass_rate_b / mass_b)
    rate += (mass_rate_a + mass_rate_b) / (mass_a + mass_b)
    return rate + 2.0 * u * u_rate / (1.0 + u * u)


class InspiralStretch:
    """Integration in -ln a, with time [yr] as one more slot at the end of the state."""

    inspiral = True

    def __init__(self, pair, switches, origin, state):
        self.pair, self.switches, self.origin = pair, switches, origin
        self.state = np.append(state, 0.0)
        q = pair.quantities(origin, state.tolist(), switches)
        self.start = -np.log(q.separation)
        self.decay_time = -1.0 / q.separation_rate
        self._rates = pair.right_side(switches)
        self._eccentric = pair.plan.eccentric

    def right_side(self, x, state):
        rates = self._rates(self.origin + state[-1], state)
        u, u_rate = (state[3], rates[3]) if self._eccentric else (0.0, 0.0)
        rate = shrinking_rate(*state[:3].tolist(), u, *rates[:3], u_rate)
        return [-r / rate for r in rates] + [-1.0 / rate]

    def time(self, x, state):
        """Time since the start of the history [yr]."""
        return self.origin + state[-1]

    def quantities(self, x, state):
        """Everything columns and events need, from the pair's equations."""
        return self.pair.quantities(self.time(x, state), state.tolist(), self.switches)

    def bound(self, end_time):
        """Where the independent variable ends: well inside the merger, which a watch sees."""
        return -np.log(0.5 * self.pair.smallest_separation())

    def atol(self, rtol):
        """Absolute tolerances of core, ledger and time."""
        atol = core_and_ledger_atol(self.pair, self.state[:-1], rtol)
        return np.append(atol, 1e-3 * rtol * self.decay_time)

    def kept(self, state):
        """Core and ledger of a state."""
        return state[:-1]


def core_and_ledger_atol(pair, state, rtol):
    """Absolute tolerance of each slot of core and ledger, scaled to what it means.

    Masses, angular momentum and clocks are held to rtol of themselves; ln R to rtol
    absolutely, which is the relative tolerance of the radius; e/sqrt(1-e2) likewise. The
    ledger's integrals ride along and never decide a step.
    """
    atol = np.full(len(state), LEDGER_ATOL)
    for slot, name in enumerate(pair.layout.core):
        if name.startswith(("ln_", "eccentricity")):
            atol[slot] = rtol
        else:
            atol[slot] = 1e-6 * rtol * max(abs(state[slot]), 1e-6)
    return atol

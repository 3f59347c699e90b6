"""The rows of a history as they come: nothing computed is lost, whatever happens next."""

from bisect import bisect_right
from math import inf, nextafter
from typing import NamedTuple

import numpy as np


class Row(NamedTuple):
    """One row: time [yr], core and ledger of the state, quantities."""

    time: float
    state: np.ndarray
    quantities: tuple


class Recorder:
    """Keeps rows in strictly increasing time, in blocks of one layout.

    A row that would not come later than the one before takes the next float: the row after
    a jump, and the last rows of an inspiral, which lie closer than a digit of the time. Rows
    come one by one, or a whole stretch at once as arrays.
    """

    def __init__(self):
        self.starts, self.blocks = [], []
        self.length, self.last_time, self.open = 0, -inf, False

    def __len__(self):
        return self.length

    def add(self, time, state, quantities):
        """Append a row and return its index."""
        if not self.open or len(self.blocks[-1][2][-1]) != len(quantities):
            self._begin(([], [], []))
            self.open = True
        times, states, seen = self.blocks[-1]
        time = float(time)
        if time <= self.last_time:
            time = nextafter(self.last_time, inf)
        times.append(time)
        states.append(state)
        seen.append(quantities)
        self.length, self.last_time = self.length + 1, time
        return self.length - 1

    def extend(self, times, states, quantities):
        """Append many rows: times (n,), states (n, s), quantities (n, q); index of the first."""
        if len(times) == 0:
            return self.length
        before = np.concatenate(([self.last_time], times[:-1]))
        if not (times > before).all():
            for row in range(len(times)):
                times[row] = max(times[row], nextafter(self.last_time, inf))
                self.last_time = times[row]
        self._begin((times, states, quantities))
        self.open = False
        self.length, self.last_time = self.length + len(times), float(times[-1])
        return self.starts[-1]

    def _begin(self, block):
        self.starts.append(self.length)
        self.blocks.append(block)

    def __getitem__(self, index):
        if index < 0:
            index += self.length
        block = bisect_right(self.starts, index) - 1
        times, states, quantities = self.blocks[block]
        place = index - self.starts[block]
        return Row(float(times[place]), states[place], quantities[place])

    def times(self):
        """Time of every row [yr], (n,)."""
        return np.concatenate([np.asarray(times) for times, _, _ in self.blocks])

    def quantities(self, first, last):
        """Quantities of the rows first..last-1, which are of one layout: (last - first, q)."""
        parts = []
        for start, (times, _, seen) in zip(self.starts, self.blocks, strict=True):
            low, high = max(first - start, 0), min(last - start, len(times))
            if low < high:
                parts.append(np.array(seen[low:high], dtype=float))
        return np.concatenate(parts)

"""The rows of a history as they come: nothing computed is lost, whatever happens next."""

from math import nextafter
from typing import NamedTuple

import numpy as np


class Row(NamedTuple):
    """One row: time [yr], core and ledger of the state, quantities."""

    time: float
    state: np.ndarray
    quantities: tuple


class Recorder:
    """Keeps rows in strictly increasing time.

    A row that would not come later than the one before takes the next float: the row after
    a jump, and the last rows of an inspiral, which lie closer than a digit of the time.
    """

    def __init__(self):
        self.rows = []

    def __len__(self):
        return len(self.rows)

    def add(self, time, state, quantities):
        """Append a row and return its index."""
        time = float(time)
        if self.rows and time <= self.rows[-1].time:
            time = nextafter(self.rows[-1].time, float("inf"))
        self.rows.append(Row(time, state, quantities))
        return len(self.rows) - 1

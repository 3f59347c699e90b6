"""Who took how much mass and angular momentum, chapter by chapter."""

import numpy as np

MOMENTUM_UNIT = "solMass solRad2 / yr"
MASS_UNIT = "solMass"
LAW_WORDS = {
    "waves": "gravitational waves", "braking": "magnetic braking", "wind": "wind",
    "expelled": "expelled matter", "consequential": "consequential loss", "tides": "tides",
    "jump": "sudden changes",
}  # fmt: skip
"""What the laws of the books are called."""
FLOW_WORDS = {
    "overflow": "overflow of", "wind": "wind of", "captured": "captured from",
    "accepted": "accepted by", "expelled": "expelled by", "jump": "sudden change of",
}  # fmt: skip
"""What the flows of the books are called, before their component."""
TRIFLE = 1e-9
"""Entries below this share of the largest are not worth a line."""


class Ledger:
    """The books of a history.

    Parameters
    ----------
    angular_momentum : dict of ndarray (n_chapters,)  [solMass solRad2 / yr]
        Change of the orbit's angular momentum by each law and component, e.g. "waves",
        "braking_A", "expelled_A" (by what of A's overflow was expelled), "jump" (what an
        event changed at once).
    mass : dict of ndarray (n_chapters,)  [solMass]
        Mass that flowed: "overflow_A", "wind_A", "captured_A", "accepted_B", "expelled_B";
        "jump_A" what an event added to A at once.
    start, end : dict of float
        mass_A, mass_B [solMass] and angular_momentum at both ends of the history.
    """

    def __init__(self, angular_momentum, mass, start, end):
        self.angular_momentum = dict(angular_momentum)
        self.mass = dict(mass)
        self.start = {name: float(value) for name, value in start.items()}
        self.end = {name: float(value) for name, value in end.items()}

    def total(self, entry, kind=None):
        """Sum of an entry over all chapters, in its unit.

        Parameters
        ----------
        entry : str
            "waves", "braking_A"; or without the component, for the sum over both.
        kind : str, optional
            "angular_momentum" or "mass", where both have an entry of that name (by default
            the former).

        Raises
        ------
        KeyError
            Naming the entries there are.
        """
        kinds = (kind,) if kind else ("angular_momentum", "mass")
        for books in (getattr(self, kind) for kind in kinds):
            parts = [n for n in books if n == entry or n.rpartition("_")[0] == entry]
            if parts:
                return float(sum(np.sum(books[name]) for name in parts))
        known = dict.fromkeys(name for kind in kinds for name in getattr(self, kind))
        raise KeyError(f'the ledger has no "{entry}"; it has {", ".join(known)}')

    def worth_telling(self, kind):
        """Entries of the books of a kind, "angular_momentum" or "mass", that are no trifles."""
        totals = {name: self.total(name, kind) for name in getattr(self, kind)}
        largest = max((abs(total) for total in totals.values()), default=0.0)
        return [name for name, total in totals.items() if abs(total) > TRIFLE * largest]

    def share(self, entry):
        """Part of the orbit's whole angular-momentum change that an entry took."""
        whole = sum(float(np.sum(values)) for values in self.angular_momentum.values())
        return self.total(entry, "angular_momentum") / whole if whole else 0.0

    @property
    def residuals(self):
        """What the books leave open, relative to the start: angular_momentum, mass_A, mass_B."""
        momentum = sum(float(np.sum(values)) for values in self.angular_momentum.values())
        open_ends = {"angular_momentum": momentum}
        for c in "AB":
            flows = {name: self._flow(f"{name}_{c}") for name in ("overflow", "wind", "accepted", "jump")}
            gained = flows["accepted"] + flows["jump"]
            open_ends[f"mass_{c}"] = gained - flows["overflow"] - flows["wind"]
        return {
            name: (self.end[name] - self.start[name] - booked) / self.start[name]
            for name, booked in open_ends.items()
        }

    def _flow(self, name):
        return float(np.sum(self.mass.get(name, 0.0)))

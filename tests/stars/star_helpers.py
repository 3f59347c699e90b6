"""What the tests of the stars share: one or more samples of every model, compiled structures."""


from typing import NamedTuple

import pytest

from evolve.stars import MODELS

TRACK = {
    "age": [0.0, 1e6, 2.5e6, 4e6, 4.4e6, 4.5e6],
    "mass": [5.0, 4.99, 4.9, 4.8, 4.4, 4.2],
    "radius": [2.6, 2.9, 4.5, 6.0, 80.0, 60.0],
    "luminosity": [530.0, 600.0, 900.0, 1200.0, 2000.0, 1500.0],
    "core_mass": [0.0, 0.0, 0.2, 0.5, 0.7, 0.75],
    "zeta_ad": [4.0, 4.0, 3.0, 1.0, 0.2, 0.1],
}
BARE_TRACK = {name: TRACK[name] for name in ("age", "mass", "radius")}


class Sample(NamedTuple):
    """A star as a config gives it: model, values, and the range in which it is looked at."""

    model: str
    mass: float
    values: dict
    masses: tuple[float, float]
    phases: tuple[float, float] = (0.0, 0.0)

    @property
    def keys(self):
        return MODELS[self.model].prepare(self.mass, self.values)

    @property
    def structure(self):
        return MODELS[self.model].structure


SAMPLES = {
    "neutron star": Sample("compact", 1.4, {"kind": "neutron-star"}, (1.0, 2.2)),
    "black hole": Sample("compact", 10.0, {"kind": "black-hole", "spin": 0.9}, (3.0, 1e9)),
    "point": Sample("compact", 3e-6, {"kind": "point-mass"}, (1e-9, 1e9)),
    "point with light": Sample(
        "compact", 1.0, {"kind": "point-mass", "radius": 0.9, "temperature": 6000.0}, (0.1, 9.0)
    ),
    "power law": Sample("power-law", 1.0, {"radius": 0.9, "exponent": 0.8}, (0.05, 50.0)),
    "power law of given luminosity": Sample(
        "power-law", 2.0, {"radius": 5.0, "exponent": -0.3, "luminosity": 40.0}, (0.2, 20.0)
    ),
    "power law of given temperature": Sample(
        "power-law", 2.0, {"radius": 5.0, "exponent": 3.0, "temperature": 4000.0}, (0.2, 20.0)
    ),
    "white dwarf": Sample("white-dwarf", 0.6, {}, (0.002, 1.43)),
    "hot white dwarf": Sample("white-dwarf", 0.6, {"temperature": 3e4}, (0.002, 1.43)),
    "helium star": Sample("helium-star", 1.0, {"semi_degenerate": "false"}, (0.3, 5.0)),
    "semi-degenerate": Sample("helium-star", 0.1, {"semi_degenerate": "true"}, (0.005, 0.35)),
    "dwarf": Sample("dwarf", 0.6, {}, (0.01, 1.0)),
    "inflated dwarf": Sample("dwarf", 0.1, {"inflation": 0.045, "zeta_ad": 0.2}, (0.01, 1.0)),
    "main sequence": Sample("main-sequence", 1.0, {}, (0.1, 100.0), (0.0, 1.0)),
    "main sequence of given zeta": Sample(
        "main-sequence", 25.0, {"burnt": 0.3, "zeta_ad": 0.5}, (0.1, 100.0), (0.0, 1.0)
    ),
    "giant": Sample("giant", 1.0, {"core_mass": 0.25}, (0.47, 2.3), (0.16, 0.45)),
    "giant by the other relation": Sample(
        "giant", 1.2, {"core_mass": 0.3, "relation": "rappaport-1995"}, (0.47, 2.3), (0.16, 0.45)
    ),
    "expanding": Sample(
        "expanding", 1.2, {"radius": 1.5, "growth_time": 1e8}, (0.1, 10.0), (0.0, 8.0)
    ),
    "track": Sample("track", 5.0, {"table": TRACK, "zeta_eq": 0.7}, (0.8, 5.0), (0.0, 4.5e6)),
    "track of three columns": Sample(
        "track", 4.9, {"table": BARE_TRACK, "age": 2.5e6}, (0.5, 5.0), (0.0, 4.5e6)
    ),
}
EVERY = pytest.mark.parametrize("sample", SAMPLES.values(), ids=SAMPLES)


def between(ends, share):
    """A point between two ends, evenly in the logarithm where both are positive."""
    low, high = ends
    return low * (high / low) ** share if low > 0.0 else low + (high - low) * share


def states(sample, steps=7):
    """(mass, radius, phase) over the whole range of a sample, on and off equilibrium."""
    structure, keys = sample.structure, sample.keys
    for i in range(steps):
        for j in range(steps):
            mass = between(sample.masses, i / (steps - 1))
            phase = between(sample.phases, j / (steps - 1))
            equilibrium = structure(mass, 1.0, phase, keys).equilibrium
            for factor in (0.3, 0.95, 1.0, 1.05, 3.0):
                yield mass, factor * equilibrium or 1.0, phase


def compiled(function):
    """A function and every plain function it calls, compiled by numba."""
    pytest.importorskip("numba")
    from evolve.integrate.engine import jitted

    return jitted(function)


def with_arrays(keys):
    """Keys as compiled code gets them: tables as arrays."""
    import numpy as np

    return type(keys)._make(np.array(x) if isinstance(x, tuple) else x for x in keys)

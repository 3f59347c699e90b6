"""What the tests of the laws share: sample states, keys, and laws compiled by numba."""

from math import isfinite

import pytest

from evolve.constants import G
from evolve.laws import TABLES
from evolve.laws.contract import Orbit, Star, described_keys


def close(expected, rel=1e-6):
    """Equal within a relative tolerance alone: the numbers here are as small as 1e-22."""
    return pytest.approx(expected, rel=rel, abs=0.0)


def every_law():
    """(process, name, "function" or "second", the function, its Keys) of every table."""
    for process, table in TABLES.items():
        for name, law in table.items():
            for part in ("function", "second"):
                if getattr(law, part) is not None:
                    yield process, name, part, getattr(law, part), law.keys


def keys_of(keys):
    """The defaults of a Keys class; a small number for what must be given."""
    described = described_keys(keys)
    missing = {name for name, (_, default) in described.items() if default is ...}
    values = keys(**dict.fromkeys(missing, 1e-8))
    assert all(isfinite(value) for value in values)
    return values


def make_star(mass, radius=1.0, lobe=1.0, **more):
    """A Star of which only the named fields matter."""
    values = dict.fromkeys(Star._fields, 0.0) | {"mass": mass, "radius": radius, "lobe": lobe}
    return Star(**(values | more))


def make_orbit(mass_a, mass_b, separation, eccentricity=0.0):
    """The Orbit of two masses."""
    total = mass_a + mass_b
    omega = (G * total / separation**3) ** 0.5
    shape = 1.0 - eccentricity**2
    momentum = mass_a * mass_b / total * (G * total * separation * shape) ** 0.5
    return Orbit(separation, eccentricity, omega, momentum, total)


def compiled(function):
    """A function and every plain function it calls, compiled by numba."""
    pytest.importorskip("numba")
    from evolve.integrate.engine import jitted

    return jitted(function)

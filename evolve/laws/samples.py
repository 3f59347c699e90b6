"""Pairs of stars at which every law must answer sensibly: the states of the contract check."""

from math import sqrt

from evolve.constants import G
from evolve.laws.contract import Orbit, Star
from evolve.orbit.lobes import lobe_fraction

SIGNS = {
    "waves": -1,
    "braking": -1,
    "overflow": 1,
    "wind": 1,
    "capture": 1,
    "ceiling": 1,
    "expulsion": 1,
    "consequential": 1,
    "tides": 0,
}
"""Sign of what a law of each process may return (zero is always allowed); 0 for either."""


class _Body:
    """One star of a sample, before an orbit gives it a lobe and a spin."""

    def __init__(self, mass, radius, luminosity, temperature, core=0.0, convective=0.0):
        self.values = mass, radius, luminosity, temperature, core, convective
        self.mass = mass

    def star(self, lobe, spin):
        mass, radius, luminosity, temperature, core, convective = self.values
        return Star(
            mass=mass,
            radius=radius,
            lobe=lobe,
            luminosity=luminosity,
            temperature=temperature,
            core_mass=core,
            convective=convective,
            zeta=-1.0 / 3.0,
            spin=spin,
            gyration=0.205,
            envelope_mass=convective * (mass - core),
            envelope_depth=convective * 0.5 * radius,
        )


_DWARF = _Body(0.6, 0.553, 0.071, 3970.0, convective=1.0)
_SUN = _Body(1.0, 1.0, 1.0, 5772.0, convective=1.0)
_BROWN_DWARF = _Body(0.05, 0.088, 1.1e-5, 1120.0, convective=1.0)
_WHITE_DWARF = _Body(0.75, 0.0108, 1e-3, 1e4)
_LIGHT_WHITE_DWARF = _Body(0.05, 0.034, 1e-3, 5500.0)
_NEUTRON_STAR = _Body(1.4, 1.72e-5, 0.0, 0.0)
_BLACK_HOLE = _Body(10.0, 1.27e-4, 0.0, 0.0)
_POINT = _Body(1.0, 0.0, 0.0, 0.0)
_O_STAR = _Body(25.0, 6.6, 7.9e4, 37700.0)
_B_STAR = _Body(12.0, 6.0, 2e4, 25000.0)
_GIANT = _Body(1.1, 30.0, 250.0, 4200.0, core=0.3, convective=1.0)

_PAIRS = (
    ("dwarf above a white dwarf", _DWARF, _WHITE_DWARF, 1.02, 0.0),
    ("dwarf beyond its lobe", _DWARF, _WHITE_DWARF, 0.9999, 0.0),
    ("brown dwarf", _BROWN_DWARF, _WHITE_DWARF, 1.0, 0.0),
    ("sun and neutron star", _SUN, _NEUTRON_STAR, 1.3, 0.2),
    ("two white dwarfs", _LIGHT_WHITE_DWARF, _WHITE_DWARF, 1.001, 0.0),
    ("massive star and black hole", _O_STAR, _BLACK_HOLE, 1.5, 0.4),
    ("hot star and point mass", _B_STAR, _POINT, 2.0, 0.7),
    ("giant", _GIANT, _NEUTRON_STAR, 1.1, 0.0),
    ("no light, no temperature", _Body(2.0, 3.0, 0.0, 0.0), _POINT, 1.2, 0.0),
)


def sample_states():
    """Pairs from brown dwarfs to massive stars, detached and overflowing, round and not.

    Returns
    -------
    tuple of (str, Star, Star, Orbit)
        Words for the pair; the star with an extent, its companion, the orbit. Both corotate.
    """
    states = []
    for words, first, second, ratio, eccentricity in _PAIRS:
        total = first.mass + second.mass
        fractions = [
            lobe_fraction(a.mass / b.mass) for a, b in ((first, second), (second, first))
        ]
        periastron = ratio * first.values[1] / fractions[0]
        separation = periastron / (1.0 - eccentricity)
        omega = sqrt(G * total / separation) / separation
        momentum = first.mass * second.mass / total * sqrt(
            G * total * separation * (1.0 - eccentricity**2)
        )
        states.append(
            (
                words,
                first.star(periastron * fractions[0], omega),
                second.star(periastron * fractions[1], omega),
                Orbit(separation, eccentricity, omega, momentum, total),
            )
        )
    return tuple(states)


__all__ = ["SIGNS", "sample_states"]

"""What a star becomes: remnants, collapses, a common envelope. Plain functions.

Each gives the new config values of a pair, from which the next chapter's equations are
built; the run carries the state over.
"""

from math import acos, pi, sqrt
from random import Random
from typing import NamedTuple

from evolve.constants import KM_S, G
from evolve.laws.envelope import survives, webbink_1984
from evolve.laws.kick import collapsed_mass, sudden_change, true_anomaly
from evolve.system.layout import OTHER

HELIUM_CORE = 0.5
"""A bare core above this burns helium; below it is a white dwarf [solMass]."""


class Becoming(NamedTuple):
    """A star's new description and the orbit after it.

    values      of the component, as a completed config has them
    mass        [solMass]
    separation  [solRad], eccentricity of the new orbit; < 0 and > 1 if they part
    speed       of the new centre of mass against the old one [solRad/yr]
    """

    values: dict
    mass: float
    separation: float
    eccentricity: float
    speed: float = 0.0

    @property
    def bound(self):
        """Whether the pair stays together."""
        return 0.0 < self.separation < float("inf")

    def parting(self, mass_other):
        """Words for a pair that does not: the masses, and the speed far apart."""
        total = self.mass + mass_other
        speed = sqrt(max(-G * total / self.separation, 0.0)) * KM_S
        return (
            f"{self.mass:.4g} and {mass_other:.4g} Msun part with {speed:.3g} km/s, on a "
            f"hyperbola of eccentricity {self.eccentricity:.4g}"
        )


def remnant(values, c, q):
    """A giant that has lost its envelope becomes a white dwarf of its core's mass.

    The last 0.01 solar masses leave as a fast wind: a M stays (Jeans mode), and the pair is
    detached.
    """
    core = getattr(q, f"core_mass_{c}")
    other = getattr(q, f"mass_{OTHER[c]}")
    total = q.mass_A + q.mass_B
    return Becoming(
        _bare(values, "white-dwarf", core), core, q.separation * total / (core + other), 0.0
    )


def _bare(values, star, mass, **more):
    common = {name: None for name in values if name in ("temperature", "luminosity", "radius")}
    return {**common, "gyration": None, "spin": None, "star": star, "mass": mass, **more}


def common_envelope(values, c, q, efficiency, binding, radius_other):
    """The pair after a common envelope, or None if it merges (Webbink 1984, ApJ 277, 355).

    The core is a white dwarf, or above 0.5 solar masses a helium star; a donor without a core
    merges. The orbit is circular after, the accretor unchanged.
    """
    from evolve.stars import MODELS

    core, mass = getattr(q, f"core_mass_{c}"), getattr(q, f"mass_{c}")
    other = getattr(q, f"mass_{OTHER[c]}")
    if core <= 0.0 or core >= mass:
        return None
    separation = webbink_1984(
        mass, core, other, getattr(q, f"lobe_{c}"), q.separation, efficiency, binding
    )
    star = "helium-star" if core > HELIUM_CORE and values["star"] == "track" else "white-dwarf"
    new = _bare(values, star, core, semi_degenerate="false")
    model = MODELS[star]
    radius = model.structure(core, 0.0, 0.0, model.prepare(core, new)).radius
    if not survives(core, radius, other, radius_other, separation):
        return None
    return Becoming(new, core, separation, 0.0)


def collapse(values, c, q, kick):
    """A white dwarf at its limit becomes a neutron star, a neutron star a black hole.

    The white dwarf loses the binding energy of the neutron star at once (Lattimer & Yahil
    1989); the orbit answers as to a sudden loss with the config's kick (Blaauw 1961; Hills
    1983).
    """
    mass = getattr(q, f"mass_{c}")
    kind = "neutron-star" if values["star"] == "white-dwarf" else "black-hole"
    left = collapsed_mass(mass) if kind == "neutron-star" else mass
    return _after_kick(_bare(values, "compact", left, kind=kind), left, c, q, kick)


def sudden_loss(values, c, q, kick):
    """A component that loses mass at once and is kicked, but stays what it is."""
    left = getattr(q, f"mass_{c}") - kick["mass_lost"]
    return _after_kick({**values, "mass": left}, left, c, q, kick)


def _after_kick(new, left, c, q, kick):
    if left == getattr(q, f"mass_{c}") and not kick["speed"]:
        return Becoming(new, left, q.separation, q.eccentricity)
    polar, azimuth, anomaly = direction(kick, q.eccentricity)
    after = sudden_change(
        getattr(q, f"mass_{c}"), left, getattr(q, f"mass_{OTHER[c]}"), q.separation,
        kick["speed"], polar, azimuth, q.eccentricity, anomaly,
    )  # fmt: skip
    return Becoming(new, left, after.separation, after.eccentricity, after.speed)


def direction(kick, eccentricity=0.0):
    """Polar angle, azimuth and true anomaly of a kick [rad]: as given, or drawn by its seed.

    Drawn directions are isotropic, drawn moments uniform in time.
    """
    if kick["seed"] is None:
        return kick["polar"], kick["azimuth"], kick["anomaly"]
    generator = Random(kick["seed"])
    polar, azimuth = acos(1.0 - 2.0 * generator.random()), 2.0 * pi * generator.random()
    return polar, azimuth, true_anomaly(2.0 * pi * generator.random(), eccentricity)


__all__ = ["Becoming", "collapse", "common_envelope", "direction", "remnant", "sudden_loss"]

"""Neutron stars, black holes, and point masses of any kind. They do not fill a lobe: they merge."""

from math import isnan, nan
from typing import Annotated, NamedTuple

from evolve.constants import C, R_SUN_SI, G
from evolve.errors import DomainError
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.surface import effective_temperature, given, given_light, light

NEUTRON_STAR_RADIUS = 12e3 / R_SUN_SI
"""12 km, in solRad: 1.72e-5."""
LAST_ORBIT = 6.0 * G / C**2
"""6 G m/c2 of one solMass [solRad]: the last stable orbit about a hole without spin."""


class CompactKeys(NamedTuple):
    """Keys of a compact star. `radius_per_mass` [solRad/solMass] follows from the kind."""

    radius: Annotated[
        float, Key("solRad", 0.0, 1e6, "default: 12 km, 6 G m/c2 or 0, by kind")
    ] = nan
    spin: Annotated[
        float, Key("", 0.0, 0.998, "of a black hole, c J/(G m2)")
    ] = 0.0
    luminosity: Annotated[float, Key("solLum", 0.0, 1e12, "constant")] = nan
    temperature: Annotated[float, Key("K", 0.0, 1e9, "effective, constant")] = nan
    radius_per_mass: float = 0.0


def structure(mass, radius, phase, keys):
    """A star of constant radius, or a black hole with that of its last stable orbit.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Not used.
    keys : CompactKeys

    Returns
    -------
    Structure
        `radius` [solRad] 12 km for a neutron star, 6 G m/c2 for a black hole whatever its spin
        (for tables and drawings), 0 for a point mass; or as given.

    Notes
    -----
    No evolution, no response to accretion but the proportion of a hole's radius to its mass.

    References
    ----------
    Bardeen, Press & Teukolsky 1972, ApJ 178, 347 (last stable orbit).
    """
    size = keys.radius + keys.radius_per_mass * mass
    zeta = 1.0 if keys.radius_per_mass > 0.0 else 0.0
    return Structure(
        size, size, keys.luminosity, keys.temperature, zeta, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0
    )


def prepare(mass, values):
    """The keys of a compact star from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
    values : dict
        `kind`, and optionally `radius`, `spin`, `luminosity`, `temperature`.

    Returns
    -------
    CompactKeys

    Raises
    ------
    DomainError
        A spin of anything but a black hole; light of a black hole; light given twice.
    """
    kind, radius = values["kind"], given(values, "radius")
    spin = given(values, "spin", 0.0)
    luminosity, temperature = given_light(values)
    hole = kind == "black-hole"
    if spin > 0.0 and not hole:
        raise DomainError(f"spin = {spin:g} belongs to a black hole, not to a {kind}")
    if hole and luminosity + temperature > 0.0:
        raise DomainError("a black hole has no luminosity or temperature of its own")
    per_mass = LAST_ORBIT if hole and isnan(radius) else 0.0
    if isnan(radius):
        radius = NEUTRON_STAR_RADIUS if kind == "neutron-star" else 0.0
    if temperature > 0.0:
        luminosity, temperature = light(mass, radius, 0.0, temperature)
    elif luminosity > 0.0 and radius > 0.0:
        temperature = effective_temperature(radius, luminosity)
    return CompactKeys(radius, spin, luminosity, temperature, per_mass)


MODEL = StarModel(
    structure=structure,
    keys=CompactKeys,
    prepare=prepare,
    texts={
        "kind": Text(
            ("neutron-star", "black-hole", "point-mass"), ..., "what kind of compact star"
        )
    },
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=False,
    mass_range=(1e-12, 1e12),
    gyration=0.35,  # representative of a neutron star, from memory; a point has no inertia
    kind="",
    sources=("bardeen-press-teukolsky-1972",),
    validity="bodies so small that they merge before they fill a lobe, of any mass",
)

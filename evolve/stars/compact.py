"""Neutron stars, black holes and point masses: bodies that never overflow a lobe."""

from evolve.constants import C, G
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure, Text

NEUTRON_STAR_RADIUS = 1.72e-5  # solRad, 12 km, common practice
BLACK_HOLE_RADIUS = 6.0 * G / C**2  # solRad per solMass: last stable orbit without spin


class CompactKeys(NamedTuple):
    """Keys of a compact body. `per_mass` is the radius of a black hole over its mass."""

    radius: Annotated[float, Key("solRad", 0.0, 1e3, "radius; by its kind if not given")] = 0.0
    spin: Annotated[float, Key("", 0.0, 0.998, "dimensionless spin of a black hole")] = 0.0
    per_mass: float = 0.0


def structure(mass, radius, phase, keys):
    """A body of given radius that answers nothing.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Ignored.
    keys : CompactKeys

    Returns
    -------
    Structure
        Radius: of a neutron star 12 km, of a black hole 6 G m/c2 (for tables and drawings
        only), of a point mass 0, unless given.

    Notes
    -----
    No luminosity and no temperature of its own.

    References
    ----------
    Common practice.
    """
    size = keys.radius + keys.per_mass * mass
    return Structure(size, size, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0)


def prepare(mass, values):
    """Keys by the kind of body."""
    radius = values.get("radius")
    spin = values.get("spin") or 0.0
    if radius is not None:
        return CompactKeys(radius, spin)
    if values["kind"] == "black-hole":
        return CompactKeys(0.0, spin, BLACK_HOLE_RADIUS)
    return CompactKeys(NEUTRON_STAR_RADIUS if values["kind"] == "neutron-star" else 0.0, spin)


MODEL = StarModel(
    structure=structure,
    keys=CompactKeys,
    prepare=prepare,
    texts={
        "kind": Text(("neutron-star", "black-hole", "point-mass"), ..., "what the body is")
    },
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=False,
    mass_range=(1e-12, 1e12),
    gyration=0.4,
    kind="",
    sources=(),
    validity="bodies far smaller than their lobes; they merge instead of overflowing",
)

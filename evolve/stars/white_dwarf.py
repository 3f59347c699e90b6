"""White dwarfs, cold: the radius follows the mass."""

from math import sqrt

from evolve.constants import T_SUN
from evolve.laws.contract import NamedTuple
from evolve.stars.contract import StarModel, Structure

LARGEST = 1.43
"""Trial masses above this count as this much: the formula has no radius at 1.44."""


class WhiteDwarfKeys(NamedTuple):
    """Keys of a white dwarf; its temperature is a key of every star without one."""

    temperature: float = 1e4


def structure(mass, radius, phase, keys):
    """Radius of a zero-temperature white dwarf or degenerate remnant.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Ignored.
    keys : WhiteDwarfKeys

    Returns
    -------
    Structure
        R = 0.0114 [(m/1.44)^(-2/3) - (m/1.44)^(2/3)]^(1/2)
        [1 + 3.5 (m/0.00057)^(-2/3) + 0.00057/m]^(-2/3) solRad; zeta is its logarithmic slope.

    Notes
    -----
    Cold and of one composition: hot helium white dwarfs are larger by up to a few times. The
    temperature is the user's, constant, and matters to the scale height only.

    References
    ----------
    Eggleton, in Verbunt & Rappaport 1988, ApJ 332, 193, eq. 15.
    """
    m = mass if mass < LARGEST else LARGEST
    u = (m / 1.44) ** (2.0 / 3.0)
    v = (m / 0.00057) ** (-2.0 / 3.0)
    w = 0.00057 / m
    softening = 1.0 + 3.5 * v + w
    size = 0.0114 * sqrt(1.0 / u - u) * softening ** (-2.0 / 3.0)
    zeta = -(1.0 / u + u) / (3.0 * (1.0 / u - u)) + 2.0 / 3.0 * (7.0 / 3.0 * v + w) / softening
    heat = keys.temperature / T_SUN
    heat *= heat
    luminosity = size * size * heat * heat
    return Structure(
        size, size, luminosity, keys.temperature, zeta, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0
    )


def prepare(mass, values):
    """Keys with the temperature given, or 10000 K."""
    temperature = values.get("temperature")
    return WhiteDwarfKeys(1e4 if temperature is None else temperature)


MODEL = StarModel(
    structure=structure,
    keys=WhiteDwarfKeys,
    prepare=prepare,
    texts={},
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(1e-3, 1.43),
    gyration=0.2,
    kind="white-dwarf",
    sources=("verbunt-rappaport-1988",),
    validity="zero temperature; 0.001..1.43 solar masses",
)

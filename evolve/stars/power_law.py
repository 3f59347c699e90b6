"""A star whose radius is a power of its mass."""

from evolve.constants import T_SUN
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure
from evolve.stars.zero_age import zero_age_luminosity


class PowerLawKeys(NamedTuple):
    """Keys of a power law; `start_mass` is the mass at the start."""

    radius: Annotated[float, Key("solRad", 0.0, 1e5, "radius at the starting mass", True)]
    exponent: Annotated[float, Key("", -20.0, 20.0, "d ln R / d ln m")]
    luminosity: Annotated[
        float, Key("solLum", 0.0, 1e8, "luminosity; by the zero-age main sequence if not given")
    ] = 0.0
    start_mass: float = 1.0


def structure(mass, radius, phase, keys):
    """R = R0 (m/m0)^exponent, whatever happens.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Ignored.
    keys : PowerLawKeys

    Returns
    -------
    Structure

    Notes
    -----
    Convective, so that braking and tides may act on it; constant luminosity.

    References
    ----------
    None: the user's choice.
    """
    size = keys.radius * (mass / keys.start_mass) ** keys.exponent
    temperature = T_SUN * (keys.luminosity / (size * size)) ** 0.25
    return Structure(
        size, size, keys.luminosity, temperature, keys.exponent, 0.0, 0.0, 0.0, 1.0, mass, size
    )


def prepare(mass, values):
    """Keys with the starting mass and, if none is given, a luminosity."""
    light = values.get("luminosity")
    if light is None:
        light = zero_age_luminosity(min(max(mass, 0.1), 100.0))
    return PowerLawKeys(values["radius"], values["exponent"], light, mass)


MODEL = StarModel(
    structure=structure,
    keys=PowerLawKeys,
    prepare=prepare,
    texts={},
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(1e-6, 1e4),
    gyration=0.205,
    kind="gas",
    sources=("tout-1996",),
    validity="wherever the user's exponent means anything",
)

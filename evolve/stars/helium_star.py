"""Helium stars: burning on the helium main sequence, or semi-degenerate donors."""

from evolve.constants import T_SUN
from evolve.laws.contract import NamedTuple
from evolve.stars.contract import StarModel, Structure, Text


class HeliumStarKeys(NamedTuple):
    """Keys of a helium star: R = factor m^exponent."""

    factor: float = 0.212
    exponent: float = 0.654


def structure(mass, radius, phase, keys):
    """A helium star in equilibrium.

    Parameters
    ----------
    mass : float  [solMass]
    radius, phase : float
        Ignored.
    keys : HeliumStarKeys

    Returns
    -------
    Structure
        R = 0.212 m^0.654 burning helium (0.5..5 solar masses), 0.029 m^-0.19 semi-degenerate;
        L = 15262 m^10.25/(m^9 + 29.54 m^7.5 + 31.18 m^6 + 0.0469). All from memory.

    Notes
    -----
    Which of the two it is, the user says; it never switches by mass.

    References
    ----------
    Kippenhahn & Weigert 1990, Stellar Structure and Evolution (R, a fit); Savonije, de Kool &
    van den Heuvel 1986, A&A 155, 51 (semi-degenerate); Hurley, Pols & Tout 2000, MNRAS 315,
    543, eq. 77 (L).
    """
    size = keys.factor * mass**keys.exponent
    m6 = mass**6
    luminosity = 15262.0 * mass**10.25 / (
        m6 * mass**3 + 29.54 * m6 * mass**1.5 + 31.18 * m6 + 0.0469
    )
    temperature = T_SUN * (luminosity / (size * size)) ** 0.25
    return Structure(
        size, size, luminosity, temperature, keys.exponent, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0
    )


def prepare(mass, values):
    """Keys of the branch the config names."""
    return HeliumStarKeys(0.029, -0.19) if values["semi_degenerate"] == "yes" else HeliumStarKeys()


MODEL = StarModel(
    structure=structure,
    keys=HeliumStarKeys,
    prepare=prepare,
    texts={
        "semi_degenerate": Text(("yes", "no"), "no", "a semi-degenerate donor instead of a burning star")
    },
    relaxing=False,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(1e-3, 50.0),
    gyration=0.075,
    kind="helium",
    sources=("kippenhahn-weigert-1990", "savonije-dekool-vandenheuvel-1986", "hurley-pols-tout-2000"),
    validity="burning: 0.5..5 solar masses, equilibrium; semi-degenerate: donors below 0.2",
)

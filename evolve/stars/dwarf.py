"""Low-mass main-sequence stars, and the brown dwarfs they become as donors."""

from functools import lru_cache
from math import exp, log, sqrt
from typing import Annotated, NamedTuple

from evolve.constants import GRAVITATIONAL_TIME, T_SUN
from evolve.errors import DomainError
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.curves import cubics, interval
from evolve.stars.surface import FULLY_CONVECTIVE, convective_envelope, given
from evolve.stars.tables import builtin, checked

RELAXATION = -7.0 / (3.0 * GRAVITATIONAL_TIME)
LEAST, MOST = exp(-1.5), exp(1.5)
"""Trial states with R/R_eq beyond these relax as if it were there."""


class DwarfKeys(NamedTuple):
    """Keys of a dwarf.

    `knots` (n,) are ln m of the table's rows, `cubics` the coefficients of ln R_eq and ln L_eq
    over them; `mass_low`, `mass_high` [solMass] the ends of the table.
    """

    inflation: Annotated[
        float, Key("", -0.5, 1.0, "share by which R_eq exceeds the table's radius")
    ] = 0.0
    zeta_ad: Annotated[
        float, Key("", -10.0, 100.0, "d ln R / d ln m on losing mass at once")
    ] = -1.0 / 3.0
    knots: tuple[float, ...] = ()
    cubics: tuple[float, ...] = ()
    mass_low: float = 0.0
    mass_high: float = 0.0


def structure(mass, radius, phase, keys):
    """A low-mass star that relaxes to its equilibrium radius as an n = 3/2 polytrope.

    Parameters
    ----------
    mass : float  [solMass]
        Trial states beyond the ends of the table have the R_eq and L_eq of its ends.
    radius : float  [solRad]
    phase : float
        Not used.
    keys : DwarfKeys

    Returns
    -------
    Structure
        `thermal` -(7/3) (R L_eq/(G m^2)) (x^2 - x^-9) with x = R/R_eq(m), ln x bounded to
        +-1.5; `luminosity` L_eq x^2.

    Notes
    -----
    The energy of such a star is -(3/7) G m^2/R. x^2 is what it radiates at constant effective
    temperature, x^-9 what it burns with a temperature exponent of 6. The relaxation and the
    response -1/3 hold for a fully convective star, up to 0.35 solMass; above they are taken
    over as they stand, and the star counts as convective with the envelope of
    `convective_envelope`. The rows of the table are of one age: no evolution.

    References
    ----------
    D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391 (three terms of the radius); Baraffe et
    al. 1998, A&A 337, 403 and 2003, A&A 402, 701 (table, from memory).
    """
    x = log(mass)
    knots = keys.knots
    last = len(knots) - 1
    if x < knots[0]:
        x = knots[0]
    elif x > knots[last]:
        x = knots[last]
    i = interval(knots, x)
    x -= knots[i]
    i *= 8
    c = keys.cubics
    equilibrium = exp(c[i] + x * (c[i + 1] + x * (c[i + 2] + x * c[i + 3])))
    light = exp(c[i + 4] + x * (c[i + 5] + x * (c[i + 6] + x * c[i + 7])))
    ratio = radius / equilibrium
    luminosity = light * ratio * ratio
    temperature = T_SUN * sqrt(sqrt(light) / equilibrium)
    if ratio < LEAST:
        ratio = LEAST
    elif ratio > MOST:
        ratio = MOST
    square = ratio * ratio
    eighth = square * square
    eighth *= eighth
    thermal = RELAXATION * ratio * equilibrium * light / (mass * mass)
    thermal *= square - 1.0 / (eighth * ratio)
    envelope, depth = mass, radius
    if mass > FULLY_CONVECTIVE:
        envelope, depth = convective_envelope(mass, radius)
    return Structure(
        radius, equilibrium, luminosity, temperature, keys.zeta_ad, thermal, 0.0, 0.0, 1.0,
        envelope, depth,
    )  # fmt: skip


def prepare(mass, values):
    """The keys of a dwarf from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start.
    values : dict
        Optionally `inflation`, `zeta_ad`, and `table`: columns mass, radius, luminosity in
        place of the built-in one.

    Returns
    -------
    DwarfKeys

    Raises
    ------
    DomainError
        A table that makes no sense, or that ends before the star's mass.
    """
    inflation = given(values, "inflation", 0.0)
    if values.get("table"):
        knots, curves, low, high = _curves(values["table"], inflation)
    else:
        knots, curves, low, high = _builtin_curves(inflation)
    if not low <= mass <= high:
        raise DomainError(f"the mass {mass:g} is outside the table of masses, {low:g} to {high:g}")
    return DwarfKeys(inflation, given(values, "zeta_ad", -1.0 / 3.0), knots, curves, low, high)


def _curves(table, inflation):
    """Knots and cubics of a table, and the masses at its ends."""
    table = checked(table, "mass", positive=("mass", "radius", "luminosity"))
    knots = tuple(log(m) for m in table["mass"])
    radii = [log(radius * (1.0 + inflation)) for radius in table["radius"]]
    curves = cubics(knots, radii, [log(value) for value in table["luminosity"]])
    return knots, curves, table["mass"][0], table["mass"][-1]


@lru_cache(maxsize=64)
def _builtin_curves(inflation):
    return _curves(builtin("dwarf"), inflation)


MODEL = StarModel(
    structure=structure,
    keys=DwarfKeys,
    prepare=prepare,
    texts={
        "table": Text(
            None, None, "table of mass, radius, luminosity in place of the built-in one"
        )
    },
    relaxing=True,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(0.01, 1.0),
    gyration=0.205,  # n = 3/2 polytrope
    kind="gas",
    sources=("dantona-mazzitelli-ritter-1989", "baraffe-1998", "baraffe-2003"),
    validity="0.01..1 solMass at 5 Gyr, relaxing as a fully convective star (true to 0.35)",
    table={"mass": "solMass", "radius": "solRad", "luminosity": "solLum"},
)

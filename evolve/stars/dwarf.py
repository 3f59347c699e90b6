"""Low-mass main-sequence stars and brown dwarfs that relax on their thermal time."""

from math import exp, log

from evolve.constants import GRAVITATIONAL_TIME, T_SUN
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.tables import built_in, cubics, evaluate, interval, judge

RELAXATION = 7.0 / 3.0 / GRAVITATIONAL_TIME
WIDEST = exp(1.5)
"""Trial radii count as at most this many times the equilibrium radius, or its inverse."""


class DwarfKeys(NamedTuple):
    """Keys of a dwarf; `knots` (ln m), `radii` (ln R), `lights` (ln L) are its table."""

    inflation: Annotated[
        float, Key("", -0.5, 1.0, "share by which the equilibrium radius exceeds the table")
    ] = 0.0
    zeta_ad: Annotated[
        float, Key("", -1.0, 10.0, "adiabatic d ln R / d ln m; -1/3 holds up to 0.35 solar masses")
    ] = -1.0 / 3.0
    knots: tuple = ()
    radii: tuple = ()
    lights: tuple = ()


def structure(mass, radius, phase, keys):
    """A convective star that relaxes to the equilibrium radius of its mass.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float
        Ignored.
    keys : DwarfKeys

    Returns
    -------
    Structure
        thermal = -(7/3) (R L_eq/(G m2)) (x^2 - x^-9), x = R/R_eq; L = L_eq x^2.

    Notes
    -----
    A fully convective star is an n = 3/2 polytrope of energy -(3/7) G m2/R; x^2 is the
    surface luminosity at constant effective temperature, x^-9 the central burning, whose
    temperature exponent is taken as 6. No free parameter. Taken as convective throughout, also
    above 0.35 solar masses, where a radiative core grows. Outside the table's masses its last
    values hold; a run ends there (`validity`).

    References
    ----------
    D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391 (the split of the response); table of
    Baraffe et al. 1998, A&A 337, 403 and 2003, A&A 402, 701, from memory.
    """
    knots = keys.knots
    x = log(mass)
    if x < knots[0]:
        x = knots[0]
    elif x > knots[-1]:
        x = knots[-1]
    place = interval(knots, x)
    distance = x - knots[place]
    equilibrium = exp(evaluate(keys.radii, place, distance)) * (1.0 + keys.inflation)
    light = exp(evaluate(keys.lights, place, distance))
    ratio = radius / equilibrium
    if ratio > WIDEST:
        ratio = WIDEST
    elif ratio < 1.0 / WIDEST:
        ratio = 1.0 / WIDEST
    square = ratio * ratio
    fourth = square * square
    thermal = -RELAXATION * radius * light / (mass * mass) * (
        square - 1.0 / (fourth * fourth * ratio)
    )
    luminosity = light * square
    temperature = T_SUN * (luminosity / (radius * radius)) ** 0.25
    return Structure(
        radius, equilibrium, luminosity, temperature, keys.zeta_ad, thermal, 0.0, 0.0, 1.0, mass,
        radius,
    )  # fmt: skip


def prepare(mass, values):
    """Keys with the curves of the built-in table, or of the user's."""
    table = values.get("table")
    if table is None:
        table = built_in("dwarf")
    judge(table, "mass", ("mass", "radius", "luminosity"))
    knots = tuple(log(x) for x in table["mass"])
    low, high = table["mass"][0], table["mass"][-1]
    if not low <= mass <= high:
        from evolve.errors import DomainError

        raise DomainError(f"mass {mass:g} Msun is outside its table, {low:g}..{high:g} Msun")
    given = {name: values[name] for name in ("inflation", "zeta_ad") if values.get(name) is not None}
    return DwarfKeys(
        **given,
        knots=knots,
        radii=cubics(knots, [log(x) for x in table["radius"]]),
        lights=cubics(knots, [log(x) for x in table["luminosity"]]),
    )


MODEL = StarModel(
    structure=structure,
    keys=DwarfKeys,
    prepare=prepare,
    texts={"table": Text(None, None, "CSV of mass, radius, luminosity in place of the built-in one")},
    relaxing=True,
    phase="",
    start_phase=None,
    overflows=True,
    mass_range=(0.01, 1.0),
    gyration=0.205,
    kind="gas",
    sources=("baraffe-1998", "baraffe-2003", "dantona-mazzitelli-ritter-1989"),
    validity="0.01..1 solar masses, solar composition, 5 Gyr; polytropic response to 0.35",
    table={"mass": "solMass", "radius": "solRad", "luminosity": "solLum"},
)

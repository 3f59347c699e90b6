"""A star that follows a track of the user's own."""

from math import exp, log, nan
from typing import Annotated, NamedTuple

from evolve.errors import DomainError
from evolve.laws.contract import Key
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.curves import cubics, interval
from evolve.stars.relaxation import relaxation_rate
from evolve.stars.surface import effective_temperature, given, given_light, light
from evolve.stars.tables import checked

COOL = 6500.0
"""Below this effective temperature [K] a star counts as convective at its surface."""
MASS_TOLERANCE = 0.05
"""The starting mass may differ from the track's by this share."""
CURVES = 5
"""ln R, ln m, ln L, core mass, zeta_ad: four coefficients each in every interval."""


class TrackKeys(NamedTuple):
    """Keys of a track.

    `knots` (n,) are the ages [yr] of the rows, `cubics` the coefficients of ln R, ln m, ln L,
    core mass and zeta_ad over them; `phase_low`, `phase_high` [yr] the first and last age.
    """

    age: Annotated[float, Key("yr", 0.0, 1e13, "at the start; default: of the first row")] = nan
    zeta_ad: Annotated[
        float,
        Key("", -10.0, 100.0, "d ln R / d ln m on losing mass at once; default: column, or 0"),
    ] = nan
    zeta_eq: Annotated[
        float, Key("", -10.0, 100.0, "d ln R_eq / d ln m off the track's mass at an age")
    ] = 0.0
    luminosity: Annotated[
        float, Key("solLum", 0.0, 1e9, "constant, for a table without a column", open_low=True)
    ] = nan
    temperature: Annotated[
        float, Key("K", 0.0, 1e7, "constant, for a table without luminosities", open_low=True)
    ] = nan
    knots: tuple[float, ...] = ()
    cubics: tuple[float, ...] = ()
    phase_low: float = 0.0
    phase_high: float = 0.0


def structure(mass, radius, phase, keys):
    """A star that relaxes to the radius of a track at its age.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float  [yr]
        Age. Trial states outside the table have the values of its ends.
    keys : TrackKeys

    Returns
    -------
    Structure
        `equilibrium` R_track(age) (m/m_track(age))^zeta_eq; `thermal` ln(R_eq/R) R L/(G m^2)
        plus the growth of R_eq at constant mass.

    Notes
    -----
    Loss and gain of mass do not change the age: luminosity and core are the track's, whatever
    became of the star. Smooth monotone interpolation in age, of the logarithms of radius, mass
    and luminosity. Convective while cooler than 6500 K; the flag jumps there.

    References
    ----------
    D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391 (three terms of the radius).
    """
    age = phase
    if age < keys.phase_low:
        age = keys.phase_low
    elif age > keys.phase_high:
        age = keys.phase_high
    i = interval(keys.knots, age)
    x = age - keys.knots[i]
    i *= 4 * CURVES
    c = keys.cubics
    ln_radius = c[i] + x * (c[i + 1] + x * (c[i + 2] + x * c[i + 3]))
    growth = c[i + 1] + x * (2.0 * c[i + 2] + x * 3.0 * c[i + 3])
    if keys.zeta_eq != 0.0:
        ln_mass = c[i + 4] + x * (c[i + 5] + x * (c[i + 6] + x * c[i + 7]))
        ln_radius += keys.zeta_eq * (log(mass) - ln_mass)
        growth -= keys.zeta_eq * (c[i + 5] + x * (2.0 * c[i + 6] + x * 3.0 * c[i + 7]))
    equilibrium = exp(ln_radius)
    luminosity = exp(c[i + 8] + x * (c[i + 9] + x * (c[i + 10] + x * c[i + 11])))
    core = c[i + 12] + x * (c[i + 13] + x * (c[i + 14] + x * c[i + 15]))
    zeta = c[i + 16] + x * (c[i + 17] + x * (c[i + 18] + x * c[i + 19]))
    thermal = growth + relaxation_rate(mass * mass, radius, equilibrium, luminosity)
    temperature = effective_temperature(radius, luminosity)
    convective = 1.0 if temperature < COOL else 0.0
    envelope = mass - core
    if envelope < 0.0:
        envelope = 0.0
    return Structure(
        radius, equilibrium, luminosity, temperature, zeta, thermal, 1.0, core, convective,
        convective * envelope, convective * radius,
    )  # fmt: skip


def start_phase(mass, values):
    """Age at the start.

    Parameters
    ----------
    mass : float  [solMass]
    values : dict
        `table`, optionally `age`.

    Returns
    -------
    float  [yr]
        The key `age`, or that of the first row.
    """
    return given(values, "age", float(values["table"]["age"][0]))


def _checked(table):
    """The user's table, with a sentence for what makes no star of it."""
    positive = ["mass", "radius"] + ["luminosity"] * ("luminosity" in table)
    known = ("age", "mass", "radius", "luminosity", "core_mass", "zeta_ad")
    table = checked({k: v for k, v in table.items() if k in known}, "age", positive)
    for row, (core, mass) in enumerate(zip(table.get("core_mass", ()), table["mass"]), start=1):
        if not 0.0 <= core <= mass:
            raise DomainError(
                f"the table's core_mass in row {row} is {core:g}, outside 0 to the mass, {mass:g}"
            )
    return table


def _luminosities(table, values):
    """The column, or what the keys or the masses make of every row."""
    luminosity, temperature = given_light(values)
    if "luminosity" in table:
        if luminosity > 0.0 or temperature > 0.0:
            raise DomainError("the table has luminosities; luminosity and temperature follow")
        return table["luminosity"]
    return [
        light(mass, radius, luminosity, temperature)[0]
        for mass, radius in zip(table["mass"], table["radius"])
    ]


def prepare(mass, values):
    """The keys of a track from the values of a config.

    Parameters
    ----------
    mass : float  [solMass]
        At the start; within 5 % of the track's at that age.
    values : dict
        `table` with columns age, mass, radius and optionally luminosity, core_mass, zeta_ad;
        optionally `age`, `zeta_ad` (before the column), `zeta_eq`, and `luminosity` or
        `temperature` for a table without luminosities.

    Returns
    -------
    TrackKeys

    Raises
    ------
    DomainError
        A table that makes no sense, an age outside it, a mass that is not the track's.
    """
    table = _checked(values["table"])
    ages, rows = tuple(table["age"]), len(table["age"])
    age = start_phase(mass, values)
    if not ages[0] <= age < ages[-1]:
        raise DomainError(
            f"the age {age:.6g} yr is outside the table of ages, {ages[0]:.6g} to {ages[-1]:.6g}"
        )
    zeta = given(values, "zeta_ad")
    zetas = table.get("zeta_ad", [0.0] * rows) if zeta != zeta else [zeta] * rows
    curves = cubics(
        ages,
        [log(value) for value in table["radius"]],
        [log(value) for value in table["mass"]],
        [log(value) for value in _luminosities(table, values)],
        table.get("core_mass", [0.0] * rows),
        zetas,
    )
    keys = TrackKeys(
        age, zeta, given(values, "zeta_eq", 0.0), given(values, "luminosity"),
        given(values, "temperature"), ages, curves, ages[0], ages[-1],
    )  # fmt: skip
    expected = track_mass(age, keys)
    if abs(mass / expected - 1.0) > MASS_TOLERANCE:
        raise DomainError(
            f"the mass {mass:g} is not the track's: {expected:.4g} solMass at an age of "
            f"{age:.6g} yr"
        )
    return keys


def track_mass(age, keys):
    """Mass of the track itself at an age, for comparison with that of a star.

    Parameters
    ----------
    age : float  [yr]
    keys : TrackKeys

    Returns
    -------
    float  [solMass]
    """
    i = interval(keys.knots, age)
    x = age - keys.knots[i]
    c = keys.cubics[4 * CURVES * i + 4 : 4 * CURVES * i + 8]
    return exp(c[0] + x * (c[1] + x * (c[2] + x * c[3])))


MODEL = StarModel(
    structure=structure,
    keys=TrackKeys,
    prepare=prepare,
    texts={
        "table": Text(
            None, ..., "table of age, mass, radius, perhaps luminosity, core_mass, zeta_ad"
        )
    },
    relaxing=True,
    phase="age",
    start_phase=start_phase,
    overflows=True,
    mass_range=(1e-6, 1e6),
    gyration=0.1,
    kind="gas",
    sources=("dantona-mazzitelli-ritter-1989",),
    validity="as far as the user's own table goes",
    table={"age": "yr", "mass": "solMass", "radius": "solRad"},
)

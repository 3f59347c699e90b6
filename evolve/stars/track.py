"""A star that follows the user's own track: radius and more, read at its age."""

from math import exp, log

from evolve.constants import GRAVITATIONAL_TIME, T_SUN
from evolve.errors import DomainError
from evolve.laws.contract import Annotated, Key, NamedTuple
from evolve.stars.contract import StarModel, Structure, Text
from evolve.stars.tables import cubics, evaluate, interval, judge
from evolve.stars.zero_age import zero_age_luminosity


class TrackKeys(NamedTuple):
    """Keys of a track; the curves over age are cubics in the logarithm of their column."""

    age: Annotated[float, Key("yr", 0.0, 1e15, "age at the start; the first row's if not given")]
    zeta_ad: Annotated[float, Key("", -1.0, 50.0, "adiabatic d ln R / d ln m")] = 0.0
    zeta_eq: Annotated[
        float, Key("", -5.0, 50.0, "d ln R_eq / d ln m against the track's mass at the same age")
    ] = 0.0
    ages: tuple = ()
    masses: tuple = ()
    radii: tuple = ()
    lights: tuple = ()
    cores: tuple = ()
    zetas: tuple = ()
    has_zetas: float = 0.0


def structure(mass, radius, phase, keys):
    """A star that relaxes to its track's radius at its age.

    Parameters
    ----------
    mass : float  [solMass]
    radius : float  [solRad]
    phase : float  [yr]
        Age; overflow does not change it.
    keys : TrackKeys

    Returns
    -------
    Structure
        R_eq = R_track(age) (m/m_track(age))^zeta_eq; thermal = growth + ln(R_eq/R) R L/(G m2).

    Notes
    -----
    Monotone cubics between the rows; the ends of the table hold outside, where a run ends
    (`table_end`). Convective, for braking and tides.

    References
    ----------
    The user's table. Split of the response: D'Antona, Mazzitelli & Ritter 1989, A&A 225, 391.
    """
    ages = keys.ages
    age = ages[0] if phase < ages[0] else (ages[-1] if phase > ages[-1] else phase)
    place = interval(ages, age)
    distance = age - ages[place]
    log_mass = evaluate(keys.masses, place, distance)
    log_radius = evaluate(keys.radii, place, distance)
    luminosity = exp(evaluate(keys.lights, place, distance))
    core = evaluate(keys.cores, place, distance)
    equilibrium = exp(log_radius + keys.zeta_eq * (log(mass) - log_mass))
    i = 4 * place
    growth = (3.0 * keys.radii[i] * distance + 2.0 * keys.radii[i + 1]) * distance + keys.radii[i + 2]
    slope = (3.0 * keys.masses[i] * distance + 2.0 * keys.masses[i + 1]) * distance
    growth -= keys.zeta_eq * (slope + keys.masses[i + 2])
    thermal = growth + radius * luminosity / (GRAVITATIONAL_TIME * mass * mass) * log(
        equilibrium / radius
    )
    zeta = evaluate(keys.zetas, place, distance) if keys.has_zetas > 0.0 else keys.zeta_ad
    temperature = T_SUN * (luminosity / (radius * radius)) ** 0.25
    envelope = mass - core if mass > core else 0.0
    return Structure(
        radius, equilibrium, luminosity, temperature, zeta, thermal, 1.0, core, 1.0, envelope, radius
    )


def prepare(mass, values):
    """Keys with the curves of the user's table; missing luminosities are of the zero age."""
    table = values["table"]
    judge(table, "age", ("mass", "radius", "luminosity"))
    ages, rows = tuple(table["age"]), len(table["age"])
    age = values.get("age")
    if age is not None and not ages[0] <= age < ages[-1]:
        raise DomainError(f"age {age:.6g} yr is outside its table, {ages[0]:.6g}..{ages[-1]:.6g} yr")
    lights = table.get("luminosity") or [
        zero_age_luminosity(min(max(m, 0.1), 100.0)) for m in table["mass"]
    ]
    given = {name: values[name] for name in ("zeta_ad", "zeta_eq") if values.get(name) is not None}
    return TrackKeys(
        age=ages[0] if age is None else age,
        **given,
        ages=ages,
        masses=cubics(ages, [log(x) for x in table["mass"]]),
        radii=cubics(ages, [log(x) for x in table["radius"]]),
        lights=cubics(ages, [log(x) for x in lights]),
        cores=cubics(ages, table.get("core_mass") or [0.0] * rows),
        zetas=cubics(ages, table.get("zeta_ad") or [0.0] * rows),
        has_zetas=1.0 if table.get("zeta_ad") else 0.0,
    )


def start_phase(mass, values):
    """Age at the start [yr]."""
    return values["table"]["age"][0] if values.get("age") is None else values["age"]


MODEL = StarModel(
    structure=structure,
    keys=TrackKeys,
    prepare=prepare,
    texts={"table": Text(None, ..., "CSV or HDF5 of age, mass, radius and optional columns")},
    relaxing=True,
    phase="age",
    start_phase=start_phase,
    overflows=True,
    mass_range=(1e-3, 1e3),
    gyration=0.1,
    kind="gas",
    sources=("dantona-mazzitelli-ritter-1989",),
    validity="as far as the user's table goes",
    table={"age": "yr", "mass": "solMass", "radius": "solRad"},
)

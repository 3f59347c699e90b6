"""Everything a config may say, as data: sections, keys, units, ranges, defaults.

The keys of laws and stars are not listed here: they come from the tables of
`evolve.laws` and `evolve.stars`, so a new law or star is known as soon as it stands there.
"""

from functools import cache
from math import inf, isnan, pi
from typing import Any, NamedTuple

from evolve import laws, stars
from evolve.laws.contract import described_keys

REQUIRED = ...
"""The default of a key that must be given."""


class Entry(NamedTuple):
    """One key of a config.

    Attributes
    ----------
    doc : str
        Half a sentence.
    dimension : str or None
        What `evolve.config.units` knows by that name, or a unit text; None if the key
        takes no number.
    low, high, open_low, open_high
        The range, in internal units, and whether its ends are themselves excluded.
    words : tuple of str
        Words it takes, beside or in place of a number.
    default
        In internal units; `REQUIRED` where it must be given; None where it may be absent.
    kind : str
        "value" (a quantity or a word), "text" (free), "whole" (a whole number), "flag"
        (true or false), "table" (the path of a table).
    """

    doc: str
    dimension: str | None = None
    low: float = -inf
    high: float = inf
    open_low: bool = False
    open_high: bool = False
    words: tuple[str, ...] = ()
    default: Any = None
    kind: str = "value"


class Choice(NamedTuple):
    """A key of a section by which a law is chosen.

    Attributes
    ----------
    process : str
        The table of laws it chooses from.
    none : str
        The word for no law; "" where there must be one.
    default : str
    doc : str
    number : Entry or None
        What a number stands for in place of a name.
    number_law : str
        The law of the table that a number stands for; not to be chosen by name.
    shares : bool
        True if a table of shares, summing to 1, may be given in place of one name.
    standing : bool
        True if the keys of all laws of the process are there whichever is chosen.
    own_code : bool
        True if a user's own function may be named.
    when_there : str
        The law that is meant when the table stands without naming one; "" where it must.
    """

    process: str
    none: str
    default: str
    doc: str
    number: Entry | None = None
    number_law: str = ""
    shares: bool = False
    standing: bool = False
    own_code: bool = False
    when_there: str = ""


class Section(NamedTuple):
    """A table of a config: its own keys, and the choices whose laws bring more.

    `by_component`: the table stands for both components, or for one ([braking.A]). `autos`:
    keys of laws for which "auto" may be written, which is their default.
    """

    doc: str
    keys: dict[str, Entry] = {}
    choices: dict[str, Choice] = {}
    by_component: bool = False
    autos: tuple[str, ...] = ()


def _positive(dimension, doc, default=None, high=inf):
    return Entry(doc, dimension, 0.0, high, open_low=True, default=default)


def _share(doc, default):
    return Entry(doc, "number", 0.0, 1.0, default=default)


TOP = {
    "title": Entry("of the history", kind="text", default=""),
    "note": Entry("free text, copied into the archive", kind="text", default=""),
}

METHODS = ("LSODA", "RK45", "RK23", "DOP853", "Radau", "BDF")
ENGINES = ("auto", "plain", "compiled")
EVENTS = (
    "contact", "detachment", "both_lobes_filled", "unstable_overflow",
    "thermal_overflow_begins", "thermal_overflow_ends", "braking_stops", "braking_resumes",
    "ceiling_reached", "ceiling_left", "burning_begins", "burning_ends", "period_minimum",
    "period_maximum", "masses_equal", "circularised", "spin_orbit_instability",
    "common_envelope", "envelope_exhausted", "remnant_formed", "collapse", "kick",
    "inspiral", "merger", "unbound", "validity", "table_end",
)  # fmt: skip
"""Events at which a history may be told to end."""

SIZES = ("period", "separation", "fill", "contact")
"""Keys of [orbit] of which exactly one says how wide the orbit is."""

LONGEST_TIME = 1e13  # yr; far beyond any history, and still exact to hours in a float

SECTIONS = {
    "orbit": Section(
        "how wide, how eccentric; one of period, separation, fill, contact",
        {
            "period": _positive("time", "orbital period at the start", high=1e9),
            "separation": _positive("length", "semi-major axis at the start", high=1e12),
            "fill": _positive(
                "number", "R/(R_L (1-e)) of the component nearer its lobe", high=10.0
            ),
            "contact": Entry("start at contact: the same as fill = 1", kind="flag"),
            "eccentricity": Entry(
                "at the start", "number", 0.0, 1.0, open_high=True, default=0.0
            ),
            "mass_ratio": _positive("number", "mass of A over mass of B", high=1e6),
            "total_mass": _positive("mass", "mass of A and B together", high=1e12),
        },
    ),
    "waves": Section(
        "gravitational waves",
        choices={
            "law": Choice("waves", "off", "peters-1964", "torque of the waves", own_code=True)
        },
    ),
    "braking": Section(
        "magnetic braking; [braking] for both components, [braking.A] for one",
        {"stops_below": Entry("mass of the braking star", "mass", 0.0, 1e3, default=0.2)},
        {"law": Choice("braking", "off", "off", "torque of braking", own_code=True)},
        by_component=True,
    ),
    "wind": Section(
        "winds; [wind] for both components, [wind.A] for one",
        choices={
            "law": Choice("wind", "off", "off", "rate of the wind", own_code=True),
            "capture": Choice(
                "capture", "none", "none", "share that the companion catches",
                number=_share("share caught", None), standing=True,
            ),
        },
        by_component=True,
    ),
    "overflow": Section(
        "flow through the inner Lagrange point",
        {
            "contact_rate": _positive(
                "rate", "the rate that counts as contact where flow sets in early", 1e-12, 1.0
            )
        },
        {"law": Choice("overflow", "", "atmosphere", "rate of the overflow", own_code=True)},
    ),
    "acceptance": Section(
        "what the accretor keeps: the share, but no more than the ceiling",
        {"share": _share("of what reaches it", 1.0)},
        {
            "ceiling": Choice(
                "ceiling", "none", "none", "the most it keeps",
                number=_positive("rate", "the most it keeps", high=1e3), number_law="rate",
            )
        },
    ),
    "expulsion": Section(
        "how all the rest leaves",
        choices={
            "from": Choice(
                "expulsion", "", "accretor", "where it leaves from", shares=True, standing=True
            ),
            "consequential": Choice(
                "consequential", "none", "none",
                "angular momentum lost because of overflow, in place of that of expulsion",
                own_code=True,
            ),
        },
    ),
    "tides": Section(
        "tides; [tides] for both components, [tides.A] for one",
        {"spin": Entry("of the star at the start; else that of the orbit", "spin", 0.0, 1e9)},
        {
            "law": Choice("tides", "off", "off", "torque of the tides", when_there="hut-1981")
        },
        by_component=True,
        autos=("k_over_t",),
    ),
    "envelope": Section(
        "what follows unstable overflow",
        {
            "follows": Entry(
                "the next chapter", words=("stop", "common-envelope", "continue"),
                default="stop",
            ),
            "efficiency": _positive("number", "alpha of the common envelope", 1.0, 100.0),
            "binding": _positive("number", "lambda of the common envelope", 0.5, 100.0),
        },
    ),
    "kick": Section(
        "a sudden loss of mass of one component, with a kick: at a time, or when it collapses",
        {
            "time": _positive("time", "since the start; else when the star collapses"),
            "mass_lost": Entry("at that time", "mass", 0.0, 1e12, default=0.0),
            "speed": Entry("of the kick", "speed", 0.0, 1e9, default=0.0),
            "polar": Entry("angle from the star's orbital velocity", "angle", 0.0, pi, default=0.0),
            "azimuth": Entry(
                "angle about it; 0 is away from the companion, 90 deg along the orbit's axis",
                "angle", -2 * pi, 2 * pi, default=0.0,
            ),
            "anomaly": Entry(
                "true anomaly then, on an eccentric orbit; 180 deg is apastron", "angle",
                0.0, 2 * pi, default=pi,
            ),
            "seed": Entry(
                "draws the direction, isotropic, and the moment, in place of the angles",
                "number", 0, 2**32 - 1, kind="whole",
            ),
        },
        by_component=True,
    ),
    "limits": Section(
        "the largest masses",
        {
            "white_dwarf": _positive("mass", "beyond it a white dwarf collapses", 1.38, 1.44),
            "neutron_star": _positive(
                "mass", "beyond it a neutron star collapses", 2.2, 3.5
            ),
        },
    ),
    "end": Section(
        "the first of these ends the run",
        {
            "time": _positive("time", "since the start", 1e10, LONGEST_TIME),
            "period_below": _positive("time", "orbital period"),
            "period_above": _positive("time", "orbital period"),
            "rate_below": _positive("rate", "overflow of the donor in contact"),
            "event": Entry("name of an event", words=EVENTS),
        },
    ),
    "observer": Section(
        "who looks",
        {
            "distance": _positive("distance", "of the pair"),
            "inclination": Entry("of the orbit, 90 deg is edge-on", "angle", 0.0, pi),
        },
    ),
    "numerics": Section(
        "how it is integrated",
        {
            "method": Entry("of solve_ivp", words=METHODS, default="LSODA"),
            "engine": Entry("compiled or plain Python", words=ENGINES, default="auto"),
            "rtol": Entry("relative tolerance", "number", 1e-13, 1e-2, default=1e-6),
            "atol": _positive("number", "absolute tolerance, the same for every slot"),
            "max_step": _positive("time", "longest step"),
            "max_evaluations": Entry(
                "of the equations", "number", 1, 10**12, default=1_000_000, kind="whole"
            ),
        },
    ),
}  # fmt: skip

END_OF_COMPONENT = {"mass_below": _positive("mass", "ends the run below this mass", high=1e12)}
"""Keys of [end.A] and [end.B]."""


COMMON = ("mass", "star", "radius", "temperature", "luminosity", "gyration")
"""Keys that stand in every completed component; None where the model has no such key."""


def star_entries(model):
    """The keys that a component of one star model takes.

    Parameters
    ----------
    model : evolve.stars.contract.StarModel

    Returns
    -------
    dict of str to Entry
    """
    entries = {
        "mass": _positive("mass", "at the start", high=1e12),
        "star": Entry("radius model", words=tuple(stars.MODELS), default=REQUIRED),
    }
    entries |= {name: entry_of_key(*both) for name, both in described_keys(model.keys).items()}
    for name, text in model.texts.items():
        kind = "value" if text.choices else "table" if name == "table" else "text"
        default = text.default or None
        entries[name] = Entry(text.doc, words=text.choices or (), default=default, kind=kind)
    if model.relaxing and "radius" not in entries:
        radius = _positive("length", "at the start, out of equilibrium")
        entries["radius"] = radius._replace(words=("lobe",))
    entries["gyration"] = Entry("k2 of the moment of inertia k2 m R2", "number", 0.0, 1.0)
    return entries


def entry_of_key(key, default):
    """The entry of a parameter that a law or star describes.

    Parameters
    ----------
    key : evolve.laws.contract.Key
    default : float or Ellipsis
        NaN stands for "not given".
    """
    if isinstance(default, float) and isnan(default):
        default = None
    return Entry(key.doc, key.unit or "number", key.low, key.high, key.open_low, default=default)


def law_entries(law):
    """The keys of one law: name -> Entry."""
    return {name: entry_of_key(*both) for name, both in described_keys(law.keys).items()}


def laws_of(process):
    """The laws of a process by name; none for a process without a table."""
    return laws.TABLES.get(process, {})


def names_of(choice):
    """The words that a choice takes: no law, and the laws of its process."""
    names = [name for name in laws_of(choice.process) if name != choice.number_law]
    return ([choice.none] if choice.none else []) + names


def choice_entries(choice, law):
    """The keys that a law, or None, brings into the section where it is chosen.

    Keys that a star has too (the radius and the spin of an accretor) are the star's.
    """
    if law is None:
        return {}
    stars_own = star_keys()
    return {name: entry for name, entry in law_entries(law).items() if name not in stars_own}


def star_keys():
    """Every key of every star model: name -> names of the models that take it.

    One and the same dict at each call, so not to be changed.
    """
    return _owners(tuple(stars.MODELS))


@cache  # a study reads a config at each of its points, and this was nine tenths of it
def _owners(names):
    owners = {}
    for name in names:
        for key in star_entries(stars.MODELS[name]):
            owners.setdefault(key, []).append(name)
    return owners


__all__ = [
    "COMMON", "END_OF_COMPONENT", "ENGINES", "EVENTS", "METHODS", "REQUIRED", "SECTIONS", "SIZES",
    "TOP", "Choice", "Entry", "Section", "choice_entries", "entry_of_key", "law_entries",
    "laws_of", "names_of", "star_entries", "star_keys",
]  # fmt: skip

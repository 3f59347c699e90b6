"""The contract of a law: what it sees, what it gives back, how it describes its keys.

A law is a pure function of four NamedTuples of floats,

    law(star, other, orbit, keys) -> float

`star` is the component the law acts on (the donor of an overflow, the braking star, the
star that blows the wind), `other` its companion. A law never asks whether it is A or B.
Only arithmetic and the `math` module are allowed inside: the same function runs as plain
Python and compiled by numba. Rates of flow are >= 0; torques are signed, on the orbit.

What each process returns:

=============  ====================================================================
waves          torque [solMass solRad2 / yr2] and, as a second function, de/dt [1/yr]
braking        torque [solMass solRad2 / yr2] (<= 0)
overflow       rate [solMass / yr] through the inner Lagrange point (>= 0)
wind           rate [solMass / yr] (>= 0)
speed          speed of the wind at the companion [solRad / yr]
capture        share of the wind that the companion catches, 0..1
ceiling        the most the accretor (`star`) can accept [solMass / yr]
expulsion      specific angular momentum carried off [solRad2 / yr], `star` = donor
consequential  the same, in place of that of expulsion, per unit of *overflow*
tides          torque on the spin of `star` [solMass solRad2 / yr2]; and de/dt [1/yr]
=============  ====================================================================

A new law is one such function, its Keys, and one line in its process's table.
"""

from functools import cache
from typing import Annotated, Any, Callable, NamedTuple, get_args, get_type_hints


class Star(NamedTuple):
    """One component as a law sees it. Every field is a float.

    mass [solMass], radius [solRad], lobe (Roche-lobe radius, at periastron if eccentric)
    [solRad], luminosity [solLum], temperature (effective) [K], core_mass [solMass],
    convective (1.0 with a convective envelope, else 0.0), zeta (d ln R / d ln m at once),
    spin (angular frequency) [rad/yr], gyration (k2 of I = k2 m R2),
    envelope_mass and envelope_depth (of the convective envelope) [solMass, solRad].
    """

    mass: float
    radius: float
    lobe: float
    luminosity: float
    temperature: float
    core_mass: float
    convective: float
    zeta: float
    spin: float
    gyration: float
    envelope_mass: float
    envelope_depth: float


class Orbit(NamedTuple):
    """The orbit as a law sees it. Every field is a float.

    separation (semi-major axis) [solRad], eccentricity, omega (mean motion) [rad/yr],
    angular_momentum [solMass solRad2 / yr], total_mass [solMass].
    """

    separation: float
    eccentricity: float
    omega: float
    angular_momentum: float
    total_mass: float


class NoKeys(NamedTuple):
    """The keys of a law that has none (numba wants at least one field)."""

    unused: float = 0.0


class Key(NamedTuple):
    """How a config writes one parameter; stands in the annotation of a Keys field.

    `unit` is the internal unit as astropy spells it ("" for a pure number), `low` and
    `high` the closed range of sense, `doc` half a sentence. A field without a default is
    a key that must be given. `open_low`: the lower end itself is not allowed.
    """

    unit: str
    low: float
    high: float
    doc: str
    open_low: bool = False


class Law(NamedTuple):
    """One entry of a process's table.

    `function` obeys the contract; `keys` is its NamedTuple class; `sources` names entries
    of `evolve.laws.bibliography`; `validity` says in words where the formula holds.
    `second` is the companion function of processes that have two (de/dt of the waves).
    """

    function: Callable
    keys: type
    sources: tuple[str, ...]
    validity: str
    second: Callable | None = None


@cache
def described_keys(keys: type) -> dict[str, tuple[Key, Any]]:
    """The keys of a Keys class: name -> (Key, default), default `...` where it must be given.

    Parameters
    ----------
    keys : type
        A NamedTuple class whose fields are annotated `Annotated[float, Key(...)]`. Fields
        without such an annotation (tables, resolved texts) are no keys of a config.

    Returns
    -------
    dict
        In the order of the fields; one and the same at each call, so not to be changed.
    """
    described = {}
    for name, hint in get_type_hints(keys, include_extras=True).items():
        record = next((part for part in get_args(hint)[1:] if isinstance(part, Key)), None)
        if record is not None:
            described[name] = (record, keys._field_defaults.get(name, ...))
    return described


__all__ = ["Annotated", "Key", "Law", "NamedTuple", "NoKeys", "Orbit", "Star", "described_keys"]

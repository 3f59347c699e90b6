"""The contract of a star: one function that answers for the whole radius model.

    structure(mass, radius, phase, keys) -> Structure

`mass` [solMass]; `radius` [solRad] is the integrated radius of a relaxing star and is
ignored by a star whose radius is a formula; `phase` is the model's own clock (burnt
fraction, core mass, age ...) and is ignored by models without one; `keys` is the model's
Keys (floats, and tables as tuples of numbers). Only arithmetic and the `math` module: the
same function runs plain and compiled.
"""

from typing import Any, Callable, NamedTuple


class Structure(NamedTuple):
    """What a star model answers. Every field is a float.

    radius            the actual radius [solRad]
    equilibrium       the radius it relaxes to [solRad]; the radius itself for a formula star
    luminosity        [solLum]
    temperature       effective [K]
    zeta              d ln R / d ln m on losing mass at once
    thermal           d ln R / dt at constant mass: relaxation and growth together [1/yr]
    phase_rate        d phase / dt [1/yr or solMass/yr]; 0 without a phase
    core_mass         [solMass]; 0 without a core
    convective        1.0 with a convective envelope, else 0.0
    envelope_mass     of the convective envelope [solMass]; 0 without one
    envelope_depth    of the convective envelope [solRad]; 0 without one
    """

    radius: float
    equilibrium: float
    luminosity: float
    temperature: float
    zeta: float
    thermal: float
    phase_rate: float
    core_mass: float
    convective: float
    envelope_mass: float
    envelope_depth: float


class Text(NamedTuple):
    """A key of a star that takes a word: what is allowed, the default, half a sentence.

    `choices` is a tuple of words, or None for a free text (the path of a table). A default
    of `...` means that the key must be given.
    """

    choices: tuple[str, ...] | None
    default: Any
    doc: str


class StarModel(NamedTuple):
    """One entry of the table of stars.

    structure   the function above
    keys        its NamedTuple class; annotated fields are keys of the config
    prepare     (mass, values) -> keys: turns the values of a config (floats in internal
                units; words; tables as dict of column -> list of float) into the model's
                Keys. Raises DomainError with one sentence if they make no star.
    texts       the keys that take a word: name -> Text
    relaxing    True if ln R is integrated; False if the radius is a formula
    phase       name of the model's own clock ("" if none)
    start_phase (mass, values) -> float, the phase at the start (None without a phase)
    overflows   True if it can lose mass through its lobe; a compact star merges instead
    mass_range  (low, high) [solMass] within which the model means anything
    gyration    k2 by default
    kind        "gas", "white-dwarf", "helium", "neutron-star", "black-hole", "point-mass"
                or "" where a key of the config tells
    sources     entries of `evolve.laws.bibliography`
    validity    where it holds, in words
    table       (columns that must be there, in a table the user names; units) or None
    """

    structure: Callable
    keys: type
    prepare: Callable
    texts: dict[str, Text]
    relaxing: bool
    phase: str
    start_phase: Callable | None
    overflows: bool
    mass_range: tuple[float, float]
    gyration: float
    kind: str
    sources: tuple[str, ...]
    validity: str
    table: dict[str, str] | None = None

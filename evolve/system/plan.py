"""Turns a completed config into the plan of the equations and the values they take."""

import ast
import inspect
import textwrap
from functools import lru_cache
from typing import NamedTuple

from evolve.laws import find
from evolve.laws.acceptance import accepted, burning_share, radiative_efficiency
from evolve.laws.contract import NoKeys
from evolve.stars import MODELS
from evolve.system.layout import OTHER, Plan, PlanOfComponent


class Chosen(NamedTuple):
    """One law as it acts in a config: its name in the config, its record, its keys."""

    name: str
    law: object
    keys: tuple


class Laws(NamedTuple):
    """Every law that acts. A missing one is None; `capture` may also be a share."""

    waves: Chosen | None
    braking: dict
    wind: dict
    capture: dict
    overflow: Chosen
    ceiling: dict
    expulsion: dict
    consequential: Chosen | None
    tides: dict


def choose_laws(config):
    """The laws of a config with their keys filled in.

    Parameters
    ----------
    config : evolve.config.Config

    Returns
    -------
    Laws
    """
    values = config.values

    def chosen(process, section, name=None, place=""):
        name = name or section["law"]
        if name in ("off", "none"):
            return None
        law = config.user_laws.get(f"{process}{place}") or find(process, name)
        filled = {f: section[f] for f in law.keys._fields if section.get(f) is not None}
        return Chosen(name, law, law.keys(**filled))

    expulsion, acceptance = values["expulsion"], values["acceptance"]
    return Laws(
        waves=chosen("waves", values["waves"]),
        braking={
            c: chosen("braking", values["braking"][c], place=f":{c}") if _brakes(values[c]) else None
            for c in "AB"
        },
        wind={c: chosen("wind", values["wind"][c], place=f":{c}") for c in "AB"},
        capture={c: _capture(values["wind"][c]) for c in "AB"},
        overflow=chosen("overflow", values["overflow"]),
        ceiling={c: _ceiling(acceptance, values[c]) for c in "AB"},
        expulsion={
            way: (weight, chosen("expulsion", expulsion, way))
            for way, weight in expulsion["from"].items()
            if weight > 0.0
        },
        consequential=chosen("consequential", expulsion, expulsion["consequential"]),
        tides={c: chosen("tides", values["tides"][c], place=f":{c}") for c in "AB"},
    )


def _brakes(component):
    """Whether a star's model can have a convective envelope at all."""
    return MODELS[component["star"]].kind == "gas"


def _capture(section):
    if section["law"] == "off" or section["capture"] in ("none", 0.0):
        return None
    if isinstance(section["capture"], float):
        return section["capture"]
    law = find("capture", section["capture"])
    filled = {f: section[f] for f in law.keys._fields if section.get(f) is not None}
    return Chosen(section["capture"], law, law.keys(**filled))


def _ceiling(acceptance, component):
    ceiling = acceptance["ceiling"]
    if ceiling == "none":
        return None
    if ceiling == "hydrogen-burning-band" and component["star"] != "white-dwarf":
        return None
    name = "rate" if isinstance(ceiling, float) else ceiling
    law = find("ceiling", name)
    known = {**acceptance, **component, "rate": ceiling}
    known["black_hole"] = float(component.get("kind") == "black-hole")
    filled = {f: known[f] for f in law.keys._fields if isinstance(known.get(f), float)}
    return Chosen(name, law, law.keys(**filled))


def plan_of(config, laws):
    """The plan of a config's equations, and the functions its text calls by name.

    Returns
    -------
    plan : Plan
    functions : dict
        Name in the text -> function.
    """
    values = config.values
    models = {c: MODELS[values[c]["star"]] for c in "AB"}
    functions = {}
    for c in "AB":
        functions[f"structure_{c}"] = models[c].structure
        for process, name in (("braking", f"braking_{c}_torque"), ("wind", f"wind_{c}_rate")):
            if chosen := getattr(laws, process)[c]:
                functions[name] = chosen.law.function
        if isinstance(laws.capture[c], Chosen):
            functions[f"capture_{c}_share"] = laws.capture[c].law.function
        if laws.tides[c]:
            functions[f"tides_{c}_torque"] = laws.tides[c].law.function
            functions[f"tides_{c}_eccentricity"] = laws.tides[c].law.second
        if laws.ceiling[c]:
            functions[f"ceiling_{c}_rate"] = laws.ceiling[c].law.function
            functions["accepted_rate"] = accepted
            if laws.ceiling[c].law.second:
                functions[f"ceiling_{c}_edge"] = laws.ceiling[c].law.second
                functions["burning_share"] = burning_share
    if laws.waves:
        functions["waves_torque"] = laws.waves.law.function
        if values["orbit"]["eccentricity"] > 0.0:
            functions["waves_eccentricity"] = laws.waves.law.second
    if laws.overflow.name == "atmosphere":
        functions["overflow_excess"] = laws.overflow.law.second
    if laws.overflow.name != "locked":
        functions["overflow_rate"] = laws.overflow.law.function
    for way, (_, chosen) in laws.expulsion.items():
        functions[f"expulsion_{_identifier(way)}"] = chosen.law.function
    if laws.consequential:
        functions["consequential_loss"] = laws.consequential.law.function
    plan = Plan(
        order="".join(sorted("AB", key=lambda c: (values[c]["star"], repr(values[c])))),
        components={c: _plan_of_component(models[c], laws, c, functions) for c in "AB"},
        eccentric=values["orbit"]["eccentricity"] > 0.0,
        waves=laws.waves is not None,
        overflow=laws.overflow.name,
        expulsion=tuple(_identifier(way) for way in laws.expulsion),
        consequential=laws.consequential is not None,
        imports=_imports(functions),
    )
    return plan, functions


def _identifier(way):
    return way.replace("-", "_")


@lru_cache(maxsize=256)
def fields_read(function, argument):
    """The fields that a law reads of one of its arguments, from its source.

    Parameters
    ----------
    function : callable
        A law in plain Python.
    argument : int
        Position of the argument.

    Returns
    -------
    frozenset of str or None
        None if the argument is used in any other way than by its fields, or the source is
        not to be had.
    """
    try:
        tree = ast.parse(textwrap.dedent(inspect.getsource(function)))
    except (OSError, SyntaxError, TypeError):
        return None
    name = tree.body[0].args.args[argument].arg
    uses = [node for node in ast.walk(tree) if isinstance(node, ast.Name) and node.id == name]
    reads = [
        node
        for node in ast.walk(tree)
        if isinstance(node, ast.Attribute) and isinstance(node.value, ast.Name)
        and node.value.id == name
    ]  # fmt: skip
    return frozenset(node.attr for node in reads) if len(reads) == len(uses) else None


def _plan_of_component(model, laws, c, functions):
    capture, ceiling = laws.capture[c], laws.ceiling[c]
    acting = laws.braking[c] or laws.wind[c] or laws.tides[c] or model.relaxing or model.phase
    # laws in which c is the companion, and the waves, in which it is either
    seen = [(f, 1) for name, f in functions.items() if not name.startswith("structure")]
    seen += [(functions["waves_torque"], 0)] if laws.waves else []
    seen += [(f, 0) for name, f in functions.items() if name.startswith("ceiling")]
    reads = [fields_read(f, n) for f, n in seen]
    bare = not acting and all(fields is not None and fields <= {"mass"} for fields in reads)
    return PlanOfComponent(
        relaxing=model.relaxing,
        phase=model.phase,
        overflows=model.overflows,
        braking=laws.braking[c] is not None,
        wind=laws.wind[c] is not None,
        capture="" if capture is None else "share" if isinstance(capture, float) else "law",
        tides=laws.tides[c] is not None,
        ceiling="" if ceiling is None else "band" if ceiling.law.second else "plain",
        bare=bare,
    )


def _imports(functions):
    lines = [
        "from evolve.constants import C, G",
        "from evolve.laws.contract import Orbit, Star",
        "from evolve.orbit.lobes import lobe_fraction, lobe_slope",
    ]
    return tuple(
        lines
        + [
            f"from {function.__module__} import {function.__name__} as {name}"
            for name, function in functions.items()
            if function.__module__.startswith("evolve.")
        ]
    )


def parameters_of(config, laws, slots, star_keys):
    """The values that go with a plan, in the order its text unpacks them.

    Parameters
    ----------
    slots : evolve.system.layout.Layout
    star_keys : dict
        "A" and "B" -> the Keys of the star's model.

    Returns
    -------
    tuple
        Of NamedTuples of floats; the first holds the plan's settings.
    """
    values = config.values
    settings = {"momentum_low": 1e-12, "momentum_high": 1e12}
    parts = {"star_keys_A": star_keys["A"], "star_keys_B": star_keys["B"]}
    parts["waves_keys"] = laws.waves and laws.waves.keys
    parts["overflow_keys"] = laws.overflow.keys
    parts["consequential_keys"] = laws.consequential and laws.consequential.keys
    total = values["A"]["mass"] + values["B"]["mass"]
    for c in "AB":
        model = MODELS[values[c]["star"]]
        gyration = values[c].get("gyration")
        # the energy that a black hole sets free is lost to its mass
        spin = values[c].get("spin") or 0.0
        black_hole = values[c].get("kind") == "black-hole"
        retained = 1.0 - radiative_efficiency(spin) if black_hole else 1.0
        settings[f"retained_{c}"] = retained
        settings[f"share_{c}"] = retained * values["acceptance"]["share"]
        settings[f"mass_low_{c}"] = 0.5 * max(model.mass_range[0], 1e-6 * values[c]["mass"])
        settings[f"mass_high_{c}"] = 2.0 * total
        settings[f"gyration_{c}"] = model.gyration if gyration is None else gyration
        settings[f"capture_share_{c}"] = laws.capture[c]
        for process in ("braking", "wind", "capture", "ceiling", "tides"):
            chosen = getattr(laws, process)[c]
            parts[f"{process}_keys_{c}"] = getattr(chosen, "keys", None)
    for way, (weight, chosen) in laws.expulsion.items():
        settings[f"weight_{_identifier(way)}"] = weight
        parts[f"expulsion_keys_{_identifier(way)}"] = chosen.keys
    parts["settings"] = tuple(float(settings[name]) for name in slots.settings)
    return tuple(NoKeys() if parts[name] is None else parts[name] for name in slots.parameters)


__all__ = ["OTHER", "Chosen", "Laws", "choose_laws", "parameters_of", "plan_of"]

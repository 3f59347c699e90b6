"""Completes a config and finds everything that is wrong with it, all at once."""

from evolve import stars
from evolve.config.draws import read_draws
from evolve.config.components import complete_component, judge_pair, settle_masses
from evolve.config.reading import Reading
from evolve.config.schema import SECTIONS, TOP
from evolve.config.sections import complete_sections
from evolve.errors import ConfigError


class Completed:
    """What a check gives back: `values`, `user_laws`, `warnings`."""

    def __init__(self, values, user_laws, warnings):
        self.values, self.user_laws, self.warnings = values, user_laws, warnings


def complete(raw, name, files, allow_code=False, as_set=()):
    """The completed config of a config as written.

    Parameters
    ----------
    raw : dict
        As TOML gives it.
    name : str
        What messages call it.
    files : evolve.config.files.Files
    allow_code : bool
    as_set : iterable of str
        Keys set beside the file, for the messages.

    Returns
    -------
    Completed
        `values`: every key in internal units, in the order of the schema.

    Raises
    ------
    ConfigError
        With every problem found.
    """
    reading = Reading(name, files, allow_code, as_set)
    known = [*TOP, "A", "B", *SECTIONS, "draw"]
    for key in raw:
        if key not in known:
            reading.unknown(key, raw[key], known)
    values = {key: reading.entry(entry, raw, key, key) for key, entry in TOP.items()}
    values |= {c: complete_component(reading, raw, c) for c in "AB"}
    values |= complete_sections(reading, raw)
    if settle_masses(reading, raw, values) and values["A"] and values["B"]:
        judge_pair(reading, raw, values)
    _judge_waves(reading, values)
    values["draw"] = read_draws(reading, reading.table(raw, "draw", "draw"))
    if reading.problems:
        raise ConfigError(reading.problems)
    _warn_of_idle_braking(reading, raw, values)
    return Completed(values, reading.user_laws, reading.warnings)


def _judge_waves(reading, values):
    """A user's law of waves must say what becomes of the eccentricity, if there is one."""
    law = reading.user_laws.get("waves")
    if law is not None and law.second is None and values["orbit"]["eccentricity"]:
        reading.problem(
            "waves.law",
            f"has no {law.function.__name__}_eccentricity beside it; allowed with "
            "orbit.eccentricity above 0: a law with its de/dt",
            values["waves"]["law"],
        )


def _warn_of_idle_braking(reading, raw, values):
    """Braking asked for by name of a star that cannot have a convective envelope."""
    for c in "AB":
        asked = c in raw.get("braking", {}) and values["braking"][c]["law"] != "off"
        star = values[c]["star"]
        if asked and stars.MODELS[star].kind != "gas":
            reading.warnings.append(
                f"{reading.name}: [braking.{c}] has no effect: {star} has no convective envelope"
            )


__all__ = ["Completed", "complete"]

"""Configs drawn from values with errors, or from the [draw] table of a config."""

import numpy as np

from evolve.config import read_config
from evolve.config.draws import Drawn
from evolve.config.settings import parse_setting
from evolve.config.units import parse_uncertain
from evolve.errors import ConfigError
from evolve.studies.draws import draw

TRIES = 100
"""Draws that make no legal config are drawn again, so often at most."""


def split_settings(settings):
    """Part "KEY=VALUE" texts into plain ones and those with an error.

    Parameters
    ----------
    settings : iterable of str

    Returns
    -------
    plain : list of str
        Those with an error are among them with their central value.
    uncertain : dict of Drawn
        By key.
    """
    plain, uncertain = [], {}
    for text in settings:
        key, value = parse_setting(text)
        drawn = _with_error(value)
        if drawn is None:
            plain.append(text)
            continue
        uncertain[key] = drawn
        central = drawn.text(drawn.first)
        plain.append(f'{key}="{central}"' if drawn.unit else f"{key}={central}")
    return plain, uncertain


def _with_error(value):
    """What "0.60+-0.02 Msun" is drawn from; None for a value without an error."""
    if not isinstance(value, str) or "+" not in value[1:]:
        return None
    words = value.strip().rsplit(" ", 1)
    unit = words[1] if len(words) == 2 and words[1][:1].isalpha() else ""
    try:
        found = parse_uncertain(words[0] if unit else value, "number")
    except ConfigError:
        return None
    return Drawn("normal", *found, unit) if found[1] or found[2] else None


def numbers(generator, drawn, count):
    """Draws of one key in the unit written, ndarray (count,)."""
    if drawn.kind == "normal":
        return draw(generator, drawn.first, drawn.second, drawn.third, count)
    if drawn.kind == "uniform":
        return generator.uniform(drawn.first, drawn.second, count)
    return np.exp(generator.uniform(np.log(drawn.first), np.log(drawn.second), count))


def drawn_configs(config, keys, count, seed):
    """Configs with drawn values.

    Parameters
    ----------
    config : Config
    keys : dict of Drawn
    count, seed : int

    Yields
    ------
    Config
        The same ones for the same seed.

    Raises
    ------
    ConfigError
        If hardly any draw is legal.
    """
    if count < 2:
        raise ConfigError(f"--draws {count}: allowed is 2 or more")
    generator = np.random.default_rng(seed)
    for _ in range(count):
        yield _one(config, keys, generator)


def _one(config, keys, generator):
    for _ in range(TRIES):
        changes = {
            key: drawn.text(numbers(generator, drawn, 1)[0]) for key, drawn in keys.items()
        }
        try:
            return read_config(config, set=changes)
        except ConfigError as error:
            refused = error
    raise ConfigError(f"none of {TRIES} draws makes a legal config; the last one: {refused}")

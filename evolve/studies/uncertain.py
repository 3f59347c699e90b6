"""Configs drawn from values with errors."""

import numpy as np

from evolve.config import read_config
from evolve.config.units import parse_uncertain
from evolve.errors import ConfigError
from evolve.studies.draws import draw


def split_settings(settings):
    """Part "KEY=VALUE" texts into plain ones and those with an error.

    Parameters
    ----------
    settings : iterable of str

    Returns
    -------
    plain : list of str
        Those with an error are among them with their central value.
    uncertain : dict of (number, plus, minus, unit)
        Key -> the value and its errors in the unit written.
    """
    plain, uncertain = [], {}
    for text in settings:
        key, equals, value = text.partition("=")
        parts = _parts(value.strip().strip('"')) if equals else None
        if parts is None:
            plain.append(text)
            continue
        uncertain[key.strip()] = parts
        plain.append(f'{key.strip()}="{parts[0]!r} {parts[3]}"' if parts[3] else f"{key.strip()}={parts[0]!r}")
    return plain, uncertain


def _parts(text):
    """Number, errors and unit of "0.60+-0.02 Msun"; None if it has no errors."""
    number, _, unit = text.partition(" ") if "+" in text else (text, "", "")
    if "+-" not in text and not ("+" in text[1:] and "-" in text[1:]):
        return None
    words = text.rsplit(" ", 1)
    unit = words[1] if len(words) == 2 and words[1][:1].isalpha() else ""
    bare = words[0] if unit else text
    try:
        value, plus, minus = parse_uncertain(bare, "number")
    except ConfigError:
        return None
    return value, plus, minus, unit


def drawn_configs(config, uncertain, count, seed):
    """Configs with drawn values.

    Parameters
    ----------
    config : Config
    uncertain : dict
        As `split_settings` gives it.
    count, seed : int

    Yields
    ------
    Config
        The same ones for the same seed. Draws that make no legal config are drawn again, a
        hundred times at most.

    Raises
    ------
    ConfigError
        If hardly any draw is legal.
    """
    if count < 2:
        raise ConfigError(f"--draws {count}: allowed is 2 or more")
    generator = np.random.default_rng(seed)
    for _ in range(count):
        for _ in range(100):
            values = {key: draw(generator, *parts[:3], 1)[0] for key, parts in uncertain.items()}
            changes = {
                key: f"{float(value)!r} {uncertain[key][3]}" if uncertain[key][3] else float(value)
                for key, value in values.items()
            }
            try:
                drawn = read_config(config, set=changes)
                break
            except ConfigError as error:
                refused = error
        else:
            raise ConfigError(f"none of 100 draws makes a legal config; the last one: {refused}")
        yield drawn

"""What the tests of the compiled engine share."""

import random
import sys
from pathlib import Path

import numpy as np

from evolve.config import read_config
from evolve.integrate import advance, engine
from evolve.integrate.assemble import history_of
from evolve.integrate.run import Run
from evolve.system.pair import Pair

sys.path.insert(0, str(Path(__file__).parents[1] / "histories"))
CONFIGS = sorted(Path(__file__).parents[2].joinpath("configs").glob("*.toml"))
RED_DWARF = next(path for path in CONFIGS if path.stem == "red_dwarf")


def walked(pair, inspiral=False, tell=None):
    """The engine with nothing compiled: the same walk and equations as plain Python."""
    text, names = engine._equations(pair, inspiral)

    def uncompiled(*signature, **options):
        return lambda function: function

    names |= {"cfunc": uncompiled, "carray": lambda numbers, shape: numbers}
    names |= {"OPTIONS": {}, "CACHED": False, "shrinking_rate": engine.shrinking_rate}
    exec(pair.equations, names)
    exec(text, names)
    numbers = engine.flat(pair.parameters)
    return engine.Engine(advance.advance, names["rates_at"], names["look"], None, numbers)


def walked_history(config, monkeypatch):
    """A history by the walk in plain Python."""
    with monkeypatch.context() as patch, np.errstate(all="ignore"):
        patch.setattr(engine, "engine_of", walked)
        return history_of(Run(Pair(read_config(config)), None, compiled=True).run())


def random_configs(count, seed):
    """Legal random configs that can start."""
    from test_random_configs import random_config

    from evolve.errors import ConfigError

    rng, found = random.Random(seed), []
    while len(found) < count:
        config = random_config(rng)
        try:
            Pair(read_config(config))
        except ConfigError:
            continue
        found.append(config)
    return found


def names_of(history):
    """The events in their order."""
    return [(event.name, event.component) for event in history.events]


def distance(one, other):
    """Largest difference of an event's time, relative to it or to a thousandth of the end."""
    end = other.events[-1].time
    return max(
        abs(a.time - b.time) / max(abs(b.time), 1e-3 * end, 1e-300)
        for a, b in zip(one.events, other.events, strict=True)
    )

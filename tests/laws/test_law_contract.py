"""Every law of every table: finite, of the right sign, pure, documented, compiles."""

import re
from math import isfinite

import pytest
from law_helpers import compiled, every_law, keys_of

from evolve.laws import TABLES, bibliography, find
from evolve.laws.contract import Law, described_keys
from evolve.laws.samples import SIGNS, sample_states

LAWS = list(every_law())
IDS = [f"{process}/{name}/{part}" for process, name, part, _, _ in LAWS]
STATES = sample_states()

# The second functions: waves and tides give de/dt, overflow the excess, the band its other edge.
SECOND_SIGNS = {"waves": -1, "overflow": 0, "ceiling": 1, "tides": 0}

# What a law must vanish with: process or (process, name) -> change of (star, other, orbit, keys).
NO_SPIN = {"star": {"spin": 0.0}}
NO_LIGHT = {"star": {"luminosity": 0.0}}
ROUND = {"orbit": {"eccentricity": 0.0}}
NO_MOMENTUM = {"orbit": {"angular_momentum": 0.0}}
DRIVERS = {
    ("waves", "peters-1964", "function"): {"keys": {"strength": 0.0}},
    ("waves", "peters-1964", "second"): ROUND,
    ("braking", "rappaport-verbunt-joss-1983", "function"): NO_SPIN,
    ("braking", "verbunt-zwaan-1981", "function"): NO_SPIN,
    ("braking", "andronov-2003", "function"): NO_SPIN,
    ("braking", "ivanova-taam-2003", "function"): NO_SPIN,
    ("overflow", "atmosphere", "function"): {"star": {"lobe": 1e9}},
    ("overflow", "polytrope", "function"): {"star": {"lobe": 1e9}},
    ("wind", "constant", "function"): {"keys": {"rate": 0.0}},
    ("wind", "reimers-1975", "function"): NO_LIGHT,
    ("wind", "nieuwenhuijzen-dejager-1990", "function"): NO_LIGHT,
    ("wind", "vink-2001", "function"): NO_LIGHT,
    ("capture", "bondi-hoyle", "function"): {"other": {"mass": 0.0}},
    ("ceiling", "hydrogen-burning-band", "function"): {"star": {"mass": 0.44}},
    ("ceiling", "hydrogen-burning-band", "second"): {"star": {"mass": 0.53}},
    ("ceiling", "rate", "function"): {"keys": {"rate": 0.0}},
    ("expulsion", "accretor", "function"): NO_MOMENTUM,
    ("expulsion", "donor", "function"): NO_MOMENTUM,
    ("expulsion", "multiple", "function"): NO_MOMENTUM,
    ("expulsion", "ring", "function"): {"orbit": {"separation": 0.0}},
    ("expulsion", "outer-point", "function"): {"orbit": {"omega": 0.0}},
    ("consequential", "schreiber-2016", "function"): NO_MOMENTUM,
    ("tides", "hut-1981", "function"): {"other": {"mass": 0.0}},
    ("tides", "hut-1981", "second"): ROUND,
}
# The Eddington limit has no driver (it is a property of the accretor); the excess is a ratio.
WITHOUT_DRIVER = {("ceiling", "eddington", "function"), ("overflow", "atmosphere", "second")}


@pytest.mark.parametrize("process, name, part, function, keys", LAWS, ids=IDS)
def test_finite_and_of_the_right_sign(process, name, part, function, keys):
    sign = SIGNS[process] if part == "function" else SECOND_SIGNS[process]
    for words, star, other, orbit in STATES:
        result = function(star, other, orbit, keys_of(keys))
        assert isinstance(result, float) and isfinite(result), words
        assert result * sign >= 0.0, words


@pytest.mark.parametrize("process, name, part, function, keys", LAWS, ids=IDS)
def test_same_answer_twice(process, name, part, function, keys):
    first = [function(s, o, orbit, keys_of(keys)) for _, s, o, orbit in STATES]
    second = [function(s, o, orbit, keys_of(keys)) for _, s, o, orbit in reversed(STATES)]
    assert first == second[::-1]


@pytest.mark.parametrize("process, name, part, function, keys", LAWS, ids=IDS)
def test_zero_when_the_driver_is_zero(process, name, part, function, keys):
    if (process, name, part) in WITHOUT_DRIVER:
        return
    change = DRIVERS[process, name, part]
    acted = 0.0
    for words, star, other, orbit in STATES:
        values = keys_of(keys)
        acted = max(acted, abs(function(star, other, orbit, values)))
        still = function(
            star._replace(**change.get("star", {})),
            other._replace(**change.get("other", {})),
            orbit._replace(**change.get("orbit", {})),
            values._replace(**change.get("keys", {})),
        )
        assert still == 0.0, words
    assert acted > 0.0, "the law does nothing at any sample: the test proves nothing"


def test_every_law_has_its_driver_named():
    named = set(DRIVERS) | WITHOUT_DRIVER
    assert named == {(process, name, part) for process, name, part, _, _ in LAWS}


@pytest.mark.parametrize("process, name, part, function, keys", LAWS, ids=IDS)
def test_docstring_is_complete(process, name, part, function, keys):
    doc = function.__doc__
    assert "Parameters\n" in doc and "Returns\n" in doc and "References\n" in doc
    returned = doc.split("Returns\n")[1].split("References")[0].split("Notes\n")[0]
    # a unit in brackets, or a pure number: a share, a ratio
    pure = process == "capture" or (process, part) == ("overflow", "second")
    assert pure or re.search(r"float  \[.*\]", returned), returned


@pytest.mark.parametrize("process, name, part, function, keys", LAWS, ids=IDS)
def test_compiles_and_agrees(process, name, part, function, keys):
    fast = compiled(function)
    for words, star, other, orbit in STATES:
        arguments = (star, other, orbit, keys_of(keys))
        assert fast(*arguments) == pytest.approx(function(*arguments), rel=1e-13, abs=1e-300), words


@pytest.mark.parametrize("part", ["function", "second"])
def test_waves_do_not_ask_which_star_is_which(part):
    law = find("waves", "peters-1964")
    for _, star, other, orbit in STATES:
        function = getattr(law, part)
        assert function(star, other, orbit, law.keys()) == function(other, star, orbit, law.keys())


@pytest.mark.parametrize("process", TABLES)
def test_entries_are_complete(process):
    for name, law in TABLES[process].items():
        assert isinstance(law, Law) and law.validity, name
        assert all(key in bibliography.SOURCES for key in law.sources), name
        for key, default in described_keys(law.keys).values():
            assert key.doc and key.low < key.high
            assert default is ... or key.low <= default <= key.high


def test_locked_has_no_rate_of_its_own():
    assert find("overflow", "locked").function is None


def test_unknown_law_is_named_with_those_there_are():
    from evolve.errors import ConfigError

    with pytest.raises(ConfigError, match='no wind law.*"reimer-1975".*vink-2001.*"reimers-1975"'):
        find("wind", "reimer-1975")

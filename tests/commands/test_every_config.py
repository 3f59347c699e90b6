"""Every config in configs/ from the command line: quick, told in words that hold, and the same in
every other command, its archive and with the names exchanged. About 25 s, half of it starting Python."""

import json
import re
import subprocess
import sys
import time
from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.commands.main import main

CONFIGS = sorted(Path(__file__).parents[2].joinpath("configs").glob("*.toml"))
EACH = pytest.mark.parametrize("path", CONFIGS, ids=lambda path: path.stem)


@pytest.fixture(scope="module")
def told(tmp_path_factory):
    """What `run` prints of every config, its time and its archive."""
    folder, found = tmp_path_factory.mktemp("all"), {}
    for path in CONFIGS:
        start = time.perf_counter()
        done = subprocess.run(
            [sys.executable, "-m", "evolve", "run", str(path)], cwd=folder, capture_output=True,
            text=True, timeout=60,
        )  # fmt: skip
        assert done.returncode == 0, done.stderr
        seconds = time.perf_counter() - start
        found[path.stem] = done.stdout, seconds, folder / f"{path.stem}.h5"
    return found


@EACH
def test_runs_within_ten_seconds(told, path):
    assert told[path.stem][1] < 10.0


FACTS = {
    "algol": ["masses equal", "thermal overflow begins of A", "the main sequence of A is over",
              "A: main-sequence star, 1.367 Msun", "overflow of A: 1.033 Msun in 583.3 Myr"],
    "common_envelope": ["common envelope of A", "remnant formed of A", "  and then", "contact of B",
                        "A: white dwarf, 0.3761 Msun", "its disc in outbursts"],
    "eccentric_pair": ["merger", "The pair merged.", "A: neutron star, 1.9 Msun", "B: black hole"],
    "giant_pulsar": ["envelope exhausted of A", "A: white dwarf, 0.2777 Msun", "period 75.8 d",
                     "B: neutron star, 1.731 Msun, R = 12 km"],
    "massive_black_hole": ["ceiling reached of B", "its companion caught 0.6 %", "K_A = 168.3 km/s",
                           "B: black hole, 15.59 Msun", "wind of A: 1.171 Msun"],
    "tides": ["circularised", "tides of A", "orbit and spins together", "contact of A"],
    "track": ["collapse of B", "circularised", "moving at 3.14 km/s", "B: neutron star, 1.342 Msun",
              "A: white dwarf, 0.1792 Msun"],
    "red_dwarf": ["A: dwarf, 30.35 Mjup", "B: white dwarf, 0.75 Msun", "magnetic braking of A"],
    "white_dwarfs": ["A: white dwarf", "gravitational waves", "period minimum"],
}  # fmt: skip


@EACH
def test_says_what_happened(told, path):
    text = told[path.stem][0]
    for fact in FACTS.get(path.stem, ["contact of A"]):
        assert fact in text, fact
    ledger = text.split("angular momentum [")[1]
    assert " kg" not in ledger and "Mjup" not in ledger  # one unit down a column
    assert not re.search(r"\bnan\b|\binf\b| / ", text.split("angular momentum [")[0])
    # no line is so wide that a terminal of 120 columns breaks it
    assert max(map(len, text.splitlines())) <= 120


def test_the_light_of_a_ceiling_is_the_eddington_luminosity(told):
    """1.47e38 erg/s a solar mass at X = 0.7 (4 pi G m c/kappa): 2.3e39 for 15.6 Msun."""
    assert "(2.3e+39 erg/s)" in told["massive_black_hole"][0]


@EACH
def test_the_archive_holds_it_to_the_last_bit(told, path):
    history, again = evolve.run(path), evolve.open_history(told[path.stem][2])
    assert again.events == history.events and again.chapters == history.chapters
    for name, values in history.columns.items():
        np.testing.assert_array_equal(again[name], values)
    for kind in ("angular_momentum", "mass"):
        for name, values in getattr(history.ledger, kind).items():
            np.testing.assert_array_equal(getattr(again.ledger, kind)[name], values)


@EACH
def test_contact_agrees_with_run(told, path, capsys):
    status = main(["contact", str(path), "--json"])
    answer = json.loads(capsys.readouterr()[0])["result"]
    history = evolve.open_history(told[path.stem][2])
    event = next((e for e in history.events if e.name == "contact"), None)
    assert status == (0 if event else 1)
    text = json.dumps(answer)
    if event:
        assert event.component in text
        assert any(abs(x / event.time - 1.0) < 1e-4 for x in numbers(answer)), event.time


def numbers(answer):
    """Every number in a JSON answer."""
    if isinstance(answer, dict):
        answer = list(answer.values())
    if isinstance(answer, list):
        return [x for entry in answer for x in numbers(entry)]
    return [answer] if isinstance(answer, float) else []


@EACH
def test_exchanged_names_in_compare(told, path, capsys, tmp_path):
    """A donor may be A or B: `compare` finds the same times and periods of the exchanged pair."""
    config = evolve.read_config(path)
    raw = {key: value for key, value in config.raw.items()}
    raw["A"], raw["B"] = raw["B"], raw["A"]
    for section in ("wind", "braking", "tides", "end", "kick"):
        if set(raw.get(section, {})) & {"A", "B"}:
            raw[section] = {{"A": "B", "B": "A"}.get(k, k): v for k, v in raw[section].items()}
    for c in "AB":
        if "table" in raw[c]:
            raw[c] = {**raw[c], "table": str(path.parent / raw[c]["table"])}
    evolve.run(raw).save(tmp_path / "other.h5")
    assert main(["compare", str(told[path.stem][2]), str(tmp_path / "other.h5"), "--json"]) == 0
    assert json.loads(capsys.readouterr()[0])["result"]
    one, other = (evolve.open_history(p) for p in (told[path.stem][2], tmp_path / "other.h5"))
    assert [e.name for e in one.events] == [e.name for e in other.events]
    for column in ("time", "period", "separation"):
        np.testing.assert_allclose(other[column], one[column], rtol=1e-9)
    np.testing.assert_allclose(other["mass_B"], one["mass_A"], rtol=1e-9)
    np.testing.assert_allclose(other["overflow_B"], one["overflow_A"], rtol=1e-6, atol=1e-14) if (
        "overflow_A" in one.columns
    ) else None


@EACH
def test_laws_that_acted_are_known_to_laws(path, capsys):
    """Every law and star a config names is in `evolve laws`, with its source."""
    config = evolve.read_config(path)
    for section in ("A", "B", "wind", "braking", "tides", "overflow"):
        table = config.raw.get(section, {})
        for one in (table, *(table[c] for c in "AB" if isinstance(table.get(c), dict))):
            for key in ("star", "law", "capture"):
                if key in one and one[key] not in ("none", "off"):
                    assert main(["laws", one[key]]) == 0
                    assert one[key] in capsys.readouterr()[0]


def test_laws_tells_of_what_acts_without_being_chosen(capsys):
    """Common envelope, sudden loss, collapse, disc: with the keys of their sections and sources."""
    assert main(["laws", "change"]) == 0
    text = capsys.readouterr()[0]
    for word in ("Webbink", "Blaauw", "Hills", "Lattimer", "Lasota", "envelope.efficiency",
                 "kick.polar [deg]", "0 to 180", "limits.white_dwarf [solMass]"):  # fmt: skip
        assert word in text, word
    assert main(["laws"]) == 0
    assert " nan" not in capsys.readouterr()[0]


def test_sources_name_what_happened(told, capsys):
    for name, authors in (
        ("tides", ["Hut", "Zahn"]), ("common_envelope", ["Webbink, R. F. (1984)"]),
        ("track", ["Blaauw", "Lattimer", "Lasota"]), ("massive_black_hole", ["Vink", "Bondi"]),
    ):  # fmt: skip
        assert main(["sources", str(told[name][2])]) == 0
        text = capsys.readouterr()[0]
        assert all(author in text for author in authors), name

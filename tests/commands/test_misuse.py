"""Misuse through the program itself: the exit status, one readable message, nothing written."""

import os
import textwrap
from pathlib import Path

import pytest

from evolve.commands.main import main

CONFIGS = Path(__file__).parents[2] / "configs"
GOOD = (CONFIGS / "eccentric_pair.toml").read_text()
DWARF = (CONFIGS / "red_dwarf.toml").read_text()


def call(capsys, *argv):
    """Exit status, stdout, stderr of one command line."""
    try:
        status = main([str(word) for word in argv])
    except SystemExit as error:  # argparse
        status = error.code
    out, err = capsys.readouterr()
    return status, out, err


@pytest.fixture
def here(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    return tmp_path


# what is replaced in the config, by what, and words that the message must hold
WRONG = [
    (DWARF, 'mass = "0.60 Msun"', 'mass = "0.60 Msun', "line"),
    (DWARF, 'mass = "0.60 Msun"', 'mass = "-0.60 Msun"', "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', "mass = 0", "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', "mass = nan", "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', "mass = inf", "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', "mass = true", "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', 'mass = ["0.60 Msun"]', "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', 'mass = "0.60 Msum"', "Msun"),
    (DWARF, 'mass = "0.60 Msun"', 'mass = "0.60 h"', "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', 'mass = "heavy"', "A.mass"),
    (DWARF, 'mass = "0.60 Msun"', 'mas = "0.60 Msun"', "A.mas"),
    (DWARF, 'mass = "0.60 Msun"', 'mass = "60 Msun"', "A.mass"),
    (DWARF, 'mass = "0.75 Msun"', 'mass = "1.5 Msun"', "B.mass"),
    (DWARF, 'mass = "0.75 Msun"', "", "B.mass"),
    (DWARF, 'mass = "0.75 Msun"', 'mass = "1e-9 Msun"', "B.mass"),
    (DWARF, 'star = "dwarf"', 'star = "dwraf"', "dwarf"),
    (DWARF, 'star = "dwarf"', "star = 5", "A.star"),
    (DWARF, 'star = "dwarf"', 'star = "dwarf"\nexponent = 1.0', "exponent"),
    (DWARF, 'star = "dwarf"', 'star = "dwarf"\ntable = "none.csv"', "none.csv"),
    (DWARF, 'star = "dwarf"', 'star = "dwarf"\ntable = "."', "A.table"),
    (DWARF, 'star = "dwarf"', 'star = "dwarf"\ninflation = 9', "inflation"),
    (DWARF, 'star = "white-dwarf"', 'star = "compact"', "B.kind"),
    (DWARF, "fill = 0.98", "fill = 1.5", "overfilled"),
    (DWARF, "fill = 0.98", "fill = -1", "orbit.fill"),
    (DWARF, "fill = 0.98", "period = 8.5", "orbit.period"),
    (DWARF, "fill = 0.98", 'period = "2 h"', "overfilled"),
    (DWARF, "fill = 0.98", 'period = "8 h"\nseparation = 3.0', "separation"),
    (DWARF, "fill = 0.98", "", "orbit"),
    (DWARF, "fill = 0.98", "fill = 0.98\neccentricity = 1.0", "eccentricity"),
    (DWARF, "fill = 0.98", "fill = 0.98\nexcentricity = 0.1", "eccentricity"),
    (DWARF, "gamma = 3.0", "gama = 3.0", "gamma"),
    (DWARF, "gamma = 3.0", "gamma = 40.0", "gamma"),
    (DWARF, 'law = "atmosphere"', 'law = "athmosphere"', "atmosphere"),
    (DWARF, 'law = "rappaport-verbunt-joss-1983"', 'law = "skumanich"', "braking.law"),
    (DWARF, 'law = "rappaport-verbunt-joss-1983"', 'law = "my.py:law"', "--allow-code"),
    (DWARF, "share = 0.0", "share = 1.5", "share"),
    (DWARF, 'from = "accretor"', "from = { accretor = 0.5, ring = 0.2 }", "sum"),
    (DWARF, 'from = "accretor"', 'from = "nowhere"', "expulsion.from"),
    (DWARF, 'time = "10 Gyr"', "time = 10", "end.time"),
    (DWARF, 'time = "10 Gyr"', 'time = "10 Gyr"\nevent = "contct"', "contact"),
    (DWARF, "[end]", "[ending]", "end"),
    (DWARF, "[end]", '[numerics]\nmethod = "Euler"\n[end]', "method"),
    (DWARF, "[end]", "[numerics]\nrtol = 0\n[end]", "rtol"),
    (DWARF, "[acceptance]", "[acceptance]\nceiling = -1", "ceiling"),
    (GOOD, 'kind = "black-hole"', 'kind = "blackhole"', "black-hole"),
]  # fmt: skip


@pytest.mark.parametrize(("text", "old", "new", "said"), WRONG, ids=range(len(WRONG)))
def test_wrong_configs(here, capsys, text, old, new, said):
    assert old in text
    (here / "config.toml").write_text(text.replace(old, new, 1))
    status, out, err = call(capsys, "run", "config.toml")
    assert status == 2 and out == ""
    assert said in err and "config.toml" in err and "Traceback" not in err
    assert os.listdir(here) == ["config.toml"]


def test_all_problems_of_a_file_together(here, capsys):
    text = DWARF.replace('"0.60 Msun"', '"-1 Msun"').replace("gamma = 3.0", "gama = 3.0")
    (here / "config.toml").write_text(text.replace("share = 0.0", "share = 2"))
    status, _, err = call(capsys, "check", "config.toml")
    assert status == 2 and len(err.strip().splitlines()) == 3


def test_not_utf8_and_nothing_there(here, capsys):
    (here / "latin.toml").write_bytes("title = 'Größe'".encode("latin-1"))
    for path, said in (("latin.toml", "UTF-8"), ("missing.toml", "missing.toml"), (".", "folder")):
        status, out, err = call(capsys, "run", path)
        assert status == 2 and said in err and out == "" and "Traceback" not in err


@pytest.mark.parametrize(
    "table",
    ["mass, radius\n0.1, 0.1\n", "mass, radius, luminosity\n0.2,1,1\n0.1,1,1\n0.3,1,1\n0.4,1,1\n",
     "mass, radius, luminosity\n0.1,1,1\n0.2,-1,1\n0.3,1,1\n0.4,1,1\n",
     "mass, radius, luminosity\n0.1,1,x\n", ""],
)  # fmt: skip
def test_wrong_tables(here, capsys, table):
    (here / "t.csv").write_text(table)
    (here / "c.toml").write_text(DWARF.replace('star = "dwarf"', 'star = "dwarf"\ntable = "t.csv"'))
    status, _, err = call(capsys, "run", "c.toml")
    assert status == 2 and "t.csv" in err and "Traceback" not in err
    assert sorted(os.listdir(here)) == ["c.toml", "t.csv"]


ARGUMENTS = [
    ([], "COMMAND"),
    (["fly"], "fly"),
    (["run"], "CONFIG"),
    (["run", "good.toml", "-o", "no/such/folder.h5"], "folder"),
    (["run", "good.toml", "-o", "."], "directory"),
    (["run", "good.toml", "-o", "there.h5"], "--replace"),
    (["run", "good.toml", "--set", "A.mass"], "KEY=VALUE"),
    (["run", "good.toml", "--set", "A.colour=red"], "colour"),
    (["run", "good.toml", "--until", "teatime"], "event"),
    (["run", "good.toml", "--verify"], "archive"),
    (["show", "missing.h5"], "missing.h5"),
    (["show", "archive.h5", "--at", "contact"], "contact"),
    (["show", "archive.h5", "--at", "period=8 kg"], "kg"),
    (["show", "archive.h5", "--at", "colour=1"], "colour"),
    (["export", "archive.h5", "--columns", "colour"], "colour"),
    (["export", "archive.h5", "--unit", "period=kg"], "kg"),
    (["export", "archive.h5", "--every", "5"], "5"),
    (["export", "archive.h5", "--rows", "1"], "rows"),
    (["export", "archive.h5", "-o", "there.h5"], "--replace"),
    (["laws", "warp-drive"], "warp-drive"),
    (["lobe", "--mass-ratio", "0"], "mass-ratio"),
    (["lobe", "--mass-ratio", "many"], "mass-ratio"),
    (["template", "mermaid"], "mermaid"),
    (["shrink", "--mass-a", "1.4", "--mass-b", "1.4"], "--period"),
    (["shrink", "--mass-a", "1.4", "--mass-b", "1.4", "--period", "8"], "period"),
    (["shrink", "--mass-a", "1.4", "--mass-b", "-1", "--period", "8 h"], "mass"),
    (["shrink", "--mass-a", "1.4", "--mass-b", "1", "--period", "8 h", "--eccentricity", "1"], "eccentricity"),
    (["contact", "good.toml", "--draws", "1", "--set", "A.mass=1.9+-0.1 Msun"], "draws"),
    (["compare", "good.toml"], "two"),
    (["compare", "good.toml", "--vary", "A.mass=1.5"], "--vary"),
    (["compare", "archive.h5", "archive.h5", "--on", "colour"], "colour"),
    (["draw", "archive.h5", "-o", "x.bmp"], ".png"),
    (["draw", "archive.h5", "--on", "colour"], "colour"),
    (["sweep", "good.toml"], "keep"),
    (["origin", "good.toml"], "vary"),
]  # fmt: skip


@pytest.mark.parametrize(("argv", "said"), ARGUMENTS, ids=lambda value: " ".join(value)[:40])
def test_wrong_arguments(here, capsys, argv, said):
    (here / "good.toml").write_text(GOOD)
    (here / "there.h5").write_text("something of mine")
    main(["run", "good.toml", "-o", "archive.h5"])
    capsys.readouterr()
    before = sorted(os.listdir(here))
    status, out, err = call(capsys, *argv)
    assert status == 2 and out == "" and said in err and "Traceback" not in err
    assert sorted(os.listdir(here)) == before
    assert (here / "there.h5").read_text() == "something of mine"


@pytest.mark.parametrize("damage", ["cut", "flip", "foreign"])
def test_damaged_archives_end_with_three(here, capsys, damage):
    (here / "good.toml").write_text(GOOD)
    main(["run", "good.toml"])
    path = here / "good.h5"
    data = bytearray(path.read_bytes())
    if damage == "cut":
        data = data[: len(data) // 2]
    elif damage == "flip":
        data[len(data) // 2] ^= 0xFF
    else:
        data = bytearray(b"no HDF5 at all")
    path.write_bytes(bytes(data))
    capsys.readouterr()
    for argv in (["show", "good.h5"], ["export", "good.h5"], ["sources", "good.h5"]):
        status, out, err = call(capsys, *argv)
        assert status == 3 and out == "" and "good.h5" in err and "Traceback" not in err


def test_a_users_law_needs_leave_and_then_works(here, capsys):
    (here / "my_laws.py").write_text(
        textwrap.dedent(
            '''
            """A braking law of my own."""
            from typing import Annotated, NamedTuple

            from evolve.laws.contract import Key


            class Keys(NamedTuple):
                level: Annotated[float, Key("", 0.0, 10.0, "how strong")] = 1.0


            def braking(star, other, orbit, keys: Keys):
                """Half of nothing much.

                Returns
                -------
                float  [solMass solRad2 / yr2]

                References
                ----------
                My own.
                """
                return -keys.level * 5.8e-16 * star.mass * star.radius**3 * star.spin**3
            '''
        )
    )
    text = DWARF.replace('law = "rappaport-verbunt-joss-1983"', 'law = "my_laws.py:braking"')
    (here / "c.toml").write_text(text.replace("gamma = 3.0", "level = 0.5"))
    status, _, err = call(capsys, "run", "c.toml")
    assert status == 2 and "--allow-code" in err and "my_laws.py" in err
    status, out, _ = call(capsys, "run", "c.toml", "--allow-code", "--until", "contact")
    assert status == 0 and "braking of A" in out
    status, _, err = call(capsys, "run", "c.h5", "-o", "again.h5")
    assert status == 2 and "never executed" in err

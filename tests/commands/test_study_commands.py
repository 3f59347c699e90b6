"""`evolve sweep` and `evolve origin` as a person meets them: print, JSON, figure, exit status."""

import json
import textwrap

import pytest

from evolve.commands.main import main

BASE = """
    [base]
    A = { mass = "1.4 Msun", star = "compact", kind = "point-mass" }
    B = { mass = "1.4 Msun", star = "compact", kind = "point-mass" }
    orbit = { period = "4 h" }
    end = { time = "1 Gyr" }
    [vary]
    "orbit.period" = { from = "3 h", to = "40 h", count = 4, spacing = "log" }
"""
SWEEP = BASE + '[keep]\n    results = ["end.time", "end.reason"]'
ORIGIN = BASE + '[observed]\n    time = ["0.1 Gyr", "1 Myr"]\n    period = ["4 h", "0.01 h"]'


@pytest.fixture
def here(tmp_path, monkeypatch):
    monkeypatch.chdir(tmp_path)
    return lambda text: (tmp_path / "study.toml").write_text(textwrap.dedent(text))


def test_sweep_prints_numbers_with_units_and_how_many_ended_how(here, capsys):
    here(SWEEP)
    assert main(["sweep", "study.toml"]) == 0
    said = capsys.readouterr().out
    assert "4 histories over orbit.period" in said and "1 Gyr" in said
    assert "ends: merger 1, time 3" in said  # within 1 Gyr: from 6.4 h down (Peters)


def test_sweep_as_json_has_ends_in_words(here, capsys):
    here(SWEEP)
    assert main(["sweep", "study.toml", "--json"]) == 0
    result = json.loads(capsys.readouterr().out)["result"]
    assert result["results"]["end.reason"]["values"] == ["merger", "time", "time", "time"]
    assert result["axes"]["orbit.period"]["unit"] == "h"


def test_an_archive_in_the_way_is_refused_before_anything_is_computed(here, capsys, tmp_path):
    here(SWEEP)
    (tmp_path / "study.h5").write_text("mine")
    assert main(["sweep", "study.toml"]) == 2
    assert "--replace" in capsys.readouterr().err
    assert (tmp_path / "study.h5").read_text() == "mine" and not list(tmp_path.glob("*.journal"))


def test_a_law_of_ones_own_needs_the_flag(here, capsys, tmp_path):
    (tmp_path / "mine.py").write_text(
        'def drag(star, other, orbit, keys):\n    """A torque."""\n    return -1e-9 * star.mass\n'
    )
    here(SWEEP.replace("end = {", 'braking = { law = "mine.py:drag" }\n    end = {').replace(
        'star = "compact", kind = "point-mass" }', 'star = "dwarf" }', 1).replace("1.4 Msun", "0.3 Msun"))  # fmt: skip
    assert main(["sweep", "study.toml"]) == 2
    assert "--allow-code" in capsys.readouterr().err
    assert main(["sweep", "study.toml", "--allow-code", "--workers", "2"]) == 0
    assert "4 done, 0 failed" in capsys.readouterr().out


def test_origin_tells_draws_and_gives_json(here, capsys, tmp_path):
    """Peters: the time to merge is 9.83 Myr (P/h)^(8/3) (M/Msun)^(-2/3) (mu/Msun)^(-1), so what
    has 4 h now had 4^(8/3) and what 0.1 Gyr took 0.1 Gyr ago."""
    pytest.importorskip("matplotlib")
    here(ORIGIN)
    assert main(["origin", "study.toml", "--draw", "map.png", "--json"]) == 0
    result = json.loads(capsys.readouterr().out)["result"]
    assert result["fits"] and (tmp_path / "map.png").stat().st_size > 10000
    start = result["origins"][0]["start"]["orbit.period"]
    lived = 1e8 / (9.83e6 * 2.8 ** (-2 / 3) / 0.7)  # in hours^(8/3)
    assert start["value"] == pytest.approx((4.0 ** (8 / 3) + lived) ** (3 / 8), rel=2e-3)
    assert start["unit"] == "h" and result["map"]["axes"]["orbit.period"]["values"][0] == 3.0


def test_origin_says_plainly_that_nothing_fits(here, capsys):
    here(ORIGIN + '\n    mass_A = ["3 Msun", "0.1 Msun"]')
    assert main(["origin", "study.toml"]) == 1
    said = capsys.readouterr().out
    assert "No starting pair in these ranges" in said and "-16.00 sigma" in said


@pytest.mark.parametrize(
    ("more", "said"),
    [(["--draw", "map.bmp"], ".png"), (["--workers", "0"], "1 or more"), (["--draw", "no/map.png"], "no folder")],
)
def test_origin_refuses_what_is_wrong_before_it_searches(here, capsys, more, said):
    here(ORIGIN)
    assert main(["origin", "study.toml", *more]) == 2
    assert said in capsys.readouterr().err

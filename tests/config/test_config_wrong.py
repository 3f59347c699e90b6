"""Wrong configs: each message names the file, the key, the value and what is allowed."""

import re

import pytest

from evolve.config import read_config
from evolve.errors import ConfigError

BASE = """\
title = "Base"

[A]
mass = "0.60 Msun"
star = "dwarf"

[B]
mass = "0.75 Msun"
star = "white-dwarf"

[orbit]
fill = 0.98
eccentricity = 0.0

[braking]
law = "verbunt-zwaan-1981"
stops_below = "0.2 Msun"

[overflow]
law = "atmosphere"

[expulsion]
from = "accretor"

[end]
time = "10 Gyr"
"""

MASS_A, MASS_B, STAR_A = 'mass = "0.60 Msun"', 'mass = "0.75 Msun"', 'star = "dwarf"'
STAR_B, SIZE, ROUND = 'star = "white-dwarf"', "fill = 0.98", "eccentricity = 0.0"
BRAKING, STOPS, FLOW = 'law = "verbunt-zwaan-1981"', 'stops_below = "0.2 Msun"', 'law = "atmosphere"'
FROM, TIME = 'from = "accretor"', 'time = "10 Gyr"'
NEUTRON_STAR = 'mass = "1.4 Msun"\nstar = "compact"\nkind = "neutron-star"'

# what is replaced, by what; then the key, the value as quoted, pieces of what is allowed
CASES = {
    "unknown unit": (MASS_A, 'mass = "0.60 Msum"', "A.mass", '"0.60 Msum"',
                     ['unknown unit "Msum"', "Msun, Mjup, kg, g", 'did you mean "Msun"?']),
    "unit of something else": (MASS_A, 'mass = "0.60 h"', "A.mass", '"0.60 h"',
                               ["a unit of time, not of mass", "Msun"]),
    "negative mass": (MASS_A, 'mass = "-0.6 Msun"', "A.mass", '"-0.6 Msun"',
                      ["out of range", "allowed: above 0 Msun"]),
    "mass of zero": (MASS_A, "mass = 0", "A.mass", "0", ["allowed: above 0 Msun"]),
    "mass nan": (MASS_A, "mass = nan", "A.mass", "nan", ["not a finite number", "Msun"]),
    "mass inf": (MASS_A, "mass = inf", "A.mass", "inf", ["not a finite number", "Msun"]),
    "mass a text": (MASS_A, 'mass = "heavy"', "A.mass", '"heavy"', ["a number with a unit", "Msun"]),
    "mass true": (MASS_A, "mass = true", "A.mass", "true", ["true/false is no mass", "Msun"]),
    "mass a list": (MASS_A, "mass = [0.6]", "A.mass", "[0.6]", ["a list is no mass", "Msun"]),
    "mass a date": (MASS_A, "mass = 2024-01-01", "A.mass", "date", ["allowed", "Msun"]),
    "mass a table": (MASS_A, "mass = { sun = 0.6 }", "A.mass", "{", ["a table is no mass", "Msun"]),
    "mass beyond the model": (MASS_A, 'mass = "500 Msun"', "A.mass", '"500 Msun"',
                              ["outside the range of dwarf", "allowed:"]),
    "no mass": (MASS_A, "", "A.mass", None, ["missing", "orbit.total_mass", "found B.mass"]),
    "white dwarf over its limit": (MASS_B, 'mass = "1.40 Msun"', "B.mass", '"1.4 Msun"',
                                   ["white dwarf beyond its limit", "up to 1.38 Msun"]),
    "neutron star over its limit": (f"{MASS_B}\n{STAR_B}", NEUTRON_STAR.replace("1.4", "2.9"),
                                    "B.mass", '"2.9 Msun"', ["up to 2.2 Msun", "limits.neutron_star"]),
    "extreme mass ratio": (f"{MASS_B}\n{STAR_B}",
                           'mass = "1e8 Msun"\nstar = "compact"\nkind = "black-hole"',
                           "A.mass", '"0.6 Msun"', ["too extreme a mass ratio", "1e-06 to 1e+06"]),
    "unknown star": (STAR_A, 'star = "dwarff"', "A.star", '"dwarff"',
                     ["unknown", '"white-dwarf"', 'did you mean "dwarf"?']),
    "no star": (STAR_A, "", "A.star", None, ["missing", '"dwarf"']),
    "star a number": (STAR_A, "star = 3", "A.star", "3", ["unknown", '"dwarf"']),
    "key of another star": (STAR_A, f"{STAR_A}\ncore_mass = 0.2", "A.core_mass", "0.2",
                            ["belongs to giant, not to dwarf", "inflation"]),
    "unknown key of a star": (STAR_A, f"{STAR_A}\ninflatoin = 0.1", "A.inflatoin", "0.1",
                              ["unknown key", "allowed in [A]", 'did you mean "inflation"?']),
    "key of the orbit in a component": (STAR_A, f'{STAR_A}\nperiod = "4 h"', "A.period", '"4 h"',
                                        ["unknown key", 'is "orbit.period" meant?']),
    "radius neither number nor lobe": (STAR_A, f'{STAR_A}\nradius = "loob"', "A.radius", '"loob"',
                                       ['"lobe"', 'did you mean "lobe"?']),
    "compact of no kind": (f"{MASS_B}\n{STAR_B}", 'mass = "1.4 Msun"\nstar = "compact"',
                           "B.kind", None, ["missing", '"neutron-star"']),
    "compact of unknown kind": (f"{MASS_B}\n{STAR_B}", NEUTRON_STAR.replace("neutron-", "neutronn-"),
                                "B.kind", '"neutronn-star"', ['did you mean "neutron-star"?']),
    "period without unit": (SIZE, "period = 4.5", "orbit.period", "4.5",
                            ["needs its unit", '"8.5 h"', "Gyr"]),
    "period without unit, quoted": (SIZE, 'period = "4.5"', "orbit.period", '"4.5"',
                                    ["needs its unit", '"8.5 h"']),
    "negative period": (SIZE, 'period = "-4 h"', "orbit.period", '"-4 h"', ["allowed: above 0"]),
    "period in plural": (SIZE, 'period = "4 hours"', "orbit.period", '"4 hours"',
                         ["unknown unit", 'did you mean "hour"?']),
    "period and separation": (SIZE, 'period = "4 h"\nseparation = "1 Rsun"', "orbit.period", '"4 h"',
                              ['contradicts orbit.separation = "1 Rsun"', "one of period"]),
    "contact and fill": (SIZE, f"{SIZE}\ncontact = true", "orbit.fill", "0.98",
                         ["contradicts orbit.contact = true", "one of period"]),
    "contact a text": (SIZE, 'contact = "yes"', "orbit.contact", '"yes"', ["true or false"]),
    "no size of the orbit": (SIZE, "", "orbit", None, ["no size", "period, separation, fill"]),
    "contact false alone": (SIZE, "contact = false", "orbit", None, ["no size", "fill = 0.98"]),
    "fill of zero": (SIZE, "fill = 0.0", "orbit.fill", "0.0", ["above 0"]),
    "eccentricity of one": (ROUND, "eccentricity = 1.0", "orbit.eccentricity", "1.0",
                            ["out of range", "from 0 and below 1"]),
    "negative eccentricity": (ROUND, "eccentricity = -0.1", "orbit.eccentricity", "-0.1",
                              ["from 0 and below 1"]),
    "eccentricity with unit": (ROUND, 'eccentricity = "0.1 deg"', "orbit.eccentricity", '"0.1 deg"',
                               ["not of pure number", "a pure number"]),
    "masses and total mass": (SIZE, f'{SIZE}\ntotal_mass = "1.35 Msun"', "orbit.total_mass",
                              '"1.35 Msun"', ["one mass too many", "two of A.mass, B.mass"]),
    "total mass below a mass": (f"[B]\n{MASS_B}\n{STAR_B}\n\n[orbit]",
                                f'[B]\n{STAR_B}\n\n[orbit]\ntotal_mass = "0.5 Msun"',
                                "orbit.total_mass", '"0.5 Msun"', ["more than the mass of the other"]),
    "unknown key of the orbit": (SIZE, f"{SIZE}\nperoid = 3", "orbit.peroid", "3",
                                 ["unknown key", 'did you mean "period"?']),
    "unknown law": (BRAKING, 'law = "verbunt-zwaan-1982"', "braking.law", '"verbunt-zwaan-1982"',
                    ["unknown", '"off"', 'did you mean "verbunt-zwaan-1981"?']),
    "no law": (BRAKING, "", "braking.law", None, ["missing", '"verbunt-zwaan-1981"']),
    "law a number": (BRAKING, "law = 1981", "braking.law", "1981", ["a number", '"off"']),
    "key of another law": (BRAKING, f"{BRAKING}\ngamma = 3.0", "braking.gamma", "3.0",
                           ["belongs to rappaport-verbunt-joss-1983, not to verbunt-zwaan-1981",
                            'allowed in [braking] beside law = "verbunt-zwaan-1981"', '"k2"']),
    "unknown key of a law": (BRAKING, f"{BRAKING}\nstrenght = 2", "braking.strenght", "2",
                             ["unknown key", 'did you mean "strength"?']),
    "key of a law out of range": (BRAKING, f"{BRAKING}\nk2 = 5", "braking.k2", "5",
                                  ["out of range", "from 0 up to 0.4"]),
    "limit in a wrong unit": (STOPS, 'stops_below = "0.2 Rsun"', "braking.stops_below", '"0.2 Rsun"',
                              ["a unit of length, not of mass"]),
    "constant wind without rate": (FLOW, f'{FLOW}\n[wind.A]\nlaw = "constant"', "wind.A.rate", None,
                                   ["missing", "Msun/yr"]),
    "capture above one": (FLOW, f'{FLOW}\n[wind.A]\nlaw = "reimers-1975"\ncapture = 1.5',
                          "wind.A.capture", "1.5", ["from 0 up to 1", '"bondi-hoyle"']),
    "capture unknown": (FLOW, f'{FLOW}\n[wind.A]\nlaw = "reimers-1975"\ncapture = "bondi"',
                        "wind.A.capture", '"bondi"', ['did you mean "bondi-hoyle"?']),
    "share above one": (FLOW, f"{FLOW}\n[acceptance]\nshare = 1.2", "acceptance.share", "1.2",
                        ["from 0 up to 1"]),
    "ceiling unknown": (FLOW, f'{FLOW}\n[acceptance]\nceiling = "edington"', "acceptance.ceiling",
                        '"edington"', ['"none"', 'did you mean "eddington"?']),
    "ceiling in a wrong unit": (FLOW, f'{FLOW}\n[acceptance]\nceiling = "1 Msun"',
                                "acceptance.ceiling", '"1 Msun"', ["not of rate", '"eddington"']),
    "key of a ceiling that is not chosen": (FLOW, f"{FLOW}\n[acceptance]\nhydrogen = 0.7",
                                            "acceptance.hydrogen", "0.7",
                                            ["belongs to eddington, not to none", '"share"']),
    "rate beside the ceiling": (FLOW, f"{FLOW}\n[acceptance]\nrate = 1e-8", "acceptance.rate", "1e-08",
                                ["unknown key", "allowed in [acceptance]: ceiling, share"]),
    "shares not summing to one": (FROM, "from = { accretor = 0.8, ring = 0.1 }", "expulsion.from",
                                  "{ accretor = 0.8, ring = 0.1 }", ["sum to 0.9", "that sum to 1"]),
    "share of an unknown way": (FROM, "from = { accretor = 0.8, rink = 0.2 }", "expulsion.from.rink",
                                "0.2", ["allowed in [expulsion.from]", 'did you mean "ring"?']),
    "negative share": (FROM, "from = { accretor = 0.8, ring = -0.2 }", "expulsion.from.ring", "-0.2",
                       ["from 0 up to 1"]),
    "unknown way": (FROM, 'from = "acretor"', "expulsion.from", '"acretor"',
                    ["a table of shares", 'did you mean "accretor"?']),
    "time without unit": (TIME, "time = 10e9", "end.time", "10000000000.0", ["needs its unit"]),
    "unknown event": (TIME, 'event = "contcat"', "end.event", '"contcat"', ['did you mean "contact"?']),
    "mass below on no component": (TIME, 'mass_below = "0.1 Msun"', "end.mass_below", '"0.1 Msun"',
                                   ["unknown key", "A.mass_below"]),
    "unknown method": (TIME, f'{TIME}\n[numerics]\nmethod = "lsoda"', "numerics.method", '"lsoda"',
                       ['"RK45"', 'did you mean "LSODA"?']),
    "tolerance too tight": (TIME, f"{TIME}\n[numerics]\nrtol = 1e-17", "numerics.rtol", "1e-17",
                            ["from 1e-13 up to 0.01"]),
    "evaluations a fraction": (TIME, f"{TIME}\n[numerics]\nmax_evaluations = 0.5",
                               "numerics.max_evaluations", "0.5", ["not a whole number"]),
    "inclination too large": (TIME, f'{TIME}\n[observer]\ninclination = "200 deg"',
                              "observer.inclination", '"200 deg"', ["up to 180 deg"]),
    "unknown section": ("[end]", "[ends]", "ends", '{ time = "10 Gyr" }', ["at the top", 'did you mean "end"?']),
    "a section that is no table": ('title = "Base"', 'waves = "off"', "waves", '"off"',
                                   ["allowed: a table, [waves]"]),
    "title a number": ('title = "Base"', "title = 3", "title", "3", ["allowed: a text"]),
    "a user's law without leave": (BRAKING, 'law = "my_laws.py:weak"', "braking.law",
                                   '"my_laws.py:weak"',
                                   ["my_laws.py is code", "--allow-code", "allow_code=True"]),
    "a user's law where none goes": (FROM, 'from = "my_laws.py:away"', "expulsion.from",
                                     '"my_laws.py:away"', ["not for here", '"accretor"']),
    "table missing": (STAR_A, f'{STAR_A}\ntable = "none.csv"', "A.table", '"none.csv"',
                      ["no such table"]),
}  # fmt: skip


def problems_of(tmp_path, text):
    path = tmp_path / "pair.toml"
    path.write_text(text, encoding="utf-8")
    with pytest.raises(ConfigError) as caught:
        read_config(path)
    assert caught.value.status == 2
    return path, caught.value.problems


@pytest.mark.parametrize("case", CASES)
def test_message(tmp_path, case):
    old, new, key, value, allowed = CASES[case]
    assert BASE.count(old) == 1
    path, problems = problems_of(tmp_path, BASE.replace(old, new))
    [message] = problems
    start = f"{path}: {key}" + (f" = {value}" if value else ":")
    if value in ("date", "{"):
        start = f"{path}: {key} = "
    assert message.startswith(start)
    assert "allowed" in message
    for piece in allowed:
        assert piece in message
    assert "\n" not in message


def test_a_component_that_is_no_table(tmp_path):
    text = BASE.replace("[A]\n", "").replace(MASS_A, "").replace(STAR_A, "A = 3")
    path, problems = problems_of(tmp_path, text)
    assert problems[0] == f"{path}: A = 3: a number is wrong here; allowed: a table, [A]"
    assert len(problems) == 3  # and so neither a star nor a mass


def test_numbers_of_too_many_digits(tmp_path):
    _, [message] = problems_of(tmp_path, BASE.replace(MASS_A, "mass = 1" + 400 * "0"))
    assert "A.mass = 1000" in message and "not a finite number" in message
    _, [message] = problems_of(tmp_path, BASE.replace(MASS_A, "mass = 1" + 5000 * "0"))
    assert "not TOML" in message


def test_a_path_that_no_disk_has(tmp_path):
    text = BASE.replace(STAR_A, STAR_A + '\ntable = "a\\u0000b"')
    _, [message] = problems_of(tmp_path, text)
    assert "A.table" in message and "cannot be read" in message


def test_a_message_is_one_line(tmp_path):
    _, [message] = problems_of(tmp_path, BASE.replace(MASS_A, 'mass = "0.6\\nMsun\\u0007"'))
    assert "\n" not in message and "\a" not in message


def test_the_base_itself_is_right(tmp_path):
    path = tmp_path / "pair.toml"
    path.write_text(BASE, encoding="utf-8")
    assert read_config(path).values["A"]["mass"] == 0.6


def test_all_problems_of_a_file_at_once(tmp_path):
    text = BASE.replace(MASS_A, 'mass = "0.6 Msum"').replace(ROUND, "eccentricity = 2")
    text = text.replace(BRAKING, f"{BRAKING}\ngamma = 3.0").replace(TIME, "time = 3\nwhen = 1")
    _, problems = problems_of(tmp_path, text)
    keys = [re.search(r"pair\.toml: (\S+?)[ :]", problem)[1] for problem in problems]
    assert sorted(keys) == ["A.mass", "braking.gamma", "end.time", "end.when", "orbit.eccentricity"]


def test_an_empty_file_says_all_that_is_missing(tmp_path):
    _, problems = problems_of(tmp_path, "")
    text = "\n".join(problems)
    for piece in ("A.star: missing", "B.star: missing", "orbit: no size", "A.mass: missing"):
        assert piece in text


@pytest.mark.parametrize(
    ("text", "line", "quoted"),
    [
        ("title = \"x\"\n[A]\nmass 0.6\n", 3, "mass 0.6"),
        ("title = \"x\"\n[A\nmass = 0.6\n", 2, "[A"),
        ("[A]\nmass = 0.6\n\n[A]\nmass = 0.7\n", 4, "[A]"),
        ("[A]\nmass = 0.6\nmass = 0.7\n", 3, "mass = 0.7"),
        ("[A]\nmass = 0.6 Msun\n", 2, "mass = 0.6 Msun"),
        ("[A]\nmass = \"0.6", 2, 'mass = "0.6'),
        ("[A]\nnote = '''\nno end\n", 3, "no end"),
    ],
)
def test_broken_toml_shows_its_line(tmp_path, text, line, quoted):
    path, problems = problems_of(tmp_path, text)
    [message] = problems
    assert message.startswith(f"{path}, line {line}") and message.endswith(quoted)
    assert "not TOML" in message


def test_missing_file_names_the_nearest(tmp_path):
    (tmp_path / "red_dwarf.toml").write_text(BASE)
    with pytest.raises(ConfigError, match=r"red_dwarv\.toml: no such config; .*did you mean .*red_dwarf"):
        read_config(tmp_path / "red_dwarv.toml")
    with pytest.raises(ConfigError, match="no such config, and no folder"):
        read_config(tmp_path / "nowhere" / "x.toml")
    with pytest.raises(ConfigError, match="no such config"):
        read_config(tmp_path / "red_dwarf.toml" / "x.toml")


def test_a_folder_is_no_config(tmp_path):
    with pytest.raises(ConfigError, match="a folder; allowed: the path of a config"):
        read_config(tmp_path)


def test_not_utf8(tmp_path):
    path = tmp_path / "pair.toml"
    path.write_bytes(b'title = "Caf\xe9"\n')
    with pytest.raises(ConfigError, match=r"pair\.toml: not a UTF-8 text \(byte 12 is 0xe9\)"):
        read_config(path)


def test_sources_that_are_none():
    with pytest.raises(ConfigError, match="allowed: a path, a dict"):
        read_config(3)
    with pytest.raises(ConfigError, match="A.mass = None.*allowed: a text, a number"):
        read_config({"A": {"mass": None}})
    with pytest.raises(ConfigError, match="3: a number as a key; allowed: a text"):
        read_config({3: {}})

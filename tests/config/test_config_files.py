"""Files that a config names: tables, users' laws; and a config remade from its archive."""

import h5py
import numpy as np
import pytest

from evolve.config import read_config, read_config_text
from evolve.config.tables import parse_table, read_table
from evolve.config.templates import kinds, template
from evolve.errors import ConfigError

COLUMNS = {"mass": "solMass", "radius": "solRad", "luminosity": "solLum"}

TABLE = """\
# a made-up sequence
mass [solMass], radius [R_jup], luminosity [erg/s], name

0.1, 1.2, 4e30, one
0.3, 2.9, 4e31, one and a half
# in between
0.5, 4.5, 1e32, two
1.0, 10.0, 3e33, three
"""

# a law as a user would write one
LAW = '''\
from typing import Annotated, NamedTuple
from evolve.laws.contract import Key, Orbit, Star


class WeakKeys(NamedTuple):
    factor: Annotated[float, Key("", 0.0, 100.0, "on the torque")] = 1.0


def weak(star: Star, other: Star, orbit: Orbit, keys: WeakKeys) -> float:
    """A torque [solMass solRad2 / yr2] that goes as the spin."""
    return -1e-8 * keys.factor * star.mass * star.spin
'''


def write(path, text):
    path.write_text(text, encoding="utf-8")
    return path


def test_columns_come_in_the_units_asked_for(tmp_path):
    table = read_table(write(tmp_path / "t.csv", TABLE), COLUMNS)
    assert list(table) == ["mass", "radius", "luminosity"]  # the names are no numbers
    assert table["mass"] == [0.1, 0.3, 0.5, 1.0]
    # nominal R_jup 71492 km, R_sun 695700 km, L_sun 3.828e33 erg/s (IAU 2015 B3)
    expected = [x * 71492 / 695700 for x in (1.2, 2.9, 4.5, 10.0)]
    assert table["radius"] == pytest.approx(expected, rel=1e-14)
    assert table["luminosity"][3] == pytest.approx(3e33 / 3.828e33, rel=1e-14)


def test_columns_without_units_are_internal():
    table = parse_table("mass,radius,extra (h)\n1,2,8766\n2,3,17532\n", "t", {"mass": "solMass"})
    assert table["radius"] == [2.0, 3.0]
    assert table["extra"] == pytest.approx([1.0, 2.0], rel=1e-14)  # 8766 h = 1 yr


@pytest.mark.parametrize(
    ("text", "fragments"),
    [
        ("", ["a header and at least two rows", "mass [solMass]"]),
        ("mass, radius, luminosity\n1,1,1\n", ["at least two rows"]),
        ("0.1,1,1\n0.2,1,1\n0.3,1,1\n", ['"0.1" is no column name', "mass [solMass]"]),
        ("mass, radus, luminosity\n1,1,1\n2,2,2\n", ["no column radius", 'is "radus" meant?']),
        ("mass, mass, radius, luminosity\n1,1,1,1\n2,2,2,2\n", ['"mass" stands twice']),
        ("mass [Msum], radius, luminosity\n1,1,1\n2,2,2\n", ["column mass", '"Msum"', "solMass", "Msun"]),
        ("mass [h], radius, luminosity\n1,1,1\n2,2,2\n", ["column mass [h]", "allowed: solMass"]),
        ("mass, radius, luminosity\n1,1,1\n#\n2,2\n", ["line 4", "2 values; allowed: 3"]),
        ("mass, radius, luminosity\n1,1,1\n2,x,2\n", ['line 3, column radius = "x"', "finite number"]),
        ("mass, radius, luminosity\n1,1,1\n2,nan,2\n", ['line 3, column radius = "nan"']),
        ("mass, radius, luminosity\n1,1,1\n3,1,1\n2,1,1\n",
         ["line 4, column mass = 2", "not above the row before (3)", "rising"]),
        ("mass, radius, luminosity\n1,1,1\n1,1,1\n", ["line 3, column mass = 1", "rising"]),
    ],
)  # fmt: skip
def test_wrong_tables(tmp_path, text, fragments):
    path = write(tmp_path / "t.csv", text)
    with pytest.raises(ConfigError) as caught:
        read_table(path, COLUMNS)
    assert str(caught.value).startswith(str(path))
    for fragment in [*fragments, "allowed" if "twice" not in fragments[0] else "twice"]:
        assert fragment in str(caught.value)


def test_a_table_that_is_not_there(tmp_path):
    with pytest.raises(ConfigError, match="no such table"):
        read_table(tmp_path / "t.csv", COLUMNS)
    with pytest.raises(ConfigError, match="a folder; allowed"):
        read_table(tmp_path, COLUMNS)
    (tmp_path / "t.csv").write_bytes(b"mass\xff")
    with pytest.raises(ConfigError, match="not a UTF-8 text"):
        read_table(tmp_path / "t.csv", COLUMNS)


def hdf5(path, **columns):
    with h5py.File(path, "w") as file:
        for name, (values, unit) in columns.items():
            file[name] = np.array(values)
            if unit:
                file[name].attrs["units"] = unit
    return path


def test_hdf5_tables_are_read_as_csv_tables_are(tmp_path):
    path = hdf5(
        tmp_path / "t.h5", mass=([0.1, 0.5], "solMass"), radius=([695700.0, 1391400.0], "km"),
        luminosity=([1 / 3, 2.0], ""),
    )  # fmt: skip
    table = read_table(path, COLUMNS)
    assert table["mass"] == [0.1, 0.5] and table["luminosity"] == [1 / 3, 2.0]
    assert table["radius"] == pytest.approx([1.0, 2.0], rel=1e-14)


def test_wrong_hdf5_tables(tmp_path):
    with pytest.raises(ConfigError, match=r"mass \(2\), radius \(1\)"):
        read_table(hdf5(tmp_path / "a.h5", mass=([1, 2], ""), radius=([1], "")), COLUMNS)
    with pytest.raises(ConfigError, match="no column luminosity"):
        read_table(hdf5(tmp_path / "b.h5", mass=([1, 2], ""), radius=([1, 2], "")), COLUMNS)
    whole = hdf5(tmp_path / "c.h5", mass=([1, 2], "")).read_bytes()
    (tmp_path / "d.h5").write_bytes(whole[:200])
    with pytest.raises(ConfigError, match="d.h5: cannot be read as HDF5"):
        read_table(tmp_path / "d.h5", COLUMNS)


# Configs that name files ------------------------------------------------------------------


def config_file(tmp_path, **replaced):
    lines = {
        "A": 'mass = 0.6\nstar = "dwarf"', "B": 'mass = 0.75\nstar = "white-dwarf"',
        "orbit": "fill = 0.98",
    } | replaced  # fmt: skip
    text = "\n".join(f"[{name}]\n{body}\n" for name, body in lines.items())
    return write(tmp_path / "pair.toml", text)


@pytest.mark.parametrize("name", ["own.csv", "own.h5"])
def test_a_config_with_a_table_is_remade_from_its_archive(tmp_path, name):
    (tmp_path / "tables").mkdir()
    place = tmp_path / "tables" / name
    if name == "own.csv":
        write(place, TABLE)
    else:
        hdf5(
            place, mass=([0.1, 1 / 3, 0.5, 1.0], "solMass"), radius=([0.1, 0.3, 0.5, 1.0], ""),
            luminosity=([1e-3, 0.01, 0.1, 1.0], ""),
        )  # fmt: skip
    path = config_file(tmp_path, A=f'mass = 0.6\nstar = "dwarf"\ntable = "tables/{name}"')
    config = read_config(path)
    assert config.values["A"]["table"]["mass"][-1] == 1.0
    assert list(config.files) == [f"tables/{name}"]
    place.unlink()
    again = read_config_text(config.text, config.files, "archive.h5")
    assert again.values == config.values and again.files == config.files
    assert read_config_text(config.completed_text(), config.files).values == config.values
    other = config.with_values({"A.mass": 0.5})  # not read again
    assert other.values["A"]["table"] == config.values["A"]["table"]
    with pytest.raises(ConfigError, match="no such table"):
        read_config(path)
    with pytest.raises(ConfigError, match="archive.h5: A.table.*no such file in the archive"):
        read_config_text(config.text, {}, "archive.h5")


def test_a_table_that_makes_no_star(tmp_path):
    write(tmp_path / "own.csv", "mass, radius, luminosity\n0.1,1,1\n0.2,1,1\n0.7,1,1\n")
    path = config_file(tmp_path, A='mass = 0.6\nstar = "dwarf"\ntable = "own.csv"')
    with pytest.raises(ConfigError, match=r'A: .*3 rows; 4 .*star = "dwarf", table = "own.csv"'):
        read_config(path)


def test_a_table_that_falls(tmp_path):
    write(tmp_path / "own.csv", "mass, radius, luminosity\n1,1,1\n0.5,0.5,0.1\n0.1,0.1,0.01\n")
    path = config_file(tmp_path, A='mass = 0.6\nstar = "dwarf"\ntable = "own.csv"')
    with pytest.raises(ConfigError) as caught:
        read_config(path)
    [message] = caught.value.problems
    for piece in (str(path), 'A.table = "own.csv"', "line 3, column mass = 0.5", "allowed: mass rising"):
        assert piece in message


def law_file(tmp_path, name="weak", **replaced):
    write(tmp_path / "my_laws.py", LAW)
    return config_file(tmp_path, braking=f'law = "my_laws.py:{name}"', **replaced)


def test_a_users_law_runs_with_leave_only(tmp_path):
    path = law_file(tmp_path)
    with pytest.raises(ConfigError) as caught:
        read_config(path)
    [message] = caught.value.problems
    for piece in (str(path), "braking.law", str(tmp_path / "my_laws.py"), "--allow-code", "allow_code=True"):
        assert piece in message
    config = read_config(path, allow_code=True)
    assert set(config.user_laws) == {"braking:A", "braking:B"}
    assert config.user_laws["braking:A"].function.__name__ == "weak"
    assert config.values["braking"]["A"] == {
        "law": "my_laws.py:weak", "factor": 1.0, "stops_below": 0.2,
    }  # fmt: skip
    assert config.files == {"my_laws.py": LAW}


def test_keys_of_a_users_law(tmp_path):
    path = law_file(tmp_path)
    config = read_config(path, set=["braking.factor=2.5"], allow_code=True)
    assert config.values["braking"]["B"]["factor"] == 2.5
    assert config.completed_text().count("factor = 2.5") == 1
    assert config.with_values({"braking.factor": 3}).values["braking"]["A"]["factor"] == 3.0
    with pytest.raises(ConfigError, match="braking.factor = 101: out of range; allowed: from 0 up to 100"):
        config.with_values({"braking.factor": 101})
    with pytest.raises(ConfigError, match='factr = 1: unknown key.*did you mean "factor"'):
        config.with_values({"braking.factr": 1})


def test_a_users_law_for_one_component(tmp_path):
    write(tmp_path / "my_laws.py", LAW)
    config = read_config(
        config_file(tmp_path, **{"braking.A": 'law = "my_laws.py:weak"'}), allow_code=True
    )
    assert set(config.user_laws) == {"braking:A"} and config.values["braking"]["B"]["law"] == "off"


def test_a_users_law_is_never_run_from_an_archive(tmp_path):
    config = read_config(law_file(tmp_path), allow_code=True)
    with pytest.raises(ConfigError, match="never executed"):
        read_config_text(config.text, config.files)


def test_a_users_law_that_is_none(tmp_path):
    path = law_file(tmp_path, name="wek")
    with pytest.raises(ConfigError, match='braking.law = "my_laws.py:wek".*no function "wek"'):
        read_config(path, allow_code=True)
    (tmp_path / "my_laws.py").unlink()
    with pytest.raises(ConfigError, match="my_laws.py: no such file with a law"):
        read_config(path, allow_code=True)


def test_a_users_law_with_an_unknown_unit(tmp_path):
    path = law_file(tmp_path)
    write(tmp_path / "my_laws.py", LAW.replace('Key("",', 'Key("furlong",'))
    with pytest.raises(ConfigError, match='key factor: unknown unit "furlong"'):
        read_config(path, allow_code=True)


def test_waves_of_ones_own_need_a_second_function_on_an_eccentric_orbit(tmp_path):
    write(tmp_path / "my_laws.py", LAW)
    parts = {"waves": 'law = "my_laws.py:weak"', "orbit": "fill = 0.98\neccentricity = 0.3"}
    with pytest.raises(ConfigError, match="waves.law.*weak_eccentricity"):
        read_config(config_file(tmp_path, **parts), allow_code=True)


# Templates ----------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", kinds())
def test_templates_are_right(kind):
    config = read_config_text(template(kind))
    assert config.values["title"] and config.warnings == []
    assert read_config_text(config.completed_text()).values == config.values
    assert kinds()[kind].endswith((".", ":")) or kind == "everything"


def test_what_is_commented_out_in_the_fullest_template_is_right():
    lines = template("everything").splitlines()
    for number, line in enumerate(lines):
        if line.startswith("# ") and " = " in line:
            shown = [*lines[:number], line[2:], *lines[number + 1 :]]
            if line.startswith(("# period =", "# separation", "# contact =")):
                shown.remove(next(x for x in shown if x.startswith("fill")))
            if line.startswith(("# mass_ratio", "# total_mass")):
                shown.remove(next(x for x in shown if x.startswith('mass = "0.75')))
            read_config_text("\n".join(shown))


def test_an_unknown_template():
    with pytest.raises(ConfigError, match='no template "red-dwarv"; allowed: .*did you mean "red-dwarf"'):
        template("red-dwarv")

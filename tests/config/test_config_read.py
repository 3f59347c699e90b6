"""Reading: what the completed config holds, keys set beside it, texts that read back."""

import copy
import tomllib
from pathlib import Path

import astropy.units as u
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from evolve import laws, stars
from evolve.config import Config, read_config, read_config_text
from evolve.config.schema import SECTIONS, law_entries
from evolve.config.settings import parse_setting
from evolve.config.write import toml_text
from evolve.errors import ConfigError
from evolve.laws.contract import Annotated, Key, Law, NamedTuple

CONFIGS = sorted((Path(__file__).parents[2] / "configs").glob("*.toml"))

PAIR = {
    "A": {"mass": "0.60 Msun", "star": "dwarf"},
    "B": {"mass": "0.75 Msun", "star": "white-dwarf"},
    "orbit": {"fill": 0.98},
}


def pair(**sections):
    raw = copy.deepcopy(PAIR)
    for name, keys in sections.items():
        raw.setdefault(name, {}).update(keys)
    return raw


def test_the_completed_config_by_default():
    values = read_config(PAIR).values
    assert values["title"] == values["note"] == ""
    assert values["A"]["mass"] == 0.6 and values["A"]["star"] == "dwarf"
    assert {values["A"][key] for key in ("radius", "gyration")} == {None}
    assert values["orbit"] == {"period": None, "separation": None, "fill": 0.98, "eccentricity": 0.0}
    assert values["waves"] == {"law": "peters-1964", "strength": 1.0}
    assert values["braking"]["A"]["law"] == values["braking"]["B"]["law"] == "off"
    assert values["wind"]["A"]["law"] == "off" and values["wind"]["A"]["capture"] == "none"
    assert values["overflow"]["law"] == "atmosphere" and values["overflow"]["contact_rate"] == 1e-12
    assert values["acceptance"] == {"share": 1.0, "ceiling": "none"}
    assert values["expulsion"]["from"] == {"accretor": 1.0}
    assert values["expulsion"]["ring"] == 2.25 and values["expulsion"]["multiple"] == 1.0
    assert values["expulsion"]["consequential"] == "none"
    assert values["envelope"] == {"follows": "stop", "efficiency": 1.0, "binding": 0.5}
    assert values["limits"] == {"white_dwarf": 1.38, "neutron_star": 2.2}
    assert values["end"] == {
        "time": 1e10, "A": {"mass_below": None}, "B": {"mass_below": None},
        "period_below": None, "period_above": None, "rate_below": None, "event": None,
    }  # fmt: skip
    assert values["observer"] == {"distance": None, "inclination": None}
    assert values["numerics"] == {
        "method": "LSODA", "engine": "auto", "rtol": 1e-6, "atol": None, "max_step": None,
        "max_evaluations": 1_000_000,
    }  # fmt: skip


def test_units_reach_the_completed_config():
    # 1 yr = 365.25 d = 8766 h; 1 Rsun = 695700 km (IAU 2015 B3)
    values = read_config(
        {
            "A": {"mass": 0.6, "star": "dwarf"},
            "B": {"mass": 1.4, "star": "compact", "kind": "neutron-star"},
            "orbit": {"period": "8.766 h"},
            "wind": {"A": {"law": "constant", "rate": "1e-12 Msun/yr", "capture": 0.1}},
            "acceptance": {"ceiling": "1e-8 Msun/yr"},
            "observer": {"distance": "0.5 kpc", "inclination": 90},
            "end": {"A": {"mass_below": "0.1 Msun"}, "period_above": "365.25 d"},
        }
    ).values
    assert values["orbit"]["period"] == pytest.approx(1e-3, rel=1e-14)
    assert values["wind"]["A"]["rate"] == 1e-12 and values["wind"]["A"]["capture"] == 0.1
    assert values["wind"]["B"]["law"] == "off"
    assert values["acceptance"]["ceiling"] == 1e-8
    assert values["observer"]["distance"] == pytest.approx(500.0, rel=1e-14)
    assert values["observer"]["inclination"] == pytest.approx(np.pi / 2, rel=1e-14)
    assert values["end"]["A"]["mass_below"] == 0.1
    assert values["end"]["period_above"] == pytest.approx(1.0, rel=1e-14)


@pytest.mark.parametrize("path", CONFIGS, ids=lambda path: path.stem)
def test_demo_configs_read_and_complete_to_themselves(path):
    config = read_config(path)
    assert config.text == path.read_text() and config.path == path and config.warnings == []
    assert read_config_text(config.completed_text(), config.files).values == config.values
    assert read_config_text(config.text, config.files).values == config.values


@pytest.mark.parametrize(
    ("sections", "expected"),
    [
        ({}, ['[braking]\nlaw = "off"\n\n', '[wind]\nlaw = "off"\n\n', '[tides]\nlaw = "off"\n\n']),
        ({"braking": {"law": "off", "stops_below": 0.3}}, ['law = "off"\nstops_below = "0.3 Msun"']),
        ({"wind": {"A": {"law": "off", "capture": 0.2}}}, ['[wind.A]\nlaw = "off"\ncapture = 0.2']),
        ({"braking": {"A": {"law": "andronov-2003"}}}, ["[braking.A]", '[braking.B]\nlaw = "off"']),
        ({"expulsion": {"from": "ring"}}, ['[expulsion]\nfrom = "ring"\n']),
        ({"overflow": {"scale_height": 2e-4}}, ["scale_height = 0.0002"]),
        ({"orbit": {"eccentricity": 0.1}}, ["fill = 0.98\neccentricity = 0.1"]),
    ],
)
def test_the_completed_text_is_short_and_reads_back(sections, expected):
    config = read_config(pair(**sections))
    text = config.completed_text()
    for piece in expected:
        assert piece in text
    assert read_config_text(text).values == config.values


def test_contact_is_a_fill_of_one():
    raw = pair()
    raw["orbit"] = {"contact": True}
    assert read_config(raw).values["orbit"]["fill"] == 1.0


@pytest.mark.parametrize(
    ("masses", "orbit"),
    [
        ({"A": 0.5}, {"mass_ratio": 0.625}),
        ({"B": 0.8}, {"mass_ratio": 0.625}),
        ({"A": 0.5}, {"total_mass": "1.3 Msun"}),
        ({"B": 0.8}, {"total_mass": "1.3 Msun"}),
        ({}, {"total_mass": "1.3 Msun", "mass_ratio": 0.625}),
    ],
)
def test_masses_from_ratio_and_total(masses, orbit):
    raw = pair(orbit=orbit)
    for c in "AB":
        del raw[c]["mass"]
        if c in masses:
            raw[c]["mass"] = masses[c]
    values = read_config(raw).values
    assert values["A"]["mass"] == pytest.approx(0.5, rel=1e-15)
    assert values["B"]["mass"] == pytest.approx(0.8, rel=1e-15)
    assert "total_mass" not in values["orbit"] and "mass_ratio" not in values["orbit"]


def test_braking_for_both_and_for_one():
    both = {"law": "rappaport-verbunt-joss-1983", "gamma": 2.0}
    values = read_config(pair(braking=both)).values["braking"]
    assert values["A"] == values["B"] and values["A"]["gamma"] == 2.0
    one = {"A": {"law": "andronov-2003"}}
    values = read_config(pair(braking=one)).values["braking"]
    assert values["A"]["law"] == "andronov-2003" and values["B"]["law"] == "off"
    values = read_config(pair(braking=both | one)).values["braking"]
    assert values["A"]["law"] == "andronov-2003" and "gamma" not in values["A"]
    assert values["B"]["law"] == "rappaport-verbunt-joss-1983"


def test_idle_braking_is_a_warning():
    config = read_config(pair(braking={"B": {"law": "andronov-2003"}}))
    [warning] = config.warnings
    assert "[braking.B] has no effect" in warning and "white-dwarf" in warning


def test_tides_name_their_law_by_standing_there():
    raw = pair(tides={"A": {"k_over_t": "auto"}})
    tides = read_config(raw).values["tides"]
    assert tides["A"] == {"law": "hut-1981", "k_over_t": 0.0, "spin": None}
    assert tides["B"]["law"] == "off"
    spinning = read_config(raw, set=["tides.A.spin=1e-4 rad/s", "tides.A.k_over_t=2"])
    assert spinning.values["tides"]["A"]["spin"] == pytest.approx(3155.76, rel=1e-14)  # s in a yr
    assert spinning.values["tides"]["A"]["k_over_t"] == 2.0
    with pytest.raises(ConfigError, match='k_over_t = "fast": .*or one of "auto"|"auto"'):
        read_config(pair(tides={"A": {"k_over_t": "fast"}}))


def test_keys_of_every_star_and_of_those_without_a_light_of_their_own():
    values = read_config(pair(B={"temperature": "15000 K", "gyration": 0.1})).values["B"]
    assert values["temperature"] == 15000.0 and values["gyration"] == 0.1
    assert read_config(PAIR).values["A"]["temperature"] is None
    with pytest.raises(ConfigError, match="A.temperature = 3000: belongs to .*white-dwarf.*, not to dwarf"):
        read_config(pair(A={"temperature": 3000}))
    with pytest.raises(ConfigError, match='B.radius = "lobe": belongs to'):
        read_config(pair(B={"radius": "lobe"}))


def test_a_radius_at_the_start_out_of_equilibrium():
    assert read_config(pair(A={"radius": "lobe"})).values["A"]["radius"] == "lobe"
    assert read_config(pair(A={"radius": "0.7 Rsun"})).values["A"]["radius"] == 0.7


def test_a_law_that_is_off_may_leave_its_keys_behind():
    values = read_config(pair(braking={"law": "off", "gamma": 3.0})).values
    assert "gamma" not in values["braking"]["A"]
    with pytest.raises(ConfigError, match="braking.gamma = 33.0: out of range"):
        read_config(pair(braking={"law": "off", "gamma": 33.0}))


def test_a_slow_wind_brings_its_own_speed():
    # 15 km/s for Reimers' wind, unless given
    speeds = [
        read_config(pair(wind={"A": {"law": law, **speed}})).values["wind"]["A"]["speed"]
        for law, speed in [
            ("reimers-1975", {}), ("reimers-1975", {"speed": "30 km/s"}), ("vink-2001", {}),
        ]
    ]  # fmt: skip
    kilometres = 31557600 / 695700  # km/s in solRad/yr
    assert speeds == pytest.approx([15 * kilometres, 30 * kilometres, 0.0], rel=1e-12)


# Keys set beside the config -----------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("A.mass=0.7 Msun", ("A.mass", "0.7 Msun")),
        ('A.mass="0.7 Msun"', ("A.mass", "0.7 Msun")),
        ("A.mass = 0.7", ("A.mass", 0.7)),
        ("orbit.contact=true", ("orbit.contact", True)),
        ("end.event=contact", ("end.event", "contact")),
        ("expulsion.from={ accretor = 0.5, ring = 0.5 }",
         ("expulsion.from", {"accretor": 0.5, "ring": 0.5})),
        ("note=a=b", ("note", "a=b")),
        ("A.mass=1\nB.mass=2", ("A.mass", "1\nB.mass=2")),
    ],
)  # fmt: skip
def test_settings_as_typed(text, expected):
    assert parse_setting(text) == expected


@pytest.mark.parametrize("text", ["A.mass", "=3", "A.mass="])
def test_wrong_settings(text):
    with pytest.raises(ConfigError, match="allowed: KEY=VALUE"):
        read_config(PAIR, set=[text])


def test_setting_keys_changes_values_and_text():
    path = CONFIGS[0].with_name("red_dwarf.toml")
    config = read_config(path, set=["A.mass=0.5 Msun", "end.A.mass_below=0.1 Msun"])
    assert config.values["A"]["mass"] == 0.5 and config.values["end"]["A"]["mass_below"] == 0.1
    assert tomllib.loads(config.text)["A"]["mass"] == "0.5 Msun"
    assert read_config_text(config.text).values == config.values
    assert read_config(read_config(path), set={"A.mass": "0.5 Msun"}).values["A"]["mass"] == 0.5
    assert read_config(path).values["A"]["mass"] == 0.6


def test_a_size_takes_the_place_of_another():
    config = read_config(PAIR, set=["orbit.period=6 h"])
    assert config.values["orbit"]["fill"] is None and "fill" not in config.raw["orbit"]
    assert any("orbit.fill is left out" in warning for warning in config.warnings)
    with pytest.raises(ConfigError, match="contradicts"):
        read_config(PAIR, set=["orbit.period=6 h", "orbit.separation=2 Rsun"])


def test_changing_a_config_leaves_the_first_alone():
    config = read_config(pair(braking={"law": "andronov-2003"}))
    raw, values = copy.deepcopy(config.raw), copy.deepcopy(config.values)
    config.with_values({"orbit.period": "6 h", "braking.law": "off", "end.A.mass_below": 0.1})
    assert config.raw == raw and config.values == values


def test_a_ceiling_brings_the_keys_that_no_star_has():
    values = read_config(pair(acceptance={"ceiling": "eddington", "hydrogen": 0.5})).values
    assert values["acceptance"] == {"ceiling": "eddington", "hydrogen": 0.5, "share": 1.0}
    with pytest.raises(ConfigError, match='acceptance.radius = 1: unknown key.*"A.radius" meant'):
        read_config(pair(acceptance={"ceiling": "eddington", "radius": 1}))


def test_a_law_takes_its_own_keys_along():
    config = read_config(pair(braking={"law": "rappaport-verbunt-joss-1983", "gamma": 3.0,
                                       "strength": 2.0, "stops_below": 0.3}))  # fmt: skip
    other = config.with_values({"braking.law": "verbunt-zwaan-1981"})
    braking = other.values["braking"]["A"]
    assert "gamma" not in braking and braking["strength"] == 2.0 and braking["stops_below"] == 0.3
    assert any("braking.gamma is left out" in warning for warning in other.warnings)
    with pytest.raises(ConfigError, match="gamma = 2.0: belongs to"):
        config.with_values({"braking.law": "verbunt-zwaan-1981", "braking.gamma": 2.0})


def test_a_star_takes_its_own_keys_along():
    config = read_config(pair(A={"inflation": 0.1}))
    other = config.with_values({"A.star": "white-dwarf"})
    assert "inflation" not in other.values["A"]


@pytest.mark.parametrize(
    ("setting", "fragments"),
    [
        ("A.mas=0.7 Msun", ['A.mas = "0.7 Msun"', "as set", 'did you mean "mass"?']),
        ("A.mass=0.7 Msum", ['A.mass = "0.7 Msum"', "as set", 'did you mean "Msun"?']),
        ("A.mass.value=1", ["A.mass.value", "A.mass is a text in the config"]),
        ("braking.A.gamma=1", ["braking.A.law: missing"]),
    ],
)
def test_unknown_settings(setting, fragments):
    with pytest.raises(ConfigError) as caught:
        read_config(PAIR, set=[setting])
    for fragment in fragments:
        assert fragment in str(caught.value)


# A dict of Python's ---------------------------------------------------------------------


def test_a_dict_may_hold_quantities_and_numpy_numbers():
    config = read_config(
        pair(A={"mass": 0.6 * u.solMass}, orbit={"fill": np.float64(0.9)}, end={"time": 2 * u.Gyr})
    )
    assert config.values["A"]["mass"] == 0.6 and config.values["end"]["time"] == 2e9
    assert read_config_text(config.text).values == config.values
    assert PAIR["orbit"] == {"fill": 0.98}


def test_a_quantity_of_the_wrong_kind():
    with pytest.raises(ConfigError, match='A.mass = "3.0 h": "h" is a unit of time, not of mass'):
        read_config(pair(A={"mass": 3 * u.h}))
    with pytest.raises(ConfigError, match="A.mass = .*single quantity"):
        read_config(pair(A={"mass": [1, 2] * u.kg}))


# Texts that read back -------------------------------------------------------------------

KEYS = st.text(min_size=1, max_size=6)
SCALARS = (
    st.text(max_size=12) | st.booleans() | st.integers(-(2**63), 2**63 - 1)
    | st.floats(allow_nan=False)
)  # fmt: skip
VALUES = st.recursive(
    SCALARS, lambda inner: st.lists(inner, max_size=3) | st.dictionaries(KEYS, inner, max_size=3),
    max_leaves=12,
)  # fmt: skip


@given(st.dictionaries(KEYS, VALUES, max_size=4))
def test_any_dict_reads_back_from_its_toml(raw):
    assert tomllib.loads(toml_text(raw)) == raw


@settings(max_examples=60)
@given(
    st.floats(0.1, 0.9), st.floats(0.1, 1.37), st.floats(1e-4, 1.0), st.floats(0.0, 0.99),
    st.floats(1e6, 1e11), st.floats(1e-13, 1e-6), st.floats(0.0, 1.0), st.floats(0.1, 1e9),
)  # fmt: skip
def test_completed_text_reads_back_to_the_bit(a, b, period, e, time, rate, share, distance):
    config = read_config(
        {
            "A": {"mass": a, "star": "dwarf"},
            "B": {"mass": b, "star": "white-dwarf"},
            "orbit": {"period": f"{period!r} yr", "eccentricity": e},
            "wind": {"A": {"law": "constant", "rate": rate, "capture": share}},
            "expulsion": {"from": {"accretor": share, "ring": 1.0 - share}},
            "end": {"time": f"{time!r} yr", "B": {"mass_below": b / 3}},
            "observer": {"distance": distance, "inclination": f"{e!r} rad"},
        }
    )
    assert read_config_text(config.completed_text()).values == config.values


# Composition ------------------------------------------------------------------------------


class NewKeys(NamedTuple):
    """Keys of a law that nobody has heard of."""

    reach: Annotated[float, Key("solRad", 0.0, 10.0, "of the field")]
    order: Annotated[float, Key("", 0.0, 8.0, "of the multipole")] = 2.0


def test_a_new_law_is_known_from_its_table_alone(monkeypatch):
    law = Law(lambda star, other, orbit, keys: 0.0, NewKeys, (), "")
    monkeypatch.setitem(laws.TABLES["braking"], "new-2030", law)
    values = read_config(pair(braking={"law": "new-2030", "reach": "0.01 au"})).values["braking"]["A"]
    assert values["order"] == 2.0
    assert values["reach"] == pytest.approx(1495978.707 / 695700, rel=1e-12)  # IAU au, R_sun
    with pytest.raises(ConfigError, match="braking.reach: missing; allowed: .*up to 10 Rsun"):
        read_config(pair(braking={"law": "new-2030"}))
    with pytest.raises(ConfigError, match="belongs to new-2030, not to andronov-2003"):
        read_config(pair(braking={"law": "andronov-2003", "reach": "1 au"}))


def test_a_new_star_is_known_from_its_table_alone(monkeypatch):
    model = stars.MODELS["white-dwarf"]._replace(keys=NewKeys, prepare=lambda mass, values: ())
    monkeypatch.setitem(stars.MODELS, "new-star", model)
    values = read_config(pair(B={"star": "new-star", "reach": 3})).values["B"]
    assert values["reach"] == 3.0 and values["order"] == 2.0


@pytest.mark.parametrize(
    ("section", "name"),
    [(s, name) for s in ("braking", "wind", "overflow") for name in laws.TABLES[s]],
)
def test_every_law_is_completed_with_its_keys(section, name):
    needed = {
        key: entry.low + 0.5 * (entry.high - entry.low)
        for key, entry in law_entries(laws.TABLES[section][name]).items()
        if entry.default is ...
    }
    values = read_config(pair(**{section: {"law": name, **needed}})).values[section]
    values = values["A"] if SECTIONS[section].by_component else values
    assert set(law_entries(laws.TABLES[section][name])) <= set(values)


STARS = {
    "compact": {"mass": 1.4, "kind": "neutron-star"},
    "power-law": {"mass": 0.5, "radius": 0.5, "exponent": 0.8},
    "white-dwarf": {"mass": 0.6},
    "helium-star": {"mass": 0.2, "semi_degenerate": True, "temperature": "20000 K"},
    "dwarf": {"mass": 0.5, "inflation": 0.05},
    "main-sequence": {"mass": 5.0, "age": "10 Myr"},
    "giant": {"mass": 1.0, "core_mass": "0.25 Msun", "relation": "rappaport-1995"},
    "expanding": {"mass": 1.0, "radius": "2 Rsun", "growth_time": "100 Myr"},
    "track": {"mass": 1.0, "table": "track.csv", "age": "1 Gyr"},
}
TRACK = "age [Gyr], mass, radius, core_mass\n0,1,0.9,0\n2,1,0.95,0\n5,1,1,0\n9,1,1.1,0.1\n"


@pytest.mark.parametrize("name", stars.MODELS)
def test_every_star_completes_to_itself(tmp_path, monkeypatch, name):
    (tmp_path / "track.csv").write_text(TRACK)
    monkeypatch.chdir(tmp_path)
    raw = pair(A={"star": name, **STARS[name]}, orbit={"fill": 0.5})
    config = read_config(raw)
    again = read_config_text(config.completed_text(), config.files)
    assert again.values == config.values and again.values["A"]["star"] == name
    if name == "track":
        assert config.values["A"]["age"] == 1e9
        assert config.values["A"]["table"]["age"] == [0.0, 2e9, 5e9, 9e9]
        assert config.values["A"]["table"]["core_mass"][-1] == 0.1
    if name == "helium-star":
        assert config.values["A"]["semi_degenerate"] == "true"


@pytest.mark.parametrize(
    ("name", "keys", "fragment"),
    [
        ("main-sequence", {"burnt": 0.5}, r'config: A: .*burnt.*star = "main-sequence"'),
        ("expanding", {"luminosity": 3, "temperature": 5000}, "config: A: .*luminosity.*temperature"),
        ("expanding", {"radius": "lobe"}, 'A.radius = "lobe": not a number with a unit'),
        ("giant", {"mass": 0.25}, "config: A: .*leaves no envelope"),
        ("helium-star", {"semi_degenerate": False}, "config: A: temperature belongs to"),
        ("helium-star", {"semi_degenerate": 1}, 'semi_degenerate = 1: .*allowed: "true", "false"'),
    ],
)
def test_stars_that_cannot_be(name, keys, fragment):
    with pytest.raises(ConfigError, match=fragment):
        read_config(pair(A={"star": name, **STARS[name], **keys}))


def test_a_config_is_frozen():
    config = read_config(PAIR)
    assert isinstance(config, Config)
    with pytest.raises(AttributeError):
        config.values = {}


@pytest.mark.parametrize("written", [{}, {"A": {}}, {"B": {}}, {"A": {}, "B": {}}])
def test_an_empty_table_of_tides_means_them(written):
    point = {"mass": 1.0, "star": "compact", "kind": "point-mass"}
    config = read_config({
        "A": point, "B": point, "orbit": {"period": "1 d"}, "tides": written,
    })  # fmt: skip
    for c in "AB":
        on = c in written or not written
        assert config.values["tides"][c]["law"] == ("hut-1981" if on else "off")


def test_an_empty_table_of_braking_must_name_its_law():
    point = {"mass": 1.0, "star": "compact", "kind": "point-mass"}
    for written, path in (({}, "braking.law"), ({"A": {}}, "braking.A.law")):
        with pytest.raises(ConfigError, match=f"{path}: missing"):
            read_config(
                {"A": point, "B": point, "orbit": {"period": "1 d"}, "braking": written}
            )

"""Donors that change: remnants, reversed roles, both lobes, ends of models; about 4 s."""

import numpy as np
import pytest

import evolve

POINT = {"star": "compact", "kind": "point-mass"}


def swap(config):
    """The same pair with A and B exchanged."""
    names = {"A": "B", "B": "A"}
    other = {**config, "A": config["B"], "B": config["A"]}
    for section in ("wind", "braking", "tides", "end", "kick"):
        if set(config.get(section, {})) & {"A", "B"}:
            other[section] = {names.get(k, k): v for k, v in config[section].items()}
    return other


GIANT_AND_GROWING = {
    "A": {"mass": 1.0, "star": "giant", "core_mass": 0.25},
    "B": {"mass": 1.6, "star": "expanding", "radius": 3.0, "growth_time": "600 Myr", "zeta_ad": 4.0},
    "orbit": {"contact": True}, "acceptance": {"share": 0.3}, "end": {"time": "8 Gyr"},
}  # fmt: skip


@pytest.mark.parametrize("exchanged", [False, True])
def test_the_companion_becomes_the_donor(exchanged):
    """A giant is stripped to a white dwarf; its companion grows, fills its lobe in turn and feeds
    the white dwarf: detached in between, with the roles exchanged after."""
    first, second = ("B", "A") if exchanged else ("A", "B")
    history = evolve.run(swap(GIANT_AND_GROWING) if exchanged else GIANT_AND_GROWING)
    regimes = [c.regime for c in history.chapters]
    gone = regimes.index("detached", regimes.index(f"overflow_{first}"))
    assert f"overflow_{second}" in regimes[gone:]
    back = history.at("contact[-1]").row
    assert back > history.at("remnant_formed").row
    assert history[f"radius_{first}"][back] < 0.05  # a white dwarf now
    late = slice(back + 2, None)
    assert (history["donor"][late] == {"A": 1.0, "B": 2.0}[second]).any()
    assert history[f"overflow_{second}"][late].max() > 1e-10
    assert history.ledger.total(f"accepted_{first}", "mass") > 0.0
    # the mass ratio is that of the donor over its accretor
    row = back + 3
    ratio = history[f"mass_{second}"][row] / history[f"mass_{first}"][row]
    assert history["mass_ratio"][row] == pytest.approx(ratio, rel=1e-12)
    residuals = history.ledger.residuals
    assert all(abs(value) < 1e-9 for value in residuals.values())


@pytest.mark.parametrize("law", ["atmosphere", "polytrope", "locked"])
def test_both_lobes_at_once_are_an_end(law):
    history = evolve.run(
        {
            "A": {"mass": 1.0, "star": "expanding", "radius": 2.0, "growth_time": "100 Myr", "zeta_ad": 4.0},
            "B": {"mass": 0.9, "star": "expanding", "radius": 1.6, "growth_time": "50 Myr", "zeta_ad": 4.0},
            "orbit": {"fill": 0.9}, "overflow": {"law": law}, "end": {"time": "5 Gyr"},
        }
    )  # fmt: skip
    assert history.outcome == "both_lobes_filled" and history.complete
    contacts = [e.component for e in history.events if e.name == "contact"]
    assert set(contacts) == {"A", "B"}
    assert [e.name for e in history.events][-2:] == ["both_lobes_filled", "end"]
    for c in "AB":
        assert history[f"fill_{c}"][-1] == pytest.approx(1.0, abs=5e-3)


def lone(star, **sections):
    return {
        "A": star, "B": {"mass": 1.0, **POINT}, "waves": {"law": "off"},
        "orbit": {"separation": 1e4}, "end": {"time": "20 Gyr"}, **sections,
    }  # fmt: skip


def losing(star, rate):
    return lone(star, wind={"A": {"law": "constant", "rate": rate}})


TRACK = (
    "age [Myr], mass [Msun], radius [Rsun]\n0, 2.0, 2.0\n10, 1.9, 2.5\n20, 1.8, 3.0\n30, 1.7, 3.5\n"
)


@pytest.mark.parametrize(
    ("config", "event", "outcome", "quantity", "limit"),
    [
        (losing({"mass": 0.1, "star": "dwarf"}, 1e-10), "validity", "validity", "mass_A", 0.01),
        (losing({"mass": 0.5, "star": "helium-star"}, 1e-9), "validity", "validity", "mass_A", 0.30),
        (losing({"mass": 0.3, "star": "white-dwarf"}, 1e-10), "validity", "validity", "mass_A", None),
        (lone({"mass": 1.5, "star": "giant", "core_mass": 0.4}), "validity", "validity", "core_mass_A", 0.45),
        (lone({"mass": 5.0, "star": "main-sequence"}), "burning_ends", "validity", "time", None),
    ],
)
def test_where_a_model_ends_a_run_says_so(config, event, outcome, quantity, limit):
    for donor, pair in (("A", config), ("B", swap(config))):
        history = evolve.run(pair)
        assert history.outcome == outcome and history.complete
        assert [(e.name, e.component) for e in history.events][-2] == (event, donor)
        assert len(history.message) > 20
        if limit is not None:
            name = quantity.replace("_A", f"_{donor}")
            assert history[name][-1] == pytest.approx(limit, rel=0.02)


def test_the_last_row_of_a_track_is_an_end(tmp_path):
    (tmp_path / "own.csv").write_text(TRACK)
    history = evolve.run(lone({"mass": 2.0, "star": "track", "table": str(tmp_path / "own.csv")}))
    assert history.outcome == "table_end" and history["time"][-1] == pytest.approx(30e6, rel=1e-9)
    assert [e.name for e in history.events][-2] == "table_end"
    np.testing.assert_allclose(np.interp([10e6, 20e6], history["time"], history["radius_A"]), [2.5, 3.0], rtol=2e-2)


def test_a_track_from_hdf5_gives_the_history_of_its_csv(tmp_path):
    import h5py

    (tmp_path / "own.csv").write_text(TRACK)
    with h5py.File(tmp_path / "own.h5", "w") as file:
        for name, unit, values in (
            ("age", "yr", [0.0, 1e7, 2e7, 3e7]), ("mass", "solMass", [2.0, 1.9, 1.8, 1.7]),
            ("radius", "solRad", [2.0, 2.5, 3.0, 3.5]),
        ):  # fmt: skip
            file[name] = values
            file[name].attrs["units"] = unit
    one, two = (
        evolve.run(
            {
                "A": {"mass": 2.0, "star": "track", "table": str(tmp_path / name), "zeta_ad": 4.0},
                "B": {"mass": 1.4, "star": "compact", "kind": "neutron-star"},
                "orbit": {"fill": 0.8}, "acceptance": {"ceiling": "eddington"},
            }
        )
        for name in ("own.csv", "own.h5")
    )  # fmt: skip
    assert one.events == two.events and "contact" in [e.name for e in one.events]
    for name in one.columns:
        np.testing.assert_array_equal(one[name], two[name])


def test_a_core_of_a_track_survives_a_common_envelope_as_a_helium_star(tmp_path):
    """Webbink 1984, ApJ 277, 355: 1/a_f = [2 m m_env/(alpha lambda R_L) + m m_B/a_i]/(m_core m_B);
    a core above 0.5 Msun burns helium on."""
    (tmp_path / "own.csv").write_text(
        "age [Myr], mass [Msun], radius [Rsun], core_mass [Msun]\n"
        "0, 5, 80, 0.9\n1, 5, 120, 0.95\n2, 5, 180, 1.0\n3, 5, 250, 1.05\n"
    )
    history = evolve.run(
        {
            "A": {"mass": 5.0, "star": "track", "table": str(tmp_path / "own.csv")},
            "B": {"mass": 1.0, **POINT}, "orbit": {"fill": 0.9}, "overflow": {"law": "locked"},
            "envelope": {"follows": "common-envelope"}, "end": {"time": "20 Myr"},
        }
    )  # fmt: skip
    row = history.at("common_envelope").row
    m, core, lobe, before = (history[n][row] for n in ("mass_A", "core_mass_A", "lobe_A", "separation"))
    after = core * 1.0 / (2 * m * (m - core) / (0.5 * lobe) + m * 1.0 / before)
    assert history["separation"][row + 1] == pytest.approx(after, rel=1e-9)
    assert history["mass_A"][row + 1] == pytest.approx(core, rel=1e-12)
    assert history["radius_A"][row + 1] == pytest.approx(0.212 * core**0.654, rel=1e-9)
    assert "remnant_formed" in [e.name for e in history.events]
    assert history["time"][-1] == pytest.approx(20e6, rel=1e-9)


def test_a_common_envelope_without_room_is_a_merger():
    history = evolve.run(
        {
            "A": {"mass": 1.2, "star": "giant", "core_mass": 0.2},
            "B": {"mass": 0.4, "star": "main-sequence"},
            "orbit": {"contact": True}, "envelope": {"follows": "common-envelope", "efficiency": 0.1},
        }
    )  # fmt: skip
    assert history.outcome == "merger"
    assert [e.name for e in history.events][-3:] == ["common_envelope", "merger", "end"]


@pytest.mark.parametrize(("core", "radius"), [(0.3, None), (0.8, 0.212 * 0.8**0.654)])
def test_a_track_that_is_stripped_to_its_core_ends_as_that(tmp_path, core, radius):
    """A star cannot be lighter than its core: when 0.01 Msun of envelope are left the core stands
    alone, a white dwarf, or above 0.5 Msun a helium star of 0.212 m^0.654 Rsun."""
    (tmp_path / "own.csv").write_text(
        "age [Myr], mass [Msun], radius [Rsun], luminosity [Lsun], core_mass [Msun]\n"
        + "".join(f"{100 * n}, 2.0, {2.0 * 1.6**n}, {20 * 1.3**n}, {core}\n" for n in range(12))
    )
    history = evolve.run(
        {
            "A": {"mass": 2.0, "star": "track", "table": str(tmp_path / "own.csv"), "zeta_ad": 4.0},
            "B": {"mass": 1.8, **POINT}, "orbit": {"contact": True}, "end": {"time": "1000 Myr"},
        }
    )  # fmt: skip
    assert (history["mass_A"] >= core * (1 - 1e-12)).all()
    row = history.at("envelope_exhausted").row
    assert history["mass_A"][row] == pytest.approx(core + 0.01, rel=1e-9)
    assert history["mass_A"][-1] == pytest.approx(core, rel=1e-9)
    assert history.outcome == "time" and history.chapters[-1].regime == "detached"
    expected = radius or 0.05
    assert history["radius_A"][-1] == pytest.approx(expected, rel=1e-6 if radius else 1.0)


@pytest.mark.parametrize("law", ["atmosphere", "polytrope"])
def test_a_companion_that_the_donor_reaches_past_has_merged_with_it(law):
    """Unstable overflow that is told to go on ends where R exceeds the periastron distance."""
    history = evolve.run(
        {
            "A": {"mass": 2.1, "star": "giant", "core_mass": 0.33}, "B": {"mass": 0.04, **POINT},
            "orbit": {"contact": True}, "overflow": {"law": law}, "acceptance": {"share": 0.5},
            "expulsion": {"from": "multiple", "multiple": 2.9}, "envelope": {"follows": "continue"},
            "end": {"time": "400 Myr"},
        }
    )  # fmt: skip
    assert history.outcome == "merger"
    assert history["radius_A"][-1] == pytest.approx(history["separation"][-1], rel=1e-6)


def test_a_companion_within_the_last_stable_orbit_has_merged():
    """A donor that shrinks with its orbit to 6 G M/c2 of the black hole is swallowed."""
    history = evolve.run(
        {
            "A": {"mass": 6.3, "star": "compact", "kind": "black-hole"},
            "B": {"mass": 0.5, "star": "power-law", "radius": 0.3, "exponent": 2.4},
            "orbit": {"contact": True}, "waves": {"strength": 25.0}, "overflow": {"law": "locked"},
            "acceptance": {"share": 0.9}, "expulsion": {"from": "outer-point"},
        }
    )  # fmt: skip
    assert history.outcome == "merger"
    smallest = 6.0 * 3.9251256e8 / 1.3598865e7**2
    assert history["separation"][-1] < 3.0 * smallest * (history["mass_A"][-1] + history["mass_B"][-1])


@pytest.mark.parametrize("star", [
    {"mass": 1.6, "star": "power-law", "radius": 0.02, "exponent": 2.9},
    {"mass": 1.6, "star": "expanding", "radius": 1.0, "growth_time": "1 Gyr"},
    {"mass": 1.6, "star": "compact", "kind": "neutron-star"},
])  # fmt: skip
def test_a_star_that_is_blown_away_ends_the_history(star):
    """Nothing but a millionth is left: the models mean nothing there, and a run says so."""
    history = evolve.run(losing(star, 1e-6))
    assert history.outcome == "validity" and history.complete
    assert history["mass_A"][-1] == pytest.approx(1.6e-6, rel=1e-3)


def test_a_star_left_too_large_by_a_kick_overflows_unstably():
    """R = R_L cannot be imposed on a star that a sudden loss of mass left larger than that."""
    history = evolve.run(
        {
            "A": {"mass": 9.0, **POINT}, "B": {"mass": 0.13, "star": "helium-star", "semi_degenerate": "true"},
            "orbit": {"fill": 0.9}, "waves": {"law": "off"}, "overflow": {"law": "locked"},
            "kick": {"B": {"time": "1 Myr", "mass_lost": 0.06}},
        }
    )  # fmt: skip
    assert history.outcome == "unstable_overflow"
    names = [e.name for e in history.events]
    assert names == ["start", "kick", "contact", "circularised", "contact", "unstable_overflow", "end"]


def test_a_puffed_up_star_falls_asleep_once():
    """A star of low mass holds its atmosphere so loosely that it flows from half its lobe: the
    flow must fade without an end of its own."""
    history = evolve.run(
        {
            "A": {"mass": 0.2, "star": "expanding", "radius": 0.64, "growth_time": "187 Myr", "zeta_ad": 2.7},
            "B": {"mass": 1.36, "star": "white-dwarf"}, "orbit": {"fill": 0.88},
            "acceptance": {"share": 0.0}, "end": {"time": "11 Gyr"},
        }
    )  # fmt: skip
    assert history.outcome in ("time", "validity")
    assert history["fill_A"][-1] < 0.5


def test_two_compact_stars_that_start_in_contact_have_merged():
    """Also where a wind keeps them from being a pure inspiral."""
    history = evolve.run(
        {
            "A": {"mass": 14.6, "star": "compact", "kind": "black-hole"},
            "B": {"mass": 1.9, "star": "compact", "kind": "neutron-star"}, "orbit": {"contact": True},
            "wind": {"A": {"law": "constant", "rate": 1e-13, "capture": 0.5}},
        }
    )  # fmt: skip
    assert history.outcome == "merger" and history["time"][-1] < 1e-6

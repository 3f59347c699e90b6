"""Winds, ceilings, captures, spins and stability as a whole run shows them."""

import math
from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.constants import C, G

CONFIGS = Path(__file__).parents[2] / "configs"
POINT = {"star": "compact", "kind": "point-mass"}


def blown(mass, age, law, **wind):
    """A main-sequence star that blows, far from a companion that does not matter."""
    return evolve.run({
        "A": {"star": "main-sequence", "mass": mass, "age": age},
        "B": {**POINT, "mass": 0.1}, "orbit": {"period": "100 yr"},
        "wind": {"A": {"law": law, **wind}}, "end": {"time": "10 kyr"},
    })  # fmt: skip


def test_the_suns_wind_and_the_strongest():
    """Common practice: the Sun blows 2e-14 Msun/yr, and a luminous O star about 1e8 times that
    (here within ten). Nieuwenhuijzen & de Jager 1990 give a scatter of 0.37 dex (from memory)."""
    sun = blown(1.0, "4.57 Gyr", "nieuwenhuijzen-dejager-1990")["wind_A"][0]
    assert abs(math.log10(sun / 2e-14)) < 0.37
    strong = blown(80.0, "1 Myr", "vink-2001")["wind_A"][0]
    assert 0.1 < strong / (1e8 * 2e-14) < 10.0


def drowned(accretor, **more):
    """A donor that swells in 10 kyr and pours more over than any accretor takes."""
    return evolve.run({
        "A": {"star": "expanding", "mass": 2.0, "radius": 30.0, "growth_time": "10 kyr", "zeta_ad": 6.0},
        "B": accretor, "orbit": {"fill": 0.9}, "overflow": {"law": "atmosphere"},
        "acceptance": {"share": 1.0, "ceiling": "eddington", **more}, "end": {"time": "20 kyr"},
    })  # fmt: skip


def at_the_ceiling(history):
    """Rows in which far more flows than is accepted."""
    return (history["overflow_A"] > 5.0 * history["accepted_B"]) & (history["overflow_A"] > 1e-7)


@pytest.mark.parametrize("hydrogen", [0.7, 0.0])
def test_eddington_rate_of_a_neutron_star_through_a_run(hydrogen):
    """4 pi c R/(0.2 (1 + X) cm2/g): 2.110e-8 Msun/yr at 12 km and X = 0.7, whatever the mass;
    1.7 times that for helium. Worked apart from this code."""
    star = {"star": "compact", "kind": "neutron-star", "mass": 1.4, "radius": "12 km"}
    history = drowned(star, hydrogen=hydrogen)
    rows = at_the_ceiling(history)
    assert rows.any() and "ceiling_reached" in {event.name for event in history.events}
    expected = 2.11024e-8 * 1.7 / (1.0 + hydrogen)
    np.testing.assert_allclose(history["accepted_B"][rows], expected, rtol=1e-4)


@pytest.mark.parametrize(("spin", "efficiency"), [(0.0, 0.057191), (0.998, 0.3210)])
def test_eddington_rate_of_a_black_hole_by_its_spin(spin, efficiency):
    """4 pi G m/(kappa c eta), and the hole grows by 1 - eta of what falls in: Bardeen, Press &
    Teukolsky 1972 (eta 0.0572 without spin, 0.321 at 0.998)."""
    hole = {"star": "compact", "kind": "black-hole", "mass": 7.0, "spin": spin}
    history = drowned(hole)
    rows = at_the_ceiling(history)
    assert rows.any()
    opacity = 0.2 * 1.7 * 1.98841e33 / 6.957e10**2  # cm2/g in Rsun2/Msun
    falling = 4.0 * math.pi * G * history["mass_B"][rows] / (opacity * C * efficiency)
    grown = history["accepted_B"][rows]
    np.testing.assert_allclose(grown, (1.0 - efficiency) * falling, rtol=2e-3)
    gained = history["mass_B"][-1] - history["mass_B"][0]
    assert gained == pytest.approx(history.ledger.total("accepted_B", "mass"), rel=1e-6)


@pytest.mark.parametrize("donor", ["A", "B"])
@pytest.mark.parametrize("eccentricity", [0.0, 0.5])
def test_captured_share_of_a_wind(donor, eccentricity):
    """20 + 1.4 Msun, 50 Rsun, 1500 km/s: 4.006558e-6, over sqrt(1 - e2) of an ellipse (Bondi &
    Hoyle 1944, Boffin & Jorissen 1988, worked apart from this code; 1e-5)."""
    other = "B" if donor == "A" else "A"
    wind = {"law": "constant", "rate": "1e-7 Msun/yr", "speed": "1500 km/s", "capture": "bondi-hoyle"}
    history = evolve.run({
        donor: {**POINT, "mass": 20.0}, other: {**POINT, "mass": 1.4},
        "orbit": {"separation": 50.0, "eccentricity": eccentricity}, "wind": {donor: wind},
        "end": {"time": "1 kyr"},
    })  # fmt: skip
    share = history[f"captured_{donor}"][0] / history[f"wind_{donor}"][0]
    assert share == pytest.approx(4.006558e-6 / math.sqrt(1.0 - eccentricity**2), rel=1e-5)


def spun(separation):
    """A heavy star that a light companion must keep turning."""
    return {
        "A": {"star": "expanding", "mass": 1.0, "radius": 1.0, "growth_time": "0.1 Gyr", "gyration": 0.2},
        "B": {**POINT, "mass": 0.05}, "orbit": {"separation": separation}, "waves": {"law": "off"},
        "tides": {"A": {"law": "hut-1981", "k_over_t": 10.0}}, "end": {"time": "0.2 Gyr"},
    }  # fmt: skip


def test_darwin_instability():
    """No stable synchronous orbit where the spin of a locked star exceeds a third of the orbit's
    angular momentum (Hut 1980, A&A 92, 167): the event lies there, and the pair spirals in."""
    history = evolve.run(spun(4.2))
    event = next(event for event in history.events if event.name == "spin_orbit_instability")
    row, period = event.row, history["period"][event.row] / 8766.0
    inertia = 0.2 * history["mass_A"][row] * history["radius_A"][row] ** 2
    ratio = 3.0 * inertia * 2.0 * math.pi / period / history["angular_momentum"][row]
    assert ratio == pytest.approx(1.0, abs=1e-6)
    assert history["separation"][-1] < 0.9 * history["separation"][row]
    safe = evolve.run({**spun(40.0), "end": {"time": "0.1 Gyr"}})
    assert "spin_orbit_instability" not in {event.name for event in safe.events}


TABLE = [
    (0.0, 1.0, "accretor", 0.7883036788), (1.0, 1.0, "accretor", 1.2519617148),
    (2.0, 1.0, "accretor", 1.7170060653), (4.0, 1.0, "accretor", 2.6511173542),
    (-0.3333, 0.0, "accretor", 0.96384680854), (0.3333, 0.0, "accretor", 1.3445966714),
    (0.0, 0.0, "accretor", 1.1565453042),
]  # fmt: skip
"""zeta, accepted share, expelled from, critical mass ratio with Eggleton's lobe: the roots of
zeta_L(q) = zeta, computed apart from this code."""


@pytest.mark.parametrize(("zeta", "share", "way", "critical"), TABLE)
@pytest.mark.parametrize("law", ["locked", "atmosphere"])
def test_critical_mass_ratios(zeta, share, way, critical, law):
    """A donor 1 % below the critical mass ratio is stable; 1 % above, the event is raised."""
    for factor, stable in ((0.99, True), (1.01, False)):
        history = evolve.run({
            "A": {"star": "power-law", "mass": factor * critical, "radius": 0.5, "exponent": zeta},
            "B": {**POINT, "mass": 1.0}, "orbit": {"contact": True}, "waves": {"strength": 100.0},
            "overflow": {"law": law}, "acceptance": {"share": share}, "expulsion": {"from": way},
            "end": {"time": "20 kyr"},
        })  # fmt: skip
        raised = "unstable_overflow" in {event.name for event in history.events}
        assert raised != stable, factor


def test_the_companion_fills_its_lobe_later():
    """The Algol reverses: first A overflows, later masses are equal and A is the lighter; and both
    lobes filled at once are an end."""
    history = evolve.run(CONFIGS / "algol.toml")
    assert history["mass_A"][0] > history["mass_B"][0] and history["mass_A"][-1] < history["mass_B"][-1]
    both = evolve.run({
        "A": {"star": "expanding", "mass": 1.2, "radius": 2.0, "growth_time": "0.02 Gyr", "zeta_ad": 3.0},
        "B": {"star": "expanding", "mass": 1.1, "radius": 1.8, "growth_time": "0.01 Gyr", "zeta_ad": 3.0},
        "orbit": {"fill": 0.6}, "end": {"time": "1 Gyr"},
    })  # fmt: skip
    assert both.outcome == "both_lobes_filled"
    filled = [both[f"fill_{c}"][-1] for c in "AB"]
    assert filled == pytest.approx([1.0, 1.0], abs=0.01)


def test_a_neutron_star_becomes_a_black_hole():
    """At its limit it collapses with the loss that the config gives, and the history goes on."""
    history = evolve.run({
        "A": {"star": "dwarf", "mass": 0.9},
        "B": {"star": "compact", "kind": "neutron-star", "mass": 1.9},
        "orbit": {"contact": True}, "limits": {"neutron_star": 2.0}, "overflow": {"law": "locked"},
        "braking": {"law": "rappaport-verbunt-joss-1983"}, "end": {"time": "3 Gyr"},
    })  # fmt: skip
    event = next(event for event in history.events if event.name == "collapse")
    assert event.component == "B" and history["mass_B"][event.row] == pytest.approx(2.0, rel=1e-9)
    assert history["time"][-1] > event.time

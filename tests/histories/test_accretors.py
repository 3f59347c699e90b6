"""What accretors keep, and what becomes of them, through whole histories; about 4 s."""

import math

import numpy as np
import pytest

import evolve
from evolve.constants import C, G

DONOR = {"mass": 1.0, "star": "expanding", "radius": 3.0, "growth_time": "3 Myr", "zeta_ad": 4.0}
"""Grows through its lobe and passes on some 1e-7 Msun/yr, beyond the ceilings looked at."""


def feeding(accretor, donor="A", mass=1.0, **sections):
    """A history in which an expanding star feeds an accretor; either may be called A."""
    other = {"A": "B", "B": "A"}[donor]
    return evolve.run(
        {
            donor: {**DONOR, "mass": mass}, other: accretor, "orbit": {"fill": 0.99},
            "waves": {"law": "off"}, "limits": {"neutron_star": 3.0}, "end": {"time": "8 Myr"},
            **sections,
        }
    )  # fmt: skip


def compact(mass, kind, **more):
    return {"mass": mass, "star": "compact", "kind": kind, **more}


# Eddington rates, 4 pi c R/kappa with kappa = 0.2 (1 + X) cm2/g: 2.11024e-8 Msun/yr at 12 km and
# X = 0.7, 1.75853e-8 at 10 km, 2.98950e-8 for 10 km and helium; in proportion to R for a white dwarf
@pytest.mark.parametrize("donor", ["A", "B"])
@pytest.mark.parametrize(
    ("radius", "hydrogen", "expected"),
    [("12 km", 0.7, 2.11024e-8), ("10 km", 0.7, 1.75853e-8), ("10 km", 0.0, 2.98950e-8)],
)
@pytest.mark.parametrize("law", ["atmosphere", "locked"])
def test_a_neutron_star_keeps_the_eddington_rate(radius, hydrogen, expected, law, donor):
    history = feeding(
        compact(1.4, "neutron-star", radius=radius), donor, overflow={"law": law},
        acceptance={"ceiling": "eddington", "hydrogen": hydrogen},
    )  # fmt: skip
    other = {"A": "B", "B": "A"}[donor]
    row = history.at("ceiling_reached").row
    accepted = history[f"accepted_{other}"][row + 1 :]
    assert accepted.max() == pytest.approx(expected, rel=1e-4)
    full = history[f"overflow_{donor}"] > 1.1 * expected
    assert full.sum() > 10
    np.testing.assert_allclose(history[f"accepted_{other}"][full], expected, rtol=1e-4)
    kept = history[f"overflow_{donor}"] - history[f"accepted_{other}"]
    np.testing.assert_allclose(history[f"expelled_{other}"], kept, rtol=1e-9, atol=1e-20)
    assert [e.component for e in history.events if e.name == "ceiling_reached"] == [other]


def test_a_white_dwarf_keeps_the_eddington_rate_of_its_radius():
    """2.11024e-8 Msun/yr for 12 km, in proportion to R, of a star of 0.3 Msun: 2.2e-5."""
    history = feeding(
        {"mass": 0.3, "star": "white-dwarf"}, mass=6.0, acceptance={"ceiling": "eddington"},
    )  # fmt: skip
    radius = history["radius_B"] * 695700.0
    expected = 2.11024e-8 * radius / 12.0
    full = history["overflow_A"] > 1.1 * expected
    assert full.any() and "ceiling_reached" in [e.name for e in history.events]
    np.testing.assert_allclose(history["accepted_B"][full], expected[full], rtol=1e-4)


# eta of Bardeen, Press & Teukolsky 1972; Eddington luminosity 2.05869e38 erg/s for 1.4 Msun, X = 0.7
@pytest.mark.parametrize("donor", ["A", "B"])
@pytest.mark.parametrize(
    ("spin", "eta", "error"), [(0.0, 0.05719, 1e-3), (0.5, 0.0821, 1e-3), (0.9, 0.1558, 1e-3), (0.998, 0.321, 4e-3)]
)
def test_a_black_hole_grows_at_the_eddington_rate_of_its_spin(spin, eta, error, donor):
    """Of a rate m L_1/(eta c2) it keeps 1 - eta, so above its ceiling it grows as an exponential
    of time, and what it frees is the luminosity eta of all that reaches it."""
    history = feeding(
        compact(3.0, "black-hole", spin=spin), donor, mass=4.0, acceptance={"ceiling": "eddington"}
    )
    other = {"A": "B", "B": "A"}[donor]
    per_year = 2.05869e38 / 1.4 / (eta * 2.99792458e10**2) * 31557600.0 / 1.98841e33
    overflow, mass = history[f"overflow_{donor}"], history[f"mass_{other}"]
    full = np.flatnonzero(overflow > 1.1 * per_year * mass)
    growth = history[f"accepted_{other}"][full] / mass[full]
    np.testing.assert_allclose(growth, (1.0 - eta) * per_year, rtol=error)
    first, last = full[0], full[0] + np.argmax(np.diff(np.append(full, 0)) != 1)
    years = history["time"][last] - history["time"][first]
    assert math.log(mass[last] / mass[first]) / years == pytest.approx(
        (1.0 - eta) * per_year, rel=error
    )
    assert mass[-1] > 3.1
    light = history["accretion_luminosity"] * 3.828e33
    reaching = overflow * 1.98841e33 / 31557600.0
    np.testing.assert_allclose(light, eta * reaching * 2.99792458e10**2, rtol=error, atol=1e30)


def test_a_point_mass_has_no_ceiling():
    history = feeding(compact(3.0, "point-mass"), mass=4.0, acceptance={"ceiling": "eddington"})
    np.testing.assert_array_equal(history["accepted_B"], history["overflow_A"])


def test_a_fixed_rate():
    history = feeding(
        {"mass": 0.8, "star": "white-dwarf"}, acceptance={"ceiling": "3e-8 Msun/yr", "share": 0.5}
    )
    expected = np.minimum(0.5 * history["overflow_A"], 3e-8)
    np.testing.assert_allclose(history["accepted_B"], expected, rtol=3e-3)  # the bend, a quarter of 1 %
    assert history["accepted_B"].max() == pytest.approx(3e-8, rel=1e-12)


def test_hydrogen_burns_steadily_within_a_band():
    """Between 3.066e-7 (m - 0.5357) and 6.682e-7 (m - 0.4453) Msun/yr all is kept, below the
    plain share, above no more (Nomoto et al. 2007, ApJ 663, 1269; from memory)."""
    history = feeding(
        {"mass": 0.6, "star": "white-dwarf"}, mass=1.4, end={"event": "collapse"},
        acceptance={"share": 0.1, "ceiling": "hydrogen-burning-band"},
    )  # fmt: skip
    mass, rate, kept = (history[n] for n in ("mass_B", "overflow_A", "accepted_B"))
    low, high = 3.066e-7 * (mass - 0.5357), 6.682e-7 * (mass - 0.4453)
    below, above = rate < 0.94 * low, rate > 1.02 * high
    inside = (rate > 1.06 * low) & (rate < 0.98 * high)
    assert below.any() and inside.any() and above.any()
    np.testing.assert_allclose(kept[below], 0.1 * rate[below], rtol=1e-9)
    np.testing.assert_allclose(kept[inside], rate[inside], rtol=1e-9)
    np.testing.assert_allclose(kept[above], high[above], rtol=1e-6)
    names = [e.name for e in history.events if e.component == "B"]
    assert names.index("burning_begins") < names.index("ceiling_reached")
    begun = history.at("burning_begins").row
    assert rate[begun] == pytest.approx(low[begun], rel=0.06)  # the edge is 10 % wide


@pytest.mark.parametrize("donor", ["A", "B"])
def test_a_neutron_star_becomes_a_black_hole_and_the_history_goes_on(donor):
    """Past 2.2 Msun; no mass is lost, so the orbit stays, and the hole keeps 1 - eta."""
    other = {"A": "B", "B": "A"}[donor]
    history = evolve.run(
        {
            donor: {"mass": 0.9, "star": "dwarf"}, other: compact(2.0, "neutron-star"),
            "orbit": {"contact": True}, "braking": {"law": "rappaport-verbunt-joss-1983"},
            "end": {"time": "1 Gyr"},
        }
    )  # fmt: skip
    row = history.at("collapse").row
    assert history[f"mass_{other}"][row] == pytest.approx(2.2, rel=1e-9)
    for name in ("mass_A", "mass_B", "separation", "angular_momentum", f"radius_{donor}"):
        assert history[name][row + 1] == pytest.approx(history[name][row], rel=1e-12)
    # 12 km before, the last stable orbit 6 G m/c2 after
    assert history[f"radius_{other}"][row + 1] == pytest.approx(6.0 * G * 2.2 / C**2, rel=1e-9)
    share = history[f"accepted_{other}"] / np.maximum(history[f"overflow_{donor}"], 1e-99)
    flowing = history[f"overflow_{donor}"] > 1e-12
    assert share[row] == pytest.approx(1.0)
    assert share[-1] == pytest.approx(math.sqrt(8.0 / 9.0), rel=1e-9) and flowing[-1]
    assert history.outcome == "time"


def test_a_collapse_on_an_eccentric_orbit():
    """1.38 -> 1.249 at apastron, r = a (1 + e): 1/a' = 2/r - v2/(G M'), v2 = G M (2/r - 1/a)."""
    history = evolve.run(
        {
            "A": {"mass": 2.0, "star": "power-law", "radius": 5.0, "exponent": 0.0},
            "B": {"mass": 1.379, "star": "white-dwarf"},
            "orbit": {"separation": 60.0, "eccentricity": 0.4}, "waves": {"law": "off"},
            "wind": {"A": {"law": "constant", "rate": "1e-7 Msun/yr", "capture": 0.5}},
            "end": {"time": "100 kyr"},
        }
    )  # fmt: skip
    row = history.at("collapse").row
    m, a, e = history["mass_A"][row], history["separation"][row], history["eccentricity"][row]
    assert e == pytest.approx(0.4, abs=1e-6)
    left, apastron = history["mass_B"][row + 1], a * (1.0 + e)
    speed = G * (m + 1.38) * (2.0 / apastron - 1.0 / a)
    after = 1.0 / (2.0 / apastron - speed / (G * (m + left)))
    assert history["separation"][row + 1] == pytest.approx(after, rel=1e-9)
    assert history["eccentricity"][row + 1] == pytest.approx(apastron / after - 1.0, rel=1e-9)


def test_a_kick_tells_the_speed_of_the_pair():
    """Blaauw 1961: 4 + 2 -> 1.4 + 2 widens 4.25-fold to e = 0.7647; the centre of mass moves with
    dM v_1/M', v_1 = v m_other/M, of v = 338.314367 km/s."""
    point = {"star": "compact", "kind": "point-mass"}
    pair = {
        "A": {"mass": 2.0, **point}, "B": {"mass": 4.0, **point}, "orbit": {"separation": 10.0},
        "kick": {"B": {"time": "1 kyr", "mass_lost": 2.6}}, "end": {"time": "2 kyr"},
        "waves": {"law": "off"},
    }  # fmt: skip
    history = evolve.run(pair)
    row = history.at("kick").row
    assert history["separation"][row + 1] == pytest.approx(42.5, rel=1e-9)
    assert history["eccentricity"][row + 1] == pytest.approx(0.7647058824, rel=1e-9)
    assert history["systemic_speed"][row] == 0.0
    expected = 2.6 * 338.314367 * 2.0 / 6.0 / 3.4
    assert history["systemic_speed"][-1] == pytest.approx(expected, rel=1e-8)
    assert history.units["systemic_speed"] == "km / s"


def test_a_strong_kick_ends_the_pair():
    """Hills 1983, worked case: 200 km/s along the normal leaves a = -26.217 Rsun, e = 1.38143, so
    they part with sqrt(G M'/26.217)."""
    point = {"star": "compact", "kind": "point-mass"}
    history = evolve.run(
        {
            "A": {"mass": 4.0, **point}, "B": {"mass": 2.0, **point}, "orbit": {"separation": 10.0},
            "kick": {"A": {"time": "1 kyr", "mass_lost": 2.6, "speed": "200 km/s",
                           "polar": "90 deg", "azimuth": "90 deg"}},
        }
    )  # fmt: skip
    assert history.outcome == "unbound" and history.complete
    assert [e.name for e in history.events] == ["start", "kick", "unbound", "end"]
    speed = 436.76 * math.sqrt(3.4 / 26.21708)  # sqrt(G Msun/Rsun) = 436.76 km/s
    assert f"part with {speed:.3g} km/s" in history.message and "1.381" in history.message


def test_drawn_kicks_are_the_same_again_and_others_by_another_seed():
    point = {"star": "compact", "kind": "point-mass"}

    def after(seed):
        history = evolve.run(
            {
                "A": {"mass": 4.0, **point}, "B": {"mass": 2.0, **point},
                "orbit": {"separation": 10.0, "eccentricity": 0.5}, "end": {"time": "2 kyr"},
                "kick": {"A": {"time": "1 kyr", "mass_lost": 0.1, "speed": 30.0, "seed": seed}},
            }
        )  # fmt: skip
        return history["separation"][-1]

    assert after(1) == after(1) != after(2)

"""Tides on one or both stars through whole histories; about 5 s."""

import math

import numpy as np
import pytest

import evolve
from evolve.constants import G

POINT = {"star": "compact", "kind": "point-mass"}


def star(mass, radius, **more):
    return {"mass": mass, "star": "power-law", "radius": radius, "exponent": 0.0, "gyration": 0.1, **more}


def both(e=0.4, spin_a="2 rad/d", **more):
    return {
        "A": star(1.0, 1.0), "B": star(0.8, 0.9),
        "orbit": {"separation": 8.0, "eccentricity": e}, "waves": {"law": "off"},
        "tides": {"A": {"k_over_t": 1.0, "spin": spin_a}, "B": {"k_over_t": 0.3}},
        "end": {"time": "5 Myr"}, **more,
    }  # fmt: skip


@pytest.mark.parametrize("method", ["LSODA", "Radau"])
def test_both_spins_and_the_orbit_keep_their_sum(method):
    """To 1e-8 with every other law off; the energy of orbit and spins falls throughout."""
    history = evolve.run(both(numerics={"method": method}))
    total = history["total_angular_momentum"]
    np.testing.assert_allclose(total, total[0], rtol=1e-8)
    inertia = {"A": 0.1 * 1.0 * 1.0**2, "B": 0.1 * 0.8 * 0.9**2}
    spins = sum(inertia[c] * history[f"spin_{c}"] for c in "AB")
    np.testing.assert_allclose(history["angular_momentum"] + spins, total, rtol=1e-12)
    energy = -G * 0.8 / (2.0 * history["separation"]) + sum(
        0.5 * inertia[c] * history[f"spin_{c}"] ** 2 for c in "AB"
    )
    assert (np.diff(energy) <= 1e-12 * abs(energy[0])).all()
    assert abs(history["spin_A"][-1] / history["spin_A"][0] - 1.0) > 0.01


def test_the_end_of_tides_is_the_synchronous_circle_of_the_same_momentum():
    """J = mu sqrt(G M a) + (I_A + I_B) sqrt(G M/a^3) has that circle as its root (Hut 1980, A&A
    92, 167)."""
    history = evolve.run(both(end={"time": "3 Gyr"}))
    assert "circularised" in [e.name for e in history.events]
    a = history["separation"][-1]
    inertia, mu = 0.1 + 0.1 * 0.8 * 0.81, 0.8 / 1.8
    orbital = math.sqrt(G * 1.8 / a**3)
    momentum = mu * math.sqrt(G * 1.8 * a) + inertia * orbital
    assert momentum == pytest.approx(history["total_angular_momentum"][0], rel=1e-6)
    for c in "AB":
        assert history[f"spin_{c}"][-1] == pytest.approx(orbital, rel=1e-5)


def test_a_rounded_orbit_is_an_event_that_keeps_the_momentum():
    """e is taken for none below 1e-4: a(1 - e2) stays, to 1e-8 of a."""
    history = evolve.run(both(end={"time": "3 Gyr"}))
    row = history.at("circularised").row
    assert history["eccentricity"][row] == pytest.approx(1e-4, rel=1e-6)
    assert (history["eccentricity"][row + 1 :] == 0.0).all()
    assert history["angular_momentum"][row + 1] == history["angular_momentum"][row]
    before, after = history["separation"][row : row + 2]
    assert after == pytest.approx(before * (1.0 - 1e-8), rel=1e-9)


@pytest.mark.parametrize("tidal", ["A", "B"])
def test_da_dt_of_either_star(tidal):
    """Hut 1981, A&A 99, 126, eq. 9, off synchronism: -6 K q(1+q) (R/a)^8 s^(-15/2) [f1 - s^(3/2) f2 W/n]."""
    other, e, a, ratio = {"A": "B", "B": "A"}[tidal], 0.5, 9.0, 1.7
    orbital = math.sqrt(G * 2.2 / a**3)
    history = evolve.run(
        {
            tidal: star(1.2, 1.1), other: {"mass": 1.0, **POINT}, "waves": {"law": "off"},
            "orbit": {"separation": a, "eccentricity": e}, "end": {"time": "1 kyr"},
            "tides": {tidal: {"k_over_t": 0.5, "spin": f"{ratio * orbital / 365.25!r} rad/d"}},
        }
    )  # fmt: skip
    s, q = 1.0 - e * e, 1.0 / 1.2
    f1 = 1 + 31 / 2 * e**2 + 255 / 8 * e**4 + 185 / 16 * e**6 + 25 / 64 * e**8
    f2 = 1 + 15 / 2 * e**2 + 45 / 8 * e**4 + 5 / 16 * e**6
    expected = -6 * 0.5 * q * (1 + q) * (1.1 / a) ** 8 * s**-7.5 * (f1 - s**1.5 * f2 * ratio)
    rate = history["period_derivative"][0] / (history["period"][0] / 8766.0) * 2 / 3
    assert rate == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize("tidal", ["A", "B"])
def test_nothing_changes_at_synchronism_on_a_circle(tidal):
    other = {"A": "B", "B": "A"}[tidal]
    history = evolve.run(
        {
            tidal: {"mass": 0.3, "star": "dwarf"}, other: {"mass": 0.8, **POINT},
            "orbit": {"separation": 3.0}, "waves": {"law": "off"},
            "tides": {tidal: {}}, "end": {"time": "10 Gyr"},
        }
    )  # fmt: skip
    for name in ("separation", f"spin_{tidal}", "angular_momentum", "mass_A", "mass_B"):
        np.testing.assert_allclose(history[name], history[name][0], rtol=1e-9)


@pytest.mark.parametrize("tidal", ["A", "B"])
def test_a_star_that_outgrows_its_orbit_spirals_in(tidal):
    """Darwin 1879: no synchronous orbit is stable once I n > J/3. A growing star meets it within
    its lobe, and the orbit shrinks until contact within a few friction times."""
    other = {"A": "B", "B": "A"}[tidal]
    history = evolve.run(
        {
            tidal: {"mass": 1.2, "star": "expanding", "radius": 5.0, "growth_time": "10 Myr",
                    "gyration": 0.1},
            other: {"mass": 0.1, "star": "dwarf"}, "orbit": {"separation": 20.0},
            "waves": {"law": "off"}, "tides": {tidal: {"k_over_t": 1.0}}, "end": {"time": "50 Myr"},
        }
    )  # fmt: skip
    row = history.at("spin_orbit_instability").row
    inertia = 0.1 * history[f"mass_{tidal}"][row] * history[f"radius_{tidal}"][row] ** 2
    orbital = 2.0 * math.pi / (history["period"][row] / 8766.0)
    assert inertia * orbital == pytest.approx(history["angular_momentum"][row] / 3.0, rel=1e-6)
    assert history.at("contact")["time"] > history.at("spin_orbit_instability")["time"]
    fall = history["separation"][row] - history.at("contact")["separation"]
    assert fall > 0.1 * history["separation"][row]
    np.testing.assert_allclose(
        history["total_angular_momentum"][: row + 1], history["total_angular_momentum"][0], rtol=1e-6
    )


def test_braking_acts_on_the_spin_alone_and_tides_hand_it_on():
    """With [tides] braking torques the star: the orbit loses what the tide takes, the whole what
    the wind takes, -3.8e-30 m R^4 R_s^gamma W^3 (Rappaport, Verbunt & Joss 1983, eq. 36)."""
    history = evolve.run(
        {
            "A": {"mass": 0.5, "star": "dwarf"}, "B": {"mass": 0.8, **POINT},
            "orbit": {"separation": 3.5}, "waves": {"law": "off"},
            "braking": {"law": "rappaport-verbunt-joss-1983", "gamma": 2.0},
            "tides": {"A": {}}, "end": {"time": "10 Myr"},
        }
    )  # fmt: skip
    cgs = 3.8e-30 * 0.5 * 1.98841e33 * 6.957e10**4 * history["radius_A"] ** 2
    spin = history["spin_A"] / 31557600.0
    torque = cgs * spin**3 * 31557600.0**2 / (1.98841e33 * 6.957e10**2)
    lost = np.trapezoid(torque, history["time"])
    total = history["total_angular_momentum"]
    assert total[0] - total[-1] == pytest.approx(lost, rel=1e-3)
    # the star stays locked, so nearly all of it comes from the orbit
    assert history["angular_momentum"][0] - history["angular_momentum"][-1] == pytest.approx(lost, rel=0.1)

"""Winds as whole histories have them, from either component; about 3 s."""

import math

import numpy as np
import pytest

import evolve

POINT = {"star": "compact", "kind": "point-mass"}
SOLAR_WIND = 2e-14  # Msun/yr: common practice


def alone(mass, law, blows="A", **wind):
    """A star so far from its companion that only its own wind matters."""
    other = {"A": "B", "B": "A"}[blows]
    return evolve.run(
        {
            blows: {"mass": mass, "star": "main-sequence"}, other: {"mass": 1.0, **POINT},
            "orbit": {"separation": 50000.0}, "wind": {blows: {"law": law, **wind}},
            "end": {"time": "20 Gyr"},
        }
    )  # fmt: skip


@pytest.mark.parametrize("blows", ["A", "B"])
def test_the_solar_twin_blows_as_the_sun_does(blows):
    """2e-14 Msun/yr at 4.57 Gyr within the 0.45 dex by which rates scatter about a mean relation
    over the whole diagram (de Jager, Nieuwenhuijzen & van der Hucht 1988, A&AS 72, 259; from
    memory); a wind of cool giants, extrapolated to the Sun, is ten times too strong."""
    history = alone(1.0, "nieuwenhuijzen-dejager-1990", blows)
    now = history.at(time=4.57e9)
    assert abs(math.log10(now[f"wind_{blows}"] / SOLAR_WIND)) < 0.45
    # 1e-14 Msun/yr over 10 Gyr
    assert 1.0 - history[f"mass_{blows}"][-1] == pytest.approx(1e-4, rel=0.5)


def test_the_strongest_o_stars_blow_about_1e8_times_stronger():
    """2e-6 Msun/yr, common practice: within a factor of three over the main sequence of the
    most luminous O stars (60 Msun, O3 to O5, log L 5.7 and above)."""
    history = alone(60.0, "vink-2001")
    rates = history["wind_A"][history["temperature_A"] > 30000.0] / SOLAR_WIND
    assert (rates > 1e8 / 3.0).all() and (rates < 3e8).all()
    assert alone(20.0, "vink-2001")["wind_A"][0] < 1e7 * SOLAR_WIND  # a late one far less


def blown(mass, radius, luminosity, law, **wind):
    history = evolve.run(
        {
            "A": {"mass": mass, "star": "power-law", "radius": radius, "exponent": 0.0,
                  "luminosity": luminosity},
            "B": {"mass": 1.0, **POINT}, "orbit": {"separation": 30.0 * radius},
            "wind": {"A": {"law": law, **wind}}, "end": {"time": "1 yr"},
        }
    )  # fmt: skip
    return history["wind_A"][0]


def test_worked_values():
    """Reimers 1975; Nieuwenhuijzen & de Jager 1990; Vink, de Koter & Lamers 2001 (constants from
    memory), evaluated apart. A radius by sqrt(L) (5772 K/T)^2 gives the temperature meant."""
    assert blown(1.0, 100.0, 1e3, "reimers-1975", eta=1.0) == pytest.approx(4e-8, rel=1e-12)
    law = "nieuwenhuijzen-dejager-1990"
    assert blown(20.0, 500.0, 1e5, law) == pytest.approx(3.752585e-6, rel=1e-5)
    hot, cool = (math.sqrt(1e5) * (5772.0 / t) ** 2 for t in (4e4, 2e4))
    assert blown(30.0, hot, 1e5, "vink-2001") == pytest.approx(1.456483e-7, rel=1e-5)
    assert blown(30.0, cool, 1e5, "vink-2001") == pytest.approx(4.088140e-7, rel=1e-5)


@pytest.mark.parametrize("blows", ["A", "B"])
@pytest.mark.parametrize(
    ("masses", "separation", "speed", "e", "expected"),
    [
        ((1.5, 1.0), "2 au", "15 km/s", 0.0, 0.2019262),
        ((20.0, 1.4), "50 Rsun", "1500 km/s", 0.0, 4.006558e-6),
        ((20.0, 1.4), "50 Rsun", "1500 km/s", 0.5, 4.626375e-6),
        ((1.0, 2.0), "100 Rsun", "5 km/s", 0.0, 0.8),  # a slow wind: the cap
    ],
)
def test_captured_share(masses, separation, speed, e, expected, blows):
    """(3/4) (G m/(a v2))^2 (1 + v_orb^2/v^2)^(-3/2)/sqrt(1-e^2), Bondi & Hoyle 1944, Boffin &
    Jorissen 1988, evaluated apart; what is caught is kept and carries no torque of its own."""
    other = {"A": "B", "B": "A"}[blows]
    history = evolve.run(
        {
            blows: {"mass": masses[0], "star": "power-law", "radius": 5.0, "exponent": 0.0},
            other: {"mass": masses[1], **POINT},
            "orbit": {"separation": separation, "eccentricity": e}, "waves": {"law": "off"},
            "wind": {blows: {"law": "constant", "rate": "1e-7 Msun/yr", "speed": speed,
                             "capture": "bondi-hoyle"}},
            "end": {"time": "1 kyr"},
        }
    )  # fmt: skip
    share = history[f"captured_{blows}"] / history[f"wind_{blows}"]
    assert share[0] == pytest.approx(expected, rel=1e-5)
    np.testing.assert_allclose(history[f"accepted_{other}"], history[f"captured_{blows}"], rtol=1e-12)
    # only what escapes takes j_i = J m_j/(m_i M)
    m, companion, momentum = (history[n][0] for n in (f"mass_{blows}", f"mass_{other}", "angular_momentum"))
    lost = 1e-7 * (1.0 - expected) * momentum * companion / (m * (m + companion))
    assert history["torque_wind"][0] == pytest.approx(-lost, rel=1e-4)
    gained = history[f"mass_{other}"][-1] - history[f"mass_{other}"][0]
    assert gained == pytest.approx(1e3 * 1e-7 * expected, rel=1e-3)


@pytest.mark.parametrize("e", [0.0, 0.5])
def test_winds_from_both_keep_jeans_and_the_eccentricity(e):
    """Fast winds: a M = const (Jeans), and e stays (Hadjidemetriou 1963, Icarus 2, 440)."""
    star = {"star": "power-law", "radius": 3.0, "exponent": 0.0}
    history = evolve.run(
        {
            "A": {"mass": 8.0, **star}, "B": {"mass": 6.0, **star}, "waves": {"law": "off"},
            "orbit": {"separation": 100.0, "eccentricity": e}, "end": {"time": "2 Myr"},
            "wind": {"A": {"law": "constant", "rate": "1e-6 Msun/yr"},
                     "B": {"law": "constant", "rate": "5e-7 Msun/yr"}},
            "numerics": {"rtol": 1e-9},
        }
    )  # fmt: skip
    assert history["mass_A"][-1] == pytest.approx(6.0) and history["mass_B"][-1] == pytest.approx(5.0)
    invariant = history["separation"] * (history["mass_A"] + history["mass_B"])
    np.testing.assert_allclose(invariant, invariant[0], rtol=1e-6)
    if e:
        np.testing.assert_allclose(history["eccentricity"], e, rtol=1e-9)


def test_waves_and_wind_on_the_eccentricity_together():
    """de/dt is that of the waves alone (Peters 1964, eq. 5.7), whatever the wind does."""
    star = {"star": "power-law", "radius": 0.5, "exponent": 0.0}
    pair = {
        "A": {"mass": 8.0, **star}, "B": {"mass": 6.0, **star},
        "orbit": {"separation": 8.0, "eccentricity": 0.4}, "end": {"time": "10 kyr"},
        "numerics": {"rtol": 1e-10},
    }  # fmt: skip
    still = evolve.run(pair)
    windy = evolve.run({**pair, "wind": {"A": {"law": "constant", "rate": "1e-8 Msun/yr"}}})
    fell = [h["eccentricity"][0] - h["eccentricity"][-1] for h in (still, windy)]
    assert fell[1] == pytest.approx(fell[0], rel=1e-3)
    # -(304/15) e G3 m1 m2 M/(c5 a4 (1-e2)^(5/2)) (1 + 121/304 e2), in internal units
    g, c, e = 3.9251256e8, 1.3598865e7, 0.4
    rate = 304 / 15 * e * g**3 * 8 * 6 * 14 / (c**5 * 8.0**4 * (1 - e * e) ** 2.5)
    assert fell[0] == pytest.approx(rate * (1 + 121 / 304 * e * e) * 1e4, rel=1e-3)


@pytest.mark.parametrize("blows", ["A", "B"])
def test_a_wind_fed_accretor_is_fed_at_the_share_and_shines(blows):
    """Captured wind passes the same acceptance as an overflow: half of it kept here, the rest
    expelled with the accretor's j; light is G m mdot/R of all that arrives."""
    other = {"A": "B", "B": "A"}[blows]
    history = evolve.run(
        {
            blows: {"mass": 15.0, "star": "main-sequence"},
            other: {"mass": 1.4, "star": "compact", "kind": "neutron-star"},
            "orbit": {"period": "8 d"}, "acceptance": {"share": 0.5, "ceiling": "eddington"},
            "wind": {blows: {"law": "vink-2001", "capture": "bondi-hoyle"}},
            "end": {"event": "contact", "time": "1 Gyr"},
        }
    )  # fmt: skip
    caught, kept = history[f"captured_{blows}"], history[f"accepted_{other}"]
    inside = caught < 1e-8
    np.testing.assert_allclose(kept[inside], 0.5 * caught[inside], rtol=1e-4)
    assert (history["accretion_luminosity"] > 0.0).all()
    light = 1.4 * caught[0] / 1.7249e-5 * 3.13993e7  # G Msun2/(Rsun Lsun) in yr
    assert history["accretion_luminosity"][0] == pytest.approx(light, rel=1e-3)
    assert history.ledger.total(f"captured_{blows}", "mass") > 0.0

"""`contact` against Peters, braking alone, a growing star; shares; what is needed."""

import math

import numpy as np
import pytest

import evolve
from evolve.constants import CM_PER_RSUN, GM_SUN_SI, YEAR_SI, C, G
from evolve.orbit.lobes import lobe_fraction
from evolve.studies.contact import contact, contact_distribution
from evolve.studies.uncertain import drawn_configs, split_settings

POINT = {"star": "compact", "kind": "point-mass"}


def rigid(**sections):
    """A star of constant radius 0.3 Rsun in an orbit of 2 Rsun; contact is R = R_L."""
    return evolve.read_config(
        {
            "A": {"mass": 0.7, "star": "power-law", "radius": 0.3, "exponent": 0.0},
            "B": {"mass": 1.1, **POINT},
            "orbit": {"separation": 2.0},
            "overflow": {"law": "locked"},
            "end": {"time": "1000 Gyr"},
            "numerics": {"rtol": 1e-9},
            **sections,
        }
    )


def contact_separation():
    return 0.3 / lobe_fraction(0.7 / 1.1)


def test_by_waves_alone():
    """t = (a0^4 - a1^4)/(4 beta), beta = (64/5) G^3 m1 m2 M/c^5 (Peters 1964)."""
    answer = contact(rigid())
    beta = 64 / 5 * G**3 * 0.7 * 1.1 * 1.8 / C**5
    expected = (2.0**4 - contact_separation() ** 4) / (4 * beta)
    assert answer.time == pytest.approx(expected, rel=1e-6)
    assert answer.component == "A" and answer.shares == {"waves": pytest.approx(1.0)}
    assert answer.time_error < 1e-5 * answer.time


def test_by_braking_alone():
    """t = (a0^5 - a1^5) m_B/(10 k Rsun^4 R^gamma G M^2), k = 3.8e-30 s/cm2 (Rappaport, Verbunt
    & Joss 1983, eq. 36, integrated at constant R)."""
    answer = contact(
        rigid(
            waves={"law": "off"},
            braking={"law": "rappaport-verbunt-joss-1983", "gamma": 2.0, "stops_below": 0.0},
        )
    )
    lengths = [(x * CM_PER_RSUN) ** 5 for x in (2.0, contact_separation())]
    gm = GM_SUN_SI * 1e6 * 1.8
    seconds = (lengths[0] - lengths[1]) * 1.1
    seconds /= 10 * 3.8e-30 * CM_PER_RSUN**4 * 0.3**2 * gm * 1.8
    assert answer.time == pytest.approx(seconds / YEAR_SI, rel=1e-6)
    assert answer.shares == {"braking_A": pytest.approx(1.0)}


def test_by_growth_alone():
    """R = R0 exp(t/tau) meets a lobe that stays: t = tau ln(R_L/R0)."""
    star = {
        "mass": 0.7, "star": "expanding", "radius": 0.3, "growth_time": "2 Gyr", "luminosity": 1e-9,
    }  # fmt: skip
    answer = contact(rigid(A=star, waves={"law": "off"}))
    expected = 2e9 * math.log(2.0 * lobe_fraction(0.7 / 1.1) / 0.3)
    assert answer.time == pytest.approx(expected, rel=1e-6)
    assert answer.shares == {"growth": pytest.approx(1.0)}


def test_shares_sum_to_one():
    answer = contact(
        rigid(braking={"law": "rappaport-verbunt-joss-1983", "stops_below": 0.0, "strength": 1e-2})
    )
    assert sum(answer.shares.values()) == pytest.approx(1.0, rel=1e-12)
    assert set(answer.shares) == {"waves", "braking_A"}
    assert all(0.0 < share < 1.0 for share in answer.shares.values())


def test_no_contact_says_what_would_be_needed():
    """By waves alone T ~ a^4: the period needed follows from Peters in closed form."""
    config = rigid(end={"time": "1 Gyr"})
    answer = contact(config)
    assert not answer.reached and answer.component == "A"
    assert answer.nearest_fill == pytest.approx(answer.history["fill_A"].max())
    beta = 64 / 5 * G**3 * 0.7 * 1.1 * 1.8 / C**5
    longest = (contact_separation() ** 4 + 4 * beta * 1e9) ** 0.25
    expected = 2 * math.pi * math.sqrt(longest**3 / (G * 1.8))
    assert answer.needed_period == pytest.approx(expected, rel=2e-3)  # searched to 0.1 %


def test_distribution_is_the_same_for_the_same_seed():
    settings, uncertain = split_settings(["orbit.separation=1.6+-0.05 Rsun", "end.time=20 Gyr"])
    assert settings == ['orbit.separation="1.6 Rsun"', "end.time=20 Gyr"]
    config = evolve.read_config(rigid(), set=settings)
    first, second = (
        contact_distribution(drawn_configs(config, uncertain, 40, seed=3)) for _ in range(2)
    )
    assert first == second
    assert contact_distribution(drawn_configs(config, uncertain, 40, seed=4)) != first
    time = first["time"]
    assert time.low_95 < time.low_68 < time.median < time.high_68 < time.high_95
    # d ln T/d ln a = 4 for the most part: 3 % in a is about 12 % in T
    assert 0.5 * np.log(time.high_68 / time.low_68) == pytest.approx(0.14, abs=0.06)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("A.mass=0.60+-0.02 Msun", (0.60, 0.02, 0.02, "Msun")),
        ('A.mass="0.60 +0.02 -0.03 Msun"', (0.60, 0.02, 0.03, "Msun")),
        ("acceptance.share=0.5+-0.1", (0.5, 0.1, 0.1, "")),
    ],
)
def test_settings_with_errors(text, expected):
    _, uncertain = split_settings([text])
    assert [tuple(drawn)[1:] for drawn in uncertain.values()] == [expected]


@pytest.mark.parametrize("text", ["A.mass=0.6 Msun", "end.time=1e+9 yr", "A.star=dwarf"])
def test_settings_without(text):
    assert split_settings([text]) == ([text], {})


def test_draw_table_of_a_config():
    """[draw] in the config: uniform and log-uniform stay in their ranges, the seed decides."""
    table = {
        "orbit.separation": {"uniform": ["1.2 Rsun", "1.6 Rsun"]},
        "A.mass": {"log-uniform": ["0.5 Msun", "0.9 Msun"]},
        "count": 30, "seed": 5,
    }  # fmt: skip
    config = rigid(draw=table, end={"time": "100 Gyr"})
    asked = config.values["draw"]
    drawn = list(drawn_configs(config, asked.keys, asked.count, asked.seed))
    separations = [c.values["orbit"]["separation"] for c in drawn]
    masses = [c.values["A"]["mass"] for c in drawn]
    assert len(drawn) == 30
    assert 1.2 <= min(separations) < 1.3 and 1.5 < max(separations) <= 1.6
    assert 0.5 <= min(masses) < 0.6 and 0.75 < max(masses) <= 0.9
    again = [c.values["A"]["mass"] for c in drawn_configs(config, asked.keys, 30, 5)]
    assert again == masses


@pytest.mark.parametrize(
    ("table", "said"),
    [
        ({"A.mass": {"normal": ["0.7 Msun", "-0.1 Msun"]}}, "negative"),
        ({"A.mass": {"gaussian": ["0.7 Msun", "0.1 Msun"]}}, "unknown"),
        ({"A.mass": {"uniform": ["0.7 Msun", "0.1 Msun"]}}, "low < high"),
        ({"A.mass": {"uniform": ["0.7 Msun", "0.9 kg"]}}, "same unit"),
        ({"A.mass": "0.7 Msun"}, "allowed: a table"),
        ({"count": 1}, "2 or more"),
    ],
)
def test_wrong_draw_tables(table, said):
    with pytest.raises(evolve.ConfigError, match=said):
        rigid(draw=table)

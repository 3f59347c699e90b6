"""Compact stars, power laws, helium stars, expanding stars: each against its definition."""

from math import exp, log

import pytest

from evolve.errors import DomainError
from evolve.stars import MODELS


def star(model, mass, values, radius=1.0, phase=0.0):
    keys = MODELS[model].prepare(values.pop("at", mass), values)
    return MODELS[model].structure(mass, radius, phase, keys)


# Compact ----------------------------------------------------------------------------------


def test_radii_of_compact_stars():
    """12 km, common practice; 6 G m/c2 with GM_sun/c2 = 1476.625 m (IAU 2015 B3) over 695700 km."""
    assert star("compact", 1.4, {"kind": "neutron-star"}).radius == pytest.approx(1.7249e-5, rel=1e-4)
    hole = star("compact", 10.0, {"kind": "black-hole"})
    assert hole.radius == pytest.approx(10 * 6 * 1476.625 / 6.957e8, rel=1e-6)
    assert hole.radius == pytest.approx(1.2735e-4, rel=1e-4)
    assert star("compact", 1.0, {"kind": "point-mass"}).radius == 0.0
    assert star("compact", 1.0, {"kind": "neutron-star", "radius": 1.5e-5}).radius == 1.5e-5


def test_light_of_a_compact_star():
    """One solar radius at 5772 K is one solar luminosity (IAU 2015 B3), either way round."""
    warm = star("compact", 1.0, {"kind": "point-mass", "radius": 1.0, "temperature": 5772.0})
    bright = star("compact", 1.0, {"kind": "point-mass", "radius": 1.0, "luminosity": 16.0})
    assert warm.luminosity == pytest.approx(1.0, rel=1e-12)
    assert bright.temperature == pytest.approx(2 * 5772.0, rel=1e-12)
    assert star("compact", 1.4, {"kind": "neutron-star"}).luminosity == 0.0


@pytest.mark.parametrize("values, words", [
    ({"kind": "neutron-star", "spin": 0.5}, "spin = 0.5 belongs to a black hole"),
    ({"kind": "black-hole", "temperature": 1e4}, "no luminosity or temperature of its own"),
    ({"kind": "point-mass", "luminosity": 1.0, "temperature": 1e4}, "luminosity or temperature, not"),
])  # fmt: skip
def test_compact_stars_that_are_none(values, words):
    with pytest.raises(DomainError, match=words):
        star("compact", 2.0, values)


# Power law --------------------------------------------------------------------------------


def test_power_law():
    values = {"radius": 2.0, "exponent": 0.5, "at": 1.0}
    assert star("power-law", 4.0, dict(values)).radius == pytest.approx(4.0, rel=1e-15)
    assert star("power-law", 0.25, dict(values)).radius == pytest.approx(1.0, rel=1e-15)
    assert star("power-law", 4.0, {**values, "at": 16.0}).radius == pytest.approx(1.0, rel=1e-15)
    # zero-age luminosity of the present mass, Tout et al. 1996 (from memory)
    assert star("power-law", 1.0, dict(values)).luminosity == pytest.approx(0.6977166, rel=1e-6)
    assert star("power-law", 2.0, dict(values)).luminosity == pytest.approx(15.89126, rel=1e-6)
    assert star("power-law", 4.0, {**values, "luminosity": 3.0}).luminosity == 3.0
    assert star("power-law", 4.0, {**values, "temperature": 11544.0}).luminosity == pytest.approx(
        16 * 16, rel=1e-12
    )


# Helium -----------------------------------------------------------------------------------


def test_helium_stars():
    """0.212 m^0.654, fit to Kippenhahn & Weigert 1990; 0.029 m^-0.19, Savonije, de Kool & van
    den Heuvel 1986, A&A 155, 51; luminosity of Hurley, Pols & Tout 2000, eq. 77: all from memory,
    evaluated apart: 15262/(1 + 29.54 + 31.18 + 0.0469) = 247.09 at one solar mass."""
    burning = star("helium-star", 1.0, {"semi_degenerate": "false"})
    assert burning.radius == 0.212 and burning.zeta == 0.654
    assert burning.luminosity == pytest.approx(247.0904, rel=1e-6)
    assert star("helium-star", 4.0, {}).radius == pytest.approx(0.212 * 4**0.654, rel=1e-14)
    mass = 2.0
    expected = 15262 * mass**10.25 / (mass**9 + 29.54 * mass**7.5 + 31.18 * mass**6 + 0.0469)
    assert star("helium-star", mass, {}).luminosity == pytest.approx(expected, rel=1e-13)
    degenerate = star("helium-star", 0.1, {"semi_degenerate": "true"})
    assert degenerate.radius == pytest.approx(0.029 * 0.1**-0.19, rel=1e-14)
    assert degenerate.temperature == 1e4


@pytest.mark.parametrize("mass", [1.0, 2.0, 3.0, 5.0])
def test_burning_helium_stars_against_another_fit(mass):
    """0.2391 m^4.6/(m^4 + 0.162 m^3 + 0.0065) at zero age: Hurley, Pols & Tout 2000, MNRAS 315,
    543, eq. 78 (from memory). Above one solar mass the two agree to 4 %."""
    other = 0.2391 * mass**4.6 / (mass**4 + 0.162 * mass**3 + 0.0065)
    assert star("helium-star", mass, {}).radius == pytest.approx(other, rel=0.04)


@pytest.mark.parametrize("mass", [0.05, 0.1, 0.2])
def test_semi_degenerate_stars_lie_above_cold_ones(mass):
    """Within 25 % of R = 0.043 m^-0.062, Tutukov & Fedorova 1989 (from memory), and larger than a
    cold white dwarf of the same mass."""
    found = star("helium-star", mass, {"semi_degenerate": "true"}).radius
    assert found == pytest.approx(0.043 * mass**-0.062, rel=0.25)
    assert found > star("white-dwarf", mass, {}).radius


@pytest.mark.parametrize("mass, values, words", [
    (0.2, {"semi_degenerate": "false"}, "a burning helium star of 0.2 solMass is outside its range"),
    (0.5, {"semi_degenerate": "true"}, "a semi-degenerate helium star of 0.5 solMass is outside"),
    (1.0, {"temperature": 5e4}, "temperature belongs to a semi-degenerate"),
])  # fmt: skip
def test_helium_stars_that_are_none(mass, values, words):
    with pytest.raises(DomainError, match=words):
        star("helium-star", mass, values)


# Expanding --------------------------------------------------------------------------------

GROWING = {"radius": 2.0, "growth_time": 1e7, "largest": 100.0}


@pytest.mark.parametrize("folds", [0.0, 1.0, 3.0])
def test_exponential_growth(folds):
    found = star("expanding", 1.0, dict(GROWING), radius=2.0 * exp(folds), phase=folds)
    assert found.equilibrium == pytest.approx(2.0 * exp(folds), rel=1e-14)
    assert found.thermal == pytest.approx(1e-7, rel=1e-7)  # on R_eq only the growth is left
    assert found.phase_rate == 1e-7


def test_growth_ends_at_the_cap_without_a_jump():
    phases = [2.0 + 0.01 * i for i in range(600)]
    sizes = [star("expanding", 1.0, dict(GROWING), phase=p).equilibrium for p in phases]
    assert sizes == sorted(sizes)
    assert sizes[-1] == pytest.approx(200.0, rel=1e-14)
    slopes = [log(b / a) / 0.01 for a, b in zip(sizes, sizes[1:])]
    assert max(abs(b - a) for a, b in zip(slopes, slopes[1:])) < 0.0051  # 0.01/2, the fading
    assert sizes[100] == pytest.approx(2.0 * exp(3.0), rel=1e-14)  # untouched a fold before


def test_relaxation_of_an_expanding_star():
    """ln(R_eq/R) over G m^2/(R L), in SI; L constant, zero-age of the starting mass."""
    found = star("expanding", 0.8, {**GROWING, "at": 1.0}, radius=1.9)
    assert found.luminosity == pytest.approx(0.6977166, rel=1e-6)
    seconds = 6.6743e-11 * (0.8 * 1.98841e30) ** 2 / (1.9 * 6.957e8 * 0.6977166 * 3.828e26)
    expected = log(2.0 / 1.9) / (seconds / 31557600.0) + 1e-7
    assert found.thermal == pytest.approx(expected, rel=1e-4)


@pytest.mark.parametrize("far, edge", [(1e5, exp(1.5)), (1e-5, exp(-1.5))])
def test_trial_states_far_out_relax_as_at_the_bound(far, edge):
    rates = [star("expanding", 1.0, dict(GROWING), radius=2.0 * f).thermal for f in (far, edge)]
    assert rates[0] == pytest.approx(rates[1], rel=1e-12)


def test_light_of_an_expanding_star_by_temperature():
    found = star("expanding", 1.0, {**GROWING, "temperature": 5772.0}, radius=2.0)
    assert found.luminosity == pytest.approx(4.0, rel=1e-12)



"""White dwarfs: radius, slope, and the orbits in which they fill their lobes."""

from math import exp, log

import pytest

from evolve.laws.stability import critical_mass_ratios
from evolve.orbit.kepler import period, separation_from_period
from evolve.orbit.lobes import lobe_fraction
from evolve.stars import MODELS

MODEL = MODELS["white-dwarf"]
KEYS = MODEL.prepare(0.6, {})
SECONDS = 31557600.0  # of a Julian year


def star(mass):
    return MODEL.structure(mass, 0.0, 0.0, KEYS)


# Eggleton's relation (Verbunt & Rappaport 1988, ApJ 332, 193, eq. 15) evaluated apart from this
# package, its slope by differences; then Nauenberg's (1972, ApJ 175, 417; mu = 2, from memory)
# and the zero-temperature ideal electron gas, mu_e = 2, integrated (Chandrasekhar 1939).
ROWS = [
    (0.01, 0.0441042, -0.16385, 0.0591185, None), (0.02, 0.0386649, -0.21444, 0.0468756, None),
    (0.05, 0.0309635, -0.26829, 0.0344013, 0.034456), (0.1, 0.0253865, -0.30510, 0.0270687, 0.027122),
    (0.15, 0.0223215, -0.33058, 0.0233996, 0.023456), (0.2, 0.0202310, -0.35409, 0.0210057, 0.021068),
    (0.25, 0.0186464, -0.37804, 0.0192400, 0.019309), (0.3, 0.0173659, -0.40346, 0.0178402, 0.017917),
    (0.4, 0.0153449, -0.46116, 0.0156740, 0.015767), (0.5, 0.0137440, -0.53149, 0.0139903, 0.014101),
    (0.6, 0.0123819, -0.61941, 0.0125773, 0.012708), (0.7, 0.0111637, -0.73212, 0.0113268, 0.011479),
    (0.8, 0.0100309, -0.88122, 0.0101739, 0.010349), (0.9, 0.0089415, -1.08682, 0.0090737, 0.009274),
    (1.0, 0.0078596, -1.38730, 0.0079890, 0.008217), (1.1, 0.0067464, -1.86620, 0.0068815, 0.007138),
    (1.2, 0.0055474, -2.74632, 0.0056998, 0.005987), (1.3, 0.0041545, -4.88709, 0.0043485, 0.004664),
]  # fmt: skip


@pytest.mark.parametrize("mass, radius, slope, nauenberg, ideal", ROWS)
def test_radius_and_slope(mass, radius, slope, nauenberg, ideal):
    found = star(mass)
    assert found.radius == pytest.approx(radius, abs=6e-8)  # as many digits as the table has
    assert found.zeta == pytest.approx(slope, abs=6e-6)


@pytest.mark.parametrize("mass, radius, slope, nauenberg, ideal", [r for r in ROWS if r[0] >= 0.2])
def test_radius_against_other_relations(mass, radius, slope, nauenberg, ideal):
    """Coulomb attraction and inverse beta decays make a star smaller than the ideal gas does:
    2..5 % up to one solar mass, 11 % at 1.3."""
    assert 0.88 < star(mass).radius / ideal < 0.98
    assert star(mass).radius == pytest.approx(nauenberg, rel=0.05)


def test_held_short_of_the_limit():
    assert star(1.43) == star(1.44) == star(50.0)
    assert star(1.43).radius > 0.0


def test_temperature_sets_the_luminosity_alone():
    """At 25000 K a star of 0.6 solMass has R^2 (T/5772)^4 = 0.0124^2 * 351.9 solLum."""
    hot = MODEL.structure(0.6, 0.0, 0.0, MODEL.prepare(0.6, {"temperature": 25000.0}))
    assert hot.luminosity == pytest.approx(0.0123819**2 * (25000.0 / 5772.0) ** 4, rel=1e-5)
    assert (hot.radius, hot.zeta) == (star(0.6).radius, star(0.6).zeta)


# Donor that fills Eggleton's lobe: M1, M2, a [solRad], P [s]; evaluated apart from this package.
CONTACT = [
    (0.6, 0.3, 0.054135, 132.878), (0.5, 0.26, 0.056705, 155.018), (0.8, 0.2, 0.075601, 208.043),
    (1.0, 0.6, 0.036888, 56.055), (0.55, 0.25, 0.059545, 162.586), (0.6, 0.1, 0.106093, 413.371),
    (0.6, 0.02, 0.259913, 1684.240), (0.6, 0.01, 0.367816, 2858.499),
]  # fmt: skip


@pytest.mark.parametrize("accretor, donor, separation, seconds", CONTACT)
def test_contact(accretor, donor, separation, seconds):
    found = star(donor).radius / lobe_fraction(donor / accretor)
    # as many digits as the table has
    assert found == pytest.approx(separation, abs=6e-7)
    assert period(found, donor + accretor) * SECONDS == pytest.approx(seconds, abs=6e-4)


# Period [min] -> donor mass of a cold track with M1 = 0.8; evaluated apart from this package.
TRACK = {5: 0.139095, 10: 0.066559, 15: 0.042095, 20: 0.030024, 30: 0.018247, 40: 0.012570, 60: 0.007162}


@pytest.mark.parametrize("minutes, mass", TRACK.items())
def test_cold_track(minutes, mass):
    low, high = 0.003, 0.3
    for _ in range(60):
        middle = exp(0.5 * (log(low) + log(high)))
        separation = separation_from_period(minutes * 60.0 / SECONDS, 0.8 + middle)
        if star(middle).radius < separation * lobe_fraction(middle / 0.8):
            high = middle
        else:
            low = middle
    assert middle == pytest.approx(mass, rel=1e-4)


# Conservative, through a disc, Eggleton's lobe: donor mass -> largest stable mass ratio. Criterion:
# Marsh, Nelemans & Steeghs 2004, MNRAS 350, 113; evaluated apart from this package.
STABLE = {0.05: 0.664, 0.1: 0.647, 0.2: 0.624, 0.3: 0.602, 0.4: 0.575, 0.6: 0.502}


@pytest.mark.parametrize("mass, ratio", STABLE.items())
def test_stability_of_two_white_dwarfs(mass, ratio):
    [critical] = critical_mass_ratios(star(mass).zeta)
    assert critical == pytest.approx(ratio, abs=6e-4)


def test_largest_radius_lies_just_below_the_range():
    """Where the radius is largest the relation turns to planets: zeta = 0 at 0.0015 solMass."""
    low = MODEL.mass_range[0]
    assert star(low).zeta < 0.0 < star(0.5 * low).zeta

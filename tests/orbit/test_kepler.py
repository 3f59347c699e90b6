"""Kepler relations: computed and published numbers, round trips, arrays, compiled."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from evolve import constants
from evolve.constants import AU_SI, GM_JUPITER_SI, GM_SUN_SI, HOURS_PER_YEAR, KM_S, R_SUN_SI, G
from evolve.orbit import kepler, lobes

DAYS = 365.25
masses = st.floats(1e-6, 200.0)
separations = st.floats(1e-3, 1e5)
eccentricities = st.floats(0.0, 0.999)


# Separation [solRad], total mass [solMass], period [d]; computed with mpmath, 40 digits,
# from GM_sun and R_sun nominal. The last three are PSR B1913+16, PSR J0737-3039 and
# ZTF J1539+5027 with the published masses and periods.
PERIODS = [
    (1.0, 1.0, 0.11583593643177),
    (AU_SI / R_SUN_SI, 1.0, 365.2568983840),
    (1.0, 2.8, 0.06922521260615),
    (1.0, 1.2, 0.1057432589224),
    (21.50321556705, 60.0, 1.491155043454),
    (5.0, 2.8, 0.7739614057211),
    (2.801541029595, 1.438 + 1.390, 0.322997448918),
    (1.263240940862, 1.338185 + 1.248868, 0.1022515592973),
    (0.1120950685341, 0.61 + 0.21, 0.004800828013889),
]


@pytest.mark.parametrize(("separation", "mass", "days"), PERIODS)
def test_third_law(separation, mass, days):
    # the separations of the rows carry 13 digits
    assert kepler.period(separation, mass) * DAYS == pytest.approx(days, rel=1e-12)
    assert kepler.separation_from_period(days / DAYS, mass) == pytest.approx(separation, rel=1e-12)


def test_gaussian_year():
    # 2 pi/k with k = 0.01720209895 (Gauss's constant, IAU 1976): 365.25689833 d. The nominal
    # GM_sun is rounded at 1e-9.
    days = kepler.period(AU_SI / R_SUN_SI, 1.0) * DAYS
    assert days == pytest.approx(2.0 * math.pi / 0.01720209895, rel=1e-9)


def test_velocity_of_the_sun_about_jupiter():
    # Lovis & Fischer 2010 (in Exoplanets, ed. Seager), eq. 14, from memory: K = 28.4329 m/s
    # for a planet of one Jupiter mass in one year around one solar mass, to their rounding
    planet = GM_JUPITER_SI / GM_SUN_SI
    separation = kepler.separation_from_period(1.0, 1.0)
    speed = kepler.velocity_semi_amplitude(planet, 1.0, separation) * KM_S * 1e3
    assert speed == pytest.approx(28.4329, rel=2e-5)


def test_mass_function_of_v404_cygni():
    # Casares & Charles 1994, MNRAS 271, L5, from memory: P = 6.4714 d, K = 208.5(7) km/s,
    # f = 6.08(6) solMass
    measured = kepler.mass_function_from_velocity(6.4714 / DAYS, 208.5 / KM_S)
    assert measured == pytest.approx(6.08, abs=0.01)


# Period in hours of a star that fills its lobe is A sqrt(R3/M). A with Paczynski's lobe,
# and with Eggleton's for a donor of the given mass beside 0.75 solMass; computed with mpmath.
CONTACT = [(0.05, 8.84157), (0.1, 8.95579), (0.2, 8.97676), (0.4, 8.80797), (0.6, 8.58859)]


def _contact_hours(mass, other, fraction):
    return kepler.period(1.0 / fraction(mass / other), mass + other) * HOURS_PER_YEAR * mass**0.5


@pytest.mark.parametrize(("mass", "hours"), CONTACT)
def test_period_at_contact_hangs_on_the_mean_density(mass, hours):
    assert _contact_hours(mass, 0.75, lobes.lobe_fraction) == pytest.approx(hours, abs=6e-6)
    paczynski = _contact_hours(mass, 0.75, lobes.lobe_fraction_paczynski)
    assert paczynski == pytest.approx(8.846105, abs=6e-7)


def test_mean_density_of_the_sun():
    # 1.408 to 1.411 g/cm3 in the textbooks, with the radius they use
    unit = constants.G_PER_MSUN / constants.CM_PER_RSUN**3
    assert kepler.mean_density(1.0, 1.0) * unit == pytest.approx(1.410, abs=0.003)
    assert kepler.mean_density(3.0, 2.0) == pytest.approx(3.0 / 8.0 * kepler.mean_density(1.0, 1.0))


def test_chirp_mass_of_equal_masses():
    # m/2^(1/5) from the definition
    assert kepler.chirp_mass(1.4, 1.4) == pytest.approx(1.4 / 2.0**0.2, rel=1e-15)


@given(masses, masses, separations, eccentricities)
def test_angular_momentum_is_that_of_both_stars_at_periastron(mass_a, mass_b, a, e):
    total = mass_a + mass_b
    distance = a * (1.0 - e)
    speed = (G * total * (2.0 / distance - 1.0 / a)) ** 0.5  # vis viva
    of_a = mass_a * (distance * mass_b / total) * (speed * mass_b / total)
    of_b = mass_b * (distance * mass_a / total) * (speed * mass_a / total)
    assert kepler.angular_momentum(mass_a, mass_b, a, e) == pytest.approx(of_a + of_b, rel=1e-11)


@given(masses, masses, separations, eccentricities)
def test_angular_momentum_there_and_back(mass_a, mass_b, a, e):
    momentum = kepler.angular_momentum(mass_a, mass_b, a, e)
    exchanged = kepler.angular_momentum(mass_b, mass_a, a, e)
    assert momentum == pytest.approx(exchanged, rel=1e-15)
    back = kepler.separation_from_angular_momentum(mass_a, mass_b, momentum, e)
    assert back == pytest.approx(a, rel=1e-14)


@given(masses, separations)
def test_period_there_and_back(mass, a):
    years = kepler.period(a, mass)
    assert kepler.separation_from_period(years, mass) == pytest.approx(a, rel=1e-14)
    assert kepler.mean_motion(a, mass) * years == pytest.approx(2.0 * math.pi, rel=1e-14)


@given(masses, masses, separations, eccentricities, st.floats(0.01, 1.0))
def test_mass_function_from_masses_and_from_velocity_agree(mass, other, a, e, sine):
    total = mass + other
    speed = kepler.velocity_semi_amplitude(other, total, a, e, sine)
    measured = kepler.mass_function_from_velocity(kepler.period(a, total), speed, e)
    assert measured == pytest.approx(kepler.mass_function(other, total, sine), rel=1e-12)
    assert measured <= other * (1.0 + 1e-12)


@given(masses, masses, separations, eccentricities)
def test_velocities_are_in_the_inverse_ratio_of_the_masses(mass_a, mass_b, a, e):
    total = mass_a + mass_b
    of_a = kepler.velocity_semi_amplitude(mass_b, total, a, e)
    of_b = kepler.velocity_semi_amplitude(mass_a, total, a, e)
    assert mass_a * of_a == pytest.approx(mass_b * of_b, rel=1e-13)
    # the definition: 2 pi a_i / (P sqrt(1-e2)), a_i = a m_j/M
    own = 2.0 * math.pi * a * mass_b / total / kepler.period(a, total) / (1.0 - e * e) ** 0.5
    assert of_a == pytest.approx(own, rel=1e-12)


ARGUMENTS = {
    "mean_motion": (3.0, 1.2),
    "period": (3.0, 1.2),
    "separation_from_period": (2e-3, 1.2),
    "angular_momentum": (0.6, 0.75, 2.0, 0.3),
    "separation_from_angular_momentum": (0.6, 0.75, 5000.0, 0.3),
    "velocity_semi_amplitude": (0.6, 1.35, 2.0, 0.3, 0.8),
    "mass_function": (0.6, 1.35, 0.8),
    "mass_function_from_velocity": (2e-3, 3e4, 0.3),
    "mean_density": (0.6, 0.5),
    "chirp_mass": (0.6, 0.75),
}


@pytest.mark.parametrize("name", kepler.__all__)
def test_arrays_and_compiled_give_what_floats_give(name):
    numba = pytest.importorskip("numba")
    function, arguments = getattr(kepler, name), ARGUMENTS[name]
    expected = function(*arguments)
    rows = function(*(np.full(3, value) for value in arguments))
    assert rows == pytest.approx(np.full(3, expected), rel=1e-14)
    assert numba.njit(function)(*arguments) == pytest.approx(expected, rel=1e-13)

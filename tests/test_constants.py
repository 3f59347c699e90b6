"""The constants against astropy's records and against numbers that do not depend on G."""

import astropy.constants as published
import astropy.units as u
import pytest
from astropy.constants import codata2022, iau2015

from evolve import constants

EXACT = {
    "GM_SUN_SI": iau2015.GM_sun,
    "R_SUN_SI": iau2015.R_sun,
    "L_SUN_SI": iau2015.L_sun,
    "AU_SI": iau2015.au,
    "GM_EARTH_SI": iau2015.GM_earth,
    "GM_JUPITER_SI": iau2015.GM_jup,
    "R_EARTH_SI": iau2015.R_earth,
    "R_JUPITER_SI": iau2015.R_jup,
    "C_SI": codata2022.c,
    "BOLTZMANN_SI": codata2022.k_B,
}
MEASURED = {
    "PROTON_MASS_SI": codata2022.m_p,
    "THOMSON_SI": codata2022.sigma_T,
    "ATOMIC_MASS_SI": codata2022.u,
    "STEFAN_BOLTZMANN_SI": codata2022.sigma_sb,
    "G_SI": codata2022.G,
}


@pytest.mark.parametrize("name", EXACT)
def test_defined_values_are_exact(name):
    assert getattr(constants, name) == EXACT[name].si.value


@pytest.mark.parametrize("name", MEASURED)
def test_measured_values_agree_within_a_tenth_of_their_uncertainty(name):
    record = MEASURED[name]
    tolerance = max(0.1 * record.uncertainty, 1e-12 * record.si.value)
    assert getattr(constants, name) == pytest.approx(record.si.value, abs=tolerance, rel=0)


def test_parsec_and_julian_year():
    assert constants.PC_SI == pytest.approx(iau2015.pc.si.value, rel=1e-15)
    assert constants.YEAR_SI == (1.0 * u.yr).to_value(u.s)


def test_mass_of_the_sun_within_the_uncertainty_of_g():
    # 2.2e-5 is the relative uncertainty of G, CODATA 2022
    assert constants.M_SUN_SI == pytest.approx(published.M_sun.si.value, rel=2.2e-5)
    assert constants.M_SUN_SI == pytest.approx(1.988409870698051e30, rel=1e-14)


def test_solar_mass_as_a_time_does_not_depend_on_g():
    # GM_sun/c3 from the two exact values, 18 digits
    expected = 4.92549094764126697e-6
    assert constants.GM_SUN_SI / constants.C_SI**3 == pytest.approx(expected, rel=1e-15)
    internal = constants.G / constants.C**3 * constants.SECONDS_PER_YEAR
    assert internal == pytest.approx(expected, rel=2e-15)


def test_effective_temperature_of_the_sun_follows_from_its_radius_and_luminosity():
    # IAU 2015 Resolution B3 rounds 5772.0034 K to 5772 K
    area = 4.0 * constants.pi * constants.R_SUN_SI**2
    temperature = (constants.L_SUN_SI / (area * constants.STEFAN_BOLTZMANN_SI)) ** 0.25
    assert temperature == pytest.approx(5772.0034, abs=1e-4)
    assert constants.T_SUN == pytest.approx(temperature, rel=1e-6)


def _solar(exponent_mass, exponent_length, exponent_time, unit):
    """A product of powers of the internal units in another unit, by astropy."""
    mass = (published.GM_sun / codata2022.G) ** exponent_mass
    return (mass * iau2015.R_sun**exponent_length * u.yr**exponent_time).to_value(unit)


def test_internal_units_against_astropy():
    one_over_g = _solar(-1, 3, -2, u.m**3 / u.kg / u.s**2) / constants.G_SI
    assert constants.G == pytest.approx(1.0 / one_over_g, rel=1e-14)
    assert constants.C == pytest.approx(1.0 / _solar(0, 1, -1, codata2022.c.si), rel=1e-14)
    assert constants.KM_S == pytest.approx(_solar(0, 1, -1, u.km / u.s), rel=1e-14)
    assert constants.TORQUE_CGS == pytest.approx(_solar(1, 2, -2, u.dyn * u.cm), rel=1e-14)
    power = _solar(1, 2, -3, u.W)
    luminosity = iau2015.L_sun.si.value
    assert constants.ENERGY_PER_LUMINOSITY_YEAR == pytest.approx(luminosity / power, rel=1e-14)
    assert constants.G_PER_MSUN == pytest.approx(_solar(1, 0, 0, u.g), rel=1e-14)
    assert constants.CM_PER_RSUN == pytest.approx(_solar(0, 1, 0, u.cm), rel=1e-14)
    assert constants.HOURS_PER_YEAR == pytest.approx(_solar(0, 0, 1, u.h), rel=1e-14)
    assert constants.S_PER_YEAR == constants.SECONDS_PER_YEAR == constants.YEAR_SI


def test_kelvin_helmholtz_time_of_the_sun():
    # G Msun2/(Rsun Lsun), astropy's constants; about 31 Myr, the textbook value
    time = codata2022.G * published.M_sun**2 / (iau2015.R_sun * iau2015.L_sun)
    assert constants.GRAVITATIONAL_TIME == pytest.approx(time.to_value(u.yr), rel=5e-5)
    assert constants.GRAVITATIONAL_TIME == pytest.approx(31.4e6, rel=2e-3)

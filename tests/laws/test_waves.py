"""Gravitational waves against quadrature, published pulsars and closed forms."""

import mpmath
import pytest
from law_helpers import close, make_orbit, make_star
from hypothesis import given
from hypothesis import strategies as st

from evolve.constants import AU_SI, R_SUN_SI, SECONDS_PER_YEAR
from evolve.laws import waves
from evolve.orbit.kepler import period, separation_from_period

AU = AU_SI / R_SUN_SI
DAY = 86400.0 / SECONDS_PER_YEAR
METRE = 1.0 / R_SUN_SI

# (m1, m2, a [solRad], e, T [Myr], Pdot, adot [m/yr], edot [1/yr]); Peters 1964 by mpmath with 40
# digits, eq. 5.14, crossed with an integration of eq. 5.6 and 5.7
CASES = [
    (1.4, 1.4, 1.0, 0.0, 27.3696091321082, -2.596789498002e-12, -6.3546760628, 0.0),
    (0.6, 0.6, 1.0, 0.0, 347.695404900485, -3.122444896389e-13, -0.5002223139813, 0.0),
    (30.0, 30.0, 0.1 * AU, 0.0, 594.706346114989, -2.574312538529e-12, -6.288728532883, 0.0),
    (1.0, 0.5, 0.01 * AU, 0.0, 4281.88569202792, -7.15086816258e-14, -0.0873434518456, 0.0),
    (1.0, 1e-3, 1.0, 0.0, 150054.360556453, -7.921705589809e-16, -0.001159079945128, 0.0),
    (1.4, 1.4, 5.0, 0.1, 16490.2167753049, -4.958127297234e-14, -0.0542611934147, -2.382324624397e-12),
    (1.4, 1.4, 5.0, 0.3, 12156.1485095647, -8.25114431701e-14, -0.09029960524162, -9.102628326052e-12),
    (1.4, 1.4, 5.0, 0.5, 6120.49899572606, -2.268898840819e-13, -0.2483057643734, -2.611430241709e-11),
    (1.4, 1.4, 5.0, 0.7, 1616.39775024218, -1.266581073105e-12, -1.386132232254, -1.042116352366e-10),
    (1.4, 1.4, 5.0, 0.9, 58.2805821860105, -5.774608032561e-11, -63.19666772648, -1.750191340457e-9),
]  # fmt: skip

# T(e)/T(0) at equal separation, mpmath, and the enhancement of the power
RATIOS = [
    (0.01, 0.999634935414693, 1.000654355769),
    (0.1, 0.964001594364587, 1.067347746731),
    (0.3, 0.710636294490822, 1.776243280327),
    (0.5, 0.357798255206847, 4.884311999533),
    (0.7, 0.0944929972475743, 27.26598922108),
    (0.9, 0.00340702459605912, 1243.113478601),
    (0.99, 1.66856818382991e-6, 3914172.555677),
    (0.999, 6.05961733117232e-10, 12374418233.14),
]


def laws_at(m1, m2, a, e, strength=1.0):
    stars, orbit = (make_star(m1), make_star(m2)), make_orbit(m1, m2, a, e)
    keys = waves.WavesKeys(strength)
    return (
        waves.torque(*stars, orbit, keys),
        waves.eccentricity_rate(*stars, orbit, keys),
        orbit.angular_momentum,
    )


@pytest.mark.parametrize("m1, m2, a, e, time, pdot, adot, edot", CASES)
def test_rates_and_times(m1, m2, a, e, time, pdot, adot, edot):
    assert waves.merger_time(m1, m2, a, e) / 1e6 == close(time, rel=1e-10)
    assert waves.period_derivative(m1, m2, a, e) == close(pdot, rel=1e-10)
    assert waves.separation_derivative(m1, m2, a, e) / METRE == close(adot, rel=1e-10)
    assert waves.eccentricity_derivative(m1, m2, a, e) == close(edot, rel=1e-10)


@pytest.mark.parametrize("m1, m2, a, e, time, pdot, adot, edot", CASES)
def test_torque_and_edot_give_the_same_shrinking(m1, m2, a, e, time, pdot, adot, edot):
    # d ln a/dt = 2 Jdot/J + 2 e edot/(1-e^2), from J = m1 m2/M sqrt(G M a (1-e^2))
    torque, rate, momentum = laws_at(m1, m2, a, e)
    shrinking = 2.0 * torque / momentum + 2.0 * e * rate / (1.0 - e * e)
    assert rate == close(edot, rel=1e-10)
    assert shrinking * a / METRE == close(adot, rel=1e-10)


def test_strength_scales_both():
    once, twice = laws_at(0.6, 0.7, 1.2, 0.3), laws_at(0.6, 0.7, 1.2, 0.3, 2.0)
    assert twice[0] == close(2.0 * once[0]) and twice[1] == close(2.0 * once[1])


@pytest.mark.parametrize("e, ratio, power", RATIOS)
def test_eccentric_times_over_circular_ones(e, ratio, power):
    assert waves.merger_time_ratio(e) == close(ratio, rel=1e-12)
    assert waves.enhancement(e) == close(power, rel=1e-11)


@pytest.mark.parametrize("e", [1e-6, 0.35, 0.95, 0.9999])
def test_ratio_by_quadrature(e):
    # Peters 1964, eq. 5.14 with e = s^19, which makes the integrand analytic
    with mpmath.workdps(30):
        x, power = mpmath.mpf(e), mpmath.mpf(1) / 2299
        bracket = lambda y: 1 + mpmath.mpf(121) / 304 * y * y  # noqa: E731
        inner = lambda s: 19 * s**47 * bracket(s**19) ** (1181 * power) / (1 - s**38) ** 1.5  # noqa: E731
        end = x ** (mpmath.mpf(1) / 19)
        edges = [0, end / 2, *(end * (1 - mpmath.mpf(10) ** -k) for k in range(1, 8)), end]
        start = x ** (mpmath.mpf(12) / 19) / (1 - x * x) * bracket(x) ** (870 * power)
        exact = mpmath.mpf(48) / 19 * mpmath.quad(inner, edges) / start**4
    assert waves.merger_time_ratio(e) == close(float(exact), rel=1e-12)


def test_ratio_at_both_ends():
    assert waves.merger_time_ratio(0.0) == close(1.0, rel=1e-14)
    e = 1.0 - 1e-9  # the limit is approached as (1-e)^(1/2)
    limit = 768.0 / 425.0 * ((1.0 - e) * (1.0 + e)) ** 3.5
    assert waves.merger_time_ratio(e) == close(limit, rel=1e-3)


def test_track_of_the_binary_pulsar():
    # a/a0 from e0 = 0.6171340 down, integrated independently
    for e, ratio in [
        (0.5, 0.7102199537951),
        (0.3, 0.4144687344599),
        (0.1, 0.1881164363011),
        (0.01, 0.04343902940558),
        (0.001, 0.01014499161112),
    ]:
        assert waves.separation_of_eccentricity(e, 3.0, 0.6171340) == close(
            3.0 * ratio, rel=1e-12
        )


# (m1, m2, P [d], e, published Pdot, tolerance). Values of the publications from memory; the
# tolerance is that of the masses quoted, or of higher orders in v/c.
PULSARS = [
    # Weisberg & Huang 2016, ApJ 829, 55: general relativity for masses rounded to 0.001
    (1.438, 1.390, 0.322997448918, 0.6171340, -2.40263e-12, 5e-4),
    # Weisberg, Nice & Taylor 2010, ApJ 722, 1030
    (1.4398, 1.3886, 0.322997448918, 0.6171334, -2.402531e-12, 3e-5),
    # Kramer et al. 2021, PRX 11, 041050; 1.4e-5 of it are higher orders
    (1.338185, 1.248868, 0.1022515592973, 0.087777023, -1.247827e-12, 3e-5),
]


@pytest.mark.parametrize("m1, m2, days, e, published, tolerance", PULSARS)
def test_period_derivative_of_pulsars(m1, m2, days, e, published, tolerance):
    a = separation_from_period(days * DAY, m1 + m2)
    assert waves.period_derivative(m1, m2, a, e) == close(published, rel=tolerance)


def test_double_pulsar_merges_in_85_million_years():
    # Kramer et al. 2021 (from memory): about 85 Myr, the orbit shrinks by 7 mm a day
    a = separation_from_period(0.1022515592973 * DAY, 1.338185 + 1.248868)
    masses = 1.338185, 1.248868
    assert waves.merger_time(*masses, a, 0.087777023) == close(85e6, rel=0.02)
    shrinking = waves.separation_derivative(*masses, a, 0.087777023) / METRE * 1e3 / 365.25
    assert shrinking == close(-7.0, rel=0.05)


def test_twelve_minute_white_dwarfs():
    # Hermes et al. 2012, ApJ 757, L21 (SDSS J0651+2844): 0.26 + 0.50, predicted -8.2e-12
    a = separation_from_period(765.206543 / SECONDS_PER_YEAR, 0.76)
    assert waves.period_derivative(0.50, 0.26, a) == close(-8.2e-12, rel=0.01)


def test_strain_and_frequency_derivative():
    # h0 = 4 (G Mc)^(5/3) (pi f)^(2/3)/(c^4 d), evaluated independently in SI
    for m1, m2, seconds, parsec, strain in [
        (0.61, 0.21, 414.7915404, 2340.0, 1.984151e-22),
        (0.50, 0.26, 765.206543, 1000.0, 3.212814e-22),
        (0.6, 0.6, 600.0, 1000.0, 8.985464e-22),
    ]:
        years = seconds / SECONDS_PER_YEAR
        assert waves.strain_amplitude(m1, m2, years, parsec) == close(strain, rel=1e-6)
        # f = 2/P: fdot = -2 Pdot/P^2
        a = separation_from_period(years, m1 + m2)
        expected = -2.0 * waves.period_derivative(m1, m2, a) / years**2
        assert waves.wave_frequency_derivative(m1, m2, years) == close(expected, rel=1e-12)


masses = st.floats(0.01, 100.0)


@given(masses, masses, st.floats(0.01, 1e4))
def test_circular_time_is_three_eighths_of_the_period_over_its_derivative(m1, m2, a):
    expected = -3.0 / 8.0 * period(a, m1 + m2) / waves.period_derivative(m1, m2, a)
    assert waves.circular_merger_time(m1, m2, a) == close(expected, rel=1e-12)


@given(masses, masses, st.floats(0.1, 1e3), st.floats(0.01, 0.95))
def test_a_year_later_a_year_less_is_left(m1, m2, a, e):
    def left(eccentricity):
        separation = waves.separation_of_eccentricity(eccentricity, a, e)
        return waves.merger_time(m1, m2, separation, eccentricity)

    step = 1e-4 * e * (1.0 - e)
    by_eccentricity = (left(e + step) - left(e - step)) / (2.0 * step)
    rate = waves.eccentricity_derivative(m1, m2, a, e)
    assert by_eccentricity * rate == close(-1.0, rel=1e-5)

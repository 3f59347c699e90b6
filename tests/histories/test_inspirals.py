"""Inspirals by gravitational waves against Peters' integral, by mpmath, and against pulsars."""

import mpmath
import pytest

import evolve
from evolve.constants import C, G, HOURS_PER_YEAR

SECONDS_PER_HOUR = 3600.0


def pair(mass_a, mass_b, eccentricity=0.0, **orbit):
    point = {"star": "compact", "kind": "point-mass"}
    return {
        "A": {"mass": mass_a, **point},
        "B": {"mass": mass_b, **point},
        "orbit": {"eccentricity": eccentricity, **orbit},
        "end": {"time": "10000 Gyr"},
        "numerics": {"rtol": 1e-9},
    }


def peters_time(mass_a, mass_b, separation, eccentricity):
    """Peters 1964, eq. 5.14, in yr, by mpmath: written independently of the package."""
    mpmath.mp.dps = 25
    beta = mpmath.mpf(64) / 5 * mpmath.mpf(G) ** 3 * mass_a * mass_b * (mass_a + mass_b) / C**5
    if eccentricity == 0.0:
        return float(mpmath.mpf(separation) ** 4 / (4 * beta))
    e0 = mpmath.mpf(eccentricity)
    weight = 1 + mpmath.mpf(121) / 304 * e0**2
    c0 = separation * (1 - e0**2) / (e0 ** mpmath.mpf(12 / mpmath.mpf(19)))
    c0 /= weight ** (mpmath.mpf(870) / 2299)

    def integrand(s):  # e = s^19 makes the integrand smooth at 0
        e = s**19
        shape = (1 + mpmath.mpf(121) / 304 * e**2) ** (mpmath.mpf(1181) / 2299)
        return s**29 * shape / (1 - e**2) ** 1.5 * 19 * s**18

    integral = mpmath.quad(integrand, [0, e0 ** (mpmath.mpf(1) / 19)])
    return float(12 * c0**4 / (19 * beta) * integral)


@pytest.mark.parametrize(
    ("mass_a", "mass_b", "separation", "eccentricity"),
    [
        (1.4, 1.4, 1.0, 0.0),
        (30.0, 30.0, 21.50321556705, 0.0),
        (1.0, 0.5, 2.150321556705, 0.0),
        (1.4, 1.4, 5.0, 0.1),
        (1.4, 1.4, 5.0, 0.5),
        (1.4, 1.4, 5.0, 0.9),
        (1.9, 7.5, 8.0, 0.99),
        (0.6, 12.0, 6.0, 0.999),
    ],
)
def test_merger_time_against_peters_integral(mass_a, mass_b, separation, eccentricity):
    history = evolve.run(pair(mass_a, mass_b, eccentricity, separation=separation))
    assert history.outcome == "merger"
    expected = peters_time(mass_a, mass_b, separation, eccentricity)
    # The run ends at 6GM/c2; what is left from there is below 1e-12 of these times,
    # but not below 1e-6 of the last one's: its periastron starts close by.
    assert history["time"][-1] == pytest.approx(expected, rel=1e-6)


def test_track_of_eccentricity():
    """a(e) of Peters 1964, eq. 5.11, from e0 = 0.6171340 (check values by mpmath)."""
    history = evolve.run(pair(1.4, 1.4, 0.6171340, separation=3.0))
    e, ratio = history["eccentricity"], history["separation"] / 3.0

    def constant(x):
        return x ** (12 / 19) / (1 - x**2) * (1 + 121 / 304 * x**2) ** (870 / 2299)

    inside = e > 1e-3
    expected = constant(e[inside]) / constant(0.6171340)
    assert ratio[inside] == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize(
    ("mass_a", "mass_b", "period_days", "eccentricity", "published", "tolerance"),
    [
        # PSR B1913+16, -2.402531(14)e-12 with these masses: Weisberg, Nice & Taylor 2010,
        # ApJ 722, 1030 (Pdot from memory)
        (1.4398, 1.3886, 0.322997448918, 0.6171334, -2.402531e-12, 3e-5),
        # the same, general relativity with rounded masses: Taylor & Weisberg 1982, ApJ 253, 908
        (1.438, 1.390, 0.322997448918, 0.6171340, -2.403e-12, 5e-4),
        # PSR J0737-3039: Kramer et al. 2021, PRX 11, 041050, general relativity
        # -1.247827(7)e-12, of which 1.4e-5 lies beyond the quadrupole (digits from memory)
        (1.338185, 1.248868, 0.1022515592973, 0.087777023, -1.247827e-12, 3e-5),
        # SDSS J0651+2844, prediction for its masses: -8.2(17)e-12 (Hermes et al. 2012)
        (0.50, 0.26, 765.206543 / 86400, 0.0, -8.2e-12, 0.01),
        # ZTF J1539+5027, observed -2.373(5)e-11; masses known to 7 %, tides add some
        # (Burdge et al. 2019, Nature 571, 528; digits from memory)
        (0.61, 0.21, 414.7915404 / 86400, 0.0, -2.373e-11, 0.15),
    ],
)
def test_published_period_derivatives(
    mass_a, mass_b, period_days, eccentricity, published, tolerance
):
    history = evolve.run(pair(mass_a, mass_b, eccentricity, period=f"{period_days!r} d"))
    # dP/dt is dimensionless: s/s
    assert history["period_derivative"][0] == pytest.approx(published, rel=tolerance, abs=0.0)


def test_double_pulsar_merges_in_85_million_years():
    """Kramer et al. 2021: "merger in 85 Myr"; lifetime of B1913+16: 3.0e8 yr."""
    history = evolve.run(pair(1.338185, 1.248868, 0.087777023, period="2.4540374231 h"))
    assert history["time"][-1] == pytest.approx(85e6, rel=0.02)
    history = evolve.run(pair(1.438, 1.390, 0.6171340, period="7.751939106 h"))
    assert history["time"][-1] == pytest.approx(3.0e8, rel=0.02)


def test_circular_law_of_period_with_time():
    """P(t) = P0 (1 - t/T)^(3/8) (Peters 1964): half the time left, 0.771105413 of the period."""
    history = evolve.run(pair(1.4, 1.4, period="8 h"))
    total = history["time"][-1]
    assert total == pytest.approx(1809.56333204171e6, rel=1e-6)
    inside = history["time"] < 0.999 * total
    expected = 8.0 * (1.0 - history["time"][inside] / total) ** 0.375
    assert history["period"][inside] == pytest.approx(expected, rel=1e-5)
    assert HOURS_PER_YEAR == 8766.0

"""`shrink` against published pulsars and white dwarfs, an integrated inspiral, and itself."""

import numpy as np
import pytest

import evolve
from evolve.errors import ConfigError
from evolve.studies.shrink import remaining_times, shrink, shrink_uncertain

DAY = 1.0 / 365.25


@pytest.mark.parametrize(
    ("masses", "period", "eccentricity", "published", "tolerance"),
    [
        # Weisberg, Nice & Taylor 2010, ApJ 722, 1030 (Pdot from memory)
        ((1.4398, 1.3886), 0.322997448918 * DAY, 0.6171334, -2.402531e-12, 3e-5),
        # Kramer et al. 2021, PRX 11, 041050 (digits from memory)
        ((1.338185, 1.248868), 0.1022515592973 * DAY, 0.087777023, -1.247827e-12, 3e-5),
        # Hermes et al. 2012, ApJ 757, L21: expected -8.2(17)e-12
        ((0.50, 0.26), 765.206543 / 86400 * DAY, 0.0, -8.2e-12, 0.01),
    ],
)
def test_published_period_derivatives(masses, period, eccentricity, published, tolerance):
    answer = shrink(*masses, period=period, eccentricity=eccentricity)
    assert answer.period_derivative == pytest.approx(published, rel=tolerance, abs=0.0)


def test_published_lifetimes():
    """300 Myr (B1913+16, 7.75 h; Weisberg & Taylor 2005), 85 Myr (J0737-3039; Burgay et al.
    2003), 1.1 Myr (J0651+2844 by its masses; check value by mpmath)."""
    assert shrink(
        1.438, 1.390, period=0.322997448918 * DAY, eccentricity=0.617134
    ).merger_time == pytest.approx(3.0e8, rel=0.02)
    assert shrink(
        1.338185, 1.248868, period=0.1022515592973 * DAY, eccentricity=0.087777023
    ).merger_time == pytest.approx(85e6, rel=0.02)
    assert shrink(0.5, 0.26, period=765.206543 / 86400 * DAY).merger_time == pytest.approx(
        1.11037120896585e6, rel=1e-6
    )


@pytest.mark.parametrize("eccentricity", [0.0, 0.4, 0.95])
def test_against_an_integrated_inspiral(eccentricity):
    point = {"star": "compact", "kind": "point-mass"}
    history = evolve.run(
        {
            "A": {"mass": 1.3, **point}, "B": {"mass": 0.9, **point},
            "orbit": {"separation": 3.0, "eccentricity": eccentricity},
            "end": {"time": "10000 Gyr"}, "numerics": {"rtol": 1e-9},
        }
    )  # fmt: skip
    answer = shrink(1.3, 0.9, separation=3.0, eccentricity=eccentricity)
    assert answer.merger_time == pytest.approx(history["time"][-1], rel=1e-6)
    total = answer.merger_time
    for time, period, e in zip(
        *(answer.table[n][1:6] for n in ("remaining_time", "period", "eccentricity")), strict=True
    ):
        epoch = history.at(time=total - time)
        # between rows a column runs straight: the rows lie a few per cent apart
        assert epoch["period"] / 8766.0 == pytest.approx(period, rel=5e-3)
        if eccentricity:
            assert epoch["eccentricity"] == pytest.approx(e, rel=1e-2)


def test_the_table_of_a_circular_orbit_follows_the_fourth_root():
    """a ~ T^(1/4), P ~ T^(3/8) (Peters 1964)."""
    table = remaining_times(1.4, 1.4, 2.0)
    ratio = table["remaining_time"] / table["remaining_time"][0]
    np.testing.assert_allclose(table["separation"] / 2.0, ratio**0.25, rtol=1e-14)
    np.testing.assert_allclose(table["period"] / table["period"][0], ratio**0.375, rtol=1e-13)


def test_eccentric_table_keeps_peters_invariant():
    """a (1-e^2) e^(-12/19) (1 + 121/304 e^2)^(-870/2299) stays (Peters 1964, eq. 5.11)."""
    table = remaining_times(1.4, 1.4, 2.0, 0.7)
    e, a = table["eccentricity"], table["separation"]
    invariant = a * (1 - e**2) * e ** (-12 / 19) * (1 + 121 / 304 * e**2) ** (-870 / 2299)
    np.testing.assert_allclose(invariant, invariant[0], rtol=1e-10)
    assert (np.diff(e) < 0.0).all()


def test_errors_of_inputs_give_errors_of_answers():
    """T ~ P^(8/3) at fixed masses: a period known to 1 % gives a time known to 8/3 %."""
    spread = shrink_uncertain(
        [(1.4, 0.0, 0.0), (1.4, 0.0, 0.0)], ("period", (1e-3, 1e-5, 1e-5)), (0.0, 0.0, 0.0), 4000
    )["merger_time"]
    width = 0.5 * (spread.high_68 - spread.low_68) / spread.median
    assert width == pytest.approx(8 / 3 * 0.01, rel=0.08)  # 4000 draws: sigma to 2-3 %
    again = shrink_uncertain(
        [(1.4, 0.0, 0.0), (1.4, 0.0, 0.0)], ("period", (1e-3, 1e-5, 1e-5)), (0.0, 0.0, 0.0), 4000
    )["merger_time"]
    assert again == spread


def test_what_makes_no_orbit_is_refused_with_all_of_its_problems():
    with pytest.raises(ConfigError) as refused:
        shrink(-1.0, float("nan"), period=1.0, separation=1.0, eccentricity=1.0)
    text = str(refused.value)
    assert all(word in text for word in ("mass_a", "mass_b", "not both", "eccentricity"))

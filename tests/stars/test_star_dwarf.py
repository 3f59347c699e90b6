"""Dwarfs: their table, its interpolation, and their relaxation."""

from math import exp, log, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.interpolate import PchipInterpolator

from evolve.errors import DomainError
from evolve.stars import MODELS
from evolve.stars.tables import builtin

MODEL = MODELS["dwarf"]
KEYS = MODEL.prepare(0.3, {})
MASSES = builtin("dwarf")["mass"]
# kg, m, W, s of solMass, solRad, solLum, Julian year; G: IAU 2015 B3 and CODATA
MSUN, RSUN, LSUN, YEAR, GRAVITY = 1.98841e30, 6.957e8, 3.828e26, 31557600.0, 6.6743e-11


def star(mass, factor=1.0, keys=KEYS):
    """A dwarf at a multiple of its equilibrium radius."""
    size = MODEL.structure(mass, 1.0, 0.0, keys).equilibrium
    return MODEL.structure(mass, factor * size, 0.0, keys)


def test_the_rows_are_met():
    table = builtin("dwarf")
    for mass, radius, luminosity in zip(*table.values()):
        found = star(mass)
        assert found.equilibrium == pytest.approx(radius, rel=1e-13)
        assert found.luminosity == pytest.approx(luminosity, rel=1e-12)


# Baraffe et al. 1998 (A&A 337, 403) at 5 Gyr, from memory: mass, R, log L, effective temperature;
# as soft as 5 % in R and 0.1 dex in L, hence 6 % in T.
SOFT = [
    (0.1, 0.123, -3.05, 2810), (0.2, 0.22, -2.27, 3300), (0.3, 0.29, -1.95, 3430),
    (0.4, 0.37, -1.69, 3530), (0.5, 0.46, -1.43, 3650), (0.6, 0.55, -1.14, 3910),
    (0.7, 0.65, -0.83, 4350), (0.8, 0.74, -0.58, 4780),
]  # fmt: skip


@pytest.mark.parametrize("mass, radius, log_luminosity, temperature", SOFT)
def test_low_mass_models(mass, radius, log_luminosity, temperature):
    found = star(mass)
    assert found.radius == pytest.approx(radius, rel=0.05)
    assert log(found.luminosity, 10) == pytest.approx(log_luminosity, abs=0.1)
    assert found.temperature == pytest.approx(temperature, rel=0.06)


# Field dwarfs: Pecaut & Mamajek 2013, ApJS 208, 9, table in the version of 2019.3.22: mass, log L,
# R; a sanity band of 15 % in R and 0.2 dex in L.
FIELD = {
    "K0V": (0.87, -0.33, 0.817), "K3V": (0.75, -0.58, 0.729), "K5V": (0.68, -0.78, 0.698),
    "K8V": (0.59, -1.10, 0.587), "M0V": (0.55, -1.20, 0.559), "M1V": (0.49, -1.40, 0.496),
    "M2V": (0.44, -1.57, 0.434), "M3V": (0.36, -1.78, 0.369), "M3.5V": (0.26, -2.07, 0.291),
    "M4V": (0.22, -2.20, 0.258), "M5V": (0.16, -2.52, 0.199), "M5.5V": (0.12, -2.79, 0.149),
    "M6V": (0.10, -3.02, 0.127), "M7V": (0.090, -3.21, 0.118), "M8V": (0.082, -3.36, 0.111),
    "L0V": (0.077, -3.57, 0.108), "L2V": (0.075, -3.84, 0.104),
}  # fmt: skip


@pytest.mark.parametrize("kind", FIELD)
def test_field_dwarfs(kind):
    mass, log_luminosity, radius = FIELD[kind]
    assert star(mass).radius == pytest.approx(radius, rel=0.15)
    assert log(star(mass).luminosity, 10) == pytest.approx(log_luminosity, abs=0.2)


# Donors of cataclysmic variables below the gap: Knigge, Baraffe & Patterson 2011, ApJS 194, 28:
# R = 0.225 (m/0.20)^0.61 (coefficients from memory). Single stars are smaller by the bias of
# 4.5 % that the paper finds below the gap. Only near the gap's edge: lighter donors are larger
# still, out of equilibrium.
@pytest.mark.parametrize("mass", [0.16, 0.18, 0.20])
def test_donors_below_the_gap(mass):
    inflated = MODEL.prepare(mass, {"inflation": 0.045})
    assert star(mass, 1.0, inflated).radius == pytest.approx(0.225 * (mass / 0.2) ** 0.61, rel=0.05)


@given(x=st.floats(log(0.01), 0.0))
def test_interpolation_is_the_monotone_cubic_of_the_logarithms(x):
    table = builtin("dwarf")
    found = star(exp(x))
    for name, value in (("radius", found.equilibrium), ("luminosity", found.luminosity)):
        curve = PchipInterpolator([log(m) for m in MASSES], [log(v) for v in table[name]])
        assert log(value) == pytest.approx(float(curve(log(exp(x)))), rel=1e-10, abs=1e-12)


@given(x=st.floats(log(0.01), -1e-9), step=st.floats(1e-6, 0.3))
def test_luminosity_rises_with_mass_and_the_radius_has_one_minimum(x, step):
    """The rows fall in radius to 0.06 solMass and rise from there; so does the curve."""
    low, high = exp(x), exp(min(x + step, 0.0))
    assert star(low).luminosity <= star(high).luminosity
    if high <= 0.06:
        assert star(low).radius >= star(high).radius
    if low >= 0.06:
        assert star(low).radius <= star(high).radius


@pytest.mark.parametrize("mass", MASSES[1:-1])
def test_no_kink_at_the_rows(mass):
    step = 1e-7
    sizes = [log(star(mass * exp(k * step)).equilibrium) for k in (-2, -1, 0, 1, 2)]
    left, right = (sizes[2] - sizes[0]) / (2 * step), (sizes[4] - sizes[2]) / (2 * step)
    assert left == pytest.approx(right, abs=1e-4)


@pytest.mark.parametrize("mass", [0.05, 0.1, 0.2, 0.35])
@pytest.mark.parametrize("factor", [0.8, 0.97, 1.02, 1.3])
def test_relaxation_balances_the_energy(mass, factor):
    """E = -(3/7) G m^2/R of an n = 3/2 polytrope (Chandrasekhar 1939) must change by what burns,
    L_eq x^-9, less what is radiated, L_eq x^2. In SI, by a finite difference of E."""
    found, rest = star(mass, factor), star(mass)
    years = 1.0
    radii = [found.radius * exp(s * found.thermal * years) for s in (-0.5, 0.5)]
    energies = [-3.0 / 7.0 * GRAVITY * (mass * MSUN) ** 2 / (r * RSUN) for r in radii]
    watts = (energies[1] - energies[0]) / (years * YEAR)
    expected = rest.luminosity * LSUN * (factor**-9 - factor**2)
    assert watts == pytest.approx(expected, rel=1e-4)
    assert found.luminosity == pytest.approx(rest.luminosity * factor**2, rel=1e-12)


def test_relaxation_time_at_the_edge_of_the_gap():
    """Linearised: (77/3) R L/(G m^2), 1/25.7 of the Kelvin-Helmholtz time; 0.2 solMass, in SI."""
    ends = [star(0.2, factor).thermal for factor in (0.9999, 1.0001)]
    rate = (ends[0] - ends[1]) / 0.0002
    seconds = GRAVITY * (0.2 * MSUN) ** 2 / (0.216 * RSUN * 0.0057 * LSUN)
    assert rate == pytest.approx(77.0 / 3.0 / (seconds / YEAR), rel=1e-4)


def test_trial_states_far_out_relax_as_at_the_bound():
    assert star(0.3, 1e6).thermal == pytest.approx(star(0.3, exp(1.5)).thermal, rel=1e-12)
    assert star(0.3, 1e-6).thermal == pytest.approx(star(0.3, exp(-1.5)).thermal, rel=1e-12)


@pytest.mark.parametrize("mass, edge", [(0.004, 0.01), (0.0099, 0.01), (1.2, 1.0), (7.0, 1.0)])
def test_the_ends_of_the_table_hold_outside(mass, edge):
    found, there = star(mass), star(edge)
    assert (found.equilibrium, found.temperature) == (there.equilibrium, there.temperature)


def test_inflation_is_of_the_radius_not_of_the_light():
    inflated = MODEL.prepare(0.3, {"inflation": 0.045})
    assert star(0.3, 1.0, inflated).radius == pytest.approx(1.045 * star(0.3).radius, rel=1e-14)
    assert star(0.3, 1.0, inflated).luminosity == pytest.approx(star(0.3).luminosity, rel=1e-13)
    assert star(0.3, 1.0, inflated).temperature == pytest.approx(
        star(0.3).temperature / sqrt(1.045), rel=1e-13
    )


def test_a_table_of_the_users_own():
    own = {"mass": [0.2, 0.3, 0.4, 0.5], "radius": [0.3, 0.3, 0.4, 0.5],
           "luminosity": [0.01, 0.02, 0.03, 0.04]}  # fmt: skip
    keys = MODEL.prepare(0.25, {"table": own})
    assert star(0.3, 1.0, keys).radius == pytest.approx(0.3, rel=1e-14)
    assert star(0.25, 1.0, keys).radius == pytest.approx(0.3, rel=1e-14)  # a flat stretch stays
    assert (keys.mass_low, keys.mass_high) == (0.2, 0.5)
    with pytest.raises(DomainError, match="mass 0.6 is outside the table of masses, 0.2 to 0.5"):
        MODEL.prepare(0.6, {"table": own})


def test_the_exponent_is_the_polytropes_unless_given():
    """zeta = (1 - n)/(3 - n) = -1/3 for n = 3/2."""
    assert star(0.3).zeta == (1.0 - 1.5) / (3.0 - 1.5)
    assert star(0.3, 1.0, MODEL.prepare(0.3, {"zeta_ad": 0.4})).zeta == 0.4

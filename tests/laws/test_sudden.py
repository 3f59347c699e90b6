"""Common envelopes, sudden losses and kicks, discs."""

from math import atan2, cos, pi, sin, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st
from law_helpers import close

from evolve.constants import CM_PER_RSUN, G_PER_MSUN, HOURS_PER_YEAR, KM_S, S_PER_YEAR, G
from evolve.laws import disc
from evolve.laws.envelope import survives, webbink_1984
from evolve.laws.kick import collapsed_mass, sudden_change, true_anomaly
from evolve.orbit.kepler import period
from evolve.orbit.lobes import lobe_fraction


@pytest.mark.parametrize("binding, after, hours", [(0.5, 3.4217836, 17.596786), (1.0, 6.4622339, 45.669743)])
def test_common_envelope(binding, after, hours):
    # Webbink 1984: m = 1.5, core 0.4, R = R_L = 100, companion 0.6, alpha = 1
    before = 100.0 / lobe_fraction(1.5 / 0.6)
    assert before == close(217.451182, rel=1e-8)
    found = webbink_1984(1.5, 0.4, 0.6, 100.0, before, 1.0, binding)
    assert found == close(after, rel=1e-7)
    assert period(found, 1.0) * HOURS_PER_YEAR == close(hours, rel=1e-6)


def test_common_envelope_without_an_envelope_changes_nothing():
    assert webbink_1984(1.0, 1.0, 0.6, 10.0, 30.0) == close(30.0)


def test_survival_needs_room_for_both():
    assert survives(0.4, 0.016, 0.6, 0.55, 3.4)
    assert not survives(0.4, 0.016, 0.6, 0.55, 1.2)  # the companion is too large
    assert not survives(0.4, 2.0, 0.6, 0.55, 3.4)  # the core is
    lobe = 3.4 * lobe_fraction(0.6 / 0.4)
    assert survives(0.4, 0.016, 0.6, 0.999 * lobe, 3.4)
    assert not survives(0.4, 0.016, 0.6, 1.001 * lobe, 3.4)


@pytest.mark.parametrize(
    "before, other, after, ratio, e",
    [(4.0, 2.0, 1.4, 4.25, 0.7647058824), (5.0, 10.0, 1.4, 1.4615384615, 0.3157894737)],
)
def test_sudden_loss(before, other, after, ratio, e):
    # Blaauw 1961: a/a0 = (M - dM)/(M - 2 dM), e = dM/(M - dM)
    found = sudden_change(before, after, other, 7.0)
    assert found.separation == close(7.0 * ratio, rel=1e-9)
    assert found.eccentricity == close(e, rel=1e-9)
    assert found.bound and found.tilt == 0.0
    # the mass that leaves keeps its star's velocity v other/M: recoil dM v_1/M'
    v1 = sqrt(G * (before + other) / 7.0) * other / (before + other)
    assert found.speed == close((before - after) * v1 / (after + other), rel=1e-9)


def test_half_the_mass_is_the_limit():
    assert sudden_change(4.0, 1.0 + 1e-9, 2.0, 1.0).bound
    gone = sudden_change(4.0, 1.0 - 1e-9, 2.0, 1.0)
    assert not gone.bound and gone.separation < 0.0 and gone.eccentricity > 1.0


def test_kicks():
    # Hills 1983: 4 + 2 -> 1.4 + 2, a = 10, v = 338.314367 km/s; evaluated independently
    assert sqrt(G * 6.0 / 10.0) * KM_S == close(338.314367, rel=2e-9)
    retrograde = sudden_change(4.0, 1.4, 2.0, 10.0, 100.0 / KM_S, pi)
    assert retrograde.separation == close(8.894049169, rel=1e-9)
    assert retrograde.eccentricity == close(0.1243472809, rel=1e-8)
    normal = sudden_change(4.0, 1.4, 2.0, 10.0, 200.0 / KM_S, pi / 2.0, pi / 2.0)
    assert normal.separation == close(-26.217080, rel=1e-6)
    assert normal.eccentricity == close(1.3814307, rel=1e-6)
    assert normal.tilt * 180.0 / pi == close(30.590142, rel=1e-7)
    assert not normal.bound


def cross(u, v):
    return (u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0])


angles = st.floats(0.0, pi)


@given(
    st.floats(1.0, 20.0), st.floats(0.05, 1.0), st.floats(0.1, 20.0),
    st.floats(0.0, 300.0), angles, st.floats(0.0, 2.0 * pi),
    st.floats(0.0, 0.9), st.floats(0.0, 2.0 * pi),
)  # fmt: skip
def test_against_orbital_elements_of_the_state_vector(
    before, kept, other, km_s, polar, azimuth, old_e, anomaly
):  # fmt: skip
    # the star at (0, r, 0) seen from its companion, its way along x, minus the normal along z;
    # elements from place and velocity of the new pair
    after, a, kick = before * kept, 20.0, km_s / KM_S
    mu = G * (before + other)
    latus = a * (1.0 - old_e * old_e)
    distance = latus / (1.0 + old_e * cos(anomaly))
    old = (sqrt(mu * latus) / distance, old_e * sqrt(mu / latus) * sin(anomaly), 0.0)
    assert sum(x * x for x in old) == close(mu * (2.0 / distance - 1.0 / a), rel=1e-9)  # vis viva
    kicks = (
        kick * cos(polar), kick * sin(polar) * cos(azimuth), kick * sin(polar) * sin(azimuth),
    )  # fmt: skip
    velocity = tuple(x + y for x, y in zip(old, kicks, strict=True))
    place, mu = (0.0, distance, 0.0), G * (after + other)
    square = sum(x * x for x in velocity)
    inverse = 2.0 / distance - square / mu
    momentum = cross(place, velocity)
    along = cross(velocity, momentum)
    e = sqrt(sum((x / mu - y / distance) ** 2 for x, y in zip(along, place, strict=True)))
    found = sudden_change(before, after, other, a, kick, polar, azimuth, old_e, anomaly)
    if abs(inverse) * a > 1e-9:
        assert found.separation == close(1.0 / inverse, rel=1e-9)
        assert found.bound == (inverse > 0.0)
    assert found.eccentricity == pytest.approx(e, rel=1e-9, abs=1e-7)
    # the angle between the new angular momentum and the old, which points along -z here
    assert abs(found.tilt) == pytest.approx(
        abs(atan2(sqrt(momentum[0] ** 2 + momentum[1] ** 2), -momentum[2])), abs=1e-9
    )
    # momentum of both in the frame in which the old pair was at rest
    share = before / (before + other)
    drift = sqrt(sum(
        ((after * ((1.0 - share) * x + y) - other * share * x) / (after + other)) ** 2
        for x, y in zip(old, kicks, strict=True)
    ))  # fmt: skip
    assert found.speed == pytest.approx(drift, rel=1e-9, abs=1e-6)


@given(st.floats(0.0, 2.0 * pi), st.floats(0.0, 0.99))
def test_true_anomaly_solves_keplers_equation(mean, e):
    # r from the true anomaly and r from the eccentric one are the same place
    f = true_anomaly(mean, e)
    eccentric = atan2(sqrt(1.0 - e * e) * sin(f), e + cos(f)) % (2.0 * pi)
    back = eccentric - e * sin(eccentric)
    assert cos(back) == pytest.approx(cos(mean), abs=1e-9)
    assert sin(back) == pytest.approx(sin(mean), abs=1e-9)


def test_collapse_of_a_white_dwarf():
    # Lattimer & Yahil 1989 (from memory): 1.38 solar masses leave 1.249
    assert collapsed_mass(1.38) == pytest.approx(1.249, abs=5e-4)
    m = collapsed_mass(1.38)
    assert m + 0.084 * m * m == close(1.38, rel=1e-12)


IN_GRAMS = G_PER_MSUN / S_PER_YEAR


def test_critical_rates_of_discs():
    # Lasota, Dubus & Kruk 2008 (from memory), evaluated independently in g/s
    unit = 1e10 / CM_PER_RSUN
    plain = disc.critical_rate(0.8, 3.0 * unit) * IN_GRAMS
    assert plain == close(1.7895e17, rel=1e-4)
    irradiated = disc.critical_rate_irradiated(7.0, 10.0 * unit) * IN_GRAMS
    assert irradiated == close(6.7121e16, rel=1e-4)
    assert disc.critical_rate(0.8, unit, helium=True) == 10.0 * disc.critical_rate(0.8, unit)
    assert disc.critical_rate(0.8, unit, 0.2) == close(
        disc.critical_rate(0.8, unit) * 2.0**-0.01
    )
    assert disc.critical_rate_irradiated(7.0, unit, 2e-3) == close(
        disc.critical_rate_irradiated(7.0, unit) * 2.0**-0.36
    )


def test_sizes_of_discs():
    assert disc.disc_radius(0.5, 3.0) == close(1.2)
    # at q = 1 the matter circles at (1+q) 0.5^4 a
    assert disc.circularisation_radius(1.0, 3.0) == close(0.375)
    # a tight pair of white dwarfs hits its accretor; a cataclysmic variable does not
    assert not disc.forms_disc(0.1, 0.05, 0.02)
    assert disc.forms_disc(0.4, 1.2, 0.011)


@given(st.floats(0.03, 1.0))
def test_matter_circles_within_the_disc(q):
    assert disc.circularisation_radius(q, 1.0) < disc.disc_radius(q, 1.0)

"""Expulsion and the answer of the lobe: closed forms, critical mass ratios."""

from math import exp, log, sqrt

import pytest
from hypothesis import given
from hypothesis import strategies as st
from law_helpers import close, make_orbit, make_star

from evolve.laws import find
from evolve.laws.contract import NoKeys
from evolve.laws.stability import (
    Shares,
    accepted_share,
    critical_mass_ratios,
    loss_parameter,
    zeta_lobe,
)
from evolve.orbit.lobes import lobe_slope

# Names of the shares by way, and the law's keys
WAYS = [
    ("accretor", {}),
    ("donor", {}),
    ("ring", {"ring": 2.25}),
    ("outer-point", {}),
    ("multiple", {"multiple": 1.7}),
]


def carried(way, m_donor, m_accretor, separation=3.0, e=0.0, **keys):
    """Specific angular momentum of one way, times m_donor/J."""
    law = find("expulsion", way)
    orbit = make_orbit(m_donor, m_accretor, separation, e)
    stars = make_star(m_donor), make_star(m_accretor)
    specific = law.function(*stars, orbit, law.keys(**keys))
    return specific * m_donor / orbit.angular_momentum


@given(st.floats(0.02, 50.0), st.floats(0.02, 50.0))
def test_laws_and_loss_parameter_say_the_same(m_donor, m_accretor):
    for way, keys in WAYS:
        shares = Shares(**{way.replace("-", "_"): 1.0}, ring_radius=2.25, mean=1.7)
        assert carried(way, m_donor, m_accretor, **keys) == close(
            loss_parameter(m_donor / m_accretor, shares), rel=1e-12
        )
        assert accepted_share(shares) == 0.0


def test_torques_of_every_way():
    # as Jdot/J per unit loss: m_j/(m_i M); sqrt(g) M/(m1 m2)/sqrt(1-e^2); k/M; and x_L^2 Omega/J
    m1, m2, e = 0.6, 1.4, 0.3
    total = m1 + m2
    assert carried("accretor", m1, m2, e=e) / m1 == close(m1 / (m2 * total), rel=1e-12)
    assert carried("donor", m1, m2, e=e) / m1 == close(m2 / (m1 * total), rel=1e-12)
    assert carried("ring", m1, m2, e=e, ring=4.0) / m1 == close(
        2.0 * total / (m1 * m2) / sqrt(1.0 - e * e), rel=1e-12
    )
    assert carried("multiple", m1, m2, e=e, multiple=3.0) / m1 == close(3.0 / total)


@pytest.mark.parametrize(
    "q, distance", [(1.0, 1.19841), (0.5, 1.24905), (0.2, 1.27141), (0.1, 1.25608), (0.01, 1.14632)]
)
def test_outer_point(q, distance):
    # root of x - (1-mu)/(x+mu)^2 - mu/(x-1+mu)^2 above 1-mu, mu = q/(1+q); to five digits
    for pair in ((q, 1.0), (1.0, q)):
        orbit = make_orbit(*pair, 3.0)
        law = find("expulsion", "outer-point")
        specific = law.function(make_star(pair[0]), make_star(pair[1]), orbit, NoKeys())
        assert sqrt(specific / orbit.omega) / 3.0 == pytest.approx(distance, abs=1e-5)


GAMMA = Shares(ring=1.0, ring_radius=2.25)
MIXED = Shares(donor=0.1, accretor=0.4, ring=0.1, ring_radius=2.25)
HALF = Shares(accretor=0.5)
# a/a0 from q0 to q (m_donor/m_accretor): closed forms of Soberman, Phinney & van den Heuvel 1997
# and Tauris & van den Heuvel 2006, which agree with a quadrature of d ln a/d ln m to 30 digits
TRACKS = [
    (Shares(), 3.0, 0.5, 0.7119140625),
    (Shares(), 1.0, 0.1, 9.150625),
    (Shares(donor=1.0), 3.0, 0.2, 3.33333333333333),
    (Shares(donor=1.0), 0.6, 0.05, 1.52380952380952),
    (Shares(accretor=1.0), 3.0, 1.0, 0.32968149999721),
    (Shares(accretor=1.0), 1.0, 0.05, 113.957043217246),
    (GAMMA, 3.0, 1.0, 0.00041312536277),
    (GAMMA, 0.6, 0.2, 0.07529855297805),
    (Shares(ring=1.0, ring_radius=1.0), 1.0, 0.5, 0.27590958087858),
    (HALF, 3.0, 0.1, 7.54492363357091),
    (HALF, 0.6, 0.5, 1.16723376107837),
    (MIXED, 3.0, 0.05, 5.56589466152724),
    (MIXED, 1.0, 0.2, 2.61105629204264),
    (MIXED, 0.6, 0.1, 5.58932052050276),
]


def d_ln_separation(q, shares):
    """d ln a / d ln q along the overflow, from zeta_lobe without the lobe's own slope."""
    accepted = accepted_share(shares)
    orbit = zeta_lobe(q, accepted, loss_parameter(q, shares), slope=lambda _: 0.0)
    return orbit / (1.0 + accepted * q)


@pytest.mark.parametrize("shares, start, end, ratio", TRACKS)
def test_separation_along_the_overflow(shares, start, end, ratio):
    # Simpson's rule in ln q
    count = 400
    step = (log(end) - log(start)) / count
    weights = [1.0] + [4.0, 2.0] * (count // 2 - 1) + [4.0, 1.0]
    total = sum(
        weight * d_ln_separation(start * exp(index * step), shares)
        for index, weight in enumerate(weights)
    )
    assert exp(total * step / 3.0) == close(ratio, rel=1e-8)


def paczynski_slope(q):
    """d ln of 2/3^(4/3) (q/(1+q))^(1/3), Paczynski 1971."""
    return 1.0 / (3.0 * (1.0 + q))


CONSERVATIVE, JEANS, REEMITTED = Shares(), Shares(donor=1.0), Shares(accretor=1.0)
THIRD = 1.0 / 3.0
# zeta, shares, critical q with Eggleton's lobe, with Paczynski's; found independently to 1e-10
CRITICAL = [
    (-THIRD, CONSERVATIVE, 0.63397950072, 2.0 / 3.0),
    (0.0, CONSERVATIVE, 0.7883036788, 5.0 / 6.0),
    (THIRD, CONSERVATIVE, 0.94271782435, 1.0),
    (1.0, CONSERVATIVE, 1.2519617148, 4.0 / 3.0),
    (2.0, CONSERVATIVE, 1.7170060653, 11.0 / 6.0),
    (4.0, CONSERVATIVE, 2.6511173542, 17.0 / 6.0),
    (-THIRD, JEANS, 1.241763261, 1.0),
    (0.0, JEANS, 0.35433799437, THIRD),
    (-THIRD, REEMITTED, 0.96384680854, 1.0),
    (0.0, REEMITTED, 1.1565453042, 1.1964847243),
    (THIRD, REEMITTED, 1.3445966714, 1.3874258867),
    (1.0, REEMITTED, 1.7113713308, 1.7583057392),
    (2.0, REEMITTED, 2.2471485576, 2.2978479684),
    (4.0, REEMITTED, 3.2923609337, 3.3466242709),
    (2.0, GAMMA, 0.18798145185, 0.18718427094),
    (4.0, GAMMA, 0.7753191757, 0.79076044109),
    (-THIRD, HALF, 0.77798691986, 0.81649658093),
    (1.0, HALF, 1.4628384774, 1.5351837585),
    (4.0, HALF, 2.9554905069, 3.0850686916),
]


def critical(zeta, shares, slope=lobe_slope):
    return critical_mass_ratios(
        zeta, accepted_share(shares), lambda q: loss_parameter(q, shares), slope
    )


@pytest.mark.parametrize("zeta, shares, eggleton, paczynski", CRITICAL)
def test_critical_mass_ratios(zeta, shares, eggleton, paczynski):
    assert critical(zeta, shares) == close((eggleton,), rel=1e-8)
    assert critical(zeta, shares, paczynski_slope) == close((paczynski,), rel=1e-8)


def test_nothing_lost_by_default():
    assert critical_mass_ratios(-THIRD) == close((0.63397950072,), rel=1e-8)


@pytest.mark.parametrize(
    "zeta, shares", [(THIRD + 1e-3, JEANS), (4.0, JEANS), (1.0, GAMMA), (-THIRD, GAMMA)]
)
def test_no_critical_mass_ratio(zeta, shares):
    # Jeans: zeta_lobe falls from 1/3 with q; ring at 2.25 a: it rises from 4/3
    assert critical(zeta, shares) == ()


# zeta_ad of condensed polytropes by core fraction (Soberman et al. 1997, eq. 61, from memory)
@pytest.mark.parametrize(
    "zeta, conservative, reemitted",
    [
        (-0.17198552, 0.70867208, 1.05780797),
        (0.13719684, 0.85184502, 1.23442273),
        (0.56987179, 1.05237133, 1.47593537),
    ],
)
def test_critical_mass_ratios_of_giants(zeta, conservative, reemitted):
    assert critical(zeta, CONSERVATIVE) == close((conservative,), rel=1e-7)
    assert critical(zeta, REEMITTED) == close((reemitted,), rel=1e-7)


def test_side_on_which_overflow_is_stable():
    for shares, stable in ((CONSERVATIVE, 0.5), (JEANS, 2.0), (REEMITTED, 0.5)):
        for q, is_stable in ((stable, True), (1.0 / stable, False)):
            lobe = zeta_lobe(q, accepted_share(shares), loss_parameter(q, shares))
            assert (-THIRD > lobe) == is_stable, (shares, q)


def consequential(mass_white_dwarf):
    """Critical mass ratios of a zeta = -1/3 donor with the consequential law, all expelled."""
    law = find("consequential", "schreiber-2016")

    def loss(q):
        donor = q * mass_white_dwarf
        orbit = make_orbit(donor, mass_white_dwarf, 1.0)
        stars = make_star(donor), make_star(mass_white_dwarf)
        return law.function(*stars, orbit, NoKeys()) * donor / orbit.angular_momentum

    return critical_mass_ratios(-THIRD, 0.0, loss)


def test_consequential_loss_removes_light_white_dwarfs():
    # Schreiber, Zorotovic & Wijnen 2016 (law from memory): the purpose of the law
    assert consequential(0.5) == () and consequential(0.45) == ()
    assert consequential(0.6) == pytest.approx((0.31,), abs=0.01)
    assert consequential(0.75) == pytest.approx((1.02,), abs=0.01)


def test_reemission_in_the_notation_of_the_consequential_law():
    # nu = m_d^2/(m_a M)
    m_d, m_a = 0.3, 0.8
    assert loss_parameter(m_d / m_a, REEMITTED) == close(m_d**2 / (m_a * (m_d + m_a)))

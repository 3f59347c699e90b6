"""Histories against closed forms: braking alone, and orbits after transfer.

Closed forms of the separation: Soberman, Phinney & van den Heuvel 1997, A&A 327, 620;
Tauris & van den Heuvel 2006 (in Compact Stellar X-ray Sources). Quadratures by mpmath,
written here independently of the package.
"""

import math

import mpmath
import pytest

import evolve
from evolve.constants import CM_PER_RSUN, GM_SUN_SI, YEAR_SI, C, G

POINT = {"star": "compact", "kind": "point-mass"}


def test_shrinking_by_braking_alone():
    """t = (a0^5 - a1^5) m_other / (10 k Rsun^4 R^gamma G M^2), k = 3.8e-30 s/cm2, from
    dJ/dt = -3.8e-30 m Rsun^4 R^gamma Omega^3 (Rappaport, Verbunt & Joss 1983, ApJ 275, 713,
    eq. 36) at constant R."""
    radius, gamma, mass, other = 0.5, 3.0, 0.8, 1.1
    history = evolve.run(
        {
            "A": {"mass": mass, "star": "power-law", "radius": radius, "exponent": 0.0},
            "B": {"mass": other, **POINT},
            "orbit": {"separation": 6.0},
            "waves": {"law": "off"},
            "braking": {
                "law": "rappaport-verbunt-joss-1983", "gamma": gamma, "stops_below": "0 Msun",
            },
            "end": {"time": "100 Gyr", "event": "contact"},
            "overflow": {"law": "locked"},
            "numerics": {"rtol": 1e-9},
        }
    )  # fmt: skip
    total = mass + other
    gm = GM_SUN_SI * 1e6 * total  # cgs
    a0, a1 = (x * CM_PER_RSUN for x in (6.0, history.at("contact")["separation"]))
    # G M^2 = (G Msun M) (M Msun): the solar mass in grams cancels against that of m_other
    seconds = (a0**5 - a1**5) * other / (
        10 * 3.8e-30 * CM_PER_RSUN**4 * radius**gamma * gm * total
    )
    assert history.at("contact")["time"] == pytest.approx(seconds / YEAR_SI, rel=1e-6)


def transfer(q_end, share, q0=1.0, **expulsion):
    """A donor of 1.2 Msun and mass ratio q0 that its own expansion pushes through transfer.

    Nothing but the transfer acts on the orbit, and zeta = 20 keeps it stable for every way
    of expulsion.
    """
    donor = 1.2
    accretor = donor / q0
    # q_end = m_d / (m_a + share (donor - m_d))
    final = q_end * (accretor + share * donor) / (1.0 + share * q_end)
    return evolve.run(
        {
            "A": {
                "mass": donor, "star": "expanding", "radius": 1.0, "growth_time": "1 Gyr",
                "zeta_ad": 20.0,
            },
            "B": {"mass": accretor, **POINT},
            "orbit": {"contact": True},
            "waves": {"law": "off"},
            "overflow": {"law": "locked"},
            "acceptance": {"share": share},
            "expulsion": expulsion,
            "end": {"time": "1000 Gyr", "A": {"mass_below": final}},
            "numerics": {"rtol": 1e-10},
        }
    )  # fmt: skip


def ratio_of_separations(history):
    return history["separation"][-1] / history["separation"][0]


# a/a0 from q0 = 1 (and 0.6) to q = 0.5 and 0.2, evaluated from the closed forms with 15 digits
CLOSED = [
    (1.0, 1.0, {}, {0.5: 1.265625, 0.2: 3.24}),
    (1.0, 0.0, {"from": "donor"}, {0.5: 4 / 3, 0.2: 5 / 3}),
    (1.0, 0.0, {"from": "accretor"}, {0.5: 1.96202368624769, 0.2: 8.41235491644398}),
    (1.0, 0.0, {"from": "ring", "ring": 2.25}, {0.5: 0.08367381005566, 0.2: 0.01088615439472}),
    (1.0, 0.0, {"from": "ring", "ring": 1.0}, {0.5: 0.27590958087858, 0.2: 0.12113791079679}),
    (1.0, 0.5, {"from": "accretor"}, {0.5: 1.48843545191282, 0.2: 4.75224410912971}),
    (0.6, 1.0, {}, {0.5: 1.11236572265625, 0.2: 2.84765625}),
    (0.6, 0.0, {"from": "accretor"}, {0.5: 1.25757043672778, 0.2: 5.39194756940666}),
    (
        1.0, 0.4,  # of all that leaves the donor .1 as a fast wind, .4 re-emitted, .1 by the ring
        {"from": {"donor": 1 / 6, "accretor": 4 / 6, "ring": 1 / 6}, "ring": 2.25},
        {0.5: 1.17974693113393, 0.2: 2.61105629204264},
    ),
]  # fmt: skip


@pytest.mark.parametrize(
    ("q0", "share", "expulsion", "q", "expected"),
    [(q0, s, way, q, x) for q0, s, way, ends in CLOSED for q, x in ends.items()],
)
def test_separation_after_transfer(q0, share, expulsion, q, expected):
    history = transfer(q, share, q0, **expulsion)
    assert history.outcome == "mass_below"
    assert ratio_of_separations(history) == pytest.approx(expected, rel=1e-6)


def separation_from_momentum(donor, accretor, final, log_momentum):
    """a/a0 of a donor that fell to `final` with nothing kept, from ln(J/J0)."""
    total = (final + accretor) / (donor + accretor)
    return math.exp(2.0 * log_momentum) * total * (donor / final) ** 2


def test_a_multiple_of_the_mean_angular_momentum():
    """Jdot/J = -k mdot/M integrates to J ~ M^k at a constant accretor."""
    for k in (0.5, 2.0):
        history = transfer(0.5, 0.0, **{"from": "multiple", "multiple": k})
        expected = separation_from_momentum(1.2, 1.2, 0.6, k * math.log(1.8 / 2.4))
        assert ratio_of_separations(history) == pytest.approx(expected, rel=1e-6)


def test_loss_through_the_outer_point():
    """Jdot/J = -mdot x_L^2 M/(m_A m_B), x_L from its quintic; quadrature by mpmath."""

    def outer(mu):  # beyond the lighter star, from the centre of mass
        return mpmath.findroot(
            lambda x: x - (1 - mu) / (x + mu) ** 2 - mu / (x - 1 + mu) ** 2,
            (1 - mu + 0.3, 1 - mu + 1.0), solver="illinois", tol=1e-25,
        )  # fmt: skip

    def rate(m):
        mu = min(m, mpmath.mpf(1.2)) / (m + 1.2)
        return outer(mu) ** 2 * (m + 1.2) / (m * 1.2)

    log_momentum = -float(mpmath.quad(rate, [mpmath.mpf("0.6"), mpmath.mpf("1.2")]))
    history = transfer(0.5, 0.0, **{"from": "outer-point"})
    expected = separation_from_momentum(1.2, 1.2, 0.6, log_momentum)
    assert ratio_of_separations(history) == pytest.approx(expected, rel=1e-6)


def test_consequential_loss():
    """Jdot/J = -nu mdot/m_d with nu = 0.35/m_wd (Schreiber, Zorotovic & Wijnen 2016, MNRAS
    455, L16; from memory), in place of the expelled matter's own torque: J ~ m_d^nu."""
    history = transfer(0.5, 0.0, consequential="schreiber-2016")
    expected = separation_from_momentum(1.2, 1.2, 0.6, 0.35 / 1.2 * math.log(0.5))
    assert ratio_of_separations(history) == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize("share", [1.0, 0.0])
@pytest.mark.parametrize("mass", [0.15, 0.08])
def test_steady_rate_of_a_lobe_filling_white_dwarf(mass, share):
    """mdot = -2 m (Jdot/J) / (zeta - zeta_L), at the state itself: Jdot/J of Peters 1964,
    zeta of the Verbunt & Rappaport 1988 radius and of Eggleton's lobe by central differences,
    all written here."""
    history = evolve.run(
        {
            "A": {"mass": 0.16, "star": "white-dwarf"},
            "B": {"mass": 0.80, "star": "white-dwarf"},
            "orbit": {"contact": True},
            "overflow": {"law": "locked"},
            "acceptance": {"share": share},
            "end": {"time": "10 Gyr", "A": {"mass_below": mass}},
            "numerics": {"rtol": 1e-10},
        }
    )
    m, other = (mpmath.mpf(history[f"mass_{c}"][-1]) for c in "AB")
    separation, total = mpmath.mpf(history["separation"][-1]), m + other

    def log_radius(x):
        x = mpmath.exp(x)
        first = (x / 1.44) ** (-mpmath.mpf(2) / 3) - (x / 1.44) ** (mpmath.mpf(2) / 3)
        ratio = x / mpmath.mpf("0.00057")
        second = 1 + 3.5 * ratio ** (-mpmath.mpf(2) / 3) + 1 / ratio
        return mpmath.log(first) / 2 - mpmath.log(second) * 2 / 3

    def log_lobe(x):
        q = mpmath.exp(x)
        c = q ** (mpmath.mpf(1) / 3)
        return mpmath.log(0.49 * c**2 / (0.6 * c**2 + mpmath.log(1 + c)))

    zeta = mpmath.diff(log_radius, mpmath.log(m))
    slope = mpmath.diff(log_lobe, mpmath.log(m / other))
    leaving = (1 - share) * m**2 / (other * total)  # re-emission: m_d^2/(m_a M)
    zeta_lobe = 2 * leaving - 2 + 2 * share * m / other + (1 - share) * m / total
    zeta_lobe += slope * (1 + share * m / other)
    waves = mpmath.mpf(32) / 5 * mpmath.mpf(G) ** 3 * m * other * total / (C**5 * separation**4)
    expected = float(2 * m * waves / (zeta - zeta_lobe))
    assert history["overflow_A"][-1] == pytest.approx(expected, rel=1e-8, abs=0.0)

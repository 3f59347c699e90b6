"""Critical mass ratios through whole histories: a donor just below is stable, just above raises
the event. About 4 s.

Critical ratios of zeta_L(q) = zeta with Eggleton's lobe, found apart from this code to 1e-10 from
the closed forms of Soberman, Phinney & van den Heuvel 1997, A&A 327, 620.
"""

import numpy as np
import pytest

import evolve

POINT = {"star": "compact", "kind": "point-mass"}
THIRD = 1.0 / 3.0
MODES = {
    "conservative": {"acceptance": {"share": 1.0}},
    "fast wind": {"acceptance": {"share": 0.0}, "expulsion": {"from": "donor"}},
    "re-emission": {"acceptance": {"share": 0.0}, "expulsion": {"from": "accretor"}},
    "ring": {"acceptance": {"share": 0.0}, "expulsion": {"from": "ring", "ring": 2.25}},
    "half": {"acceptance": {"share": 0.5}, "expulsion": {"from": "accretor"}},
}
CRITICAL = [
    ("conservative", -THIRD, 0.63397950072), ("conservative", 0.0, 0.7883036788),
    ("conservative", THIRD, 0.94271782435), ("conservative", 1.0, 1.2519617148),
    ("conservative", 2.0, 1.7170060653), ("conservative", 4.0, 2.6511173542),
    ("fast wind", -THIRD, 1.241763261), ("fast wind", 0.0, 0.35433799437),
    ("re-emission", -THIRD, 0.96384680854), ("re-emission", 0.0, 1.1565453042),
    ("re-emission", THIRD, 1.3445966714), ("re-emission", 1.0, 1.7113713308),
    ("re-emission", 2.0, 2.2471485576), ("re-emission", 4.0, 3.2923609337),
    ("ring", 2.0, 0.18798145185), ("ring", 4.0, 0.7753191757),
    ("half", -THIRD, 0.77798691986), ("half", 1.0, 1.4628384774), ("half", 4.0, 2.9554905069),
]  # fmt: skip
STABLE_ABOVE = ("fast wind",)
"""There zeta_L falls with q; everywhere else it rises."""


def transfer(q, donor, star, mode, law="locked", **sections):
    other = {"A": "B", "B": "A"}[donor]
    return evolve.run(
        {
            donor: star, other: {"mass": star["mass"] / q, **POINT}, "orbit": {"contact": True},
            "overflow": {"law": law}, "end": {"time": "1 kyr"}, **MODES[mode], **sections,
        }
    )  # fmt: skip


def power_law(zeta):
    return {"mass": 1.0, "star": "power-law", "radius": 0.5, "exponent": zeta}


def is_stable(history, donor):
    names = [(e.name, e.component) for e in history.events]
    assert ("contact", donor) in names
    return ("unstable_overflow", donor) not in names


@pytest.mark.parametrize("donor", ["A", "B"])
@pytest.mark.parametrize("law", ["locked", "atmosphere", "polytrope"])
@pytest.mark.parametrize(("mode", "zeta", "critical"), CRITICAL)
def test_just_below_and_just_above(mode, zeta, critical, law, donor):
    for factor in (0.995, 1.005):
        history = transfer(factor * critical, donor, power_law(zeta), mode, law)
        assert is_stable(history, donor) == ((factor < 1.0) != (mode in STABLE_ABOVE))
        if is_stable(history, donor):
            assert history.outcome == "time"
            assert history[f"overflow_{donor}"].max() > 0.0
            known = np.isfinite(history["zeta_lobe"])
            assert known.any() and (history["zeta_star"] > history["zeta_lobe"])[known].all()
            assert "detachment" not in [e.name for e in history.events]
        elif law == "locked":
            assert history.outcome == "unstable_overflow"
            # named: the donor and the moment, with both exponents in the columns
            row = history.at("unstable_overflow").row
            assert history["time"][row] == 0.0


@pytest.mark.parametrize(
    ("mode", "zeta"), [("fast wind", THIRD + 0.01), ("fast wind", 4.0), ("ring", 1.0)]
)
def test_where_there_is_no_critical_ratio(mode, zeta):
    """Fast winds: zeta_L < 1/3 for every q; a ring at 2.25 a: zeta_L > 4/3."""
    for q in (0.05, 0.5, 1.0, 5.0):
        history = transfer(q, "A", power_law(zeta), mode)
        assert is_stable(history, "A") == (mode == "fast wind")


# With zeta of condensed polytropes (Soberman et al. 1997, eq. 61, from memory) by core fraction
@pytest.mark.parametrize("donor", ["A", "B"])
@pytest.mark.parametrize(
    ("fraction", "conservative", "reemitted"),
    [(0.2, 0.77834695, 1.14427254), (0.3, 0.85184502, 1.23442273), (0.4, 0.93880937, 1.33988454)],
)
def test_giants(fraction, conservative, reemitted, donor):
    star = {"mass": 1.0, "star": "giant", "core_mass": fraction}
    for mode, critical in (("conservative", conservative), ("re-emission", reemitted)):
        for factor in (0.99, 1.01):
            history = transfer(factor * critical, donor, star, mode)
            assert is_stable(history, donor) == (factor < 1.0)


@pytest.mark.parametrize("follows", ["stop", "continue", "common-envelope"])
@pytest.mark.parametrize("law", ["atmosphere", "polytrope"])
def test_what_follows_a_runaway(law, follows):
    """A red dwarf of 0.6 Msun on 0.3 that keeps all: zeta = -1/3 wants q < 0.634. The overflow
    runs away to within 100 dynamical times, or R to 1.1 R_L; a donor without a core merges."""
    history = evolve.run(
        {
            "A": {"mass": 0.6, "star": "dwarf"}, "B": {"mass": 0.3, **POINT},
            "orbit": {"contact": True}, "overflow": {"law": law},
            "envelope": {"follows": follows}, "end": {"time": "100 Myr"},
        }
    )  # fmt: skip
    row = history.at("unstable_overflow").row
    first = row + int(np.argmax(history["overflow_A"][row:] > 0.0))
    assert history["overflow_kind"][first] == 3.0  # dynamical
    names = [e.name for e in history.events]
    assert names.count("unstable_overflow") == 1 and ("common_envelope" in names) == (
        follows == "common-envelope"
    )
    if follows == "continue":  # until the mass ratio has come down and it is stable again
        assert history.outcome == "time"
        assert history["mass_A"][-1] < 0.634 * history["mass_B"][-1]
        return
    assert history.outcome == {"stop": "unstable_overflow", "common-envelope": "merger"}[follows]
    dynamical = np.sqrt(history["radius_A"][-1] ** 3 / (3.9251256e8 * history["mass_A"][-1]))
    quick = history["mass_A"][-1] / history["overflow_A"][-1] <= 100.0 * dynamical * (1 + 1e-6)
    assert quick or history["fill_A"][-1] == pytest.approx(1.1, rel=1e-6)


def test_a_heavy_donor_transfers_on_its_thermal_time_first():
    """zeta_eq < zeta_L < zeta_ad: stable on the dynamical time, thermal until the ratio is
    reversed (Paczynski 1971, ARA&A 9, 183)."""
    history = evolve.run(
        {
            "A": {"mass": 2.4, "star": "main-sequence"}, "B": {"mass": 1.4, "star": "main-sequence"},
            "orbit": {"period": "22 h"}, "acceptance": {"share": 0.6}, "end": {"time": "3 Gyr"},
        }
    )  # fmt: skip
    first, last = history.at("thermal_overflow_begins").row, history.at("thermal_overflow_ends").row
    kinds = history["overflow_kind"][first + 1 : last]
    # the column goes back to nuclear at 0.95 of the equilibrium radius, the event at 0.97
    assert (kinds[: len(kinds) // 2] == 2.0).all() and history["overflow_kind"][-1] == 1.0
    assert (history["zeta_star"] > history["zeta_lobe"])[first:last].all()  # no dynamical event
    assert "unstable_overflow" not in [e.name for e in history.events]
    assert history["mass_A"][last] < history["mass_B"][last]

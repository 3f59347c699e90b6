"""The bifurcation period of a neutron star and its companion: where it lies, how it moves.

Published: pairs with a donor of 1..1.2 Msun above a neutron star of 1.4 Msun converge below a
period of 0.5..1 d at contact and diverge above it (Pylyser & Savonije 1988, A&A 191, 57; 1989, A&A
208, 52); weaker, saturated braking lowers it considerably, how the matter leaves matters little
(Ma & Li 2009, ApJ 691, 1611). From memory of the papers. Three seconds in all.
"""

from functools import cache
from pathlib import Path

import pytest

import evolve
from evolve.studies.study import read_study

CONFIGS = Path(__file__).parents[2] / "configs" / "studies"
LAW = "rappaport-verbunt-joss-1983"
CLOSE, WIDE = 0.58, 2.5  # d; at 0.575 d the star fills its lobe at the start


def run(study, period, braking=None, share=0.5):
    """A pair of a shipped study at a starting period [d]."""
    raw = read_study(CONFIGS / study).base.raw
    return evolve.run(
        {**raw, "orbit": {"period": f"{float(period)!r} d"},
         "braking": {"stops_below": "0.2 Msun", **(braking or {"law": LAW, "gamma": 3.0})},
         "acceptance": {"share": share, "ceiling": "eddington"}}
    )  # fmt: skip


@cache
def bifurcation(strength=1.0, law=LAW, share=0.5):
    """(longest starting period that converges, shortest that does not) [d], 2 % apart.

    A pair converges if it ends on 0.2 Msun, at a shorter period than it had at contact; it
    diverges if its star's hydrogen is gone before.
    """
    braking = {"law": law, "strength": strength} | ({"gamma": 3.0} if law == LAW else {})
    low, high = CLOSE, WIDE
    while high > 1.02 * low:
        middle = (low * high) ** 0.5
        history = run("bifurcation.toml", middle, braking, share)
        assert history.outcome in ("mass_below", "validity")
        if history.outcome == "mass_below":
            assert history["period"][-1] < 0.6 * history.at("contact")["period"]
            low = middle
        else:
            high = middle
    return low, high


def test_it_lies_where_it_was_published():
    low, high = bifurcation()
    assert CLOSE < low and high < WIDE  # both kinds there are
    assert 0.3 < low < high < 1.5
    contact = run("bifurcation.toml", low).at("contact")
    assert 0.5 < contact["period"] / 24.0 < 1.0


def test_weaker_braking_lowers_it():
    periods = [bifurcation(strength)[0] for strength in (1.0, 0.5, 0.25)]
    assert periods[0] > 1.1 * periods[1] > 1.21 * periods[2]


def test_saturated_braking_lowers_it_considerably():
    """To where the star of this study fills its lobe from the start, or below: none converges."""
    assert bifurcation(law="andronov-2003")[1] < 0.6 * bifurcation()[0]


def test_how_matter_leaves_matters_little():
    kept, expelled = bifurcation(share=1.0)[0], bifurcation(share=0.0)[0]
    assert abs(kept / expelled - 1.0) < 0.1


@pytest.mark.parametrize("strength", [0.3, 1.0])
def test_above_it_the_giants_diverge_to_wide_white_dwarfs(strength):
    """From the period that the end of the main sequence leaves; core and period as published.

    M_wd of Tauris & Savonije 1999, A&A 350, 928, Population I, within 15 %.
    """
    braking = {"law": LAW, "gamma": 3.0, "strength": strength}
    left = run("bifurcation.toml", 1.7 * bifurcation(strength)[1], braking)
    assert left.outcome == "validity" and left["mass_A"][-1] == pytest.approx(1.0)
    giant = run("bifurcation_giants.toml", left["period"][-1] / 24.0, braking)
    assert "envelope_exhausted" in [event.name for event in giant.events]
    assert giant["period"][-1] > 3.0 * left["period"][0]
    days, core = giant["period"][-1] / 24.0, giant["mass_A"][-1]
    assert core == pytest.approx((days / 1.2e5) ** (1 / 4.5) + 0.120, rel=0.15)

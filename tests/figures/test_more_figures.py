"""Stability, waves, comparison, potential: what is drawn is what the history says."""

from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.commands.main import main
from evolve.studies.compare import compare

pytest.importorskip("matplotlib")
from evolve.figures.comparison import comparison_figure  # noqa: E402
from evolve.figures.history import rate_period_figure  # noqa: E402
from evolve.figures.lobes import lobe_figure  # noqa: E402
from evolve.figures.stability import stability_figure  # noqa: E402
from evolve.figures.waves import (  # noqa: E402
    detector_noise,
    gathered_strain,
    instrument_noise,
    waves_figure,
)

CONFIGS = Path(__file__).parents[2] / "configs"


def run(name, **changes):
    config = evolve.read_config(CONFIGS / f"{name}.toml")
    return evolve.run(config.with_values({k.replace("__", "."): v for k, v in changes.items()}))


@pytest.fixture(scope="module")
def dwarf():
    return run("red_dwarf")


@pytest.fixture(scope="module")
def pair():
    return run("white_dwarfs", observer__distance="1 kpc")


def line(axis, label):
    return next(entry for entry in axis.lines if entry.get_label() == label)


def test_stability(dwarf):
    above, below = stability_figure(dwarf).axes
    np.testing.assert_array_equal(line(above, r"$\zeta$ of the donor").get_ydata(), dwarf["zeta_star"])
    lobe = line(above, r"$\zeta$ of its lobe").get_ydata()
    np.testing.assert_array_equal(lobe, dwarf["zeta_lobe"])
    assert np.nanmax(line(below, r"$m/\dot m$").get_ydata()) <= 1e14
    labels = [patch.get_label() for patch in above.patches]
    bands = [label for label in labels if label and not label.startswith("_")]
    assert bands == ["driven by the orbit"]  # a transfer driven by braking and waves


def test_an_unstable_transfer_is_marked():
    above, _ = stability_figure(run("common_envelope")).axes
    assert [text.get_text() for text in above.texts] == ["unstable"]
    labels = {patch.get_label() for patch in above.patches}
    assert "dynamical" in labels


def test_noise_of_the_detector():
    """Robson, Cornish & Liu 2019, evaluated apart from this code, without the Galaxy (1e-5); with
    it, the averaged signal-to-noise ratio 2/sqrt5 h0 sqrt(T/S_n) of J0651 at 1 kpc after four
    years is 146.7 (5 %, the convention of averages)."""
    for f, noise in ((1e-4, 2.113467e-33), (1e-3, 1.634101e-38), (3e-3, 3.040650e-40),
                     (1e-2, 1.443169e-40), (1e-1, 2.129583e-39)):  # fmt: skip
        assert instrument_noise(f) == pytest.approx(noise, rel=1e-5, abs=0.0)
    ratio = 3.212814e-22 * np.sqrt(4.0 * 3.15576e7 / detector_noise(2.613673e-3))
    assert 2.0 / np.sqrt(5.0) * ratio == pytest.approx(146.7, rel=0.05)


def test_waves(pair):
    (axis,) = waves_figure(pair, ["pair"]).axes
    drawn = line(axis, "pair")
    np.testing.assert_array_equal(drawn.get_xdata(), pair["wave_frequency"])
    # slowly: four years' cycles, h0 sqrt(f T)
    expected = pair["wave_strain"][0] * np.sqrt(pair["wave_frequency"][0] * 4.0 * 3.15576e7)
    assert drawn.get_ydata()[0] == pytest.approx(expected, rel=1e-12)
    assert gathered_strain(pair).max() > 1e-20


def test_waves_of_a_pair_without_a_distance(dwarf):
    with pytest.raises(evolve.ConfigError, match="distance"):
        waves_figure(dwarf)


def test_the_discs_critical_rate(dwarf):
    (axis,) = rate_period_figure(dwarf).axes
    drawn = line(axis, "steady disc above").get_ydata()
    good = np.isfinite(drawn)
    np.testing.assert_array_equal(drawn[good], dwarf["disc_critical_rate"][good])
    assert good.any() and not good.all()


def test_a_rate_that_is_none_is_not_drawn():
    with pytest.raises(evolve.ConfigError, match="no overflow"):
        rate_period_figure(run("eccentric_pair"))


def test_comparison():
    one, other = run("neutron_star_conservative"), run("neutron_star_expelling")
    found = compare([one, other], ["one", "other"], "mass_A")
    axes = comparison_figure(found).axes
    left, right = axes[0], axes[1]
    np.testing.assert_array_equal(line(left, "other").get_ydata(), found.curves["period"][1])
    expected = 100.0 * (found.curves["period"][1] / found.curves["period"][0] - 1.0)
    np.testing.assert_allclose(right.lines[0].get_ydata(), expected, rtol=1e-12)
    assert axes[-1].get_xlabel().startswith("mass of A") or "A" in axes[-1].get_xlabel()


@pytest.mark.parametrize("ratios", [(0.5,), (0.02, 50.0)])
def test_potential(ratios):
    """L1..L5 named in each panel; the centre of mass at 0, the stars at -1/(1+q) and q/(1+q)."""
    axes = lobe_figure(*ratios).axes
    assert len(axes) == len(ratios)
    for axis, ratio in zip(axes, ratios, strict=True):
        names = {text.get_text() for text in axis.texts}
        assert {"A", "B", "L1", "L2", "L3", "L4", "L5"} <= names
        places = [entry.get_xdata()[0] for entry in axis.lines if entry.get_marker() == "o"]
        assert places == pytest.approx([-1.0 / (1.0 + ratio), ratio / (1.0 + ratio)])


def test_commands(dwarf, tmp_path, capsys):
    dwarf.save(tmp_path / "x.h5")
    assert main(["draw", str(tmp_path / "x.h5"), "--figure", "stability", "-o", str(tmp_path / "s.svg")]) == 0
    assert main(["draw", str(tmp_path / "x.h5"), "--figure", "waves", "-o", str(tmp_path / "w.png")]) == 2
    assert "distance" in capsys.readouterr().err
    assert main(["lobe", "--mass-ratio", "0.5", "2", "--draw", str(tmp_path / "l.pdf")]) == 0
    assert main(["lobe", "--mass-ratio", "0.5", "2"]) == 2
    assert "one, or two with --draw" in capsys.readouterr().err
    both = [str(tmp_path / "x.h5"), str(CONFIGS / "neutron_star_expelling.toml")]
    assert main(["compare", *both, "--draw", str(tmp_path / "c.png"), "--quiet"]) == 0
    assert main(["compare", *both, "--draw", str(tmp_path / "c.png"), "--quiet"]) == 2
    assert main(["compare", *both, "--draw", str(tmp_path / "c.gif"), "--quiet"]) == 2
    assert sorted(path.name for path in tmp_path.iterdir()) == ["c.png", "l.pdf", "s.svg", "x.h5"]

"""Every layout ever released stays readable: one small archive of each is kept."""

from pathlib import Path

import numpy as np
import pytest

import evolve

KEPT = sorted((Path(__file__).parents[1] / "data").glob("layout_*.h5"))


def test_there_is_one_of_every_layout():
    from evolve.archive.write import LAYOUT

    assert [path.name for path in KEPT] == [f"layout_{n}.h5" for n in range(1, LAYOUT + 1)]


@pytest.mark.parametrize("path", KEPT, ids=lambda path: path.stem)
def test_a_kept_archive_opens(path):
    history = evolve.open_history(path)
    assert history.outcome == "merger" and history.complete
    assert history.at("merger")["period"] < history["period"][0]
    assert (np.diff(history["time"]) > 0.0).all()
    assert abs(history.ledger.residuals["angular_momentum"]) < 1e-6

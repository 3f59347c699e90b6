"""Sweeps: Peters over a grid, the same bits by any road, failed points, refusals."""

import hashlib
import os
import textwrap
from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.constants import C, G
from evolve.errors import ConfigError
from evolve.studies.study import read_study
from evolve.studies.study_archive import open_study
from evolve.studies.sweep import sweep

WAVES = """
    title = "Waves only"
    [base]
    A = { mass = "1.4 Msun", star = "compact", kind = "point-mass" }
    B = { mass = "1.4 Msun", star = "compact", kind = "point-mass" }
    orbit = { separation = "1 Rsun" }
    end = { time = "10000 Gyr" }
    numerics = { rtol = 1e-9 }
    [vary]
    "A.mass" = { values = ["0.6 Msun", "1.4 Msun", "5 Msun"] }
    "orbit.separation" = { from = "0.5 Rsun", to = "4 Rsun", count = 5, spacing = "log" }
    [keep]
    results = ["merger.time", "end.reason", "ledger.waves", "max.period", "count.merger"]
"""

BRAKED = """
    [base]
    A = { mass = "0.6 Msun", star = "dwarf" }
    B = { mass = "0.75 Msun", star = "white-dwarf" }
    orbit = { fill = 0.98 }
    braking = { law = "rappaport-verbunt-joss-1983" }
    acceptance = { share = 0.0 }
    end = { time = "1 Gyr" }
    [vary]
    "A.mass" = { from = "0.3 Msun", to = "0.65 Msun", count = 40 }
    "acceptance.share" = { values = [0.0, 0.2] }
    [draw]
    "B.mass" = { normal = ["0.8 Msun", "0.1 Msun"] }
    count = 3
    seed = 11
    [keep]
    results = ["contact.time", "braking_stops.period", "max.overflow_A", "duration.overflow_A"]
"""


SEARCH = WAVES[: WAVES.index("[vary]")] + """[vary]
    "orbit.separation" = { from = "1 Rsun", to = "2 Rsun", count = 3 }
    [observed]
    time = ["0.1 Gyr", "1 Myr"]
    period = ["3 h", "0.01 h"]
"""


def write(folder, text, name="study.toml"):
    path = folder / name
    path.write_text(textwrap.dedent(text))
    return path


def sha(path):
    return hashlib.sha256(Path(path).read_bytes()).hexdigest()


def test_waves_only_against_peters_over_the_grid(tmp_path):
    """T = (5/256) c^5 a^4/(G^3 m1 m2 M) (Peters 1964)."""
    result = sweep(write(tmp_path, WAVES), tmp_path / "waves.h5")
    masses, separations = (scale.values for scale in result.scales)
    m, a = np.meshgrid(masses, separations, indexing="ij")
    expected = 5 / 256 * C**5 * a**4 / (G**3 * m * 1.4 * (m + 1.4))
    np.testing.assert_allclose(result.values["merger.time"], expected, rtol=1e-6)
    assert (result.values["count.merger"] == 1.0).all() and not result.failed
    again = open_study(tmp_path / "waves.h5")
    for name, values in result.values.items():
        np.testing.assert_array_equal(again.values[name], values)


def test_any_number_of_workers_gives_the_same_bytes(tmp_path):
    study = write(tmp_path, BRAKED.replace("count = 40", "count = 4"))
    for workers in (1, 2):
        sweep(study, tmp_path / f"{workers}.h5", workers=workers)
    assert sha(tmp_path / "1.h5") == sha(tmp_path / "2.h5")
    assert not list(tmp_path.glob("*.journal"))


def test_a_dask_cluster_gives_the_same_bytes(tmp_path):
    """A scheduler and two worker processes, as `dask scheduler` and `dask worker` start them."""
    distributed = pytest.importorskip("distributed")
    study = write(tmp_path, BRAKED.replace("count = 40", "count = 4"))
    search = write(tmp_path, SEARCH, "search.toml")
    sweep(study, tmp_path / "here.h5")
    with distributed.LocalCluster(
        n_workers=2, threads_per_worker=1, processes=True, dashboard_address=None,
        host="127.0.0.1", silence_logs=50,
    ) as cluster:  # fmt: skip
        address = cluster.scheduler_address
        sweep(study, tmp_path / "there.h5", cluster=address)
        there = evolve.origin(search, cluster=address).origins
    assert sha(tmp_path / "here.h5") == sha(tmp_path / "there.h5")
    here = evolve.origin(search).origins
    assert here and [entry.start for entry in here] == [entry.start for entry in there]


def test_a_failing_point_is_recorded_and_the_rest_goes_on(tmp_path):
    text = BRAKED.replace("count = 40", "count = 4").replace("0.65 Msun", "1.4 Msun")
    result = sweep(write(tmp_path, text))
    assert 0 < result.failed < result.codes.size
    refused = result.codes == result.codes.max()
    assert np.isnan(result.values["contact.time"][refused]).all()
    assert "mass" in next(iter(result.messages.values()))


def test_whole_histories_are_kept_beside_it_if_asked_for(tmp_path):
    """Each is the archive that `run` writes of the same config."""
    text = WAVES.replace('"count.merger"]', '"count.merger"]\n    histories = true')
    text = text.replace('"5 Msun"', '"-5 Msun"')
    result = sweep(write(tmp_path, text), tmp_path / "w.h5", workers=2)
    files = sorted((tmp_path / "w_histories").iterdir())
    assert [path.name for path in files] == [f"{n:08d}.h5" for n in range(10)]  # not the refused
    for number in (0, 7):
        history = evolve.open_history(files[number])
        assert history["time"][-1] == result.values["merger.time"].ravel()[number]
    alone = evolve.run(read_study(tmp_path / "study.toml").base.with_values(
        {"A.mass": "0.6 Msun", "orbit.separation": "0.5 Rsun"}))  # fmt: skip
    alone.save(tmp_path / "alone.h5")
    assert sha(tmp_path / "alone.h5") == sha(files[0])


def test_python_functions_bear_the_names_of_the_commands(tmp_path):
    result = evolve.sweep(write(tmp_path, WAVES), output=tmp_path / "w.h5")
    assert evolve.open_study(tmp_path / "w.h5").digest == result.digest
    assert callable(evolve.origin)


def test_a_dead_scheduler_is_one_sentence(tmp_path):
    distributed = pytest.importorskip("distributed")
    from dask import config

    with config.set({"distributed.comm.timeouts.connect": "300ms"}):
        with pytest.raises(evolve.MachineError, match="no dask scheduler answers"):
            sweep(write(tmp_path, WAVES), tmp_path / "w.h5", cluster="tcp://127.0.0.1:9")
    assert distributed and not (tmp_path / "w.h5").exists()


def test_draws_are_the_same_at_each_grid_point(tmp_path):
    study = read_study(write(tmp_path, BRAKED))
    points = list(study.points(range(6)))
    assert [p["B.mass"] for p in points[:3]] == [p["B.mass"] for p in points[3:]]
    assert len({p["B.mass"] for p in points[:3]}) == 3


def test_xarray_opens_it_with_named_coordinates(tmp_path):
    xarray = pytest.importorskip("xarray")
    sweep(write(tmp_path, WAVES), tmp_path / "w.h5")
    with xarray.open_dataset(tmp_path / "w.h5", group="results", engine="h5netcdf") as data:
        assert data["merger.time"].dims == ("A.mass", "orbit.separation")
        assert data["A.mass"].attrs["units"] == "Msun"
        assert float(data["merger.time"].sel({"A.mass": 5.0})[0]) > 0.0


@pytest.mark.parametrize(
    ("old", "new", "said"),
    [
        ('"A.mass" =', '"A.masss" =', "unknown"),
        ('spacing = "log"', 'spacing = "cubic"', "spacing"),
        ("count = 5", "count = 0", "whole number"),
        ('"merger.time"', '"merger.colour"', "column"),
        ('"merger.time"', '"fusion.time"', "event"),
        ("[keep]", "[keeep]", "did you mean"),
        ('to = "4 Rsun"', 'to = "4 au"', "same unit"),
        ("[base]", "config = 3\n    [based]", "base"),
    ],
)
def test_wrong_studies_are_refused_with_what_is_allowed(tmp_path, old, new, said):
    with pytest.raises(ConfigError) as refused:
        read_study(write(tmp_path, WAVES.replace(old, new)))
    assert said in str(refused.value)
    assert os.listdir(tmp_path) == ["study.toml"]

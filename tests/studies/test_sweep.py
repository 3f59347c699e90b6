"""Sweeps: Peters over a grid, the same bits by any road, resumption after a kill, refusals."""

import hashlib
import os
import signal
import subprocess
import sys
import textwrap
import time
from pathlib import Path

import numpy as np
import pytest

from evolve.constants import C, G
from evolve.errors import ConfigError
from evolve.studies.journal import Journal
from evolve.studies.study import read_study
from evolve.studies.study_archive import open_study
from evolve.studies.sweep import journal_path, sweep

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
    distributed = pytest.importorskip("distributed")
    study = write(tmp_path, BRAKED.replace("count = 40", "count = 4"))
    sweep(study, tmp_path / "here.h5")
    with distributed.LocalCluster(
        n_workers=2, threads_per_worker=1, processes=True, dashboard_address=None,
        host="127.0.0.1", silence_logs=50,
    ) as cluster:  # fmt: skip
        sweep(study, tmp_path / "there.h5", cluster=cluster.scheduler_address)
    assert sha(tmp_path / "here.h5") == sha(tmp_path / "there.h5")


def start(study, output):
    command = [sys.executable, "-m", "evolve", "sweep", str(study), "-o", str(output), "--quiet"]
    return subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.PIPE)


@pytest.mark.slow
def test_killed_at_random_moments_it_resumes_to_the_same_bytes(tmp_path):
    study = write(tmp_path, BRAKED)
    sweep(study, tmp_path / "whole.h5")
    output, rng, kills = tmp_path / "killed.h5", np.random.default_rng(3), 0
    while kills < 10 and not output.exists():
        process = start(study, output)
        time.sleep(rng.uniform(0.6, 2.2))
        if process.poll() is None:
            process.send_signal(signal.SIGKILL)
            kills += 1
        process.communicate()
    if not output.exists():
        assert start(study, output).wait() == 0
    assert kills >= 3
    assert sha(output) == sha(tmp_path / "whole.h5")


def test_a_cut_or_flipped_record_is_computed_again(tmp_path):
    study = read_study(write(tmp_path, WAVES))
    output = tmp_path / "x.h5"
    sweep(study, output)
    whole = sha(output)
    with Journal(journal_path(output), study.digest, len(study.keep)) as journal:
        result = open_study(output)
        flat = np.stack([result.values[r.name].ravel() for r in study.keep], axis=1)
        for index in range(10):
            journal.add(index, flat[index].tolist(), int(result.codes.ravel()[index]))
    path = journal_path(output)
    data = bytearray(path.read_bytes())
    data[len(data) // 2] ^= 0xFF
    path.write_bytes(bytes(data[:-7]))
    output.unlink()
    sweep(study, output)
    assert sha(output) == whole


def test_a_study_that_changed_meanwhile_is_noticed(tmp_path):
    study = read_study(write(tmp_path, WAVES))
    output = tmp_path / "x.h5"
    Journal(journal_path(output), study.digest, len(study.keep)).close()
    changed = read_study(write(tmp_path, WAVES.replace("1.4 Msun", "1.5 Msun"), "other.toml"))
    with pytest.raises(ConfigError, match="has changed"):
        sweep(changed, output)
    sweep(changed, output, replace=True)


def test_two_processes_do_not_work_on_one_study(tmp_path):
    study = read_study(write(tmp_path, WAVES))
    output = tmp_path / "x.h5"
    with Journal(journal_path(output), study.digest, len(study.keep)):
        with pytest.raises(ConfigError, match="another process"):
            sweep(study, output)


def test_a_failing_point_is_recorded_and_the_rest_goes_on(tmp_path):
    text = BRAKED.replace("count = 40", "count = 4").replace("0.65 Msun", "1.4 Msun")
    result = sweep(write(tmp_path, text))
    assert 0 < result.failed < result.codes.size
    refused = result.codes == result.codes.max()
    assert np.isnan(result.values["contact.time"][refused]).all()
    assert "mass" in next(iter(result.messages.values()))


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

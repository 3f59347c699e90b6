"""A sweep that is cut short goes on to the same bytes, and never with another at once."""

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

from evolve.errors import ConfigError
from evolve.studies.journal import Journal
from evolve.studies.results import OUTCOMES
from evolve.studies.study import read_study
from evolve.studies.study_archive import open_study
from evolve.studies.sweep import journal_digest, journal_path, sweep

WAVES = """
    [base]
    A = { mass = "1.4 Msun", star = "compact", kind = "point-mass" }
    B = { mass = "1.4 Msun", star = "compact", kind = "point-mass" }
    orbit = { separation = "1 Rsun", eccentricity = 0.3 }
    end = { time = "10000 Gyr" }
    [vary]
    "A.mass" = { from = "-0.2 Msun", to = "5 Msun", count = 20 }
    "orbit.separation" = { from = "0.5 Rsun", to = "4 Rsun", count = 20, spacing = "log" }
    [keep]
    results = ["merger.time", "end.reason", "ledger.waves"]
"""
"""Points of 5 ms each, so that ten kills find it at work; the first 20 have no legal mass."""
FEW = WAVES.replace("count = 20 }", "count = 4 }").replace("count = 20, sp", "count = 5, sp")


def write(folder, text, name="study.toml"):
    path = folder / name
    path.write_text(textwrap.dedent(text))
    return path


def sha(path):
    return hashlib.sha256(Path(path).read_bytes()).hexdigest()


def start(study, output, *more):
    command = [sys.executable, "-m", "evolve", "sweep", str(study), "-o", str(output), "--quiet"]
    return subprocess.Popen([*command, *more], stdout=subprocess.PIPE, stderr=subprocess.PIPE)


def opened(output, study):
    return Journal(journal_path(output), journal_digest(study), len(study.keep))


def records(output):
    path = journal_path(output)
    # a record: number, three results, end, reason, checksum
    return path.stat().st_size // 280 if path.exists() else 0


def kill_once_it_works(process, output, rng, points):
    """SIGKILL at a random moment after `points` more than were there; what was there then."""
    there = records(output)
    while process.poll() is None and records(output) < there + points:
        time.sleep(0.001)
    time.sleep(rng.uniform(0.0, 0.05))
    assert process.poll() is None, "it ended before it was killed"
    process.send_signal(signal.SIGKILL)
    process.communicate()
    return records(output)


@pytest.mark.slow  # 13 s each: ten starts of the program
@pytest.mark.parametrize("workers", [1, 2])
def test_killed_at_ten_random_moments_it_goes_on_to_the_same_bytes(tmp_path, workers):
    study, output, rng = write(tmp_path, WAVES), tmp_path / "killed.h5", np.random.default_rng(3)
    sweep(study, tmp_path / "whole.h5")
    done = 0
    for _ in range(10):
        process = start(study, output, "--workers", str(workers))
        now = kill_once_it_works(process, output, rng, int(rng.integers(1, 30)))
        assert now > done  # what was done stays done
        done = now
    process = start(study, output, "--workers", str(workers))
    assert process.wait() == 0, process.stderr.read()
    assert sha(output) == sha(tmp_path / "whole.h5")
    assert not journal_path(output).exists()


def test_ctrl_c_keeps_what_was_done_and_says_so(tmp_path):
    study, output = write(tmp_path, WAVES), tmp_path / "x.h5"
    process = start(study, output)
    while records(output) < 40 and process.poll() is None:
        time.sleep(0.005)
    process.send_signal(signal.SIGINT)
    _, said = process.communicate()
    assert process.returncode == 130 and b"the same command goes on" in said
    assert 40 <= records(output) < 400 and not output.exists()
    codes = {code for _, _, code, _ in opened(output, read_study(study)).records()}
    assert {OUTCOMES[code] for code in codes} == {"refused", "merger"}  # none is "interrupted"


def test_with_replace_the_same_command_goes_on_too(tmp_path):
    study = read_study(write(tmp_path, FEW))
    output = tmp_path / "x.h5"
    output.write_text("an older archive")
    with opened(output, study) as journal:
        journal.add(10, [1.0, 2.0, 3.0], 3)
    result = sweep(study, output, replace=True)
    assert result.values["merger.time"].ravel()[10] == 1.0  # was not computed again


def test_replace_does_not_take_the_journal_of_a_study_at_work(tmp_path, monkeypatch):
    monkeypatch.setattr("evolve.studies.journal.PATIENCE", 0.1)
    study = read_study(write(tmp_path, FEW))
    output = tmp_path / "x.h5"
    with opened(output, study) as journal:
        journal.add(0, [1.0, 2.0, 3.0], 3)
        with pytest.raises(ConfigError, match="another process"):
            sweep(study, output, replace=True)
    assert records(output) == 1


def test_a_lost_history_is_computed_again(tmp_path):
    text = FEW.replace('"ledger.waves"]', '"ledger.waves"]\n    histories = true')
    study = read_study(write(tmp_path, text))
    output, folder = tmp_path / "x.h5", tmp_path / "x_histories"
    result = sweep(study, output)
    flat = np.stack([result.values[r.name].ravel() for r in study.keep], axis=1)
    with opened(output, study) as journal:
        for index in range(5, 20):
            journal.add(index, flat[index].tolist(), int(result.codes.ravel()[index]))
    kept = sha(folder / "00000011.h5")
    (folder / "00000011.h5").unlink()
    output.unlink()
    sweep(study, output)
    assert sha(folder / "00000011.h5") == kept


def test_a_cut_or_flipped_record_is_computed_again(tmp_path):
    study = read_study(write(tmp_path, FEW))
    output = tmp_path / "x.h5"
    sweep(study, output)
    whole = sha(output)
    with opened(output, study) as journal:
        result = open_study(output)
        flat = np.stack([result.values[r.name].ravel() for r in study.keep], axis=1)
        for index in range(6, 18):
            journal.add(index, flat[index].tolist(), int(result.codes.ravel()[index]))
    path = journal_path(output)
    data = bytearray(path.read_bytes())
    data[len(data) // 2] ^= 0xFF
    path.write_bytes(bytes(data[:-7]))
    output.unlink()
    sweep(study, output)
    assert sha(output) == whole


def test_a_study_that_changed_meanwhile_is_noticed(tmp_path):
    study = read_study(write(tmp_path, FEW))
    output = tmp_path / "x.h5"
    opened(output, study).close()
    changed = read_study(write(tmp_path, FEW.replace("1.4 Msun", "1.5 Msun"), "other.toml"))
    with pytest.raises(ConfigError, match="has changed"):
        sweep(changed, output)
    sweep(changed, output, replace=True)


def test_two_processes_do_not_work_on_one_study(tmp_path, monkeypatch):
    monkeypatch.setattr("evolve.studies.journal.PATIENCE", 0.1)
    study = read_study(write(tmp_path, FEW))
    output = tmp_path / "x.h5"
    with Journal(journal_path(output), journal_digest(study), len(study.keep)):
        with pytest.raises(ConfigError, match="another process"):
            sweep(study, output)


def test_a_worker_that_is_killed_ends_the_study_with_a_sentence(tmp_path):
    """As the system does when memory runs out; what was done is kept."""
    study, output = write(tmp_path, WAVES), tmp_path / "x.h5"
    process = start(study, output, "--workers", "2")
    while records(output) < 5 and process.poll() is None:
        time.sleep(0.005)
    children = Path(f"/proc/{process.pid}/task/{process.pid}/children")
    if not children.exists():
        process.kill()
        pytest.skip("this system does not tell a process's children")
    os.kill(int(children.read_text().split()[0]), signal.SIGKILL)
    _, said = process.communicate()
    assert process.returncode == 3 and b"the same command goes on" in said
    assert b"Traceback" not in said and records(output) >= 5

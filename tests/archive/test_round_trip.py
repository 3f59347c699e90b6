"""What was written comes back to the last bit, and equal histories make equal bytes."""

import os
import subprocess
import sys
from pathlib import Path

import h5py
import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings

import evolve
from evolve.archive import is_archive, open_history, write_archive
from evolve.archive.write import archive_bytes
from synthetic import assert_same, histories, synthetic

CONFIGS = Path(__file__).parents[2] / "configs"
BYTES_OF_A_RUN = """
import hashlib, sys
import evolve
from evolve.archive.write import archive_bytes
print(hashlib.sha256(archive_bytes(evolve.run(sys.argv[1]))).hexdigest())
"""


@settings(max_examples=40, deadline=None, suppress_health_check=list(HealthCheck))
@given(history=histories())
def test_any_history_comes_back_bit_for_bit(tmp_path_factory, history):
    path = tmp_path_factory.mktemp("any") / "x.h5"
    write_archive(history, path)
    assert_same(open_history(path), history)


def test_a_real_history_comes_back_and_is_the_same_again(tmp_path):
    history = evolve.run(CONFIGS / "white_dwarfs.toml")
    history.save(tmp_path / "x.h5")
    again = evolve.open_history(tmp_path / "x.h5")
    assert_same(again, history)
    assert archive_bytes(again) == (tmp_path / "x.h5").read_bytes()
    assert again.at("contact") == pytest.approx(history.at("contact"), rel=0, nan_ok=True)


def test_two_processes_write_the_same_bytes():
    """Whatever the order in which a process hashes its words."""
    digests = set()
    for seed in ("1", "2"):
        result = subprocess.run(
            [sys.executable, "-c", BYTES_OF_A_RUN, str(CONFIGS / "white_dwarfs.toml")],
            capture_output=True, text=True, check=True, env={**os.environ, "PYTHONHASHSEED": seed},
        )  # fmt: skip
        digests.add(result.stdout)
    assert len(digests) == 1 and len(digests.pop().strip()) == 64


def test_the_name_of_the_file_is_not_in_it(tmp_path):
    history = synthetic()
    for name in ("x.h5", "a longer name with blanks.hdf5"):
        write_archive(history, tmp_path / name)
    first, second = (path.read_bytes() for path in tmp_path.iterdir())
    assert first == second


@pytest.mark.parametrize("length", [0, 59_999, 60_001, 300_000])
def test_texts_of_any_length(tmp_path, length):
    """HDF5 refuses attributes over 64 kB; a config names files as long as it likes."""
    history = synthetic(
        config_text="c" * length, config_files={"t.csv": "é" * length}, message="m" * length,
        warnings=["w" * length],
    )  # fmt: skip
    write_archive(history, tmp_path / "x.h5")
    assert_same(open_history(tmp_path / "x.h5"), history)


def test_text_that_no_file_holds_does_not_lose_a_history(tmp_path):
    """A NUL or half of a surrogate pair, from a TOML escape or a Python caller."""
    write_archive(synthetic(title="a\0b", note="c\ud800d"), tmp_path / "x.h5")
    history = open_history(tmp_path / "x.h5")
    assert (history.title, history.note) == ("a\ufffdb", "c?d")


def test_an_empty_history_of_a_run_that_failed_at_once(tmp_path):
    whole = synthetic()
    history = synthetic(
        columns={n: v[:1] for n, v in whole.columns.items()}, events=[], chapters=[],
        ledger=evolve.history.Ledger({}, {}, whole.ledger.start, whole.ledger.end),
        outcome="non_finite", complete=False, title="", note="", config_files={}, warnings=[],
        statistics={}, sources=(),
    )  # fmt: skip
    write_archive(history, tmp_path / "x.h5")
    assert_same(open_history(tmp_path / "x.h5"), history)


def test_what_the_root_tells(tmp_path):
    write_archive(synthetic(), tmp_path / "x.h5")
    with h5py.File(tmp_path / "x.h5") as file:
        root = dict(file.attrs)
    assert root["format"] == "evolve-archive" and root["layout"] == 1 and root["complete"] == 1
    assert root["evolve_version"] == evolve.__version__ and root["config"] == 'title = "x"\n'
    for name in ("python", "numpy", "scipy", "h5py", "HDF5"):
        assert root[f"{name}_version"][0].isdigit()
    assert len(root["digest"]) == 64
    host, user = os.uname().nodename, str(Path.home())
    assert not any(host in str(value) or user in str(value) for value in root.values())


def test_every_number_is_checksummed_packed_and_has_a_unit_and_a_scale(tmp_path):
    write_archive(synthetic(), tmp_path / "x.h5")
    with h5py.File(tmp_path / "x.h5") as file:
        for group, scale in (("trajectory", "time"), ("events", "event"), ("chapters", "chapter"),
                             ("ledger", "chapter")):  # fmt: skip
            for name, data in file[group].items():
                assert data.dtype == object or (data.fletcher32 and data.shuffle), name
                assert "long_name" in data.attrs
                if name == scale:
                    assert data.is_scale
                else:
                    assert data.dims[0][0] == file[group][scale] and "units" in data.attrs
        assert file["trajectory/period"].dtype == np.float64
        assert file["trajectory/donor"].dtype == np.int8
        assert list(file["trajectory/donor"].attrs["flag_values"]) == [0, 1, 2, 3]
        assert file["trajectory/donor"].attrs["flag_meanings"] == "none A B both"


def test_the_digest_holds_after_another_tool_packed_the_file_anew(tmp_path):
    """The seal goes then; the contents are the same."""
    write_archive(synthetic(), tmp_path / "x.h5")
    with h5py.File(tmp_path / "x.h5") as old, h5py.File(tmp_path / "y.h5", "w", track_order=True) as new:
        for key, value in old.attrs.items():
            new.attrs[key] = value
        for group in old:
            old.copy(group, new)
    assert (tmp_path / "x.h5").read_bytes() != (tmp_path / "y.h5").read_bytes()
    assert_same(open_history(tmp_path / "y.h5"), synthetic())


def test_an_archive_is_known_by_its_first_bytes_not_its_name(tmp_path):
    write_archive(synthetic(), tmp_path / "x.toml")
    (tmp_path / "x.h5").write_text('title = "x"')
    assert is_archive(tmp_path / "x.toml")
    assert not is_archive(tmp_path / "x.h5")
    assert not is_archive(tmp_path) and not is_archive(tmp_path / "none")

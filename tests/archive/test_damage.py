"""Archives that are cut, flipped, foreign, newer or missing: one sentence, and the right status."""

import subprocess
import sys
from pathlib import Path

import h5py
import numpy as np
import pytest

from evolve.archive import open_history, write_archive
from evolve.archive.digest import SEAL_LENGTH, seal_of
from evolve.archive.write import archive_bytes
from evolve.errors import ArchiveError, ConfigError
from synthetic import synthetic

CONTENT = archive_bytes(synthetic())


def refused(path, content):
    """The message that bytes at a path are refused with."""
    path.write_bytes(content)
    with pytest.raises(ArchiveError) as caught:
        open_history(path)
    assert caught.value.status == 3
    assert str(caught.value).startswith(f"{path}: ") and "\n" not in str(caught.value)
    return str(caught.value)


def edited(path, change):
    """An archive that a person changed with h5py."""
    path.write_bytes(CONTENT)
    with h5py.File(path, "r+") as file:
        change(file)
    return path.read_bytes()


@pytest.mark.parametrize("bit", [0, 5, 7])
def test_a_flipped_bit_anywhere(tmp_path, bit):
    """Every 101st byte of the file, and each of the last 100 (the seal)."""
    places = [*range(0, len(CONTENT), 101), *range(len(CONTENT) - 100, len(CONTENT))]
    for place in places:
        content = bytearray(CONTENT)
        content[place] ^= 1 << bit
        refused(tmp_path / "x.h5", bytes(content))


def test_a_cut_anywhere(tmp_path):
    """Every cut of up to 120 bytes, and some hundred others, down to an empty file."""
    lengths = [*range(0, len(CONTENT) - 120, 509), *range(len(CONTENT) - 120, len(CONTENT))]
    for length in lengths:
        if length != len(CONTENT) - SEAL_LENGTH:
            refused(tmp_path / "x.h5", CONTENT[:length])


def test_without_its_seal_it_still_has_its_digest(tmp_path):
    (tmp_path / "x.h5").write_bytes(CONTENT[:-SEAL_LENGTH])
    assert open_history(tmp_path / "x.h5").title == synthetic().title


@pytest.mark.parametrize("size", [1, 64, 4096])
def test_zeroed_blocks(tmp_path, size):
    for place in (0, len(CONTENT) // 3, len(CONTENT) // 2, len(CONTENT) - size):
        content = CONTENT[:place] + bytes(size) + CONTENT[place + size :]
        if content != CONTENT:
            refused(tmp_path / "x.h5", content)


def test_bytes_too_many(tmp_path):
    assert "damaged" in refused(tmp_path / "x.h5", CONTENT + b"\0")
    assert "damaged" in refused(tmp_path / "x.h5", CONTENT * 2)


def test_a_newer_layout(tmp_path):
    content = edited(tmp_path / "x.h5", lambda file: file.attrs.modify("layout", 2))
    message = refused(tmp_path / "x.h5", content)
    assert "newer layout 2" in message and "install a newer evolve" in message


def test_a_newer_layout_as_a_newer_program_would_seal_it(tmp_path):
    content = edited(tmp_path / "x.h5", lambda file: file.attrs.modify("layout", 7))
    assert "newer layout 7" in refused(tmp_path / "x.h5", content + seal_of(content))


def _change_value(file):
    file["trajectory/period"][3] += 1e-12


def _change_text(file):
    file.attrs["config"] = 'title = "y"\n'


def _change_unit(file):
    file["trajectory/period"].attrs["units"] = "d"


def _remove_column(file):
    del file["trajectory/period"]


def _rename_column(file):
    file.move("trajectory/period", "trajectory/perioe")  # the same place in the order of names


def _claim_complete(file):
    file.attrs["complete"] = np.int8(0)


@pytest.mark.parametrize(
    "change",
    [_change_value, _change_text, _change_unit, _remove_column, _rename_column, _claim_complete],
)
def test_changed_by_hand(tmp_path, change):
    message = refused(tmp_path / "x.h5", edited(tmp_path / "x.h5", change))
    assert "its digest does not fit its contents" in message


@pytest.mark.parametrize("name", ["digest", "layout"])
def test_without_what_it_is_judged_by(tmp_path, name):
    content = edited(tmp_path / "x.h5", lambda file: file.attrs.__delitem__(name))
    assert "damaged" in refused(tmp_path / "x.h5", content)


def test_hdf5_of_somebody_else(tmp_path):
    with h5py.File(tmp_path / "x.h5", "w") as file:
        file["period"] = [1.0, 2.0]
    assert "is HDF5 but no archive" in refused(tmp_path / "x.h5", (tmp_path / "x.h5").read_bytes())


@pytest.mark.parametrize("content", [b"", b'title = "x"\n', b"\x89HDF", b"\x89HDF\r\n\x1a\n", bytes(9000)])
def test_no_hdf5_at_all(tmp_path, content):
    message = refused(tmp_path / "x.h5", content)
    assert "no archive" in message or "damaged" in message


@pytest.mark.parametrize("name", ["none.h5", "no/folder/x.h5", "x" * 300, "a\0b"])
def test_no_such_file(tmp_path, name):
    with pytest.raises(ConfigError, match="no such file|cannot be a file") as caught:
        open_history(tmp_path / name)
    assert caught.value.status == 2


def test_a_directory(tmp_path):
    with pytest.raises(ConfigError, match="is a directory"):
        open_history(tmp_path)


def test_a_file_that_may_not_be_read(tmp_path, monkeypatch):
    """Root may read anything, so the system's answer is made up."""
    (tmp_path / "x.h5").write_bytes(CONTENT)

    def denied(path):
        raise PermissionError(13, "Permission denied", str(path))

    monkeypatch.setattr(Path, "read_bytes", denied)
    with pytest.raises(ArchiveError, match=r"cannot be read \(Permission denied\)"):
        open_history(tmp_path / "x.h5")


def test_the_command_tells_it_in_one_line_and_ends_with_3(tmp_path):
    path = tmp_path / "x.h5"
    write_archive(synthetic(), path)
    path.write_bytes(path.read_bytes()[:-2])
    result = subprocess.run(
        [sys.executable, "-m", "evolve", "show", str(path)], capture_output=True, text=True
    )
    assert result.returncode == 3 and result.stdout == ""
    assert str(path) in result.stderr and "damaged" in result.stderr
    assert "Traceback" not in result.stderr

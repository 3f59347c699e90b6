"""Whole or not at all: full disks, faults, kills, and paths that cannot be written to."""

import errno
import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

from evolve.archive import check_output, open_history, write_archive
from evolve.archive.paths import whole_file
from evolve.errors import ArchiveError, ConfigError
from synthetic import assert_same, synthetic

CHILD = f"""
import os, signal, sys
from pathlib import Path
sys.path.append({str(Path(__file__).parents[1] / "history")!r})
from evolve.archive import write_archive
from evolve.errors import EvolveError
from synthetic import synthetic
path = sys.argv[1]
"""
KILLED_HALFWAY = """
def half(part, content):
    with open(part, "wb") as file:
        file.write(content[: len(content) // 2])
        file.flush()
        os.kill(os.getpid(), signal.SIGKILL)
Path.write_bytes = half
write_archive(synthetic(title="new"), path, replace=True)
"""
KILLED_BEFORE_THE_NAME = """
os.replace = lambda old, new: os.kill(os.getpid(), signal.SIGKILL)
write_archive(synthetic(title="new"), path, replace=True)
"""
FULL = """
import resource
resource.setrlimit(resource.RLIMIT_FSIZE, (8192, 8192))
try:
    write_archive(synthetic(title="new"), path, replace=True)
except EvolveError as error:
    print(error)
    sys.exit(error.status)
"""
AGAIN_AND_AGAIN = """
print("ready", flush=True)
while True:
    for title in ("old", "new"):
        write_archive(synthetic(title=title), path, replace=True)
"""


def in_child(code, path):
    """Run code in a process of its own, to its end."""
    return subprocess.run(
        [sys.executable, "-c", CHILD + code, str(path)], capture_output=True, text=True
    )


@pytest.fixture
def old(tmp_path):
    """A path that holds an archive already."""
    write_archive(synthetic(title="old"), tmp_path / "x.h5")
    return tmp_path / "x.h5"


@pytest.mark.parametrize("code", [KILLED_HALFWAY, KILLED_BEFORE_THE_NAME])
def test_killed_while_writing_the_old_archive_stays(old, code):
    before = old.read_bytes()
    assert in_child(code, old).returncode == -signal.SIGKILL
    assert old.read_bytes() == before
    write_archive(synthetic(title="new"), old, replace=True)
    assert open_history(old).title == "new"


@pytest.mark.parametrize("code", [KILLED_HALFWAY, KILLED_BEFORE_THE_NAME])
def test_killed_while_writing_there_is_no_archive(tmp_path, code):
    assert in_child(code, tmp_path / "x.h5").returncode == -signal.SIGKILL
    assert not (tmp_path / "x.h5").exists()


@pytest.mark.parametrize("delay", [0.0, 0.05, 0.11, 0.17])
def test_killed_at_any_time_the_archive_is_one_or_the_other(old, delay):
    with subprocess.Popen(
        [sys.executable, "-c", CHILD + AGAIN_AND_AGAIN, str(old)], stdout=subprocess.PIPE
    ) as child:
        child.stdout.readline()
        time.sleep(delay)
        child.kill()
    found = open_history(old)
    assert found.title in ("old", "new")
    assert_same(found, synthetic(title=found.title))


def test_no_room_on_the_disk(old):
    """A limit on the size of files: the system refuses bytes in the middle of the file."""
    before = old.read_bytes()
    assert len(before) > 8192
    result = in_child(FULL, old)
    assert result.returncode == 3 and result.stderr == ""
    assert "x.h5: could not be written (File too large); nothing was changed" in result.stdout
    assert old.read_bytes() == before and list(old.parent.iterdir()) == [old]


@pytest.mark.parametrize("where", ["open", "fsync", "replace"])
def test_the_machine_fails(old, monkeypatch, where):
    before = old.read_bytes()

    def full(*arguments):
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))

    monkeypatch.setattr(*((Path, "write_bytes") if where == "open" else (os, where)), full)
    with pytest.raises(ArchiveError, match=r"No space left on device.*nothing was changed") as caught:
        write_archive(synthetic(title="new"), old, replace=True)
    assert caught.value.status == 3
    assert old.read_bytes() == before and list(old.parent.iterdir()) == [old]


@pytest.mark.parametrize("fault", [KeyboardInterrupt, ValueError])
def test_any_other_fault_leaves_nothing_behind(tmp_path, fault):
    with pytest.raises(fault), whole_file(tmp_path / "x.csv") as part:
        part.write_text("half")
        raise fault
    assert list(tmp_path.iterdir()) == []


def test_the_parts_of_two_writers_are_two(tmp_path):
    with whole_file(tmp_path / "x.csv") as one, whole_file(tmp_path / "x.csv") as other:
        one.write_text("1")
        other.write_text("2")
    assert (tmp_path / "x.csv").read_text() == "1"
    assert len(list(tmp_path.iterdir())) == 1


def test_the_longest_name_a_folder_holds(tmp_path):
    path = tmp_path / ("ä" * 126 + ".h5")
    write_archive(synthetic(), path)
    assert list(tmp_path.iterdir()) == [path]


def test_a_link_stays_a_link(tmp_path):
    target, link = tmp_path / "target.h5", tmp_path / "link.h5"
    link.symlink_to(target)
    write_archive(synthetic(), link)
    write_archive(synthetic(title="new"), link, replace=True)
    assert link.is_symlink() and open_history(target).title == "new"


def test_a_new_archive_may_be_read_by_whom_the_umask_lets(tmp_path):
    write_archive(synthetic(), tmp_path / "x.h5")
    (tmp_path / "y").write_bytes(b"")
    assert (tmp_path / "x.h5").stat().st_mode == (tmp_path / "y").stat().st_mode


@pytest.mark.parametrize(
    ("name", "message"),
    [("", "is a directory"), ("x.h5", "exists; give --replace"), ("no/x.h5", "no folder .*/no; make"),
     ("x.h5/y.h5", "no folder"), ("y" * 300 + ".h5", "cannot be a file here .File name too long"),
     ("pipe", "no ordinary file")],
)  # fmt: skip
def test_paths_that_are_refused_before_anything_is_computed(old, name, message):
    os.mkfifo(old.parent / "pipe")
    for act in (check_output, lambda path: write_archive(synthetic(), path)):
        with pytest.raises(ConfigError, match=message) as caught:
            act(old.parent / name)
        assert caught.value.status == 2
    assert open_history(old).title == "old"


def test_a_device_is_never_replaced():
    with pytest.raises(ConfigError, match="no ordinary file"):
        check_output("/dev/null", replace=True)


def test_a_folder_that_may_not_be_written_to(tmp_path, monkeypatch):
    """Root may write anywhere, so the system's answer is made up."""
    monkeypatch.setattr(os, "access", lambda path, mode: False)
    with pytest.raises(ArchiveError, match="may not be written to") as caught:
        check_output(tmp_path / "x.h5")
    assert caught.value.status == 3


def test_a_path_that_is_free(tmp_path, monkeypatch):
    assert check_output(tmp_path / "x.h5") == tmp_path / "x.h5"
    monkeypatch.chdir(tmp_path)
    assert check_output("x.h5") == Path("x.h5")
    write_archive(synthetic(), "x.h5")
    assert check_output("x.h5", replace=True) == Path("x.h5")

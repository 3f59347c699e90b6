"""Every command as a user runs it: what it prints, its JSON, its streams, Ctrl-C."""

import json
import os
import signal
import subprocess
import sys
import time
from pathlib import Path

import pytest

import evolve
from evolve.commands.main import COMMANDS, main

CONFIGS = Path(__file__).parents[2] / "configs"


def program(*argv, cwd, **options):
    return subprocess.run(
        [sys.executable, "-m", "evolve", *map(str, argv)], cwd=cwd, capture_output=True, text=True,
        timeout=120, **options,
    )  # fmt: skip


@pytest.fixture(scope="module")
def folder(tmp_path_factory):
    path = tmp_path_factory.mktemp("run")
    done = program("run", CONFIGS / "red_dwarf.toml", cwd=path)
    assert done.returncode == 0 and done.stderr == ""
    assert "period minimum" in done.stdout and "written to red_dwarf.h5" in done.stdout
    return path


def test_help_is_light_and_names_every_command(folder):
    done = program("--help", cwd=folder)
    assert done.returncode == 0 and all(name in done.stdout for name in COMMANDS)
    code = (
        "import sys; from evolve.commands.main import main\n"
        "try: main(['--help'])\nexcept SystemExit: pass\n"
        "heavy = {'numpy', 'scipy', 'h5py', 'matplotlib', 'numba'} & set(sys.modules)\n"
        "sys.exit(len(heavy))"
    )
    done = subprocess.run([sys.executable, "-c", code], cwd=folder, capture_output=True)
    assert done.returncode == 0
    for name in COMMANDS:
        assert program(name, "--help", cwd=folder).returncode == 0


@pytest.mark.parametrize(
    "argv",
    [
        ["check", CONFIGS / "red_dwarf.toml"], ["show", "red_dwarf.h5"],
        ["show", "red_dwarf.h5", "--at", "period=4 h"],
        ["export", "red_dwarf.h5", "--rows", "5", "--columns", "time,period"],
        ["contact", CONFIGS / "red_dwarf.toml"],
        ["shrink", "--mass-a", "1.4", "--mass-b", "1.4", "--period", "8 h"],
        ["compare", "red_dwarf.h5", "red_dwarf.h5"], ["lobe", "--mass-ratio", "0.5"],
        ["laws"], ["laws", "dwarf"], ["template"], ["sources", "red_dwarf.h5"],
        ["run", CONFIGS / "red_dwarf.toml", "-o", "json.h5", "--replace"],
        ["run", "red_dwarf.h5", "--verify"],
    ],
    ids=lambda argv: " ".join(map(str, argv))[-40:],
)  # fmt: skip
def test_json_of_every_command(folder, argv, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    assert main([*map(str, argv), "--json"]) == 0
    out, _ = capsys.readouterr()
    answer = json.loads(out)
    assert set(answer) == {"command", "evolve_version", "result", "warnings"}
    assert answer["command"] == argv[0] and answer["evolve_version"] == evolve.__version__
    assert answer["result"]


def test_scalars_and_tables_of_json_carry_units(folder, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    main(["show", "red_dwarf.h5", "--at", "contact", "--json"])
    state = json.loads(capsys.readouterr()[0])["result"]["state"]
    assert state["period"]["unit"] == "h" and state["period"]["value"] == pytest.approx(4.57, abs=0.01)
    main(["show", "red_dwarf.h5", "--json"])
    events = json.loads(capsys.readouterr()[0])["result"]["events"]
    assert events["units"]["time"] == "yr" and len(events["columns"]["time"]) > 5


def test_set_until_and_again_from_the_archive(folder, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    assert main(["run", "red_dwarf.h5", "--set", "B.mass=0.9 Msun", "--until", "contact", "-o", "again.h5"]) == 0
    history = evolve.open_history("again.h5")
    assert history.outcome == "event" and history["mass_B"][0] == 0.9
    capsys.readouterr()
    assert main(["run", "red_dwarf.h5", "--verify"]) == 0
    assert "to the last bit" in capsys.readouterr()[0]


def test_verify_notices_a_difference(folder, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    history = evolve.open_history("red_dwarf.h5")
    history.columns["period"][5] *= 1.001
    history.save("touched.h5", replace=True)
    assert main(["run", "touched.h5", "--verify"]) == 1
    assert "differs" in capsys.readouterr()[0]


def test_no_contact_is_a_negative_answer(folder, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    argv = ["contact", CONFIGS / "red_dwarf.toml", "--set", "orbit.period=3 d", "--set", "end.time=1 Gyr"]
    assert main([*map(str, argv)]) == 1
    out, _ = capsys.readouterr()
    assert "no contact within 1 Gyr" in out and "starting period" in out


def test_equations_are_printed_as_python_that_compiles(folder, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    assert main(["check", str(CONFIGS / "tides.toml"), "--equations"]) == 0
    out, _ = capsys.readouterr()
    compile(out, "equations", "exec")
    assert "def rates(" in out and "waves_torque(" in out


def test_a_step_limit_saves_what_there_is(folder, capsys, monkeypatch):
    monkeypatch.chdir(folder)
    argv = ["run", str(CONFIGS / "red_dwarf.toml"), "-o", "short.h5", "--set", "numerics.max_evaluations=300"]
    assert main(argv) == 1
    _, err = capsys.readouterr()
    assert "short.h5" in err and "max_evaluations" in err
    history = evolve.open_history("short.h5")
    assert history.outcome == "step_limit" and not history.complete and len(history) > 50


def test_ctrl_c_saves_and_ends_with_130(folder):
    argv = ["run", CONFIGS / "red_dwarf.toml", "-o", "cut.h5", "--set", 'numerics.max_step="20 kyr"',
            "--set", "numerics.max_evaluations=100000000"]  # fmt: skip
    process = subprocess.Popen(
        [sys.executable, "-m", "evolve", *map(str, argv)], cwd=folder, stdout=subprocess.PIPE,
        stderr=subprocess.PIPE, text=True, start_new_session=True,
    )  # fmt: skip
    time.sleep(2.5)
    os.killpg(process.pid, signal.SIGINT)
    _, err = process.communicate(timeout=60)
    assert process.returncode == 130 and "Traceback" not in err
    history = evolve.open_history(folder / "cut.h5")
    assert history.outcome == "interrupted" and len(history) > 10


def test_a_reader_that_leaves_is_no_fault(folder):
    command = f"{sys.executable} -m evolve laws | head -1"
    done = subprocess.run(command, shell=True, cwd=folder, capture_output=True, text=True)
    assert done.returncode == 0 and "Traceback" not in done.stderr and "Broken" not in done.stderr


def test_equal_runs_in_two_processes_give_equal_bytes(folder):
    for name in ("one.h5", "two.h5"):
        assert program("run", CONFIGS / "eccentric_pair.toml", "-o", name, cwd=folder).returncode == 0
    assert (folder / "one.h5").read_bytes() == (folder / "two.h5").read_bytes()


def test_missing_extra_gives_one_sentence(folder):
    code = (
        "import sys; sys.modules['matplotlib'] = None\n"
        "from evolve.commands.main import main; sys.exit(main(['draw', 'red_dwarf.h5']))"
    )
    done = subprocess.run([sys.executable, "-c", code], cwd=folder, capture_output=True, text=True)
    assert done.returncode == 1 and "pip install 'matplotlib'" in done.stderr and "figures" in done.stderr
    assert "Traceback" not in done.stderr

"""What a sweep costs beside its histories: ratios of times, and memory over the number of points.

    python tests/benchmarks/run_sweeps.py [POINTS]

One process over two: wall-clock, the best of three turns of each, for bare loops (what the
machine gives, with whatever else runs on it) and for a sweep of POINTS histories of a red dwarf.
A sweep over its engine: processor time of one process, over reading the same configs and
integrating them; for the red dwarfs, and for points so cheap (a year of a detached pair) that a
hundred thousand of them take some minutes. Last, the peak memory of a sweep of a thousand and of
a hundred thousand cheap points, each in a process of its own, and how much a point adds.
"""

import subprocess
import sys
import tempfile
from concurrent.futures import ProcessPoolExecutor
from pathlib import Path
from time import perf_counter, process_time

CHEAP = """
[base]
A = {{ mass = "1.4 Msun", star = "compact", kind = "point-mass" }}
B = {{ mass = "1.4 Msun", star = "compact", kind = "point-mass" }}
orbit = {{ period = "1 d" }}
end = {{ time = "1 yr" }}
[vary]
"orbit.period" = {{ from = "1 d", to = "9 d", count = {count} }}
"A.mass" = {{ from = "1 Msun", to = "5 Msun", count = 100 }}
[keep]
results = ["end.period", "end.time", "end.reason", "ledger.waves"]
"""
REAL = """
config = "{config}"
[vary]
"A.mass" = {{ from = "0.5 Msun", to = "0.65 Msun", count = {count} }}
[keep]
results = ["contact.time", "end.period", "max.overflow_A", "ledger.braking"]
"""
CONFIG = Path(__file__).parents[2] / "configs" / "red_dwarf.toml"


def study(folder, text, name, **values):
    path = folder / f"{name}.toml"
    path.write_text(text.format(**values))
    return path


def best(*actions, turns=3):
    """Least wall-clock seconds of each action, in turn."""
    times = [[] for _ in actions]
    for _ in range(turns):
        for action, found in zip(actions, times, strict=True):
            start = perf_counter()
            action()
            found.append(perf_counter() - start)
    return [min(found) for found in times]


def engine_alone(path, points):
    """Processor seconds of reading and integrating some points of a study, by hand."""
    from evolve.integrate import integrate
    from evolve.studies.study import read_study

    found = read_study(path)
    integrate(found.base, many=True)  # a compilation is not counted
    changes = list(found.points(range(points)))
    start = process_time()
    for change in changes:
        integrate(found.base.with_values(change), many=True)
    return process_time() - start


def spin(turns=30_000_000):
    """Some seconds of nothing but arithmetic."""
    total = 0
    for turn in range(turns):
        total += turn
    return total


def of_this_machine():
    """One process over two for bare loops."""
    with ProcessPoolExecutor(2) as pool:
        one, two = best(lambda: [spin(), spin()], lambda: list(pool.map(spin, [30_000_000] * 2)))
    return one / two


def apart(path, output):
    """(peak resident memory [MB], processor seconds) of a sweep in a process of its own."""
    code = (
        "import sys, resource, time; from evolve.studies.sweep import sweep; "
        "from evolve.studies.study import read_study; from evolve.integrate import integrate; "
        "study = read_study(sys.argv[1]); integrate(study.base, many=True); "
        "start = time.process_time(); sweep(study, sys.argv[2], replace=True); "
        "print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024, time.process_time() - start)"
    )
    command = [sys.executable, "-c", code, str(path), str(output)]
    done = subprocess.run(command, check=True, capture_output=True, text=True)
    return tuple(map(float, done.stdout.split()))


def main(points=1500):
    from evolve.studies.sweep import sweep

    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        real = study(folder, REAL, "real", config=CONFIG, count=points)
        alone = engine_alone(real, points)
        _, took = apart(real, folder / "real.h5")
        one, two = best(lambda: sweep(real), lambda: sweep(real, workers=2))
        say("bare loops, one process over two", of_this_machine())
        say(f"{points} red dwarfs, one process over two", one / two)
        say(f"{points} red dwarfs, sweep over engine", took / alone)
        few = study(folder, CHEAP, "few", count=10)
        many = study(folder, CHEAP, "many", count=1000)
        small, _ = apart(few, folder / "few.h5")
        large, took = apart(many, folder / "many.h5")
        say("100000 cheap points, sweep over engine", took / (100 * engine_alone(few, 1000)))
        say("peak memory of 1000 cheap points [MB]", small)
        say("peak memory of 100000 cheap points [MB]", large)
        say("what a point adds [B]", (large - small) * 2**20 / 99000)


def say(what, number):
    print(f"{what:45s}{number:8.2f}", flush=True)


if __name__ == "__main__":
    main(*map(int, sys.argv[1:]))

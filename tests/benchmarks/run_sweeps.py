"""What a sweep costs beside its histories: ratios of times, and memory over the number of points.

    python tests/benchmarks/run_sweeps.py [POINTS]

Ratios, each of times taken here in one run: one process over two, for bare loops (what the
machine gives at the moment) and for a sweep; the sweep of POINTS
real histories over integrating the same configs one by one; and, for cheap points (a year of a
detached pair), the same over a hundred thousand. Last, the peak memory of a sweep of a thousand
and of a hundred thousand cheap points, each in a process of its own, and how much a point adds.
The hundred thousand take some minutes.
"""

import subprocess
import sys
import tempfile
from concurrent.futures import ProcessPoolExecutor
from pathlib import Path
from time import perf_counter

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


def seconds(action):
    start = perf_counter()
    action()
    return perf_counter() - start


def engine_alone(path):
    """Seconds that the histories of a study take without it; its configs are read before."""
    from evolve.integrate import integrate
    from evolve.studies.study import read_study
    from evolve.studies.sweep import MANY

    found = read_study(path)
    many, total = found.size >= MANY, 0.0
    integrate(found.base, many=many)  # a compilation is not counted
    for change in found.points(range(found.size)):
        config = found.base.with_values(change)
        start = perf_counter()
        integrate(config, many=many)
        total += perf_counter() - start
    return total


def spin(turns=30_000_000):
    """Some seconds of nothing but arithmetic."""
    total = 0
    for turn in range(turns):
        total += turn
    return total


def of_this_machine():
    """One process over two for bare loops: what a sweep can reach here, beside whatever else runs."""
    with ProcessPoolExecutor(2) as pool:
        list(pool.map(spin, [1, 1]))
        two = seconds(lambda: list(pool.map(spin, [30_000_000] * 4)))
    return seconds(lambda: [spin() for _ in range(4)]) / two


def peak(path, output):
    """Peak resident memory [MB] of a sweep in a process of its own, and its seconds."""
    code = (
        "import sys, resource; from evolve.studies.sweep import sweep; "
        "sweep(sys.argv[1], sys.argv[2], replace=True); "
        "print(resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024)"
    )
    command = [sys.executable, "-c", code, str(path), str(output)]
    start = perf_counter()
    done = subprocess.run(command, check=True, capture_output=True, text=True)
    return float(done.stdout), perf_counter() - start


def main(points=4000):
    from evolve.studies.sweep import sweep

    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        real = study(folder, REAL, "real", config=CONFIG, count=points)
        alone = engine_alone(real)  # also fills the cache of machine code
        one = seconds(lambda: sweep(real, folder / "one.h5"))
        two = seconds(lambda: sweep(real, folder / "two.h5", workers=2))
        print(f"bare loops, one process over two                        {of_this_machine():6.2f}")
        print(f"{points} histories of a red dwarf, one process over two   {one / two:6.2f}")
        print(f"{points} histories of a red dwarf, sweep over engine      {one / alone:6.2f}")
        few = study(folder, CHEAP, "few", count=10)
        many = study(folder, CHEAP, "many", count=1000)
        small, _ = peak(few, folder / "few.h5")
        large, took = peak(many, folder / "many.h5")
        alone = 100 * engine_alone(few)
        print(f"100000 cheap points, sweep over engine               {took / alone:6.2f}")
        print(f"peak memory of 1000 and 100000 cheap points          {small:6.0f} and {large:.0f} MB")
        print(f"a point adds                                         {(large - small) / 0.099:6.0f} B")


if __name__ == "__main__":
    main(*map(int, sys.argv[1:]))

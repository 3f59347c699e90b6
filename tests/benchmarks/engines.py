"""What the compiled engine costs, as ratios in one run.

    python tests/benchmarks/engines.py [PAIRS] [MANY]

Prints: `run`, plain and compiled, against the hand-written script (scalar math) and against the
same script with numpy in its right side; the compiled engine against plain run; one worker
against two; cost and peak memory against the number of histories; what a command takes to
start. Everything is timed in turn, PAIRS times, and the median of the ratios is printed.
"""

import importlib.resources
import resource
import statistics
import subprocess
import sys
from pathlib import Path
from tempfile import TemporaryDirectory
from time import perf_counter

import numpy as np

sys.path.insert(0, str(Path(__file__).parent))
import hand_written  # noqa: E402

import evolve  # noqa: E402
from evolve.integrate import integrate  # noqa: E402

CONFIG = Path(__file__).parents[2] / "configs" / "red_dwarf.toml"
TABLE = importlib.resources.files("evolve.stars") / "data" / "dwarf.csv"


def seconds(action):
    start = perf_counter()
    action()
    return perf_counter() - start


def in_turn(actions, pairs):
    """Seconds of every action, (pairs, actions), after one warm-up of each."""
    for action in actions.values():
        action()
    return [[seconds(action) for action in actions.values()] for _ in range(pairs)]


def report(actions, pairs, yardstick=0):
    """Print the median of every action and of its ratio to the yardstick."""
    times = in_turn(actions, pairs)
    for column, name in enumerate(actions):
        middle = statistics.median(row[column] for row in times)
        ratio = statistics.median(row[column] / row[yardstick] for row in times)
        print(f"{name:42s} {1e3 * middle:10.2f} ms {ratio:9.3f}")


def minimum(history):
    return float(history["period"].min())


def masses(base, number):
    """Configs of many masses, one after the other."""
    for n in range(number):
        donor, dwarf = 0.45 + 0.25 * (n * 0.618034 % 1.0), 0.65 + 0.3 * (n * 0.754878 % 1.0)
        yield base.with_values({"A.mass": donor, "B.mass": dwarf})


def drain(base, number, workers=1):
    for _ in evolve.run_many(masses(base, number), workers, minimum, block=32):
        pass


def starts(*arguments):
    return lambda: subprocess.run(
        [sys.executable, *arguments], check=True, stdout=subprocess.DEVNULL
    )


def main(pairs=9, many=2000):
    plain = evolve.read_config(CONFIG)
    compiled = plain.with_values({"numerics.engine": "compiled"})
    print("one history, against the hand-written script")
    report({
        "hand-written, scalar math": lambda: hand_written.history(TABLE),
        "hand-written, numpy right side": lambda: hand_written.history(TABLE, maths=np),
        "run, plain": lambda: integrate(plain),
        "run, compiled": lambda: integrate(compiled),
    }, pairs)  # fmt: skip
    print(f"\n{many} histories, against one worker")
    report({
        f"run_many, {workers} worker{'s' * (workers > 1)}": lambda w=workers: drain(plain, many, w)
        for workers in (1, 2)
    }, 3)  # fmt: skip
    print("\ncost against number")
    for number in (10, 1000, 10 * many):
        spent = seconds(lambda n=number: drain(plain, n))
        peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
        print(f"{number:8d} histories {1e3 * spent / number:10.2f} ms each, peak {peak:8.1f} MB")
    print("\nstart-up, against python -c pass")
    with TemporaryDirectory() as folder:
        start_up(pairs, str(Path(folder) / "history.h5"))


def start_up(pairs, archive):
    run = ("-m", "evolve", "run", str(CONFIG), "--quiet", "--replace", "-o", archive)
    report({
        "python -c pass": starts("-c", "pass"),
        "import evolve": starts("-c", "import evolve"),
        "evolve --help": starts("-m", "evolve", "--help"),
        "evolve laws": starts("-m", "evolve", "laws"),
        "evolve run configs/red_dwarf.toml": starts(*run),
    }, pairs)  # fmt: skip


if __name__ == "__main__":
    main(*map(int, sys.argv[1:]))

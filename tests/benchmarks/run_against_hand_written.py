"""Time of `run` over that of the hand-written script, in one process, in turn.

    python tests/benchmarks/run_against_hand_written.py [PAIRS]

Prints the median of each and the median of its ratios to the script, turn by turn. Ledger, events and
columns are included in the time of `run`; reading the config is not.
"""

import importlib.resources
import statistics
import sys
from pathlib import Path
from time import perf_counter

sys.path.insert(0, str(Path(__file__).parent))
import hand_written  # noqa: E402

from evolve import read_config  # noqa: E402
from evolve.integrate import integrate  # noqa: E402

CONFIG = Path(__file__).parents[2] / "configs" / "red_dwarf.toml"


def seconds(action):
    start = perf_counter()
    action()
    return perf_counter() - start


def main(pairs=15):
    table = importlib.resources.files("evolve.stars") / "data" / "dwarf.csv"
    plain = read_config(CONFIG)
    compiled = plain.with_values({"numerics.engine": "compiled"})
    actions = {
        "hand-written": lambda: hand_written.history(table),
        "run, plain": lambda: integrate(plain),
        "run, compiled": lambda: integrate(compiled),
    }
    for action in actions.values():  # once for what is cached or compiled
        action()
    times = [[seconds(action) for action in actions.values()] for _ in range(pairs)]
    for column, name in enumerate(actions):
        middle = statistics.median(row[column] for row in times)
        ratio = statistics.median(row[column] / row[0] for row in times)
        print(f"{name:16s} {1e3 * middle:8.1f} ms {ratio:8.2f}")


if __name__ == "__main__":
    main(*map(int, sys.argv[1:]))

"""Time of `run` over that of the hand-written script, in one process, in turn.

    python tests/benchmarks/run_against_hand_written.py [PAIRS]

Prints the median of each and the median of the ratios pair by pair. Ledger, events and
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
    config = read_config(CONFIG)
    actions = (lambda: integrate(config), lambda: hand_written.history(table))
    for action in actions:
        action()
    times = [[seconds(action) for action in actions] for _ in range(pairs)]
    ours, theirs = (statistics.median(column) for column in zip(*times, strict=True))
    ratio = statistics.median(a / b for a, b in times)
    print(f"run            {1e3 * ours:8.1f} ms")
    print(f"hand-written   {1e3 * theirs:8.1f} ms")
    print(f"ratio          {ratio:8.2f}")


if __name__ == "__main__":
    main(*map(int, sys.argv[1:]))

"""A bar on stderr for what lasts: only on a terminal, only after a second."""

import sys
from contextlib import contextmanager
from math import log10

YOUNGEST = 1e3
"""Times below this many years count as none on the bar's logarithmic scale."""


@contextmanager
def history_bar(quiet=False):
    """A progress callback for one history.

    The bar runs with the logarithm of time, so that a fast phase of thousands of years and
    gigayears after it both move it; beside it stand the time reached and the regime.
    """
    if quiet or not sys.stderr.isatty():
        yield None
        return
    from tqdm import tqdm

    from evolve.config.units import human

    layout = "{desc}: {percentage:3.0f}%|{bar}| {postfix} [{elapsed}]"
    with tqdm(total=1.0, delay=1.0, bar_format=layout, leave=False, mininterval=0.2) as bar:

        def progress(time, end, regime, steps):
            if steps % 50:
                return
            whole = log10(1.0 + end / YOUNGEST)
            bar.n = min(log10(1.0 + time / YOUNGEST) / whole, 1.0)
            bar.set_description(regime.replace("_", " of "), refresh=False)
            bar.set_postfix_str(f"{human(time, 'time')} of {human(end, 'time')}", refresh=False)
            bar.update(0)

        yield progress


@contextmanager
def counting_bar(total, what, quiet=False):
    """A progress callback for many: called with the number done.

    What was done before the first call (a study that goes on) has no part in the rate.
    """
    if quiet or not sys.stderr.isatty():
        yield None
        return
    from tqdm import tqdm

    begun = []
    with tqdm(total=total, delay=1.0, unit=f" {what}", leave=False) as bar:

        def progress(done):
            if begun:
                bar.update(done - bar.n)
                return
            begun.append(done)
            bar.initial = bar.n = bar.last_print_n = done

        yield progress


@contextmanager
def stages_bar(quiet=False):
    """A progress callback for work in stages: called with (done, total, what is counted)."""
    if quiet or not sys.stderr.isatty():
        yield None
        return
    from tqdm import tqdm

    with tqdm(total=0, delay=1.0, leave=False) as bar:

        def progress(done, total, what):
            if bar.unit != f" {what}":
                bar.unit = f" {what}"
                bar.reset(total)
            bar.update(done - bar.n)

        yield progress

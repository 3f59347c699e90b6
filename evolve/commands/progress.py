"""A bar on stderr for what lasts: only on a terminal, only after a second."""

import sys
from contextlib import contextmanager
from math import log10

COMPILING = "compiling the equations"
YOUNGEST = 1e3
"""Times below this many years count as none on the bar's logarithmic scale."""


@contextmanager
def history_bar(quiet=False):
    """A progress callback for one history.

    The bar runs with the logarithm of time, so that a fast phase of thousands of years and
    gigayears after it both move it; before it stand the regime and the time reached.
    """
    if quiet or not sys.stderr.isatty():
        yield None
        return
    from tqdm import tqdm

    from evolve.config.units import human

    layout = "{desc}{percentage:3.0f}%|{bar}| [{elapsed}]"
    with tqdm(total=1.0, delay=1.0, bar_format=layout, leave=False, mininterval=0.2) as bar:

        def progress(time, end, regime, steps):
            if steps % 50:
                return
            if regime == COMPILING:  # seconds in which nothing else can be told
                bar.delay = 0.0
            whole = log10(1.0 + end / YOUNGEST)
            bar.n = min(log10(1.0 + time / YOUNGEST) / whole, 1.0)
            words = f"{regime.replace('_', ' of ')}, {human(time, 'time')} of {human(end, 'time')}"
            bar.set_description(words, refresh=False)
            bar.update(0)
            if regime == COMPILING:
                bar.refresh()

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

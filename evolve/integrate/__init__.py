"""Integration of a pair's equations, chapter by chapter, with solve_ivp."""

from functools import cache


def integrate(config, progress=None, many=False):
    """The history of one config.

    Parameters
    ----------
    config : evolve.config.Config
    progress : callable, optional
        Called as progress(time, end_time, regime, steps) after every accepted step.
    many : bool
        Whether it is one of so many that a compilation pays: then the engine `auto` is the
        compiled one, where numba is there.

    Returns
    -------
    evolve.history.History
        Also when the integration failed or was interrupted: `outcome` tells, and what was
        computed is there.

    Raises
    ------
    ConfigError
        If the pair cannot start as written.
    """
    from evolve.integrate.assemble import history_of
    from evolve.integrate.run import Run
    from evolve.system.pair import Pair

    engine = config.values["numerics"]["engine"]
    compiled = engine == "compiled" or engine == "auto" and many and _has_numba()
    return history_of(Run(Pair(config), progress, compiled).run())


@cache
def _has_numba():
    from importlib.util import find_spec

    return find_spec("numba") is not None

"""Integration of a pair's equations, chapter by chapter, with solve_ivp."""


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
    MissingExtra
        If the config asks for the compiled engine and numba is not there.
    """
    from importlib.util import find_spec

    from evolve.errors import MissingExtra
    from evolve.integrate.assemble import history_of
    from evolve.integrate.run import Run
    from evolve.system.pair import Pair

    engine = config.values["numerics"]["engine"]
    wanted = engine == "compiled" or engine == "auto" and many
    there = wanted and find_spec("numba") is not None
    if engine == "compiled" and not there:
        raise MissingExtra("numba", "fast")
    return history_of(Run(Pair(config), progress, compiled=there).run())

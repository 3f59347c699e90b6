"""Integration of a pair's equations, chapter by chapter, with solve_ivp."""


def integrate(config, progress=None):
    """The history of one config.

    Parameters
    ----------
    config : evolve.config.Config
    progress : callable, optional
        Called as progress(time, end_time, regime, steps) after every accepted step.

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

    compiled = config.values["numerics"]["engine"] == "compiled"
    return history_of(Run(Pair(config), progress, compiled).run())

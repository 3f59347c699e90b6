"""Histories of interacting binary stars, from a detached pair through contact to the end.

    import evolve
    history = evolve.run("configs/red_dwarf.toml")
    history["period"], history.units["period"], history.at("contact")["period"]
"""

from importlib import import_module

__version__ = "0.1.0"

_PLACES = {
    "Config": "evolve.config",
    "read_config": "evolve.config",
    "History": "evolve.history",
    "open_history": "evolve.archive",
    "run_many": "evolve.studies.many",
    "sweep": "evolve.studies.sweep",
    "origin": "evolve.studies.origin",
    "open_study": "evolve.studies.study_archive",
    "EvolveError": "evolve.errors",
    "ConfigError": "evolve.errors",
    "DomainError": "evolve.errors",
    "ArchiveError": "evolve.errors",
    "MachineError": "evolve.errors",
    "MissingExtra": "evolve.errors",
}

__all__ = [*_PLACES, "run"]


def run(config, progress=None, allow_code=False):
    """The history of one config.

    Parameters
    ----------
    config : Config, dict, str or path
        A completed config, a dict of its keys, or the path of a TOML file.
    progress : callable, optional
        Called as progress(time, end_time, regime, steps) after every accepted step.
    allow_code : bool
        Whether a law may come from a Python file that the config names.

    Returns
    -------
    History
        Whatever the outcome: `history.outcome` and `history.message` tell.

    Raises
    ------
    ConfigError
        For a config that is wrong, with all of its problems.
    """
    from evolve.config import read_config
    from evolve.integrate import integrate

    return integrate(read_config(config, allow_code=allow_code), progress)


def __getattr__(name):
    """Public names are imported when they are first asked for: `import evolve` stays light."""
    if name not in _PLACES:
        raise AttributeError(f"module 'evolve' has no attribute {name!r}")
    return getattr(import_module(_PLACES[name]), name)

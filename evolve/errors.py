"""What can go wrong, and the exit status each kind ends a command with."""


class EvolveError(Exception):
    """Base of every error the package raises on purpose; `status` is the exit status."""

    status = 1


class ConfigError(EvolveError):
    """What was written is wrong: arguments, a config, a study, a table they name.

    Parameters
    ----------
    problems : str or list of str
        One readable sentence for each problem: file, key, value, what is allowed.
    """

    status = 2

    def __init__(self, problems):
        self.problems = [problems] if isinstance(problems, str) else list(problems)
        super().__init__("\n".join(self.problems))


class DomainError(EvolveError):
    """A law or a star was asked outside the range in which it means anything."""


class ArchiveError(EvolveError):
    """A file is damaged, foreign or of a newer layout, or the machine cannot write it."""

    status = 3


class MachineError(EvolveError):
    """The machine failed, or another that worked for it: worker processes, a cluster."""

    status = 3


class MissingExtra(EvolveError):
    """A package of an optional extra is needed and not installed.

    Parameters
    ----------
    package : str
        As pip knows it.
    extra : str
    """

    def __init__(self, package, extra):
        super().__init__(
            f"{package} is needed for this (extra `{extra}`) and is not installed: "
            f"python -m pip install '{package}'"
        )

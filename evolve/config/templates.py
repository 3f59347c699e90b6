"""Commented configs to start from, one a file in the folder `templates`."""

from pathlib import Path

from evolve.config.words import nearest
from evolve.errors import ConfigError

_FOLDER = Path(__file__).with_name("templates")


def kinds():
    """The kinds of template.

    Returns
    -------
    dict of str to str
        Kind -> what it is for, in one sentence.
    """
    paths = sorted(_FOLDER.glob("*.toml"))
    return {
        path.stem: path.read_text(encoding="utf-8").partition("\n")[0].lstrip("# ")
        for path in paths
    }


def template(kind="red-dwarf"):
    """A commented config to start from.

    Parameters
    ----------
    kind : str
        A key of `kinds()`.

    Returns
    -------
    str
        TOML.

    Raises
    ------
    ConfigError
        If there is no such kind; the message lists those there are.
    """
    known = list(kinds())
    if kind not in known:
        near = nearest(kind, known)
        hint = f'; did you mean "{near}"?' if near else ""
        raise ConfigError(f'no template "{kind}"; allowed: {", ".join(known)}{hint}')
    return (_FOLDER / f"{kind}.toml").read_text(encoding="utf-8")


__all__ = ["kinds", "template"]

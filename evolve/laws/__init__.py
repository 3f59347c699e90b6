"""The laws: what makes mass flow and turns an orbit. One file a process, one table of all.

To add a law: write its function (`evolve.laws.contract`), give it a Keys class, and put
one line into the table of its process.
"""

from difflib import get_close_matches

from evolve.errors import ConfigError
from evolve.laws import acceptance, braking, consequential, expulsion, overflow, tides, waves, winds
from evolve.laws.contract import Law

TABLES: dict[str, dict[str, Law]] = {
    "waves": waves.TABLE,
    "braking": braking.TABLE,
    "overflow": overflow.TABLE,
    "wind": winds.TABLE,
    "capture": winds.CAPTURE_TABLE,
    "ceiling": acceptance.TABLE,
    "expulsion": expulsion.TABLE,
    "consequential": consequential.TABLE,
    "tides": tides.TABLE,
}


def find(process, name):
    """The law of a process that goes by a name in a config.

    Parameters
    ----------
    process : str
        A key of `TABLES`.
    name : str

    Returns
    -------
    Law

    Raises
    ------
    ConfigError
        If there is none; the message lists those there are.
    """
    table = TABLES[process]
    if name in table:
        return table[name]
    near = get_close_matches(name, table, n=1)
    hint = f'; did you mean "{near[0]}"?' if near else ""
    raise ConfigError(f'no {process} law is called "{name}": there are {", ".join(table)}{hint}')


__all__ = ["TABLES", "Law", "find"]

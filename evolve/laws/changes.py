"""Formulas that act when something happens, without being chosen by name in a config."""

from typing import NamedTuple

from evolve.laws.contract import Law, NoKeys
from evolve.laws.disc import critical_rate
from evolve.laws.envelope import webbink_1984
from evolve.laws.kick import collapsed_mass, sudden_change


class Change(NamedTuple):
    """A formula, the section of a config that steers it, the events that it stands behind."""

    law: Law
    section: str
    events: tuple[str, ...]


CHANGES = {
    "common-envelope": Change(
        Law(
            webbink_1984, NoKeys, ("webbink-1984",),
            "donors with a core; an orbit that is circular before and after",
        ),
        "envelope",
        ("common_envelope",),
    ),
    "sudden-loss": Change(
        Law(
            sudden_change, NoKeys, ("blaauw-1961", "hills-1983"),
            "a loss within much less than a period; the companion is left alone",
        ),
        "kick",
        ("kick", "collapse"),
    ),
    "collapse": Change(
        Law(
            collapsed_mass, NoKeys, ("lattimer-yahil-1989",),
            "white dwarfs at their limit that become neutron stars",
        ),
        "limits",
        ("collapse",),
    ),
    "disc": Change(
        Law(
            critical_rate, NoKeys, ("lasota-dubus-kruk-2008",),
            "discs of hydrogen about white dwarfs; those of neutron stars and black holes are irradiated",
        ),
        "",
        (),
    ),
}  # fmt: skip


def sources_of_events(names):
    """Bibliography keys of what stands behind events.

    Parameters
    ----------
    names : iterable of str

    Returns
    -------
    list of str
        In the order of the table, once each.
    """
    happened = set(names)
    return list(dict.fromkeys(
        key for change in CHANGES.values() if happened & set(change.events)
        for key in change.law.sources
    ))  # fmt: skip


__all__ = ["CHANGES", "Change", "sources_of_events"]

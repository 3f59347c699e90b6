"""Histories: what happened to a pair, in columns, events, chapters and a ledger."""

from importlib import import_module

from evolve.history.columns import COLUMNS, Column

_PLACES = {
    "Chapter": "evolve.history.history",
    "Event": "evolve.history.history",
    "History": "evolve.history.history",
    "largest_differences": "evolve.history.history",
    "Ledger": "evolve.history.ledger",
}

__all__ = ["COLUMNS", "Column", *_PLACES]


def __getattr__(name):
    if name not in _PLACES:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    return getattr(import_module(_PLACES[name]), name)

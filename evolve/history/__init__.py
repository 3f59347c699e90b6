"""Histories: what happened to a pair, in columns, events, chapters and a ledger."""

from evolve.history.columns import COLUMNS, Column
from evolve.history.history import Chapter, Event, History, largest_differences
from evolve.history.ledger import Ledger

__all__ = ["COLUMNS", "Chapter", "Column", "Event", "History", "Ledger", "largest_differences"]

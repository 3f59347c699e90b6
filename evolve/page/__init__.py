"""The page: histories told in one self-contained HTML file."""

from evolve.page.report import report

__all__ = ["report"]

"""HDF5 in and out, and tables out."""

from evolve.archive.paths import check_output, is_archive
from evolve.archive.read import open_history
from evolve.archive.write import write_archive

__all__ = ["check_output", "is_archive", "open_history", "write_archive"]

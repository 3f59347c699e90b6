"""The made-up histories of tests/history, for the archives of them here."""

import sys
from pathlib import Path

sys.path.append(str(Path(__file__).parents[1] / "history"))

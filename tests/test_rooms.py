"""Imports point one way, from commands down to constants; laws and stars are bare floats."""

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[1] / "evolve"
ORDER = [
    "constants", "errors", "orbit", "laws", "stars", "config", "system", "history",
    "integrate", "archive", "studies", "figures", "page", "commands", "__init__", "__main__",
]  # fmt: skip
BARE = ("orbit/kepler.py", "orbit/lobes.py", "laws/*.py", "stars/*.py", "system/gauges.py")
HEAVY = {"numpy", "scipy", "h5py", "matplotlib", "numba", "tqdm", "astropy", "xarray", "pandas"}
FILES = sorted(PACKAGE.rglob("*.py"))


def room(path):
    part = path.relative_to(PACKAGE).parts[0]
    return part.removesuffix(".py")


def imported(tree):
    """(module, is it at the top level of the file) of every import."""
    top = {id(node) for node in tree.body}
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            for alias in node.names:
                yield alias.name, id(node) in top
        elif isinstance(node, ast.ImportFrom) and node.level == 0:
            yield node.module, id(node) in top


@pytest.mark.parametrize("path", FILES, ids=lambda p: str(p.relative_to(PACKAGE)))
def test_imports_point_down(path):
    here = ORDER.index(room(path))
    for module, _ in imported(ast.parse(path.read_text())):
        if (path.name, module) == ("history.py", "evolve.archive"):
            continue  # History.save, for convenience; imported when it is called
        parts = module.split(".")
        if parts[0] == "evolve" and len(parts) > 1:
            assert ORDER.index(parts[1]) <= here, f"{path.name} imports {module}"


@pytest.mark.parametrize("pattern", BARE)
def test_laws_and_stars_know_only_floats(pattern):
    for path in PACKAGE.glob(pattern):
        for module, top in imported(ast.parse(path.read_text())):
            assert not (top and module.split(".")[0] in HEAVY), f"{path.name} imports {module}"


def test_nothing_below_history_knows_a_file_format_a_plot_or_a_terminal():
    for path in FILES:
        if room(path) in ("orbit", "laws", "stars", "system", "integrate"):
            names = {module.split(".")[0] for module, _ in imported(ast.parse(path.read_text()))}
            assert not names & {"h5py", "matplotlib", "tqdm", "argparse", "tomllib"}, path


def test_files_can_be_held_in_ones_head():
    for path in FILES:
        assert len(path.read_text().splitlines()) <= 400, path


def test_functions_can_be_held_in_ones_head():
    for path in FILES:
        for node in ast.walk(ast.parse(path.read_text())):
            if isinstance(node, ast.FunctionDef):
                doc = len((ast.get_docstring(node) or "").splitlines())
                assert node.end_lineno - node.lineno - doc <= 50, f"{path}: {node.name}"

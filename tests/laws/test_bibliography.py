"""The bibliography: complete where it matters, readable, valid BibTeX."""

import re

import pytest

from evolve.errors import ConfigError
from evolve.laws.bibliography import SOURCES, bibtex, source, text


@pytest.mark.parametrize("key", SOURCES)
def test_entry(key):
    entry = SOURCES[key]
    assert str(entry.year)[:2] in ("18", "19", "20") and entry.journal
    assert all(re.fullmatch(r"[^,]+, .+|and others", author) for author in entry.authors)
    assert not entry.doi or re.fullmatch(r"10\.\d{4,}/\S+", entry.doi)
    # an article has a place; a book has a title
    assert (entry.volume and entry.page) or entry.title
    # the keys of configs and archives end in the year or say what was resolved in it
    assert re.search(r"\d{4}", key)


def test_keys_are_in_order():
    assert list(SOURCES) == sorted(SOURCES)


def test_text():
    assert text("peters-1964") == (
        "Peters, P. C. (1964). Gravitational Radiation and the Motion of Two Point Masses. "
        "Physical Review, 136, B1224. doi:10.1103/PhysRev.136.B1224"
    )


def test_bibtex_of_an_article_and_of_a_book():
    article = bibtex("iau-2015")
    assert article.startswith("@article{iau-2015,\n") and article.endswith("}")
    assert "and others}" in article and "volume = {152}" in article
    book = bibtex("kippenhahn-weigert-1990")
    assert book.startswith("@book{") and "publisher = {Springer}" in book and "journal" not in book


@pytest.mark.parametrize("key", SOURCES)
def test_braces_balance(key):
    depth = 0
    for letter in bibtex(key):
        depth += {"{": 1, "}": -1}.get(letter, 0)
        assert depth >= 0
    assert depth == 0


def test_unknown_key():
    with pytest.raises(ConfigError, match="newton-1687"):
        source("newton-1687")

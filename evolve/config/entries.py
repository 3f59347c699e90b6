"""One key of a config against its entry in the schema: the value, or what is wrong with it."""

from math import inf

from evolve.config.dimensions import allowed_units, dimension_of
from evolve.config.units import QuantityError, human, parse_quantity
from evolve.config.words import kind_of, nearest


def read_entry(entry, written):
    """The value of one key in internal units.

    Parameters
    ----------
    entry : evolve.config.schema.Entry
    written
        As it stands in the config.

    Returns
    -------
    float, int, bool or str

    Raises
    ------
    QuantityError
        With a reason that says what is allowed.
    """
    if entry.kind != "value":
        return _of_kind(entry, written)
    word = str(written).lower() if isinstance(written, bool) else written
    if isinstance(word, str) and word in entry.words:
        return word
    if entry.dimension is None:
        raise QuantityError(written, _unknown_word(entry, written))
    if entry.words and isinstance(written, str) and written.strip()[:1].isalpha():
        raise QuantityError(written, _unknown_word(entry, written))
    try:
        number = parse_quantity(written, entry.dimension)
    except QuantityError as error:
        words = f"; or one of {quoted(entry.words)}" if entry.words else ""
        raise QuantityError(written, error.reason + words) from None
    return in_range(entry, written, number)


def in_range(entry, written, number):
    """`number` itself, if it lies in the entry's range.

    Raises
    ------
    QuantityError
    """
    low = number <= entry.low if entry.open_low else number < entry.low
    high = number >= entry.high if entry.open_high else number > entry.high
    if low or high:
        raise QuantityError(written, f"out of range; allowed: {range_text(entry)}")
    return number


def _of_kind(entry, written):
    if entry.kind == "flag":
        if isinstance(written, bool):
            return written
        raise QuantityError(written, f"{kind_of(written)} is wrong here; allowed: true or false")
    if entry.kind == "whole":
        whole = isinstance(written, (int, float)) and not isinstance(written, bool)
        if whole and written == written // 1 and abs(written) < inf:
            return in_range(entry, written, int(written))
        raise QuantityError(written, f"not a whole number; allowed: {range_text(entry)}")
    if isinstance(written, str) and (written or entry.kind == "text"):
        return written
    what = "the path of a table" if entry.kind == "table" else "a text"
    raise QuantityError(written, f"{kind_of(written)} is wrong here; allowed: {what}")


def _unknown_word(entry, written):
    near = nearest(written, entry.words) if isinstance(written, str) else None
    hint = f'; did you mean "{near}"?' if near else ""
    wrong = "unknown" if isinstance(written, str) else f"{kind_of(written)} is wrong here"
    return f"{wrong}; {allowed(entry)}{hint}"


def allowed(entry):
    """What may be written for an entry, as half a sentence of a message."""
    if entry.kind == "flag":
        return "allowed: true or false"
    if entry.kind == "table":
        return "allowed: the path of a table"
    if entry.kind == "text":
        return "allowed: a text"
    if entry.dimension is None:
        return f"allowed: {quoted(entry.words)}"
    extent = range_text(entry)
    numbers = allowed_units(entry.dimension) + (f"; {extent}" if extent else "")
    return f"{numbers}; or {quoted(entry.words)}" if entry.words else numbers


def range_text(entry):
    """The range of a number for people: "above 0 Msun up to 1.44 Msun"."""
    parts = []
    if entry.low > -inf:
        parts.append(f"{'above' if entry.open_low else 'from'} {_bound(entry.low, entry)}")
    if entry.high < inf:
        parts.append(f"{'below' if entry.open_high else 'up to'} {_bound(entry.high, entry)}")
    return " and ".join(parts) if entry.open_high else " ".join(parts)


def _bound(number, entry):
    return human(number, dimension_of(entry.dimension))


def quoted(words):
    """Words as a message lists them."""
    return ", ".join(f'"{word}"' for word in words)


__all__ = ["allowed", "in_range", "quoted", "range_text", "read_entry"]

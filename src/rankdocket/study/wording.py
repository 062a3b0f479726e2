"""How a fault shows what was found: literals with invisible characters visible, rows counted, names suggested."""

import unicodedata
from collections.abc import Iterable, Sequence
from difflib import get_close_matches
from typing import Final

SHOWN_LENGTH: Final = 60
"""Characters of a literal that a message repeats before it breaks off."""

FIRST_PLACES: Final = 5
"""Places that a message lists before it says how many there are."""

MOST_LISTED: Final = 20
"""Names or labels that a message lists before it says how many there are."""


def shown(text: str) -> str:
    """Return ``text`` in quotes, shortened, with every character that cannot be seen as ``<U+00A0>``."""
    cut = text[:SHOWN_LENGTH] + ("…" if len(text) > SHOWN_LENGTH else "")
    return '"' + "".join(c if c.isprintable() else f"<U+{ord(c):04X}>" for c in cut) + '"'


def nearest(word: str, words: Iterable[str]) -> str | None:
    """Return the entry of ``words`` that is most like ``word``, or ``None`` when none is like it."""
    folded = {entry.casefold(): entry for entry in words}
    found = get_close_matches(word.casefold(), list(folded), n=1)
    return folded[found[0]] if found else None


def suggestion(word: str, words: Sequence[str], name: str) -> str:
    """Return "nearest: …." or, when nothing is near, the list introduced by ``name``."""
    near = nearest(word, words)
    if near is not None:
        return f"nearest: {near}."
    if not words:
        return ""
    more = f" and {len(words) - MOST_LISTED} more" if len(words) > MOST_LISTED else ""
    return f"{name}: {', '.join(words[:MOST_LISTED])}{more}."


def counted(number: int, thing: str) -> str:
    """Return "1 row" or "2 rows"."""
    return f"{number} {thing}" if number == 1 else f"{number} {thing}s"


def first_places(thing: str, places: Sequence[int]) -> str:
    """Return "1 field: 18", "2 fields: 18, 41" or "212 fields, the first five: 2, 3, 4, 5, 6"."""
    listed = ", ".join(str(place) for place in places[:FIRST_PLACES])
    more = "" if len(places) <= FIRST_PLACES else ", the first five"
    return f"{counted(len(places), thing)}{more}: {listed}"


def first_rows(rows: Sequence[int]) -> str:
    """Return the rows of a data file by :func:`first_places`."""
    return first_places("row", rows)


def composed(text: str) -> str:
    """Return ``text`` without blanks around it, in Unicode normal form C: the form in which names are matched."""
    return unicodedata.normalize("NFC", text).strip()


def looks_alike(one: str, other: str) -> str | None:
    """Return the code points in which two names of one look differ, or ``None`` when they do not look alike."""
    if one == other or unicodedata.normalize("NFKC", one) != unicodedata.normalize("NFKC", other):
        return None
    pairs = [(a, b) for a, b in zip(one, other, strict=False) if a != b]
    if not pairs:
        return None
    a, b = pairs[0]
    return f"U+{ord(a):04X} against U+{ord(b):04X}"

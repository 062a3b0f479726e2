"""How a fault shows what was found: literals with invisible characters visible, rows counted, names suggested."""

import unicodedata
from collections.abc import Iterable, Sequence
from difflib import get_close_matches
from typing import Final

SHOWN_LENGTH: Final = 60
"""Characters of a literal that a message repeats before it breaks off."""

FIRST_PLACES: Final = 5
"""Places that a message lists before it says how many there are."""


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
    """Return "nearest: …." or, when nothing is near, the whole list introduced by ``name``."""
    near = nearest(word, words)
    if near is not None:
        return f"nearest: {near}."
    return f"{name}: {', '.join(words)}." if words else ""


def first_rows(rows: Sequence[int]) -> str:
    """Return "1 row: 18", "2 rows: 18, 41" or "212 rows, the first five: 2, 3, 4, 5, 6"."""
    listed = ", ".join(str(row) for row in rows[:FIRST_PLACES])
    if len(rows) == 1:
        return f"1 row: {listed}"
    if len(rows) <= FIRST_PLACES:
        return f"{len(rows)} rows: {listed}"
    return f"{len(rows)} rows, the first five: {listed}"


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

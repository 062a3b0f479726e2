"""How wide the columns of a table are, from the text that stands in them.

Shares given by the writer are wishes; no column may become so narrow that a word or a number sticks out of it.
"""

import re
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Final

from rankdocket.document.model import Column, Emphasis, Number, Prose, TableBlock
from rankdocket.render.fonts import MONO_TEXT, SANS_STRONG, SANS_TEXT, Face, width
from rankdocket.render.text import prose_text

_LINE_POINTS: Final = 430.0
_WIDE_LINE_POINTS: Final = 700.0
"""Length of a line of the upright and of the wide page in points, a little less than the style sheet gives."""

_NORMAL: Final = ("normal", 8.6)
_DENSE: Final = ("dense", 7.6)
_TIGHT: Final = ("tight", 6.8)
"""Class of the style sheet and its type size in points."""

_GAP: Final = 1.1
"""Em of free space a column keeps beside its text."""

_LONGEST_WORD: Final = 16.0
_SHORT_CELL: Final = 8.6
"""Em up to which a cell should stay on one line: an interval, the name of a coefficient."""

_LONGEST_CELL: Final = 34.0
_LEAST_TABLE: Final = 30.0
_LONGEST_CODE: Final = 10.0
"""Em of a literal's part that stay together; a longer one (a digest) may be broken anywhere."""

_CODE_SIZE: Final = 0.8
"""Size of literals beside that of the text around them, as in the style sheet."""

_CODE_BREAKS: Final = re.compile(r"(?<=[ /-])")

_BREAKS: Final = re.compile(r"(?<=[ \n/–-])")
_BEFORE_MARK: Final = re.compile(r"[0-9]\.[0-9]")


@dataclass(frozen=True, slots=True)
class Setting:
    """How a table is set.

    Attributes
    ----------
    size
        Class of the style sheet: ``normal``, ``dense`` or ``tight``.
    total
        Width of the table in em of that size; never more than the line.
    shares
        Width of each column in percent of the table.
    tails
        For each column the space in em that the longest part after a decimal mark takes, 0 where not aligned.
    """

    size: str
    total: float
    shares: tuple[float, ...]
    tails: tuple[float, ...]


def set_columns(table: TableBlock) -> Setting:
    """Choose type size, table width and column widths so that every word and number has room."""
    rows = table.rows + table.foot
    points = _WIDE_LINE_POINTS if table.landscape else _LINE_POINTS
    tails = tuple(_tail_of(column, [row[i] for row in rows]) for i, column in enumerate(table.columns))
    cells = [[row[i] for row in rows] for i in range(len(table.columns))]
    least = [_least(column, texts) for column, texts in zip(table.columns, cells, strict=True)]
    whole = [max(low, _unbroken(texts)) for low, texts in zip(least, cells, strict=True)]
    natural = [
        max(low, _natural(column, texts)) for low, column, texts in zip(whole, table.columns, cells, strict=True)
    ]
    wishes = ((_NORMAL, whole), (_DENSE, whole), (_NORMAL, least), (_DENSE, least), (_TIGHT, least))
    (size, type_size), floor = next((wish for wish in wishes if sum(wish[1]) <= points / wish[0][1]), (_TIGHT, least))
    room = points / type_size
    total = min(room, max(sum(natural), _LEAST_TABLE))
    widths = _share_out(floor, natural, [column.share for column in table.columns], total)
    return Setting(size, total, tuple(part / sum(widths) * 100 for part in widths), tails)


def tail(cell: Prose) -> float | None:
    """Return how far a cell runs beyond its decimal mark in em, ``None`` where it has no digit to align."""
    text = prose_text(cell)
    found = _BEFORE_MARK.search(text)
    if found is not None:
        return width(text[found.start() + 1 :], SANS_TEXT)
    return 0.0 if text[-1:].isdecimal() else None


def stays_whole(cell: Prose) -> bool:
    """Return whether a cell is so short that it should not be broken where there is any choice."""
    return width(prose_text(cell), SANS_TEXT) <= _SHORT_CELL


def _tail_of(column: Column, cells: Sequence[Prose]) -> float:
    if column.align != "decimal":
        return 0.0
    return max((found for found in map(tail, cells) if found is not None), default=0.0)


def _least(column: Column, cells: Iterable[Prose]) -> float:
    longest = max((_word(cell, SANS_TEXT) for cell in cells), default=0.0)
    return max(longest, _word(column.head, SANS_STRONG)) + _GAP


def _unbroken(cells: Iterable[Prose]) -> float:
    return max((width(prose_text(cell), SANS_TEXT) for cell in cells if stays_whole(cell)), default=0.0) + _GAP


def _natural(column: Column, cells: Iterable[Prose]) -> float:
    longest = max((width(prose_text(cell), SANS_TEXT) for cell in cells), default=0.0)
    return min(max(longest, width(prose_text(column.head), SANS_STRONG)), _LONGEST_CELL) + _GAP


def _word(prose: Prose, face: Face) -> float:
    """Return the width of the longest run of a prose that must stay on one line."""
    longest = run = 0.0
    for piece in prose.pieces:
        if isinstance(piece, Number):
            parts: Sequence[str] = (piece.text,)
        elif isinstance(piece, Emphasis) and piece.kind == "code":
            code = max((width(part, MONO_TEXT) * _CODE_SIZE for part in _CODE_BREAKS.split(piece.text)), default=0.0)
            longest = max(longest, min(code, _LONGEST_CODE))
            parts = ()
        else:
            parts = _BREAKS.split(piece if isinstance(piece, str) else piece.text)
        for part in parts:
            run += width(part, face)
            longest = max(longest, min(run - (width(" ", face) if part.endswith(" ") else 0.0), _LONGEST_WORD))
            if part[-1:] in {" ", "\n", "/", "–", "-"}:
                run = 0.0
    return longest


def _share_out(least: Sequence[float], natural: Sequence[float], shares: Sequence[int], total: float) -> list[float]:
    """Give each column its least, then share the rest by wish until its natural width, then evenly."""
    widths = list(least)
    while (rest := total - sum(widths)) > 1e-9:
        wishes = [
            share * (whole - now) if whole - now > 1e-9 else 0.0
            for share, whole, now in zip(shares, natural, widths, strict=True)
        ]
        if not any(wishes):
            return [now + rest / len(widths) for now in widths]
        scale = rest / sum(wishes)
        widths = [
            min(whole, now + wish * scale) if wish else now
            for whole, now, wish in zip(natural, widths, wishes, strict=True)
        ]
    return widths

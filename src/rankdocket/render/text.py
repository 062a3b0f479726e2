"""Parts of a report as plain text, and a table as a CSV file."""

import re
from collections.abc import Iterator, Sequence
from typing import Final, assert_never

from rankdocket.document.model import (
    Block,
    CaveatBlock,
    FieldList,
    FigureBlock,
    Items,
    Number,
    Paragraph,
    Prose,
    Section,
    SignatureBlock,
    TableBlock,
    Verbatim,
)
from rankdocket.render import words

_MINUS: Final = "\u2212"
_GAP: Final = "   "
_PLAIN_NUMBER: Final = re.compile(r"[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?")
_FORMULA_SIGNS: Final = frozenset("=+-@\t\r\n＝＋－＠")
_NEEDS_QUOTES: Final = re.compile(r'[",\r\n]')


def prose_text(prose: Prose) -> str:
    """Return the characters of a prose."""
    return "".join(piece if isinstance(piece, str) else piece.text for piece in prose.pieces)


def section_text(section: Section) -> str:
    """Return a section as plain text: heading, blocks, sub-sections, a blank line between them."""
    heading = " ".join(part for part in (section.number, prose_text(section.title)) if part)
    parts = [heading, *(block_text(block) for block in section.blocks), *map(section_text, section.sections)]
    return "\n\n".join(part for part in parts if part)


def block_text(block: Block) -> str:
    """Return one block as plain text."""
    match block:
        case Paragraph():
            return prose_text(block.prose)
        case Items():
            marks = [f"{i}. " if block.numbered else "– " for i in range(1, len(block.items) + 1)]
            return "\n".join(mark + prose_text(item) for mark, item in zip(marks, block.items, strict=True))
        case TableBlock():
            return table_text(block)
        case FieldList():
            caption = [prose_text(block.caption)] if block.caption else []
            return "\n".join([*caption, *(f"{label}: {prose_text(content)}" for label, content in block.rows)])
        case FigureBlock():
            return f"{words.FIGURE} {block.number}. {prose_text(block.caption)}\n{block.alternative}"
        case CaveatBlock():
            return f"{words.CAVEAT} {block.number}. {prose_text(block.prose)}"
        case Verbatim():
            above = [prose_text(block.caption)] if block.caption else []
            return "\n".join([*above, block.text.rstrip("\n")])
        case SignatureBlock():
            return "\n".join(
                f"{line.act}: {', '.join(part for part in (line.name, line.role, line.note) if part)}".rstrip()
                for line in block.lines
            )
        case _:
            assert_never(block)


def table_text(table: TableBlock) -> str:
    """Return a table as plain text: caption, columns set by blanks, notes."""
    heads = [_one_line(column.head) for column in table.columns]
    rows = [[_one_line(cell) for cell in row] for row in table.rows + table.foot]
    widths = [max(len(line[i]) for line in (heads, *rows)) for i in range(len(heads))]
    lines = [
        _GAP.join(
            cell.ljust(width) if column.align == "left" else cell.rjust(width)
            for cell, width, column in zip(line, widths, table.columns, strict=True)
        ).rstrip()
        for line in (heads, *rows)
    ]
    caption = f"{words.TABLE} {table.number}. {prose_text(table.caption)}"
    return "\n".join([caption, "", *lines, *([""] if table.notes else []), *map(prose_text, table.notes)])


def csv_bytes(table: TableBlock) -> bytes:
    """Return a table as CSV (RFC 4180 quoting, UTF-8, line feeds): a head line of column names, then the rows.

    A cell that is one number is written by its exact value, any other by its text; a text that a spreadsheet
    would take for a formula begins with an apostrophe.
    """
    lines = [[defused(column.name) for column in table.columns]]
    lines += [[_csv_cell(cell) for cell in row] for row in table.rows + table.foot]
    return "".join(_csv_line(line) for line in lines).encode("utf-8")


def _csv_cell(cell: Prose) -> str:
    match cell.pieces:
        case (Number() as number,):
            return number.exact
        case _:
            return defused(prose_text(cell))


def defused(text: str) -> str:
    """Return text as a spreadsheet shows it without running it: a number with a plain minus, else an apostrophe if needed.

    A true minus inside words stays: no spreadsheet takes it for a formula.
    """
    number = text.replace(_MINUS, "-")
    if _PLAIN_NUMBER.fullmatch(number):
        return number
    first = text.lstrip(" \u00a0\u2007\u202f")[:1]
    return f"'{text}" if first and first in _FORMULA_SIGNS else text


def _csv_line(cells: Sequence[str]) -> str:
    return ",".join(_quoted(cells)) + "\n"


def _quoted(cells: Sequence[str]) -> Iterator[str]:
    for cell in cells:
        yield '"' + cell.replace('"', '""') + '"' if _NEEDS_QUOTES.search(cell) else cell


def _one_line(prose: Prose) -> str:
    return " ".join(prose_text(prose).split())

"""Cells that are no number under the declared marks: what they could be instead, and what to write in the spec."""

from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

from rankdocket.errors import Fault, Place
from rankdocket.study.cells import ALL_FORMATS, NumberFormat, is_number_like, plain_digits, read_number
from rankdocket.study.messages import Message, fault
from rankdocket.study.table import Table
from rankdocket.study.wording import FIRST_PLACES, first_rows, shown

LIMIT_MARKS: Final = ("<", ">", "\u2264", "\u2265")
"""Signs before a value that was too small or too large to be measured."""


@dataclass(frozen=True, slots=True)
class Cell:
    """A cell that is not missing: the row it stands in, and its text."""

    row: int
    text: str


@dataclass(frozen=True, slots=True)
class Column:
    """The cells of one column that are not missing."""

    table: Table
    name: str
    cells: tuple[Cell, ...]

    @property
    def form(self) -> NumberFormat:
        """How the table's spec says numbers are written."""
        return NumberFormat(self.table.spec.decimal_mark, self.table.spec.thousands_mark)

    def place(self, cell: Cell) -> Place:
        """Return the line of the file on which a cell's row begins."""
        return Place(self.table.source.path, cell.row)

    def field(self, cell: Cell) -> str:
        """Return row and column as a message names them."""
        return f"row {cell.row}, column {self.name}"


def unreadable_faults(column: Column, numbers: Mapping[str, Decimal | None]) -> list[Fault]:
    """Return at most one fault each for numbers written otherwise, values beyond a limit, and other texts.

    Parameters
    ----------
    column
        The column.
    numbers
        Text of each cell → the number it is as declared, or ``None``.
    """
    unread = [cell for cell in column.cells if numbers[cell.text] is None]
    number_like = [cell for cell in unread if is_number_like(cell.text)]
    others = [cell for cell in unread if not is_number_like(cell.text)]
    limits = [cell for cell in others if cell.text.strip().startswith(LIMIT_MARKS)]
    texts = [cell for cell in others if not cell.text.strip().startswith(LIMIT_MARKS)]
    faults: list[Fault] = []
    if number_like:
        faults.append(_written_otherwise(column, number_like, numbers))
    # Kept apart, so that nobody is advised to call a value beyond a limit missing.
    faults.extend(_no_number(column, cells) for cells in (limits, texts) if cells)
    return faults


def _written_otherwise(column: Column, unread: Sequence[Cell], numbers: Mapping[str, Decimal | None]) -> Fault:
    texts = sorted({cell.text for cell in column.cells if is_number_like(cell.text)})
    forms = [form for form in ALL_FORMATS if form != column.form and _explains(form, column.form, texts)]
    readings = {text: _readings(text, forms, numbers[text]) for text in texts}
    ambiguous = [cell for cell in column.cells if len(readings.get(cell.text, ())) > 1]
    if ambiguous:
        return _ambiguous(column, ambiguous, forms, readings[ambiguous[0].text])
    first = unread[0]
    what = f"found {shown(first.text)}. With {column.form.spec_lines()} this is not a number; {_rows(unread)}."
    if forms:
        remedy = f"If the file writes its numbers so, write: {forms[0].spec_lines()}"
    else:
        line = codes_line(column.table, list(dict.fromkeys(cell.text.strip() for cell in unread)))
        remedy = f"Mend the file at its source; or, if these mean missing, write: {line}"
    return fault(column.place(first), column.field(first), Message.NUMBER_NOT_READABLE, what, remedy)


def _ambiguous(
    column: Column, cells: Sequence[Cell], forms: Sequence[NumberFormat], readings: Sequence[Decimal]
) -> Fault:
    first = cells[0]
    could_be = " or ".join(plain_digits(number) for number in readings)
    what = f"{shown(first.text)} could be {could_be}; {_rows(cells)}."
    lines = "; or ".join(form.spec_lines() for form in forms)
    remedy = f"State how the file writes its numbers: {lines}."
    return fault(column.place(first), column.field(first), Message.NUMBER_AMBIGUOUS, what, remedy)


def _explains(form: NumberFormat, declared: NumberFormat, texts: Sequence[str]) -> bool:
    """Say whether a way of writing makes every number of the column readable, with no mark that never occurs."""
    if form.thousands_mark is not None and not any(form.thousands_mark in text.strip() for text in texts):
        return False
    kept = declared.decimal_mark in (form.decimal_mark, form.thousands_mark)
    if not kept and not any(form.decimal_mark in text for text in texts):
        return False
    return all(read_number(text, form) is not None for text in texts)


def _readings(text: str, forms: Sequence[NumberFormat], declared: Decimal | None) -> tuple[Decimal, ...]:
    """Return the different numbers that a text can be, smallest first."""
    found = {number for form in forms if (number := read_number(text, form)) is not None}
    return tuple(sorted(found if declared is None else found | {declared}))


def _no_number(column: Column, cells: Sequence[Cell]) -> Fault:
    first = cells[0]
    text = first.text.strip()
    counts = Counter(cell.text.strip() for cell in cells)
    listed = ", ".join(f"{shown(found)} in {count}" for found, count in counts.most_common(FIRST_PLACES))
    what = f"found {shown(first.text)}. This is not a number; {_rows(cells)}. Rows by text: {listed}."
    if text.startswith(LIMIT_MARKS):
        remedy = "A value beyond a limit of measurement is no number; such columns cannot be ranked here."
    elif text.lstrip("+-\u2212").casefold() in ("inf", "infinity", "∞", "nan"):
        line = codes_line(column.table, list(counts))
        remedy = f"Infinity is no measurement. Mend the file at its source; or, if these mean missing, write: {line}"
    else:
        remedy = f"If these mean missing write: {codes_line(column.table, list(counts))}"
    return fault(column.place(first), column.field(first), Message.NUMBER_NOT_READABLE, what, remedy)


def codes_line(table: Table, texts: Sequence[str]) -> str:
    """Return the line of ``missing_codes`` with the first of the texts added."""
    codes = table.spec.missing_codes
    added = list(texts[:FIRST_PLACES])
    if all(meaning == "missing" for meaning in codes.values()):
        return f"missing_codes: [{', '.join(_quoted(code) for code in (*codes, *added))}]"
    return f"missing_codes: {{…, {', '.join(f'{_quoted(code)}: its meaning' for code in added)}}}"


def _quoted(code: str) -> str:
    escaped = code.replace("\\", "\\\\").replace('"', '\\"')
    return '"' + "".join(c if c.isprintable() else f"\\U{ord(c):08X}" for c in escaped) + '"'


def _rows(cells: Sequence[Cell]) -> str:
    return first_rows([cell.row for cell in cells])

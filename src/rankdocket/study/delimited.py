"""Bytes of a delimited text file to its records, each with the line on which it begins."""

import csv
import itertools
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final

from rankdocket.errors import Fault, InputError, Place
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import DataSpec
from rankdocket.study.wording import FIRST_PLACES, counted, first_places, first_rows, shown

_CODECS: Final = {
    "utf-8": "utf-8",
    "windows-1252": "cp1252",
    "latin-1": "latin-1",
    "iso-8859-1": "latin-1",
    "utf-16": "utf-16",
}
_UTF8_MARK: Final = b"\xef\xbb\xbf"
_UTF16_MARKS: Final = (b"\xff\xfe", b"\xfe\xff")
_CONTROL: Final = frozenset(chr(code) for code in (*range(0x20), *range(0x7F, 0xA0)) if chr(code) not in "\t\n")


@dataclass(frozen=True, slots=True)
class Record:
    """The fields of one row, and the line of the file on which it begins, counted from 1."""

    line: int
    fields: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Records:
    """A file taken apart: its rows of names, units (``None`` when the spec names no such row) and data."""

    names: Record
    units: Record | None
    data: tuple[Record, ...]


def lines_of(data: bytes, spec: DataSpec) -> list[str]:
    """Return the lines of the file, without their ends.

    Raises
    ------
    InputError
        If the bytes are not text of the declared encoding.
    """
    text = _decoded(data, spec).replace("\r\n", "\n").replace("\r", "\n")
    lines = text.removeprefix("\ufeff").split("\n")
    if lines[-1] == "":
        lines.pop()
    odd = [(number, line) for number, line in enumerate(lines, start=1) if not _CONTROL.isdisjoint(line)]
    if odd:
        number, line = odd[0]
        character = next(c for c in line if c in _CONTROL)
        what = f"the character U+{ord(character):04X} is no text; {first_rows([n for n, _ in odd])}."
        remedy = _encoding_remedy(data, spec) or "Delete it in the file, or write another text_encoding."
        raise InputError((fault(Place(spec.file, number), f"data.{spec.name}", Message.ENCODING, what, remedy),))
    return lines


def records_of(lines: list[str], spec: DataSpec) -> Records:
    """Take the lines apart as the spec says; blank rows at the end are dropped.

    Raises
    ------
    InputError
        If quotation marks do not match, or a row that the spec names is not there.
    """
    names: Record | None = None
    units: Record | None = None
    data: list[Record] = []
    for record in _walk(lines, spec):
        if record.line == spec.column_names_in_row:
            names = record
        elif record.line == spec.units_in_row:
            units = record
        else:
            data.append(record)
    # A quoted empty cell is something that was sent; a line of blanks and separators is not.
    while data and not lines[data[-1].line - 1].replace(spec.separator, "").strip():
        data.pop()
    faults = _absent_rows(len(lines), spec, found=(names is not None, units is not None, bool(data)))
    if faults or names is None:
        raise InputError(tuple(faults))
    return Records(names, units, tuple(data))


def _walk(lines: list[str], spec: DataSpec) -> Iterator[Record]:
    """Yield the rows that are names, units or data; all other lines are passed over unread."""
    heads = (spec.column_names_in_row, spec.units_in_row)
    feed = iter(lines)
    line = 0
    for first in feed:
        line += 1
        begins = line
        is_head = begins in heads
        if not is_head and begins < spec.first_data_row:
            continue
        if not is_head and spec.last_data_row is not None and begins > spec.last_data_row:
            return
        if not is_head and spec.comment_mark is not None and first.startswith(spec.comment_mark):
            continue
        # One reader a row: only so is it known whether a line begins a row or stands inside quotation marks.
        rest = (part + "\n" for part in itertools.chain((first,), feed))
        reader = csv.reader(rest, delimiter=spec.separator, quotechar='"', doublequote=True, strict=True)
        try:
            fields = next(reader)
        except csv.Error as error:
            raise InputError((_quotation_fault(error, begins, spec),)) from None
        line += reader.line_num - 1
        yield Record(begins, tuple(fields))


def _quotation_fault(error: csv.Error, line: int, spec: DataSpec) -> Fault:
    if "limit" in str(error):
        what = f"a field of this row is longer than {csv.field_size_limit()} characters."
        remedy = "Look for a missing quotation mark."
        return fault(Place(spec.file, line), f"row {line}", Message.TOO_LARGE, what, remedy)
    what = "quotation marks are opened and not closed before the next separator."
    remedy = 'Close them; a quotation mark inside a quoted field is written twice: "".'
    return fault(Place(spec.file, line), f"row {line}", Message.QUOTATION, what, remedy)


def _absent_rows(count: int, spec: DataSpec, found: tuple[bool, bool, bool]) -> list[Fault]:
    """Return a fault for each row that the spec names and the file does not have."""
    has_names, has_units, has_data = found
    place = Place(spec.file)
    length = f"the file has {counted(count, 'line')}"
    upto = f"and a row from 1 to {count}."
    field = f"data.{spec.name}"
    faults: list[Fault] = []
    if not has_names:
        what = f"no column names begin in row {spec.column_names_in_row}; {length}."
        faults.append(fault(place, field, Message.ROW_NOT_THERE, what, f"Write column_names_in_row: {upto}"))
    if spec.units_in_row is not None and not has_units:
        what = f"no units begin in row {spec.units_in_row}; {length}."
        remedy = f"Write units_in_row: {upto} Or leave it out."
        faults.append(fault(place, field, Message.ROW_NOT_THERE, what, remedy))
    if has_names and not has_data:
        what = f"no data stand from row {spec.first_data_row} on; {length}."
        below = max(spec.column_names_in_row, spec.units_in_row or 0) + 1
        remedy = "Write column_names_in_row: and an earlier row."
        if below <= count:
            remedy = f"Write first_data_row: and a row from {below} to {count}."
        faults.append(fault(place, field, Message.ROW_NOT_THERE, what, remedy))
    if spec.last_data_row is not None and spec.last_data_row > count:
        what = f"last_data_row is {spec.last_data_row}; {length}."
        remedy = f"Write last_data_row: {count}, or leave it out."
        faults.append(fault(place, field, Message.ROW_NOT_THERE, what, remedy))
    return faults


def _decoded(data: bytes, spec: DataSpec) -> str:
    encoding = spec.text_encoding
    place, field = Place(spec.file), f"data.{spec.name}"
    has_16 = data.startswith(_UTF16_MARKS)
    if encoding == "utf-16" and not has_16:
        what = "the file does not begin with the mark by which utf-16 is known."
        remedy = _encoding_remedy(data, spec) or "Save the file as utf-8."
        raise InputError((fault(place, field, Message.ENCODING, what, remedy),))
    if encoding != "utf-16" and (has_16 or (encoding != "utf-8" and data.startswith(_UTF8_MARK))):
        other = "utf-16" if has_16 else "utf-8"
        what = f"the file begins with the mark of {other}, and text_encoding is {encoding}."
        raise InputError((fault(place, field, Message.ENCODING, what, f"Write text_encoding: {other}"),))
    try:
        return data.decode(_CODECS[encoding])
    except UnicodeDecodeError as error:
        before = data[: error.start].decode(_CODECS[encoding], "replace")
        line = before.replace("\r\n", "\n").replace("\r", "\n").count("\n") + 1
        found = " ".join(f"{byte:02X}" for byte in data[error.start : error.start + FIRST_PLACES])
        what = f"the bytes {found} are no text of {encoding}; near {shown(before[-12:])}."
        odd = _undecodable(data, encoding)
        if odd:
            what = f"{what[:-1]}; {first_places('line', odd)}."
        remedy = _encoding_remedy(data, spec) or "Write text_encoding as the file was saved."
        raise InputError((fault(Place(spec.file, line), field, Message.ENCODING, what, remedy),)) from None


def _undecodable(data: bytes, encoding: str) -> list[int]:
    """Return the lines that are no text of the encoding; none where a line end is more than one byte."""
    odd: list[int] = []
    lines = [] if encoding == "utf-16" else data.replace(b"\r\n", b"\n").replace(b"\r", b"\n").split(b"\n")
    for number, line in enumerate(lines, start=1):
        try:
            line.decode(_CODECS[encoding])
        except UnicodeDecodeError:
            odd.append(number)
    return odd


def _encoding_remedy(data: bytes, spec: DataSpec) -> str:
    """Return the line that would make the bytes readable, or an empty text."""
    for other in ("utf-8", "windows-1252"):
        if other == spec.text_encoding:
            continue
        try:
            text = data.decode(_CODECS[other])
        except UnicodeDecodeError:
            continue
        if _CONTROL.isdisjoint(text.replace("\r", "\n")):
            return f"If the file was saved so write: text_encoding: {other}"
    return ""

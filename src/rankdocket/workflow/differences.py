"""Where two files that should be equal differ, named as a person would name it: a key, a cell, a printed number.

Two questions can be asked: what differs at all, and what differs for somebody who reads the file and does not look
at its markup.
"""

import csv
import io
import json
import re
from collections.abc import Callable, Iterator
from itertools import zip_longest
from typing import Any, Final

from pypdf import PdfReader
from pypdf.errors import PyPdfError

from rankdocket.workflow.shown_text import markup_text

MOST_NAMED: Final = 200
"""So many differences of one file are named; the rest is counted."""

MALFORMED: Final = (LookupError, TypeError, AttributeError, ValueError, ArithmeticError, RecursionError)
"""What reading data of the wrong kinds can raise: a filed file may hold anything."""

_WORDS_BEFORE: Final = 40
_WORDS_SHOWN: Final = 80
_NUMBER_ELEMENT: Final = re.compile(r'data-key="([^"]+)"[^>]*>([^<]*)<')


def counted(number: int, noun: str) -> str:
    """Return "1 file" or "2 files"."""
    return f"{number} {noun}" if number == 1 else f"{number} {noun}s"


def name_differences(name: str, filed: bytes, made: bytes) -> tuple[str, ...]:
    """Return a sentence for each difference between a file as filed and as made again; empty when equal."""
    if filed == made:
        return ()
    found = _named(name, lambda: _differences(name, filed, made))
    if found:
        return found
    if name.endswith(".pdf"):
        return (f"{name}: the text of every page is the same, and something else in the file is not.",)
    return (f"{name}: the bytes differ and nothing in the content does.",)


def shown_differences(name: str, filed: bytes, made: bytes) -> tuple[str, ...]:
    """Return a sentence for each difference that a reader meets; empty when only markup, blanks or drawing differ."""
    return () if filed == made else _named(name, lambda: _shown(name, filed, made))


def short(value: object) -> str:
    """Return a value in quotation marks, cut where it is long."""
    if value is None:
        return "nothing"
    text = value if isinstance(value, str) else json.dumps(value, ensure_ascii=False)
    return f"“{text if len(text) <= 80 else text[:77] + '…'}”"


def _named(name: str, walk: Callable[[], Iterator[str]]) -> tuple[str, ...]:
    try:
        found = list(walk())
    except (*MALFORMED, csv.Error, PyPdfError) as error:
        return (f"{name}: cannot be read as what it should be ({error}).",)
    extra = len(found) - MOST_NAMED
    return (*found[:MOST_NAMED], *((f"{name}: and {extra} more.",) if extra > 0 else ()))


def _differences(name: str, filed: bytes, made: bytes) -> Iterator[str]:
    if name.endswith(".json"):
        yield from _json(name, json.loads(filed), json.loads(made))
    elif name.endswith(".csv"):
        yield from _csv(name, filed.decode("utf-8"), made.decode("utf-8"))
    elif name.endswith(".html"):
        theirs, ours = filed.decode("utf-8"), made.decode("utf-8")
        numbers = list(_numbers(name, theirs, ours))
        yield from numbers or _lines(name, theirs.splitlines(), ours.splitlines())
    elif name.endswith(".pdf"):
        yield from _lines(name, _pdf_lines(filed), _pdf_lines(made))
    else:
        yield from _lines(name, filed.decode("utf-8").splitlines(), made.decode("utf-8").splitlines())


def _shown(name: str, filed: bytes, made: bytes) -> Iterator[str]:
    if name.endswith(".pdf"):
        for number, (one, other) in enumerate(zip_longest(_pdf_pages(filed), _pdf_pages(made)), start=1):
            yield from _text(f"{name}, page {number}", one or "", other or "")
    elif name.endswith((".html", ".svg")):
        theirs, ours = filed.decode("utf-8"), made.decode("utf-8")
        yield from _numbers(name, theirs, ours)
        yield from _text(name, markup_text(theirs), markup_text(ours))
    elif name.endswith(".txt"):
        yield from _text(name, filed.decode("utf-8"), made.decode("utf-8"))
    else:
        yield from _differences(name, filed, made)


def _json(name: str, filed: Any, made: Any, address: str = "") -> Iterator[str]:
    if isinstance(filed, dict) and isinstance(made, dict):
        for key in sorted(filed.keys() | made.keys()):
            below = f"{address}/{key}" if address else key
            if key not in filed or key not in made:
                where = "recomputation" if key in filed else "edition"
                yield f"{name}: {below} is missing in the {where}."
            else:
                yield from _json(name, filed[key], made[key], below)
    elif isinstance(filed, list) and isinstance(made, list):
        if len(filed) != len(made):
            yield f"{name}: the list {address} is {len(filed)} long as filed, {len(made)} as recomputed."
        for position, (one, other) in enumerate(zip(filed, made, strict=False)):
            yield from _json(name, one, other, f"{address}/{position}" if address else str(position))
    elif filed != made:
        yield f"{name}: {address} is {short(filed)} as filed, {short(made)} as recomputed."


def _csv(name: str, filed: str, made: str) -> Iterator[str]:
    ours, theirs = list(csv.reader(io.StringIO(made))), list(csv.reader(io.StringIO(filed)))
    head = ours[0] if ours else []
    none: list[str] = []
    for line, (row, other) in enumerate(zip_longest(theirs, ours, fillvalue=none), start=1):
        for column, (cell, right) in enumerate(zip_longest(row, other, fillvalue="")):
            if cell != right:
                title = head[column] if column < len(head) else f"column {column + 1}"
                yield f"{name}: line {line}, {title} is {short(cell)} as filed, {short(right)} as recomputed."


def _numbers(name: str, filed: str, made: str) -> Iterator[str]:
    theirs, ours = _NUMBER_ELEMENT.findall(filed), _NUMBER_ELEMENT.findall(made)
    for one, other in zip_longest(theirs, ours):
        if one != other:
            yield (
                f"{name}: {(one or other)[0]} is printed as {short(one[1] if one else None)}, "
                f"recomputed {short(other[1] if other else None)}."
            )


def _lines(name: str, filed: list[str], made: list[str]) -> Iterator[str]:
    for number, (one, other) in enumerate(zip_longest(filed, made), start=1):
        if one != other:
            yield f"{name}: line {number} reads {short(one)} as filed, {short(other)} as made again."


def _text(name: str, filed: str, made: str) -> Iterator[str]:
    """Compare running text without its blanks, which markup and line breaks move; name the first place that differs."""
    theirs, ours = " ".join(filed.split()), " ".join(made.split())
    places = [[place for place, sign in enumerate(text) if sign != " "] for text in (theirs, ours)]
    signs = ["".join(text.split()) for text in (theirs, ours)]
    if signs[0] == signs[1]:
        return
    first = next(i for i, (one, other) in enumerate(zip_longest(*signs)) if one != other)
    told = []
    for text, place in zip((theirs, ours), places, strict=True):
        at = place[first] if first < len(place) else len(text)
        told.append(short(text[max(0, at - _WORDS_BEFORE) : at + _WORDS_SHOWN - _WORDS_BEFORE]))
    yield f"{name}: reads {told[0]} as filed, {told[1]} as made again."


def _pdf_pages(data: bytes) -> list[str]:
    return [page.extract_text() for page in PdfReader(io.BytesIO(data)).pages]


def _pdf_lines(data: bytes) -> list[str]:
    pages = enumerate(_pdf_pages(data), start=1)
    return [f"page {number}: {line}" for number, text in pages for line in text.splitlines()]

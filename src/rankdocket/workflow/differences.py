"""Where two files that should be equal differ, named as a person would name it: a key, a cell, a printed number."""

import csv
import io
import json
import re
from collections.abc import Iterator
from itertools import zip_longest
from typing import Any, Final

from pypdf import PdfReader

MOST_NAMED: Final = 200
"""So many differences of one file are named; the rest is counted."""

_NUMBER_ELEMENT: Final = re.compile(r'data-key="([^"]+)"[^>]*>([^<]*)<')


def name_differences(name: str, filed: bytes, made: bytes) -> tuple[str, ...]:
    """Return a sentence for each difference between a file as filed and as made again; empty when equal."""
    if filed == made:
        return ()
    try:
        found = list(_differences(name, filed, made))
    except (ValueError, UnicodeDecodeError, csv.Error) as error:
        return (f"{name}: cannot be read as what it should be ({error}).",)
    if not found:
        return (f"{name}: the bytes differ and nothing in the content does.",)
    extra = len(found) - MOST_NAMED
    return (*found[:MOST_NAMED], *((f"{name}: and {extra} more.",) if extra > 0 else ()))


def _differences(name: str, filed: bytes, made: bytes) -> Iterator[str]:
    if name.endswith(".json"):
        yield from _json(name, json.loads(filed), json.loads(made))
    elif name.endswith(".csv"):
        yield from _csv(name, filed.decode("utf-8"), made.decode("utf-8"))
    elif name.endswith(".html"):
        yield from _html(name, filed.decode("utf-8"), made.decode("utf-8"))
    elif name.endswith(".pdf"):
        yield from _lines(name, _pdf_text(filed), _pdf_text(made))
    else:
        yield from _lines(name, filed.decode("utf-8").splitlines(), made.decode("utf-8").splitlines())


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
            yield f"{name}: {address} has {len(filed)} entries filed, {len(made)} recomputed."
        for position, (one, other) in enumerate(zip(filed, made, strict=False)):
            yield from _json(name, one, other, f"{address}/{position}" if address else str(position))
    elif filed != made:
        yield f"{name}: {address} is {_short(filed)} as filed, {_short(made)} as recomputed."


def _csv(name: str, filed: str, made: str) -> Iterator[str]:
    ours, theirs = list(csv.reader(io.StringIO(made))), list(csv.reader(io.StringIO(filed)))
    head = ours[0] if ours else []
    none: list[str] = []
    for line, (row, other) in enumerate(zip_longest(theirs, ours, fillvalue=none), start=1):
        for column, (cell, right) in enumerate(zip_longest(row, other, fillvalue="")):
            if cell != right:
                title = head[column] if column < len(head) else f"column {column + 1}"
                yield f"{name}: line {line}, {title} is {_short(cell)} as filed, {_short(right)} as recomputed."


def shown_numbers(page: str) -> dict[str, set[str]]:
    """Return address → the texts by which a page prints the number that stands there."""
    found: dict[str, set[str]] = {}
    for key, text in _NUMBER_ELEMENT.findall(page):
        found.setdefault(key, set()).add(text)
    return found


def _html(name: str, filed: str, made: str) -> Iterator[str]:
    theirs, ours = _NUMBER_ELEMENT.findall(filed), _NUMBER_ELEMENT.findall(made)
    named = False
    for one, other in zip_longest(theirs, ours):
        if one != other:
            named = True
            yield (
                f"{name}: {(one or other)[0]} is printed as {_short(one[1] if one else None)}, "
                f"recomputed {_short(other[1] if other else None)}."
            )
    if not named:
        yield from _lines(name, filed.splitlines(), made.splitlines())


def _lines(name: str, filed: list[str], made: list[str]) -> Iterator[str]:
    for number, (one, other) in enumerate(zip_longest(filed, made), start=1):
        if one != other:
            yield f"{name}: line {number} reads {_short(one)} as filed, {_short(other)} as made again."


def _pdf_text(data: bytes) -> list[str]:
    return [
        f"page {number}: {line}"
        for number, page in enumerate(PdfReader(io.BytesIO(data)).pages, start=1)
        for line in page.extract_text().splitlines()
    ]


def _short(value: object) -> str:
    if value is None:
        return "nothing"
    text = value if isinstance(value, str) else json.dumps(value, ensure_ascii=False)
    return f"“{text if len(text) <= 80 else text[:77] + '…'}”"

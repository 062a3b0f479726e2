"""Which id each part of a page bears, and where its links lead."""

import re
from collections.abc import Iterator
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final

from rankdocket.document.model import (
    Block,
    CaveatBlock,
    Document,
    FieldList,
    FigureBlock,
    Paper,
    Section,
    TableBlock,
)
from rankdocket.errors import RenderError

REFERENCES_KEY: Final = "references"

_NOT_IN_ID: Final = re.compile(r"[^A-Za-z0-9_.-]+")


@dataclass(frozen=True, slots=True)
class Anchors:
    """The ids of one page.

    Attributes
    ----------
    targets
        What a link may name (a key, or an id in full) → the id it leads to, ``None`` where a key is borne twice.
    works
        Keys of the works in the list of references.
    """

    targets: MappingProxyType[str, str | None]
    works: frozenset[str]

    def of_link(self, target: str) -> str:
        """Return the id a link leads to.

        Raises
        ------
        RenderError
            If nothing, or more than one part, bears the key.
        """
        if target not in self.targets:
            raise RenderError(f"A link leads to {target!r}, and no part of the report bears that key.")
        found = self.targets[target]
        if found is None:
            raise RenderError(f"A link leads to {target!r}, and more than one part of the report bears that key.")
        return found

    def of_citation(self, key: str) -> str:
        """Return the id of a work in the list of references.

        Raises
        ------
        RenderError
            If the work is not listed.
        """
        if key not in self.works:
            raise RenderError(f"The work {key!r} is cited and is not among the references of the document.")
        return identifier("reference", key)


def identifier(kind: str, key: str) -> str:
    """Return the id of the part of a ``kind`` (section, table, figure, caveat, list, reference) with this key."""
    return f"{kind}-{_NOT_IN_ID.sub('_', key)}"


def find_anchors(document: Paper) -> Anchors:
    """Return the ids of a document's parts.

    Raises
    ------
    RenderError
        If two parts of one kind bear one key; a caveat may be printed again with the same number.
    """
    targets: dict[str, str | None] = {}
    numbers: dict[str, int] = {}
    for kind, key, number in _parts(document):
        name = identifier(kind, key)
        if name in targets:
            if number is not None and numbers.get(name) == number:
                continue
            raise RenderError(f"Two parts of the report share the id {name!r}.")
        if number is not None:
            numbers[name] = number
        targets[name] = name
        targets[key] = None if key in targets else name
    return Anchors(MappingProxyType(targets), frozenset(document.references))


def all_sections(document: Paper) -> Iterator[Section]:
    """Yield the summary and every section, each before its sub-sections."""
    if isinstance(document, Document):
        yield from _below(document.summary)
    for section in document.sections:
        yield from _below(section)


def all_blocks(document: Paper) -> Iterator[Block]:
    """Yield every block in print order."""
    if isinstance(document, Document):
        yield from document.control
    for section in all_sections(document):
        yield from section.blocks


def _below(section: Section) -> Iterator[Section]:
    yield section
    for part in section.sections:
        yield from _below(part)


def _parts(document: Paper) -> Iterator[tuple[str, str, int | None]]:
    for section in all_sections(document):
        yield "section", section.key, None
    for block in all_blocks(document):
        match block:
            case TableBlock():
                yield "table", block.key, None
            case FigureBlock():
                yield "figure", block.key, None
            case CaveatBlock():
                yield "caveat", block.key, block.number
            case FieldList(key=str() as key):
                yield "list", key, None
            case _:
                continue

"""What a document says that is no choice of words: numbers, quotations, outcomes, and where each of them stands."""

import re
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final, TypeAlias, assert_never

from rankdocket.document.model import (
    Block,
    CaveatBlock,
    Citation,
    Document,
    Emphasis,
    FieldList,
    FigureBlock,
    Items,
    Link,
    Number,
    Paragraph,
    Prose,
    Section,
    SignatureBlock,
    Supplied,
    TableBlock,
    Verbatim,
)
from rankdocket.document.prose import text_of
from rankdocket.vocabulary import CHECK_STATES, FINDINGS

Fact: TypeAlias = tuple[str, ...]

_SIDES: Final = ("at or below alpha", "above alpha")
_WAIVED: Final = ("not met (waived)", "doubtful (waived)")
_OUTCOMES: Final = sorted((*FINDINGS, *CHECK_STATES, *_WAIVED, "no finding", *_SIDES), key=len, reverse=True)
_OUTCOME: Final = re.compile(rf"\b(?:{'|'.join(map(re.escape, _OUTCOMES))})(?!\w)")
"""Findings, outcomes of checks and sides of alpha, wherever the program's own words hold them."""


@dataclass(frozen=True, slots=True)
class Run:
    """A run of text and its place in words: "section methods", "list digests, Seed of drawn orderings"."""

    place: str
    prose: Prose


def runs_of(document: Document) -> Iterator[Run]:
    """Yield every run of text outside the rows of tables."""
    for block in document.control:
        yield from _runs_of_block("the control page", block)
    for section in all_sections(document):
        place = f"section {section.key}"
        yield Run(place, section.title)
        for block in section.blocks:
            yield from _runs_of_block(place, block)


def all_sections(document: Document) -> Iterator[Section]:
    """Yield every section, each before those below it."""
    waiting = [document.summary, *document.sections]
    while waiting:
        section = waiting.pop(0)
        yield section
        waiting[:0] = section.sections


def all_blocks(document: Document) -> Iterator[Block]:
    """Yield every block."""
    yield from document.control
    for section in all_sections(document):
        yield from section.blocks


def facts_of(prose: Prose) -> tuple[Fact, ...]:
    """Return the numbers, quotations and outcomes of a run of text, in order."""
    facts: list[Fact] = []
    words = ""
    for piece in (*prose.pieces, Supplied("")):
        if isinstance(piece, Number | Supplied) or (isinstance(piece, Emphasis) and piece.kind == "code"):
            facts += [("outcome", outcome) for outcome in _OUTCOME.findall(words)]
            words = ""
            if isinstance(piece, Number):
                facts.append(("number", piece.key, piece.exact, piece.text))
            elif piece.text:
                facts.append(("quoted", piece.text))
        else:
            words += piece if isinstance(piece, str) else piece.text
    return tuple(facts)


def told(facts: tuple[Fact, ...]) -> str:
    """Return facts as a person would read them out."""
    return ", ".join(fact[-1] for fact in facts) or "nothing"


def words_of(prose: Prose) -> Iterator[str]:
    """Yield the program's own words of a run of text, piece by piece."""
    for piece in prose.pieces:
        if isinstance(piece, str):
            yield piece
        elif isinstance(piece, Link | Citation) or (isinstance(piece, Emphasis) and piece.kind != "code"):
            yield piece.text


def outcomes_of(facts: tuple[Fact, ...]) -> tuple[Fact, ...]:
    """Return the findings, outcomes of checks and sides of alpha among facts."""
    return tuple(fact for fact in facts if fact[0] == "outcome")


def row_facts(table: TableBlock, columns: tuple[str, ...]) -> tuple[tuple[str, tuple[tuple[Fact, ...], ...]], ...]:
    """Return for each row of a table its head and, column by column as named, the facts of its cells."""
    names = [column.name for column in table.columns]
    places = [names.index(name) for name in columns]
    return tuple(
        (text_of(row[0]), tuple(facts_of(row[place]) for place in places)) for row in (*table.rows, *table.foot)
    )


def _runs_of_block(place: str, block: Block) -> Iterator[Run]:
    match block:
        case Paragraph() | CaveatBlock():
            yield Run(place, block.prose)
        case Items():
            yield from (Run(place, item) for item in block.items)
        case TableBlock():
            heads = tuple(column.head for column in block.columns)
            yield from (Run(place, prose) for prose in (block.caption, *heads, *block.notes))
        case FieldList():
            if block.caption is not None:
                yield Run(place, block.caption)
            name = place if block.key is None else f"{place}, {block.key}"
            for label, content in block.rows:
                yield Run(f"{name}, {label}", content)
        case FigureBlock():
            yield Run(place, block.caption)
        case Verbatim():
            if block.caption is not None:
                yield Run(place, block.caption)
        case SignatureBlock():
            pass
        case _:
            assert_never(block)

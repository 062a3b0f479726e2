"""Sentences with slots, and the wording rules that every sentence of a report obeys.

A template holds words only: a digit in it, a slot without a value, a value without a slot, or a formatting code
is a mistake of ours and raises at once.  The lint knows the phrases that claim more than a rank correlation
can; a hit in the program’s own words fails the report, a hit in supplied words becomes a caveat.
"""

import re
import string
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Final, TypeAlias

from rankdocket.document.model import (
    Block,
    CaveatBlock,
    Document,
    Emphasis,
    FieldList,
    FigureBlock,
    Items,
    Number,
    Paper,
    Paragraph,
    Piece,
    Prose,
    Section,
    SignatureBlock,
    Supplied,
    TableBlock,
    Verbatim,
)

Slot: TypeAlias = "Piece | Prose"


def prose(template: str, **slots: Slot) -> Prose:
    """Return ``template`` with each ``{slot}`` replaced.

    Raises
    ------
    ValueError
        If a slot has no value, a value no slot, a slot carries a formatting code, or the template a digit.
    """
    pieces: list[Piece] = []
    used: set[str] = set()
    for text, name, code, conversion in string.Formatter().parse(template):
        if any(character.isdigit() for character in text):
            raise ValueError(f"a number stands in the words {text!r}: give it a slot")
        if text:
            pieces.append(text)
        if name is None:
            continue
        if code or conversion or not name.isidentifier():
            raise ValueError(f"the slot {{{name}}} carries a formatting code")
        if name not in slots:
            raise ValueError(f"the slot {{{name}}} has no value in {template!r}")
        used.add(name)
        value = slots[name]
        if isinstance(value, str) and any(character.isdigit() for character in value):
            raise ValueError(f"a number stands in the words {value!r}: give it an address")
        pieces.extend(value.pieces if isinstance(value, Prose) else (value,))
    unused = set(slots) - used
    if unused:
        raise ValueError(f"no slot for {sorted(unused)} in {template!r}")
    return Prose(tuple(pieces))


def only(piece: Piece) -> Prose:
    """Return one piece as prose."""
    return Prose((piece,))


def joined(parts: tuple[Prose, ...], separator: str = " ") -> Prose:
    """Return several runs of text as one."""
    pieces: list[Piece] = []
    for part in parts:
        if pieces and part.pieces:
            pieces.append(separator)
        pieces.extend(part.pieces)
    return Prose(tuple(pieces))


def listed(parts: tuple[Prose, ...]) -> Prose:
    """Return "a, b and c"."""
    if len(parts) < 2:
        return joined(parts)
    return joined((joined(parts[:-1], ", "), parts[-1]), " and ")


def text_of(content: Prose) -> str:
    """Return the characters that will be printed."""
    return "".join(piece if isinstance(piece, str) else piece.text for piece in content.pieces)


@dataclass(frozen=True, slots=True)
class Hit:
    """A phrase that the wording rules forbid: ``phrase`` as it stands, ``rule`` why."""

    phrase: str
    rule: str


_RULES: Final[tuple[tuple[str, str], ...]] = (
    (r"\b(?:no|zero) (?:correlation|association|relationship)\b", "absence of evidence is not evidence of absence"),
    (r"\b(?:is|are|was|were) (?:unrelated|uncorrelated)\b", "absence of evidence is not evidence of absence"),
    (r"\b(?:variables|both|they) (?:are|were) independent\b", "absence of evidence is not evidence of absence"),
    (r"\btrend(?:s|ed|ing)? towards?\b", "a p-value above alpha is not almost below it"),
    (r"\b(?:marginally|borderline|nearly|almost|highly) significant\b", "a p-value has no degrees"),
    (r"\bmarginally\b", "a p-value has no degrees"),
    (r"\b(?:prov(?:es?|ed|en)|confirm(?:s|ed|ing)?)\b", "a sample neither proves nor confirms"),
    (
        r"\b(?:caus(?:es?|ed|al|ing)|leads? to|led to|driv(?:es?|en|ing)|effects? of|due to)\b",
        "an association does not say why",
    ),
    (
        r"\b(?:strong|strongly|weak|weakly|moderate|moderately) (?:\w+ )?(?:correlat|associat|relation)\w*",
        "no adjective for size without a stated scale",
    ),
    (r"\bp(?:-value)? (?:is|was) the probability that\b", "p is not the probability of a hypothesis"),
    (r"\bp\s*=\s*0?\.?0+\b(?!\.\d)", "p is never zero"),
    (
        r"\bn\.s\.|\b(?:not significant|non-significant|insignificant|statistically significant)\b",
        "a finding is stated in the plan’s own words",
    ),
    (r"\b(?:zero error|beyond (?:any )?doubt|without (?:any )?doubt|guarantee[sd]?)\b", "no absolute claims"),
    (r"\d\s*\*{1,3}(?!\*)(?!\s*[\w(])", "no marks for p-values"),
)


def lint(text: str) -> tuple[Hit, ...]:
    """Return every forbidden phrase of ``text``, in order (wording rules after Altman & Bland 1995, Greenland et al. 2016)."""
    hits = [
        (match.start(), Hit(match.group(0), why))
        for pattern, why in _RULES
        for match in re.finditer(pattern, text, re.IGNORECASE)
    ]
    return tuple(hit for _, hit in sorted(hits, key=lambda found: found[0]))


def generated_text(content: Prose) -> str:
    """Return the program’s own words; supplied words and literals are replaced by a neutral mark."""
    return "".join(
        "…"
        if isinstance(piece, Supplied) or (isinstance(piece, Emphasis) and piece.kind == "code")
        else piece
        if isinstance(piece, str)
        else piece.text
        for piece in content.pieces
    )


def lint_document(document: Paper) -> tuple[Hit, ...]:
    """Return the forbidden phrases in the program’s own sentences; a report with any must not be issued."""
    return tuple(hit for content in all_prose(document) for hit in lint(generated_text(content)))


def all_prose(document: Paper) -> Iterator[Prose]:
    """Yield every run of text of the document in print order."""
    if isinstance(document, Document):
        for block in document.control:
            yield from _block_prose(block)
        yield from _section_prose(document.summary)
    for section in document.sections:
        yield from _section_prose(section)


def numbers_of(document: Paper) -> Iterator[Number]:
    """Yield every printed number of the document in print order, repeated ones as often as they stand."""
    for content in all_prose(document):
        for piece in content.pieces:
            if isinstance(piece, Number):
                yield piece


def _section_prose(section: Section) -> Iterator[Prose]:
    yield section.title
    for block in section.blocks:
        yield from _block_prose(block)
    for below in section.sections:
        yield from _section_prose(below)


def _block_prose(block: Block) -> Iterator[Prose]:
    match block:
        case Paragraph() | CaveatBlock():
            yield block.prose
        case Items():
            yield from block.items
        case TableBlock():
            yield block.caption
            for column in block.columns:
                yield column.head
            for row in (*block.rows, *block.foot):
                yield from row
            yield from block.notes
        case FieldList():
            if block.caption is not None:
                yield block.caption
            for _, content in block.rows:
                yield content
        case FigureBlock():
            yield block.caption
        case Verbatim():
            if block.caption is not None:
                yield block.caption
        case SignatureBlock():
            pass

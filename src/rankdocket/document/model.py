"""A report as plain data: what is said, every number already text, nothing about looks.

The types here are the border between those who know what is true and those who know how a page is set.  A
block is one of a closed union; a renderer matches on it and must handle every member.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal, TypeAlias

from rankdocket.canonical import Plain
from rankdocket.vocabulary import Status


@dataclass(frozen=True, slots=True)
class Number:
    """One printed number.

    Attributes
    ----------
    key
        Its address in analysis.json: keys and list positions joined by ``/``.
    exact
        The value stored there, as text.
    text
        The only rounded form; every output prints these characters.
    """

    key: str
    exact: str
    text: str


@dataclass(frozen=True, slots=True)
class Citation:
    """A reference to a work of :mod:`rankdocket.references`; ``text`` is the short form, "Kendall 1945"."""

    key: str
    text: str


@dataclass(frozen=True, slots=True)
class Link:
    """A pointer to another block or section of the same report by its ``target`` key."""

    target: str
    text: str


@dataclass(frozen=True, slots=True)
class Supplied:
    """Words taken from the spec or the data as they stand: printed, never rewritten."""

    text: str


@dataclass(frozen=True, slots=True)
class Emphasis:
    """Words set apart: a symbol such as ``n`` or ``p`` (``italic``), a run-in heading (``strong``), a literal (``code``)."""

    text: str
    kind: Literal["italic", "strong", "code"]


Piece: TypeAlias = str | Number | Citation | Link | Supplied | Emphasis


@dataclass(frozen=True, slots=True)
class Prose:
    """A run of text; plain ``str`` pieces are the program’s own words."""

    pieces: tuple[Piece, ...]


@dataclass(frozen=True, slots=True)
class Paragraph:
    """One paragraph."""

    prose: Prose
    role: Literal["body", "answer", "note"] = "body"


@dataclass(frozen=True, slots=True)
class Items:
    """A list of sentences; ``numbered`` when the order matters."""

    items: tuple[Prose, ...]
    numbered: bool = False


@dataclass(frozen=True, slots=True)
class Column:
    """A table column: its head, how its cells are set, and its name in the CSV file of the table."""

    head: Prose
    name: str
    align: Literal["left", "right", "decimal"] = "left"
    share: int = 1
    """Relative width."""


@dataclass(frozen=True, slots=True)
class TableBlock:
    """A numbered table.

    Attributes
    ----------
    key
        Stable identifier, also the stem of its CSV file: ``results``.
    number
        Printed number: ``5``, ``A.1``.
    caption
        What the table shows.
    columns, rows
        Each row has one cell a column; the first cell of a row is its head.
    foot
        Rows set apart below (sums).
    notes
        Sentences under the table.
    landscape
        True when it needs a wide page.
    """

    key: str
    number: str
    caption: Prose
    columns: tuple[Column, ...]
    rows: tuple[tuple[Prose, ...], ...]
    foot: tuple[tuple[Prose, ...], ...] = ()
    notes: tuple[Prose, ...] = ()
    landscape: bool = False


@dataclass(frozen=True, slots=True)
class FieldList:
    """Labelled facts, one a line: label, content.  ``key`` names it when something points to it."""

    rows: tuple[tuple[str, Prose], ...]
    key: str | None = None
    caption: Prose | None = None


@dataclass(frozen=True, slots=True)
class FigureBlock:
    """A numbered figure.

    Attributes
    ----------
    key
        Stable identifier, also the stem of its SVG file: ``A1-raw``.
    number
        Printed number.
    kind
        Which drawing of the renderer’s catalogue draws it.
    data
        What the drawing shows, as plain data; numbers as decimal text.
    alternative
        The figure in words, with its numbers.
    width
        ``half`` stands beside another, ``full`` takes the line.
    """

    key: str
    number: str
    kind: str
    caption: Prose
    alternative: str
    data: Mapping[str, Plain]
    width: Literal["half", "full"] = "half"


@dataclass(frozen=True, slots=True)
class CaveatBlock:
    """A sentence that the reader must see; ``number`` is counted through the whole report."""

    key: str
    number: int
    prose: Prose


@dataclass(frozen=True, slots=True)
class Verbatim:
    """Text printed exactly as it stands (the spec as used, a register extract)."""

    text: str
    caption: Prose | None = None


@dataclass(frozen=True, slots=True)
class SignatureLine:
    """One line of the prepared / checked / released block; empty fields are printed as such, never filled in."""

    act: str
    name: str
    role: str
    note: str


@dataclass(frozen=True, slots=True)
class SignatureBlock:
    """Who prepared, checked and released."""

    lines: tuple[SignatureLine, ...]


Block: TypeAlias = Paragraph | Items | TableBlock | FieldList | FigureBlock | CaveatBlock | Verbatim | SignatureBlock


@dataclass(frozen=True, slots=True)
class Section:
    """A headed part of the report.

    Attributes
    ----------
    key
        Stable identifier and link target.
    number
        Printed number (``4``, ``6.1``, ``A``), empty for unnumbered sections.
    title
        The heading.
    blocks, sections
        Its content, then its sub-sections.
    opens
        ``page`` when it starts a new page, ``here`` otherwise.
    """

    key: str
    number: str
    title: Prose
    blocks: tuple[Block, ...]
    sections: tuple["Section", ...] = ()
    opens: Literal["page", "here"] = "here"


@dataclass(frozen=True, slots=True)
class Furniture:
    """What stands on every page and on the control page.

    Attributes
    ----------
    study_number, short_title, marking
        Running head.
    edition
        "edition 2" or "draft 1A".
    status
        Status word; a draft carries it across every page.
    date
        Date of issue, ISO 8601.
    created
        The same moment in full, ISO 8601 with zone, for the files' metadata.
    author
        Who prepared it, for the files' metadata; may be empty.
    """

    study_number: str
    title: str
    short_title: str
    marking: str
    edition: str
    status: Status
    date: str
    created: str
    author: str


@dataclass(frozen=True, slots=True)
class Document:
    """A whole report.

    ``control`` is page 1, ``summary`` page 2; ``sections`` follow in print order; ``end_mark`` closes the
    report, to which the renderer adds the page count.
    """

    language: str
    furniture: Furniture
    control: tuple[Block, ...]
    summary: Section
    sections: tuple[Section, ...]
    end_mark: str
    references: Mapping[str, str] = field(default_factory=dict)
    """Key → full text of every work cited."""


@dataclass(frozen=True, slots=True)
class Leaf:
    """One page that stands alone: it belongs to no edition and names no date and nobody.

    Attributes
    ----------
    title
        The heading of the page.
    foot
        What stands at its foot.
    """

    language: str
    title: str
    foot: str
    sections: tuple[Section, ...]
    references: Mapping[str, str] = field(default_factory=dict)
    """Key → full text of every work cited."""


Paper: TypeAlias = Document | Leaf
"""Whatever is set as a page."""

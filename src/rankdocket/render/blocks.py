"""Each block of a document as markup, by its own template."""

from collections.abc import Iterable, Mapping, Sequence
from itertools import groupby
from typing import Final, assert_never

from jinja2 import Environment
from markupsafe import Markup

from rankdocket.document.model import (
    Block,
    CaveatBlock,
    Citation,
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
from rankdocket.errors import RenderError
from rankdocket.render import words as labels
from rankdocket.render.anchors import Anchors, identifier
from rankdocket.render.columns import set_columns, stays_whole, tail
from rankdocket.render.fonts import slanted_signs
from rankdocket.render.markup import trusted
from rankdocket.render.text import prose_text

_CELL_SPACE: Final = 0.5
"""Em between a cell's text and its right edge, as in the style sheet."""

_LONGEST_LEAD: Final = 2
"""Paragraphs that may stand between a heading and the wide table they lead to."""

_LONGEST_WHOLE: Final = 40
"""Signs up to which a number is never broken; a line of the text holds more."""

_LONG_TABLE: Final = 25
"""Rows from which they stand closer, so that a worksheet of usual length has one page."""

_SHORT_TABLE: Final = 12
"""Rows up to which a table is kept on one page."""

_SHORT_TEXT: Final = 600
"""Characters up to which it is; a table of few rows with long cells would leave half a page empty before it."""


class Setter:
    """Turns the parts of one document into markup.

    Parameters
    ----------
    templates
        The template environment.
    figures
        Figure key → SVG element.
    anchors
        The ids of the page.
    """

    def __init__(self, templates: Environment, figures: Mapping[str, str], anchors: Anchors) -> None:
        self._pieces = templates.get_template("pieces.html.j2").module
        self._templates = templates
        self._figures = figures
        self._anchors = anchors
        self._caveats: set[str] = set()

    def section(
        self, section: Section, level: int, opens: str, *, works: Mapping[str, str], inner: Sequence[Markup]
    ) -> Markup:
        """Return a section with its heading, its blocks, its sub-sections and, where given, its list of works.

        What leads to a wide table goes with it onto the wide page: a heading must not stay behind alone.
        """
        led = _led_to_wide_table(section.blocks)
        return self._fill(
            "section",
            id=identifier("section", section.key),
            level=level,
            opens=opens,
            number=section.number,
            title=self.prose(section.title),
            lead=self.blocks(section.blocks[:led]),
            body=self.blocks(section.blocks[led:]),
            inner=inner,
            works=[(identifier("reference", key), full) for key, full in works.items()],
        )

    def blocks(self, blocks: Iterable[Block]) -> Markup:
        """Return blocks in order; neighbouring half-width figures stand two in a line."""
        parts: list[Markup] = []
        for half, run in groupby(blocks, key=lambda block: isinstance(block, FigureBlock) and block.width == "half"):
            made = [self._block(block) for block in run]
            if half:
                made = [self._fill("figure_pair", figures=made[i : i + 2]) for i in range(0, len(made), 2)]
            parts.extend(made)
        return Markup("\n").join(parts)

    def prose(self, prose: Prose) -> Markup:
        """Return a run of text."""
        return Markup("").join(self._piece(piece) for piece in prose.pieces)

    def _piece(self, piece: str | Number | Citation | Link | Supplied | Emphasis) -> Markup:
        match piece:
            case str():
                return Markup.escape(piece)
            case Number():
                return self._macro("number", piece, len(piece.text) > _LONGEST_WHOLE)
            case Citation():
                return self._macro("citation", piece, self._anchors.of_citation(piece.key))
            case Link():
                return self._macro("link", piece, self._anchors.of_link(piece.target))
            case Supplied():
                return self._macro("supplied", piece)
            case Emphasis(kind="italic"):
                return Markup("").join(self._slanted(piece.text))
            case Emphasis():
                return self._macro("emphasis", piece)
            case _:
                assert_never(piece)

    def _slanted(self, words: str) -> Iterable[Markup]:
        """Yield a text in italics, the signs that the italic faces lack upright."""
        for has_italic, run in groupby(words, key=lambda sign: ord(sign) in slanted_signs()):
            text = "".join(run)
            yield self._macro("slanted" if has_italic else "upright", text)

    def _block(self, block: Block) -> Markup:
        match block:
            case Paragraph():
                return self._fill("paragraph", role=block.role, text=self.prose(block.prose))
            case Items():
                return self._fill("items", numbered=block.numbered, items=[self.prose(item) for item in block.items])
            case TableBlock():
                return self._table(block)
            case FieldList():
                return self._fill(
                    "field_list",
                    id=identifier("list", block.key) if block.key else "",
                    caption=self.prose(block.caption) if block.caption else "",
                    rows=[(label, self.prose(content)) for label, content in block.rows],
                )
            case FigureBlock():
                return self._figure(block)
            case CaveatBlock():
                return self._fill(
                    "caveat",
                    id=self._caveat_id(block),
                    label=f"{labels.CAVEAT} {block.number}.",
                    text=self.prose(block.prose),
                )
            case Verbatim():
                caption = self.prose(block.caption) if block.caption else ""
                return self._fill("verbatim", caption=caption, text=block.text)
            case SignatureBlock():
                return self._fill(
                    "signatures", heads=labels.SIGNATURE_HEADS, caption=labels.SIGNATURES, lines=block.lines
                )
            case _:
                assert_never(block)

    def _table(self, table: TableBlock) -> Markup:
        wanted = len(table.columns)
        if not wanted or any(len(row) != wanted for row in table.rows + table.foot):
            raise RenderError(f"The table {table.key!r} does not have one cell a column in every row.")
        setting = set_columns(table)

        def cell(prose: Prose, column: int) -> tuple[Markup, str, str, str]:
            align = table.columns[column].align
            looks = f"{align} whole" if stays_whole(prose) else align
            beyond = tail(prose) if align == "decimal" else None
            space = "" if beyond is None else f"{_CELL_SPACE + setting.tails[column] - beyond:.3f}"
            match prose.pieces:
                case (Number() as number,):
                    return Markup.escape(number.text), number.key, looks, space
                case _:
                    return self.prose(prose), "", looks, space

        def lines(rows: Sequence[Sequence[Prose]]) -> list[list[tuple[Markup, str, str, str]]]:
            return [[cell(prose, i) for i, prose in enumerate(row)] for row in rows]

        label = f"{labels.TABLE} {table.number}"
        return self._fill(
            "table",
            id=identifier("table", table.key),
            label=f"{label}.",
            continued=f"{label}, {labels.CONTINUED}",
            caption=self.prose(table.caption),
            size=setting.size,
            total=f"{setting.total:.2f}",
            shares=[f"{share:.3f}" for share in setting.shares],
            heads=[(self.prose(column.head), column.align) for column in table.columns],
            rows=lines(table.rows),
            foot=lines(table.foot),
            notes=[self.prose(note) for note in table.notes],
            landscape=table.landscape,
            long=len(table.rows) >= _LONG_TABLE,
            short=_is_short(table),
        )

    def _figure(self, figure: FigureBlock) -> Markup:
        if figure.key not in self._figures:
            raise RenderError(f"The figure {figure.key!r} has not been drawn.")
        return self._fill(
            "figure",
            id=identifier("figure", figure.key),
            width=figure.width,
            picture=trusted(self._figures[figure.key]),
            label=f"{labels.FIGURE} {figure.number}.",
            caption=self.prose(figure.caption),
        )

    def _caveat_id(self, caveat: CaveatBlock) -> str:
        """Return the id at a caveat's first printing; a repetition bears none."""
        name = identifier("caveat", caveat.key)
        if name in self._caveats:
            return ""
        self._caveats.add(name)
        return name

    def _macro(self, name: str, *slots: object) -> Markup:
        return trusted(getattr(self._pieces, name)(*slots))

    def _fill(self, template: str, **slots: object) -> Markup:
        rendered = self._templates.get_template(f"blocks/{template}.html.j2").render(**slots)
        return trusted(rendered)


def _led_to_wide_table(blocks: Sequence[Block]) -> int:
    """Return how many blocks, up to and with a wide table, belong to the heading above them; 0 for none."""
    for i, block in enumerate(blocks[: _LONGEST_LEAD + 1]):
        if isinstance(block, TableBlock) and block.landscape:
            return i + 1
        if not isinstance(block, Paragraph):
            break
    return 0


def _is_short(table: TableBlock) -> bool:
    rows = (*table.rows, *table.foot)
    return len(rows) <= _SHORT_TABLE and sum(len(prose_text(cell)) for row in rows for cell in row) <= _SHORT_TEXT

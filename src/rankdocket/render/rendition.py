"""A document as finished files."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final

from rankdocket.document.model import Document, FigureBlock, TableBlock
from rankdocket.render import words
from rankdocket.render.anchors import all_blocks, all_sections
from rankdocket.render.figures import Picture, draw
from rankdocket.render.glyphs import require_glyphs
from rankdocket.render.html import page
from rankdocket.render.pdf import pdf_of
from rankdocket.render.text import csv_bytes, section_text

EXTRACTED_SECTIONS: Final = ("methods",)
"""Keys of the sections people copy out whole, beside the summary."""


@dataclass(frozen=True, slots=True)
class Rendition:
    """How a document looks, as bytes.

    Attributes
    ----------
    html, pdf
        The report, twice.
    figures
        Figure key → SVG file.
    tables
        Table key → CSV file.
    extracts
        File name → plain text.
    pages
        Pages of the PDF.
    """

    html: bytes
    pdf: bytes
    figures: Mapping[str, bytes]
    tables: Mapping[str, bytes]
    extracts: Mapping[str, bytes]
    pages: int


def render(document: Document, *, progress: Callable[[str], None] | None = None) -> Rendition:
    """Make every file of a report.

    Parameters
    ----------
    document
        What is said.
    progress
        Told in words what is done; called before each step.

    Raises
    ------
    RenderError
        If a link leads nowhere, a figure has no drawing, a character has no shape, or no PDF can be laid out.
    """
    tell = progress or _silent
    pictures = _draw_all(document, tell)
    elements = {key: picture.element for key, picture in pictures.items()}
    tell("setting the page")
    printed = page(document, elements, "print")
    furniture = (words.running_head(document.furniture), words.running_foot(document.furniture))
    require_glyphs(printed, furniture)
    tell("laying out the PDF")
    pdf = pdf_of(printed)
    return Rendition(
        html=_encoded(page(document, elements, "screen")),
        pdf=pdf.file,
        figures=MappingProxyType({key: picture.file for key, picture in pictures.items()}),
        tables=MappingProxyType(
            {block.key: csv_bytes(block) for block in all_blocks(document) if isinstance(block, TableBlock)}
        ),
        extracts=MappingProxyType(_extracts(document)),
        pages=pdf.pages,
    )


def html_only(document: Document, *, progress: Callable[[str], None] | None = None) -> bytes:
    """Make the HTML report alone; no system library is needed for it.

    Raises
    ------
    RenderError
        If a link leads nowhere or a figure has no drawing.
    """
    pictures = _draw_all(document, progress or _silent)
    return _encoded(page(document, {key: picture.element for key, picture in pictures.items()}, "screen"))


def _draw_all(document: Document, tell: Callable[[str], None]) -> dict[str, Picture]:
    figures = [block for block in all_blocks(document) if isinstance(block, FigureBlock)]
    pictures = {}
    for i, figure in enumerate(figures, 1):
        tell(f"drawing figure {i} of {len(figures)}")
        pictures[figure.key] = draw(figure)
    return pictures


def _extracts(document: Document) -> dict[str, bytes]:
    wanted = [(document.summary.key, document.summary)]
    wanted += [(section.key, section) for section in all_sections(document) if section.key in EXTRACTED_SECTIONS]
    made = {}
    for key, section in wanted:
        origin = words.origin(document.furniture, key)
        made[f"{key}.txt"] = _encoded(f"{section_text(section)}\n\n{origin}")
    return made


def _encoded(text: str) -> bytes:
    return (text.rstrip("\n") + "\n").encode("utf-8")


def _silent(_: str) -> None:
    """Tell nobody."""

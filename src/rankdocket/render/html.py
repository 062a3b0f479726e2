"""A document as one HTML page: the same body for the screen and for print, only the head differs."""

from collections.abc import Mapping
from typing import Final, Literal, TypeAlias

from jinja2 import Environment, FileSystemLoader, StrictUndefined
from markupsafe import Markup

from rankdocket.document.model import Document, Leaf, Paper, Prose, Section
from rankdocket.errors import RenderError
from rankdocket.render import words
from rankdocket.render.anchors import REFERENCES_KEY, find_anchors, identifier
from rankdocket.render.assets import FRAME_NAME, LEAF_NAME, templates_folder
from rankdocket.render.blocks import Setter
from rankdocket.render.fonts import FACES
from rankdocket.render.markup import trusted
from rankdocket.render.text import prose_text

Target: TypeAlias = Literal["screen", "print"]

ROUNDING_FILTERS: Final = ("round", "format", "int", "float", "abs", "sum", "filesizeformat")
"""Filters of the template language that could make a second rounded form of a number: taken away."""

_FIRST_LEVEL: Final = 2
_DEEPEST_LEVEL: Final = 6


def page(document: Document, figures: Mapping[str, str], target: Target) -> str:
    """Return the report as one self-contained HTML page.

    Parameters
    ----------
    document
        What is said.
    figures
        Figure key → SVG element.
    target
        ``screen`` or ``print``; it changes style sheets and fonts in the head and nothing else.

    Raises
    ------
    RenderError
        If a link leads nowhere, two parts share an id, a cited work is not listed or a figure is missing.
    """
    templates = environment()
    anchors = find_anchors(document)
    setter = Setter(templates, figures, anchors)
    furniture = document.furniture
    sections = [_section(section, _FIRST_LEVEL, setter, document) for section in _with_references(document)]
    return templates.get_template(FRAME_NAME).render(
        language=document.language,
        furniture=furniture,
        title=_file_title(document),
        css=_css(target, templates, words.running_head(furniture), words.running_foot(furniture)),
        mark=words.status_mark(furniture),
        control=setter.blocks(document.control),
        summary=_section(document.summary, _FIRST_LEVEL, setter, document, opens="summary"),
        sections=sections,
        contents=[
            (identifier("section", section.key), section.number, prose_text(section.title))
            for section in (document.summary, *_with_references(document))
        ],
        contents_word=words.CONTENTS,
        foot=words.running_foot(furniture),
        end_mark=document.end_mark,
    )


def leaf_page(leaf: Leaf, figures: Mapping[str, str], target: Target) -> str:
    """Return a page that stands alone as one self-contained HTML page; arguments as of :func:`page`.

    Raises
    ------
    RenderError
        As :func:`page` does.
    """
    templates = environment()
    setter = Setter(templates, figures, find_anchors(leaf))
    return templates.get_template(LEAF_NAME).render(
        language=leaf.language,
        title=leaf.title,
        css=_css(target, templates, "", leaf.foot),
        target=target,
        foot=leaf.foot,
        sections=[_section(section, _FIRST_LEVEL, setter, leaf) for section in leaf.sections],
    )


def environment() -> Environment:
    """Return the template environment: everything escaped, nothing undefined, no filter that rounds."""
    templates = Environment(
        loader=FileSystemLoader(templates_folder()),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=False,
    )
    for name in ROUNDING_FILTERS:
        del templates.filters[name]
    templates.filters["cssstr"] = css_string
    return templates


def css_string(text: str) -> Markup:
    """Return text for the inside of a CSS string: everything but plain letters, digits and blanks as a number.

    A number ends with a blank of its own, which the style sheet's reader takes away.
    """
    safe = (sign if sign == " " or (sign.isascii() and sign.isalnum()) else f"\\{ord(sign):06x} " for sign in text)
    return trusted("".join(safe))


def _css(target: Target, templates: Environment, head: str, foot: str) -> Markup:
    rendered = templates.get_template(f"css/{target}.css.j2").render(
        faces=FACES,
        head=head,
        foot=foot,
        page_word=words.PAGE,
        of_word=words.PAGE_OF,
        pages_word=words.PAGES,
    )
    return trusted(rendered)


def _file_title(document: Document) -> str:
    furniture = document.furniture
    return ", ".join(part for part in (furniture.title, furniture.study_number, furniture.edition) if part)


def _with_references(document: Document) -> tuple[Section, ...]:
    """Return the sections, with one for the references behind the others when the document has none."""
    if not document.references or any(section.key == REFERENCES_KEY for section in document.sections):
        return document.sections
    works = Section(REFERENCES_KEY, "", Prose((words.REFERENCES,)), ())
    return (*document.sections, works)


def _section(section: Section, level: int, setter: Setter, document: Paper, *, opens: str | None = None) -> Markup:
    if level > _DEEPEST_LEVEL:
        raise RenderError(f"The section {section.key!r} lies deeper than headings go.")
    return setter.section(
        section,
        level,
        opens or section.opens,
        works=document.references if section.key == REFERENCES_KEY else {},
        inner=[_section(part, level + 1, setter, document) for part in section.sections],
    )

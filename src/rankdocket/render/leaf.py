"""A page that stands alone, as bytes: HTML or PDF."""

from rankdocket.document.model import FigureBlock, Leaf
from rankdocket.render.anchors import all_blocks
from rankdocket.render.figures import draw
from rankdocket.render.glyphs import require_glyphs
from rankdocket.render.html import leaf_page
from rankdocket.render.pdf import Pdf, pdf_of


def leaf_html(leaf: Leaf) -> bytes:
    """Return the page as HTML; no system library is needed for it.

    Raises
    ------
    RenderError
        If a link leads nowhere or a figure has no drawing.
    """
    return (leaf_page(leaf, _elements(leaf), "screen").rstrip("\n") + "\n").encode("utf-8")


def leaf_pdf(leaf: Leaf) -> Pdf:
    """Return the page as PDF.

    Raises
    ------
    RenderError
        If a link leads nowhere, a figure has no drawing, a character has no shape, or no PDF can be laid out.
    """
    printed = leaf_page(leaf, _elements(leaf), "print")
    require_glyphs(printed, (leaf.foot,))
    return pdf_of(printed)


def _elements(leaf: Leaf) -> dict[str, str]:
    return {block.key: draw(block).element for block in all_blocks(leaf) if isinstance(block, FigureBlock)}

"""Figure blocks → SVG, by the catalogue of drawings."""

from dataclasses import dataclass
from typing import Final

from rankdocket.document.model import FigureBlock
from rankdocket.errors import RenderError
from rankdocket.render.anchors import identifier
from rankdocket.render.canvas import PAPER
from rankdocket.render.drawing import FULL_WIDTH, HALF_WIDTH
from rankdocket.render.drawings import DRAWINGS

_BY_KIND: Final = {drawing.kind: drawing for drawing in DRAWINGS}
_PROLOGUE: Final = '<?xml version="1.0" encoding="UTF-8"?>\n'


@dataclass(frozen=True, slots=True)
class Picture:
    """A figure drawn: the element that stands in a page, and the file of its own."""

    element: str
    file: bytes


def draw(figure: FigureBlock) -> Picture:
    """Draw a figure.

    Raises
    ------
    RenderError
        If no drawing of this kind is in the catalogue, or its data are not what the drawing needs.
    """
    drawing = _BY_KIND.get(figure.kind)
    if drawing is None:
        raise RenderError(f"The figure {figure.key!r} is of kind {figure.kind!r}, which no drawing draws.")
    sheet = drawing.draw(figure.data, HALF_WIDTH if figure.width == "half" else FULL_WIDTH)
    element = sheet.svg(identifier("drawing", figure.key), figure.alternative)
    # A file of its own may be opened on a dark ground; in a page the ground is the page's.
    file = _PROLOGUE + element.replace("<svg ", f'<svg style="background:{PAPER}" ', 1) + "\n"
    return Picture(element, file.encode("utf-8"))

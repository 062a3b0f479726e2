"""A sheet to draw on in points, and its SVG: the only place where the drawing library is called.

Nothing of the library's own looks is left: no axes of its making, no default width, colour or face.  Texts stay
texts and are anchored, so that no byte depends on which fonts a machine has.
"""

import io
import re
from collections.abc import Sequence
from dataclasses import dataclass
from math import cos, pi, sin
from typing import Final, Literal, TypeAlias
from xml.sax.saxutils import escape, unescape

from matplotlib import rc_context
from matplotlib.artist import Artist
from matplotlib.backends.backend_svg import FigureCanvasSVG
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties
from matplotlib.lines import Line2D
from matplotlib.patches import PathPatch
from matplotlib.path import Path
from matplotlib.text import Text
from matplotlib.transforms import IdentityTransform

from rankdocket.render.fonts import SANS, SANS_STRONG, SANS_TEXT, SYMBOLS, width

Point: TypeAlias = tuple[float, float]
Anchor: TypeAlias = Literal["left", "center", "right"]

BLACK: Final = "#1b1b1b"
INK: Final = "#174a52"
"""The one ink beside black: dark petrol."""

PAPER: Final = "#ffffff"
TEXT_SIZE: Final = 7.6
SMALL_SIZE: Final = 7.0

_POINTS_AN_INCH: Final = 72.0
_SALT: Final = "rankdocket"
_ARC: Final = 0.5522847498
"""Handle length of the cubic that follows a quarter of the unit circle."""

_CIRCLES_AT_MOST: Final = 2_000
"""Above this many marks each is so small that a hexagon looks the same in a third of the bytes."""

_ID: Final = re.compile(r' id="([^"]+)"')
_USED: Final = re.compile(r'(?:url\(#|href="#)([^")]+)')
_OUTLINE: Final = re.compile(r' d="([^"]*)"')
_AROUND_COMMAND: Final = re.compile(r"\s*([A-Za-z])\s*")
_ALONE: Final = r"\1"
_LONG_DECIMAL: Final = re.compile(r"-?\d+\.\d{3,}")
_METADATA: Final = re.compile(r"<metadata>.*?</metadata>\s*", re.DOTALL)
_STYLE: Final = re.compile(r"<defs>\s*<style.*?</style>\s*</defs>\s*", re.DOTALL)
_STYLED: Final = re.compile(r' style="([^"]*)"')
_TEXT: Final = re.compile(r"<text ([^>]*)>([^<]*)</text>")
_SIZE: Final = re.compile(r'font-size="([\d.]+)px"')
_SPACE: Final = re.compile(r"\s*\n\s*")


@dataclass(frozen=True, slots=True)
class Lettering:
    """How a text is drawn: anchor, weight, size in points, colour, turn in degrees counter-clockwise."""

    anchor: Anchor = "left"
    strong: bool = False
    size: float = TEXT_SIZE
    colour: str = BLACK
    turn: float = 0.0


@dataclass(frozen=True, slots=True)
class _Shape:
    """The outline of a mark of radius 1: its corners, and how each is reached."""

    corners: tuple[Point, ...]
    codes: tuple[int, ...]


def _circle() -> _Shape:
    """Return four cubics that follow the unit circle."""
    quarters = ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))
    corners = [quarters[0]]
    for (x, y), (to_x, to_y) in zip(quarters, (*quarters[1:], quarters[0]), strict=True):
        corners += [(x - y * _ARC, y + x * _ARC), (to_x + to_y * _ARC, to_y - to_x * _ARC), (to_x, to_y)]
    codes = (int(Path.MOVETO), *(int(Path.CURVE4),) * (len(corners) - 1), int(Path.CLOSEPOLY))
    return _Shape((*corners, corners[0]), codes)


def _hexagon() -> _Shape:
    """Return the hexagon in the unit circle."""
    corners = [(cos(pi * i / 3), sin(pi * i / 3)) for i in range(6)]
    codes = (int(Path.MOVETO), *(int(Path.LINETO),) * 5, int(Path.CLOSEPOLY))
    return _Shape((*corners, corners[0]), codes)


class Sheet:
    """A drawing of a given size; the origin is at the lower left, all lengths are points.

    Parameters
    ----------
    width, height
        Size in points.
    """

    def __init__(self, width: float, height: float) -> None:
        self.width = width
        self.height = height
        self._figure = Figure(figsize=(width / _POINTS_AN_INCH, height / _POINTS_AN_INCH), dpi=_POINTS_AN_INCH)
        self._figure.patch.set_visible(False)
        self._drawn = 0

    def line(self, points: Sequence[Point], *, weight: float, colour: str = BLACK, dashed: bool = False) -> None:
        """Draw a line through points."""
        self._add(
            Line2D(
                [x for x, _ in points],
                [y for _, y in points],
                linewidth=weight,
                color=colour,
                linestyle=(0, (2.0, 2.0)) if dashed else "-",
                solid_capstyle="butt",
                dash_capstyle="butt",
                solid_joinstyle="miter",
                marker="",
                antialiased=True,
                transform=IdentityTransform(),
            )
        )

    def strokes(self, lines: Sequence[Sequence[Point]], *, weight: float) -> None:
        """Draw several lines in the ink, each through its points, as one path."""
        if not lines:
            return
        codes = [code for line in lines for code in (Path.MOVETO, *(Path.LINETO,) * (len(line) - 1))]
        path = Path([point for line in lines for point in line], codes)
        # The library decides when a path is made, not when it is written, whether corners may be left out.
        path.should_simplify = False
        self._path(path, weight=weight, face="none")

    def circles(self, marks: Sequence[tuple[Point, float]], *, weight: float, filled: bool) -> None:
        """Draw circles, each given by its centre and radius, as one path."""
        if not marks:
            return
        shape = _circle() if len(marks) <= _CIRCLES_AT_MOST else _hexagon()
        corners = [(x + dx * radius, y + dy * radius) for (x, y), radius in marks for dx, dy in shape.corners]
        self._path(Path(corners, list(shape.codes) * len(marks)), weight=weight, face=INK if filled else "none")

    def diamond(self, centre: Point, radius: float, *, weight: float) -> None:
        """Draw an open diamond that hides what lies under it."""
        x, y = centre
        corners = [(x + radius, y), (x, y + radius), (x - radius, y), (x, y - radius), (x + radius, y)]
        codes = [Path.MOVETO, Path.LINETO, Path.LINETO, Path.LINETO, Path.CLOSEPOLY]
        self._path(Path(corners, codes), weight=weight, face=PAPER)

    def text(self, at: Point, words: str, lettering: Lettering) -> None:
        """Write one line; ``at`` lies on its base line, at the anchor."""
        face = SANS_STRONG if lettering.strong else SANS_TEXT
        drawn = Text(
            at[0],
            at[1],
            words,
            color=lettering.colour,
            horizontalalignment=lettering.anchor,
            verticalalignment="baseline",
            rotation=lettering.turn,
            rotation_mode="anchor",
            parse_math=False,
            usetex=False,
            transform=IdentityTransform(),
            fontproperties=FontProperties(
                family=[SANS, SYMBOLS, "sans-serif"], weight=face.weight, size=lettering.size, fname=str(face.path)
            ),
        )
        self._add(drawn)

    def svg(self, key: str, title: str) -> str:
        """Return the drawing as one SVG element with ``title`` as its first child and ids that begin with ``key``."""
        out = io.StringIO()
        with rc_context({"svg.hashsalt": _SALT, "svg.fonttype": "none", "path.simplify": False, "svg.id": None}):
            FigureCanvasSVG(self._figure).print_svg(  # type: ignore[no-untyped-call]
                out, metadata={"Date": None, "Creator": None, "Format": None, "Type": None}
            )
        return _trimmed(out.getvalue(), key, title)

    def _add(self, artist: Artist) -> None:
        """Put an artist on top of everything drawn before."""
        self._drawn += 1
        artist.set_zorder(self._drawn)
        self._figure.add_artist(artist)

    def _path(self, path: Path, *, weight: float, face: str) -> None:
        self._add(PathPatch(path, facecolor=face, edgecolor=INK, linewidth=weight, transform=IdentityTransform()))


def _trimmed(svg: str, key: str, title: str) -> str:
    """Return the element alone: our title, our ids, no metadata, hundredths of a point."""
    svg = svg[svg.index("<svg") :]
    svg = _STYLE.sub("", _METADATA.sub("", svg))
    used = set(_USED.findall(svg))
    svg = _ID.sub(lambda found: f' id="{key}-{found[1]}"' if found[1] in used else "", svg)
    svg = _USED.sub(lambda found: found[0].replace("#" + found[1], f"#{key}-{found[1]}"), svg)
    svg = _STYLED.sub(_attributes, svg)
    svg = _SPACE.sub(" ", _rounded_attributes(svg)).replace("> <", "><")
    svg = _OUTLINE.sub(lambda found: f' d="{_AROUND_COMMAND.sub(_ALONE, found[1])}"', svg)
    svg = _TEXT.sub(_held, svg)
    head, rest = svg.split(">", 1)
    name = f"{key}-title"
    return f'{head} role="img" aria-labelledby="{name}"><title id="{name}">{escape(title)}</title>{rest}'.strip()


def _attributes(found: re.Match[str]) -> str:
    """Write a style as attributes: the layout engine reads an element's style by the rules of pages, not drawings."""
    pairs = (part.split(":", 1) for part in found[1].split(";") if ":" in part)
    return "".join(f' {name.strip()}="{value.strip()}"' for name, value in pairs)


def _held(found: re.Match[str]) -> str:
    """Hold a text to the length it was given room for, whatever face a viewer sets it in."""
    face = SANS_STRONG if "font-weight" in found[1] else SANS_TEXT
    size = _SIZE.search(found[1])
    length = width(unescape(found[2]), face) * float(size[1]) if size is not None else 0.0
    held = f' textLength="{length:.2f}" lengthAdjust="spacingAndGlyphs"' if length else ""
    return f"<text {found[1]}{held}>{found[2]}</text>"


def _rounded_attributes(svg: str) -> str:
    """Shorten the decimals of attributes; texts between the tags stay as they are."""
    parts = re.split(r"(<[^>]*>)", svg)
    short = [_LONG_DECIMAL.sub(_hundredths, part) if part.startswith("<") else part for part in parts]
    return "".join(short)


def _hundredths(found: re.Match[str]) -> str:
    text = f"{float(found[0]):.2f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text

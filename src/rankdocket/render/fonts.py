"""The faces a report is set in, what characters they have, and how wide their text runs.

All are unmodified static files of open-licensed packages.  The italics have no Greek, so Greek is never
slanted; the last face of every stack has nearly every symbol, so that no text falls back on a machine's fonts.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from types import MappingProxyType
from typing import Final, Literal

from fontTools.ttLib import TTFont

from rankdocket.render.assets import package_file

SERIF: Final = "Source Serif Pro"
SANS: Final = "Source Sans Pro"
SYMBOLS: Final = "DejaVu Sans"
MONO: Final = "DejaVu Sans Mono"

_MATPLOTLIB_FONTS: Final = "mpl-data/fonts/ttf"
_WIDEST_GUESS: Final = 1.0
"""Width in em assumed for a character that a face does not have: that of a full square."""


@dataclass(frozen=True, slots=True)
class Face:
    """One font file and how style sheets ask for it."""

    family: str
    weight: int
    style: Literal["normal", "italic"]
    package: str
    inside: str

    @property
    def path(self) -> Path:
        """Where the file lies."""
        return package_file(self.package, self.inside)

    @property
    def address(self) -> str:
        """The name under which a style sheet asks for it; no folder stands in it."""
        return f"face:{Path(self.inside).name}"

    @property
    def media_type(self) -> str:
        """The media type of the file."""
        return "font/otf" if self.inside.endswith(".otf") else "font/ttf"


def _serif(weight: int, style: Literal["normal", "italic"], name: str) -> Face:
    return Face(SERIF, weight, style, "font_source_serif_pro", f"files/SourceSerifPro-{name}.otf")


def _sans(weight: int, style: Literal["normal", "italic"], name: str) -> Face:
    return Face(SANS, weight, style, "font_source_sans_pro", f"files/SourceSansPro-{name}.otf")


def _plain(family: str, weight: int, name: str) -> Face:
    return Face(family, weight, "normal", "matplotlib", f"{_MATPLOTLIB_FONTS}/{name}.ttf")


SERIF_TEXT: Final = _serif(400, "normal", "Regular")
SERIF_ITALIC: Final = _serif(400, "italic", "It")
SERIF_STRONG: Final = _serif(600, "normal", "Semibold")
SANS_TEXT: Final = _sans(400, "normal", "Regular")
SANS_ITALIC: Final = _sans(400, "italic", "It")
SANS_STRONG: Final = _sans(600, "normal", "Semibold")
SANS_STRONG_ITALIC: Final = _sans(600, "italic", "SemiboldIt")
SYMBOLS_TEXT: Final = _plain(SYMBOLS, 400, "DejaVuSans")
SYMBOLS_STRONG: Final = _plain(SYMBOLS, 600, "DejaVuSans-Bold")
MONO_TEXT: Final = _plain(MONO, 400, "DejaVuSansMono")

FACES: Final = (
    SERIF_TEXT,
    SERIF_ITALIC,
    SERIF_STRONG,
    SANS_TEXT,
    SANS_ITALIC,
    SANS_STRONG,
    SANS_STRONG_ITALIC,
    SYMBOLS_TEXT,
    SYMBOLS_STRONG,
    MONO_TEXT,
)


@cache
def advances(face: Face) -> Mapping[int, float]:
    """Return code point → width in em for every character the face has."""
    with TTFont(face.path, lazy=True) as font:
        em = font["head"].unitsPerEm
        widths = font["hmtx"].metrics
        return MappingProxyType({code: widths[name][0] / em for code, name in font.getBestCmap().items()})


def width(text: str, face: Face) -> float:
    """Return how wide a line of text runs in ``face``, in em; kerning is left out, so it is rather too wide."""
    own, last = advances(face), advances(SYMBOLS_TEXT)
    return sum(own.get(ord(sign)) or last.get(ord(sign), _WIDEST_GUESS) for sign in text)


@cache
def text_signs() -> frozenset[int]:
    """Return every code point that a report can print in any place."""
    return frozenset(advances(SYMBOLS_TEXT)) | (frozenset(advances(SERIF_TEXT)) & frozenset(advances(SANS_TEXT)))


@cache
def slanted_signs() -> frozenset[int]:
    """Return the code points that both italic faces have."""
    return frozenset(advances(SERIF_ITALIC)) & frozenset(advances(SANS_ITALIC))

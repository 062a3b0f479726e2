"""What a drawing is: a figure kind and the function that draws its data."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Final, Literal, TypeAlias

from rankdocket.canonical import Plain
from rankdocket.render.canvas import Sheet

Width: TypeAlias = Literal["half", "full"]

HALF_WIDTH: Final = 206.0
FULL_WIDTH: Final = 430.0
"""Width in points of a figure that stands beside another, and of one that takes the line."""


@dataclass(frozen=True, slots=True)
class Drawing:
    """One specimen of the catalogue.

    Attributes
    ----------
    kind
        The word a figure block asks for it by.
    draw
        Data and width in points → finished sheet; raises RenderError for data it does not understand.
    """

    kind: str
    draw: Callable[[Mapping[str, Plain], float], Sheet]

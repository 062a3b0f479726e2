"""The frame of a plot of points: two axes, their ticks and titles, and the marks."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from math import sqrt
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.render.canvas import BLACK, SMALL_SIZE, TEXT_SIZE, Anchor, Lettering, Point, Sheet
from rankdocket.render.fonts import SANS_TEXT, width
from rankdocket.render.plain_data import count_of, number_of, parts_of
from rankdocket.render.ticks import Scale, leading, wrapped

TICK: Final = 3.0
FRAME_WEIGHT: Final = 0.6
TITLE_GAP: Final = 6.0

_LARGEST_RADIUS: Final = 8.0
_CROWDED: Final = 400
"""Marks above which each is drawn smaller, so that all together keep the same ink."""


@dataclass(frozen=True, slots=True)
class Mark:
    """A place on a plot and how many rows lie there."""

    x: Decimal
    y: Decimal
    count: int


@dataclass(frozen=True, slots=True)
class Panel:
    """The rectangle in which marks stand, in points from the lower left of the sheet."""

    left: float
    bottom: float
    right: float
    top: float
    x: Scale
    y: Scale

    def at(self, x: Decimal, y: Decimal) -> Point:
        """Return where a pair of values lies."""
        return (
            self.left + self.x.place(x) * (self.right - self.left),
            self.bottom + self.y.place(y) * (self.top - self.bottom),
        )


def read_marks(data: Mapping[str, Plain]) -> tuple[Mark, ...]:
    """Return the points of a figure's data."""
    return tuple(
        Mark(number_of(point, "x"), number_of(point, "y"), count_of(point, "count"))
        for point in parts_of(data, "points")
    )


def radii(marks: Sequence[Mark], single: float) -> list[float]:
    """Return a radius for each mark, its area growing with the count; smaller where there are many."""
    if not marks:
        return []
    one = min(single * thinning(marks), _LARGEST_RADIUS / sqrt(max(mark.count for mark in marks)))
    return [one * sqrt(mark.count) for mark in marks]


def thinning(marks: Sequence[Mark]) -> float:
    """Return the factor, at most 1, by which marks and their outlines shrink because there are many."""
    return min(1.0, sqrt(_CROWDED / max(1, len(marks))))


def draw_frame(sheet: Sheet, panel: Panel) -> None:
    """Draw the left and lower axis with their ticks."""
    corner = [(panel.left, panel.top), (panel.left, panel.bottom), (panel.right, panel.bottom)]
    sheet.line(corner, weight=FRAME_WEIGHT)
    for value, _ in panel.x.ticks:
        x, _y = panel.at(value, panel.y.low)
        sheet.line([(x, panel.bottom), (x, panel.bottom - TICK)], weight=FRAME_WEIGHT)
    for value, _ in panel.y.ticks:
        _x, y = panel.at(panel.x.low, value)
        sheet.line([(panel.left, y), (panel.left - TICK, y)], weight=FRAME_WEIGHT)


def write_y_labels(sheet: Sheet, panel: Panel, room: float) -> None:
    """Write the tick labels of the upright axis, wrapped to ``room`` points, right-aligned at the ticks."""
    for value, label in panel.y.ticks:
        _x, y = panel.at(panel.x.low, value)
        write_lines(sheet, (panel.left - TICK - 2, y), wrapped(label, room, SMALL_SIZE), "right")


def write_lines(sheet: Sheet, middle: Point, lines: Sequence[str], anchor: Anchor) -> None:
    """Write lines one under another, the block centred on ``middle``."""
    step = leading(SMALL_SIZE)
    first = middle[1] + step * (len(lines) - 1) / 2 - SMALL_SIZE * 0.34
    for i, line in enumerate(lines):
        sheet.text((middle[0], first - i * step), line, Lettering(anchor, size=SMALL_SIZE))


def write_titles(sheet: Sheet, panel: Panel, x_title: Sequence[str], y_title: Sequence[str]) -> None:
    """Write the axis titles: the lower one from the foot of the sheet, the upright one turned at its left edge."""
    step = leading(TEXT_SIZE)
    centre = (panel.left + panel.right) / 2
    for i, line in enumerate(reversed(x_title)):
        sheet.text((centre, 2.5 + i * step), line, Lettering("center", size=TEXT_SIZE, colour=BLACK))
    middle = (panel.bottom + panel.top) / 2
    for i, line in enumerate(y_title):
        sheet.text((TEXT_SIZE + i * step, middle), line, Lettering("center", size=TEXT_SIZE, turn=90.0))


def widest(labels: Sequence[str], size: float) -> float:
    """Return the width in points of the widest label."""
    return max((width(label, SANS_TEXT) * size for label in labels), default=0.0)

"""The rows curve: a value by number of rows, the plan's own in the ink, others beside it in black."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.errors import RenderError
from rankdocket.render.canvas import BLACK, INK, SMALL_SIZE, TEXT_SIZE, Lettering, Point, Sheet
from rankdocket.render.drawing import Drawing
from rankdocket.render.panel import (
    TICK,
    TITLE_GAP,
    Panel,
    draw_frame,
    widest,
    write_lines,
    write_titles,
    write_y_labels,
)
from rankdocket.render.plain_data import number_of, part_of, parts_of, text_of
from rankdocket.render.ticks import Scale, even_scale, leading, power_label, wrapped

_PANEL_HEIGHT: Final = 104.0
_MARGIN: Final = 8.0
_ROOM: Final = 60.0
_X_TICKS: Final = 7
_Y_TICKS: Final = 5
_OWN_WEIGHT: Final = 1.3
_OTHER_WEIGHT: Final = 0.7
_GUIDE_WEIGHT: Final = 0.5
_MARK_RADIUS: Final = 3.3
_MARK_WEIGHT: Final = 1.0
_GAP: Final = 5.0
_AIR: Final = Decimal("1.04")
_LABEL_HEIGHTS: Final = (Decimal("0.4"), Decimal("0.25"))
"""Shares of the upright scale at which curves bear their labels, the own one and the first beside it: so none touch."""


@dataclass(frozen=True, slots=True)
class _Line:
    label: str
    points: tuple[tuple[Decimal, Decimal], ...]
    dashed: bool


def _draw(data: Mapping[str, Plain], width: float) -> Sheet:
    lines = [_line(part) for part in parts_of(data, "lines")]
    if not lines:
        raise RenderError("The figure data 'lines' hold no curve.")
    mark = part_of(data, "mark")
    x_scale, y_scale = _scales(lines, number_of(data, "most"))
    x_title = wrapped(_with_power(text_of(data, "x_label"), x_scale), width, TEXT_SIZE)
    y_title = wrapped(text_of(data, "y_label"), _PANEL_HEIGHT, TEXT_SIZE)
    left = leading(TEXT_SIZE) * len(y_title) + TITLE_GAP + TICK + 2
    left += widest([label for _, label in y_scale.ticks], SMALL_SIZE)
    bottom = leading(TEXT_SIZE) * len(x_title) + TITLE_GAP + leading(SMALL_SIZE) + TICK
    panel = Panel(left, bottom, width - _MARGIN, bottom + _PANEL_HEIGHT, x_scale, y_scale)
    sheet = Sheet(width, panel.top + _MARGIN)
    draw_frame(sheet, panel)
    write_y_labels(sheet, panel, _ROOM)
    for value, label in x_scale.ticks:
        x, _y = panel.at(value, y_scale.low)
        write_lines(sheet, (x, panel.bottom - TICK - 1 - leading(SMALL_SIZE) / 2), [label], "center")
    write_titles(sheet, panel, x_title, y_title)
    at = panel.at(number_of(mark, "x"), number_of(mark, "y"))
    sheet.line([(panel.left, at[1]), at, (at[0], panel.bottom)], weight=_GUIDE_WEIGHT, dashed=True)
    for line in reversed(lines):
        own = line is lines[0]
        sheet.line(
            [panel.at(x, y) for x, y in line.points],
            weight=_OWN_WEIGHT if own else _OTHER_WEIGHT,
            colour=INK if own else BLACK,
            dashed=line.dashed,
        )
    _write_labels(sheet, panel, lines)
    sheet.diamond(at, _MARK_RADIUS, weight=_MARK_WEIGHT)
    _write_mark(sheet, panel, at, text_of(mark, "label"))
    return sheet


def _write_mark(sheet: Sheet, panel: Panel, at: Point, label: str) -> None:
    """Write what the mark stands for at the foot of its guide, on the side that has room."""
    rightward = at[0] + _GAP + widest([label], SMALL_SIZE) <= panel.right
    x = at[0] + _GAP if rightward else at[0] - _GAP
    sheet.text((x, panel.bottom + _GAP), label, Lettering("left" if rightward else "right", size=SMALL_SIZE))


def _write_labels(sheet: Sheet, panel: Panel, lines: Sequence[_Line]) -> None:
    """Write the labels of rising curves right of where each crosses its height; the steepest has room on its left."""
    crossings = [_crossing(line, panel, _LABEL_HEIGHTS[0]) for line in lines]
    steepest = lines[min(range(len(lines)), key=lambda i: (crossings[i][0], -crossings[i][1]))]
    for i, line in enumerate(lines):
        x, y = _crossing(line, panel, _LABEL_HEIGHTS[i % len(_LABEL_HEIGHTS)])
        room = widest([line.label], SMALL_SIZE)
        if line.label and line is steepest and x - _GAP - room > panel.left:
            sheet.text((x - _GAP, y), line.label, Lettering("right", size=SMALL_SIZE))
        elif line.label:
            sheet.text((min(x + _GAP, panel.right - room), y - SMALL_SIZE), line.label, Lettering(size=SMALL_SIZE))


def _crossing(line: _Line, panel: Panel, share: Decimal) -> Point:
    """Return the first point of a curve at a share of the upright scale or above, its last where none is."""
    height = panel.y.low + (panel.y.high - panel.y.low) * share
    return panel.at(*next((point for point in line.points if point[1] >= height), line.points[-1]))


def _scales(lines: list[_Line], most: Decimal) -> tuple[Scale, Scale]:
    xs = [x for line in lines for x, _ in line.points]
    top = max(min(most, _AIR * max(y for line in lines for _, y in line.points)), Decimal(0))
    wanted = min(_X_TICKS, max(1, int(max(xs) - min(xs))))
    return even_scale(min(xs), max(xs), wanted), even_scale(Decimal(0), top, _Y_TICKS)


def _line(part: Mapping[str, Plain]) -> _Line:
    points = tuple((number_of(point, "x"), number_of(point, "y")) for point in parts_of(part, "points"))
    if len(points) < 2:
        raise RenderError("The figure data 'lines' hold a curve of fewer than two points.")
    return _Line(text_of(part, "label"), points, text_of(part, "stroke") == "dashed")


def _with_power(label: str, scale: Scale) -> str:
    power = power_label(scale.power)
    return f"{label} ({power})" if power else label


ROWS_CURVE: Final = Drawing("rows-curve", _draw)

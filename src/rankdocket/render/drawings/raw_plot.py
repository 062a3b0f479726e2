"""The raw plot: values as received, one open circle for each place, its area growing with the rows there."""

from collections.abc import Mapping, Sequence
from decimal import Decimal
from itertools import pairwise
from math import cos, radians, sin
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.render.canvas import SMALL_SIZE, TEXT_SIZE, Lettering, Point, Sheet
from rankdocket.render.drawing import Drawing
from rankdocket.render.panel import (
    TICK,
    TITLE_GAP,
    Panel,
    draw_frame,
    radii,
    read_marks,
    thinning,
    widest,
    write_lines,
    write_titles,
    write_y_labels,
)
from rankdocket.render.plain_data import number_of, part_of, parts_of, text_of
from rankdocket.render.ticks import Scale, even_scale, leading, power_label, wrapped

_RADIUS: Final = 2.1
_WEIGHT: Final = 0.8
_CURVE_WEIGHT: Final = 0.9
_MARGIN: Final = 8.0
_PANEL_HEIGHT: Final = 150.0
_WANTED_TICKS: Final = 4
_Y_LABEL_ROOM: Final = 62.0
_SLANT: Final = 38.0
_LONGEST_SLANTED: Final = 96.0
_INSET: Final = Decimal("0.07")
_HALF: Final = Decimal("0.5")


def _draw(data: Mapping[str, Plain], width: float) -> Sheet:
    marks = read_marks(data)
    x_axis, y_axis = part_of(data, "x"), part_of(data, "y")
    x_scale = _scale(x_axis, [mark.x for mark in marks])
    y_scale = _scale(y_axis, [mark.y for mark in marks])
    y_lines = [line for _, label in y_scale.ticks for line in wrapped(label, _Y_LABEL_ROOM, SMALL_SIZE)]
    y_title = wrapped(_title(y_axis, y_scale), _PANEL_HEIGHT, TEXT_SIZE)
    left = leading(TEXT_SIZE) * len(y_title) + TITLE_GAP + widest(y_lines, SMALL_SIZE) + TICK + 2
    right = width - _MARGIN
    x_title = wrapped(_title(x_axis, x_scale), right - left + _MARGIN, TEXT_SIZE)
    labels = _XLabels(x_scale, right - left)
    if labels.reach > left:
        left = labels.reach
        labels = _XLabels(x_scale, right - left)
    bottom = leading(TEXT_SIZE) * len(x_title) + TITLE_GAP + labels.depth + TICK
    panel = Panel(left, bottom, right, bottom + _PANEL_HEIGHT, x_scale, y_scale)
    sheet = Sheet(width, panel.top + _MARGIN)
    draw_frame(sheet, panel)
    write_y_labels(sheet, panel, _Y_LABEL_ROOM)
    labels.write(sheet, panel)
    write_titles(sheet, panel, x_title, y_title)
    places = [panel.at(mark.x, mark.y) for mark in marks]
    sheet.circles(list(zip(places, radii(marks, _RADIUS), strict=True)), weight=_WEIGHT * thinning(marks), filled=False)
    steps = [(number_of(s, "x_from"), number_of(s, "x_to"), number_of(s, "y")) for s in parts_of(data, "curve")]
    if steps:
        sheet.line(_stairs(panel, steps), weight=_CURVE_WEIGHT)
    return sheet


def _stairs(panel: Panel, steps: Sequence[tuple[Decimal, Decimal, Decimal]]) -> list[Point]:
    """Return the corners of a step curve; between two steps it rises or falls halfway."""
    corners: list[Point] = []
    for x_from, x_to, y in steps:
        start, end = panel.at(x_from, y), panel.at(x_to, y)
        if corners:
            halfway = (corners[-1][0] + start[0]) / 2
            corners += [(halfway, corners[-1][1]), (halfway, start[1])]
        corners += [start, end]
    return corners


class _XLabels:
    """The tick labels of the lower axis: side by side while they have room, wrapped, else slanted."""

    def __init__(self, scale: Scale, length: float) -> None:
        places = [scale.place(value) * length for value, _ in scale.ticks]
        gap = min((b - a for a, b in pairwise(places)), default=length) - 4
        self._lines = [wrapped(label, gap, SMALL_SIZE) for _, label in scale.ticks]
        all_lines = [line for lines in self._lines for line in lines]
        self._slanted = widest(all_lines, SMALL_SIZE) > gap
        if self._slanted:
            self._lines = [wrapped(label, _LONGEST_SLANTED, SMALL_SIZE) for _, label in scale.ticks]
            longest = widest([line for lines in self._lines for line in lines], SMALL_SIZE)
            most = max(len(lines) for lines in self._lines)
            self.depth = longest * sin(radians(_SLANT)) + leading(SMALL_SIZE) * most * cos(radians(_SLANT))
            first = widest(self._lines[0], SMALL_SIZE)
            self.reach = first * cos(radians(_SLANT)) - places[0]
        else:
            self.depth = leading(SMALL_SIZE) * max((len(lines) for lines in self._lines), default=1)
            self.reach = 0.0

    def write(self, sheet: Sheet, panel: Panel) -> None:
        """Write the labels under the ticks of a panel."""
        step = leading(SMALL_SIZE)
        for (value, _), lines in zip(panel.x.ticks, self._lines, strict=True):
            x, y = panel.at(value, panel.y.low)
            if not self._slanted:
                write_lines(sheet, (x, y - TICK - 1 - step * len(lines) / 2), lines, "center")
                continue
            for i, line in enumerate(lines):
                across, down = sin(radians(_SLANT)) * step * i, cos(radians(_SLANT)) * step * i
                at = (x + 2 + across, y - TICK - SMALL_SIZE * 0.7 - down)
                sheet.text(at, line, Lettering("right", size=SMALL_SIZE, turn=_SLANT))


def _scale(axis: Mapping[str, Plain], values: list[Decimal]) -> Scale:
    """Return the range of an axis: declared labels a half step beyond the first and last, else the values with air."""
    ticks = [(number_of(tick, "at"), text_of(tick, "label")) for tick in parts_of(axis, "ticks")]
    if ticks:
        ats = [at for at, _ in ticks] + values
        return Scale(min(ats) - _HALF, max(ats) + _HALF, tuple(sorted(ticks)))
    low, high = min(values, default=Decimal(0)), max(values, default=Decimal(1))
    air = (high - low) * _INSET
    return even_scale(low - air, high + air, _WANTED_TICKS)


def _title(axis: Mapping[str, Plain], scale: Scale) -> str:
    unit = " ".join(part for part in (power_label(scale.power), text_of(axis, "unit")) if part)
    label = text_of(axis, "label")
    return f"{label} ({unit})" if unit else label


RAW_PLOT: Final = Drawing("raw-plot", _draw)

"""The rank plot: midrank against midrank, square, one filled mark for each place."""

from collections.abc import Mapping
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.render.canvas import SMALL_SIZE, TEXT_SIZE, Sheet
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
from rankdocket.render.plain_data import count_of, text_of
from rankdocket.render.ticks import leading, rank_scale, wrapped

_RADIUS: Final = 1.7
_WEIGHT: Final = 0.3
_MARGIN: Final = 8.0
_SIDE: Final = 150.0
_LABEL_ROOM: Final = 60.0


def _draw(data: Mapping[str, Plain], width: float) -> Sheet:
    marks = read_marks(data)
    scale = rank_scale(count_of(data, "n"))
    y_title = wrapped(text_of(data, "y_label"), _SIDE, TEXT_SIZE)
    left = leading(TEXT_SIZE) * len(y_title) + TITLE_GAP + TICK + 2
    left += widest([label for _, label in scale.ticks], SMALL_SIZE)
    side = min(_SIDE, width - _MARGIN - left)
    x_title = wrapped(text_of(data, "x_label"), width - left, TEXT_SIZE)
    bottom = leading(TEXT_SIZE) * len(x_title) + TITLE_GAP + leading(SMALL_SIZE) + TICK
    panel = Panel(left, bottom, left + side, bottom + side, scale, scale)
    sheet = Sheet(width, panel.top + _MARGIN)
    draw_frame(sheet, panel)
    write_y_labels(sheet, panel, _LABEL_ROOM)
    for value, label in scale.ticks:
        x, y = panel.at(value, scale.low)
        write_lines(sheet, (x, y - TICK - 1 - leading(SMALL_SIZE) / 2), [label], "center")
    write_titles(sheet, panel, x_title, y_title)
    places = [panel.at(mark.x, mark.y) for mark in marks]
    sheet.circles(list(zip(places, radii(marks, _RADIUS), strict=True)), weight=_WEIGHT * thinning(marks), filled=True)
    return sheet


RANK_PLOT: Final = Drawing("rank-plot", _draw)

"""The interval strip: one line an association, in plan order, with estimate, interval and size of interest."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.render.canvas import BLACK, INK, SMALL_SIZE, TEXT_SIZE, Lettering, Sheet
from rankdocket.render.drawing import Drawing
from rankdocket.render.fonts import SANS_STRONG
from rankdocket.render.fonts import width as text_width
from rankdocket.render.panel import FRAME_WEIGHT, TICK, TITLE_GAP, widest
from rankdocket.render.plain_data import decimal_of, parts_of, text_of
from rankdocket.render.ticks import Scale, even_scale, leading, wrapped

_NAME_ROOM: Final = 118.0
_WORDS_ROOM: Final = 104.0
_GUTTER: Final = 10.0
_LEAST_ROW: Final = 19.0
_ROW_AIR: Final = 8.0
_WANTED_TICKS: Final = 5
_INTERVAL_WEIGHT: Final = 1.3
_MARK_WEIGHT: Final = 1.0
_MARK_RADIUS: Final = 3.3
_INTEREST_HEIGHT: Final = 4.2
_ONE: Final = Decimal(1)
_AIR: Final = Decimal("0.04")


@dataclass(frozen=True, slots=True)
class _Row:
    name: str
    label: tuple[str, ...]
    words: tuple[str, ...]
    estimate: Decimal | None
    interval: tuple[Decimal, Decimal] | None
    interest: Decimal | None

    @property
    def height(self) -> float:
        lines = max(len(self.label), len(self.words))
        return max(_LEAST_ROW, leading(SMALL_SIZE) * lines + _ROW_AIR)


def _draw(data: Mapping[str, Plain], width: float) -> Sheet:
    lines = parts_of(data, "lines")
    name_column = max((text_width(text_of(line, "name"), SANS_STRONG) * TEXT_SIZE for line in lines), default=0.0) + 6
    rows = [_row(line, _NAME_ROOM - name_column) for line in lines]
    left = name_column + widest([line for row in rows for line in row.label], SMALL_SIZE) + _GUTTER
    right = width - widest([line for row in rows for line in row.words], SMALL_SIZE) - _GUTTER
    scale = _scale(rows)
    title = wrapped(text_of(data, "axis_label"), width, TEXT_SIZE)
    bottom = leading(TEXT_SIZE) * len(title) + TITLE_GAP + leading(SMALL_SIZE) + TICK
    top = bottom + sum(row.height for row in rows)
    sheet = Sheet(width, top + 2)
    strip = _Strip(sheet, scale, left, right)
    strip.axis(bottom, top, title)
    upper = top
    for row in rows:
        strip.row(row, upper - row.height / 2, name_column)
        upper -= row.height
    return sheet


@dataclass(frozen=True, slots=True)
class _Strip:
    sheet: Sheet
    scale: Scale
    left: float
    right: float

    def at(self, value: Decimal) -> float:
        return self.left + self.scale.place(value) * (self.right - self.left)

    def axis(self, bottom: float, top: float, title: Sequence[str]) -> None:
        sheet = self.sheet
        sheet.line([(self.left, bottom), (self.right, bottom)], weight=FRAME_WEIGHT)
        sheet.line([(self.at(Decimal(0)), bottom), (self.at(Decimal(0)), top)], weight=FRAME_WEIGHT)
        for value, label in self.scale.ticks:
            x = self.at(value)
            sheet.line([(x, bottom), (x, bottom - TICK)], weight=FRAME_WEIGHT)
            sheet.text((x, bottom - TICK - 1 - SMALL_SIZE), label, Lettering("center", size=SMALL_SIZE))
        centre = (self.left + self.right) / 2
        for i, line in enumerate(reversed(title)):
            sheet.text((centre, 2.5 + i * leading(TEXT_SIZE)), line, Lettering("center"))

    def row(self, row: _Row, y: float, name_column: float) -> None:
        sheet = self.sheet
        base = y - SMALL_SIZE * 0.34
        step = leading(SMALL_SIZE)
        first = base + step * (len(row.label) - 1) / 2
        sheet.text((0.0, first), row.name, Lettering(strong=True))
        for i, line in enumerate(row.label):
            sheet.text((name_column, first - i * step), line, Lettering(size=SMALL_SIZE))
        start = self.right + _GUTTER
        for i, line in enumerate(row.words):
            sheet.text((start, base + step * (len(row.words) - 1) / 2 - i * step), line, Lettering(size=SMALL_SIZE))
        if row.estimate is None:
            return
        if row.interval is not None:
            low, high = (self.at(value) for value in row.interval)
            sheet.line([(low, y), (high, y)], weight=_INTERVAL_WEIGHT, colour=INK)
        for size in (row.interest, -row.interest) if row.interest else ():
            if self.scale.low <= size <= self.scale.high:
                x = self.at(size)
                sheet.line([(x, y - _INTEREST_HEIGHT), (x, y + _INTEREST_HEIGHT)], weight=FRAME_WEIGHT, colour=BLACK)
        sheet.diamond((self.at(row.estimate), y), _MARK_RADIUS, weight=_MARK_WEIGHT)


def _row(line: Mapping[str, Plain], label_room: float) -> _Row:
    estimate, low, high = (decimal_of(line, name) for name in ("estimate", "low", "high"))
    words = text_of(line, "text") if estimate is not None else text_of(line, "reason") or text_of(line, "text")
    room = _WORDS_ROOM
    return _Row(
        text_of(line, "name"),
        tuple(wrapped(text_of(line, "label"), label_room, SMALL_SIZE)),
        tuple(wrapped(words, room, SMALL_SIZE)),
        estimate,
        (low, high) if low is not None and high is not None else None,
        decimal_of(line, "interest"),
    )


def _scale(rows: Sequence[_Row]) -> Scale:
    """Return a range that holds 0 and everything drawn, with a little air, and never leaves −1 to 1 without need."""
    values = [Decimal(0)]
    for row in rows:
        values += [row.estimate] if row.estimate is not None else []
        values += row.interval or ()
        values += [row.interest, -row.interest] if row.interest else []
    low, high = min(values), max(values)
    if low == high:
        low, high = -_ONE, _ONE
    air = (high - low) * _AIR
    return even_scale(max(low - air, min(low, -_ONE)), min(high + air, max(high, _ONE)), _WANTED_TICKS)


INTERVAL_STRIP: Final = Drawing("interval-strip", _draw)

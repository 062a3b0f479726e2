"""The null picture: how often each coefficient comes about by ordering alone, and where the observed one lies.

A stepped outline stands on a line; rejection regions are hatched under it.  Below that line the observed value has a
lane to itself, and the scale is drawn below the lane, so that no number ever stands in the way of another.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from itertools import pairwise
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.errors import RenderError
from rankdocket.render.canvas import INK, SMALL_SIZE, TEXT_SIZE, Lettering, Point, Sheet
from rankdocket.render.drawing import Drawing
from rankdocket.render.panel import FRAME_WEIGHT, TICK, TITLE_GAP, Panel, widest, write_y_labels
from rankdocket.render.plain_data import decimal_of, number_of, part_of, parts_of, text_of
from rankdocket.render.ticks import Scale, even_scale, leading, power_label, wrapped

_PANEL_HEIGHT: Final = 64.0
_LANE: Final = 12.0
"""Height of the lane between the foot of the outline and the scale, where the observed value stands."""

_MARGIN: Final = 8.0
_GAP: Final = 4.0
"""Least distance between two labels, and between a mark and its number."""

_LABEL_LIFT: Final = 3.0
_CAPTION_LIFT: Final = 2.0
_ZERO_TICK: Final = 5.5
_X_TICKS: Final = 4
_Y_TICKS: Final = 3
_Y_LABEL_ROOM: Final = 40.0

_OUTLINE_WEIGHT: Final = 0.9
_HATCH_WEIGHT: Final = 0.4
_HATCH_DISTANCE: Final = 3.4
"""Distance of the hatch lines along the foot of the outline, in points; they rise at 45 degrees."""

_SHORTEST_HATCH: Final = 0.25
_REGION_WEIGHT: Final = 1.5
"""Weight of the line that shows a region where the outline is too low for a hatch to be seen."""

_MARK_RADIUS: Final = 3.3
_MARK_WEIGHT: Final = 1.0
_SAME_PLACE: Final = 0.05
"""Points below which the end of a step and the start of the next are one place."""

_ONE: Final = Decimal(1)
_ZERO: Final = Decimal(0)
_HALF: Final = Decimal("0.5")
_AIR: Final = Decimal("1.04")
_EVEN_WIDTHS: Final = Decimal("0.01")
"""Part of the widest step by which widths may differ through the rounding of their ends."""

_MOST_REGIONS: Final = 2


@dataclass(frozen=True, slots=True)
class _Step:
    low: Decimal
    high: Decimal
    share: Decimal

    @property
    def width(self) -> Decimal:
        return self.high - self.low


@dataclass(frozen=True, slots=True)
class _Region:
    """A rejection region; where an end is ``None``, it goes on to the end of the axis."""

    low: Decimal | None
    high: Decimal | None
    label: str

    @property
    def critical(self) -> Decimal | None:
        """The end nearest to 0; ``None`` if the region is the whole axis."""
        ends = [end for end in (self.low, self.high) if end is not None]
        return min(ends, key=abs, default=None)


@dataclass(frozen=True, slots=True)
class _Box:
    """A step in points."""

    left: float
    right: float
    top: float


def _draw(data: Mapping[str, Plain], width: float) -> Sheet:
    steps, regions, observed = _steps(data), _regions(data), part_of(data, "observed")
    at = number_of(observed, "at")
    x = _x_scale(steps, regions, at)
    heights, y = _heights(steps)
    caption = wrapped(_with_power(text_of(data, "height_label"), y), width, SMALL_SIZE)
    note = wrapped(text_of(data, "note"), width, SMALL_SIZE)
    left = max(
        _MARGIN,
        widest([label for _, label in x.ticks[:1]], SMALL_SIZE) / 2,
        widest([label for _, label in y.ticks], SMALL_SIZE) + TICK + 2 if y.ticks else 0.0,
    )
    right = width - max(_MARGIN, widest([label for _, label in x.ticks[-1:]], SMALL_SIZE) / 2)
    title = wrapped(_with_power(text_of(data, "axis_label"), x), right - left + _MARGIN, TEXT_SIZE)
    ruler = leading(TEXT_SIZE) * len(title) + TITLE_GAP + leading(SMALL_SIZE) + TICK
    bottom = ruler + _LANE
    panel = Panel(left, bottom, right, bottom + _PANEL_HEIGHT, x, y)
    line = leading(SMALL_SIZE)
    # One line is kept for critical values even without any, so that sheets side by side have one height.
    lift = _LABEL_LIFT + _CAPTION_LIFT + (line if any(region.label for region in regions) or not note else 0.0)
    above = [*caption, *note]
    sheet = Sheet(width, panel.top + lift + line * len(above))
    picture = _Picture(sheet, panel, ruler)
    picture.outline([_box(panel, step, height) for step, height in zip(steps, heights, strict=True)], regions)
    picture.frame()
    picture.critical_values(regions)
    picture.scale(title)
    picture.observed(at, text_of(observed, "label"))
    for i, words in enumerate(reversed(above)):
        sheet.text((0.0, panel.top + lift + i * line), words, Lettering(size=SMALL_SIZE))
    return sheet


@dataclass(frozen=True, slots=True)
class _Picture:
    sheet: Sheet
    panel: Panel
    ruler: float

    def x(self, value: Decimal) -> float:
        return self.panel.at(value, _ZERO)[0]

    def outline(self, boxes: Sequence[_Box], regions: Sequence[_Region]) -> None:
        foot = self.panel.bottom
        hatch = [line for region in regions for line in _hatch(self._within(boxes, region), self.panel)]
        self.sheet.strokes(hatch, weight=_HATCH_WEIGHT)
        self.sheet.strokes(_runs(boxes, foot), weight=_OUTLINE_WEIGHT)

    def frame(self) -> None:
        panel = self.panel
        self.sheet.line([(panel.left, panel.bottom), (panel.right, panel.bottom)], weight=FRAME_WEIGHT)
        if panel.y.ticks:
            self.sheet.line([(panel.left, panel.bottom), (panel.left, panel.top)], weight=FRAME_WEIGHT)
        for value, _ in panel.y.ticks:
            _x, y = panel.at(_ZERO, value)
            self.sheet.line([(panel.left, y), (panel.left - TICK, y)], weight=FRAME_WEIGHT)
        write_y_labels(self.sheet, panel, _Y_LABEL_ROOM)

    def critical_values(self, regions: Sequence[_Region]) -> None:
        panel = self.panel
        labels = []
        for region in regions:
            low, high = self._ends(region)
            if high > low:
                y = panel.bottom - _REGION_WEIGHT / 2
                self.sheet.line([(low, y), (high, y)], weight=_REGION_WEIGHT, colour=INK)
            if region.critical is not None:
                x = self.x(region.critical)
                self.sheet.line([(x, panel.bottom), (x, panel.top)], weight=FRAME_WEIGHT)
            else:
                x = (low + high) / 2
            if region.label:
                labels.append((x, low + high, region.label))
        # Where two regions meet in one value, each label belongs on the side of its region.
        in_order = [(x, label) for x, _, label in sorted(labels)]
        for x, label in _side_by_side(in_order, self.sheet.width):
            self.sheet.text((x, panel.top + _LABEL_LIFT), label, Lettering("center", size=SMALL_SIZE))

    def scale(self, title: Sequence[str]) -> None:
        sheet, panel, ruler = self.sheet, self.panel, self.ruler
        sheet.line([(panel.left, ruler), (panel.right, ruler)], weight=FRAME_WEIGHT)
        for value, label in panel.x.ticks:
            x = self.x(value)
            sheet.line([(x, ruler + (0.0 if value else _ZERO_TICK)), (x, ruler - TICK)], weight=FRAME_WEIGHT)
            sheet.text((x, ruler - TICK - 1 - SMALL_SIZE), label, Lettering("center", size=SMALL_SIZE))
        for i, words in enumerate(reversed(title)):
            at = ((panel.left + panel.right) / 2, 2.5 + i * leading(TEXT_SIZE))
            sheet.text(at, words, Lettering("center"))

    def observed(self, at: Decimal, label: str) -> None:
        """Draw the open diamond, its number on the side away from 0 if there is room."""
        x, y = self.x(at), self.ruler + _LANE / 2
        self.sheet.diamond((x, y), _MARK_RADIUS, weight=_MARK_WEIGHT)
        reach = _MARK_RADIUS + _GAP / 2
        needed = reach + widest([label], SMALL_SIZE)
        rightward = x + needed <= self.sheet.width if at >= 0 else x - needed < self.panel.left
        place = (x + reach if rightward else x - reach, y - SMALL_SIZE * 0.34)
        self.sheet.text(place, label, Lettering("left" if rightward else "right", size=SMALL_SIZE))

    def _ends(self, region: _Region) -> tuple[float, float]:
        low = self.panel.left if region.low is None else max(self.panel.left, self.x(region.low))
        high = self.panel.right if region.high is None else min(self.panel.right, self.x(region.high))
        return low, high

    def _within(self, boxes: Sequence[_Box], region: _Region) -> list[_Box]:
        low, high = self._ends(region)
        return [
            _Box(max(box.left, low), min(box.right, high), box.top)
            for box in boxes
            if box.right > low and box.left < high
        ]


def _box(panel: Panel, step: _Step, height: Decimal) -> _Box:
    left, top = panel.at(step.low, height)
    return _Box(left, panel.at(step.high, height)[0], top)


def _runs(boxes: Sequence[_Box], foot: float) -> list[list[Point]]:
    """Return the outline of steps, a line for each run of them that leaves the foot and comes back to it."""
    runs: list[list[Point]] = []
    end: float | None = None
    for box in boxes:
        if box.top <= foot:
            continue
        start = box.left
        if end is not None and start - end < _SAME_PLACE:
            runs[-1].pop()
            start = end
        else:
            runs.append([(start, foot)])
        runs[-1] += [(start, box.top), (box.right, box.top), (box.right, foot)]
        end = box.right
    return runs


def _hatch(boxes: Sequence[_Box], panel: Panel) -> list[list[Point]]:
    """Return parallel lines that rise at 45 degrees and end where they would leave the steps."""
    if not boxes:
        return []
    foot = panel.bottom
    lines: list[list[Point]] = []
    # Counted from the left end of the panel, so that the lines of all regions are in step.
    first = int((boxes[0].left - _PANEL_HEIGHT - panel.left) // _HATCH_DISTANCE)
    last = int((boxes[-1].right - panel.left) // _HATCH_DISTANCE)
    for i in range(first, last + 1):
        start = panel.left + i * _HATCH_DISTANCE
        parts: list[tuple[float, float]] = []
        for box in boxes:
            low, high = max(box.left, start), min(box.right, start + box.top - foot)
            if high <= low:
                continue
            if parts and low - parts[-1][1] < _SAME_PLACE:
                low = parts.pop()[0]
            parts.append((low, high))
        lines += [
            [(low, foot + low - start), (high, foot + high - start)]
            for low, high in parts
            if high - low >= _SHORTEST_HATCH
        ]
    return lines


def _side_by_side(labels: Sequence[tuple[float, str]], room: float) -> list[tuple[float, str]]:
    """Return the middles of at most two labels, pushed apart where they would touch and kept on the sheet."""
    halves = [widest([label], SMALL_SIZE) / 2 for _, label in labels]
    middles = [x for x, _ in labels]
    if len(labels) == _MOST_REGIONS:
        lacking = max(0.0, sum(halves) + _GAP - (middles[1] - middles[0]))
        middles = [middles[0] - lacking / 2, middles[1] + lacking / 2]
    if middles:
        inward = max(0.0, halves[0] - middles[0]) - max(0.0, middles[-1] + halves[-1] - room)
        middles = [x + inward for x in middles]
    return [(x, label) for x, (_, label) in zip(middles, labels, strict=True)]


def _steps(data: Mapping[str, Plain]) -> tuple[_Step, ...]:
    steps = tuple(
        _Step(number_of(part, "low"), number_of(part, "high"), number_of(part, "share"))
        for part in parts_of(data, "steps")
    )
    if not any(step.share for step in steps):
        raise RenderError("The figure data 'steps' hold no share of anything.")
    if any(step.low >= step.high or not 0 <= step.share <= 1 for step in steps):
        raise RenderError("The figure data 'steps' hold a step without width, or a share that is not within 0 to 1.")
    if any(later.low < earlier.high for earlier, later in pairwise(steps)):
        raise RenderError("The figure data 'steps' do not rise one after another.")
    return steps


def _regions(data: Mapping[str, Plain]) -> tuple[_Region, ...]:
    regions = tuple(_region(part) for part in parts_of(data, "regions"))
    if len(regions) > _MOST_REGIONS:
        raise RenderError(f"The figure data 'regions' are {len(regions)}; at most {_MOST_REGIONS} were expected.")
    return regions


def _region(part: Mapping[str, Plain]) -> _Region:
    low, high = decimal_of(part, "from"), decimal_of(part, "to")
    if low is not None and high is not None and low > high:
        raise RenderError("The figure data 'regions' hold a region that ends before it begins.")
    # No coefficient lies beyond -1 or 1, but the step of the last one reaches half its width further.
    beginning = None if low is not None and low <= -_ONE else low
    end = None if high is not None and high >= _ONE else high
    return _Region(beginning, end, text_of(part, "label"))


def _x_scale(steps: Sequence[_Step], regions: Sequence[_Region], observed: Decimal) -> Scale:
    """Return a range with 0 in its middle: −1 to 1, unless everything drawn lies within half of that."""
    drawn = [steps[0].low, steps[-1].high, observed]
    drawn += [region.critical for region in regions if region.critical is not None]
    reach = max(abs(value) for value in drawn)
    reach = max(reach * _AIR, _ONE) if reach > _HALF else reach * _AIR
    return even_scale(-reach, reach, _X_TICKS)


def _heights(steps: Sequence[_Step]) -> tuple[list[Decimal], Scale]:
    """Return how high each step stands, and the upright scale.

    Steps of one width are as high as their share.  Where widths differ, areas are the shares; the scale then has no
    ticks, because a height by itself says nothing.
    """
    widths = [step.width for step in steps]
    if max(widths) - min(widths) <= max(widths) * _EVEN_WIDTHS:
        heights = [step.share for step in steps]
        return heights, even_scale(_ZERO, max(heights) * _AIR, _Y_TICKS)
    heights = [step.share / step.width for step in steps]
    return heights, Scale(_ZERO, max(heights) * _AIR, ())


def _with_power(label: str, scale: Scale) -> str:
    power = power_label(scale.power)
    return f"{label} ({power})" if power else label


NULL_PICTURE: Final = Drawing("null-picture", _draw)

"""The null picture: a stepped outline, hatched rejection regions, and the observed value in a lane of its own."""

import re
from collections.abc import Iterable
from dataclasses import dataclass, replace
from functools import cached_property
from itertools import combinations, pairwise
from math import exp
from xml.etree import ElementTree as ET

import pytest

from rankdocket.document.model import FigureBlock
from rankdocket.errors import RenderError
from rankdocket.render.canvas import BLACK, INK, PAPER
from rankdocket.render.figures import draw
from render.sample import prose

SVG = "{http://www.w3.org/2000/svg}"
MINUS = "\u2212"

Region = tuple[str | None, str | None, str]


def evenly(shares: Iterable[float], low: float, width: float) -> tuple[dict[str, str], ...]:
    """Steps of one width from ``low`` on."""
    return tuple(
        {"low": f"{low + i * width:.6f}", "high": f"{low + (i + 1) * width:.6f}", "share": f"{share:.8f}"}
        for i, share in enumerate(shares)
    )


def bell(steps: int, spread: float, reach: float) -> tuple[dict[str, str], ...]:
    """A smooth outline of ``steps`` steps from ``-reach`` to ``reach``."""
    width = 2 * reach / steps
    heights = [exp(-((((i + 0.5) * width - reach) / spread) ** 2) / 2) for i in range(steps)]
    return evenly([height / sum(heights) for height in heights], -reach, width)


FIVE_ROWS = evenly(
    [count / 120 for count in (1, 4, 3, 6, 7, 6, 4, 10, 6, 10, 6, 10, 6, 10, 4, 6, 7, 6, 3, 4, 1)], -1.05, 0.1
)
"""The null of rho for n = 5: its 21 frequencies, counted one by one over the 120 orderings."""

ROUGH: tuple[dict[str, str], ...] = tuple(
    {"low": low, "high": high, "share": share}
    for low, high, share in (("-0.5", "-0.3", "0.5"), ("-0.1", "0.3", "0.4"), ("0.9", "1", "0.1"))
)


def figure(
    steps: tuple[dict[str, str], ...] = FIVE_ROWS,
    regions: tuple[Region, ...] = (),
    observed: tuple[str, str] = ("0.7", "0.70"),
    note: str = "",
) -> FigureBlock:
    data = {
        "axis_label": "rho if Shade and Height were unrelated",
        "height_label": "share of all orderings",
        "steps": steps,
        "regions": tuple({"from": low, "to": high, "label": label} for low, high, label in regions),
        "observed": {"at": observed[0], "label": observed[1]},
        "note": note,
    }
    return FigureBlock("null", "1", "null-picture", prose("c"), "words", data)  # type: ignore[arg-type]


TWO_SIDED: tuple[Region, ...] = (("-1", "-0.9", f"{MINUS}0.90"), ("0.9", "1", "0.90"))

CASES = {
    "few steps": figure(regions=TWO_SIDED),
    "smooth": figure(
        bell(100, 0.15, 0.75), (("0.294", None, "0.29"), (None, "-0.294", f"{MINUS}0.29")), ("-0.41", f"{MINUS}0.41")
    ),
    "four hundred": figure(bell(400, 0.2, 1.0), (("0.5", None, "0.50"),), ("-1", f"{MINUS}1.00")),
    "narrow": figure(
        bell(60, 0.03, 0.14), (("0.06", None, "0.060"), (None, "-0.06", f"{MINUS}0.060")), ("0.02", "0.020")
    ),
    "far out": figure(
        bell(60, 0.03, 0.14), (("0.06", None, "0.060"), (None, "-0.06", f"{MINUS}0.060")), ("0.95", "0.950")
    ),
    "no region": figure(note="no coefficient reaches 0.01 with these rows"),
    "long note": figure(note="no coefficient reaches 0.01 with these rows, nor would one if there were a row more"),
    "lopsided": figure(ROUGH, (("0.9", None, "0.90"),), ("0.31", "0.31")),
    "one step": figure(evenly([1.0], -0.05, 0.1), ((None, None, "every value"),), ("0", "0.00")),
    "everything": figure(regions=(("0", None, "from 0"), (None, "0", "to 0")), observed=("0.01", "0.01")),
    "beyond": figure(bell(60, 0.03, 0.14), (("0.3", "1", "0.30"),), ("-0.2", f"{MINUS}0.20")),
    "only the last": figure(regions=(("1", "1", "1.00"),), observed=("1", "1.00")),
    "full": replace(figure(regions=TWO_SIDED), width="full"),
}

every_case = pytest.mark.parametrize("block", CASES.values(), ids=CASES.keys())


@dataclass(frozen=True)
class Drawn:
    """A picture taken apart; heights are counted downward, as in the file."""

    block: FigureBlock

    @cached_property
    def root(self) -> ET.Element:
        return ET.fromstring(draw(self.block).file)

    @cached_property
    def size(self) -> tuple[float, float]:
        width, height = (float(text) for text in self.root.attrib["viewBox"].split()[2:])
        return width, height

    def lines(self, colour: str, weight: str) -> list[list[tuple[float, float]]]:
        """All lines of a colour and weight, each as its points."""
        found = []
        for path in self.root.iter(f"{SVG}path"):
            if path.attrib.get("stroke") == colour and path.attrib.get("stroke-width") == weight:
                for part in path.attrib["d"].split("M")[1:]:
                    numbers = [float(text) for text in re.findall(r"-?[\d.]+", part)]
                    found.append(list(zip(numbers[0::2], numbers[1::2], strict=True)))
        return found

    @cached_property
    def hatch(self) -> list[list[tuple[float, float]]]:
        return self.lines(INK, "0.4")

    @cached_property
    def outline(self) -> list[list[tuple[float, float]]]:
        return self.lines(INK, "0.9")

    @cached_property
    def upright(self) -> list[float]:
        """Where the lines at critical values stand: as high as the panel, and not its frame."""
        thin = self.lines(BLACK, "0.6")
        left = max(line[0][0] for line in thin if line[0][1] == line[1][1] == self.foot and line[0][0] < line[1][0])
        tall = [line[0][0] for line in thin if abs(line[0][1] - line[1][1]) == pytest.approx(64, abs=0.02)]
        return sorted(x for x in tall if x > left)

    @cached_property
    def texts(self) -> list[tuple[str, tuple[float, float, float, float]]]:
        """Every text with its box: left, top, right, bottom."""
        found = []
        for element in self.root.iter(f"{SVG}text"):
            size = float(element.attrib["font-size"].removesuffix("px"))
            length, x, y = (float(element.attrib[name]) for name in ("textLength", "x", "y"))
            x -= {"start": 0.0, "middle": length / 2, "end": length}[element.attrib["text-anchor"]]
            found.append((element.text or "", (x, y - size * 0.7, x + length, y + size * 0.2)))
        return found

    def box(self, words: str) -> tuple[float, float, float, float]:
        return next(box for text, box in self.texts if text == words)

    @cached_property
    def diamond(self) -> tuple[float, float, float, float]:
        (path,) = (path for path in self.root.iter(f"{SVG}path") if path.attrib.get("fill") == PAPER)
        numbers = [float(text) for text in re.findall(r"-?[\d.]+", path.attrib["d"])]
        return min(numbers[0::2]), min(numbers[1::2]), max(numbers[0::2]), max(numbers[1::2])

    @cached_property
    def foot(self) -> float:
        """The line on which the outline stands, the upper of the two that run across."""
        return min(
            line[0][1]
            for line in self.lines(BLACK, "0.6")
            if line[0][1] == line[1][1] and abs(line[0][0] - line[1][0]) > 100
        )


def touch(one: tuple[float, float, float, float], other: tuple[float, float, float, float]) -> bool:
    return not (one[2] <= other[0] or other[2] <= one[0] or one[3] <= other[1] or other[3] <= one[1])


@every_case
def test_no_two_texts_touch_and_none_touches_the_diamond_or_leaves_the_sheet(block: FigureBlock) -> None:
    drawn = Drawn(block)
    width, height = drawn.size
    for (_, one), (_, other) in combinations(drawn.texts, 2):
        assert not touch(one, other)
    for _, (left, top, right, bottom) in drawn.texts:
        assert not touch((left, top, right, bottom), drawn.diamond)
        assert -0.5 <= left < right <= width + 0.5
        assert 0 <= top < bottom <= height


@every_case
def test_no_line_crosses_a_text(block: FigureBlock) -> None:
    drawn = Drawn(block)
    lines = [line for weight in ("0.4", "0.9", "1.5") for line in drawn.lines(INK, weight)]
    for line in [*lines, *drawn.lines(BLACK, "0.6")]:
        for (ax, ay), (bx, by) in pairwise(line):
            box = (min(ax, bx) - 0.01, min(ay, by) - 0.01, max(ax, bx) + 0.01, max(ay, by) + 0.01)
            assert not [words for words, text in drawn.texts if touch(box, text)]


@every_case
def test_every_hatch_line_lies_under_the_outline(block: FigureBlock) -> None:
    drawn = Drawn(block)
    assert bool(drawn.hatch) == (block.data["regions"] != () and block is not CASES["beyond"])
    roofs = [(ax, bx, ay) for run in drawn.outline for (ax, ay), (bx, by) in pairwise(run) if bx > ax and ay == by]
    for (ax, ay), (bx, by) in drawn.hatch:
        assert bx - ax == pytest.approx(ay - by, abs=0.021), "a hatch line rises at 45 degrees"
        assert ay <= drawn.foot + 0.011
        over = [(left, right, top) for left, right, top in roofs if right > ax + 0.02 and left < bx - 0.02]
        assert over
        assert over[0][0] <= ax + 0.02
        assert over[-1][1] >= bx - 0.02
        for _, right, top in over:
            assert ay - (min(bx, right) - ax) >= top - 0.04


@pytest.mark.parametrize("name", ["few steps", "smooth", "far out", "full"])
def test_every_hatch_line_lies_beyond_a_critical_value(name: str) -> None:
    drawn = Drawn(CASES[name])
    lower, upper = drawn.upright
    sides = {(line[1][0] <= lower + 0.011, line[0][0] >= upper - 0.011) for line in drawn.hatch}
    assert sides == {(True, False), (False, True)}


def test_a_region_that_ends_at_one_holds_the_whole_of_the_last_step() -> None:
    """The step of a coefficient of 1 reaches half its width beyond 1, and all of it is in the region."""
    last = figure(regions=(("0.95", "1", "1.00"),))
    open_end = figure(regions=(("0.95", None, "1.00"),))
    assert draw(last).file == draw(open_end).file


def test_regions_that_are_the_whole_axis_hatch_every_step_and_have_no_critical_value() -> None:
    drawn = Drawn(figure(regions=(("-1", "1", ""),)))
    assert drawn.upright == []
    assert min(line[0][0] for line in drawn.hatch) < drawn.outline[0][0][0] + 4
    assert max(line[1][0] for line in drawn.hatch) > drawn.outline[-1][-1][0] - 4


def test_a_region_beyond_the_last_step_is_shown_by_its_critical_value_and_the_line_under_the_axis() -> None:
    drawn = Drawn(CASES["beyond"])
    assert drawn.hatch == []
    (critical,) = drawn.upright
    assert critical > max(x for run in drawn.outline for x, _ in run)
    ((start, _), (end, _)) = drawn.lines(INK, "1.5")[0]
    assert start == critical < end


@every_case
def test_the_outline_rises_from_the_foot_runs_rightward_and_comes_back(block: FigureBlock) -> None:
    drawn = Drawn(block)
    for run in drawn.outline:
        assert run[0][1] == run[-1][1] == drawn.foot
        assert all(ax <= bx and (ax == bx or ay == by) for (ax, ay), (bx, by) in pairwise(run))
        assert all(y <= drawn.foot for _, y in run)
    assert all(one[-1][0] <= other[0][0] for one, other in pairwise(drawn.outline))


def test_steps_of_one_width_are_as_high_as_their_share() -> None:
    drawn = Drawn(figure())
    (run,) = drawn.outline
    tops = [drawn.foot - ay for (ax, ay), (bx, by) in pairwise(run) if bx > ax]
    shares = [float(step["share"]) for step in FIVE_ROWS]
    assert tops == pytest.approx([share * tops[7] / shares[7] for share in shares], abs=0.03)
    assert "0.08" in [words for words, _ in drawn.texts]


def test_steps_of_unlike_widths_have_their_share_as_area_and_no_upright_scale() -> None:
    drawn = Drawn(CASES["lopsided"])
    areas = []
    for (left, foot), (_, top), (right, _), _ in drawn.outline:
        areas.append((right - left) * (foot - top))
    assert areas == pytest.approx([5 * areas[2], 4 * areas[2], areas[2]], rel=0.02)
    assert [words for words, _ in drawn.texts if re.fullmatch(r"[\d.]+", words)] == [
        "0.90",
        "0.0",
        "0.5",
        "1.0",
        "0.31",
    ]


def test_an_empty_step_and_a_gap_are_both_left_open() -> None:
    gap = evenly([0.5], -0.5, 0.1) + evenly([0.5], 0.4, 0.1)
    empty = evenly([0.5, *[0.0] * 8, 0.5], -0.5, 0.1)
    assert len(Drawn(figure(gap)).outline) == 2
    assert Drawn(figure(gap)).outline == Drawn(figure(empty)).outline


def test_places_rise_with_values_and_zero_is_in_the_middle() -> None:
    middles = []
    for value in ("-1.2", "-1", "-0.3", "-0", "0.3", "1"):
        drawn = Drawn(figure(observed=(value, "here")))
        zero = drawn.box("0.0")
        one = drawn.box("1.0")
        x = (drawn.diamond[0] + drawn.diamond[2]) / 2
        middles.append((x - (zero[0] + zero[2]) / 2) / ((one[0] + one[2]) / 2 - (zero[0] + zero[2]) / 2))
    assert middles == pytest.approx([-1.2, -1, -0.3, 0, 0.3, 1], abs=0.002)


def test_the_diamond_stands_between_the_foot_of_the_outline_and_the_numbers_of_the_scale() -> None:
    drawn = Drawn(CASES["few steps"])
    assert drawn.foot < drawn.diamond[1]
    assert drawn.diamond[3] < drawn.box("0.5")[1]
    middle = (drawn.diamond[1] + drawn.diamond[3]) / 2
    top, bottom = drawn.box("0.70")[1::2]
    assert top < middle < bottom


@pytest.mark.parametrize(
    ("steps", "labels"),
    [
        (FIVE_ROWS, [f"{MINUS}1.0", f"{MINUS}0.5", "0.0", "0.5", "1.0"]),
        (bell(60, 0.03, 0.14), [f"{MINUS}0.1", "0.0", "0.1"]),
        (bell(10, 0.002, 0.007), [f"{MINUS}0.005", "0.000", "0.005"]),
    ],
)
def test_the_scale_is_that_of_all_coefficients_or_of_what_is_drawn(
    steps: tuple[dict[str, str], ...], labels: list[str]
) -> None:
    drawn = Drawn(figure(steps, observed=("0", "nought")))
    below = [words for words, box in drawn.texts if box[1] > drawn.diamond[3]]
    assert below[:-1] == labels


def test_no_zero_has_a_minus() -> None:
    drawn = Drawn(figure(regions=(("-0", None, "0.00"),), observed=("-0.0", "0.00")))
    assert not [words for words, _ in drawn.texts if re.fullmatch(rf"[-{MINUS}]0(\.0*)?", words)]
    assert '"-0 ' not in draw(drawn.block).element


def test_labels_of_near_critical_values_stand_side_by_side_in_their_order() -> None:
    drawn = Drawn(CASES["far out"])
    lower, upper = drawn.upright
    left, right = drawn.box(f"{MINUS}0.060"), drawn.box("0.060")
    assert left[2] < right[0]
    assert left[0] < lower < left[2]
    assert right[0] < upper < right[2]
    meeting = Drawn(CASES["everything"])
    assert meeting.box("to 0")[2] < meeting.box("from 0")[0]


def test_the_height_of_a_sheet_is_the_same_whatever_the_data() -> None:
    heights = {Drawn(block).size[1] for name, block in CASES.items() if name != "long note"}
    assert len(heights) == 1
    assert 120 <= heights.pop() <= 140


@every_case
def test_a_picture_is_small_in_our_inks_and_the_same_each_time(block: FigureBlock) -> None:
    svg = draw(block).element
    assert draw(block).element == svg
    assert len(svg) < 20_000
    assert set(re.findall(r"#[0-9a-f]{6}", svg)) == {BLACK, INK, PAPER}
    assert "url(" not in svg
    assert "<pattern" not in svg


@pytest.mark.parametrize(
    "data",
    [
        {"steps": ()},
        {"steps": "1"},
        {"steps": ({"low": "0", "high": "0.1", "share": 1.0},)},
        {"steps": ({"low": "0", "high": "0.1"},)},
        {"steps": ({"low": "0", "high": "0.1", "share": "0"},)},
        {"steps": ({"low": "0", "high": "0.1", "share": "1.2"},)},
        {"steps": ({"low": "0", "high": "0.1", "share": "-0.2"},)},
        {"steps": ({"low": "0", "high": "0.1", "share": "NaN"},)},
        {"steps": ({"low": "0.1", "high": "0.1", "share": "1"},)},
        {"steps": (*evenly([0.5], 0.0, 0.1), *evenly([0.5], 0.05, 0.1))},
        {"regions": ({"from": "0.5", "to": "0.4", "label": ""},)},
        {"regions": ({"from": "half", "to": None, "label": ""},)},
        {"regions": ({"from": "0.5", "to": None, "label": 0.5},)},
        {"regions": ({"from": "0.5", "to": None, "label": ""},) * 3},
        {"observed": None},
        {"observed": {"label": "0.7"}},
        {"observed": {"at": 0.7, "label": "0.70"}},
        {"note": 7},
    ],
)
def test_data_that_are_not_understood_are_refused(data: dict[str, object]) -> None:
    block = figure()
    with pytest.raises(RenderError, match="figure data"):
        draw(replace(block, data={**block.data, **data}))  # type: ignore[dict-item]

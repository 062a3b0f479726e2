"""The drawings: data in, one small SVG with real text out."""

import re
from decimal import Decimal
from xml.etree import ElementTree as ET

import pytest

from rankdocket.document.model import FigureBlock
from rankdocket.errors import RenderError
from rankdocket.render.canvas import BLACK, INK, PAPER
from rankdocket.render.drawings import DRAWINGS
from rankdocket.render.figures import draw
from rankdocket.render.rendition import Rendition
from rankdocket.render.ticks import even_scale, power_label, rank_scale, wrapped
from render.sample import interval_strip, ordered_plot, prose, rank_plot, raw_plot

SVG = "{http://www.w3.org/2000/svg}"
SAMPLES = (raw_plot(), rank_plot(), ordered_plot(), interval_strip())


def tree(figure: FigureBlock) -> ET.Element:
    return ET.fromstring(draw(figure).file)


def texts(figure: FigureBlock) -> list[str]:
    return [element.text or "" for element in tree(figure).iter(f"{SVG}text")]


def circles(figure: FigureBlock) -> list[tuple[float, float, float]]:
    """Centre and radius of every circle, in the order of the points."""
    path = next(e for e in tree(figure).iter(f"{SVG}path") if "C" in e.attrib["d"])
    found = []
    for part in path.attrib["d"].split("z")[:-1]:
        numbers = [float(text) for text in re.findall(r"-?[\d.]+", part)]
        xs, ys = numbers[0::2], numbers[1::2]
        found.append(((max(xs) + min(xs)) / 2, (max(ys) + min(ys)) / 2, (max(xs) - min(xs)) / 2))
    return found


def plot_of(kind: str, points: list[dict[str, object]], **more: object) -> FigureBlock:
    axis = {"label": "a", "unit": "", "ticks": []}
    data = {"x": axis, "y": axis, "x_label": "a", "y_label": "b", "n": 3, "points": points, **more}
    return FigureBlock("key", "1", kind, prose("c"), "words", data)  # type: ignore[arg-type]


def test_the_catalogue_has_each_kind_once() -> None:
    kinds = [drawing.kind for drawing in DRAWINGS]
    assert kinds == ["raw-plot", "rank-plot", "interval-strip", "null-picture", "rows-curve"]


@pytest.mark.parametrize("figure", SAMPLES, ids=lambda figure: figure.key)
def test_a_figure_is_one_svg_that_begins_with_its_alternative(figure: FigureBlock) -> None:
    root = tree(figure)
    assert root.tag == f"{SVG}svg"
    assert root[0].tag == f"{SVG}title"
    assert root[0].text == figure.alternative
    assert root.attrib["aria-labelledby"] == root[0].attrib["id"]


@pytest.mark.parametrize("figure", SAMPLES, ids=lambda figure: figure.key)
def test_only_our_inks_and_no_id_without_the_key_stand_in_it(figure: FigureBlock) -> None:
    svg = draw(figure).element
    assert set(re.findall(r"#[0-9a-f]{6}", svg)) <= {BLACK, INK, PAPER}
    assert all(name.startswith(f"drawing-{figure.key}-") for name in re.findall(r' id="([^"]+)"', svg))
    assert "<style" not in svg
    assert "style=" not in svg
    assert "<metadata" not in svg
    assert "<image" not in svg


@pytest.mark.parametrize("figure", SAMPLES, ids=lambda figure: figure.key)
def test_no_two_texts_overlap_and_none_leaves_the_sheet(figure: FigureBlock) -> None:
    root = tree(figure)
    width, height = (float(text) for text in root.attrib["viewBox"].split()[2:])
    boxes = []
    for element in root.iter(f"{SVG}text"):
        turn = re.match(r"rotate\((-?[\d.]+)", element.attrib["transform"])
        assert turn is not None
        if float(turn[1]) != 0.0:
            continue
        size = float(element.attrib["font-size"].removesuffix("px"))
        length, x, y = (float(element.attrib[name]) for name in ("textLength", "x", "y"))
        x -= {"start": 0.0, "middle": length / 2, "end": length}[element.attrib["text-anchor"]]
        boxes.append((x, y - size * 0.7, x + length, y + size * 0.2))
    assert boxes
    for i, (left, top, right, bottom) in enumerate(boxes):
        assert left >= -0.5
        assert right <= width + 0.5
        assert top >= 0
        assert bottom <= height
        for other in boxes[i + 1 :]:
            assert right <= other[0] or other[2] <= left or bottom <= other[1] or other[3] <= top


def test_the_raw_plot_names_its_axes_with_units_and_takes_a_dollar_as_it_stands() -> None:
    assert "Shade, part of full sun kept off (%)" in texts(raw_plot())
    assert "Height & cost, $ per $ (mm)" in texts(ordered_plot())


def test_ordered_labels_that_would_collide_are_slanted() -> None:
    root = tree(ordered_plot())
    slanted = [e.text for e in root.iter(f"{SVG}text") if "rotate(-38" in e.attrib["transform"]]
    assert slanted == [
        "Not watered at all",
        "Once a fortnight",
        "Weekly",
        "Twice a week",
        "Every second day",
        "Daily or more often",
    ]


def test_a_point_stands_where_its_values_say() -> None:
    figure = plot_of("raw-plot", [{"x": str(x), "y": str(y), "count": 1} for x, y in ((0, 0), (10, 0), (5, 8), (0, 8))])
    (ax, ay, _), (bx, by, _), (cx, cy, _), (dx, dy, _) = circles(figure)
    assert ay == by > cy == dy
    assert ax == dx
    assert cx == pytest.approx((ax + bx) / 2, abs=0.02)


def test_the_step_curve_rises_halfway_between_its_steps() -> None:
    """From the marks of its ends: level, then upright, then level, in thin black."""
    points = [{"x": str(x), "y": str(y), "count": 1} for x, y in ((0, 0), (4, 0), (8, 6), (10, 6))]
    curve = [{"x_from": "0", "x_to": "4", "y": "0"}, {"x_from": "8", "x_to": "10", "y": "6"}]
    bare, curved = (plot_of("raw-plot", points, curve=steps) for steps in ([], curve))
    (a, b, c, d) = ((x, y) for x, y, _ in circles(curved))
    (line,) = {e.attrib["d"] for e in tree(curved).iter(f"{SVG}path")} - {
        e.attrib["d"] for e in tree(bare).iter(f"{SVG}path")
    }
    numbers = [float(text) for text in re.findall(r"-?[\d.]+", line)]
    corners = list(zip(numbers[0::2], numbers[1::2], strict=True))
    halfway = (b[0] + c[0]) / 2
    expected = [a, b, (halfway, b[1]), (halfway, c[1]), c, d]
    assert len(corners) == len(expected)
    for corner, place in zip(corners, expected, strict=True):
        assert corner == pytest.approx(place, abs=0.02)


def test_the_area_of_a_mark_grows_with_its_count() -> None:
    for kind in ("raw-plot", "rank-plot"):
        figure = plot_of(kind, [{"x": "1", "y": "1", "count": 1}, {"x": "2", "y": "3", "count": 9}])
        (_, _, one), (_, _, nine) = circles(figure)
        # Coordinates are written in hundredths of a point.
        assert nine == pytest.approx(3 * one, abs=0.04)


def test_both_axes_of_the_rank_plot_have_one_scale() -> None:
    (ax, ay, _), (bx, by, _) = circles(
        plot_of("rank-plot", [{"x": "1", "y": "1", "count": 1}, {"x": "3", "y": "3", "count": 1}])
    )
    assert bx - ax == pytest.approx(ay - by, abs=0.02)


def test_ten_thousand_points_are_one_path_of_less_than_a_megabyte() -> None:
    points = [{"x": f"{i}", "y": f"{(i * 7919) % 10007}", "count": 1} for i in range(10_000)]
    svg = draw(plot_of("raw-plot", points)).element
    assert svg.count("z") >= 10_000
    assert sum(d.count("z") > 100 for d in re.findall(r' d="([^"]*)"', svg)) == 1
    assert len(svg) < 1_000_000


def test_a_figure_without_points_is_an_empty_plot_not_an_error() -> None:
    for kind in ("raw-plot", "rank-plot"):
        assert not any("C" in e.attrib["d"] for e in tree(plot_of(kind, [])).iter(f"{SVG}path"))


def test_all_points_at_one_place_still_have_a_scale() -> None:
    ((x, y, _),) = circles(plot_of("raw-plot", [{"x": "7", "y": "0", "count": 40}]))
    assert x > 0
    assert y > 0


def test_the_interval_strip_keeps_plan_order_and_prints_reasons() -> None:
    written = texts(interval_strip())
    assert [text for text in written if text in {"A1", "A2", "A3"}] == ["A1", "A2", "A3"]
    assert "0.61 (0.38 to 0.77)" in written
    assert "withheld: the rows stand in time" in written


def test_a_line_without_estimate_has_no_mark() -> None:
    diamonds = [e for e in tree(interval_strip()).iter(f"{SVG}path") if e.attrib.get("fill") == PAPER]
    assert len(diamonds) == 2


def test_the_strip_lays_the_interval_around_the_estimate_and_the_zero_line_between_signs() -> None:
    root = tree(interval_strip())
    moves = [[float(n) for n in re.findall(r"-?[\d.]+", e.attrib["d"])] for e in root.iter(f"{SVG}path")]
    upright = [m for m in moves if len(m) == 4 and m[0] == m[2] and abs(m[1] - m[3]) > 20]
    assert len(upright) == 1
    zero = upright[0][0]
    intervals = [
        [float(n) for n in re.findall(r"-?[\d.]+", e.attrib["d"])]
        for e in root.iter(f"{SVG}path")
        if e.attrib.get("stroke") == INK and e.attrib.get("fill") == "none"
    ]
    (first_low, _, first_high, _), (second_low, _, second_high, _) = intervals
    assert zero < first_low < first_high
    assert second_low < zero <= second_high


@pytest.mark.parametrize(
    "data",
    [
        {"points": [{"x": 1.5, "y": "1", "count": 1}]},
        {"points": [{"x": "NaN", "y": "1", "count": 1}]},
        {"points": [{"x": "one", "y": "1", "count": 1}]},
        {"points": [{"x": "1", "y": "1", "count": 0}]},
        {"points": [{"x": "1", "count": 1}]},
        {"points": ["1"]},
        {"points": "1"},
        {"x": "a"},
        {"x": {"label": 7}},
    ],
)
def test_data_that_are_not_understood_are_refused(data: dict[str, object]) -> None:
    figure = plot_of("raw-plot", [], **{key: value for key, value in data.items() if key != "points"})
    figure = FigureBlock("key", "1", "raw-plot", prose("c"), "words", {**figure.data, **data})  # type: ignore[dict-item]
    with pytest.raises(RenderError, match="figure data"):
        draw(figure)


def test_a_kind_that_nobody_draws_is_refused() -> None:
    with pytest.raises(RenderError, match="'pie'"):
        draw(plot_of("pie", []))


def test_a_rendition_has_a_file_for_each_figure(rendition: Rendition) -> None:
    assert set(rendition.figures) == {figure.key for figure in SAMPLES}
    for svg in rendition.figures.values():
        assert svg.startswith(b'<?xml version="1.0" encoding="UTF-8"?>\n<svg ')


@pytest.mark.parametrize(
    ("low", "high", "labels"),
    [
        ("0", "10", ["0", "2", "4", "6", "8", "10"]),
        ("-0.45", "0.8", ["\u22120.4", "\u22120.2", "0.0", "0.2", "0.4", "0.6", "0.8"]),
        ("0.0031", "0.0079", ["0.004", "0.005", "0.006", "0.007"]),
        ("0", "48000000", ["0", "1", "2", "3", "4"]),
        ("0", "0.00000042", ["0", "1", "2", "3", "4"]),
    ],
)
def test_ticks_are_round_values_within_the_range(low: str, high: str, labels: list[str]) -> None:
    scale = even_scale(Decimal(low), Decimal(high), 5)
    assert [label for _, label in scale.ticks] == labels
    assert all(scale.low <= value <= scale.high for value, _ in scale.ticks)


def test_very_large_and_very_small_ticks_share_a_power_of_ten() -> None:
    assert power_label(even_scale(Decimal(0), Decimal(48_000_000), 5).power) == "× 10⁷"
    assert power_label(even_scale(Decimal(0), Decimal("0.00000042"), 5).power) == "× 10⁻⁷"
    assert power_label(0) == ""


@pytest.mark.parametrize("n", [1, 2, 7, 8, 9, 46, 100, 999, 100_000])
def test_ranks_are_marked_from_one_at_most_about_ten_times(n: int) -> None:
    values = [value for value, _ in rank_scale(n).ticks]
    assert values[0] == 1
    assert values == sorted(set(values))
    assert len(values) <= 9
    assert values[-1] <= n


def test_a_text_is_broken_at_blanks_to_its_room() -> None:
    assert wrapped("one two three", 30.0, 7.0) == ["one two", "three"]
    assert wrapped("incomprehensibilities", 5.0, 7.0) == ["incomprehensibilities"]
    assert wrapped("", 5.0, 7.0) == []

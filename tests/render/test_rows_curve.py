"""The rows curve: one heavy line in the ink, others in black, the plan's mark and its guides."""

import re
from typing import Any
from xml.etree import ElementTree as ET

import pytest

from rankdocket.canonical import Plain
from rankdocket.document.model import FigureBlock, Prose
from rankdocket.errors import RenderError
from rankdocket.render.canvas import BLACK, INK
from rankdocket.render.figures import draw

SVG = "{http://www.w3.org/2000/svg}"


def _points(*pairs: tuple[int, str]) -> list[dict[str, Plain]]:
    return [{"x": str(x), "y": y} for x, y in pairs]


def _data(**more: Plain) -> dict[str, Plain]:
    return {
        "x_label": "complete rows",
        "y_label": "power",
        "most": "1",
        "lines": [
            {"label": "0.40", "stroke": "full", "points": _points((5, "0.1"), (48, "0.8"), (110, "0.99"))},
            {"label": "0.30", "stroke": "dashed", "points": _points((5, "0.05"), (48, "0.5"), (110, "0.9"))},
        ],
        "mark": {"x": "48", "y": "0.8", "label": "48 rows"},
        **more,
    }


def _tree(data: dict[str, Plain]) -> ET.Element:
    return ET.fromstring(draw(FigureBlock("key", "1", "rows-curve", Prose(("c",)), "words", data, "full")).file)


def _strokes(tree: ET.Element) -> list[dict[str, Any]]:
    return [
        element.attrib for element in tree.iter(f"{SVG}path") if element.attrib.get("stroke-width") in {"1.3", "0.7"}
    ]


def test_the_first_curve_is_heavy_and_in_the_ink() -> None:
    """The plan's own curve lies on top, the one beside it is thin, black and dashed."""
    thin, heavy = _strokes(_tree(_data()))
    assert (heavy["stroke"], heavy["stroke-width"]) == (INK, "1.3")
    assert (thin["stroke"], thin["stroke-width"]) == (BLACK, "0.7")
    assert "stroke-dasharray" in thin
    assert "stroke-dasharray" not in heavy


def test_two_inks_and_no_other() -> None:
    """Nothing is drawn in a colour but black, the ink and the paper under the mark."""
    colours = {
        element.attrib[name].lower()
        for element in _tree(_data()).iter()
        for name in ("stroke", "fill")
        if element.attrib.get(name, "none") != "none"
    }
    assert colours <= {BLACK, INK, "#ffffff"}


def test_texts_stand_on_the_sheet_and_apart() -> None:
    """Labels of axes, curves and mark are texts inside the sheet; two curves' labels do not touch."""
    tree = _tree(_data())
    texts = {element.text: element.attrib for element in tree.iter(f"{SVG}text")}
    assert {"complete rows", "power", "48 rows", "0.40", "0.30"} <= texts.keys()
    width = float(tree.attrib["viewBox"].split()[2])
    assert width == pytest.approx(430)


@pytest.mark.parametrize(
    "wrong",
    [
        {"lines": []},
        {"lines": [{"label": "", "stroke": "full", "points": _points((5, "0.1"))}]},
        {"mark": "48"},
        {"most": "much"},
    ],
)
def test_data_it_does_not_understand_are_refused(wrong: dict[str, Plain]) -> None:
    """No curve, a curve of one point, a mark that is none and a limit that is no number draw nothing."""
    with pytest.raises(RenderError):
        _tree(_data(**wrong))


def test_labels_of_crowded_curves_do_not_touch() -> None:
    """Three curves close together: the steepest bears its label on the left, the others one above another."""
    close = [
        {"label": label, "stroke": "full", "points": _points(*((x, str(min(1, x * slope))) for x in range(0, 101, 5)))}
        for label, slope in (("0.0010", 0.0080), ("0.0009", 0.0078), ("0.0011", 0.0082))
    ]
    texts = {element.text: element for element in _tree(_data(lines=close)).iter(f"{SVG}text")}
    own, below, above = (
        tuple(map(float, re.findall(r"-?[\d.]+", texts[label].attrib["transform"])[-2:]))
        if "transform" in texts[label].attrib
        else (float(texts[label].attrib["x"]), float(texts[label].attrib["y"]))
        for label in ("0.0010", "0.0009", "0.0011")
    )
    assert texts["0.0011"].attrib["text-anchor"] == "end"
    assert above[0] < own[0]
    assert abs(own[1] - below[1]) > 7


def test_few_rows_are_marked_by_whole_numbers() -> None:
    """An axis from five to nine rows has no mark between two numbers of rows."""
    line = {"label": "", "stroke": "full", "points": _points((5, "0.8"), (9, "1"))}
    texts = {
        element.text for element in _tree(_data(lines=[line], mark={"x": "6", "y": "0.9", "label": "6 rows"})).iter()
    }
    assert {"5", "6", "7", "8", "9"} <= texts

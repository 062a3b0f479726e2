"""What figures show, as data and in words."""

from dataclasses import replace
from decimal import Decimal

from analysis.invented import Invented, association
from rankdocket.document.model import FigureBlock
from rankdocket.document.prose import text_of
from rankdocket.writing.figures import interval_strip, rank_plot, raw_plot
from writing.reports import demonstration_report, sections_of, study_of_every_finding, told

TIED = Invented(columns={"u": "1 1.0 2 3 1e3", "v": "5 5 4 4 1"})


def test_equal_points_share_a_mark() -> None:
    """1 and 1.0 are one value, and no value is written with an exponent."""
    data = raw_plot(told(TIED.analysed()).story, "A1").data
    assert data["points"] == (
        {"x": "1", "y": "5", "count": 2},
        {"x": "2", "y": "4", "count": 1},
        {"x": "3", "y": "4", "count": 1},
        {"x": "1000", "y": "1", "count": 1},
    )


def test_a_rank_plot_shows_midranks() -> None:
    """Tied values stand at the mean of their places."""
    figure = rank_plot(told(TIED.analysed()).story, "A1")
    assert figure.data["points"] == (
        {"x": "1.5", "y": "4.5", "count": 2},
        {"x": "3", "y": "2.5", "count": 1},
        {"x": "4", "y": "2.5", "count": 1},
        {"x": "5", "y": "1", "count": 1},
    )
    assert (figure.data["n"], figure.data["x_label"]) == (5, "Rank of value of u")


def test_marks_count_every_complete_row_once() -> None:
    """In both plots of every association that has any."""
    for report in (study_of_every_finding(), demonstration_report("weld-smoke")):
        for section in sections_of(report.document):
            for block in section.blocks:
                if isinstance(block, FigureBlock) and block.kind in ("raw-plot", "rank-plot"):
                    rows = report.analysis.results[block.key.rpartition("-")[0]].screened.flow.complete
                    points = block.data["points"]
                    assert isinstance(points, tuple)
                    assert sum(point["count"] for point in points) == rows
                    assert f"{rows} rows" in block.alternative


def test_ordered_labels_are_the_ticks_of_their_axis() -> None:
    """From lowest to highest; numbers get no ticks from here, a pure number no unit."""
    keys = "label: grade, scale: ordered, lowest_to_highest: [poor, fair, good]"
    words = {"u": "label: pH, scale: measured, unit: '1'", "v": keys}
    invented = Invented(columns={"u": "7 6 5 4", "v": "good fair poor poor"}, variables=words)
    figure = raw_plot(told(invented.analysed()).story, "A1")
    assert figure.data["x"] == {"label": "pH", "unit": "", "ticks": ()}
    assert figure.data["y"] == {
        "label": "Grade",
        "unit": "",
        "ticks": ({"at": "1", "label": "poor"}, {"at": "2", "label": "fair"}, {"at": "3", "label": "good"}),
    }


def test_the_strip_has_a_line_for_every_association() -> None:
    """In plan order; what has no estimate says why, what has no interval has none."""
    report = study_of_every_finding()
    figure = interval_strip(report.story)
    lines = figure.data["lines"]
    assert isinstance(lines, tuple)
    assert [line["name"] for line in lines] == list(report.analysis.results)
    found = {line["name"]: line for line in lines}
    assert found["A3"] == {
        "name": "A3",
        "label": "Value of u and value of mixed",
        "estimate": "0.510489510490",
        "low": "-0.130443133342",
        "high": "0.850504540768",
        "text": "0.51 (−0.13 to 0.85)",
        "interest": "0.30",
        "reason": "",
    }
    assert found["A5"]["estimate"] is None
    assert found["A5"]["reason"] == "not estimable: the second variable has one value in all complete rows"
    assert (found["A6"]["estimate"], found["A6"]["text"]) == ("-0.363636363636", "−0.36 (−0.69 to 0.08)")
    few = told(Invented(columns={"u": "1 2 3", "v": "1 3 2"}).analysed())
    (line,) = interval_strip(few.story).data["lines"]  # type: ignore[misc, union-attr]
    assert (line["estimate"], line["low"], line["text"]) == ("0.500000000000", None, "0.50")
    for line in lines:
        if line["low"] is not None:
            assert Decimal(line["low"]) <= Decimal(line["estimate"]) <= Decimal(line["high"])


def test_alternative_texts_tell_the_figure_with_its_numbers() -> None:
    """Axes with their units, how many rows, which way, and the estimate (golden)."""
    report = demonstration_report("gasket-creep")
    raw, rank = raw_plot(report.story, "A1"), rank_plot(report.story, "A1")
    told_in_words = (
        "Rows ranked higher on clamp load tended to be ranked higher on creep; rho 0.85 (95% interval 0.10 to 0.98)."
    )
    assert (
        raw.alternative == f"Scatter of Creep (µm) against Clamp load (N), values as received, 7 rows. {told_in_words} "
        "A rising step curve goes from 4 to 11.5 on the upright axis."
    )
    assert rank.alternative == f"Scatter of Creep (µm) against Clamp load (N), midranks, 7 rows. {told_in_words}"
    assert interval_strip(report.story).alternative == (
        "One line an association, in the order of the plan. A1: 0.85 (95% interval 0.10 to 0.98)."
    )


def test_captions_say_what_a_mark_is() -> None:
    """With the number of rows (golden)."""
    report = demonstration_report("gasket-creep")
    assert (
        text_of(raw_plot(report.story, "A1").caption)
        == "Raw plot: clamp load and creep, one mark a row (n\u00a0=\u00a07). The line is the rising step curve nearest "
        "to the rows."
    )
    assert text_of(interval_strip(report.story).caption).startswith("Estimates (diamonds) with 95% intervals (lines)")


def test_figures_have_keys_and_numbers_of_their_own() -> None:
    """A key is the name of a file."""
    for report in (study_of_every_finding(), demonstration_report("weld-smoke"), told(two_of_one().analysed())):
        blocks = [
            block
            for section in sections_of(report.document)
            for block in section.blocks
            if isinstance(block, FigureBlock)
        ]
        assert len({block.key for block in blocks}) == len({block.number for block in blocks}) == len(blocks)


def two_of_one() -> Invented:
    return replace(
        TIED, associations={"A1": association(), "A2": association("v", "u", more="coefficient: Kendall tau-b")}
    )


def test_a_caption_says_when_marks_stand_for_several_rows() -> None:
    """One mark a row is promised only where every row has a mark of its own."""
    assert "one mark a row" in text_of(raw_plot(demonstration_report("gasket-creep").story, "A1").caption)
    tied = text_of(raw_plot(told(TIED.analysed()).story, "A1").caption)
    assert "a larger mark stands for several equal rows" in tied

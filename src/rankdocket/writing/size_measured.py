"""Rows needed to measure a rho within a width, in words, as a table and as a curve."""

from rankdocket.analysis.sizing import MeasureAnswer
from rankdocket.document.model import FigureBlock, Prose, TableBlock
from rankdocket.document.prose import only, prose, text_of
from rankdocket.writing.phrases import sentences
from rankdocket.writing.size_shown import curve_points
from rankdocket.writing.size_words import Told, rows_table, to_collect, what_ties_leave


def measured_answer(story: Told) -> Prose:
    """Return the answer."""
    numbers = story.numbers
    return sentences(
        prose(
            "For a {level} interval that is {width} wide on average, where rho is {rho}, {rows} complete rows are needed.",
            level=numbers.percent("question/level"),
            width=numbers.level("question/width"),
            rho=story.rho("question/rho"),
            rows=numbers.whole("rows"),
        ),
        what_ties_leave(story),
        to_collect(story),
    )


def measured_rows(story: Told) -> TableBlock:
    """Return the table: rows rho, columns width."""
    widths = _answer(story).widths
    heads = tuple(
        (prose("Width {width}", width=story.numbers.level(f"table/widths/{i}")), f"width_{width}")
        for i, width in enumerate(widths)
    )
    return rows_table(
        story, heads, only("Complete rows needed, by the rho expected and the mean width of its interval.")
    )


def measured(story: Told) -> Prose:
    """Return what the rows needed amount to, and how much the simulated factor makes of it."""
    numbers = story.numbers
    return prose(
        "With {rows} rows the mean width is {width}, {factor} times that of the formula of Bonett and Wright, which "
        "alone would ask for {textbook} rows.",
        rows=numbers.whole("rows"),
        width=numbers.coefficient("width", 3),
        factor=numbers.coefficient("factor", 3),
        textbook=numbers.whole("textbook/rows"),
    )


def measured_figure(story: Told) -> FigureBlock:
    """Return the curve: mean width by number of rows."""
    numbers = story.numbers
    caption = prose(
        "Mean width of the interval by the number of complete rows, where rho is {rho}. Heavy line: the interval of "
        "this program; dashed: the formula of Bonett and Wright. Diamond: the plan, {rows} rows.",
        rho=story.rho("question/rho"),
        rows=numbers.whole("rows"),
    )
    return FigureBlock(
        "width",
        "1",
        "rows-curve",
        caption,
        text_of(caption),
        {
            "x_label": "complete rows",
            "y_label": "mean width of the interval",
            "most": "2",
            "lines": [
                {"label": "", "stroke": stroke, "points": curve_points(story, i, "width")}
                for i, stroke in enumerate(("full", "dashed"))
            ],
            "mark": {
                "x": numbers.whole("rows").exact,
                "y": numbers.coefficient("width").exact,
                "label": f"{numbers.whole('rows').text} rows",
            },
        },
        "full",
    )


def _answer(story: Told) -> MeasureAnswer:
    if not isinstance(story.answer, MeasureAnswer):
        raise TypeError("this plan measures nothing")
    return story.answer

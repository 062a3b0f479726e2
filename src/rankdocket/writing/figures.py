"""What each figure shows, as plain data, with its alternative text; how it looks is the renderer’s business."""

from collections import Counter

from rankdocket.analysis.filing import half
from rankdocket.analysis.results import AssociationAnalysis, CompleteRow, Estimate
from rankdocket.canonical import Plain
from rankdocket.document.model import FigureBlock, Prose
from rankdocket.document.prose import only, prose, text_of
from rankdocket.stats.interval import Interval
from rankdocket.study.spec import VariableSpec
from rankdocket.writing.intervals import interval_cell, intervals_hold
from rankdocket.writing.phrases import (
    N,
    address,
    capitalised,
    coefficient_symbol,
    direction_sentence,
    estimate_with_interval,
    label,
    label_with_unit,
    level,
    sentences,
    state_word,
    variables_of,
)
from rankdocket.writing.section import Story
from rankdocket.writing.shape import curve_caption, curve_data, curve_in_words


def interval_strip(story: Story) -> FigureBlock:
    """Return all associations in plan order: estimate, interval, zero and the smallest size of interest."""
    lines = tuple(_strip_line(story, name, result) for name, result in story.analysis.results.items())
    alternative = "; ".join(
        f"{name}: {text_of(estimate_with_interval(story, name))}" for name in story.analysis.results
    )
    return FigureBlock(
        key="interval-strip",
        number="1",
        kind="interval-strip",
        caption=prose(
            "Estimates (diamonds) with {level} intervals (lines); short ticks mark the smallest size of interest. An "
            "association without an estimate keeps its line. {intervals}",
            level=level(story),
            intervals=intervals_hold(story),
        ),
        alternative=f"One line an association, in the order of the plan. {alternative}.",
        data={"axis_label": "coefficient", "lines": lines},
        width="full",
    )


def _strip_line(story: Story, name: str, result: AssociationAnalysis) -> Plain:
    x, y = variables_of(story, result.screened.spec)
    size = result.screened.spec.hypothesis.smallest_of_interest
    line: dict[str, Plain] = {
        "name": name,
        "label": f"{capitalised(x.label)} and {y.label}",
        "estimate": None,
        "low": None,
        "high": None,
        "text": "",
        "interest": None if size is None else str(size),
        "reason": "",
    }
    if not isinstance(result.estimate, Estimate):
        return {**line, "reason": state_word(result)}
    value = story.numbers.coefficient(address(name, "estimate", "value"))
    line["estimate"], line["text"] = value.exact, value.text
    if isinstance(result.interval, Interval):
        spread = interval_cell(story, name)
        line["low"] = story.numbers.coefficient(address(name, "interval", "low")).exact
        line["high"] = story.numbers.coefficient(address(name, "interval", "high")).exact
        line["text"] = f"{value.text} ({text_of(spread)})"
    return line


def raw_plot(story: Story, name: str) -> FigureBlock:
    """Return the values as received, one mark a row; equal points share a mark."""
    result = story.analysis.results[name]
    x, y = variables_of(story, result.screened.spec)
    # Counted as numbers: 1.0 and 1 are one point.
    points = Counter((row.x, row.y) for row in result.screened.rows)
    return FigureBlock(
        key=f"{name}-raw",
        number=f"{name}a",
        kind="raw-plot",
        caption=sentences(
            _caption(
                "Raw plot: {x} and {y}, one mark a row ({n}\u00a0=\u00a0{rows})."
                if len(points) == len(result.screened.rows)
                else "Raw plot: {x} and {y}; a larger mark stands for several equal rows ({n}\u00a0=\u00a0{rows}).",
                story,
                name,
            ),
            curve_caption(story, name),
        ),
        alternative=_alternative(story, name, "values as received") + curve_in_words(story, name),
        data={
            "x": _axis(story, x),
            "y": _axis(story, y),
            "points": tuple({"x": f"{px:f}", "y": f"{py:f}", "count": rows} for (px, py), rows in points.items()),
            "curve": curve_data(story, name),
        },
    )


def rank_plot(story: Story, name: str) -> FigureBlock:
    """Return midrank against midrank; ties stand out as rows and columns."""
    result = story.analysis.results[name]
    x, y = variables_of(story, result.screened.spec)
    points = Counter(_midranks(row) for row in result.screened.rows)
    return FigureBlock(
        key=f"{name}-rank",
        number=f"{name}b",
        kind="rank-plot",
        caption=_caption(
            "Rank plot: midranks of {x} and {y}; the area of a mark counts its rows ({n}\u00a0=\u00a0{rows}).",
            story,
            name,
        ),
        alternative=_alternative(story, name, "midranks"),
        data={
            "x_label": _rank_label(x),
            "y_label": _rank_label(y),
            "n": len(result.screened.rows),
            "points": tuple({"x": px, "y": py, "count": rows} for (px, py), rows in points.items()),
        },
    )


def _rank_label(variable: VariableSpec) -> str:
    return capitalised(variable.label) if variable.scale == "already ranked" else f"Rank of {variable.label}"


def _midranks(row: CompleteRow) -> tuple[str, str]:
    return half(row.x_doubled_rank), half(row.y_doubled_rank)


def _axis(story: Story, variable: VariableSpec) -> Plain:
    labels = story.analysis.data.variables[variable.name].labels
    return {
        "label": capitalised(variable.label),
        "unit": "" if variable.unit in (None, "1") else variable.unit,
        "ticks": tuple({"at": str(rank), "label": text} for rank, text in enumerate(labels, start=1)),
    }


def _caption(template: str, story: Story, name: str) -> Prose:
    x, y = variables_of(story, story.analysis.results[name].screened.spec)
    return prose(template, x=label(x), y=label(y), n=N, rows=story.numbers.whole(address(name, "rows", "complete")))


def _alternative(story: Story, name: str, what: str) -> str:
    result = story.analysis.results[name]
    x, y = variables_of(story, result.screened.spec)
    rows = story.numbers.whole(address(name, "rows", "complete"))
    words = text_of(direction_sentence(story, name))
    return (
        f"Scatter of {text_of(only(label_with_unit(y)))} against {text_of(only(label_with_unit(x)))}, {what}, {rows.text} rows. "
        f"{words}; {coefficient_symbol(result.screened.spec)} {text_of(estimate_with_interval(story, name))}."
    )

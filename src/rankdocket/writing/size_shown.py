"""Rows needed to show a rho, in words, as a table and as a curve."""

from collections.abc import Mapping
from dataclasses import replace

from rankdocket.analysis.sizing import ShowAnswer
from rankdocket.canonical import Plain
from rankdocket.document.model import FigureBlock, Prose, TableBlock
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import joined, only, prose, text_of
from rankdocket.writing.phrases import sentences
from rankdocket.writing.size_words import Told, rows_table, to_collect, what_ties_leave


def shown_answer(story: Told) -> Prose:
    """Return the answer."""
    numbers = story.numbers
    return sentences(
        prose(
            "To show a rho of {rho} with power {power}, {rows} complete rows are needed{by}{way}.",
            rho=story.rho("question/rho"),
            power=numbers.level("question/power"),
            rows=numbers.whole("rows"),
            by=" by a formula that tends to overstate the power with so few rows"
            if _answer(story).is_overstated
            else "",
            way=_way(story),
        ),
        what_ties_leave(story),
        to_collect(story),
    )


def _way(story: Told) -> Prose:
    numbers = story.numbers
    question = _answer(story).question
    sides = "two-sided" if question.sidedness == "two-sided" else "one-sided, on the side of that rho"
    if question.questions == 1:
        return prose(", tested at {alpha} {sides}", alpha=numbers.level("question/alpha"), sides=sides)
    return prose(
        ", where {questions} questions share an alpha of {alpha}, each tested at {each} {sides}",
        questions=numbers.whole("question/questions"),
        alpha=numbers.level("question/alpha"),
        each=numbers.coefficient("question/alpha_each", 4),
        sides=sides,
    )


def shown_rows(story: Told) -> TableBlock:
    """Return the table: rows rho, columns power."""
    powers = _answer(story).powers
    heads = tuple(
        (prose("Power {power}", power=story.numbers.level(f"table/powers/{i}")), f"power_{power}")
        for i, power in enumerate(powers)
    )
    table = rows_table(story, heads, only("Complete rows needed, by the rho to be shown and the power."))
    if not _answer(story).has_overstated_lines:
        return table
    note = prose(
        "Where fewer than {least} rows stand, the formula tends to overstate the power; the exact test can have less.",
        least=story.numbers.whole("formula_from"),
    )
    return replace(table, notes=(*table.notes, note))


def shown_with_rows(story: Told) -> Prose:
    """Return what the rows needed amount to."""
    numbers = story.numbers
    rows = numbers.whole("rows")
    parts = []
    if story.has("power"):
        template = (
            "With {rows} rows the power is {power} by the formula, though the exact test can have less"
            if _answer(story).is_overstated
            else "With {rows} rows the power is {power}"
        )
        parts.append(prose(template, rows=rows, power=numbers.coefficient("power", 3)))
    if story.has("smallest_rho"):
        parts.append(
            prose(
                "the smallest rho found with power {power} is {smallest} in size",
                power=numbers.level("question/power"),
                smallest=numbers.coefficient("smallest_rho", 3),
            )
        )
    plan = prose("{parts}.", parts=joined(tuple(parts), ", and ")) if parts else only("")
    return sentences(plan, _width(story), _fewest(story), _compared(story))


def _width(story: Told) -> Prose:
    level = story.numbers.percent("question/level")
    if not story.has("interval_width"):
        return prose(
            "How wide the {level} interval will be is not said: {reason}.",
            level=level,
            reason=story.reason("interval_width"),
        )
    return prose(
        "The {level} interval will be about {width} wide.",
        level=level,
        width=story.numbers.coefficient("interval_width", 2),
    )


def _fewest(story: Told) -> Prose:
    return prose(
        "With fewer than {fewest} rows not even perfect order without ties could reach that level.",
        fewest=story.numbers.whole("fewest_attainable"),
    )


def _compared(story: Told) -> Prose:
    rows = {
        name: story.numbers.whole(f"by_form/{key}/rows")
        for name, key in (("one", "Bonett-Wright"), ("other", "Fieller-Hartley-Pearson"))
    }
    return prose(
        "For comparison with printed tables: one variance by Bonett and Wright asks for {one} rows, that of Fieller, "
        "Hartley and Pearson for {other}.",
        **rows,
    )


def shown_figure(story: Told) -> FigureBlock:
    """Return the curve: power by number of rows."""
    numbers = story.numbers
    curves = range(len(_answer(story).curves))
    rhos = [story.rho(f"curves/{i}/rho") for i in curves]
    caption = prose(
        "Power by the number of complete rows. Each line bears its rho; the heavy one is that to be shown, {rho}. "
        "Diamond: the plan, {rows} rows.",
        rho=rhos[0],
        rows=numbers.whole("rows"),
    )
    power = numbers.coefficient("power", 3)
    return FigureBlock(
        "power",
        "1",
        "rows-curve",
        caption,
        f"{text_of(caption)} With them the power is {power.text} by the formula.",
        {
            "x_label": "complete rows",
            "y_label": "power",
            "most": "1",
            "lines": [
                {"label": rhos[i].text, "stroke": "full", "points": curve_points(story, i, "power")} for i in curves
            ],
            "mark": {
                "x": numbers.whole("rows").exact,
                "y": power.exact,
                "label": f"{numbers.whole('rows').text} rows",
            },
        },
        "full",
    )


def curve_points(story: Told, position: int, name: str) -> list[Mapping[str, Plain]]:
    """Return the points of a filed curve as a drawing takes them."""
    found = look_up(story.plain, f"curves/{position}/points")
    if not isinstance(found, (list, tuple)):
        raise TypeError(f"curve {position} has no points")
    base = f"curves/{position}/points"
    return [
        {
            "x": str(look_up(story.plain, f"{base}/{i}/rows")),
            "y": str(look_up(story.plain, f"{base}/{i}/{name}")),
        }
        for i in range(len(found))
    ]


def _answer(story: Told) -> ShowAnswer:
    if not isinstance(story.answer, ShowAnswer):
        raise TypeError("this plan shows nothing")
    return story.answer

"""The look at the shape in words: the step curve of the raw plot, Chatterjee’s xi, and what the methods text says."""

from rankdocket.analysis.results import RankTest
from rankdocket.canonical import Plain
from rankdocket.document.model import Prose
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import only, prose
from rankdocket.writing.phrases import address, p_equals
from rankdocket.writing.section import Story


def xi_rows(story: Story, name: str) -> list[tuple[str, Prose]]:
    """Return xi both ways for the numbers of a spread: a diagnostic, no finding."""
    if story.analysis.results[name].shape is None:
        return []
    return [
        (
            "Chatterjee’s xi",
            prose(
                "y on x {y_on_x}; x on y {x_on_y}. A diagnostic of shape without a finding{null}",
                y_on_x=_xi(story, name, "xi_y_on_x"),
                x_on_y=_xi(story, name, "xi_x_on_y"),
                null="; p-values of the upper tail, approximate"
                if story.numbers.has(address(name, "shape", "xi_y_on_x", "p"))
                else "",
            ),
        )
    ]


def _xi(story: Story, name: str, key: str) -> Prose:
    value = story.numbers.coefficient(address(name, "shape", key, "value"))
    p = address(name, "shape", key, "p")
    if not story.numbers.has(p):
        return only(value)
    return prose("{value} ({p})", value=value, p=p_equals(story, p))


def curve_data(story: Story, name: str) -> tuple[dict[str, Plain], ...]:
    """Return the steps of the curve that the raw plot shows, as filed."""
    if story.analysis.results[name].shape is None:
        return ()
    at = address(name, "shape", "curve")
    x_from, x_to, y = (look_up(story.plain, f"{at}/{key}") for key in ("x_from", "x_to", "y"))
    assert isinstance(x_from, list)
    assert isinstance(x_to, list)
    assert isinstance(y, list)
    return tuple(
        {"x_from": first, "x_to": last, "y": height} for first, last, height in zip(x_from, x_to, y, strict=True)
    )


def curve_caption(story: Story, name: str) -> Prose:
    """Return what the caption says of the line."""
    shape = story.analysis.results[name].shape
    if shape is None:
        return only("")
    if len(shape.curve) == shape.steps:
        return prose("The line is the {trend} step curve nearest to the rows.", trend=shape.trend)
    return prose(
        "The line is the {trend} step curve nearest to the rows, its {steps} steps merged to {drawn} for the picture.",
        trend=shape.trend,
        steps=story.numbers.whole(address(name, "shape", "steps")),
        drawn=story.numbers.whole(address(name, "shape", "steps_drawn")),
    )


def curve_in_words(story: Story, name: str) -> str:
    """Return the line for the alternative text, with a blank before it: from where to where it goes."""
    shape = story.analysis.results[name].shape
    if shape is None:
        return ""
    heights = [
        story.numbers.as_filed(address(name, "shape", "curve", "y", str(at))) for at in (0, len(shape.curve) - 1)
    ]
    return f" A {shape.trend} step curve goes from {heights[0].text} to {heights[1].text} on the upright axis."


def any_shape(story: Story) -> bool:
    """Return whether any association has a look at its shape."""
    return any(result.shape is not None for result in story.analysis.results.values())


def any_xi_null(story: Story) -> bool:
    """Return whether the null of xi is given anywhere."""
    return any(
        result.shape is not None and isinstance(result.test, RankTest) for result in story.analysis.results.values()
    )

"""The null's picture as plain data: its outline, where it rejects, what was observed, and all of it in words."""

from itertools import pairwise

from rankdocket.analysis.results import RankTest
from rankdocket.canonical import Plain
from rankdocket.document.model import FigureBlock
from rankdocket.document.numbers import MINUS, look_up
from rankdocket.document.prose import prose
from rankdocket.writing.nulls import critical_number
from rankdocket.writing.phrases import P, address, coefficient_symbol
from rankdocket.writing.section import Story


def null_picture(story: Story, name: str) -> tuple[FigureBlock, ...]:
    """Return the null with its rejection regions and the observed value; nothing where it was not laid out."""
    result = story.analysis.results[name]
    if not isinstance(result.test, RankTest) or not result.test.null.bars:
        return ()
    spec = result.screened.spec
    symbol = coefficient_symbol(spec)
    observed = story.numbers.coefficient(address(name, "estimate", "value"))
    edges, shares = (look_up(story.plain, address(name, "null", part)) for part in ("edges", "shares"))
    assert isinstance(edges, list)
    assert isinstance(shares, list)
    regions = _regions(story, name)
    drawn = result.test.choice.needs_draws
    return (
        FigureBlock(
            key=f"{name}-null",
            number=f"{name}c",
            kind="null-picture",
            caption=prose(
                "Null of {symbol}: {what}. Hatched: {hatched}; diamond: observed.",
                symbol=symbol,
                what=_what_is_drawn(result.test),
                hatched=prose(
                    "values whose {p} is alpha, {alpha}, or less", p=P, alpha=story.numbers.level("inference/alpha")
                )
                if regions
                else "nothing, since no attainable value reaches alpha",
            ),
            alternative=_null_in_words(story, name),
            data={
                "axis_label": f"{symbol} over {'the drawn' if drawn else 'all'} orderings of the rows",
                "height_label": "share of drawn orderings" if drawn else "share of all orderings",
                "steps": tuple(
                    {"low": low, "high": high, "share": share}
                    for (low, high), share in zip(pairwise(edges), shares, strict=True)
                ),
                "regions": regions,
                "observed": {"at": observed.exact, "label": observed.text},
                "note": "" if regions else "no attainable value reaches alpha",
            },
            width="full",
        ),
    )


def _what_is_drawn(test: RankTest) -> str:
    match test.choice.route:
        case "counted beforehand" | "whole":
            return "how many of all orderings of the rows give each value, ties kept"
        case "draws":
            return "how many of the drawn orderings give each value"
        case "series":
            return "the share of all orderings for each stretch of values, by the series"
        case "tails, whole numbers" | "tails, doubles":
            return "the share of all orderings for each stretch of values, ties kept"


def _regions(story: Story, name: str) -> tuple[Plain, ...]:
    """Return the rejection regions of the test that decides, with the values at which they begin."""
    test = story.analysis.results[name].test
    if not isinstance(test, RankTest) or test.null.critical is None:
        return ()
    critical = test.null.critical.toward(test.direction)
    if critical is None:
        return ()
    value = critical_number(story, name, test.direction)
    edge = str(look_up(story.plain, address(name, "null", "critical", test.direction, "edge")))
    above: Plain = {"from": edge, "to": None, "label": value.text}
    below: Plain = {"from": None, "to": edge, "label": value.text}
    match test.direction:
        case "greater":
            return (above,)
        case "less":
            return (below,)
        case "two-sided":
            mirrored: Plain = {"from": None, "to": f"-{edge}", "label": f"{MINUS}{value.text}"}
            return (mirrored, above)


def _null_in_words(story: Story, name: str) -> str:
    """Return the picture in words, with the counts that it stands for."""
    test = story.analysis.results[name].test
    assert isinstance(test, RankTest)
    spec = story.analysis.results[name].screened.spec
    symbol, drawn = coefficient_symbol(spec), "drawn " if test.choice.needs_draws else ""
    extreme = {"two-sided": "at least as far from zero", "greater": "at least as large", "less": "at least as small"}
    at = address(name, "null", "critical", test.direction)
    observed = story.numbers.coefficient(address(name, "estimate", "value"))
    words = [
        f"Stepped outline of the null of {symbol} over {drawn}orderings of the rows.",
        f"Observed {observed.text}: {_count_in_words(story, address(name, 'test'), drawn)} {extreme[test.direction]}.",
    ]
    if test.null.critical is not None and test.null.critical.toward(test.direction) is not None:
        value = critical_number(story, name, test.direction)
        count = _count_in_words(story, at, drawn)
        words.append(f"Critical value, {test.direction}, {value.text}: {count} {extreme[test.direction]}.")
    else:
        words.append("No attainable value reaches alpha.")
    return " ".join(words)


def _count_in_words(story: Story, at: str, drawn: str) -> str:
    """Return "122 of 5,040 orderings", or the share where there is no count."""
    numbers = story.numbers
    if not numbers.has(f"{at}/of"):
        return f"a share {numbers.p_value(f'{at}/p').text} of all orderings is"
    return f"{numbers.whole(f'{at}/count').text} of {numbers.whole(f'{at}/of').text} {drawn}orderings are"

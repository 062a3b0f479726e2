"""The null's picture as plain data: its outline, where it rejects, what was observed, and all of it in words."""

from rankdocket.analysis.results import AssociationAnalysis, RankTest
from rankdocket.canonical import Plain
from rankdocket.document.model import FigureBlock
from rankdocket.document.numbers import MINUS, look_up
from rankdocket.document.prose import prose
from rankdocket.writing.nulls import critical_number
from rankdocket.writing.phrases import MOST_PRINTED, P, address, coefficient_symbol
from rankdocket.writing.section import Story


def null_picture(story: Story, name: str) -> tuple[FigureBlock, ...]:
    """Return the null with its rejection regions and the observed value; nothing where it was not laid out."""
    result = story.analysis.results[name]
    if not isinstance(result.test, RankTest) or result.test.null.picture is None:
        return ()
    spec = result.screened.spec
    symbol = coefficient_symbol(spec)
    observed = story.numbers.coefficient(address(name, "estimate", "value"))
    bars = look_up(story.plain, address(name, "null", "bars"))
    assert isinstance(bars, dict)
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
                what=_what_is_drawn(result, result.test),
                hatched=prose(
                    "values whose {p} is alpha, {alpha}, or less", p=P, alpha=story.numbers.level("inference/alpha")
                )
                if regions
                else f"nothing, since {_why_none(drawn=drawn)}",
            ),
            alternative=_null_in_words(story, name),
            data={
                "axis_label": f"{symbol} over {'the drawn' if drawn else 'all'} orderings of the rows",
                "height_label": "share of drawn orderings" if drawn else "share of all orderings",
                "steps": tuple(
                    {"low": low, "high": high, "share": share}
                    for low, high, share in zip(bars["low"], bars["high"], bars["share"], strict=True)
                ),
                "regions": regions,
                "observed": {"at": observed.exact, "label": observed.text},
                "note": "" if regions else _why_none(drawn=drawn),
            },
            width="full",
        ),
    )


def _why_none(*, drawn: bool) -> str:
    return "these draws are too few to place a critical value" if drawn else "no attainable value reaches alpha"


def _what_is_drawn(result: AssociationAnalysis, test: RankTest) -> str:
    ties = ", given the ties" if result.screened.x_ties.has_ties or result.screened.y_ties.has_ties else ""
    match test.choice.route:
        case "draws":
            return "the share of the drawn orderings at each value or stretch of values"
        case "series":
            return "the share of all orderings at each stretch of values, by the series"
        case _:
            return f"the share of all orderings at each value or stretch of values{ties}"


def _regions(story: Story, name: str) -> tuple[Plain, ...]:
    """Return the rejection regions of the test that decides, with the values at which they begin."""
    test = story.analysis.results[name].test
    if not isinstance(test, RankTest) or test.null.critical is None:
        return ()
    critical = test.null.critical.toward(test.direction)
    if critical is None:
        return ()
    value = critical_number(story, name, test.direction)
    at = address(name, "null", "critical", test.direction)
    edge = str(look_up(story.plain, f"{at}/edge"))
    above: Plain = {"from": edge, "to": None, "label": value.text}
    below: Plain = {"from": None, "to": edge, "label": value.text}
    match test.direction:
        case "greater":
            return (above,)
        case "less":
            return (below,)
        case "two-sided":
            if critical.opposite is None:
                return (above,)
            opposite = str(look_up(story.plain, f"{at}/opposite_edge"))
            return ({"from": None, "to": opposite, "label": f"{MINUS}{value.text}"}, above)


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
        words.append(f"{_why_none(drawn=test.choice.needs_draws).capitalize()}.")
    return " ".join(words)


def _count_in_words(story: Story, at: str, drawn: str) -> str:
    """Return "122 of 5,040 orderings", or the share where there is no count."""
    numbers = story.numbers
    if not numbers.has(f"{at}/of") or int(numbers.whole(f"{at}/of").exact) > MOST_PRINTED:
        return f"a share {numbers.p_value(f'{at}/p').text} of all {drawn}orderings is"
    return f"{numbers.whole(f'{at}/count').text} of {numbers.whole(f'{at}/of').text} {drawn}orderings are"

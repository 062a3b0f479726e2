"""The null in words: which one and why, the error of its p-value, the draws, critical values."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Final, TypeAlias

from rankdocket.analysis.null_plain import UNKNOWN, UNPLACED, UNREACHED
from rankdocket.analysis.results import RankTest
from rankdocket.document.model import Number, Prose, Supplied
from rankdocket.document.prose import joined, only, prose
from rankdocket.stats.choose_null import Route
from rankdocket.stats.null import NullMethod
from rankdocket.stats.nulls.tied_meeting import is_symmetric
from rankdocket.vocabulary import Direction
from rankdocket.writing.phrases import address, coefficient_symbol, level, method_words, p_equals, sentences
from rankdocket.writing.section import Story

Row: TypeAlias = tuple[str, Prose]

BOUNDED: Final[tuple[NullMethod, ...]] = ("Edgeworth series", "saddlepoint")
"""Methods whose p-value has a stated error that can be seen in print."""

FEWEST_DECIMALS: Final = 3
"""Decimals of a critical value at least."""

_TOLD: Final[Mapping[Route, str]] = MappingProxyType(
    {"draws": "A complete count", "tails, doubles": "Whole numbers", "tails, whole numbers": "The whole null"}
)
"""Ways of which it is told what a surer one would have needed, and that one."""


def null_sentence(story: Story, name: str) -> Prose:
    """Return which null an association got and why, with what an exact count would have needed."""
    test = _test(story, name)
    method = _capitalised(method_words(story, name))
    if test.choice.route == "series" and test.tails.is_exact:
        return prose(
            "{method}. The data lie at an end of the null, where the count is known whatever the number of rows.",
            method=method,
        )
    words = prose("{method}. {why}", method=method, why=test.choice.reason)
    needed = address(name, "test", "exact_count")
    if test.choice.route not in _TOLD or not story.numbers.has(needed):
        return words
    return sentences(
        words,
        prose(
            "{what} would have needed, by the forecast, {duration} and {memory}; the budget was {most} and {room}.",
            what=_TOLD[test.choice.route],
            duration=story.numbers.duration(f"{needed}/seconds"),
            memory=story.numbers.memory(f"{needed}/memory"),
            most=story.numbers.duration("inference/budget/seconds"),
            room=story.numbers.memory("inference/budget/memory"),
        ),
    )


def error_rows(story: Story, name: str) -> tuple[Row, ...]:
    """Return how wrong a p-value can be, and how it was drawn; nothing for one that was counted."""
    test, numbers = _test(story, name), story.numbers
    at = address(name, "test")
    if test.stream:
        error = prose(
            "{level} interval of p over all orderings: {low} to {high}",
            level=level(story),
            low=numbers.attainable_p(f"{at}/p_low"),
            high=numbers.attainable_p(f"{at}/p_high"),
        )
        return ("Error of the draws", error), ("Draws", _draws(story, name))
    if test.tails.method in BOUNDED:
        error = prose("of p at most {error} either way, as stated in the methods", error=numbers.error(f"{at}/error"))
        return (("Error of approximation", error),)
    return ()


def critical_rows(story: Story, name: str) -> tuple[Row, ...]:
    """Return the critical values for two sides and for one, and what the large-sample rule is worth here."""
    if _test(story, name).null.critical is None:
        return (("Critical values", only(f"not worked out: {UNKNOWN}")),)
    rows = [("Critical value, two-sided", _critical(story, name, "two-sided"))]
    if _is_symmetric(story, name) and not _test(story, name).stream:
        rows.append(("Critical value, one-sided", _critical(story, name, "greater")))
    else:
        rows.append(("Critical value, upper side", _critical(story, name, "greater")))
        rows.append(("Critical value, lower side", _critical(story, name, "less")))
    rule = address(name, "null", "large_sample")
    if story.numbers.has(rule):
        rows.append(("For comparison", _rule_of_thumb(story, name, rule)))
    return tuple(rows)


def _rule_of_thumb(story: Story, name: str, rule: str) -> Prose:
    """Return what the large-sample rule would say, and the share of orderings that reach it."""
    null, numbers = _test(story, name).null, story.numbers
    value = numbers.coefficient(f"{rule}/value")
    said = "the large-sample rule, a normal quantile over the root of n less one, would say {value}"
    if null.large_sample is not None and null.large_sample.size == 0:
        template = said + "; none of the {drawn}orderings reaches it, instead of a share of {alpha}"
        size = {}
    else:
        template = said + "; the share of {drawn}orderings that reach it is {size}, where the rule means {alpha}"
        size = {"size": numbers.attainable_p(f"{rule}/size")}
    return prose(
        template,
        value=value,
        drawn="drawn " if _test(story, name).stream else "",
        alpha=numbers.level("inference/alpha"),
        **size,
    )


def critical_number(story: Story, name: str, direction: Direction) -> Number:
    """Return a critical value, rounded to three decimals at least: neighbours on a fine lattice are told apart."""
    decimals = max(FEWEST_DECIMALS, story.numbers.coefficient_decimals)
    return story.numbers.coefficient(address(name, "null", "critical", direction, "value"), decimals)


def _test(story: Story, name: str) -> RankTest:
    test = story.analysis.results[name].test
    if not isinstance(test, RankTest):
        raise TypeError(f"{name} has no test")
    return test


def _capitalised(words: Prose) -> Prose:
    first, *rest = words.pieces
    return Prose((first.capitalize() if isinstance(first, str) else first, *rest))


def _draws(story: Story, name: str) -> Prose:
    numbers, at = story.numbers, address(name, "test", "draws")
    test = _test(story, name)
    looks = numbers.whole(f"{at}/looks_taken")
    drawn = prose(
        "seed {seed}, stream {stream}; {draws} drawn in {looks} {word}",
        seed=numbers.label("inference/seed"),
        stream=Supplied(" / ".join(test.stream)),
        draws=numbers.whole(address(name, "test", "of")),
        looks=looks,
        word="look" if len(test.null.looks) == 1 else "looks",
    )
    if len(test.null.looks) == 1:
        return drawn
    return joined(
        (
            drawn,
            prose(
                "the first at {first}, more because the interval still held a level that p is compared with",
                first=numbers.whole(f"{at}/looks/0/draws"),
            ),
        ),
        ": ",
    )


def _critical(story: Story, name: str, direction: Direction) -> Prose:
    at = address(name, "null", "critical", direction)
    critical, drawn = _test(story, name).null.critical, bool(_test(story, name).stream)
    if critical is None or critical.toward(direction) is None:
        return only(f"not placed: {UNPLACED}" if drawn else f"cannot be reached: {UNREACHED}")
    template = {
        "two-sided": "{by}{symbol} of {value} or more in size has {p}",
        "greater": "{by}{symbol} of {value} or more has {p}",
        "less": "{by}{symbol} of {value} or less has {p}",
    }[direction]
    return prose(
        template,
        by="by these draws, " if drawn else "",
        symbol=coefficient_symbol(story.analysis.results[name].screened.spec),
        value=critical_number(story, name, direction),
        p=p_equals(story, f"{at}/p"),
    )


def _is_symmetric(story: Story, name: str) -> bool:
    """Return whether the null is its own mirror image: the ties of one variable are."""
    screened = story.analysis.results[name].screened
    return is_symmetric(screened.x_ties, screened.y_ties)

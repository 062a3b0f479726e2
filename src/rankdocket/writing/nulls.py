"""The null in words: which one and why, the error of its p-value, the draws, critical values."""

from typing import Final, TypeAlias

from rankdocket.analysis.null_plain import UNKNOWN
from rankdocket.analysis.results import RankTest
from rankdocket.document.model import Number, Prose, Supplied
from rankdocket.document.prose import joined, only, prose
from rankdocket.stats.null import NullMethod
from rankdocket.vocabulary import Direction
from rankdocket.writing.phrases import address, coefficient_symbol, level, method_words, p_equals, sentences
from rankdocket.writing.section import Story

Row: TypeAlias = tuple[str, Prose]

BOUNDED: Final[tuple[NullMethod, ...]] = ("Edgeworth series", "saddlepoint")
"""Methods whose p-value has a stated error that can be seen in print."""

FEWEST_DECIMALS: Final = 3
"""Decimals of a critical value at least."""


def null_sentence(story: Story, name: str) -> Prose:
    """Return which null an association got and why, with what an exact count would have needed."""
    test = _test(story, name)
    method = method_words(story, name)
    words = prose("{method}. {why}", method=_capitalised(method), why=test.choice.reason)
    needed = address(name, "test", "exact_count")
    if test.choice.route not in ("draws", "tails, doubles") or not story.numbers.has(needed):
        return words
    return sentences(
        words,
        prose(
            "It would have needed about {duration} and {memory}; the budget was {most} and {room}.",
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
    ends = {"low": f"{at}/p_low", "high": f"{at}/p_high"}
    if test.stream:
        shown = {end: numbers.attainable_p(key) for end, key in ends.items()}
        error = prose("{level} interval of p over all orderings: {low} to {high}", level=level(story), **shown)
        return ("Error of the draws", error), ("Draws", _draws(story, name))
    if test.tails.method in BOUNDED:
        shown = {end: numbers.attainable_p(key) for end, key in ends.items()}
        return (("Error of the series", prose("p lies between {low} and {high} by the stated bound", **shown)),)
    return ()


def critical_rows(story: Story, name: str) -> tuple[Row, ...]:
    """Return the critical values for two sides and for one, and what the large-sample rule is worth here."""
    rows = [("Critical value, two-sided", _critical(story, name, "two-sided"))]
    if _is_symmetric(story, name):
        rows.append(("Critical value, one-sided", _critical(story, name, "greater")))
    else:
        rows.append(("Critical value, upper side", _critical(story, name, "greater")))
        rows.append(("Critical value, lower side", _critical(story, name, "less")))
    rule = address(name, "null", "large_sample")
    if story.numbers.has(rule):
        rows.append(
            (
                "For comparison",
                prose(
                    "the large-sample rule, a normal quantile over the root of n less one, would say {value}; the true "
                    "share of orderings that reach it is {size}, not {alpha}",
                    value=story.numbers.coefficient(f"{rule}/value"),
                    size=story.numbers.attainable_p(f"{rule}/size"),
                    alpha=story.numbers.level("inference/alpha"),
                ),
            )
        )
    return tuple(rows)


def critical_number(story: Story, name: str, direction: Direction) -> Number:
    """Return a critical value that is attainable: neighbours on a fine lattice need three decimals to be told apart."""
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
    null = _test(story, name).null
    if null.critical is None:
        return only(f"not worked out: {UNKNOWN}")
    critical = null.critical.toward(direction)
    if critical is None:
        return only("cannot be reached: no coefficient of these rows and ties has a p-value of alpha or less")
    template = {
        "two-sided": "{symbol} of {value} or more in size has {p}",
        "greater": "{symbol} of {value} or more has {p}",
        "less": "{symbol} of {value} or less has {p}",
    }[direction]
    return prose(
        template,
        symbol=coefficient_symbol(story.analysis.results[name].screened.spec),
        value=critical_number(story, name, direction),
        p=p_equals(story, f"{at}/p"),
    )


def _is_symmetric(story: Story, name: str) -> bool:
    """Return whether the critical values on both sides are each other's mirror image."""
    critical = _test(story, name).null.critical
    if critical is None or critical.greater is None or critical.less is None:
        return critical is None or critical.greater is critical.less
    return critical.greater.numerator == -critical.less.numerator and critical.greater.p == critical.less.p

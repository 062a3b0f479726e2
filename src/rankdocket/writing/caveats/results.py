"""Caveats about single results: nothing to estimate, perfect agreement, small samples, test against interval, draws."""

from fractions import Fraction
from typing import Final

from rankdocket.analysis.results import Estimate, NotEstimable, RankTest
from rankdocket.document.prose import prose
from rankdocket.stats.interval import Interval
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.phrases import P, address, interval_range, p_equals, pointer, pointers
from rankdocket.writing.section import Story

SMALL: Final = 10
"""Below this many rows an interval is read as indicative only (house rule after simulation)."""


def _not_estimable(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat(
            name,
            prose(
                "{name} is not estimable: {reason}. It keeps its place in {places}.",
                name=pointer(name),
                reason=result.estimate.reason,
                places="the family and in every table" if name in story.analysis.family else "every table",
            ),
        )
        for name, result in story.analysis.results.items()
        if isinstance(result.estimate, NotEstimable)
    )


def _perfect(story: Story) -> tuple[FoundCaveat, ...]:
    found = []
    for name, result in story.analysis.results.items():
        estimate = result.estimate
        if not isinstance(estimate, Estimate):
            continue
        coefficient = estimate.coefficient
        if coefficient.numerator**2 == coefficient.x_square * coefficient.y_square:
            found.append(
                FoundCaveat(
                    name,
                    prose(
                        "{name}: all rows follow one order, so that the sample holds no disagreement from which an error "
                        "could be estimated{interval}.",
                        name=pointer(name),
                        interval="; for the interval half of the smallest visible disagreement was assumed"
                        if isinstance(result.interval, Interval)
                        else "",
                    ),
                )
            )
    return tuple(found)


def _small(story: Story) -> tuple[FoundCaveat, ...]:
    small = {
        name: result
        for name, result in story.analysis.results.items()
        if isinstance(result.interval, Interval) and result.screened.flow.complete < SMALL
    }
    counted = tuple(
        name for name, result in small.items() if isinstance(result.test, RankTest) and result.test.tails.is_exact
    )
    others = tuple(name for name in small if name not in counted)
    few = "{names}: with so few rows the data exclude little. The interval is indicative"
    templates = {few + "; the test from all orderings of the rows is the primary result.": counted, few + ".": others}
    return tuple(
        FoundCaveat(None, prose(template, names=pointers(names))) for template, names in templates.items() if names
    )


def _disagree(story: Story) -> tuple[FoundCaveat, ...]:
    alpha = Fraction(story.analysis.spec.inference.alpha)
    found = []
    for name, result in story.analysis.results.items():
        if not isinstance(result.test, RankTest) or not isinstance(result.interval, Interval):
            continue
        excludes_zero = result.interval.low > 0 or result.interval.high < 0
        if excludes_zero == (result.test.p <= alpha):
            continue
        found.append(
            FoundCaveat(
                name,
                prose(
                    "{name}: test and interval point different ways ({p}; interval {range}). They are built "
                    "differently; the test decides about the association, the interval describes its size.",
                    name=pointer(name),
                    p=p_equals(story, address(name, "test", "p")),
                    range=interval_range(story, name),
                ),
            )
        )
    return tuple(found)


def _straddles(story: Story) -> tuple[FoundCaveat, ...]:
    alpha = float(story.analysis.spec.inference.alpha)
    found = []
    for name, result in story.analysis.results.items():
        if not isinstance(result.test, RankTest) or result.test.p_interval is None:
            continue
        low, high = result.test.p_interval
        if low <= alpha <= high:
            found.append(
                FoundCaveat(
                    name,
                    prose(
                        "{name}: {p} comes from drawn orderings, and the interval of the value that all orderings "
                        "would give, {low} to {high}, holds alpha. A plan with more draws would settle the side.",
                        name=pointer(name),
                        p=P,
                        low=story.numbers.p_value(address(name, "test", "p_low")),
                        high=story.numbers.p_value(address(name, "test", "p_high")),
                    ),
                )
            )
    return tuple(found)


def _conventions(story: Story) -> tuple[FoundCaveat, ...]:
    alpha = Fraction(story.analysis.spec.inference.alpha)
    found = []
    for name, result in story.analysis.results.items():
        doubled = result.comparisons.doubled_p
        if doubled is None or not isinstance(result.test, RankTest):
            continue
        if (doubled <= alpha) != (result.test.p <= alpha):
            found.append(
                FoundCaveat(
                    name,
                    prose(
                        "{name}: the ties make the null lopsided. Counting orderings at least as far from zero gives "
                        "{p}; doubling the smaller tail would give {doubled}. The plan’s rule is the first.",
                        name=pointer(name),
                        p=p_equals(story, address(name, "test", "p")),
                        doubled=story.numbers.p_value(address(name, "comparisons", "doubled_p")),
                    ),
                )
            )
    return tuple(found)


NOT_ESTIMABLE = CaveatRule("not_estimable", 80, _not_estimable)
PERFECT = CaveatRule("perfect_agreement", 55, _perfect)
SMALL_SAMPLE = CaveatRule("small_sample", 50, _small)
TEST_AND_INTERVAL = CaveatRule("test_and_interval", 70, _disagree)
STRADDLES_ALPHA = CaveatRule("straddles_alpha", 75, _straddles)
TWO_SIDED_RULE = CaveatRule("two_sided_rule", 72, _conventions)

"""Caveats about single results: nothing to estimate, small samples, test against interval, draws."""

from fractions import Fraction
from typing import Final

from rankdocket.analysis.deciding import deciding_p, interval_shows
from rankdocket.analysis.results import NotEstimable, RankTest
from rankdocket.document.model import Prose
from rankdocket.document.prose import prose
from rankdocket.stats.interval import Interval
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.findings import deciding_p as deciding_p_words
from rankdocket.writing.phrases import P, address, interval_range, p_equals, pointer, pointers
from rankdocket.writing.section import Story

FEWEST: Final = 4
"""With as many rows an interval spans nearly everything: its variance has one degree of freedom (bonett2000)."""

SMALL: Final = 10
"""Below this many rows an interval is read as indicative only (house rule after simulation)."""


def _not_estimable(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat(
            (name,),
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


def _small(story: Story) -> tuple[FoundCaveat, ...]:
    small = {
        name: result
        for name, result in story.analysis.results.items()
        if isinstance(result.interval, Interval) and result.screened.flow.complete < SMALL
    }
    lone = tuple(name for name, result in small.items() if result.screened.flow.complete == FEWEST)
    counted = tuple(
        name
        for name, result in small.items()
        if name not in lone and isinstance(result.test, RankTest) and result.test.tails.is_exact
    )
    others = tuple(name for name in small if name not in (*lone, *counted))
    few = "{names}: with so few rows the data exclude little. Read the interval as indicative"
    templates = {
        few + "; the p-value, counted over all orderings of the rows, is exact and the primary result.": counted,
        few + ".": others,
    }
    templates["{names}: an interval from so few rows is uninformative; it is printed so that nothing is missing."] = (
        lone
    )
    return tuple(
        FoundCaveat(names, prose(template, names=pointers(names))) for template, names in templates.items() if names
    )


def _disagree(story: Story) -> tuple[FoundCaveat, ...]:
    inference = story.analysis.spec.inference
    if inference.confidence_level != 1 - inference.alpha:
        return ()  # test and interval are held against different levels: they need not point the same way
    found = []
    for name, result in story.analysis.results.items():
        finding = story.analysis.findings[name]
        if not isinstance(result.test, RankTest) or not isinstance(result.interval, Interval):
            continue
        raw, agrees = deciding_p(result), interval_shows(result)
        if raw is None or agrees is None:
            continue
        deciding = raw if finding.p_adjusted is None else finding.p_adjusted
        if agrees == (deciding <= Fraction(inference.alpha)):
            continue
        adjusted = finding.p_adjusted is not None and finding.p_adjusted != raw
        found.append(
            FoundCaveat(
                (name,),
                prose(
                    "{name}: test and interval point different ways ({kind}{p}; interval {range}). {why}; the test decides "
                    "about the association, the interval describes its size.",
                    name=pointer(name),
                    kind="adjusted " if adjusted else "",
                    p=deciding_p_words(story, name),
                    range=interval_range(story, name),
                    why="The interval is not adjusted for the number of tests"
                    if adjusted and result.interval_alone is None
                    else "They are built differently",
                ),
            )
        )
    return tuple(found)


def _undecided(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat((name,), _why_undecided(story, name))
        for name, finding in story.analysis.findings.items()
        if finding.undecided
    )


def _why_undecided(story: Story, name: str) -> Prose:
    result, member = story.analysis.results[name], story.analysis.findings[name].max_t
    if member is not None and member.ends[0] <= Fraction(story.analysis.spec.inference.alpha) < member.ends[1]:
        at = address(name, "finding", "max_t")
        return prose(
            "{name}: undecided by the draws of the family. With the adjusted {p} at another place in its interval, {low} to "
            "{high}, the finding would be another one. A plan with more permutations may settle the side.",
            name=pointer(name),
            p=P,
            low=story.numbers.attainable_p(f"{at}/p_low"),
            high=story.numbers.attainable_p(f"{at}/p_high"),
        )
    if not isinstance(result.test, RankTest) or result.test.p_interval is None:
        return prose(
            "{name}: undecided by the draws of others in its family. Its own {p} was counted; with theirs at the other "
            "ends of their intervals, the adjusted one would lie on the other side of alpha.",
            name=pointer(name),
            p=P,
        )
    by_draws = _is_drawn(story, name)
    return prose(
        "{name}: undecided {by}. With {p} at another place in its interval, {low} to {high}{family}, the finding would be "
        "another one. {remedy}",
        name=pointer(name),
        by="by these draws" if by_draws else "by this series",
        p=P,
        low=story.numbers.attainable_p(address(name, "test", "p_low")),
        high=story.numbers.attainable_p(address(name, "test", "p_high")),
        family=", and others of the family in theirs"
        if story.analysis.findings[name].basis == "family" and len(story.analysis.family) > 1
        else "",
        remedy="The ceiling of draws that the plan sets was reached; a plan with more may settle the side."
        if by_draws
        else "The word printed is that of the value itself; the stated error does not settle the side.",
    )


def _is_drawn(story: Story, name: str) -> bool:
    test = story.analysis.results[name].test
    return isinstance(test, RankTest) and test.choice.needs_draws


def _conventions(story: Story) -> tuple[FoundCaveat, ...]:
    alpha = Fraction(story.analysis.spec.inference.alpha)
    found = []
    for name, result in story.analysis.results.items():
        doubled = result.comparisons.doubled_p
        if doubled is None or not isinstance(result.test, RankTest) or not result.test.tails.is_exact:
            continue  # between drawn tails the gap may be the draws' own
        if (doubled <= alpha) != (result.test.p <= alpha):
            found.append(
                FoundCaveat(
                    (name,),
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
SMALL_SAMPLE = CaveatRule("small_sample", 50, _small)
TEST_AND_INTERVAL = CaveatRule("test_and_interval", 70, _disagree)
UNDECIDED = CaveatRule("undecided", 75, _undecided)
TWO_SIDED_RULE = CaveatRule("two_sided_rule", 72, _conventions)

"""Findings in words: what the plan’s rule made of an association, claiming no more than the evidence."""

from rankdocket.analysis.checks.attainable_p import KEY as ATTAINABLE
from rankdocket.analysis.deciding import deciding_p as raw_deciding_p
from rankdocket.analysis.results import Estimate, Finding, NotEstimable, RankTest, Withheld
from rankdocket.document.model import Number, Prose
from rankdocket.document.prose import only, prose
from rankdocket.stats.interval import Interval
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.vocabulary import ExpectedSign
from rankdocket.writing.phrases import address, coefficient_symbol, interval_values, p_equals
from rankdocket.writing.section import Story
from rankdocket.writing.size import OPEN, by_of, claimed, claimed_opposite


def finding_word(finding: Finding) -> str:
    """Return the finding as it stands in a table."""
    return finding.word or "no finding stated"


def finding_sentence(story: Story, name: str) -> Prose:
    """Return what the plan’s rule makes of an association, as one sentence."""
    result, finding = story.analysis.results[name], story.analysis.findings[name]
    if isinstance(result.estimate, NotEstimable):
        return prose("No rank correlation could be computed: {reason}.", reason=result.estimate.reason)
    if isinstance(result.estimate, Withheld):
        return prose("The plan withholds the estimate and the test: {reason}.", reason=result.estimate.reason)
    if isinstance(result.test, (Withheld, NotEstimable)):
        return prose("The test is withheld: {reason}. The estimate stands without one.", reason=result.test.reason)
    if finding.word is None:
        if story.analysis.family:
            return only("The plan places this association outside the family, so that no finding is stated for it.")
        return only("The plan states no finding for an exploratory association.")
    expected = result.screened.spec.hypothesis.expected_sign
    if raw_deciding_p(result) is None and isinstance(result.size, NoAnswer):
        return prose(
            "By the rule of the plan {what} was not shown: it could not be tested, because {reason}.",
            what=_what(story, name, expected),
            reason=result.size.reason,
        )
    deciding = deciding_p(story, name)
    rule = _rule(story, finding)
    if by_of(story, name) != "rank test":
        rule += "; the test is approximate"
    alpha = story.numbers.level("inference/alpha")
    if finding.word == "not shown":
        return prose(
            "By the rule of the plan {what} was not shown: " + rule.replace("{side}", "above") + ".{open}",
            what=_what(story, name, expected),
            p=deciding,
            alpha=alpha,
            open=_still_open(story, name),
        )
    if finding.word == "shown, opposite sign":
        return prose(
            "By the rule of the plan {what}: " + rule.replace("{side}", "at or below") + ".",
            what=only("an association was shown, with the sign opposite to the one expected")
            if by_of(story, name) == "rank test"
            else claimed_opposite(story, name),
            p=deciding,
            alpha=alpha,
        )
    return prose(
        "By the rule of the plan {what} was shown: " + rule.replace("{side}", "at or below") + ".",
        what=_what(story, name, expected),
        p=deciding,
        alpha=alpha,
    )


def deciding_p(story: Story, name: str) -> Prose:
    """Return the p-value that decided: the adjusted one of a family member, else the association’s own."""
    key = address(name, "finding", "p_adjusted")
    if story.analysis.findings[name].p_adjusted is None:
        key = address(name, "finding", "p")
    return p_equals(story, key)


def smallest_of_interest(story: Story, name: str) -> Number | None:
    """Return the smallest size that the plan calls of interest, where it names one."""
    if story.analysis.spec.associations[name].hypothesis.smallest_of_interest is None:
        return None
    return story.numbers.level(f"inference/smallest_of_interest/{name}")


def size_sentence(story: Story, name: str) -> Prose:
    """Return what the interval says about the smallest size of interest; empty where the plan names none."""
    result = story.analysis.results[name]
    size = smallest_of_interest(story, name)
    if size is None or not isinstance(result.estimate, Estimate) or not isinstance(result.interval, Interval):
        return only("")
    limit = float(size.exact)
    low, high = result.interval.low, result.interval.high
    symbol = coefficient_symbol(result.screened.spec)
    if low > limit or high < -limit:
        template = "The whole interval lies beyond the smallest size of interest, {size}."
    elif -limit < low and high < limit:
        template = "The whole interval lies within plus or minus the smallest size of interest, {size}."
    else:
        template = "The interval holds values of {symbol} both smaller and larger in size than the smallest size of interest, {size}."
        return prose(template, symbol=symbol, size=size)
    return prose(template, size=size)


def _what(story: Story, name: str, expected: ExpectedSign) -> Prose:
    if by_of(story, name) != "rank test":
        return claimed(story, name)
    match expected:
        case "positive":
            return only("the expected positive association")
        case "negative":
            return only("the expected negative association")
        case "either":
            return only("an association")


def _rule(story: Story, finding: Finding) -> str:
    """Return which p lay on which side of alpha."""
    adjusted = finding.basis == "family" and story.analysis.spec.inference.several_tests.adjust != "none"
    return ("the adjusted " if adjusted else "") + "{p} lay {side} alpha, {alpha}"


def _still_open(story: Story, name: str) -> Prose:
    result, by = story.analysis.results[name], by_of(story, name)
    if by != "rank test":
        return only(OPEN[by])
    if any(outcome.key == ATTAINABLE and outcome.state == "not met" for outcome in result.checks):
        return only(" No result of this plan with these rows could have been shown.")
    if not isinstance(result.interval, Interval) or not isinstance(result.test, RankTest):
        return only(" That does not show that there is none.")
    values = interval_values(story, name)
    symbol = coefficient_symbol(result.screened.spec)
    is_adjusted = result.interval_alone is not None
    if result.interval.low > 0 or result.interval.high < 0:
        return prose(
            " The interval {whose}holds values of {symbol} {values}; it is {why}, and the test decides.",
            whose="" if is_adjusted else "of this association alone ",
            symbol=symbol,
            values=values,
            why="built differently from the test"
            if is_adjusted or story.analysis.findings[name].p_adjusted in (None, result.test.p)
            else "not adjusted for the number of tests",
        )
    return prose(
        " That does not show that there is none: the interval still holds values of {symbol} {values}.",
        symbol=symbol,
        values=values,
    )

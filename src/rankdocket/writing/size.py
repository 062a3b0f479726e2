"""Size in words: what a plan claims, what the approximate tests of size found, and the verdict."""

from typing import Final

from rankdocket.analysis.deciding import deciding_test
from rankdocket.analysis.family import sharers_of
from rankdocket.analysis.results import RankTest
from rankdocket.analysis.size_results import SizeAnalysis, SizeTests
from rankdocket.document.model import Number, Prose
from rankdocket.document.prose import only, prose
from rankdocket.stats.equivalence import SizeVerdict
from rankdocket.stats.interval import Interval
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.vocabulary import DecidingTest, ExpectedSign
from rankdocket.writing.phrases import address, p_equals
from rankdocket.writing.section import Story

Z_DECIMALS: Final = 3

OPEN: Final[dict[DecidingTest, str]] = {
    "above": " That does not show that the size is smaller.",
    "within": " That does not show that the size is larger.",
    "null value": " That does not show that rho has that value.",
}
"""What a claim that was not shown leaves open."""


def by_of(story: Story, name: str) -> DecidingTest:
    """Return whose p-value decides the finding of an association."""
    return deciding_test(story.analysis.results[name].screened.spec)


def tests_of(story: Story, name: str) -> SizeTests | None:
    """Return the tests of the smallest size of interest, where there are any."""
    size = story.analysis.results[name].size
    return size.size if isinstance(size, SizeAnalysis) else None


def size_of_interest(story: Story, name: str) -> Number:
    """Return the smallest size that the plan calls of interest; it must name one."""
    return story.numbers.level(f"inference/smallest_of_interest/{name}")


def null_value(story: Story, name: str) -> Number:
    """Return the value of rho that the plan names; it must name one."""
    return story.numbers.level(f"inference/null_value/{name}")


def claimed(story: Story, name: str) -> Prose:
    """Return what the plan claims beyond "an association", as it stands before "was shown"."""
    expected = story.analysis.spec.associations[name].hypothesis.expected_sign
    match by_of(story, name):
        case "null value":
            return prose(_VALUES[expected], value=null_value(story, name))
        case "above":
            return prose(_SIZES[expected], size=size_of_interest(story, name))
        case "within":
            return prose("a rho within plus or minus {size}", size=size_of_interest(story, name))
        case "rank test":
            raise ValueError(f"{name} claims an association alone")


def claimed_opposite(story: Story, name: str) -> Prose:
    """Return what was shown when it lies on the side opposite to the expected one."""
    if by_of(story, name) == "null value":
        expected = story.analysis.spec.associations[name].hypothesis.expected_sign
        other = "a rho below {value}" if expected == "positive" else "a rho above {value}"
        return prose(f"{other} was shown, the side opposite to the one expected", value=null_value(story, name))
    return prose(
        "an association larger in size than {size} was shown, with the sign opposite to the one expected",
        size=size_of_interest(story, name),
    )


def claim_in_table(story: Story, name: str) -> Prose:
    """Return the claim as it stands in a list, with its separator; empty for an association alone."""
    match by_of(story, name):
        case "rank test":
            return only("")
        case "null value":
            return prose("; claim: other than {value}", value=null_value(story, name))
        case "above":
            return only("; claim: above it")
        case "within":
            return only("; claim: within it")


def claim_named(story: Story, name: str) -> Prose:
    """Return what a finding is about, where it is not an association alone: "a size above 0.30"."""
    match by_of(story, name):
        case "null value":
            return prose("the null value {value}", value=null_value(story, name))
        case "above":
            return prose("a size above {size}", size=size_of_interest(story, name))
        case "within":
            return prose("a size within ±{size}", size=size_of_interest(story, name))
        case "rank test":
            raise ValueError(f"{name} claims an association alone")


def verdict_words(story: Story, name: str) -> Prose:
    """Return the verdict about size in plain words; empty where there is none."""
    tests = tests_of(story, name)
    if tests is None:
        return only("")
    size = size_of_interest(story, name)
    match tests.verdict:
        case "size above delta shown":
            return prose("above {size} shown", size=size)
        case "size below delta shown":
            test = story.analysis.results[name].test
            rejected = isinstance(test, RankTest) and test.p <= tests.level
            return prose(
                "within ±{size} shown, independence {rejected}",
                size=size,
                rejected="rejected" if rejected else "not rejected",
            )
        case "independence rejected, size above delta not shown":
            return prose("different from zero, not shown above {size}", size=size)
        case "undecided":
            return only("undecided")


def verdict_beside_finding(story: Story, name: str) -> Prose:
    """Return the verdict with why it lags behind a claim about size that was shown, where it does."""
    words, tests, claim = verdict_words(story, name), tests_of(story, name), by_of(story, name)
    verdicts: dict[DecidingTest, SizeVerdict] = {"above": "size above delta shown", "within": "size below delta shown"}
    is_behind = (
        tests is not None
        and claim in verdicts
        and story.analysis.findings[name].word == "shown"
        and tests.verdict != verdicts[claim]
    )
    return prose("{verdict}, at a stricter level than the finding", verdict=words) if is_behind else words


def verdict_sentence(story: Story, name: str) -> Prose:
    """Return the verdict as one sentence with its level; empty where there is none."""
    if tests_of(story, name) is None:
        return only("")
    return prose(
        "Verdict about size, by approximate tests at {level}: {verdict}.",
        level=_level(story, name),
        verdict=verdict_beside_finding(story, name),
    )


def verdict_clause(story: Story, name: str) -> Prose:
    """Return the verdict without its level, for readers in a hurry; there must be one."""
    return prose("{verdict}, by approximate tests", verdict=verdict_beside_finding(story, name))


def size_rows(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    """Return the numbers of the tests of size for the list of an association."""
    size = story.analysis.results[name].size
    match size:
        case None:
            return ()
        case NoAnswer(reason):
            return (("Size", prose("not tested: {reason}", reason=reason)),)
        case SizeAnalysis():
            rows = () if size.value is None else (("Null value", _value_row(story, name)),)
            return rows if size.size is None else (*rows, *_size_rows(story, name, size.size))


def _value_row(story: Story, name: str) -> Prose:
    at, numbers = address(name, "size", "value"), story.numbers
    return prose(
        "rho is {value}: z\u00a0=\u00a0{z}, k\u00a0=\u00a0{k}, approximate {p}",
        value=null_value(story, name),
        z=numbers.coefficient(f"{at}/z", Z_DECIMALS),
        k=numbers.as_filed(f"{at}/factor"),
        p=p_equals(story, f"{at}/p"),
    )


def _size_rows(story: Story, name: str, tests: SizeTests) -> tuple[tuple[str, Prose], ...]:
    at, numbers = address(name, "size"), story.numbers
    size, k = size_of_interest(story, name), numbers.as_filed(f"{at}/factor")
    upper, lower = (numbers.coefficient(f"{at}/{side}", Z_DECIMALS) for side in ("z_upper", "z_lower"))
    return (
        (
            "Above the size of interest",
            prose(
                "{size}: z\u00a0=\u00a0{upper} against it and {lower} against its negative, k\u00a0=\u00a0{k}, approximate {p}",
                size=size,
                upper=upper,
                lower=lower,
                k=k,
                p=p_equals(story, f"{at}/p_above"),
            ),
        ),
        (
            "Within the size of interest",
            prose(
                "±{size}: the larger of two one-sided p-values, approximate {p}; {interval}",
                size=size,
                p=p_equals(story, f"{at}/p_within"),
                interval=_interval(story, name, tests),
            ),
        ),
        (
            "Verdict about size",
            prose("{verdict}, at {level}", verdict=verdict_words(story, name), level=_level(story, name)),
        ),
    )


def _interval(story: Story, name: str, tests: SizeTests) -> Prose:
    if not isinstance(tests.interval, Interval):
        return prose("no interval: {reason}", reason=tests.interval.reason)
    at, numbers = address(name, "size", "interval_of_equivalence"), story.numbers
    decimals = numbers.decimals_for(address(name, "estimate", "value"))
    return prose(
        "{level} interval {low} to {high}",
        level=numbers.percent(f"{at}/level"),
        low=numbers.coefficient(f"{at}/low", decimals),
        high=numbers.coefficient(f"{at}/high", decimals),
    )


def _level(story: Story, name: str) -> Prose:
    """Return the level of the verdict: alpha, or alpha over the members of the family, which errs on the safe side."""
    numbers = story.numbers
    alpha = numbers.level("inference/alpha")
    if sharers_of(story.analysis.spec.associations[name], story.analysis.spec) == 1:
        return prose("level {alpha}", alpha=alpha)
    return prose(
        "level {alpha} over {members} members of the family",
        alpha=alpha,
        members=numbers.whole("inference/family_size"),
    )


_VALUES: Final[dict[ExpectedSign, str]] = {
    "positive": "a rho above {value}, as expected,",
    "negative": "a rho below {value}, as expected,",
    "either": "a rho other than {value}",
}
_SIZES: Final[dict[ExpectedSign, str]] = {
    "positive": "the expected positive association, larger than {size},",
    "negative": "the expected negative association, larger in size than {size},",
    "either": "an association larger in size than {size}",
}

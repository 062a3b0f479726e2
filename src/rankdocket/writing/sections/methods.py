"""Section 4: what was done, gathered from the rules that ran, and deviations under their own heading."""

from itertools import product
from typing import Final

from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.coverage import coverage_of
from rankdocket.analysis.intervals import AFTER_SELECTION, SIMULTANEOUS
from rankdocket.analysis.results import Estimate, RankTest
from rankdocket.document.model import Link, Number, Paragraph, Prose, Section, Supplied
from rankdocket.document.prose import joined, only, prose, text_of
from rankdocket.references import Description
from rankdocket.stats.chatterjee import XI, XI_NULL
from rankdocket.stats.coverage.lookup import SimulatedCoverage
from rankdocket.stats.critical import CRITICAL_VALUES
from rankdocket.stats.interval import Interval
from rankdocket.stats.intervals import INTERVAL_METHODS
from rankdocket.stats.intervals.bca_bootstrap import BCA_BOOTSTRAP
from rankdocket.stats.isotonic import ISOTONIC
from rankdocket.stats.null import MONTE_CARLO_INTERVAL, MONTE_CARLO_LOOKS, NULL_DESCRIPTIONS, TWO_SIDED, NullMethod
from rankdocket.stats.nulls.tau_exact import TAU_NULL_DESCRIPTIONS
from rankdocket.stats.rho import RHO
from rankdocket.stats.tau import TAU_B
from rankdocket.vocabulary import COEFFICIENTS, CoefficientName
from rankdocket.writing.adjustment import adjustment_text
from rankdocket.writing.coverage import COVERAGE_SENTENCE
from rankdocket.writing.described import described
from rankdocket.writing.intervals import given
from rankdocket.writing.more_variables_methods import more_variables_descriptions
from rankdocket.writing.phrases import address, full_stop, interval_holds, pointers, sentences
from rankdocket.writing.section import SectionRule, Story
from rankdocket.writing.sensitivity_methods import sensitivity_paragraph
from rankdocket.writing.shape import any_shape, any_xi_null
from rankdocket.writing.size_methods import could_show_methods, size_methods


def write(story: Story) -> Section:
    """Return the methods text under its headings; a rule that did not run is not described."""
    parts = [
        (key, title, tuple(Paragraph(text) for text in paragraphs)) for key, title, paragraphs in method_parts(story)
    ]
    parts.append(("deviations", only("Deviations from the plan"), (Paragraph(_deviations(story)),)))
    return Section(
        "methods",
        "4",
        only("Methods"),
        (),
        tuple(Section(key, f"4.{place}", title, blocks) for place, (key, title, blocks) in enumerate(parts, start=1)),
    )


def method_parts(story: Story) -> tuple[tuple[str, Prose, tuple[Prose, ...]], ...]:
    """Return key, heading and paragraphs of each part of the methods text, in the order in which the work was done."""
    parts = (
        ("methods-rows", only("Rows and requirements"), (_ranking(story), _checks(story))),
        ("methods-tests", only("Coefficients and tests"), (_coefficients(story), _nulls(story), _sides(story))),
        ("methods-findings", only("Findings and tests of size"), (_family(story), size_methods(story))),
        (
            "methods-intervals",
            only("Intervals, and what the rows could show"),
            (_intervals(story), could_show_methods(story)),
        ),
        (
            "methods-beside",
            only("Beside the findings"),
            (_comparisons(story), _more_variables(story), _shape(story), _sensitivity(story)),
        ),
    )
    written = ((key, title, tuple(part for part in paragraphs if text_of(part))) for key, title, paragraphs in parts)
    return tuple((key, title, paragraphs) for key, title, paragraphs in written if paragraphs)


def method_paragraphs(story: Story) -> tuple[Prose, ...]:
    """Return the paragraphs of the methods text without their headings."""
    return tuple(paragraph for _, _, paragraphs in method_parts(story) for paragraph in paragraphs)


_RUN: Final = only(
    "The plan printed in the appendix is the one that was run. Whether it was fixed before the data were seen is not "
    "recorded: no plan was locked."
)


def _deviations(story: Story) -> Prose:
    """Return what is known of the plan’s history; that results had been seen before it was changed is said."""
    facts = story.facts
    if facts.replaces is None:
        return _RUN
    old = Supplied(facts.replaces)
    if facts.before is None:
        compared = prose(
            "Whether it differs from that of {old} could not be told: that record was not at hand.", old=old
        )
    elif facts.before.plan_changes:
        compared = prose(
            "The plan differs from that of {old}, whose results had been seen: section {section} lists the keys.",
            old=old,
            section=Link("changes", "7"),
        )
    else:
        compared = prose("It is the plan of {old}, unchanged.", old=old)
    return sentences(_RUN, compared)


def _ranking(story: Story) -> Prose:
    data = story.analysis.data
    of_tables = any(table.spec.missing_codes for table in data.tables.values())
    missing = of_tables or any(variable.spec.missing_codes for variable in data.variables.values())
    return joined(
        (
            only(
                "Cells were read as exact decimals, or as labels in the order that the plan states. A cell was taken as "
                "missing only where it held a code that the plan names."
                if missing
                else "Cells were read as exact decimals, or as labels in the order that the plan states; no cell was missing."
            ),
            only(
                "For each association the complete rows were selected first; each variable was then ranked among them, equal "
                "values sharing the mean of the places they fill."
            ),
        )
    )


def _checks(story: Story) -> Prose:
    ran = {
        outcome.key
        for result in story.analysis.results.values()
        for outcome in result.checks
        if outcome.state != "not examined"
    }
    return joined(tuple(described(check.demand) for check in CHECKS if check.key in ran))


def _coefficients(story: Story) -> Prose:
    ran = {
        result.screened.spec.coefficient
        for result in story.analysis.results.values()
        if isinstance(result.estimate, Estimate)
    }
    return joined(tuple(described(_COEFFICIENTS[name]) for name in COEFFICIENTS if name in ran))


def _nulls(story: Story) -> Prose:
    parts = []
    for method, coefficient in product(NULL_DESCRIPTIONS, COEFFICIENTS):
        names = tuple(
            name
            for name, result in story.analysis.results.items()
            if isinstance(result.test, RankTest)
            and (result.test.tails.method, result.screened.spec.coefficient) == (method, coefficient)
        )
        if not names:
            continue
        description = NULL_DESCRIPTIONS[method]
        if coefficient == "Kendall tau-b":
            description = TAU_NULL_DESCRIPTIONS.get(method, description)
        parts.append(described(description, associations=pointers(names), **_null_slots(story, method, names[0])))
    if any(isinstance(result.test, RankTest) and result.test.stream for result in story.analysis.results.values()):
        parts.append(_looks(story))
    if any(
        isinstance(result.test, RankTest) and result.test.null.critical is not None
        for result in story.analysis.results.values()
    ):
        parts.append(described(CRITICAL_VALUES))
    return joined(tuple(parts))


def _null_slots(story: Story, method: NullMethod, name: str) -> dict[str, Number]:
    """Return the numbers that a null's description has slots for."""
    numbers, bounds = story.numbers, "series_bounds"
    match method:
        case "exact, no ties" | "exact, conditional on the ties":
            return {}
        case "exact algorithm, 12 digits":
            return {"digits": numbers.whole(address(name, "test", "digits"))}
        case "Edgeworth series":
            return {
                "rows": numbers.whole(f"{bounds}/rows"),
                "absolute": numbers.as_filed(f"{bounds}/absolute"),
                "relative": numbers.percent(f"{bounds}/relative"),
                "least": numbers.as_filed(f"{bounds}/least_p"),
            }
        case "saddlepoint":
            return {
                "rows": numbers.whole(f"{bounds}/rows"),
                "least": numbers.as_filed(f"{bounds}/least_p"),
                "relative": numbers.percent(f"{bounds}/saddlepoint/0/relative"),
                "near": numbers.as_filed(f"{bounds}/saddlepoint/0/least_p"),
                "far": numbers.percent(f"{bounds}/saddlepoint/1/relative"),
                "farthest": numbers.as_filed(f"{bounds}/saddlepoint/1/least_p"),
            }
        case "drawn permutations":
            return {
                "draws": numbers.whole("inference/permutations"),
                "seed": numbers.label("inference/seed"),
            }


def _looks(story: Story) -> Prose:
    """Return how the error of the draws was described, and what was done while it left a side open."""
    rule = story.analysis.spec.inference.p_value
    level = story.numbers.percent("inference/confidence_level")
    if rule.most_draws == rule.permutations:
        return described(MONTE_CARLO_INTERVAL, level=level)
    return described(
        MONTE_CARLO_LOOKS,
        level=level,
        looks=story.numbers.whole("inference/looks"),
        most=story.numbers.whole("inference/most_draws"),
    )


def _sides(story: Story) -> Prose:
    inference = story.analysis.spec.inference
    if not _any_test(story):
        return only("")
    alpha = story.numbers.level("inference/alpha")
    if inference.sidedness == "two-sided":
        sides = described(TWO_SIDED)
    else:
        sides = only(
            "Tests were one-sided in the direction that the plan expects: orderings whose coefficient lay at least as far "
            "in that direction were counted, comparing whole numbers."
        )
    return joined(
        (sides, prose("Alpha was {alpha}; a p-value at or below it, compared as fractions, decided.", alpha=alpha))
    )


def _any_test(story: Story) -> bool:
    return any(isinstance(result.test, RankTest) for result in story.analysis.results.values())


def _family(story: Story) -> Prose:
    several = story.analysis.spec.inference.several_tests
    parts: list[Prose] = []
    if story.analysis.family:
        parts.append(
            prose(
                "The family ({among}) holds {names}; an association that is not estimable or whose test is withheld stays "
                "in it. A finding is stated for its members only.",
                among=several.among,
                names=pointers(story.analysis.family),
            )
        )
    else:
        parts.append(
            only("By the plan there is no family: each primary and secondary association is its own decision.")
        )
    if several.reason is not None:
        parts.append(prose("Reason given: {reason}", reason=full_stop(several.reason)))
    if not _any_test(story) or not story.analysis.family:
        return joined(tuple(parts))
    return joined((*parts, adjustment_text(story)))


def _intervals(story: Story) -> Prose:
    given = [result.interval for result in story.analysis.results.values() if isinstance(result.interval, Interval)]
    ran = {interval.method for interval in given}
    slots = {"resamples": "inference/interval/resamples"} if BCA_BOOTSTRAP.key in ran else {}
    parts = [
        described(
            method.describe,
            **{slot: story.numbers.whole(at) for slot, at in slots.items() if method.key == BCA_BOOTSTRAP.key},
        )
        for method in INTERVAL_METHODS
        if method.key in ran
    ]
    if any(interval.direction != "two-sided" for interval in given):
        parts.append(only("For a one-sided test it is the bound on the side that the plan expects, at the same level."))
    if any(isinstance(coverage_of(result), SimulatedCoverage) for result in story.analysis.results.values()):
        parts.append(only(COVERAGE_SENTENCE))
    if parts:
        parts.append(_adjusted_intervals(story))
    return joined(tuple(parts))


def _adjusted_intervals(story: Story) -> Prose:
    numbers, at = story.numbers, "inference/interval"
    holds = {interval_holds(story, name) for name in given(story)}
    slots = {
        "family": numbers.whole("inference/family_size"),
        "level": numbers.percent("inference/confidence_level"),
    }
    if "simultaneous" in holds:
        words = described(SIMULTANEOUS, each=numbers.percent_down(f"{at}/level"), **slots)
    elif "after selection" in holds:
        selected = numbers.whole(f"{at}/selected")
        words = described(AFTER_SELECTION, each=numbers.percent_down(f"{at}/level"), selected=selected, **slots)
    elif "alone" in holds:
        words = only(
            "No interval came to be adjusted: the plan adjusts those of others only, and each that is given holds for its "
            "association alone."
        )
    else:
        return only("Intervals were not adjusted for the number of tests: each holds for its association alone.")
    others = only("The other intervals hold for their association alone.")
    return joined((words, others)) if len(holds) > 1 else words


def _comparisons(story: Story) -> Prose:
    if not _any_test(story):
        return only("")
    return prose(
        "For comparison only, {table} gives what other habits would have said; no finding rests on it.",
        table=Link("comparisons", "Table 6"),
    )


def _more_variables(story: Story) -> Prose:
    parts = [described(description, **slots) for description, slots in more_variables_descriptions(story)]
    if parts:
        parts.append(only("These are supplementary: no finding rests on them."))
    return joined(tuple(parts))


def _shape(story: Story) -> Prose:
    rules = ((ISOTONIC, any_shape(story)), (XI, any_shape(story)), (XI_NULL, any_xi_null(story)))
    return joined(tuple(described(rule) for rule, ran in rules if ran))


def _sensitivity(story: Story) -> Prose:
    printed = {
        result.interval.method for result in story.analysis.results.values() if isinstance(result.interval, Interval)
    }
    return sensitivity_paragraph(story, frozenset(printed))


_COEFFICIENTS: Final[dict[CoefficientName, Description]] = {"Spearman rho": RHO, "Kendall tau-b": TAU_B}

SECTION = SectionRule("methods", write)

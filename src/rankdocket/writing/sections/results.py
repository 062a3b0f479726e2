"""Section 6: one master table, planned against found, then one spread an association."""

from rankdocket.analysis.deciding import deciding_p
from rankdocket.analysis.results import AssociationAnalysis, Estimate, RankTest
from rankdocket.document.model import Block, Column, FieldList, Link, Prose, Section, TableBlock
from rankdocket.document.prose import joined, only, prose
from rankdocket.stats.interval import Interval
from rankdocket.writing.adjustment import bound_note, bounded
from rankdocket.writing.could_show import could_show_table
from rankdocket.writing.figures import interval_strip
from rankdocket.writing.findings import finding_word, smallest_of_interest
from rankdocket.writing.intervals import interval_cell, interval_head, intervals_hold
from rankdocket.writing.phrases import (
    EN_DASH_CELL,
    N,
    P,
    address,
    estimate_with_interval,
    label_head,
    p_equals,
    pointer,
    variables_of,
)
from rankdocket.writing.section import SectionRule, Story
from rankdocket.writing.size import by_of, claim_in_table, claim_named, verdict_beside_finding
from rankdocket.writing.spread import spread


def write(story: Story) -> Section:
    """Return the results: master table, strip, comparisons, spreads."""
    blocks: list[Block] = [master_table(story), interval_strip(story), _planned_and_found(story)]
    comparisons = _comparisons(story)
    if comparisons is not None:
        blocks.append(comparisons)
    could_show = could_show_table(story)
    if could_show is not None:
        blocks.append(could_show)
    spreads = tuple(spread(story, name, position) for position, name in enumerate(story.analysis.results, start=1))
    return Section("results-section", "6", only("Results"), tuple(blocks), spreads, opens="page")


def master_table(story: Story) -> TableBlock:
    """Return one row an association; heads say which interval and which p."""
    sided = story.analysis.spec.inference.sidedness
    adjusted = story.analysis.spec.inference.several_tests.adjust
    return TableBlock(
        key="results",
        number="5",
        caption=only("Results, one row an association"),
        columns=(
            Column(only("Association"), "association", share=2),
            Column(only("x"), "x", share=4),
            Column(only("y"), "y", share=4),
            Column(only(N), "n", "right", share=2),
            Column(only("Tied x, y"), "tied", "right", share=3),
            Column(only("Coefficient"), "coefficient", share=3),
            Column(only("Estimate"), "estimate", "decimal", share=3),
            Column(interval_head(story), "interval", "right", share=4),
            Column(prose("{p}, {sided}", p=P, sided=sided), "p", "decimal", share=3),
            Column(prose("{p}, adjusted ({rule})", p=P, rule=adjusted), "p_adjusted", "decimal", share=3),
            Column(only("Expected"), "expected_sign", share=3),
            Column(only("Finding"), "finding", share=4),
            Column(only("Caveats"), "caveats", share=2),
        ),
        rows=tuple(_master_row(story, name, result) for name, result in story.analysis.results.items()),
        notes=_master_notes(story),
    )


def _master_row(story: Story, name: str, result: AssociationAnalysis) -> tuple[Prose, ...]:
    spec, numbers = result.screened.spec, story.numbers
    x, y = variables_of(story, spec)
    has_rows = bool(result.screened.rows)
    tied = (
        prose(
            "{x}, {y}",
            x=numbers.share(address(name, "ties_x", "share")),
            y=numbers.share(address(name, "ties_y", "share")),
        )
        if has_rows
        else EN_DASH_CELL
    )
    estimated = isinstance(result.estimate, Estimate)
    return (
        only(pointer(name)),
        only(label_head(x)),
        only(label_head(y)),
        only(numbers.whole(address(name, "rows", "complete"))),
        tied,
        only(spec.coefficient),
        only(numbers.coefficient(address(name, "estimate", "value"))) if estimated else EN_DASH_CELL,
        interval_cell(story, name) if isinstance(result.interval, Interval) else EN_DASH_CELL,
        only(numbers.p_value(address(name, "test", "p"))) if isinstance(result.test, RankTest) else EN_DASH_CELL,
        _adjusted(story, name),
        only(spec.hypothesis.expected_sign),
        only(finding_word(story.analysis.findings[name])),
        _caveat_numbers(story, name),
    )


def _adjusted(story: Story, name: str) -> Prose:
    if story.analysis.findings[name].p_adjusted is None:
        return EN_DASH_CELL
    return only(story.numbers.p_value(address(name, "finding", "p_adjusted")))


def _caveat_numbers(story: Story, name: str) -> Prose:
    links = tuple(only(Link(caveat.block.key, str(caveat.block.number))) for caveat in story.caveats_about(name))
    return joined(links, ", ") if links else EN_DASH_CELL


def _master_notes(story: Story) -> tuple[Prose, ...]:
    notes = [
        prose(
            "Every association of the plan has its row, whatever became of it. Caveats that concern the whole study are "
            "not repeated here. {intervals}",
            intervals=intervals_hold(story),
        )
    ]
    if bounded(story) is not None:
        notes.append(bound_note(story))
    if any(finding.word is None for finding in story.analysis.findings.values()):
        notes.append(
            only("No finding is stated for an association outside the family; its p-value is not adjusted.")
            if story.analysis.family
            else only("No finding is stated for an exploratory association.")
        )
    notes += _claim_notes(story)
    return tuple(notes)


def _claim_notes(story: Story) -> list[Prose]:
    """Return which adjusted p and finding are about a claim of size or a null value, and the p that was adjusted."""
    return [
        prose(
            "{name}: finding and adjusted {p} are about {claim}; its own approximate {own}.",
            name=pointer(name),
            p=P,
            claim=claim_named(story, name),
            own=p_equals(story, address(name, "finding", "p")),
        )
        for name, result in story.analysis.results.items()
        if by_of(story, name) != "rank test" and deciding_p(result) is not None
    ]


def _planned_and_found(story: Story) -> FieldList:
    rows = []
    for name, result in story.analysis.results.items():
        hypothesis = result.screened.spec.hypothesis
        size = smallest_of_interest(story, name)
        planned = (
            prose(
                "expected {sign}, size of interest {size}{claim}",
                sign=hypothesis.expected_sign,
                size=size,
                claim=claim_in_table(story, name),
            )
            if size is not None
            else prose("expected {sign}{claim}", sign=hypothesis.expected_sign, claim=claim_in_table(story, name))
        )
        rows.append(
            (
                name,
                prose(
                    "{planned}; found {estimate}; finding: {word}{verdict}",
                    planned=planned,
                    estimate=estimate_with_interval(story, name),
                    word=finding_word(story.analysis.findings[name]),
                    verdict=_verdict(story, name),
                ),
            )
        )
    return FieldList(tuple(rows), key="planned-and-found", caption=only("Planned against found"))


def _verdict(story: Story, name: str) -> Prose:
    words = verdict_beside_finding(story, name)
    return prose("; size: {verdict}", verdict=words) if words.pieces != ("",) else words


def _comparisons(story: Story) -> TableBlock | None:
    estimated = tuple(name for name, result in story.analysis.results.items() if isinstance(result.estimate, Estimate))
    if not estimated:
        return None
    doubled = any(story.analysis.results[name].comparisons.doubled_p is not None for name in estimated)
    columns = (
        Column(only("Association"), "association", share=2),
        Column(prose("{p}, as used", p=P), "p", "decimal", share=3),
        Column(prose("{p} from the t value", p=P), "p_t", "decimal", share=3),
        Column(prose("{p} by doubling the smaller tail", p=P), "p_doubled", "decimal", share=4),
        Column(only("Rank coefficient, as used"), "coefficient", "decimal", share=4),
        Column(only("Product-moment coefficient of the values (Pearson)"), "pearson", "decimal", share=5),
        Column(only("Short form without tie terms"), "short_form", "decimal", share=4),
    )
    shown = tuple(place for place, column in enumerate(columns) if doubled or column.name != "p_doubled")
    return TableBlock(
        key="comparisons",
        number="6",
        caption=only("What other habits would have said; no finding rests on these values"),
        columns=tuple(columns[place] for place in shown),
        rows=tuple(tuple(_comparison_row(story, name)[place] for place in shown) for name in estimated),
        notes=(
            only(
                "The t value only approximates the null, worst with few rows and many ties; the short form is wrong where "
                "there are ties; the product-moment coefficient answers another question, and where it is nearer to zero "
                "than the rank coefficient, the relation may keep its direction and be curved: see the raw plots."
            ),
        ),
    )


def _comparison_row(story: Story, name: str) -> tuple[Prose, ...]:
    result, numbers = story.analysis.results[name], story.numbers
    comparisons, at = result.comparisons, address(name, "comparisons")
    has_short_form = isinstance(result.estimate, Estimate) and result.estimate.short_form is not None
    return (
        only(pointer(name)),
        only(numbers.p_value(address(name, "test", "p"))) if isinstance(result.test, RankTest) else EN_DASH_CELL,
        EN_DASH_CELL if comparisons.t_value_p is None else only(numbers.p_value(f"{at}/t_value_p")),
        EN_DASH_CELL if comparisons.doubled_p is None else only(numbers.p_value(f"{at}/doubled_p")),
        only(numbers.coefficient(address(name, "estimate", "value"))),
        EN_DASH_CELL if comparisons.pearson is None else only(numbers.coefficient(f"{at}/pearson")),
        only(numbers.coefficient(f"{at}/short_form")) if has_short_form else EN_DASH_CELL,
    )


SECTION = SectionRule("results-section", write)

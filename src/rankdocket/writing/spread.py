"""One spread an association: its question and answer, its pictures, its numbers, its caveats."""

from typing import Literal

from rankdocket.analysis.results import Estimate, RankTest
from rankdocket.document.model import Block, FieldList, Link, Paragraph, Prose, Section, Supplied
from rankdocket.document.prose import joined, only, prose
from rankdocket.writing.adjustment import adjusted_rows
from rankdocket.writing.coverage import coverage_rows
from rankdocket.writing.figures import rank_plot, raw_plot
from rankdocket.writing.findings import finding_sentence, finding_word, size_sentence
from rankdocket.writing.intervals import interval_rows
from rankdocket.writing.more_variables import more_variables_tables
from rankdocket.writing.null_picture import null_picture
from rankdocket.writing.nulls import critical_rows, error_rows, null_sentence
from rankdocket.writing.phrases import (
    address,
    coefficient_symbol,
    direction_sentence,
    estimate_with_interval,
    label,
    label_head,
    label_with_unit,
    p_with_count,
    sentences,
    state_word,
    variables_of,
)
from rankdocket.writing.section import Story
from rankdocket.writing.sensitivity import sensitivity_blocks
from rankdocket.writing.shape import xi_rows
from rankdocket.writing.size import size_rows, verdict_sentence


def spread(story: Story, name: str, position: int) -> Section:
    """Return the spread of an association, the ``position``-th of the report."""
    result = story.analysis.results[name]
    spec = result.screened.spec
    x, y = variables_of(story, spec)
    title = prose("{name}: {x} and {y}", name=Supplied(name), x=label_head(x), y=label(y))
    blocks: list[Block] = [Paragraph(only(Supplied(spec.question)))]
    if isinstance(result.estimate, Estimate):
        # The answer stands below its question; what it rests on may go over to the facing page.
        blocks += [
            Paragraph(
                sentences(
                    prose(
                        "{direction}: {symbol} {estimate}.",
                        direction=direction_sentence(story, name),
                        symbol=coefficient_symbol(spec),
                        estimate=estimate_with_interval(story, name),
                    ),
                    finding_sentence(story, name),
                    size_sentence(story, name),
                    verdict_sentence(story, name),
                ),
                "answer",
            ),
            raw_plot(story, name),
            rank_plot(story, name),
            *null_picture(story, name),
        ]
    else:
        blocks.append(Paragraph(finding_sentence(story, name), "answer"))
    blocks.append(FieldList(_numbers(story, name), key=f"numbers-{name}"))
    # Before the supplementary tables: the caveats are those of the finding, and a line of their own fills no page.
    blocks.append(Paragraph(_caveats(story, name), "note"))
    blocks += more_variables_tables(story, name, position)
    if isinstance(result.estimate, Estimate):
        blocks += sensitivity_blocks(story, name)
    # Only a spread with plots fills a page of its own.
    opens: Literal["page", "here"] = "page" if isinstance(result.estimate, Estimate) else "here"
    return Section(f"association-{name}", f"6.{position}", title, tuple(blocks), opens=opens)


def _numbers(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    result, numbers = story.analysis.results[name], story.numbers
    x, y = variables_of(story, result.screened.spec)
    rows: list[tuple[str, Prose]] = [
        ("x", only(label_with_unit(x))),
        ("y", only(label_with_unit(y))),
        (
            "Rows",
            prose(
                "{complete} complete of {read} read",
                complete=numbers.whole(address(name, "rows", "complete")),
                read=numbers.whole(address(name, "rows", "read")),
            ),
        ),
    ]
    if result.screened.rows:
        rows += [("Ties in x", _ties(story, name, "ties_x")), ("Ties in y", _ties(story, name, "ties_y"))]
    if not isinstance(result.estimate, Estimate):
        rows.append(("Estimate", only(state_word(result))))
        return tuple(rows)
    rows.append((result.screened.spec.coefficient, estimate_with_interval(story, name)))
    rows += interval_rows(story, name)
    rows += coverage_rows(story, name)
    if isinstance(result.test, RankTest):
        rows += [
            ("Null", null_sentence(story, name)),
            ("Test", p_with_count(story, name)),
            (
                "Both tails",
                prose(
                    "at least as large: {greater}; at least as small: {less}",
                    greater=numbers.p_value(address(name, "test", "p_greater")),
                    less=numbers.p_value(address(name, "test", "p_less")),
                ),
            ),
        ]
        rows += error_rows(story, name)
        rows += critical_rows(story, name)
    else:
        rows.append(("Test", prose("withheld: {reason}", reason=result.test.reason)))
    if result.smallest_attainable_p is not None:
        rows.append(("Smallest attainable p", only(numbers.attainable_p(address(name, "smallest_attainable_p")))))
    rows += size_rows(story, name)
    rows += adjusted_rows(story, name)
    rows += xi_rows(story, name)
    rows.append(("Finding", only(finding_word(story.analysis.findings[name]))))
    return tuple(rows)


def _ties(story: Story, name: str, side: Literal["ties_x", "ties_y"]) -> Prose:
    numbers, result = story.numbers, story.analysis.results[name]
    ties = result.screened.x_ties if side == "ties_x" else result.screened.y_ties
    distinct = numbers.whole(address(name, side, "distinct"))
    if not ties.groups:
        return prose("none; {distinct} distinct values", distinct=distinct)
    template = (
        "{tied} of rows, in {groups} tie group; {distinct} distinct values"
        if ties.groups == 1
        else "{tied} of rows, in {groups} tie groups, the largest of {largest}; {distinct} distinct values"
    )
    largest = {} if ties.groups == 1 else {"largest": numbers.whole(address(name, side, "largest"))}
    return prose(
        template,
        tied=numbers.share(address(name, side, "share")),
        groups=numbers.whole(address(name, side, "groups")),
        distinct=distinct,
        **largest,
    )


def _caveats(story: Story, name: str) -> Prose:
    links = tuple(only(Link(caveat.block.key, str(caveat.block.number))) for caveat in story.caveats_about(name))
    general = Link("requirements", "5")
    if not links:
        return prose(
            "No caveat concerns this association alone; those of the study stand in section {section}.", section=general
        )
    return prose(
        "Caveats about this association: {numbers}; those of the study stand in section {section}.",
        numbers=joined(links, ", "),
        section=general,
    )

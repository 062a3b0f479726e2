"""Appendix A: the rank worksheet of each association, from which a stranger gets the coefficient by hand."""

from typing import Final

from rankdocket.analysis.results import AssociationAnalysis, Estimate
from rankdocket.document.model import (
    Block,
    Column,
    Emphasis,
    FieldList,
    Paragraph,
    Prose,
    Section,
    Supplied,
    TableBlock,
)
from rankdocket.document.prose import only, prose
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import N, address, label, label_head, pointer, variables_of
from rankdocket.writing.section import SectionRule, Story

MOST_ROWS: Final = 60
"""A longer worksheet is printed up to here; the whole stands in the record copy."""


def write(story: Story) -> Section:
    """Return one worksheet an association that has an estimate."""
    parts = tuple(
        _worksheet(story, name, result, position)
        for position, (name, result) in enumerate(story.analysis.results.items(), start=1)
        if isinstance(result.estimate, Estimate)
    )
    opening = (
        only(
            "Each worksheet holds the complete rows of one association with both midranks, and below them the sums from "
            "which the coefficient follows; for rho two textbook forms are worked out side by side."
        )
        if parts
        else only("There is no worksheet: not one of the associations has an estimate.")
    )
    return Section("worksheets", "A", only("Rank worksheets"), (Paragraph(opening),), parts, opens="page")


def _worksheet(story: Story, name: str, result: AssociationAnalysis, position: int) -> Section:
    x, y = variables_of(story, result.screened.spec)
    spearman = result.screened.spec.coefficient == "Spearman rho"
    blocks: list[Block] = [_table(story, name, result, position)]
    blocks.append(FieldList(_two_forms(story, name) if spearman else _counts(story, name), key=f"forms-{name}"))
    if spearman:
        blocks.append(
            Paragraph(
                prose(
                    "The form without tie terms, one minus six times the sum of squared rank differences over {n} cubed less "
                    "{n}, holds only where no value is shared {cite}; its value stands in the table of comparisons.",
                    n=N,
                    cite=cite("student1921", "kendall1945"),
                ),
                "note",
            )
        )
    title = prose("Worksheet of {name}: {x} and {y}", name=Supplied(name), x=label_head(x), y=label(y))
    return Section(f"worksheet-{name}", f"A.{position}", title, tuple(blocks))


def _table(story: Story, name: str, result: AssociationAnalysis, position: int) -> TableBlock:
    numbers = story.numbers
    rows = result.screened.rows
    at = address(name, "worksheet")
    printed = range(min(len(rows), MOST_ROWS))
    notes: tuple[Prose, ...] = ()
    if len(rows) > MOST_ROWS:
        notes = (
            prose(
                "The first rows are printed; all {rows} stand in {file} of the record copy.",
                rows=numbers.whole(address(name, "rows", "complete")),
                file=Emphasis(f"ranks-{name}.csv", "code"),
            ),
        )
    x, y = variables_of(story, result.screened.spec)
    # Rank differences lead to rho; tau-b has no use for them.
    differences = isinstance(result.estimate, Estimate) and result.estimate.squared_differences is not None
    ranks = ("rank_x", "rank_y", "difference", "squared") if differences else ("rank_x", "rank_y")
    heads = {"rank_x": "Rank of x", "rank_y": "Rank of y", "difference": "Difference", "squared": "Squared"}
    foot: tuple[tuple[Prose, ...], ...] = ()
    if differences:
        total = only(numbers.as_filed(address(name, "estimate", "squared_differences")))
        foot = ((only("Sum, all rows"), *(only("") for _ in range(5)), total),)
    return TableBlock(
        key=f"worksheet-table-{name}",
        number=f"A.{position}",
        caption=prose(
            "Complete rows of {name} with midranks and rank differences"
            if differences
            else "Complete rows of {name} with midranks",
            name=pointer(name),
        ),
        columns=(
            Column(only("Line of the file"), "row", "right", share=2),
            Column(only(label_head(x)), "x", "right", share=4),
            Column(only(label_head(y)), "y", "right", share=4),
            *(Column(only(heads[rank]), rank, "decimal", share=3) for rank in ranks),
        ),
        rows=tuple(
            (
                only(numbers.label(f"{at}/row/{line}")),
                only(Supplied(rows[line].x_literal)),
                only(Supplied(rows[line].y_literal)),
                *(only(numbers.as_filed(f"{at}/{rank}/{line}")) for rank in ranks),
            )
            for line in printed
        ),
        foot=foot,
        notes=notes,
    )


def _two_forms(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    numbers = story.numbers
    at = address(name, "estimate")
    return (
        (
            "Sums of doubled centred midranks",
            prose(
                "products {a}; squares of x {b}; squares of y {c}",
                a=numbers.whole(f"{at}/numerator"),
                b=numbers.whole(f"{at}/x_square"),
                c=numbers.whole(f"{at}/y_square"),
            ),
        ),
        (
            "Midrank form",
            prose("products over the root of both squares: rho\u00a0=\u00a0{rho}", rho=numbers.level(f"{at}/value")),
        ),
        (
            "Tie terms",
            prose(
                "sum of cubed less single group sizes: x {x}, y {y}",
                x=numbers.whole(address(name, "ties_x", "cube_sum")),
                y=numbers.whole(address(name, "ties_y", "cube_sum")),
            ),
        ),
        (
            "Terms of x and y",
            prose(
                "a twelfth of ({n} cubed less {n}) less the tie term: x {x}, y {y}",
                n=N,
                x=numbers.as_filed(f"{at}/x_term"),
                y=numbers.as_filed(f"{at}/y_term"),
            ),
        ),
        (
            "Difference form",
            prose(
                "both terms less the sum of squared differences ({sum}), over twice the root of their product: rho\u00a0=\u00a0{rho}",
                sum=numbers.as_filed(f"{at}/squared_differences"),
                rho=numbers.level(f"{at}/corrected_form"),
            ),
        ),
    )


def _counts(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    numbers = story.numbers
    at = address(name, "estimate")
    return (
        ("Row pairings in the same order less those in opposite order", only(numbers.whole(f"{at}/numerator"))),
        (
            "Pairings of two rows not tied",
            prose("in x {x}; in y {y}", x=numbers.whole(f"{at}/x_square"), y=numbers.whole(f"{at}/y_square")),
        ),
        (
            "tau-b",
            prose("the first over the root of the product of the others: {tau}", tau=numbers.level(f"{at}/value")),
        ),
    )


SECTION = SectionRule("worksheets", write)

"""Section 2: what was received, how it was read, and from the rows read to the rows used."""

from collections.abc import Mapping

from rankdocket.document.model import (
    Block,
    Column,
    Emphasis,
    FieldList,
    Items,
    Paragraph,
    Prose,
    Section,
    Supplied,
    TableBlock,
)
from rankdocket.document.prose import joined, listed, only, prose
from rankdocket.study.spec import DataSpec
from rankdocket.vocabulary import NOT_APPLICABLE
from rankdocket.writing.phrases import address, label_head, pointer
from rankdocket.writing.section import SectionRule, Story

SHORT_DIGEST = 12
"""Hexadecimal digits printed in the text; all 64 stand in the record."""


def write(story: Story) -> Section:
    """Return the data section; its row flow adds up line by line."""
    blocks: list[Block] = [_received(story), FieldList(_rows_facts(story), key="rows")]
    blocks.append(_flow(story))
    left_out = _left_out(story)
    if left_out:
        blocks += [Paragraph(only("Rows left out by the plan, each with its reason:")), Items(left_out, numbered=True)]
    else:
        blocks.append(Paragraph(only("The plan leaves out no row.")))
    own = _own_codes(story)
    if own:
        blocks += [Paragraph(only("Missing codes that hold for one column alone:")), Items(own)]
    return Section("data", "2", only("Data"), tuple(blocks))


def _received(story: Story) -> TableBlock:
    rows = []
    for name, table in story.analysis.data.tables.items():
        rows.append(
            (
                only(Emphasis(name, "code")),
                only(Emphasis(table.source.path, "code")),
                only(Supplied(table.spec.received_on or "not stated")),
                only(Supplied(table.spec.received_from or "not stated")),
                only(story.numbers.whole(f"tables/{name}/rows")),
                _reading(table.spec),
                only(Emphasis(table.source.digest[:SHORT_DIGEST], "code")),
            )
        )
    return TableBlock(
        key="received",
        number="1",
        caption=only("Data received and how the plan says they are read"),
        columns=(
            Column(only("Table"), "table", share=3),
            Column(only("File"), "file", share=5),
            Column(only("Received"), "received_on", share=3),
            Column(only("From"), "received_from", share=4),
            Column(only("Rows"), "rows", "right", share=2),
            Column(only("Read as"), "read_as", share=6),
            Column(only("Digest"), "digest", share=3),
        ),
        rows=tuple(rows),
        notes=(
            only("The digest is the beginning of the SHA-256 of the file’s bytes; the whole stands in the record."),
        ),
    )


def _reading(spec: DataSpec) -> Prose:
    names = {",": "comma", ";": "semicolon", "\t": "tab", "|": "bar"}
    missing = (
        prose("missing: {codes}", codes=_codes(spec.missing_codes))
        if spec.missing_codes
        else only("no missing codes for the table as a whole")
    )
    return joined(
        (
            prose("{separator} separated", separator=names[spec.separator]),
            prose("decimal mark {mark}", mark=Emphasis(spec.decimal_mark, "code")),
            only(Emphasis(spec.text_encoding, "code")),
            missing,
        ),
        "; ",
    )


def _own_codes(story: Story) -> tuple[Prose, ...]:
    return tuple(
        prose("{variable}: {codes}", variable=label_head(variable), codes=_codes(variable.missing_codes))
        for variable in story.analysis.spec.variables.values()
        if variable.missing_codes
    )


def _codes(codes: Mapping[str, str]) -> Prose:
    return listed(
        tuple(prose("{code} ({meaning})", code=_literal(code), meaning=Supplied(text)) for code, text in codes.items())
    )


def _literal(code: str) -> Emphasis | str:
    return Emphasis(code, "code") if code.strip() else "blank"


def _rows_facts(story: Story) -> tuple[tuple[str, Prose], ...]:
    rows = story.analysis.spec.rows
    return (
        ("One row is", only(Supplied(rows.one_row_is))),
        ("Repeated within", _answer(rows.repeated_within)),
        ("Time order", _answer(rows.time_order)),
        (
            "Independent because",
            only(Supplied(rows.independent_because))
            if rows.independent_because
            else only("no reason stated in the plan"),
        ),
    )


def _answer(answer: str | None) -> Prose:
    if answer is None:
        return only("not stated in the plan")
    return only(answer) if answer == NOT_APPLICABLE else prose("by column {column}", column=Emphasis(answer, "code"))


def _flow(story: Story) -> TableBlock:
    steps = ("read", "left_out", "missing_x", "missing_y", "missing_both", "complete")
    return TableBlock(
        key="flow",
        number="2",
        caption=only("Rows read, left out, lacking a value, and used"),
        columns=(
            Column(only("Association"), "association", share=2),
            Column(only("Read"), "read", "right"),
            Column(only("− left out by plan"), "left_out", "right"),
            Column(only("− lacking x only"), "missing_x", "right"),
            Column(only("− lacking y only"), "missing_y", "right"),
            Column(only("− lacking both"), "missing_both", "right"),
            Column(only("= complete, used"), "complete", "right"),
        ),
        rows=tuple(
            (only(pointer(name)), *(only(story.numbers.whole(address(name, "rows", step))) for step in steps))
            for name in story.analysis.results
        ),
        notes=(only("Complete rows were selected first and ranked second."),),
    )


def _left_out(story: Story) -> tuple[Prose, ...]:
    found: dict[tuple[str, int], Prose] = {}
    for name, result in story.analysis.results.items():
        table = story.analysis.spec.variables[result.screened.spec.x].table
        for position, left in enumerate(result.screened.flow.left_out):
            if (table, left.row) not in found:
                found[table, left.row] = prose(
                    "Line {line} of {table}: {reason}",
                    line=story.numbers.label(address(name, "rows", "left_out_lines", str(position))),
                    table=Emphasis(table, "code"),
                    reason=Supplied(left.reason),
                )
    return tuple(found.values())


SECTION = SectionRule("data", write)

"""Appendix B: the data as received, the columns that the plan uses."""

from collections.abc import Mapping
from typing import Final

from rankdocket.document.model import Block, Column, Emphasis, Paragraph, Prose, Section, Supplied, TableBlock
from rankdocket.document.prose import only, prose
from rankdocket.study.table import Table
from rankdocket.study.wording import composed
from rankdocket.writing.phrases import EN_DASH_CELL
from rankdocket.writing.section import SectionRule, Story

MOST_ROWS: Final = 200
"""A longer listing is printed up to here; the file itself lies in the record copy."""


def write(story: Story) -> Section:
    """Return one listing a table."""
    blocks: list[Block] = [Paragraph(only("Cells are printed as received; the columns are those that the plan uses."))]
    blocks += [
        _listing(story, name, table, position)
        for position, (name, table) in enumerate(story.analysis.data.tables.items(), start=1)
    ]
    return Section("listing", "B", only("Data listing"), tuple(blocks), opens="page")


def _listing(story: Story, name: str, table: Table, position: int) -> TableBlock:
    columns = _used_columns(story, name)
    reasons = {
        left.row: left.reason
        for result in story.analysis.results.values()
        if story.analysis.spec.variables[result.screened.spec.x].table == name
        for left in result.screened.flow.left_out
    }
    suspicious = {
        row.row: row.reason
        for result in story.analysis.results.values()
        if story.analysis.spec.variables[result.screened.spec.x].table == name
        for row in result.screened.suspicious
    }
    notes = (
        (
            prose(
                "The first rows are printed; all {rows} stand in {file} of the record copy.",
                rows=story.numbers.whole(f"tables/{name}/rows"),
                file=Emphasis(table.source.path, "code"),
            ),
        )
        if len(table.row_numbers) > MOST_ROWS
        else ()
    )
    return TableBlock(
        key=f"listing-{name}",
        number=f"B.{position}",
        caption=prose("Table {name} as received", name=Emphasis(name, "code")),
        columns=(
            Column(only("Line"), "line", "right", share=2),
            *(Column(only(Supplied(column)), column, share=4) for column in columns),
            Column(only("Left out by the plan"), "left_out", share=4),
            *((Column(only("Suspicious by the plan, kept"), "suspicious", share=4),) if suspicious else ()),
        ),
        rows=tuple(
            (
                only(story.numbers.label(f"tables/{name}/lines/{line}")),
                *(_cell(table.columns[column][line]) for column in columns),
                _reason(reasons, row),
                *((_reason(suspicious, row),) if suspicious else ()),
            )
            for line, row in enumerate(table.row_numbers[:MOST_ROWS])
        ),
        notes=notes,
    )


def _reason(reasons: Mapping[int, str], row: int) -> Prose:
    return only(Supplied(reasons[row])) if row in reasons else EN_DASH_CELL


def _cell(literal: str) -> Prose:
    return only(Supplied(literal)) if literal.strip() else only("blank")


def _used_columns(story: Story, name: str) -> tuple[str, ...]:
    spec = story.analysis.spec
    used = {variable.column for variable in spec.variables.values() if variable.table == name}
    used |= {answer for answer in (spec.rows.repeated_within, spec.rows.time_order) if answer is not None}
    used |= {
        association.groups.column
        for association in spec.associations.values()
        if association.groups is not None and spec.variables[association.x].table == name
    }
    used |= {column for left in (*spec.rows.leave_out, *spec.rows.suspicious) for column in left.where}
    written = {composed(column) for column in used}
    return tuple(column for column in story.analysis.data.tables[name].columns if column in written)


SECTION = SectionRule("listing", write)

"""Would another method have said otherwise?  The table of one association, and what is said of it elsewhere."""

from typing import Final

from rankdocket.analysis.sensitivity.make import OF_A_CLAIM
from rankdocket.analysis.sensitivity.rows.studentised import KEY as STUDENTISED
from rankdocket.analysis.sensitivity.table import NoTable, SensitivityTable, TableRow
from rankdocket.document.model import Block, Column, Link, Paragraph, Prose, Supplied, TableBlock
from rankdocket.document.prose import joined, listed, only, prose, text_of
from rankdocket.writing.phrases import EN_DASH_CELL, P, address, capitalised, p_equals, pointer
from rankdocket.writing.section import Story

CAPTION: Final = "{name}: would another method, or other rows, have said otherwise?"


def table_key(name: str) -> str:
    """Return the key of an association’s sensitivity table."""
    return f"sensitivity-{name}"


def table_link(story: Story, name: str) -> Link:
    """Return a link to an association’s sensitivity table."""
    return Link(table_key(name), f"Table {table_number(story, name)}")


def table_number(story: Story, name: str) -> str:
    """Return the printed number: 11 and the position of the association."""
    return f"11.{list(story.analysis.results).index(name) + 1}"


def table_of(story: Story, name: str) -> SensitivityTable | None:
    """Return the table of an association, if it has one."""
    found = story.analysis.sensitivity.get(name)
    return found if isinstance(found, SensitivityTable) else None


def sensitivity_blocks(story: Story, name: str) -> tuple[Block, ...]:
    """Return the table, or why an association with an estimate has none."""
    found = story.analysis.sensitivity.get(name)
    if isinstance(found, SensitivityTable):
        return (_table(story, name, found),)
    if isinstance(found, NoTable):
        return (
            Paragraph(
                prose("What other methods would have said is not tabulated: {reason}.", reason=found.reason), "note"
            ),
        )
    return ()


def sensitivity_note(story: Story, names: tuple[str, ...]) -> Prose | None:
    """Return by how many rows the findings would change, for the summary; ``None`` where none is stated."""
    clauses = tuple(
        _clause(story, name, table)
        for name in names
        if (table := table_of(story, name)) is not None and table.finding is not None
    )
    if not clauses:
        return None
    return prose(
        "By sensitivity rows, beside the search for rows to remove, the finding would change: {clauses}.",
        clauses=joined(clauses, "; "),
    )


def _clause(story: Story, name: str, table: SensitivityTable) -> Prose:
    at = address(name, "sensitivity", "tally")
    changing = story.numbers.whole(f"{at}/changing") if table.answering_yes else "none"
    return prose(
        "{name} by {changing} of {asked} ({table})",
        name=pointer(name),
        changing=changing,
        asked=story.numbers.whole(f"{at}/asked"),
        table=table_link(story, name),
    )


def lines_in_words(story: Story, at: str, number: int) -> Prose:
    """Return "line 7", "lines 7 and 9"."""
    lines = tuple(only(story.numbers.label(f"{at}/lines/{place}")) for place in range(number))
    return prose("line {lines}" if number == 1 else "lines {lines}", lines=listed(lines))


def _table(story: Story, name: str, table: SensitivityTable) -> TableBlock:
    return TableBlock(
        key=table_key(name),
        number=table_number(story, name),
        caption=prose(CAPTION, name=Supplied(name)),
        columns=(
            Column(only("What was done"), "done", share=8),
            Column(only("Kind"), "kind", share=3),
            Column(only("Value"), "value", "right", share=3),
            Column(prose("Interval or {p}", p=P), "interval_or_p", share=6),
            Column(only("Would the finding change?"), "change", share=5),
        ),
        rows=tuple(_cells(story, name, row) for row in table.rows),
        notes=_notes(table),
    )


def _notes(table: SensitivityTable) -> tuple[Prose, ...]:
    notes = [
        only(
            "Sensitivity: the same quantity under other assumptions or from other rows; supplementary: another quantity, whose "
            "size is not to be compared. No finding rests on this table."
        )
    ]
    if any(row.verdict.reason == OF_A_CLAIM for row in table.rows):
        notes.append(
            only(
                "The finding of this association is that of a claim about size or of a null value. No row of this table tests "
                "that claim: a p-value here is one of independence, so that the last column does not apply."
            )
        )
    if table.finding is not None:
        notes.append(
            only(
                "For the last column the p-value of a row took the place of the association’s own in the rule of the plan, the "
                "other p-values of the family staying as they are; for an interval it says whether zero lies on the other side "
                "of its limits than of those printed. Some set of rows changes nearly every finding: how few they are is what "
                "counts."
            )
        )
    return tuple(notes)


def _cells(story: Story, name: str, row: TableRow) -> tuple[Prose, ...]:
    at = address(name, "sensitivity", "rows", row.key)
    return (
        _done(story, at, row),
        only(row.standing),
        _value(story, at, row),
        _beside(story, at, row),
        _change(story, at, row),
    )


def _done(story: Story, at: str, row: TableRow) -> Prose:
    label = capitalised(row.label)
    if row.ends is not None:
        return prose(
            "{label}; lowest without line {low}, highest without line {high}",
            label=label,
            low=story.numbers.label(f"{at}/lowest_without"),
            high=story.numbers.label(f"{at}/highest_without"),
        )
    if row.search is not None:
        return _searched(story, at, row, label)
    if row.rows is None or not row.rows.lines:
        return only(label)
    lines = lines_in_words(story, at, len(row.rows.lines))
    if row.rows.reason is None:
        return prose("{label}: {lines}", label=label, lines=lines)
    return prose("{label}: {lines} ({reason})", label=label, lines=lines, reason=Supplied(row.rows.reason))


def _searched(story: Story, at: str, row: TableRow, label: str) -> Prose:
    assert row.search is not None
    tried, most = story.numbers.whole(f"{at}/tried"), story.numbers.whole(f"{at}/most")
    every = only("every row alone") if row.search.tried == 1 else prose("every set of up to {tried} rows", tried=tried)
    if row.rows is None:
        template = (
            "{label}: none found; {every} was tried"
            if row.search.tried == row.search.most
            else "{label}: none found among sets of up to {most} rows; {every} was tried, larger ones by a greedy search"
        )
        unused = {} if row.search.tried == row.search.most else {"most": most}
        return prose(template, label=label, every=every, **unused)
    lines = lines_in_words(story, at, len(row.rows.lines))
    if row.search.how_sure == "exhaustive":
        return prose("{label}: {lines}; no smaller set does", label=label, lines=lines)
    return prose(
        "{label}: {lines}; an upper bound, found by a greedy search ({every} was tried)",
        label=label,
        lines=lines,
        every=every,
    )


def _value(story: Story, at: str, row: TableRow) -> Prose:
    if row.ends is not None:
        low, high = (f"{at}/{end}" for end in ("lowest", "highest"))
        return prose("{low} to {high}", low=story.numbers.coefficient(low), high=story.numbers.coefficient(high))
    return EN_DASH_CELL if row.value is None else only(story.numbers.coefficient(f"{at}/value"))


def _beside(story: Story, at: str, row: TableRow) -> Prose:
    numbers = story.numbers
    if row.p is not None:
        p = p_equals(story, f"{at}/p")
        if row.p.draws is not None:
            return prose("{p}, {draws} draws", p=p, draws=numbers.whole(f"{at}/draws"))
        return prose(
            "{p}, {method}", p=p, method="all orderings gone through" if row.kind == STUDENTISED else row.p.method
        )
    if row.interval is not None:
        decimals = numbers.decimals_for(f"{at}/value")
        low, high = (numbers.coefficient(f"{at}/{end}", decimals) for end in ("low", "high"))
        limits = {
            "two-sided": prose("{low} to {high}", low=low, high=high),
            "greater": prose("from {low} up", low=low),
            "less": prose("up to {high}", high=high),
        }[row.interval.direction]
        if row.interval.resampled is None:
            return limits
        return prose("{limits}, {resamples} resamples", limits=limits, resamples=numbers.whole(f"{at}/resamples"))
    # What holds for every row of a table is said once, below it.
    return EN_DASH_CELL if row.absent in (None, OF_A_CLAIM) else prose("none: {reason}", reason=row.absent)


def _change(story: Story, at: str, row: TableRow) -> Prose:
    verdict = row.verdict
    if row.ends is not None and row.ends.changing == 1:
        return only("yes, for one row left out alone")
    if row.ends is not None and row.ends.changing:
        return prose("yes, for each of {rows} rows left out alone", rows=story.numbers.whole(f"{at}/changing_rows"))
    reason = "" if verdict.reason in (row.absent or "", OF_A_CLAIM) else verdict.reason
    if verdict.change == "yes" and verdict.finding is not None:
        return prose("yes: {finding}", finding=verdict.finding)
    return prose("{change}: {reason}", change=verdict.change, reason=reason) if reason else only(verdict.change)


def changing_in_words(story: Story, name: str) -> tuple[Prose, ...]:
    """Return what would change the finding, each as the end of "the finding would be another one …"."""
    table = table_of(story, name)
    assert table is not None
    parts = []
    for row in table.changing:
        at = address(name, "sensitivity", "rows", row.key)
        if row.ends is not None and row.ends.changing == 1:
            parts.append(only("without one row"))
        elif row.ends is not None:
            parts.append(prose("without any one of {rows} rows", rows=story.numbers.whole(f"{at}/changing_rows")))
        elif row.kind == STUDENTISED:
            parts.append(only("by the studentised permutation test"))
        elif row.rows is not None and row.kind != "put-back":
            parts.append(prose("without {lines}", lines=lines_in_words(story, at, len(row.rows.lines))))
        elif row.rows is not None:
            parts.append(prose("with {lines} put back", lines=lines_in_words(story, at, len(row.rows.lines))))
    return tuple(part for part in parts if text_of(part))


def intervals_in_words(story: Story, name: str) -> Prose | None:
    """Return the interval rules that place zero on the other side; ``None`` if none does."""
    table = table_of(story, name)
    assert table is not None
    labels = tuple(only(row.label) for row in table.changing if row.interval is not None)
    return joined(labels, "; ") if labels else None

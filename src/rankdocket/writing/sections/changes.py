"""Section 7: what changed since the edition before; the heading stands in every report."""

from collections.abc import Iterator
from dataclasses import replace
from typing import Final

from rankdocket.document.model import Block, Column, Emphasis, Items, Paragraph, Prose, Section, Supplied, TableBlock
from rankdocket.document.numbers import Numbers, look_up
from rankdocket.document.prose import listed, only, prose
from rankdocket.writing.findings import finding_word
from rankdocket.writing.phrases import EN_DASH_CELL, P, address, full_stop, pointer
from rankdocket.writing.section import Before, SectionRule, Story

MOST_KEYS: Final = 20
"""Changed keys that are printed."""


def write(story: Story) -> Section:
    """Return the changes section: reason, data, plan, and every association before and now."""
    facts = story.facts
    blocks: list[Block]
    if facts.replaces is None:
        blocks = [Paragraph(only("First edition: nothing was issued before it."))]
    elif facts.before is None:
        words = prose(
            "This edition replaces {old}, whose record was not at hand: nothing could be set against it. Reason given: "
            "{reason}",
            old=Supplied(facts.replaces),
            reason=full_stop(facts.reason),
        )
        blocks = [Paragraph(words)]
    else:
        template = (
            "This is a draft of an edition that would replace {old}. Reason given: {reason}{moved}"
            if facts.status == "draft"
            else "This edition replaces {old}. Reason given: {reason}{moved}"
        )
        opening = prose(
            template, old=Supplied(facts.replaces), reason=full_stop(facts.reason), moved=moved_findings(story)
        )
        blocks = [Paragraph(opening), Items(_inputs(story, facts.before)), _table(story, facts.before)]
        blocks.extend(_plan_table(facts.before))
    return Section("changes", "7", only("Changes since the last edition"), tuple(blocks))


def moved_findings(story: Story) -> Prose:
    """Return which findings changed, as one sentence with a blank before it; empty for a first edition."""
    before = story.facts.before
    if before is None:
        return only("")
    moved = tuple(name for name in _names(story, before) if _finding_before(before, name) != _finding_now(story, name))
    if not moved:
        return only(" No finding changed.")
    return prose(" Findings changed: {names}.", names=listed(tuple(_named(story, name) for name in moved)))


def _inputs(story: Story, before: Before) -> tuple[Prose, ...]:
    sentences = []
    for name, table in story.analysis.data.tables.items():
        code = Emphasis(name, "code")
        if _old(before, f"tables/{name}/digest") == table.source.digest:
            sentences.append(prose("Table {table}: the file is the same, byte for byte.", table=code))
        elif _old(before, f"tables/{name}/values_digest") == table.source.values_digest:
            sentences.append(prose("Table {table}: the bytes differ, the values read are the same.", table=code))
        else:
            sentences.append(prose("Table {table}: the values differ.", table=code))
    sentences.append(
        only(
            "The planned keys of the spec differ: the plan was changed after an edition with results had been issued. Both "
            "plans stand in the record copy, this one and the one before."
        )
        if before.plan_changes
        else only("The planned keys of the spec are the same.")
    )
    return tuple(sentences)


def _plan_table(before: Before) -> tuple[TableBlock, ...]:
    """Return the planned keys that differ; nothing where none does."""
    changes, more = before.plan_changes[:MOST_KEYS], len(before.plan_changes) - MOST_KEYS
    if not changes:
        return ()
    unnamed = (prose("And {more} more, in the record copy.", more=Supplied(str(more))),) if more > 0 else ()
    return (
        TableBlock(
            key="plan-changes-table",
            number="13",
            caption=only("Planned keys that differ from those of the edition before"),
            columns=(
                Column(only("Key"), "key", share=7),
                Column(only("Value before"), "value_before", share=5),
                Column(only("Value now"), "value", share=5),
            ),
            rows=tuple((only(Emphasis(each.key, "code")), _planned(each.old), _planned(each.new)) for each in changes),
            notes=(only("Values as plan.json writes them; –: that plan has no such key."), *unnamed),
        ),
    )


def _planned(value: str | None) -> Prose:
    return EN_DASH_CELL if value is None else only(Emphasis(value, "code"))


def _table(story: Story, before: Before) -> TableBlock:
    return TableBlock(
        key="changes-table",
        number="12",
        caption=only("Each association in the edition before and in this one"),
        columns=(
            Column(only("Association"), "association", share=2),
            Column(only("Finding before"), "finding_before", share=4),
            Column(only("Finding now"), "finding", share=4),
            Column(only("Estimate before"), "estimate_before", "decimal", share=3),
            Column(only("Estimate now"), "estimate", "decimal", share=3),
            Column(prose("{p} before", p=P), "p_before", "decimal", share=3),
            Column(prose("{p} now", p=P), "p", "decimal", share=3),
        ),
        rows=tuple(_row(story, before, name) for name in _names(story, before)),
        notes=(
            only("Values of the edition before are as its own record holds them; they were not computed again."),
            *_claim_notes(story, before),
        ),
    )


def _row(story: Story, before: Before, name: str) -> tuple[Prose, ...]:
    old = replace(story.numbers, plain=before.plain)
    estimate, p_before, p = address(name, "estimate", "value"), _p(old, name), _p(story.numbers, name)
    return (
        _named(story, name),
        only(_finding_before(before, name)),
        only(_finding_now(story, name)),
        only(Supplied(old.coefficient(estimate).text)) if old.has(estimate) else EN_DASH_CELL,
        only(story.numbers.coefficient(estimate)) if story.numbers.has(estimate) else EN_DASH_CELL,
        only(Supplied(old.p_value(p_before).text)) if old.has(p_before) else EN_DASH_CELL,
        only(story.numbers.p_value(p)) if story.numbers.has(p) else EN_DASH_CELL,
    )


def _p(numbers: Numbers, name: str) -> str:
    """Return where the p-value that decided stands, before it is adjusted: that of a claim, else of independence."""
    return address(name, "finding", "p") if _claims(numbers, name) else address(name, "test", "p")


def _claims(numbers: Numbers, name: str) -> bool:
    """Return whether a claim was to decide; editions from before there were claims do not say what decided."""
    by = address(name, "finding", "by")
    return numbers.has(by) and look_up(numbers.plain, by) != "rank test"


def _claim_notes(story: Story, before: Before) -> Iterator[Prose]:
    """Yield for which associations a p is not that of independence."""
    for when, plain in (("before", before.plain), ("now", story.numbers.plain)):
        numbers = replace(story.numbers, plain=plain)
        names = tuple(
            name for name in _names(story, before) if _claims(numbers, name) and numbers.has(_p(numbers, name))
        )
        if names:
            yield prose(
                f"{{p}} {when} is that of the claim, which decided, for {{names}}; for others that of independence.",
                p=P,
                names=listed(tuple(_named(story, name) for name in names)),
            )


def _finding_before(before: Before, name: str) -> str:
    word = _old(before, address(name, "finding", "word"))
    if word is None:
        return "not in that plan"
    return "no finding stated" if word == "no finding" else word


def _finding_now(story: Story, name: str) -> str:
    if name not in story.analysis.results:
        return "not in this plan"
    return finding_word(story.analysis.findings[name])


def _names(story: Story, before: Before) -> tuple[str, ...]:
    """Return the associations of both plans, those of the plan before first."""
    return tuple(dict.fromkeys([*_associations(before), *story.analysis.results]))


def _named(story: Story, name: str) -> Prose:
    """Return a link to an association’s spread, or its name alone where this plan has no such association."""
    return only(pointer(name)) if name in story.analysis.results else only(Supplied(name))


def _associations(before: Before) -> tuple[str, ...]:
    associations = before.plain["associations"]
    return tuple(associations) if isinstance(associations, dict) else ()


def _old(before: Before, key: str) -> str | None:
    try:
        return str(look_up(before.plain, key))
    except KeyError:
        return None


SECTION = SectionRule("changes", write)

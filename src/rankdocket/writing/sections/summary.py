"""Page 2: question, answer, main number, caveats, in words for somebody with three minutes."""

from math import ceil
from typing import Final

from rankdocket.analysis.results import Estimate
from rankdocket.document.model import Block, FieldList, Items, Link, Paragraph, Prose, Section, Supplied
from rankdocket.document.prose import joined, listed, only, prose, text_of
from rankdocket.vocabulary import FINDINGS
from rankdocket.writing.adjustment import bound_sentence
from rankdocket.writing.findings import finding_sentence, finding_word
from rankdocket.writing.intervals import given, intervals_hold
from rankdocket.writing.phrases import (
    N,
    address,
    coefficient_symbol,
    direction_sentence,
    estimate_with_interval,
    full_stop,
    pointer,
    sentences,
    state_word,
)
from rankdocket.writing.section import NumberedCaveat, Story
from rankdocket.writing.sections.changes import moved_findings
from rankdocket.writing.sensitivity import sensitivity_note
from rankdocket.writing.size import tests_of, verdict_clause

MOST_ASSOCIATIONS: Final = 3
"""So many associations are told of at most; the rest is pointed to."""

MOST_CAVEATS: Final = 3

ROOM: Final = ((3, 3), (2, 3), (2, 2), (2, 1), (1, 3), (1, 2), (1, 1))
"""Associations told of and caveats quoted, in the order of preference; the first that fits is taken, else the last."""

MOST_LINES: Final = 42
"""Lines of text that a page takes beside its heading, by the count of :func:`_lines`; a page of print is the judge."""

CHARACTERS: Final = {"body": 70, "note": 82, "item": 66, "field": 60}
"""Of one line of a paragraph, a note, an entry of a list and an answer, on the safe side."""


def summary(story: Story) -> Section:
    """Return the one-page summary: primary associations first, as many as the page has room for."""
    names = _in_order(story)
    choices = ((told, caveats) for told, caveats in ROOM if told <= len(names) or told == 1)
    for told, caveats in choices:
        blocks = _blocks(story, names[:told], names[told:], caveats)
        if sum(map(_lines, blocks)) <= MOST_LINES:
            break
    return Section("summary", "", only("Summary"), blocks, opens="page")


def _blocks(story: Story, shown: tuple[str, ...], more: tuple[str, ...], caveats: int) -> tuple[Block, ...]:
    blocks: list[Block] = [
        Paragraph(prose("Question. {question}", question=Supplied(story.analysis.spec.study.question))),
        Paragraph(_tally(story)),
    ]
    blocks.extend(FieldList(_answer(story, name), key=f"summary-{name}") for name in shown)
    several = intervals_hold(story) if len(given(story)) > 1 else only("")
    if more or text_of(several):
        blocks.append(Paragraph(sentences(_others(story, more), several), "note"))
    note = sensitivity_note(story, shown)
    if note is not None:
        blocks.append(Paragraph(note, "note"))
    blocks.append(
        Paragraph(
            prose("To be read with the result (all caveats: section {section}):", section=Link("requirements", "5"))
        )
    )
    blocks.append(Items(tuple(caveat.block.prose for caveat in _heaviest(story, shown)[:caveats])))
    blocks.append(Paragraph(_changes(story), "note"))
    return tuple(blocks)


def _lines(block: Block) -> int:
    """Return how many lines of the page a block of the summary takes, about; a list of fields has one of space."""
    match block:
        case Paragraph():
            return _of(block.prose, "note" if block.role == "note" else "body")
        case Items():
            return sum(_of(item, "item") for item in block.items)
        case FieldList():
            return 1 + sum(_of(content, "field") for _, content in block.rows)
        case _:
            raise TypeError(f"a summary has no {type(block).__name__}")


def _of(words: Prose, kind: str) -> int:
    return ceil(len(text_of(words)) / CHARACTERS[kind])


def _others(story: Story, more: tuple[str, ...]) -> Prose:
    """Return the findings that this page has no room to tell; empty where there are none."""
    if not more:
        return only("")
    words = tuple(
        prose("{name} {word}", name=pointer(name), word=finding_word(story.analysis.findings[name])) for name in more
    )
    return prose("The others: {others}. All stand in {table}.", others=listed(words), table=Link("results", "Table 5"))


def _heaviest(story: Story, told: tuple[str, ...]) -> tuple[NumberedCaveat, ...]:
    """Return the heaviest caveats, one of each kind, those first that concern an association told of on this page."""

    def place(caveat: NumberedCaveat) -> tuple[int, bool]:
        return -caveat.weight, bool(caveat.about) and not set(told) & set(caveat.about)

    chosen: dict[int, NumberedCaveat] = {}
    for caveat in sorted(story.caveats, key=place):
        chosen.setdefault(caveat.weight, caveat)
    return tuple(chosen.values())[:MOST_CAVEATS]


def _in_order(story: Story) -> tuple[str, ...]:
    order = {"primary": 0, "secondary": 1, "exploratory": 2}
    associations = story.analysis.spec.associations
    return tuple(sorted(associations, key=lambda name: order[associations[name].role]))


def _tally(story: Story) -> Prose:
    total = story.numbers.whole("tally/associations")
    if len(story.analysis.results) == 1:
        return prose("The plan names {total} association.", total=total)
    findings = [finding.word for finding in story.analysis.findings.values()]
    counts = tuple(
        prose("{word}: {count}", word=word, count=story.numbers.whole(f"tally/findings/{word}"))
        for word in FINDINGS
        if word in findings
    )
    if None in findings:
        counts += (prose("no finding stated: {count}", count=story.numbers.whole("tally/findings/no finding")),)
    return sentences(
        prose(
            "The plan names {total} associations. Findings by its rule: {counts}.",
            total=total,
            counts=joined(counts, "; "),
        ),
        bound_sentence(story),
    )


def _answer(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    result = story.analysis.results[name]
    spec = result.screened.spec
    rows: list[tuple[str, Prose]] = [(f"{name}, {spec.role}", only(Supplied(spec.question)))]
    if isinstance(result.estimate, Estimate):
        rows.append(
            (
                "Answer",
                prose(
                    "{direction}. {finding}",
                    direction=direction_sentence(story, name),
                    finding=finding_sentence(story, name),
                ),
            )
        )
        rows.append(
            (
                "Main number",
                prose(
                    "{symbol} {estimate}, complete rows {n}\u00a0=\u00a0{rows}",
                    symbol=coefficient_symbol(spec),
                    estimate=estimate_with_interval(story, name),
                    n=N,
                    rows=story.numbers.whole(address(name, "rows", "complete")),
                ),
            )
        )
        if tests_of(story, name) is not None:
            rows.append(("Size", verdict_clause(story, name)))
    else:
        rows.append(("Answer", prose("{state}.", state=state_word(result).capitalize())))
        rows.append(("Finding", only(finding_word(story.analysis.findings[name]))))
    return tuple(rows)


def _changes(story: Story) -> Prose:
    facts = story.facts
    if facts.replaces is None:
        return only("Changes: nothing was issued before.")
    template = (
        "Changes: draft of an edition that would replace {old}. Reason: {reason}{moved}"
        if facts.status == "draft"
        else "Changes: this edition replaces {old}. Reason: {reason}{moved}"
    )
    return prose(template, old=Supplied(facts.replaces), reason=full_stop(facts.reason), moved=moved_findings(story))

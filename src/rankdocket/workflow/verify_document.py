"""A document that another program wrote, held against a fresh one: its words may differ, what they state may not."""

import dataclasses
import re
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.document.model import (
    Document,
    FieldList,
    FigureBlock,
    Number,
    SignatureBlock,
    SignatureLine,
    TableBlock,
    Verbatim,
)
from rankdocket.document.numbers import Numbers, look_up
from rankdocket.document.prose import numbers_of, text_of
from rankdocket.references import REFERENCES
from rankdocket.study.spec import StudySpec
from rankdocket.workflow.differences import counted, short
from rankdocket.workflow.document_facts import (
    Fact,
    all_blocks,
    all_sections,
    facts_of,
    outcomes_of,
    row_facts,
    runs_of,
    told,
    words_of,
)

MOST_WORDS: Final = 20
"""So many changed sentences are quoted; the rest is counted."""

_ALWAYS_PRINTED: Final = re.compile(
    r"associations/[^/]+/(?:rows/complete|estimate/value|interval/low|interval/high|test/p|finding/p_adjusted)"
)
"""Numbers that no program may leave out when another prints them."""

_RESULTS: Final = ("associations/", "tally/")
"""Numbers that say something else when they stand in another sentence."""

_DIGITS: Final = re.compile(r"\d+(?:[.,]\d+)*")


@dataclass(frozen=True, slots=True)
class Fresh:
    """What a filed document is held against: today's document, the numbers and the spec, and the filed spec as used."""

    document: Document
    plain: Mapping[str, Plain]
    spec: StudySpec
    spec_text: str


def document_problems(filed: Document, fresh: Fresh) -> Iterator[str]:
    """Yield a sentence for each thing that the filed document states and a fresh one does not."""
    yield from _numbers(filed, fresh)
    yield from _furniture(filed, fresh.document)
    yield from _runs(filed, fresh.document)
    yield from _tables(filed, fresh.document)
    yield from _figures(filed, fresh.document)
    yield from _quotations(filed, fresh)
    yield from _digits(filed, fresh.document)


def word_remarks(filed: Document, fresh: Document) -> tuple[str, ...]:
    """Return a sentence for each run of words of one document that the other does not have, the first ones quoted."""
    ours, theirs = _texts(fresh), _texts(filed)
    # In full: a change must not hide behind the end of a quotation.
    found = [
        f"{place} says “{text}”; this program has other words." for text, place in theirs.items() if text not in ours
    ]
    found += [
        f"{place} does not say “{text}”; this program does." for text, place in ours.items() if text not in theirs
    ]
    extra = len(found) - MOST_WORDS
    return (*found[:MOST_WORDS], *((f"and other words in {counted(extra, 'more place')}.",) if extra > 0 else ()))


def _texts(document: Document) -> dict[str, str]:
    found: dict[str, str] = {}
    for run in runs_of(document):
        found.setdefault(text_of(run.prose), run.place)
    for block in all_blocks(document):
        match block:
            case TableBlock():
                for row in (*block.rows, *block.foot):
                    for cell in row:
                        found.setdefault(text_of(cell), f"table {block.key}")
            case FieldList():
                for label, _ in block.rows:
                    found.setdefault(label, f"list {block.key or ''}".strip())
            case FigureBlock():
                found.setdefault(block.alternative, f"figure {block.key}")
            case SignatureBlock():
                for line in block.lines:
                    found.setdefault(line.note, "the control page")
            case _:
                pass
    for text in document.references.values():
        found.setdefault(text, "the list of references")
    found.setdefault(document.end_mark, "the end of the report")
    return found


def _numbers(filed: Document, fresh: Fresh) -> Iterator[str]:
    printed: dict[str, set[str]] = {}
    for number in numbers_of(fresh.document):
        printed.setdefault(number.key, set()).add(number.text)
    theirs = dict.fromkeys(numbers_of(filed))
    for number in theirs:
        try:
            exact = str(look_up(fresh.plain, number.key))
        except KeyError:
            yield f"{number.key} is printed as {short(number.text)}, and no number has that address."
            continue
        right = printed.get(number.key) or _ways_to_print(number.key, fresh)
        if number.exact != exact:
            yield f"{number.key} is {short(number.exact)} as filed, {short(exact)} as recomputed."
        if number.text not in right:
            yield f"{number.key} was printed as {short(number.text)}, recomputed {short(', '.join(sorted(right)))}."
    keys = {number.key for number in theirs}
    for key in printed:
        if key not in keys and _ALWAYS_PRINTED.fullmatch(key):
            yield f"{key} is not printed."


def _ways_to_print(key: str, fresh: Fresh) -> set[str]:
    """Return every text by which some place of a report could print a number that today's does not print."""
    report = fresh.spec.report
    alpha: Decimal = fresh.spec.inference.alpha
    numbers = Numbers(fresh.plain, report.coefficient_decimals, report.p_value_decimals, report.number_style, alpha)
    ways: tuple[Callable[[str], Number], ...] = (
        numbers.whole, numbers.label, numbers.as_filed, numbers.level, numbers.share, numbers.percent,
        numbers.percent_down, numbers.percent_short,
        numbers.coefficient, numbers.p_value, numbers.attainable_p,
    )  # fmt: skip
    found = set()
    for way in ways:
        try:
            found.add(way(key).text)
        except (ArithmeticError, TypeError, ValueError, LookupError):
            continue  # a share is no count, a word no number
    return found


def _furniture(filed: Document, fresh: Document) -> Iterator[str]:
    for field in dataclasses.fields(fresh.furniture):
        theirs, ours = getattr(filed.furniture, field.name), getattr(fresh.furniture, field.name)
        if theirs != ours:
            yield f"{field.name} of every page is {short(theirs)} as filed, {short(ours)} as written today."


def _runs(filed: Document, fresh: Document) -> Iterator[str]:
    stated: dict[str, set[tuple[Fact, ...]]] = {}
    for run in runs_of(fresh):
        stated.setdefault(run.place, set()).add(facts_of(run.prose))
    anywhere = {facts for place in stated.values() for facts in place}
    here: dict[str, set[tuple[Fact, ...]]] = {}
    for run in runs_of(filed):
        facts = facts_of(run.prose)
        here.setdefault(run.place, set()).add(outcomes_of(facts))
        # A place that is not written today has words of its own; what they state still has to be stated somewhere.
        if not _is_stated(facts, stated.get(run.place, anywhere), anywhere):
            yield f"{run.place} states {told(facts)} in {short(text_of(run.prose))}; a fresh writing does not."
    for place in stated.keys() & here.keys():
        for outcomes in {outcomes_of(facts) for facts in stated[place]} - here[place]:
            yield f"{place} does not state {told(outcomes)}, which a fresh writing does."


def _is_stated(facts: tuple[Fact, ...], at_this_place: set[tuple[Fact, ...]], anywhere: set[tuple[Fact, ...]]) -> bool:
    """Return whether a fresh writing states the same, in a sentence of its own or, without results, in several."""
    if not facts or facts in at_this_place:
        return True
    if any(fact[0] == "number" and fact[1].startswith(_RESULTS) for fact in facts):
        return False
    quoted = {fact for fact in facts if fact[0] == "quoted"}
    known = {fact for others in anywhere for fact in others}
    return quoted <= known and outcomes_of(facts) in {outcomes_of(others) for others in at_this_place}


def _tables(filed: Document, fresh: Document) -> Iterator[str]:
    ours = {block.key: block for block in all_blocks(fresh) if isinstance(block, TableBlock)}
    for table in all_blocks(filed):
        if not isinstance(table, TableBlock):
            continue
        if table.key not in ours:
            yield f"table {table.key} is not written today, so that nothing says whether it is right."
            continue
        today = ours[table.key]
        names = {column.name for column in table.columns}
        shared = tuple(column.name for column in today.columns if column.name in names)
        if extra := names - set(shared):
            yield f"table {table.key} has a column {', '.join(sorted(extra))} that is not written today."
        rows, right = row_facts(table, shared), row_facts(today, shared)
        for head, cells in rows:
            if (head, cells) not in right:
                nearest = next((others for other, others in right if other == head), ())
                differing = [told(cell) for cell in cells if cell not in nearest]
                states = f", states {', '.join(differing)}" if differing else ""
                yield f"table {table.key}, row {head}{states}; a fresh writing does not."
        lacking = {head for head, _ in right} - {head for head, _ in rows}
        yield from (f"table {table.key} lacks the row {head}." for head in sorted(lacking))


def _figures(filed: Document, fresh: Document) -> Iterator[str]:
    ours = {block.key: block for block in all_blocks(fresh) if isinstance(block, FigureBlock)}
    for figure in all_blocks(filed):
        if not isinstance(figure, FigureBlock):
            continue
        today = ours.get(figure.key)
        if today is None:
            yield f"figure {figure.key} is not drawn today, so that nothing says whether it is right."
        elif (figure.kind, figure.data) != (today.kind, today.data):
            yield f"figure {figure.key} is drawn from other values than a fresh one."
        elif _DIGITS.findall(figure.alternative) != _DIGITS.findall(today.alternative):
            yield f"figure {figure.key} is described by other numbers than a fresh one: {short(figure.alternative)}."


def _quotations(filed: Document, fresh: Fresh) -> Iterator[str]:
    known = {block.text for block in all_blocks(fresh.document) if isinstance(block, Verbatim)} | {fresh.spec_text}
    people = {
        _person(line)
        for block in all_blocks(fresh.document)
        if isinstance(block, SignatureBlock)
        for line in block.lines
    }
    for block in all_blocks(filed):
        if isinstance(block, Verbatim) and block.text not in known:
            yield f"{short(block.text)} is printed as a quotation and is none."
        elif isinstance(block, SignatureBlock):
            for line in block.lines:
                if _person(line) not in people:
                    yield f"{short(', '.join(_person(line)))} stands on the control page and not in the spec."


def _person(line: SignatureLine) -> tuple[str, str, str]:
    return (line.act, line.name, line.role)


def _digits(filed: Document, fresh: Document) -> Iterator[str]:
    """Yield words that hold a number without an address, unless they are those of today or point to a part."""
    known = set(_loose_words(fresh)) | {work.short for work in REFERENCES.values()}
    parts = {section.number for section in all_sections(filed)}
    parts |= {block.number for block in all_blocks(filed) if isinstance(block, TableBlock | FigureBlock)}
    for words in _loose_words(filed):
        if any(sign.isdigit() for sign in words) and words not in known and words.split()[-1] not in parts:
            yield f"{short(words)} holds a number without an address."


def _loose_words(document: Document) -> Iterator[str]:
    for run in runs_of(document):
        yield from words_of(run.prose)
    for block in all_blocks(document):
        match block:
            case TableBlock():
                for row in (*block.rows, *block.foot):
                    for cell in row:
                        yield from words_of(cell)
                yield from (column.name for column in block.columns)
            case FieldList():
                yield from (label for label, _ in block.rows)
            case SignatureBlock():
                yield from (line.note for line in block.lines)
            case _:
                pass
    yield document.end_mark

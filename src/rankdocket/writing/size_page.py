"""How many rows are needed, in words: the answer for a terminal, and one page for a proposal."""

from collections.abc import Mapping
from dataclasses import replace
from decimal import Decimal

from rankdocket.analysis.sizing import ShowAnswer, SizeAnswer
from rankdocket.canonical import Plain
from rankdocket.document.model import Block, FieldList, Leaf, Paragraph, Section
from rankdocket.document.numbers import Numbers
from rankdocket.document.prose import lint_document, only
from rankdocket.errors import RenderError
from rankdocket.writing.citations import cited_works
from rankdocket.writing.size_basis import basis, caveats
from rankdocket.writing.size_measured import measured, measured_answer, measured_figure, measured_rows
from rankdocket.writing.size_shown import shown_answer, shown_figure, shown_rows, shown_with_rows
from rankdocket.writing.size_words import Told, circumstances

COEFFICIENT_DECIMALS = 2
P_VALUE_DECIMALS = 3


def told(answer: SizeAnswer, plain: Mapping[str, Plain]) -> Told:
    """Return an answer with its plain form, to which every number points."""
    alpha = answer.question.alpha if isinstance(answer, ShowAnswer) else Decimal("0.05")
    return Told(answer, plain, Numbers(plain, COEFFICIENT_DECIMALS, P_VALUE_DECIMALS, "leading zero", alpha))


def size_answer(story: Told) -> tuple[Block, ...]:
    """Return what a terminal shows: the answer, the table, what the rows amount to, and the caveats."""
    return (*_answer(story), *_figures_of_plan(story), *caveats(story))


def size_leaf(story: Told, program: str) -> Leaf:
    """Return the page.

    Raises
    ------
    RenderError
        If a sentence of the program’s own breaks the wording rules.
    """
    shows = isinstance(story.answer, ShowAnswer)
    figure = shown_figure(story) if shows else measured_figure(story)
    leaf = Leaf(
        "en-GB",
        "How many rows are needed to show an association" if shows else "How many rows are needed to measure one",
        f"Planned with rankdocket {program}",
        (
            Section("answer", "", only("Answer"), _answer(story)[:1]),
            Section("asked", "", only("What was asked"), (FieldList(circumstances(story), key="asked"),)),
            Section("rows", "", only("Rows for this target and its neighbours"), (*_figures_of_plan(story), figure)),
            Section("basis", "", only("How it was worked out"), (*basis(story), *caveats(story))),
            Section("references", "", only("References"), ()),
        ),
    )
    hits = lint_document(leaf)
    if hits:
        raise RenderError(f"A sentence of the program breaks the wording rules: {hits[0].phrase!r}, {hits[0].rule}.")
    return replace(leaf, references=cited_works(leaf))


def _answer(story: Told) -> tuple[Paragraph, ...]:
    words = shown_answer(story) if isinstance(story.answer, ShowAnswer) else measured_answer(story)
    return (Paragraph(words, "answer"),)


def _figures_of_plan(story: Told) -> tuple[Block, ...]:
    if isinstance(story.answer, ShowAnswer):
        return (shown_rows(story), Paragraph(shown_with_rows(story)))
    return (measured_rows(story), Paragraph(measured(story)))

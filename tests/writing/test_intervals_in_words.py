"""What is said of intervals beside their limits: for what they hold, in tables, figure, summary and methods."""

from dataclasses import replace

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.document.model import FieldList, Paragraph
from rankdocket.document.prose import text_of
from rankdocket.writing.figures import interval_strip
from rankdocket.writing.intervals import intervals_hold
from rankdocket.writing.sections.methods import method_paragraphs
from writing.reports import Told, told

CLOSE = "5 1 2 4 6 3 8 10 9 7"
THREE = Invented(
    columns={"u": RISING, "v": CLOSE, "w": MIXED, "x": FALLING},
    associations={
        "A1": association("u", "v"),
        "A2": association("u", "w"),
        "A3": association("v", "w", role="exploratory"),
    },
)
SIMULTANEOUS = "alpha: 0.05, interval: {adjusted: simultaneous}"
SELECTED = "alpha: 0.05, several_tests: {adjust: Benjamini-Hochberg}, interval: {adjusted: after selection}"


def cells(report: Told) -> dict[str, str]:
    table = report.table("results")
    place = [column.name for column in table.columns].index("interval")
    return {text_of(row[0]): text_of(row[place]) for row in table.rows} | {"head": text_of(table.columns[place].head)}


def numbers(report: Told, name: str) -> dict[str, str]:
    block = report.block(f"numbers-{name}")
    assert isinstance(block, FieldList)
    return {label: text_of(content) for label, content in block.rows}


@pytest.mark.parametrize(
    ("inference", "expected", "sentences"),
    [
        (
            "alpha: 0.05",
            {
                "head": "95% interval, unadjusted",
                "A1": "0.12 to 0.95",
                "A2": "−0.52 to 0.72",
                "A3": "−0.77 to 0.70",
            },
            "Each interval holds for its association alone.",
        ),
        (
            SIMULTANEOUS,
            {
                "head": "95% interval, simultaneous",
                "A1": "0.005 to 0.96",
                "A2": "−0.60 to 0.77",
                "A3": "−0.77 to 0.70, alone",
            },
            "The intervals of the family hold together at 95%. One marked “alone” holds for its association alone.",
        ),
        (
            SELECTED,
            {
                "head": "95% interval, after selection",
                "A1": "0.005 to 0.96",
                "A2": "−0.52 to 0.72, alone",
                "A3": "−0.77 to 0.70, alone",
            },
            (
                "The intervals of the members shown are adjusted for their selection. One marked “alone” holds for its "
                "association alone."
            ),
        ),
    ],
    ids=["alone", "simultaneous", "after selection"],
)
def test_head_and_cells_say_for_what_an_interval_holds(
    inference: str, expected: dict[str, str], sentences: str
) -> None:
    """And the note, the caption of the strip and the summary say it in a sentence (golden)."""
    report = told(replace(THREE, inference=inference).analysed())
    assert cells(report) == expected
    assert text_of(intervals_hold(report.story)) == sentences
    assert text_of(report.table("results").notes[0]).endswith(sentences)
    assert text_of(interval_strip(report.story).caption).endswith(sentences)
    notes = [text_of(block.prose) for block in report.document.summary.blocks if isinstance(block, Paragraph)]
    assert any(note.endswith(sentences) for note in notes)


def test_one_association_needs_no_sentence_in_the_summary() -> None:
    """There is nothing that its interval could hold together with."""
    report = told(Invented().analysed())
    notes = [text_of(block.prose) for block in report.document.summary.blocks if isinstance(block, Paragraph)]
    assert not any("interval" in note for note in notes)


METHODS = {
    "simultaneous": (
        SIMULTANEOUS,
        (
            "The intervals of the 2 members of the family were computed at 97.5% each, the error that 95% leaves divided "
            "evenly among the members, estimable or not: as far as each holds its own level, all of them hold together at "
            "95%, whatever the dependence between them (Dunn 1961). The other intervals hold for their association alone."
        ),
    ),
    "after selection": (
        SELECTED,
        (
            "The intervals of the members shown, 1 of 2 in the family, were computed at 97.5% each, the error that 95% "
            "leaves times members shown over members: as far as each holds its own level, and estimates are independent or "
            "depend on one another positively, the expected share of intervals so selected that miss is no more than that "
            "error; under other dependence it can be larger (Benjamini & Yekutieli 2005). The other intervals hold for "
            "their association alone."
        ),
    ),
}


@pytest.mark.parametrize("kind", list(METHODS))
def test_the_methods_say_how_intervals_were_adjusted(kind: str) -> None:
    """With the level of each and the condition (golden)."""
    inference, expected = METHODS[kind]
    report = told(replace(THREE, inference=inference).analysed())
    assert expected in "\n".join(text_of(paragraph) for paragraph in method_paragraphs(report.story))


def test_a_plan_whose_selection_is_empty_says_that_nothing_was_adjusted() -> None:
    """Each interval is marked, and no level of adjusted ones is named."""
    columns = {**THREE.columns, "v": MIXED}
    report = told(replace(THREE, columns=columns, inference=SELECTED).analysed())
    text = "\n".join(text_of(paragraph) for paragraph in method_paragraphs(report.story))
    assert "No interval came to be adjusted" in text
    assert cells(report)["A1"] == "−0.52 to 0.72, alone"


def test_the_spread_gives_level_rule_and_the_interval_alone() -> None:
    """Beside the adjusted interval stands the one of the plan’s level; what is not adjusted has neither row."""
    report = told(replace(THREE, inference=SIMULTANEOUS).analysed())
    rows = numbers(report, "A1")
    assert rows["Interval by"] == "guarded jackknife, as narrow as the rule allows"
    assert rows["Level of the interval"] == "97.5%"
    assert rows["Interval for this association alone"] == "0.12 to 0.95, 95%"
    assert not {"Level of the interval", "Interval for this association alone"} & numbers(report, "A3").keys()


def test_the_spread_says_what_ties_allow_and_what_was_drawn() -> None:
    """Without ties every coefficient can occur, and nothing is said."""
    halves = Invented(
        columns={"u": RISING, "v": "1 1 1 1 1 2 2 2 2 2"},
        inference="alpha: 0.05, p_value: {seed: 3}, interval: {by: BCa bootstrap, resamples: 1999}",
    )
    report = told(halves.analysed())
    rows = numbers(report, "A1")
    assert rows["Coefficients that the ties allow"] == "−0.87 to 0.87"
    assert rows["Resamples"].startswith("seed 3, stream IN-1 / A1 / interval / resamples; 1,999 drawn, ")
    assert "Coefficients that the ties allow" not in numbers(told(THREE.analysed()), "A1")
    digests = report.block("digests")
    assert isinstance(digests, FieldList)
    assert "Seed of drawn orderings and resamples" in dict(digests.rows)

"""Claims, verdicts and what the rows could show, as they are said."""

from dataclasses import replace
from typing import Any

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.document.model import FieldList, TableBlock
from rankdocket.document.prose import text_of
from writing.reports import Told, demonstration_report, told

NEAR = "3 4 1 9 2 5 6 8 10 7"
LONG = " ".join(str(place) for place in range(1, 61))
SHUFFLED = " ".join(str((place * 37) % 61) for place in range(1, 61))
"""Sixty values that stand with LONG in a rho of 0.05."""


def of(v: str, more: str, *, sign: str = "positive", **parts: Any) -> Told:
    u = LONG if len(v.split()) == 60 else RISING
    plan = {"A1": association(sign=sign, more=more)}
    return told(replace(Invented(), columns={"u": u, "v": v}, associations=plan, **parts).analysed())


def plainly(text: str) -> str:
    return text.replace("\u00a0", " ").replace("\u202f", " ")


def answer(report: Told) -> str:
    block = report.section("association-A1").blocks[1]
    return plainly(text_of(block.prose))  # type: ignore[union-attr]


def listed(report: Told, key: str) -> dict[str, str]:
    block = report.block(key)
    assert isinstance(block, FieldList)
    return {label: plainly(text_of(content)) for label, content in block.rows}


APPROXIMATE = "; the test is approximate."
SENTENCES = {
    "above": (
        of(RISING, "smallest_of_interest: 0.30, claim: above"),
        "the expected positive association, larger than 0.30, was shown: the adjusted p < 0.001 lay at or below alpha, 0.05",
    ),
    "above, opposite": (
        of(FALLING, "smallest_of_interest: 0.30, claim: above"),
        (
            "an association larger in size than 0.30 was shown, with the sign opposite to the one expected: the adjusted "
            "p < 0.001 lay at or below alpha, 0.05"
        ),
    ),
    "above, either": (
        of(NEAR, "smallest_of_interest: 0.30, claim: above", sign="either"),
        "an association larger in size than 0.30 was not shown: the adjusted p = 0.118 lay above alpha, 0.05",
    ),
    "within": (
        of(SHUFFLED, "smallest_of_interest: 0.40, claim: within"),
        "a rho within plus or minus 0.40 was shown: the adjusted p = 0.004 lay at or below alpha, 0.05",
    ),
    "value": (
        of(SHUFFLED, "null_value: 0.60", sign="either"),
        "a rho other than 0.60 was shown: the adjusted p < 0.001 lay at or below alpha, 0.05",
    ),
    "value, opposite": (
        of(SHUFFLED, "null_value: 0.60"),
        (
            "a rho below 0.60 was shown, the side opposite to the one expected: the adjusted p < 0.001 lay at or below "
            "alpha, 0.05"
        ),
    ),
    "value, negative": (
        of(SHUFFLED, "null_value: 0.60", sign="negative"),
        "a rho below 0.60, as expected, was shown: the adjusted p < 0.001 lay at or below alpha, 0.05",
    ),
}


@pytest.mark.parametrize("case", SENTENCES)
def test_a_finding_about_a_claim_says_the_claim_and_that_its_test_is_approximate(case: str) -> None:
    """In the spread and on the summary page alike."""
    report, words = SENTENCES[case]
    sentence = f"By the rule of the plan {words}{APPROXIMATE}"
    assert sentence in answer(report)
    assert sentence in listed(report, "summary-A1")["Answer"]


@pytest.mark.parametrize(
    ("more", "words"),
    [
        ("smallest_of_interest: 0.60, claim: above", "That does not show that the size is smaller."),
        ("smallest_of_interest: 0.60, claim: within", "That does not show that the size is larger."),
        ("null_value: 0.60", "That does not show that rho has that value."),
    ],
)
def test_a_claim_not_shown_is_not_its_contrary(more: str, words: str) -> None:
    """Neither smaller nor larger nor equal follows."""
    assert words in answer(of(NEAR, more))


def test_a_claim_that_cannot_be_tested_says_why() -> None:
    """Three rows have no variance on the z scale."""
    report = told(
        replace(
            Invented(),
            columns={"u": "1 2 3", "v": "1 3 2"},
            associations={"A1": association(more="null_value: 0.3")},
        ).analysed()
    )
    assert "was not shown: it could not be tested, because the variance on the" in answer(report)
    assert listed(report, "numbers-A1")["Size"].startswith("not tested: the variance on the")


@pytest.mark.parametrize(
    ("report", "verdict"),
    [
        (of(RISING, "smallest_of_interest: 0.30"), "above 0.30 shown"),
        (of(SHUFFLED, "smallest_of_interest: 0.40"), "within ±0.40 shown, independence not rejected"),
        (of("1 3 2 5 4 7 6 9 8 10", "smallest_of_interest: 0.999"), "within ±0.999 shown, independence rejected"),
        (of(NEAR, "smallest_of_interest: 0.30"), "different from zero, not shown above 0.30"),
        (of(MIXED, "smallest_of_interest: 0.30"), "undecided"),
    ],
)
def test_the_four_verdicts_in_plain_words(report: Told, verdict: str) -> None:
    """In the answer, on the summary page, in the list of numbers and beside what was planned."""
    sentence = f"Verdict about size, by approximate tests at level 0.05: {verdict}."
    assert answer(report).endswith(sentence)
    assert listed(report, "summary-A1")["Size"] == f"{verdict}, by approximate tests"
    assert listed(report, "numbers-A1")["Verdict about size"] == f"{verdict}, at level 0.05"
    assert listed(report, "planned-and-found")["A1"].endswith(f"; size: {verdict}")


def test_the_numbers_of_a_size_stand_with_their_k() -> None:
    """z, k, p and the interval of level 1 − 2·alpha; the p of independence is in its own row."""
    rows = listed(of(NEAR, "smallest_of_interest: 0.30, claim: above"), "numbers-A1")
    assert rows["Above the size of interest"] == (
        "0.30: z = 1.199 against it and 2.801 against its negative, k = 1.045, approximate p = 0.118"
    )
    assert "; 90% interval −0.04 to 0.92" in rows["Within the size of interest"]
    assert rows["Test"].startswith("p = 0.049, ")
    value = listed(of(NEAR, "null_value: 0.2"), "numbers-A1")["Null value"]
    assert value == "rho is 0.2: z = 1.493, k = 1.02, approximate p = 0.135"


def test_the_tables_say_which_p_was_adjusted() -> None:
    """The p of independence stays in its column; a note gives the other."""
    table = of(NEAR, "smallest_of_interest: 0.30, claim: above").table("results")
    names = [column.name for column in table.columns]
    row = dict(zip(names, (text_of(cell) for cell in table.rows[0]), strict=True))
    assert (row["p"], row["p_adjusted"], row["finding"]) == ("0.049", "0.118", "not shown")
    notes = [plainly(text_of(note)) for note in table.notes]
    assert "A1: finding and adjusted p are about a size above 0.30; its own approximate p = 0.118." in notes


def test_the_methods_describe_the_tests_that_ran_and_no_others() -> None:
    """With their factors and works; nothing of them where the plan does not ask."""
    with_size, with_value, without = (
        plainly("\n".join(report.methods()))
        for report in (
            of(NEAR, "smallest_of_interest: 0.30, claim: above"),
            of(NEAR, "null_value: 0.2"),
            of(NEAR, ""),
        )
    )
    assert "Murphy & Myors 1999" in with_size
    assert "with the variance factor 1.045" in with_size
    assert "For A1 the p-value of the claim entered the family instead of that of independence" in with_size
    assert "tested against the value of the plan" in with_value
    assert "with the variance factor 1.02" in with_value
    assert "variance factor" not in without
    assert "the planned power, 0.80" in without


def test_the_table_of_what_could_be_shown() -> None:
    """Figures where there are answers, reasons below where there are none."""
    plan = {
        "A1": association(more="smallest_of_interest: 0.30"),
        "A2": association(more="coefficient: Kendall tau-b"),
    }
    report = told(replace(Invented(), associations=plan).analysed())
    table = report.table("could-show")
    assert isinstance(table, TableBlock)
    assert table.number == "7"
    rows = [[plainly(text_of(cell)) for cell in row] for row in table.rows]
    assert rows[0] == ["A1", "10", "< 0.000001", "0.84", "1.41", "1.37"]
    assert rows[1][3:] == ["–", "–", "–"]
    assert "A2: no smallest size of rho and no width: the formula is for rho." in [
        text_of(note) for note in table.notes
    ]


def widths_said(report: Told) -> tuple[str, str]:
    """Return what note and methods say of expected widths."""
    notes = [text_of(note) for note in report.table("could-show").notes]
    return " ".join(note for note in notes if note.startswith("The widths")), plainly(report.text())


def test_whose_widths_are_expected_is_said() -> None:
    """In the note of the table and in the methods text, by name where two rules stand in one table."""
    simulated, textbook = "has on average in untied rows", "of the textbook interval of Bonett and Wright; "
    note, said = widths_said(of(NEAR, "smallest_of_interest: 0.3"))
    assert note.startswith("The widths are those that the guarded jackknife interval has on average in untied rows")
    assert "The width is the mean width of the guarded jackknife interval, simulated " in said
    assert textbook not in note
    note, said = widths_said(of(NEAR, "smallest_of_interest: 0.3", inference="alpha: 0.05, interval: {by: Fisher z}"))
    assert note.startswith("The widths are those of the textbook interval of Bonett and Wright; ")
    assert "The width is that of the textbook interval of Bonett and Wright, whatever the rule of the plan" in said
    assert simulated not in note
    plan = {"A1": association(), "A2": association(more="smallest_of_interest: 0.99")}
    note, said = widths_said(told(replace(Invented(), associations=plan).analysed()))
    assert "The widths of A1 are those that the guarded " in note
    assert "The widths of A2 are those of the textbook " in note
    assert "The width for A1 is the mean width " in said
    assert "The width for A2 is that of the textbook " in said
    one_sided = of(NEAR, "smallest_of_interest: 0.3", inference="alpha: 0.05, sidedness: one-sided")
    assert widths_said(one_sided)[0] == ""


def test_there_is_no_such_table_where_no_estimate_is_given() -> None:
    """The reasons stand with the associations."""
    report = told(replace(Invented(), columns={"u": RISING, "v": "5 " * 10}).analysed())
    assert "could-show" not in [getattr(block, "key", None) for block in report.section("results-section").blocks]


def test_a_claim_is_no_question_of_what_independence_could_show() -> None:
    """The note names the associations whose finding another test decides, and no others."""
    words = "A1: the finding is that of a claim, whose own test decides; the size given here is no answer about it."
    for more, is_said in (("smallest_of_interest: 0.30, claim: above", True), ("smallest_of_interest: 0.30", False)):
        table = of(NEAR, more).table("could-show")
        assert (words in [text_of(note) for note in table.notes]) == is_said


def test_a_verdict_that_lags_behind_a_shown_claim_says_its_level_is_stricter() -> None:
    """The verdict takes alpha over the members, the finding the rule of the plan; where they agree nothing is added."""
    report = demonstration_report("two-kilns")
    lagging = ": undecided, at a stricter level than the finding."
    sentences = {
        name: plainly(text_of(report.section(f"association-{name}").blocks[1].prose))  # type: ignore[union-attr]
        for name in ("A2", "A3")
    }
    assert "a rho within plus or minus 0.40 was shown" in sentences["A3"]
    assert sentences["A3"].endswith(lagging)
    assert sentences["A2"].endswith(": above 0.40 shown.")
    assert listed(report, "numbers-A3")["Verdict about size"].startswith("undecided, at level 0.05 over ")

"""Findings as sentences: no more than the plan’s rule made of the rows."""

from dataclasses import replace
from typing import Any

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.document.model import Paragraph
from rankdocket.document.prose import text_of
from rankdocket.writing.findings import deciding_p, finding_sentence, finding_word, size_sentence
from writing.reports import Told, study_of_every_finding, told

BASE = Invented()
OWN = "alpha: 0.05, several_tests: {among: none, reason: one question}"
UNADJUSTED = "alpha: 0.05, several_tests: {adjust: none, reason: one question}"


def of(v: str, *, sign: str = "positive", more: str = "", role: str = "primary", **parts: Any) -> Invented:
    """Return a study of one association between a rising variable and v."""
    plan = {"A1": association(sign=sign, more=more, role=role)}
    return replace(BASE, columns={"u": RISING, "v": v}, associations=plan, **parts)


SENTENCES = {
    "shown": (
        of(RISING),
        (
            "By the rule of the plan the expected positive association was shown: the adjusted p < 0.001 lay at or below "
            "alpha, 0.05."
        ),
    ),
    "shown, negative": (
        of(FALLING, sign="negative"),
        (
            "By the rule of the plan the expected negative association was shown: the adjusted p < 0.001 lay at or below "
            "alpha, 0.05."
        ),
    ),
    "shown, either": (
        of(FALLING, sign="either"),
        "By the rule of the plan an association was shown: the adjusted p < 0.001 lay at or below alpha, 0.05.",
    ),
    "shown, own p": (
        of(RISING, inference=OWN),
        "By the rule of the plan the expected positive association was shown: p < 0.001 lay at or below alpha, 0.05.",
    ),
    "shown, not adjusted": (
        of(RISING, inference=UNADJUSTED),
        "By the rule of the plan the expected positive association was shown: p < 0.001 lay at or below alpha, 0.05.",
    ),
    "shown, p equals alpha": (
        replace(BASE, columns={"u": "1 2 3 4 5", "v": "1 1 1 2 3"}, inference="alpha: 0.05, sidedness: one-sided"),
        (
            "By the rule of the plan the expected positive association was shown: the adjusted p = 0.05 (exactly) lay at or "
            "below alpha, 0.05."
        ),
    ),
    "opposite sign": (
        of(FALLING),
        (
            "By the rule of the plan an association was shown, with the sign opposite to the one expected: the adjusted p < "
            "0.001 lay at or below alpha, 0.05."
        ),
    ),
    "not shown": (
        of(MIXED),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.657 lay above "
            "alpha, 0.05. That does not show that there is none: the interval still holds values of rho from −0.52 to 0.72."
        ),
    ),
    "not shown, without interval": (
        of(MIXED, more="coefficient: Kendall tau-b"),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.727 lay above "
            "alpha, 0.05. That does not show that there is none."
        ),
    ),
    "test withheld": (
        of(RISING, rows="leave_out: []"),
        (
            "The test is withheld: the plan does not say whether rows are repeated or in time order. The estimate stands "
            "without one."
        ),
    ),
    "all withheld": (
        of(RISING, requirements="fewest_complete_rows: 11, if_not_met: withhold all"),
        "The plan withholds the estimate and the test: fewer complete rows than the plan asks for.",
    ),
    "not estimable": (
        of("5 " * 10),
        "No rank correlation could be computed: the second variable has one value in all complete rows.",
    ),
    "outside the family": (
        of(RISING, role="exploratory"),
        "The plan places this association outside the family, so that no finding is stated for it.",
    ),
}


def plainly(text: str) -> str:
    return text.replace("\u00a0", " ").replace("\u202f", " ")


@pytest.mark.parametrize("kind", list(SENTENCES))
def test_a_finding_in_words(kind: str) -> None:
    """The sentence as it stands, numbers and all (golden)."""
    invented, expected = SENTENCES[kind]
    assert plainly(text_of(finding_sentence(told(invented.analysed()).story, "A1"))) == expected


SIZES = {
    "none named": (of(RISING), ""),
    "above": (
        of(RISING, more="smallest_of_interest: 0.30"),
        "The whole interval lies beyond the smallest size of interest, 0.30.",
    ),
    "below": (
        of(FALLING, sign="negative", more="smallest_of_interest: 0.30"),
        "The whole interval lies beyond the smallest size of interest, 0.30.",
    ),
    "within": (
        of(MIXED, more="smallest_of_interest: 0.95"),
        "The whole interval lies within plus or minus the smallest size of interest, 0.95.",
    ),
    "across": (
        of(MIXED, more="smallest_of_interest: 0.1"),
        "The interval holds values of rho on both sides of the smallest size of interest, 0.1.",
    ),
    "nothing to say": (of("5 " * 10, more="smallest_of_interest: 0.30"), ""),
}


@pytest.mark.parametrize("kind", list(SIZES))
def test_the_size_of_interest_in_words(kind: str) -> None:
    """Where the interval lies; no adjective (golden)."""
    invented, expected = SIZES[kind]
    assert text_of(size_sentence(told(invented.analysed()).story, "A1")) == expected


def test_a_table_says_the_word_itself() -> None:
    """Each finding of the fixed list, and that none is stated."""
    findings = study_of_every_finding().analysis.findings
    assert {name: finding_word(finding) for name, finding in findings.items()} == {
        "A1": "shown",
        "A2": "shown, opposite sign",
        "A3": "not shown",
        "A4": "withheld",
        "A5": "not estimable",
        "A6": "no finding stated",
    }


def test_the_p_that_decided_is_the_one_printed() -> None:
    """The adjusted one of a family member, else the association’s own."""
    report = study_of_every_finding()
    assert plainly(text_of(deciding_p(report.story, "A3"))) == "p = 0.281"
    assert plainly(text_of(deciding_p(report.story, "A6"))) == "p = 0.116"


def spread(report: Told, name: str) -> list[str]:
    return [
        text_of(block.prose) for block in report.section(f"association-{name}").blocks if isinstance(block, Paragraph)
    ]


def test_the_answer_of_a_spread_is_one_run_of_sentences() -> None:
    """Direction in these rows, the finding, the size: in this order, without a word on how large it is (golden)."""
    assert plainly(spread(study_of_every_finding(), "A3")[1]) == (
        "In these rows higher values of value of u went with higher values of value of mixed: rho 0.51 (95% interval "
        "−0.13 to 0.85). By the rule of the plan an association was not shown: the adjusted p = 0.281 lay above alpha, "
        "0.05. That does not show that there is none: the interval still holds values of rho from −0.13 to 0.85. The "
        "interval holds values of rho on both sides of the smallest size of interest, 0.30."
    )


def test_a_coefficient_of_zero_leans_nowhere() -> None:
    """Neither direction is named."""
    report = told(replace(BASE, columns={"u": "1 2 3 4 5", "v": "2 4 3 2 4"}).analysed())
    zero = told(replace(BASE, columns={"u": "1 2 3 4", "v": "1 2 2 1"}).analysed())
    assert "leaned in neither direction" in spread(zero, "A1")[1]
    assert "leaned in neither direction" not in spread(report, "A1")[1]

"""Findings as sentences: no more than the plan’s rule made of the rows."""

from dataclasses import replace
from typing import Any

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.document.model import Paragraph
from rankdocket.document.prose import text_of
from rankdocket.writing.findings import deciding_p, finding_sentence, finding_word, size_sentence
from rankdocket.writing.phrases import direction_sentence, estimate_with_interval
from writing.reports import Told, study_of_every_finding, told

BASE = Invented()
SIMULTANEOUS = "alpha: 0.05, interval: {adjusted: simultaneous}"
OWN = "alpha: 0.05, several_tests: {among: none, reason: one question}"
ONE_SIDED = "alpha: 0.05, sidedness: one-sided"
UNADJUSTED = "alpha: 0.05, several_tests: {adjust: none, reason: one question}"


def of(v: str, *, sign: str = "positive", more: str = "", role: str = "primary", **parts: Any) -> Invented:
    """Return a study of one association between a rising variable and v."""
    plan = {"A1": association(sign=sign, more=more, role=role)}
    return replace(BASE, columns={"u": RISING, "v": v}, associations=plan, **parts)


FEW = {"u": "1 2 3 4", "v": "1 2 3 4"}
CLOSE = "5 1 2 4 6 3 8 10 9 7"
"""Ten values that rise with RISING: two-sided p 0.017, interval above 0."""


def of_three(role: str = "primary", **parts: Any) -> Invented:
    """Return a study of three associations, of which A1 alone has a small p."""
    plan = {"A1": association(role=role), "A2": association("u", "w"), "A3": association("v", "w")}
    return replace(BASE, columns={"u": RISING, "v": CLOSE, "w": MIXED}, associations=plan, **parts)


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
    "not shown, tau-b": (
        of(MIXED, more="coefficient: Kendall tau-b"),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.727 lay above "
            "alpha, 0.05. That does not show that there is none: the interval still holds values of tau-b from −0.39 to 0.57."
        ),
    ),
    "not shown, without interval": (
        replace(BASE, columns={"u": "1 2 3", "v": "1 3 2"}, inference="alpha: 0.5"),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 1 lay above alpha, "
            "0.5. That does not show that there is none."
        ),
    ),
    "not shown, one-sided upwards": (
        of(MIXED, inference=ONE_SIDED),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.328 lay above "
            "alpha, 0.05. That does not show that there is none: the interval still holds values of rho from −0.43 up."
        ),
    ),
    "not shown, one-sided downwards": (
        of(MIXED, sign="negative", inference=ONE_SIDED),
        (
            "By the rule of the plan the expected negative association was not shown: the adjusted p = 0.684 lay above "
            "alpha, 0.05. That does not show that there is none: the interval still holds values of rho up to 0.66."
        ),
    ),
    "not shown, could not have been": (
        replace(BASE, columns=FEW),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.083 lay above "
            "alpha, 0.05. No result of this plan with these rows could have been shown."
        ),
    ),
    "not shown, too few draws": (
        of(RISING, inference="alpha: 0.0009, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 5}"),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.001 lay above "
            "alpha, 0.0009. No result of this plan with these rows could have been shown."
        ),
    ),
    "not shown once adjusted": (
        of_three(),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.052 lay above "
            "alpha, 0.05. The interval of this association alone holds values of rho from 0.12 to 0.95; it is not adjusted "
            "for the number of tests, and the test decides."
        ),
    ),
    "not shown once adjusted, like its interval": (
        of_three(inference=SIMULTANEOUS),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.052 lay above "
            "alpha, 0.05. That does not show that there is none: the interval "
            "still holds values of rho from −0.06 to 0.96."
        ),
    ),
    "not shown at another level than the interval's": (
        of(CLOSE, inference="alpha: 0.01, confidence_level: 0.95"),
        (
            "By the rule of the plan the expected positive association was not shown: the adjusted p = 0.017 lay above "
            "alpha, 0.01. The interval of this association alone holds values of rho from 0.12 to 0.95; it is built "
            "differently from the test, and the test decides."
        ),
    ),
    "not shown in its own decision": (
        of_three(inference=OWN.replace("0.05", "0.01")),
        (
            "By the rule of the plan the expected positive association was not shown: p = 0.017 lay above alpha, 0.01. The "
            "interval of this association alone holds values of rho from 0.12 to 0.95; it is built differently from the "
            "test, and the test decides."
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
        replace(BASE, associations={"A1": association(role="exploratory"), "A2": association()}),
        "The plan places this association outside the family, so that no finding is stated for it.",
    ),
    "exploratory without a family": (
        of(RISING, role="exploratory", inference=OWN),
        "The plan states no finding for an exploratory association.",
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
        ("The interval holds values of rho both smaller and larger in size than the smallest size of interest, 0.1."),
    ),
    "across, one-sided": (
        of(MIXED, more="smallest_of_interest: 0.95", inference=ONE_SIDED),
        ("The interval holds values of rho both smaller and larger in size than the smallest size of interest, 0.95."),
    ),
    "dependent rows": (of(RISING, more="smallest_of_interest: 0.30", rows="leave_out: []"), ""),
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
        "In these rows the ranks of value of u and value of mixed leaned the same way: rho 0.51 (95% interval −0.13 to "
        "0.85). By the rule of the plan an association was not shown: the adjusted p = 0.281 lay above alpha, 0.05."
        " That does not show that there is none: the interval still holds values of rho from −0.13 to 0.85. The interval holds "
        "values of rho both smaller and larger in size than the smallest size of interest, 0.30. Verdict about size, by "
        "approximate tests at level 0.05 over 5 members of the family: undecided."
    )


TENDED_UP = "Rows ranked higher on value of u tended to be ranked higher on value of v"
TENDED_DOWN = "Rows ranked higher on value of u tended to be ranked lower on value of v"
SAME_WAY = "In these rows the ranks of value of u and value of v leaned the same way"
OPPOSITE_WAYS = "In these rows the ranks of value of u and value of v leaned opposite ways"
NEITHER = "In these rows the ranks of value of u and value of v leaned neither the same way nor opposite ways"
DIRECTIONS = {
    "shown": (of(RISING), TENDED_UP),
    "shown, falling": (of(FALLING, sign="negative"), TENDED_DOWN),
    "opposite sign": (of(FALLING), TENDED_DOWN),
    "opposite sign, rising": (of(RISING, sign="negative"), TENDED_UP),
    "not shown": (of(MIXED), SAME_WAY),
    "not shown, falling": (of("7 4 10 2 8 1 9 5 3 6"), OPPOSITE_WAYS),
    "withheld": (of(RISING, rows="leave_out: []"), SAME_WAY),
    "withheld, falling": (of(FALLING, rows="leave_out: []"), OPPOSITE_WAYS),
    "no finding stated": (of(RISING, role="exploratory", inference=OWN), SAME_WAY),
    "zero": (replace(BASE, columns={"u": "1 2 3 4", "v": "1 2 2 1"}), NEITHER),
    "not estimable": (of("5 " * 10), ""),
}


@pytest.mark.parametrize("kind", list(DIRECTIONS))
def test_only_what_was_shown_is_called_a_tendency(kind: str) -> None:
    """Otherwise the sign of the coefficient in these rows is put into words, and no more (golden)."""
    invented, expected = DIRECTIONS[kind]
    assert text_of(direction_sentence(told(invented.analysed()).story, "A1")) == expected


ESTIMATES = {
    "two-sided": (of(MIXED), "0.16 (95% interval −0.52 to 0.72)"),
    "lower bound": (of(MIXED, inference=ONE_SIDED), "0.16 (95% lower bound: from −0.43 up)"),
    "upper bound": (of(MIXED, sign="negative", inference=ONE_SIDED), "0.16 (95% upper bound: up to 0.66)"),
    "dependent rows": (of(MIXED, rows="leave_out: []"), "0.16 (no interval)"),
    "tau-b": (of(MIXED, more="coefficient: Kendall tau-b"), "0.11 (95% interval −0.39 to 0.57)"),
    "simultaneous": (of_three(inference=SIMULTANEOUS), "0.75 (simultaneous 95% interval −0.06 to 0.96)"),
    "outside the family": (
        of_three(inference=SIMULTANEOUS, role="exploratory"),
        "0.75 (95% interval alone, 0.12 to 0.95)",
    ),
    "simultaneous bound": (
        of_three(inference=f"{SIMULTANEOUS}, sidedness: one-sided"),
        "0.75 (simultaneous 95% lower bound: from 0.05 up)",
    ),
    "not estimable": (of("5 " * 10), "not estimable: the second variable has one value in all complete rows"),
}


@pytest.mark.parametrize("kind", list(ESTIMATES))
def test_an_estimate_stands_with_its_interval_or_without_one(kind: str) -> None:
    """A one-sided interval is a bound, and a bound has one end (golden)."""
    invented, expected = ESTIMATES[kind]
    assert text_of(estimate_with_interval(told(invented.analysed()).story, "A1")) == expected

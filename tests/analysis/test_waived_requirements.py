"""A waived requirement keeps its state and its reason, and withholds nothing."""

from dataclasses import replace

import pytest

from analysis.invented import RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import CheckOutcome, Estimate, RankTest, Withheld
from rankdocket.analysis.screening import screen_study
from rankdocket.document.numbers import look_up
from rankdocket.writing.screening_page import screening_page

GAPS = {"u": "1 2 - 4 5 6 7 8 9 10", "v": "1 3 2 5 4 - 7 6 9 8"}
LIMITS = "fewest_complete_rows: {fewest}, most_missing: {missing}, most_tied: {tied}, if_not_met: {then}"


def waiving(word: str) -> dict[str, str]:
    return {"A1": association(more=f"waived: {{{word}: agreed with the client}}")}


STUDIES = {
    "complete rows": (Invented(requirements=LIMITS.format(fewest=11, missing=1, tied=1, then="{then}")), "enough_rows"),
    "missing values": (
        Invented(columns=GAPS, requirements=LIMITS.format(fewest=3, missing="0.1", tied=1, then="{then}")),
        "missing_share",
    ),
    "built-in association": (
        Invented(
            variables={"v": "label: the ratio, scale: measured, unit: mm, derived_from: [u]"},
            requirements=LIMITS.format(fewest=3, missing=1, tied=1, then="{then}"),
        ),
        "built_in",
    ),
}


def outcome(study: Invented, key: str) -> CheckOutcome:
    return next(found for found in study.analysed().results["A1"].checks if found.key == key)


@pytest.mark.parametrize("then", ["estimate without test", "withhold all"])
@pytest.mark.parametrize("word", list(STUDIES))
def test_a_waived_requirement_withholds_nothing_and_stays_not_met(word: str, then: str) -> None:
    """Whatever the plan does with requirements that are not met and not waived."""
    base, key = STUDIES[word]
    base = replace(base, requirements=base.requirements.format(then=then))
    unwaived, waived = base, replace(base, associations=waiving(word))
    assert isinstance(unwaived.analysed().results["A1"].test, Withheld)
    result = waived.analysed().results["A1"]
    assert isinstance(result.estimate, Estimate)
    assert isinstance(result.test, RankTest)
    found = outcome(waived, key)
    assert (found.state, found.withholds, found.waived) == ("not met", "nothing", "agreed with the client")
    assert found == replace(outcome(unwaived, key), withholds="nothing", waived="agreed with the client")


def test_waiving_one_requirement_leaves_the_others_as_they_are() -> None:
    """The fewest rows are waived, the missing values are not."""
    study = Invented(
        columns=GAPS,
        associations=waiving("complete rows"),
        requirements="fewest_complete_rows: 9, most_missing: 0.1, most_tied: 1",
    )
    result = study.analysed().results["A1"]
    assert result.test == Withheld("more rows lack a value than the plan allows")
    assert {found.key for found in result.checks if found.waived} == {"enough_rows"}


def test_a_requirement_that_is_met_needs_no_waiver() -> None:
    """Its outcome is that of a plan without one."""
    assert outcome(Invented(associations=waiving("complete rows")), "enough_rows").waived is None


def test_waived_ties_stay_doubtful() -> None:
    """Ties never withheld anything; the reason is kept for the caveat."""
    study = Invented(
        columns={"u": RISING, "v": "1 1 2 2 2 3 3 3 4 4"},
        associations=waiving("ties"),
        requirements="fewest_complete_rows: 3, most_missing: 1, most_tied: 0.5",
    )
    found = outcome(study, "tie_share")
    assert (found.state, found.withholds, found.waived) == ("doubtful", "nothing", "agreed with the client")


def test_independent_rows_are_asked_for_whatever_is_waived() -> None:
    """Their test and their interval stay withheld."""
    study = Invented(associations=waiving("complete rows"), rows="leave_out: []")
    assert isinstance(study.analysed().results["A1"].test, Withheld)


def test_the_reason_is_filed_and_a_screening_lets_it_pass() -> None:
    """Also before anything joint is known."""
    base, key = STUDIES["built-in association"]
    base = replace(base, requirements=base.requirements.format(then="estimate without test"))
    waived = replace(base, associations=waiving("built-in association"))
    at = f"associations/A1/checks/{key}"
    assert look_up(analysis_to_plain(waived.analysed()), f"{at}/waived") == "agreed with the client"
    screening = screen_study(*waived.read())
    assert look_up(screening.plain, f"{at}/state") == "not met"
    assert screening.all_met
    assert not screen_study(*base.read()).all_met


def test_the_screening_page_says_what_is_waived_and_why() -> None:
    """Among the questions, with the reason as a sentence."""
    base, _ = STUDIES["built-in association"]
    base = replace(base, requirements=base.requirements.format(then="estimate without test"))
    page = screening_page(screen_study(*replace(base, associations=waiving("built-in association")).read()))
    assert "A1: separate origins is not met (waived): one of the variables was worked out from the other." in page
    assert "A1: the plan waives that, with the reason: agreed with the client.\n" in page


def test_examples_of_a_built_in_association_are_filed_where_a_report_quotes_them() -> None:
    """Waived or not; nowhere else."""
    base, _ = STUDIES["built-in association"]
    base = replace(base, requirements=base.requirements.format(then="test with caveat"))
    assert analysis_to_plain(base.analysed())["built_in_examples"] == {
        "rows": 100,
        "spread": "0.2",
        "shared_denominator": "0.48",
        "change_against_baseline": "-0.68",
    }
    assert "built_in_examples" not in analysis_to_plain(Invented().analysed())

"""What the rows could show: from their number, their ties and the plan, never from what was found in them."""

from dataclasses import replace
from decimal import Decimal
from typing import Any

import pytest

from analysis.invented import MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.screening import screen_study
from rankdocket.canonical import Plain
from rankdocket.document.numbers import look_up
from rankdocket.stats.coverage.table import coverage_table
from rankdocket.writing.screening_page import screening_page


def counted(n: int) -> str:
    return " ".join(str(place) for place in range(1, n + 1))


def of(n: int, *, more: str = "", **parts: Any) -> Invented:
    return replace(
        Invented(), columns={"u": counted(n), "v": counted(n)}, associations={"A1": association(more=more)}, **parts
    )


TEXTBOOK = "alpha: 0.05, interval: {by: Bonett-Wright}"


def shown(invented: Invented) -> Plain:
    return look_up(analysis_to_plain(invented.analysed()), "could_show/rows_of/A1")


def value(invented: Invented, key: str) -> float:
    return float(str(look_up(shown(invented), f"{key}/value")))


@pytest.mark.parametrize(
    ("n", "power", "expected"),
    # n rounded up from the same formula in a simulated table: 30, 48 and 87 rows for 0.5, 0.4 and 0.3; 40 at power 0.9.
    [(30, "0.80", 0.49976), (48, "0.80", 0.4), (87, "0.80", 0.3), (40, "0.9", 0.5)],
)
def test_the_smallest_rho_is_that_of_the_planned_power(n: int, power: str, expected: float) -> None:
    """With the rows that a rho needs, that rho or a little less is found."""
    found = value(of(n, inference=f"alpha: 0.05, planned_power: {power}"), "smallest_rho")
    assert expected - 0.006 < found <= expected + 5e-6


def test_the_widths_are_those_of_the_textbook_interval() -> None:
    """A published example: n = 15, rho 0.8699639, 0.5840951 to 0.9638297 (Bonett & Wright's variance)."""
    found = of(15, more="smallest_of_interest: 0.8699639", inference=TEXTBOOK)
    assert value(found, "width_at_interest") == pytest.approx(0.9638297 - 0.5840951, abs=2e-7)
    assert 0.9 < value(found, "width_at_zero") < 1.1


@pytest.mark.parametrize("n", [10, 30, 100])
def test_the_widths_are_those_of_the_rule_of_the_plan(n: int) -> None:
    """The guarded jackknife of normal-type dependence, as the table of simulated coverage has it from other samples."""
    [expected] = [
        float(row.width)
        for row in coverage_table()
        if (row.method, row.family.key, row.n) == ("jackknife on z, guarded", "normal", n)
        and (row.level, row.truth) == (Decimal("0.95"), 0)
    ]
    found = of(n, more="smallest_of_interest: 0.3")
    assert value(found, "width_at_zero") == pytest.approx(expected, rel=0.01)
    textbook = replace(found, inference=TEXTBOOK)
    assert value(textbook, "width_at_zero") < value(found, "width_at_zero") - 0.003


@pytest.mark.parametrize(
    ("invented", "by"),
    [
        (of(30), "guarded jackknife"),
        (of(30, inference="alpha: 0.05, confidence_level: 0.990"), "guarded jackknife"),
        (of(30, inference=TEXTBOOK), "Bonett-Wright"),
        (of(30, inference="alpha: 0.05, interval: {by: Fisher z}"), "Bonett-Wright"),
        (of(30, inference="alpha: 0.05, confidence_level: 0.8"), "Bonett-Wright"),
        (of(30, more="smallest_of_interest: 0.96"), "Bonett-Wright"),
    ],
)
def test_whose_widths_they_are_is_filed(invented: Invented, by: str) -> None:
    """The simulated ones where rule, level and size were simulated; else both are the textbook's."""
    assert look_up(shown(invented), "width_by") == by


def test_the_strictest_level_counts() -> None:
    """In an adjusted family of four alpha is shared by four; the rho that can be found grows."""
    plan = {f"A{place}": association() for place in range(1, 5)}
    alone, family = of(30), replace(of(30), associations=plan)
    assert look_up(shown(family), "level") == "0.0125"
    assert value(family, "smallest_rho") > value(alone, "smallest_rho") + 0.05


def test_nothing_of_it_depends_on_how_the_values_stand_together() -> None:
    """The same values in another order, with another coefficient, could show the same."""
    more = "smallest_of_interest: 0.3"
    one, other = (
        replace(Invented(), columns={"u": RISING, "v": v}, associations={"A1": association(more=more)})
        for v in (RISING, MIXED)
    )
    assert shown(one) == shown(other)


@pytest.mark.parametrize(
    ("invented", "reasons"),
    [
        (
            of(12, rows="leave_out: []"),
            {"smallest_rho": "the test is withheld: ", "width_at_zero": "the interval is withheld: "},
        ),
        (
            of(12, requirements="fewest_complete_rows: 13"),
            {"smallest_rho": "the test is withheld: ", "attainable_p": "", "width_at_zero": ""},
        ),
        (
            of(12, more="coefficient: Kendall tau-b"),
            {"smallest_rho": "the formula is for rho", "width_at_zero": "the formula is for rho"},
        ),
        (of(12, inference="alpha: 0.05, sidedness: one-sided"), {"width_at_zero": "a one-sided bound has no width"}),
        (of(4), {"smallest_rho": "even perfect order could not reach the strictest level"}),
        (of(3), {"width_at_zero": "the formula needs more than three complete rows"}),
        (
            replace(of(10), columns={"u": RISING, "v": "5 " * 10}),
            dict.fromkeys(("attainable_p", "smallest_rho", "width_at_zero"), "no rank correlation exists"),
        ),
    ],
)
def test_what_has_no_answer_has_a_reason(invented: Invented, reasons: dict[str, str]) -> None:
    """Where the reason is empty there is an answer."""
    found = shown(invented)
    assert isinstance(found, dict)
    for key, reason in reasons.items():
        entry = found[key]
        assert isinstance(entry, dict)
        assert list(entry) == (["reason"] if reason else ["value"])
        assert str(entry.get("reason", "")).startswith(reason)


@pytest.mark.parametrize(
    "invented",
    [of(30, more="smallest_of_interest: 0.3"), of(12, more="coefficient: Kendall tau-b"), of(12, rows="leave_out: []")],
)
def test_a_screening_files_and_tells_the_same(invented: Invented) -> None:
    """Before anything joint is computed, with the figures of the later report."""
    screening = screen_study(*invented.read())
    assert look_up(screening.plain, "could_show") == look_up(analysis_to_plain(invented.analysed()), "could_show")
    assert "A1: " in screening_page(screening).split("What this sample could show")[1]


def test_the_blind_page_tells_the_figures_or_why_there_are_none() -> None:
    """One line an association after its smallest possible p."""
    page = screening_page(screen_study(*of(30, more="smallest_of_interest: 0.3").read()))
    assert (
        "A1: with power 0.80 a rho of 0.50 in size would be told from zero; a 95% interval would be about 0.77 wide at zero and "
        "0.73 at the smallest size of interest, as simulated for untied rows."
    ) in page
    textbook = of(30, more="smallest_of_interest: 0.3", inference=TEXTBOOK)
    assert (
        "a 95% interval would be about 0.72 wide at zero and 0.68 at the smallest size of interest, by the textbook formula."
    ) in screening_page(screen_study(*textbook.read()))
    tau = screening_page(screen_study(*of(12, more="coefficient: Kendall tau-b").read()))
    assert (
        "A1: no smallest detectable rho: the formula is for rho; no width of an interval: the formula is for rho."
        in tau
    )

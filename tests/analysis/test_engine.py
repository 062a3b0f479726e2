"""The whole engine on small studies: published values, what cannot be estimated, what is withheld, what is refused."""

from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

import pytest

from analysis.invented import MISSING, RISING, Invented, association, demonstration
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.results import (
    AssociationAnalysis,
    Comparisons,
    Estimate,
    NotEstimable,
    RankTest,
    Withheld,
)
from rankdocket.errors import InputError
from rankdocket.stats.interval import Interval, NoInterval

ONE_SIDED = "alpha: 0.05, sidedness: one-sided"


def study(u: str, v: str, **parts: Any) -> Invented:
    return replace(Invented(), columns={"u": u, "v": v}, **parts)


def estimated(result: AssociationAnalysis) -> Estimate:
    assert isinstance(result.estimate, Estimate)
    return result.estimate


def rank_test(result: AssociationAnalysis) -> RankTest:
    assert isinstance(result.test, RankTest)
    return result.test


@dataclass(frozen=True, slots=True)
class Published:
    """Rows with the values that the literature gives for them."""

    u: str
    v: str
    rho: str
    """As many digits as printed."""
    p: Fraction
    p_t: str | None = None


SEVEN = Published("1 2 3 4 5 6 7", "3 2 1 6 4 5 7", "0.750000", Fraction(167, 2520), "0.052181")
TIED = Published("1 2 3 4 5 6 7", "1 3 6 2 7 4 6", "0.612637", Fraction(199, 1260))

PUBLISHED = {
    # Kendall, Kendall & Babington Smith 1939 (Biometrika 30: 251-273): n = 7, sum of squared differences 14.
    "n=7, S=14": SEVEN,
    # The same table, n = 10, sum of squared differences 52.
    "n=10, S=52": Published(RISING, "2 3 7 1 8 4 6 5 10 9", "0.684848", Fraction(7859, 226800)),
    # By complete enumeration of the 120 pairings, conditional on the ties.
    "ties in x": Published("10 10 20 30 30", "1 2 3 4 5", "0.948683", Fraction(1, 15), "0.013847"),
    # By complete enumeration of the 5040 pairings, conditional on the tie.
    "ties in y": TIED,
    # Kendall, Kendall & Babington Smith 1939: 10 of 120 orderings; the t value gives 0.0374.
    "n=5": Published("1 2 3 4 5", "1 2 3 5 4", "0.900000", Fraction(1, 12), "0.0374"),
}


@pytest.mark.parametrize("published", PUBLISHED.values(), ids=list(PUBLISHED))
def test_the_engine_gives_the_published_values(published: Published) -> None:
    """Coefficient, exact two-sided p as a fraction, and the p of the t value for comparison."""
    result = study(published.u, published.v).analysed().results["A1"]
    assert f"{estimated(result).coefficient.value:.6f}" == published.rho
    assert rank_test(result).p == published.p
    assert result.comparisons.t_value_p is not None
    if published.p_t is not None:
        assert f"{result.comparisons.t_value_p:.{len(published.p_t) - 2}f}" == published.p_t


def test_one_tail_is_counted_and_not_halved() -> None:
    """n=7, S=14: upper tail 167 of 5040, lower 4919 of 5040, which add to more than 1 by the point itself."""
    upper = study(SEVEN.u, SEVEN.v, inference=ONE_SIDED).analysed()
    lower = study(SEVEN.u, SEVEN.v, inference=ONE_SIDED, associations={"A1": association(sign="negative")}).analysed()
    assert rank_test(upper.results["A1"]).p == Fraction(167, 5040)
    assert rank_test(lower.results["A1"]).p == Fraction(4919, 5040)
    intervals = [found.results["A1"].interval for found in (upper, lower)]
    assert isinstance(intervals[0], Interval)
    assert isinstance(intervals[1], Interval)
    assert (intervals[0].high, intervals[1].low) == (1.0, -1.0)
    assert (upper.findings["A1"].word, lower.findings["A1"].word) == ("shown", "not shown")


def test_the_short_form_is_kept_for_comparison_where_it_is_wrong() -> None:
    """With the tie of the example the form without tie terms gives 0.616071 (Kendall 1945)."""
    found = estimated(study(TIED.u, TIED.v).analysed().results["A1"])
    assert found.short_form is not None
    assert f"{float(found.short_form):.6f}" == "0.616071"
    assert found.corrected is not None
    assert found.corrected.decimal_text == found.coefficient.decimal_text()


def test_two_sided_means_at_least_as_far_from_zero() -> None:
    """x=y=(1,1,1,2): both conventions, 1/4 and 1/2 (Gibbons & Pratt 1975)."""
    result = study("1 1 1 2", "1 1 1 2").analysed().results["A1"]
    assert (rank_test(result).p, result.comparisons.doubled_p) == (Fraction(1, 4), Fraction(1, 2))
    one_sided = study("1 1 1 2", "1 1 1 2", inference=ONE_SIDED).analysed().results["A1"]
    assert (rank_test(one_sided).p, one_sided.comparisons.doubled_p) == (Fraction(1, 4), None)


@pytest.mark.parametrize(
    ("u", "v", "tau", "p"),
    [
        # Kendall 1938 and 1945 (Biometrika 30: 81, 33: 239).
        ("1 2 3 4", "1 2 4 3", "0.666667", Fraction(1, 3)),
        ("1 2 2 3", "1 3 2 4", "0.912871", None),
    ],
)
def test_tau_b_has_its_own_values(u: str, v: str, tau: str, p: Fraction | None) -> None:
    """What belongs to rho alone is absent."""
    plan = {"A1": association(more="coefficient: Kendall tau-b")}
    result = study(u, v, associations=plan).analysed().results["A1"]
    found = estimated(result)
    assert f"{found.coefficient.value:.6f}" == tau
    assert p is None or rank_test(result).p == p
    assert result.interval == NoInterval("no interval exists for fewer than five complete rows")
    assert (found.squared_differences, found.corrected, found.short_form) == (None, None, None)
    assert result.comparisons.t_value_p is None


def test_the_gaskets_are_counted_through_all_orderings() -> None:
    """Seven rows with one tied load: rho 0.847, 120 of 5,040 orderings, smallest two-sided p 4 of 5,040 = 0.0008."""
    found = demonstration("gasket-creep")
    result = found.results["A1"]
    assert f"{estimated(result).coefficient.value:.3f}" == "0.847"
    test = rank_test(result)
    assert (test.tails.two_sided, test.tails.of, test.tails.method) == (120, 5040, "exact, conditional on the ties")
    assert f"{float(test.p):.3f}" == "0.024"
    assert result.smallest_attainable_p is not None
    assert f"{float(result.smallest_attainable_p):.4f}" == "0.0008"
    assert result.comparisons.t_value_p is not None
    assert f"{result.comparisons.t_value_p:.3f}" == "0.016"
    assert found.findings["A1"].word == "shown"


NOT_ESTIMABLE = {
    "two rows": ("1 2", "1 2", "fewer than three complete rows"),
    "two complete rows": (f"1 2 {MISSING} 4", f"1 2 3 {MISSING}", "fewer than three complete rows"),
    "no complete row": (f"1 2 {MISSING}", f"{MISSING} {MISSING} 3", "fewer than three complete rows"),
    "x constant": ("7 7 7 7", "1 2 3 4", "the first variable has one value in all complete rows"),
    "y constant": ("1 2 3 4", "7 7.0 7.00 7", "the second variable has one value in all complete rows"),
    "both constant": ("7 7 7 7", "0 0 0 -0", "both variables have one value in all complete rows"),
    "constant among complete rows": (
        f"7 7 7 8 {MISSING}",
        f"1 2 3 {MISSING} 4",
        "the first variable has one value in all complete rows",
    ),
}


@pytest.mark.parametrize(("u", "v", "reason"), NOT_ESTIMABLE.values(), ids=list(NOT_ESTIMABLE))
def test_what_cannot_be_estimated_says_why(u: str, v: str, reason: str) -> None:
    """Nothing is raised, nothing is NaN: the association keeps its place with its reason."""
    found = study(u, v).analysed()
    result = found.results["A1"]
    assert result.estimate == result.test == NotEstimable(reason)
    assert result.interval == NoInterval(reason)
    assert result.comparisons == Comparisons(None, None, None)
    assert result.smallest_attainable_p is None
    assert (found.findings["A1"].word, found.findings["A1"].p_adjusted) == ("not estimable", None)


def test_three_rows_are_enough_for_a_coefficient_and_too_few_for_an_interval() -> None:
    """The smallest case that has a coefficient: two of six orderings are as extreme as perfect order."""
    result = study("1 2 3", "1 2 3").analysed().results["A1"]
    assert rank_test(result).p == Fraction(1, 3)
    assert result.interval == NoInterval("no interval exists for fewer than four complete rows")


@pytest.mark.parametrize(("v", "sign"), [("1 2 3 4 5", 1), ("5 4 3 2 1", -1)])
def test_perfect_order_has_a_finite_interval(v: str, sign: int) -> None:
    """The interval of rho = 1 or -1 reaches that end and not further; it is never empty of width."""
    result = study("1 2 3 4 5", v).analysed().results["A1"]
    assert estimated(result).coefficient.value == sign
    assert rank_test(result).p == Fraction(1, 60)
    assert isinstance(result.interval, Interval)
    assert result.interval.cap_binds
    assert -1 <= result.interval.low < result.interval.high <= 1
    assert (result.interval.high if sign > 0 else result.interval.low) == sign


@pytest.mark.parametrize(
    "text", ["inf", "-inf", "Infinity", "NaN", "nan", "1e999", "-1e400", "∞", "0x10", "1_000", "True"]
)
def test_a_cell_that_is_no_finite_number_is_an_input_fault(text: str) -> None:
    """It is refused where it stands, before anything is ranked."""
    with pytest.raises(InputError) as refused:
        study(f"1 2 {text} 4", "1 2 3 4").read()
    places = {(fault.place.file, fault.place.line) for fault in refused.value.faults}
    assert places == {("received/trials.csv", 4)}


@pytest.mark.parametrize(
    ("rows", "reason"),
    [
        ("leave_out: []", "the plan does not say whether rows are repeated or in time order"),
        (
            "repeated_within: v, time_order: not applicable",
            "the plan declares rows repeated, and the test at hand exchanges single rows",
        ),
        (
            "repeated_within: not applicable, time_order: v",
            "the plan declares rows in time order, and the test at hand exchanges single rows",
        ),
    ],
    ids=["silence", "repeated", "time order"],
)
def test_without_declared_independence_the_estimate_stands_alone(rows: str, reason: str) -> None:
    """Test and interval both need rows that are independent; nothing that rests on either is given."""
    found = study(RISING, RISING, rows=rows).analysed()
    result = found.results["A1"]
    assert estimated(result).coefficient.value == 1
    assert result.interval == NoInterval(reason)
    assert result.test == Withheld(reason)
    assert (result.comparisons.t_value_p, result.comparisons.doubled_p) == (None, None)
    assert (found.findings["A1"].word, found.findings["A1"].p_adjusted) == ("withheld", None)


def test_a_plan_that_asks_for_more_rows_withholds_what_it_says() -> None:
    """Each answer to if_not_met: the test, both, or nothing."""
    reason = "fewer complete rows than the plan asks for"
    found = {
        answer: study(RISING, RISING, requirements=f"fewest_complete_rows: 11, if_not_met: {answer}").analysed()
        for answer in ("estimate without test", "withhold all", "test with caveat")
    }
    results = {answer: analysis.results["A1"] for answer, analysis in found.items()}
    assert results["estimate without test"].test == Withheld(reason)
    assert isinstance(results["estimate without test"].estimate, Estimate)
    assert isinstance(results["estimate without test"].interval, Interval)
    assert results["withhold all"].estimate == results["withhold all"].test == Withheld(reason)
    assert results["withhold all"].interval == NoInterval(reason)
    assert results["withhold all"].comparisons == Comparisons(None, None, None)
    assert isinstance(results["test with caveat"].test, RankTest)
    words = {answer: analysis.findings["A1"].word for answer, analysis in found.items()}
    assert words == {"estimate without test": "withheld", "withhold all": "withheld", "test with caveat": "shown"}


def test_dependent_rows_give_their_own_reason_for_the_missing_interval() -> None:
    """Also where no rule would have made one, and where the test is withheld for more than one reason."""
    reason = "the plan does not say whether rows are repeated or in time order"
    tau = {"A1": association(more="coefficient: Kendall tau-b")}
    many = "fewest_complete_rows: 11, if_not_met: estimate without test"
    for parts in ({"associations": tau}, {"requirements": many}):
        result = study(RISING, RISING, rows="leave_out: []", **parts).analysed().results["A1"]
        assert result.interval == NoInterval(reason)
        assert isinstance(result.test, Withheld)
    one = study("7 7 7 7", "1 2 3 4", rows="leave_out: []").analysed().results["A1"]
    assert one.interval == NoInterval("the first variable has one value in all complete rows")


@pytest.mark.parametrize(
    ("inference", "smallest"),
    [
        ("alpha: 0.05", Fraction(2, 3_628_800)),
        (ONE_SIDED, Fraction(1, 3_628_800)),
        ("alpha: 0.05, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 5}", Fraction(1, 1000)),
        ("alpha: 0.05, p_value: {by: permutation, permutations: 1999, most_draws: 1999, seed: 5}", Fraction(1, 2000)),
    ],
)
def test_the_smallest_p_is_that_of_the_null_that_is_used(inference: str, smallest: Fraction) -> None:
    """Ten rows: 2/10! over all orderings, and never below 1/(B + 1) from B draws (Phipson & Smyth 2010)."""
    result = study(RISING, RISING, inference=inference).analysed().results["A1"]
    assert result.smallest_attainable_p == smallest
    assert rank_test(result).p >= smallest


def test_what_cannot_be_estimated_is_not_called_withheld() -> None:
    """The stronger reason stands: there is nothing to withhold."""
    found = study("1 2", "1 2", requirements="fewest_complete_rows: 5, if_not_met: withhold all").analysed()
    assert found.findings["A1"].word == "not estimable"


@pytest.mark.parametrize(
    ("keys", "expected"),
    [
        ("scale: measured, unit: mm", True),
        ("scale: count", True),
        ("scale: two-valued", True),
        ("scale: already ranked", False),
    ],
)
def test_the_product_moment_coefficient_stands_beside_numbers_only(keys: str, expected: bool) -> None:
    """Places have no distances."""
    invented = study("1 2 3 4 5", "0 0 1 0 1", variables={"v": f"label: value of v, {keys}"})
    assert (invented.analysed().results["A1"].comparisons.pearson is not None) == expected


def test_progress_is_told_association_by_association() -> None:
    """In plan order, each once."""
    told: list[str] = []
    analyse(*replace(Invented(), associations={"B": association(), "A": association()}).read(), told.append)
    assert told == ["B", "A"]

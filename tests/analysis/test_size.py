"""Null values, claims about size, the verdict, and whose p-value decides a finding."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from math import atanh, sqrt
from statistics import NormalDist
from typing import Any

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.deciding import deciding_p, deciding_test, interval_shows
from rankdocket.analysis.filing import filed
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis, RankTest
from rankdocket.analysis.size import LEAST_P, equivalence_level, twelve_digits
from rankdocket.analysis.size_results import SizeAnalysis, SizeTests, ValueTest
from rankdocket.document.numbers import look_up
from rankdocket.stats.interval import Interval
from rankdocket.stats.no_answer import NoAnswer

NEAR = "3 4 1 9 2 5 6 8 10 7"
"""With RISING: sum of squared differences 58, rho 0.648485."""

RHO = 1 - Fraction(6 * 58, 990)
UPPER = NormalDist()
ONE_SIDED = "alpha: 0.05, sidedness: one-sided"
LONG = " ".join(str(place) for place in range(1, 61))
SHUFFLED = " ".join(str((place * 37) % 61) for place in range(1, 61))
"""Sixty values that stand with LONG in a rho of 0.05."""


def analysed(v: str, more: str, *, sign: str = "positive", inference: str = "alpha: 0.05", **parts: Any) -> Analysis:
    u = LONG if len(v.split()) == 60 else RISING
    plan = {"A1": association(sign=sign, more=more)}
    return replace(Invented(), columns={"u": u, "v": v}, associations=plan, inference=inference, **parts).analysed()


def sizes(analysis: Analysis) -> SizeTests:
    size = analysis.results["A1"].size
    assert isinstance(size, SizeAnalysis)
    assert size.size is not None
    return size.size


def valued(analysis: Analysis) -> ValueTest:
    size = analysis.results["A1"].size
    assert isinstance(size, SizeAnalysis)
    assert size.value is not None
    return size.value


def z(r: float, null: float, n: int) -> float:
    """The statistic of Bonett & Wright 2000 with the variance that holds at the null value."""
    return (atanh(r) - atanh(null)) * sqrt((n - 3) / (1 + null * null / 2))


@pytest.mark.parametrize(
    ("sign", "inference", "tails"),
    [("positive", "alpha: 0.05", 2), ("either", "alpha: 0.05", 2), ("positive", ONE_SIDED, 1)],
)
def test_a_null_value_is_tested_with_the_variance_that_holds_at_it(sign: str, inference: str, tails: int) -> None:
    """Against the formula written out, both tails or the one that the plan expects."""
    found = valued(analysed(NEAR, "null_value: 0.2", sign=sign, inference=inference))
    expected = z(float(RHO), 0.2, 10)
    assert found.z == pytest.approx(expected, rel=1e-12)
    assert found.factor == pytest.approx(1.02)
    assert float(found.p) == pytest.approx(tails * UPPER.cdf(-expected), rel=1e-11)
    assert found.p == Fraction(filed(found.p))


def test_a_finding_about_a_null_value_names_the_side_of_it() -> None:
    """A rho near 0 from sixty rows lies below 0.6, above −0.6, and is not told from 0.05."""
    words = {
        (null, sign): analysed(SHUFFLED, f"null_value: {null}", sign=sign).findings["A1"].word
        for null in ("0.6", "-0.6", "0.05")
        for sign in ("positive", "negative", "either")
    }
    assert words == {
        ("0.6", "positive"): "shown, opposite sign",
        ("0.6", "negative"): "shown",
        ("0.6", "either"): "shown",
        ("-0.6", "positive"): "shown",
        ("-0.6", "negative"): "shown, opposite sign",
        ("-0.6", "either"): "shown",
        ("0.05", "positive"): "not shown",
        ("0.05", "negative"): "not shown",
        ("0.05", "either"): "not shown",
    }


def test_both_tests_of_size_are_made_wherever_a_size_is_stated() -> None:
    """Against the formulas written out; the plan claims an association alone, and the rank test decides."""
    analysis = analysed(NEAR, "smallest_of_interest: 0.30")
    found, r = sizes(analysis), float(RHO)
    upper, lower = z(r, 0.3, 10), z(r, -0.3, 10)
    assert (found.z_upper, found.z_lower) == (pytest.approx(upper), pytest.approx(lower))
    assert float(found.p_above) == pytest.approx(UPPER.cdf(-upper) + UPPER.cdf(-lower), rel=1e-11)
    assert float(found.p_within) == pytest.approx(UPPER.cdf(upper), rel=1e-11)
    result = analysis.results["A1"]
    assert isinstance(result.test, RankTest)
    assert deciding_test(result.screened.spec) == "rank test"
    assert deciding_p(result) == result.test.p


@pytest.mark.parametrize(("sign", "v"), [("positive", NEAR), ("negative", "8 7 10 2 9 6 5 3 1 4")])
def test_a_one_sided_claim_above_a_size_has_one_tail(sign: str, v: str) -> None:
    """The tail of the expected sign, whichever that is."""
    found = sizes(analysed(v, "smallest_of_interest: 0.30, claim: above", sign=sign, inference=ONE_SIDED))
    assert float(found.p_above) == pytest.approx(UPPER.cdf(-z(float(RHO), 0.3, 10)), rel=1e-11)


@pytest.mark.parametrize(
    ("v", "more", "verdict"),
    [
        (RISING, "smallest_of_interest: 0.30", "size above delta shown"),
        (FALLING, "smallest_of_interest: 0.30", "size above delta shown"),
        (SHUFFLED, "smallest_of_interest: 0.40", "size below delta shown"),
        (NEAR, "smallest_of_interest: 0.30", "independence rejected, size above delta not shown"),
        (MIXED, "smallest_of_interest: 0.30", "undecided"),
    ],
)
def test_the_verdict_is_one_of_four(v: str, more: str, verdict: str) -> None:
    """NEAR has an exact p of 0.049 (published counts) and lies too near 0.30 for the test of it."""
    analysis = analysed(v, more)
    assert sizes(analysis).verdict == verdict
    assert look_up(analysis_to_plain(analysis), "associations/A1/size/verdict") == verdict


@pytest.mark.parametrize(
    ("v", "claim", "sign", "word"),
    [
        (RISING, "above", "positive", "shown"),
        (FALLING, "above", "positive", "shown, opposite sign"),
        (NEAR, "above", "positive", "not shown"),
        (NEAR, "any", "positive", "shown"),
        (SHUFFLED, "within", "positive", "shown"),
        (SHUFFLED, "within", "negative", "shown"),
        (SHUFFLED, "any", "positive", "not shown"),
        (RISING, "within", "positive", "not shown"),
    ],
)
def test_the_finding_is_about_the_claim(v: str, claim: str, sign: str, word: str) -> None:
    """The same rows show one claim and not another; a small size has no side."""
    more = f"smallest_of_interest: 0.40, claim: {claim}"
    assert analysed(v, more, sign=sign).findings["A1"].word == word


FAMILY = {
    "A1": association(more="smallest_of_interest: 0.30, claim: above"),
    "A2": association("u", "m", more="smallest_of_interest: 0.30"),
    "A3": association("m", "v", sign="either", more="null_value: 0.5"),
}


def test_the_p_of_a_claim_enters_the_family_and_the_p_of_independence_stays_beside_it() -> None:
    """Holm's rule by hand over one exact p and two approximate ones."""
    analysis = replace(Invented(), columns={"u": RISING, "v": NEAR, "m": MIXED}, associations=FAMILY).analysed()
    raw = {name: deciding_p(result) for name, result in analysis.results.items()}
    tests = {name: result.test.p for name, result in analysis.results.items() if isinstance(result.test, RankTest)}
    assert (raw["A1"], raw["A2"]) == (sizes(analysis).p_above, tests["A2"])
    assert raw["A1"] != tests["A1"]
    assert raw["A3"] != tests["A3"]
    ranked = sorted(raw.items(), key=lambda item: item[1] or 1)
    largest, expected = Fraction(0), {}
    for place, (name, p) in enumerate(ranked):
        assert p is not None
        largest = max(largest, min(Fraction(1), (3 - place) * p))
        expected[name] = largest
    assert {name: finding.p_adjusted for name, finding in analysis.findings.items()} == expected
    plain = analysis_to_plain(analysis)
    assert look_up(plain, "associations/A1/finding/by") == "above"
    assert look_up(plain, "associations/A1/finding/p") == filed(sizes(analysis).p_above)
    assert look_up(plain, "associations/A1/test/p") == filed(tests["A1"])


def test_a_verdict_takes_an_equal_share_of_alpha_in_an_adjusted_family_and_all_of_it_elsewhere() -> None:
    """The interval that belongs to it leaves out twice that level, rounded so that it is the wider one."""
    columns = {"u": RISING, "v": NEAR, "m": MIXED}
    adjusted = replace(Invented(), columns=columns, associations=FAMILY)
    alone = replace(adjusted, inference="alpha: 0.05, several_tests: {adjust: none, reason: three questions}")
    levels = {}
    for key, invented in (("adjusted", adjusted), ("alone", alone)):
        found = sizes(invented.analysed())
        assert isinstance(found.interval, Interval)
        levels[key] = (found.level, found.interval.level, found.interval.direction)
    assert levels == {
        "adjusted": (Fraction(1, 60), Decimal("0.9667"), "two-sided"),
        "alone": (Fraction(1, 20), Decimal("0.90"), "two-sided"),
    }


@pytest.mark.parametrize(
    ("alpha", "members", "level"),
    [("0.05", 1, "0.90"), ("0.05", 2, "0.95"), ("0.05", 3, "0.9667"), ("0.01", 7, "0.99715"), ("0.0125", 1, "0.975")],
)
def test_the_level_of_an_interval_of_equivalence_is_never_below_its_own(alpha: str, members: int, level: str) -> None:
    """1 − 2·alpha over the members; at most a little above where the quotient has no end."""
    found = equivalence_level(Decimal(alpha), members)
    assert found == Decimal(level)
    assert 0 <= Fraction(found) - (1 - 2 * Fraction(alpha) / members) < Fraction(1, 1000)


def test_the_interval_of_equivalence_follows_the_rule_of_the_association_and_is_two_sided() -> None:
    """A one-sided plan has a bound for the association and an interval for equivalence."""
    analysis = analysed(NEAR, "smallest_of_interest: 0.30", inference=ONE_SIDED)
    own, other = analysis.results["A1"].interval, sizes(analysis).interval
    assert isinstance(own, Interval)
    assert isinstance(other, Interval)
    assert (own.method, own.direction) == (other.method, "greater")
    assert (other.level, other.direction) == (Decimal("0.90"), "two-sided")
    # A bound of level 1 − alpha is the lower end of an interval of level 1 − 2·alpha.
    assert other.low == pytest.approx(own.low, rel=1e-12)


def test_perfect_order_is_tested_with_the_cap_of_the_interval() -> None:
    """Without ties half of the smallest discordance below 1: 1 − 6/990 for ten rows."""
    analysis = analysed(RISING, "smallest_of_interest: 0.30, claim: above")
    size = analysis.results["A1"].size
    assert isinstance(size, SizeAnalysis)
    assert (size.is_capped, size.coefficient) == (True, pytest.approx(1 - 6 / 990))
    assert sizes(analysis).z_upper == pytest.approx(z(1 - 6 / 990, 0.3, 10))


@pytest.mark.parametrize("more", ["smallest_of_interest: 0.3, claim: above", "null_value: 0.3"])
def test_a_claim_without_an_answer_is_not_shown(more: str) -> None:
    """Three rows have a p-value of independence and no variance on the z scale; the reason is filed."""
    plan = {"A1": association(more=more), "A2": association()}
    analysis = replace(Invented(), columns={"u": "1 2 3", "v": "1 2 3"}, associations=plan).analysed()
    result = analysis.results["A1"]
    assert isinstance(result.test, RankTest)
    assert deciding_p(result) is None
    assert (analysis.findings["A1"].word, analysis.findings["A1"].p_adjusted) == ("not shown", None)
    assert str(look_up(analysis_to_plain(analysis), "associations/A1/size/reason")).endswith(
        "four or more complete rows"
    )


def test_size_is_tested_for_rho_alone() -> None:
    """tau-b keeps its smallest size of interest, for the interval strip, and says why there is no verdict."""
    plan = association(more="smallest_of_interest: 0.3").removesuffix("}") + ", coefficient: Kendall tau-b}"
    analysis = replace(Invented(), associations={"A1": plan}).analysed()
    assert analysis.results["A1"].size == NoAnswer("size is tested for rho alone")
    assert analysis.findings["A1"].word == "shown"


@pytest.mark.parametrize("parts", [{"rows": "leave_out: []"}, {"columns": {"u": RISING, "v": "5 " * 10}}])
def test_where_there_is_no_test_there_is_no_verdict(parts: dict[str, Any]) -> None:
    """Neither a number nor a word about size, and the finding says what became of the test."""
    plan = {"A1": association(more="smallest_of_interest: 0.30, claim: above")}
    analysis = replace(Invented(), associations=plan, **parts).analysed()
    assert analysis.results["A1"].size is None
    assert "size" not in dict(analysis_to_plain(analysis)["associations"])["A1"]  # type: ignore[arg-type, call-overload, operator]
    assert analysis.findings["A1"].word in ("withheld", "not estimable")


@pytest.mark.parametrize(
    ("v", "more", "shows"),
    [
        (RISING, "smallest_of_interest: 0.30, claim: above", True),
        (NEAR, "smallest_of_interest: 0.30, claim: above", False),
        (RISING, "smallest_of_interest: 0.30, claim: within", None),
        (NEAR, "null_value: 0.2", False),
        (RISING, "null_value: 0.2", True),
        (RISING, "null_value: 0.99", False),
    ],
)
def test_test_and_interval_are_compared_about_the_same_claim(v: str, more: str, shows: bool | None) -> None:
    """Not about 0 where the finding is not; equivalence has an interval of its own."""
    assert interval_shows(analysed(v, more).results["A1"]) is shows


def test_a_p_value_of_the_normal_law_is_never_0() -> None:
    """What a double cannot hold is filed as the least that is."""
    assert twelve_digits(0.0) == Fraction(filed(LEAST_P)) > 0
    assert twelve_digits(0.0123456789012345) == Fraction("0.0123456789012")


def test_claims_never_wait_for_draws() -> None:
    """The p of a claim has no error of draws: however few are drawn, its finding is not undecided."""
    plan = {"A1": association(more="smallest_of_interest: 0.30, claim: above")}
    drawn = "alpha: 0.05, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 3}"
    invented = replace(Invented(), columns={"u": RISING, "v": NEAR}, associations=plan)
    findings = [analyse(*replace(invented, inference=text).read()).findings["A1"] for text in ("alpha: 0.05", drawn)]
    assert findings[0] == findings[1]
    assert not findings[1].undecided


def test_the_smallest_attainable_p_is_told_as_that_of_independence_where_a_claim_decides() -> None:
    """Four rows reach no two-sided p of 0.05; a claim does not ask for it."""
    reasons = {}
    for more in ("smallest_of_interest: 0.3", "smallest_of_interest: 0.3, claim: above"):
        plan = {"A1": association(more=more)}
        analysis = replace(Invented(), columns={"u": "1 2 3 4", "v": "1 2 3 4"}, associations=plan).analysed()
        reasons[more] = next(check.reason for check in analysis.results["A1"].checks if check.key == "attainable_p")
    plain, claimed = reasons.values()
    assert claimed == f"concerning independence, on which the finding does not rest: {plain}"

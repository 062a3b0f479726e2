"""The intervals of a plan: the rule asked for, at the level asked for, adjusted for the family that was declared."""

from dataclasses import replace
from decimal import Decimal
from math import atanh, sqrt, tanh

import pytest
from scipy.stats import norm

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis, Estimate
from rankdocket.document.numbers import look_up
from rankdocket.stats.interval import Interval, NoInterval
from rankdocket.vocabulary import INTERVAL_BY

CLOSE = "5 1 2 4 6 3 8 10 9 7"
COLUMNS = {"u": RISING, "rising": "1 2 3 4 5 6 7 9 8 10", "close": CLOSE, "mixed": MIXED, "one": "5 " * 10}
FOUR = {
    "A1": association("u", "rising"),
    "A2": association("u", "close"),
    "A3": association("u", "mixed"),
    "A4": association("u", "one"),
    "B1": association("close", "mixed", role="exploratory"),
}
FAMILY = Invented(columns=COLUMNS, associations=FOUR)
"""Four members, one of which cannot be estimated, and one association outside the family."""

BY = "interval: {by: Bonett-Wright, adjusted: %s}"
SELECTING = "several_tests: {adjust: Benjamini-Hochberg}"


def given(analysis: Analysis, name: str) -> Interval:
    interval = analysis.results[name].interval
    assert isinstance(interval, Interval)
    return interval


def by_hand(analysis: Analysis, name: str, error: float) -> tuple[float, float]:
    """Return the interval of Bonett and Wright 2000 with ``error`` outside, by another library’s quantile."""
    estimate = analysis.results[name].estimate
    assert isinstance(estimate, Estimate)
    r, n = estimate.coefficient.value, estimate.coefficient.n
    half = norm.isf(error / 2) * sqrt((1 + r * r / 2) / (n - 3))
    return tanh(atanh(r) - half), tanh(atanh(r) + half)


@pytest.mark.parametrize(
    ("word", "key"),
    [
        ("guarded jackknife", "jackknife on z, guarded"),
        ("Bonett-Wright", "Bonett-Wright"),
        ("influence values", "influence values on z"),
        ("BCa bootstrap", "BCa bootstrap"),
        ("Fieller-Hartley-Pearson", "Fieller-Hartley-Pearson"),
        ("Fisher z", "Fisher z"),
    ],
)
def test_the_rule_asked_for_makes_the_interval(word: str, key: str) -> None:
    """And no other; the plan’s word and the rule are both filed."""
    assert word in INTERVAL_BY
    inference = f"alpha: 0.05, p_value: {{seed: 3}}, interval: {{by: {word}}}"
    analysis = replace(FAMILY, inference=inference).analysed()
    assert {given(analysis, name).method for name in ("A2", "A3", "B1")} == {key}
    plain = analysis_to_plain(analysis)
    assert look_up(plain, "inference/interval/by") == word
    assert look_up(plain, "associations/A2/interval/by") == key


def test_the_usual_rule_serves_tau_b_as_well() -> None:
    """Without a word about it the guarded jackknife is taken, for either coefficient."""
    tau = association("u", "close", more="coefficient: Kendall tau-b")
    analysis = replace(FAMILY, associations={"A1": association("u", "close"), "A2": tau}).analysed()
    assert given(analysis, "A1").method == "jackknife on z, guarded"
    assert given(analysis, "A2").method == "tau-b jackknife on z, guarded"


def test_a_rule_that_does_not_exist_for_a_coefficient_is_not_replaced() -> None:
    """The other association of the plan has its interval."""
    tau = association("u", "close", more="coefficient: Kendall tau-b")
    inference = "alpha: 0.05, interval: {by: influence values}"
    found = replace(FAMILY, associations={"A1": association("u", "close"), "A2": tau}, inference=inference).analysed()
    assert given(found, "A1").method == "influence values on z"
    assert found.results["A2"].interval == NoInterval(
        "the plan asks for influence values, which makes no interval for tau-b"
    )


def test_simultaneous_intervals_share_the_error_evenly() -> None:
    """Among all members, the one without an estimate included; an association outside keeps the plan’s level."""
    analysis = replace(FAMILY, inference="alpha: 0.05, " + BY % "simultaneous").analysed()
    for name in ("A2", "A3"):
        found = given(analysis, name)
        assert (found.low, found.high) == pytest.approx(by_hand(analysis, name, 0.05 / 4), abs=1e-12)
        assert found.level == Decimal("0.9875")
        alone = analysis.results[name].interval_alone
        assert isinstance(alone, Interval)
        assert (alone.low, alone.high) == pytest.approx(by_hand(analysis, name, 0.05), abs=1e-12)
    assert isinstance(analysis.results["A4"].interval, NoInterval)
    outside = given(analysis, "B1")
    assert (outside.low, outside.high) == pytest.approx(by_hand(analysis, "B1", 0.05), abs=1e-12)
    assert analysis.results["B1"].interval_alone is None


def test_a_simultaneous_bound_has_its_error_on_one_side() -> None:
    """The whole share of the error that falls to it."""
    inference = "alpha: 0.05, sidedness: one-sided, " + BY % "simultaneous"
    found = given(replace(FAMILY, inference=inference).analysed(), "A2")
    analysis = replace(FAMILY, inference="alpha: 0.05, " + BY % "simultaneous").analysed()
    assert (found.low, found.high) == (pytest.approx(by_hand(analysis, "A2", 2 * 0.05 / 4)[0], abs=1e-12), 1)


def test_intervals_after_selection_count_the_members_shown() -> None:
    """R times the error over m (Benjamini & Yekutieli 2005); members not shown and others keep the plan’s level."""
    analysis = replace(FAMILY, inference=f"alpha: 0.05, {SELECTING}, " + BY % "after selection").analysed()
    words = {name: finding.word for name, finding in analysis.findings.items()}
    assert words == {"A1": "shown", "A2": "shown", "A3": "not shown", "A4": "not estimable", "B1": None}
    found = given(analysis, "A2")
    assert (found.low, found.high) == pytest.approx(by_hand(analysis, "A2", 2 * 0.05 / 4), abs=1e-12)
    for name in ("A3", "B1"):
        kept = given(analysis, name)
        assert (kept.low, kept.high) == pytest.approx(by_hand(analysis, name, 0.05), abs=1e-12)
        assert analysis.results[name].interval_alone is None
    plain = analysis_to_plain(analysis)
    assert look_up(plain, "inference/interval/selected") == 2
    assert look_up(plain, "inference/interval/level") == "0.975"
    assert look_up(plain, "associations/A2/interval/holds") == "after selection"
    assert look_up(plain, "associations/A3/interval/holds") == "alone"


def test_a_finding_of_the_opposite_sign_is_selected_too() -> None:
    """What selects is the p-value, not the sign hoped for."""
    falling = {"A1": association("u", "v"), "A2": association("u", "w")}
    study = Invented(columns={"u": RISING, "v": FALLING, "w": MIXED}, associations=falling)
    analysis = replace(study, inference=f"alpha: 0.05, {SELECTING}, " + BY % "after selection").analysed()
    assert analysis.findings["A1"].word == "shown, opposite sign"
    assert given(analysis, "A1").level == Decimal("0.975")


def test_nothing_shown_adjusts_nothing() -> None:
    """Every interval stays at the plan’s level, and no adjusted level is filed."""
    study = Invented(columns={"u": RISING, "v": MIXED})
    analysis = replace(study, inference=f"alpha: 0.05, {SELECTING}, " + BY % "after selection").analysed()
    assert given(analysis, "A1").level == Decimal("0.95")
    filed = look_up(analysis_to_plain(analysis), "inference/interval")
    assert filed == {"by": "Bonett-Wright", "adjusted": "after selection", "selected": 0}


def test_the_error_of_an_adjusted_interval_is_rounded_down() -> None:
    """0.05 over 3 has no finite decimal form: twelve digits below it are left, and no interval is too narrow."""
    three = {name: FOUR[name] for name in ("A1", "A2", "A3")}
    analysis = replace(FAMILY, associations=three, inference="alpha: 0.05, " + BY % "simultaneous").analysed()
    assert given(analysis, "A2").level == 1 - Decimal("0.0166666666666")
    assert look_up(analysis_to_plain(analysis), "associations/A2/interval/level") == "0.9833333333334"


RESAMPLED = "alpha: 0.05, p_value: {seed: %d}, interval: {by: BCa bootstrap, resamples: %d, adjusted: %s}"


def test_resamples_come_from_a_stream_of_their_own() -> None:
    """Equal seeds give equal limits, whatever stands beside; another seed and other numbers of resamples do not."""
    limits = {}
    for seed, resamples, names in ((3, 1999, "A2 A3"), (3, 1999, "A2"), (4, 1999, "A2"), (3, 2000, "A2")):
        plan = {name: FOUR[name] for name in names.split()}
        inference = RESAMPLED % (seed, resamples, "none")
        found = given(replace(FAMILY, associations=plan, inference=inference).analysed(), "A2")
        assert found.resampled is not None
        assert found.resampled.drawn == resamples
        limits[seed, resamples, names] = (found.low, found.high)
    assert limits[3, 1999, "A2 A3"] == limits[3, 1999, "A2"]
    assert len(set(limits.values())) == 3


def test_an_adjusted_bootstrap_reads_the_same_resamples() -> None:
    """One draw, two levels: the wider interval holds the other; the address is filed."""
    analysis = replace(FAMILY, inference=RESAMPLED % (3, 1999, "simultaneous")).analysed()
    found, alone = given(analysis, "A3"), analysis.results["A3"].interval_alone
    assert isinstance(alone, Interval)
    assert found.low < alone.low < alone.high < found.high
    assert found.resampled == alone.resampled
    stream = look_up(analysis_to_plain(analysis), "associations/A3/interval/resampled/stream")
    assert stream == ["IN-1", "A3", "interval", "resamples"]


def test_too_few_resamples_for_an_adjusted_level_leave_the_plain_interval() -> None:
    """999 resamples reach no limit that leaves less than 1 of them beyond it; the reason is said, the other kept."""
    many = {f"A{place}": association("u", "mixed") for place in range(1, 27)}
    analysis = replace(FAMILY, associations=many, inference=RESAMPLED % (3, 999, "simultaneous")).analysed()
    result = analysis.results["A1"]
    assert isinstance(result.interval, NoInterval)
    assert "too few resamples" in result.interval.reason
    assert isinstance(result.interval_alone, Interval)


def test_dependent_rows_withhold_adjusted_intervals_too() -> None:
    """The reason is that of the test."""
    analysis = replace(FAMILY, rows="leave_out: []", inference="alpha: 0.05, " + BY % "simultaneous").analysed()
    for result in analysis.results.values():
        assert isinstance(result.interval, NoInterval)
        assert result.interval_alone is None


def test_what_the_ties_allow_is_filed() -> None:
    """Halves against ten untied rows: 5 of the root of 33, 0.870 (by hand: 62.5 over the root of 62.5 times 82.5)."""
    study = Invented(columns={"u": RISING, "v": "1 1 1 1 1 2 2 2 2 2"})
    plain = analysis_to_plain(study.analysed())
    filed = look_up(plain, "associations/A1/attainable")
    assert filed == {"lowest": "-0.870388279778", "highest": "0.870388279778"}
    assert sqrt(62.5 / 82.5) == pytest.approx(0.870388279778, abs=1e-12)


def test_the_share_that_could_go_unseen_is_filed_with_its_probability() -> None:
    """1 − 0.025 to the power 1/10 is 0.3085 (by logarithms: ln 0.025 = −3.68888)."""
    plain = analysis_to_plain(Invented().analysed())
    unseen = look_up(plain, "associations/A1/interval/unseen")
    assert unseen == {"share": "0.308497107819", "probability": "0.025"}


@pytest.mark.parametrize("word", INTERVAL_BY)
def test_no_digit_of_an_interval_depends_on_the_order_of_the_rows(word: str) -> None:
    """Resamples included: rows are put in order before any is drawn."""
    inference = f"alpha: 0.05, p_value: {{seed: 3}}, interval: {{by: {word}, resamples: 999}}"
    columns = {"u": "1 1 2 3 4 5 5 6 7 8", "v": "2 1 1 4 3 6 8 5 7 8"}
    turned = {name: " ".join(reversed(cells.split())) for name, cells in columns.items()}
    one, other = (Invented(columns=each, inference=inference).analysed() for each in (columns, turned))
    assert given(one, "A1") == given(other, "A1")


@pytest.mark.parametrize(
    ("word", "key"), [("guarded jackknife", "jackknife on z, guarded"), ("BCa bootstrap", "BCa bootstrap")]
)
def test_groups_have_the_interval_of_the_plan(word: str, key: str) -> None:
    """And, where it draws, a stream for each group."""
    study = Invented(
        columns={"u": RISING, "v": CLOSE, "site": "a b " * 5},
        variables={"site": "label: site, scale: ordered, lowest_to_highest: [a, b]"},
        associations={"A1": association(more="groups: {column: site}")},
        inference=f"alpha: 0.05, p_value: {{seed: 3}}, interval: {{by: {word}, resamples: 999}}",
    )
    plain = analysis_to_plain(study.analysed())
    groups = look_up(plain, "associations/A1/subgroups/groups")
    assert isinstance(groups, list)
    assert [look_up(group, "interval/by") for group in groups] == [key, key]

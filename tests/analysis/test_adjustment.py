"""Families adjusted by every rule that a plan may name, step-down maxT with its own conditions among them."""

from dataclasses import replace
from fractions import Fraction

import pytest

from analysis.invented import MISSING, RISING, Invented, association
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.decide import decide
from rankdocket.analysis.family import adjustment_of
from rankdocket.analysis.family_max_t import family_max_t
from rankdocket.analysis.max_t_result import FamilyMaxT, MemberMaxT
from rankdocket.analysis.nulls import levels_of
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis, RankTest, Withheld
from rankdocket.analysis.screening import screen_study
from rankdocket.document.numbers import look_up
from rankdocket.errors import InputError
from rankdocket.vocabulary import Adjustment
from rankdocket.writing.screening_page import screening_page

BASE = Invented()


def by(rule: str, *, alpha: str = "0.05", more: str = "") -> str:
    return f"alpha: {alpha}, several_tests: {{adjust: {rule}}}{more}"


def with_p(rule: str, *values: str) -> Analysis:
    """Return a family of as many associations, decided as if their tests had given these values."""
    plan = {f"A{place}": association() for place, _ in enumerate(values, start=1)}
    analysis = replace(BASE, associations=plan, inference=by(rule)).analysed()
    results = dict(analysis.results)
    for name, value in zip(plan, values, strict=True):
        test = results[name].test
        assert isinstance(test, RankTest)
        results[name] = replace(results[name], test=replace(test, p=Fraction(value)))
    return replace(analysis, results=results, findings=decide(results, analysis.spec, adjustment_of(analysis.spec)))


FIVE = ("0.01", "0.02", "0.03", "0.04", "0.05")
FOUR = ("0.001", "0.01", "0.02", "0.04")


@pytest.mark.parametrize(
    ("rule", "values", "adjusted"),
    [
        # By hand from the papers: Hochberg 1988 (Biometrika 75: 800), Benjamini & Hochberg 1995 (JRSS B 57: 289),
        # Benjamini & Yekutieli 2001 (Annals of Statistics 29: 1165) with 1 + 1/2 + ... + 1/5 = 137/60, Dunn 1961.
        ("Holm", FIVE, ("0.05", "0.08", "0.09", "0.09", "0.09")),
        ("Hochberg", FIVE, ("0.05",) * 5),
        ("Benjamini-Hochberg", FIVE, ("0.05",) * 5),
        ("Benjamini-Yekutieli", FIVE, ("137/1200",) * 5),
        ("Bonferroni", FIVE, ("0.05", "0.10", "0.15", "0.20", "0.25")),
        ("Hochberg", ("0.04", "0.045"), ("0.045", "0.045")),
        ("Benjamini-Hochberg", FOUR, ("0.004", "0.02", "2/75", "0.04")),
        ("Benjamini-Yekutieli", FOUR, ("1/120", "1/24", "1/18", "1/12")),
    ],
)
def test_findings_rest_on_the_rule_that_the_plan_names(
    rule: str, values: tuple[str, ...], adjusted: tuple[str, ...]
) -> None:
    """An adjusted p at alpha is shown, above it is not."""
    findings = with_p(rule, *values).findings
    assert [finding.p_adjusted for finding in findings.values()] == [Fraction(value) for value in adjusted]
    expected = ["shown" if Fraction(value) <= Fraction("0.05") else "not shown" for value in adjusted]
    assert [finding.word for finding in findings.values()] == expected


@pytest.mark.parametrize(
    ("rule", "levels"),
    [
        ("Holm", ("1/20", "1/40", "1/60")),
        ("Hochberg", ("1/20", "1/40", "1/60")),
        ("Bonferroni", ("1/60",)),
        ("Benjamini-Hochberg", ("1/20", "1/30", "1/60")),
        ("Benjamini-Yekutieli", ("3/110", "1/55", "1/110")),
        ("step-down maxT", ("1/20",)),
    ],
)
def test_a_p_is_watched_at_every_level_that_the_rule_may_use(rule: str, levels: tuple[str, ...]) -> None:
    """Of a family of three at 0.05; 1 + 1/2 + 1/3 is 11/6."""
    plan = {f"A{place}": association() for place in range(1, 4)}
    spec, _ = replace(BASE, associations=plan, inference=by(rule)).read()
    assert levels_of(spec.associations["A2"], spec) == tuple(Fraction(level) for level in levels)


@pytest.mark.parametrize(
    ("rule", "rate"),
    [
        ("Holm", "any false finding"),
        ("Hochberg", "any false finding"),
        ("Bonferroni", "any false finding"),
        ("Benjamini-Hochberg", "share of false findings"),
        ("Benjamini-Yekutieli", "share of false findings"),
        ("step-down maxT", "any false finding"),
    ],
)
def test_what_alpha_bounds_is_filed(rule: Adjustment, rate: str) -> None:
    """Beside the rule; without a family, or without adjustment, each test stands alone."""
    plain = analysis_to_plain(replace(BASE, inference=by(rule)).analysed())
    assert (look_up(plain, "inference/adjust"), look_up(plain, "inference/error_rate")) == (rule, rate)
    for several in ("{adjust: none, reason: one question}", "{among: none, reason: one question}"):
        alone = replace(BASE, inference=f"alpha: 0.05, several_tests: {several}").analysed()
        assert look_up(analysis_to_plain(alone), "inference/error_rate") == "each test alone"


SMALL = Invented(
    columns={"u": "1 2 3 4 5", "v": "1 2 3 5 4", "w": "2 1 3 4 5", "same": "1 1 1 1 1"},
    associations={"A1": association(), "A2": association("w", "u")},
    inference=by("step-down maxT"),
)
"""Five rows of one variable against two: raw 1/12 each, together 2/15 (counted by hand; Westfall & Young 1993)."""


def max_t_of(analysis: Analysis) -> FamilyMaxT:
    assert analysis.max_t is not None
    return analysis.max_t


def test_few_rows_are_adjusted_over_all_permutations() -> None:
    """16 of 120 permutations reach the observed 0.9 with either variable, 10 with each alone; without a seed."""
    analysis = SMALL.analysed()
    family = max_t_of(analysis)
    assert (family.variable, family.method, family.of, family.stream) == ("u", "all permutations", 120, ())
    share = Fraction(2, 15)
    assert dict(family.members) == dict.fromkeys(("A1", "A2"), MemberMaxT(10, 16, 120, share, (share, share)))
    for name, finding in analysis.findings.items():
        test = analysis.results[name].test
        assert isinstance(test, RankTest)
        assert (test.p, finding.p_adjusted, finding.undecided) == (Fraction(1, 12), share, False)


def test_two_associations_of_the_same_values_share_one_maximum() -> None:
    """The largest of two equal coefficients is either: the adjusted p is the association's own."""
    analysis = replace(SMALL, associations={"A1": association(), "A2": association()}).analysed()
    assert {finding.p_adjusted for finding in analysis.findings.values()} == {Fraction(1, 12)}


def test_a_member_without_a_coefficient_stays_and_moves_nothing() -> None:
    """It keeps its place in the family; no permutation of a constant has a coefficient."""
    plan = {**SMALL.associations, "A3": association("u", "same")}
    analysis = replace(SMALL, associations=plan).analysed()
    assert analysis.family == ("A1", "A2", "A3")
    assert analysis.findings["A1"].p_adjusted == Fraction(2, 15)
    assert (analysis.findings["A3"].word, analysis.findings["A3"].p_adjusted) == ("not estimable", None)
    assert max_t_of(analysis).held_back == ()


def test_nothing_is_adjusted_where_no_member_has_a_test() -> None:
    """Silence about repeated rows withholds every test."""
    analysis = replace(SMALL, rows="leave_out: []").analysed()
    assert analysis.max_t is None
    assert {finding.word for finding in analysis.findings.values()} == {"withheld"}


def test_one_member_is_not_adjusted() -> None:
    """Its adjusted p is its own, counted over all orderings, and no seed is asked for."""
    analysis = replace(BASE, inference=by("step-down maxT")).analysed()
    assert analysis.max_t is None
    assert analysis.findings["A1"].p_adjusted == Fraction(2, 3628800)


MIXED_TEN = "2 1 8 5 4 3 7 6 9 10"
TEN = Invented(
    columns={"u": RISING, "v": MIXED_TEN, "w": "4 7 1 9 3 10 2 6 8 5"},
    associations={"A1": association(), "A2": association("w", "u")},
    inference=by("step-down maxT", more=", p_value: {permutations: 9999, seed: 7}"),
)


def test_more_rows_are_adjusted_by_drawn_permutations() -> None:
    """From the plan's seed at an address of the family: the data count as one more; the error is filed."""
    analysis = TEN.analysed()
    family, member = max_t_of(analysis), max_t_of(analysis).members["A1"]
    assert (family.method, family.of) == ("drawn permutations", 9999)
    assert family.stream == ("IN-1", "family", "step-down maxT")
    assert member.share == Fraction(member.hits + 1, 10_000)
    assert member.ends[0] < member.share < member.ends[1]
    plain = analysis_to_plain(analysis)
    at = "associations/A1/finding"
    assert look_up(plain, f"{at}/max_t/count") == str(member.hits)
    assert Fraction(str(look_up(plain, f"{at}/p_adjusted"))) == member.share
    low, high = (float(str(look_up(plain, f"{at}/max_t/{end}"))) for end in ("p_low", "p_high"))
    assert low < float(member.share) < high
    assert TEN.analysed().max_t == family
    assert replace(TEN, inference=TEN.inference.replace("seed: 7", "seed: 8")).analysed().max_t != family


def test_draws_that_leave_the_side_open_are_undecided() -> None:
    """Alpha within the interval of the drawn adjusted p; away from it the finding stands."""
    share = max_t_of(TEN.analysed()).members["A1"].share
    for alpha, undecided in ((str(float(share)), True), ("0.2", False)):
        inference = by("step-down maxT", alpha=alpha, more=", p_value: {permutations: 9999, seed: 7}")
        assert replace(TEN, inference=inference).analysed().findings["A1"].undecided is undecided


def test_an_adjusted_p_is_never_below_its_own() -> None:
    """All members the same: the drawn share lies near the counted p, on either side, and the larger one is given."""
    plan = {"A1": association(), "A2": association()}
    below = set()
    for seed in range(6):
        inference = by("step-down maxT", more=f", p_value: {{permutations: 999, seed: {seed}}}")
        analysis = replace(TEN, associations=plan, inference=inference).analysed()
        test, finding = analysis.results["A1"].test, analysis.findings["A1"]
        assert isinstance(test, RankTest)
        assert finding.max_t is not None
        assert finding.p_adjusted == max(test.p, finding.max_t.share)
        below.add(finding.max_t.share < test.p)
    assert below == {True, False}


def test_a_withheld_member_stands_in_every_maximum() -> None:
    """It gets no adjusted p, and the other none that is smaller than beside it: 16 of 120, as with both."""
    analysis = SMALL.analysed()
    withheld = replace(analysis.results["A2"], test=Withheld("the plan does not allow it"))
    results = {**analysis.results, "A2": withheld}
    family = family_max_t(results, analysis.spec)
    assert family is not None
    assert (family.held_back, set(family.members)) == (("A2",), {"A1"})
    assert family.members["A1"] == max_t_of(analysis).members["A1"]
    findings = decide(results, analysis.spec, family)
    assert (findings["A1"].p_adjusted, findings["A2"].word) == (Fraction(2, 15), "withheld")


UNLIKE = replace(TEN, columns={**TEN.columns, "w": f"{MISSING} 7 1 9 3 10 2 6 8 5"})


def test_a_family_with_unlike_rows_is_refused_before_anything_joint() -> None:
    """The refusal names the family, the members that differ, and two ways out; a screening says so too."""
    spec, data = UNLIKE.read()
    done: list[str] = []
    with pytest.raises(InputError) as refused:
        analyse(spec, data, done.append)
    (fault,) = refused.value.faults
    assert done == []
    assert (fault.number, fault.field) == (61, "inference.several_tests.adjust")
    assert "in all of A1, A2; those of A2 are not those of A1." in fault.what
    assert "leave_out" in fault.remedy
    screening = screen_study(spec, data)
    assert (screening.unlike, screening.all_met) == (("A2",), False)
    assert "A2: the complete rows are not those of the family’s first association" in screening_page(screening)


def test_unlike_rows_do_not_matter_to_other_rules() -> None:
    """Nor to a family of one."""
    for invented in (
        replace(UNLIKE, inference=by("Holm")),
        replace(UNLIKE, associations={"A1": association(), "A2": association("w", "u", role="secondary")}),
    ):
        assert invented.analysed().max_t is None


def test_more_rows_than_can_be_counted_need_a_seed() -> None:
    """Ten rows are counted for the own p of each, and drawn for the family."""
    with pytest.raises(InputError) as refused:
        replace(TEN, inference=by("step-down maxT")).analysed()
    (fault,) = refused.value.faults
    assert fault.number == 54
    assert "A1, A2" in fault.what

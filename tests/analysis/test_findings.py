"""What the plan’s rule makes of the results: five words, families, and the comparison with alpha on fractions."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.decide import decide
from rankdocket.analysis.family import adjustment_of, factors_of, family_of
from rankdocket.analysis.results import Analysis, AssociationAnalysis, Finding, RankTest, Withheld
from rankdocket.errors import InputError
from rankdocket.stats.null import TailCounts
from rankdocket.vocabulary import FAMILIES, FINDINGS, FindingWord

ONE_SIDED = "alpha: 0.05, sidedness: one-sided"
MANY = " ".join(str(place // 3) for place in range(60))
MANY_TOO = " ".join(str(place * 17 % 61 // 3) for place in range(60))
"""Twenty values three times each: far more orderings than any budget lets be counted."""

DRAWN = "alpha: 0.05, p_value: {permutations: 999, most_draws: 999, seed: 11}"


def word(v: str, sign: str, *, inference: str = "alpha: 0.05", **parts: Any) -> FindingWord | None:
    invented = replace(
        Invented(),
        columns={"u": RISING, "v": v},
        associations={"A1": association(sign=sign)},
        inference=inference,
        **parts,
    )
    return invented.analysed().findings["A1"].word


@pytest.mark.parametrize(
    ("v", "sign", "inference", "expected"),
    [
        (RISING, "positive", "alpha: 0.05", "shown"),
        (FALLING, "negative", "alpha: 0.05", "shown"),
        (RISING, "either", "alpha: 0.05", "shown"),
        (FALLING, "either", "alpha: 0.05", "shown"),
        (FALLING, "positive", "alpha: 0.05", "shown, opposite sign"),
        (RISING, "negative", "alpha: 0.05", "shown, opposite sign"),
        (MIXED, "positive", "alpha: 0.05", "not shown"),
        (MIXED, "either", "alpha: 0.05", "not shown"),
        (RISING, "positive", ONE_SIDED, "shown"),
        (FALLING, "negative", ONE_SIDED, "shown"),
        # The tail asked for holds every ordering: p = 1, and a test of one side never shows the other.
        (FALLING, "positive", ONE_SIDED, "not shown"),
        (RISING, "negative", ONE_SIDED, "not shown"),
        ("5 " * 10, "positive", "alpha: 0.05", "not estimable"),
    ],
)
def test_a_finding_is_one_word_of_a_fixed_list(v: str, sign: str, inference: str, expected: FindingWord) -> None:
    """The sign decides between two words only after p did."""
    assert word(v, sign, inference=inference) == expected
    assert expected in FINDINGS


def test_a_withheld_test_gives_the_word_withheld() -> None:
    """Whatever the rows would have shown."""
    assert word(RISING, "positive", rows="leave_out: []") == "withheld"


def test_a_p_equal_to_alpha_is_shown_and_one_just_above_is_not() -> None:
    """One of the 20 distinct orderings is as extreme: p is 1/20 exactly, compared as a fraction."""
    tied = replace(Invented(), columns={"u": "1 2 3 4 5", "v": "1 1 1 2 3"})
    found = {
        alpha: replace(tied, inference=f"alpha: {alpha}, sidedness: one-sided").analysed()
        for alpha in ("0.05", "0.0499999999999999")
    }
    tests = {alpha: analysis.results["A1"].test for alpha, analysis in found.items()}
    assert all(isinstance(test, RankTest) and test.p == Fraction(1, 20) for test in tests.values())
    assert {alpha: analysis.findings["A1"].word for alpha, analysis in found.items()} == {
        "0.05": "shown",
        "0.0499999999999999": "not shown",
    }


FAMILY = {
    "A1": association(role="primary"),
    "A2": association(role="secondary"),
    "A3": association(role="exploratory"),
    "A4": association(role="primary"),
}


@pytest.mark.parametrize(
    ("among", "members"),
    [
        ("primary", ("A1", "A4")),
        ("primary and secondary", ("A1", "A2", "A4")),
        ("all", ("A1", "A2", "A3", "A4")),
        ("none", ()),
    ],
)
def test_the_family_is_what_the_plan_names(among: str, members: tuple[str, ...]) -> None:
    """In plan order; those outside get no finding, unless there is no family at all."""
    assert set(FAMILIES) >= {among}
    inference = f"alpha: 0.05, several_tests: {{among: {among}, reason: as agreed}}"
    analysis = replace(Invented(), associations=FAMILY, inference=inference).analysed()
    assert analysis.family == family_of(analysis.spec) == members
    own = Fraction(2, 3628800)
    for name, finding in analysis.findings.items():
        if name in members:
            assert finding == Finding("shown", "family", len(members) * own)
            assert max(factors_of(analysis.spec.associations[name], analysis.spec)) == len(members)
        elif among == "none" and name != "A3":
            assert finding == Finding("shown", "own p-value", None)
        else:
            assert finding == Finding(None, "outside the family", None)
            assert factors_of(analysis.spec.associations[name], analysis.spec) == (1,)


def test_without_adjustment_a_family_member_keeps_its_p() -> None:
    """The plan gives its reason and each p stands for itself."""
    inference = "alpha: 0.05, several_tests: {adjust: none, among: all, reason: four questions}"
    analysis = replace(Invented(), associations=FAMILY, inference=inference).analysed()
    assert {finding.p_adjusted for finding in analysis.findings.values()} == {Fraction(2, 3628800)}
    assert {max(factors_of(each, analysis.spec)) for each in analysis.spec.associations.values()} == {1}


def with_p(*values: str, alpha: str = "0.05") -> Analysis:
    """Return a study of as many primary associations, and the values that their tests are to have given."""
    plan = {f"A{place}": association() for place, _ in enumerate(values, start=1)}
    analysis = replace(Invented(), associations=plan, inference=f"alpha: {alpha}").analysed()
    results = dict(analysis.results)
    for name, value in zip(plan, values, strict=True):
        test = results[name].test
        assert isinstance(test, RankTest)
        results[name] = replace(results[name], test=replace(test, p=Fraction(value)))
    return replace(analysis, results=results, findings=decide(results, analysis.spec, adjustment_of(analysis.spec)))


@pytest.mark.parametrize(
    ("values", "adjusted"),
    [
        # Holm 1979 (Scandinavian Journal of Statistics 6: 65-70), by hand: largest of (m - i + 1) p up to each.
        (("0.01", "0.02", "0.03", "0.04", "0.05"), ("0.05", "0.08", "0.09", "0.09", "0.09")),
        (("0.04", "0.045"), ("0.08", "0.08")),
        (("0.001", "0.01", "0.02", "0.04"), ("0.004", "0.03", "0.04", "0.04")),
        (("0.04", "0.001", "0.02", "0.01"), ("0.04", "0.004", "0.04", "0.03")),
        (("0.6", "0.7"), ("1", "1")),
    ],
)
def test_findings_rest_on_holm_adjusted_values(values: tuple[str, ...], adjusted: tuple[str, ...]) -> None:
    """An adjusted p at alpha is shown, above it is not."""
    findings = with_p(*values).findings
    assert [finding.p_adjusted for finding in findings.values()] == [Fraction(value) for value in adjusted]
    expected = ["shown" if Fraction(value) <= Fraction("0.05") else "not shown" for value in adjusted]
    assert [finding.word for finding in findings.values()] == expected


def test_what_has_no_p_stays_in_the_family_as_1() -> None:
    """An association not estimable and one withheld never lower another's adjusted p, and print no p themselves."""
    columns = {"u": RISING, "v": RISING, "one": "5 " * 10, "few": "1 2 3 4 " + "- " * 6}
    plan = {"A1": association(), "A2": association("u", "one"), "A3": association("u", "few")}
    analysis = replace(
        Invented(),
        columns=columns,
        associations=plan,
        requirements="fewest_complete_rows: 5, most_missing: 1, most_tied: 1",
    ).analysed()
    assert analysis.family == ("A1", "A2", "A3")
    assert analysis.findings["A1"] == Finding("shown", "family", 3 * Fraction(2, 3628800))
    assert analysis.findings["A2"] == Finding("not estimable", "family", None)
    assert analysis.findings["A3"] == Finding("withheld", "family", None)


@given(st.lists(st.integers(1, 1000), min_size=1, max_size=6), st.integers(0, 5))
def test_losing_a_test_never_lowers_the_adjusted_p_of_another(thousandths: list[int], place: int) -> None:
    """The family's size does not depend on the data."""
    rule = adjustment_of(Invented().read()[0]).function
    values = [Fraction(value, 1000) for value in thousandths]
    lost = [Fraction(1) if position == place else value for position, value in enumerate(values)]
    pairs = zip(rule(tuple(values)), rule(tuple(lost)), strict=True)
    assert all(before <= after for position, (before, after) in enumerate(pairs) if position != place)


def drawn(**changes: Any) -> Invented:
    """Return a study whose p-values need drawn permutations."""
    return replace(
        Invented(columns={"u": MANY, "v": MANY_TOO, "w": f"{MANY_TOO} 20".partition(" ")[2]}, inference=DRAWN),
        **changes,
    )


def test_a_plan_that_needs_draws_and_names_no_seed_is_refused() -> None:
    """The refusal names the association, the key and a line to write."""
    spec, data = drawn(inference="alpha: 0.05", associations={"A1": association(), "A2": association("u", "w")}).read()
    done: list[str] = []
    with pytest.raises(InputError) as refused:
        analyse(spec, data, done.append)
    assert done == []
    (fault,) = refused.value.faults
    assert (fault.place.file, fault.field) == ("study.yaml", "inference.p_value")
    assert "A1, A2" in fault.what
    assert "seed: " in fault.remedy


def test_a_constant_column_asks_for_no_seed() -> None:
    """There is nothing to draw for."""
    constant = drawn(inference="alpha: 0.05", columns={"u": MANY, "v": "5 " * 60})
    assert constant.analysed().findings["A1"].word == "not estimable"


def test_the_draws_of_an_association_do_not_hang_on_the_others() -> None:
    """Its stream is found by its name: another association before or after it moves nothing."""
    alone = drawn(associations={"A2": association()}).analysed()
    first = drawn(associations={"A2": association(), "A3": association("u", "w")}).analysed()
    last = drawn(associations={"A1": association("w", "v"), "A2": association()}).analysed()
    tests = [analysis.results["A2"].test for analysis in (alone, first, last)]
    assert tests[0] == tests[1] == tests[2]
    assert isinstance(tests[0], RankTest)
    assert (tests[0].tails.method, tests[0].tails.of) == ("drawn permutations", 999)
    assert tests[0].p == Fraction(tests[0].tails.two_sided + 1, 1000)
    assert tests[0].p_interval is not None
    assert tests[0].p_interval[0] <= tests[0].tails.two_sided / 999 <= tests[0].p_interval[1]


def test_seed_and_name_move_the_draws() -> None:
    """Two seeds, and two names of one seed, do not share their draws."""
    invented = drawn(associations={"A1": association(), "A2": association()})
    one = invented.analysed().results
    other = replace(invented, inference=DRAWN.replace("11", "12")).analysed().results
    found = {repr(results[name].test) for results in (one, other) for name in results}
    assert len(found) == 4


def test_draws_that_find_nothing_do_not_give_a_p_of_0() -> None:
    """b = 0 of B = 999: p = 1/1000, upper limit 0.003686 (Phipson & Smyth 2010; Clopper & Pearson 1934)."""
    test = drawn(columns={"u": MANY, "v": MANY}).analysed().results["A1"].test
    assert isinstance(test, RankTest)
    assert (test.tails.two_sided, test.p) == (0, Fraction(1, 1000))
    assert test.p_interval is not None
    assert test.p_interval[0] == 0
    assert round(Decimal(test.p_interval[1]), 6) == Decimal("0.003686")


DRAWS = 999


def as_if_drawn(result: AssociationAnalysis, hits: int) -> AssociationAnalysis:
    """Return the association as if ``hits`` of 999 draws had been as extreme as the data."""
    assert isinstance(result.test, RankTest)
    tails = TailCounts("drawn permutations", hits, DRAWS, hits, DRAWS)
    p_interval = tails.interval("two-sided", Decimal("0.95"))
    null = replace(result.test.null, tails=tails)
    return replace(result, test=replace(result.test, null=null, p=tails.p("two-sided"), p_interval=p_interval))


def with_hits(*hits: int, role: str = "primary", several: str = "") -> dict[str, Finding]:
    """Return the findings of as many associations, each drawn with so many hits."""
    plan = {f"A{place}": association(role=role) for place, _ in enumerate(hits, start=1)}
    analysis = replace(Invented(), associations=plan, inference=f"alpha: 0.05{several}").analysed()
    results = {
        name: as_if_drawn(result, found) for (name, result), found in zip(analysis.results.items(), hits, strict=True)
    }
    return dict(decide(results, analysis.spec, adjustment_of(analysis.spec)))


OWN_P = ", several_tests: {among: none, reason: each question is its own}"
UNADJUSTED = ", several_tests: {adjust: none, reason: each question is its own}"


def test_draws_leave_open_what_the_adjusted_ends_of_their_interval_leave_open() -> None:
    """Five tests, 9 of 1,000: p 0.009 (0.0035 to 0.0157) is 0.045 adjusted and shown; 5 times 0.0157 is above alpha."""
    finding = with_hits(8, 500, 600, 700, 800)["A1"]
    assert (finding.word, finding.p_adjusted) == ("shown", Fraction(45, 1000))
    assert finding.undecided


def test_draws_whose_raw_interval_holds_alpha_may_still_decide() -> None:
    """Second of five, 44 of 1,000: p 0.044 (0.031 to 0.058) is 0.176 adjusted; 4 times 0.031 is above alpha as well."""
    findings = with_hits(0, 43, 600, 700, 800)
    assert (findings["A2"].word, findings["A2"].p_adjusted) == ("not shown", Fraction(176, 1000))
    assert not findings["A2"].undecided
    assert not findings["A1"].undecided  # 0.001 (0 to 0.0037): 5 times 0.0037 is below alpha


@pytest.mark.parametrize(
    ("hits", "undecided"),
    [
        # Ends of the intervals of b of 999 at 0.95 (Clopper & Pearson 1934): 37 up to 0.0507, 36 up to 0.0496.
        (0, False),
        (36, False),
        (37, True),
        (49, True),
        # 64 from 0.0497, 65 from 0.0506.
        (64, True),
        (65, False),
        (500, False),
        (999, False),
    ],
)
@pytest.mark.parametrize("several", ["", OWN_P, UNADJUSTED])
def test_a_drawn_p_is_undecided_from_where_its_interval_reaches_alpha(hits: int, undecided: bool, several: str) -> None:
    """Clearly above or below alpha, the error of the draws changes nothing; alone, adjustment does not either."""
    assert with_hits(hits, several=several)["A1"].undecided == undecided


def test_the_ends_of_a_whole_family_are_adjusted_together() -> None:
    """Each of three is judged with all of them at their ends; without draws nothing is undecided."""
    assert {name: found.undecided for name, found in with_hits(10, 16, 300).items()} == {
        "A1": True,  # 0.011 (0.005 to 0.0183): 3 times 0.0183 is above alpha, 3 times 0.005 is below
        "A2": True,  # 0.017 (0.0092 to 0.0259): 2 times 0.0259 is above alpha
        "A3": False,
    }
    assert not any(found.undecided for found in with_p("0.049", "0.051").findings.values())


def test_a_counted_p_is_undecided_when_the_draws_of_another_decide_it() -> None:
    """Exact p 0.04 beside a drawn one around 0.025: Holm gives 0.04 or 0.05 and more, as the other one falls."""
    analysis = replace(Invented(), associations={"A1": association(), "A2": association()}).analysed()
    first = analysis.results["A1"]
    assert isinstance(first.test, RankTest)
    counted = replace(first, test=replace(first.test, p=Fraction("0.04")))
    findings = {
        hits: decide(
            {"A1": counted, "A2": as_if_drawn(analysis.results["A2"], hits)},
            analysis.spec,
            adjustment_of(analysis.spec),
        )
        for hits in (2, 24, 900)
    }
    assert [findings[hits]["A1"].undecided for hits in (2, 24, 900)] == [False, True, False]
    assert [findings[hits]["A1"].word for hits in (2, 900)] == ["shown", "not shown"]


def test_without_a_finding_nothing_is_undecided() -> None:
    """Outside the family the plan decides nothing, and a withheld test has no p."""
    assert not with_hits(49, role="exploratory", several=OWN_P)["A1"].undecided
    analysis = Invented().analysed()
    results = {"A1": replace(as_if_drawn(analysis.results["A1"], 49), test=Withheld("the plan says so"))}
    assert not decide(results, analysis.spec, adjustment_of(analysis.spec))["A1"].undecided

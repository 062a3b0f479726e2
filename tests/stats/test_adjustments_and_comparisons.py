"""Adjusted p-values, and the approximations that stand beside ours."""

from fractions import Fraction
from math import sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.stats import false_discovery_control

from rankdocket import adjusted
from rankdocket.document.prose import lint
from rankdocket.stats.adjustment import AdjustmentName, AdjustmentRule
from rankdocket.stats.adjustments import ADJUSTMENTS
from rankdocket.stats.comparisons import pearson_r, t_value_p
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import ADJUSTMENTS as WORDS


def test_holm_steps_down() -> None:
    """0.01 … 0.05 become 0.05, 0.08, 0.09, 0.09, 0.09 (Holm 1979; worked by hand)."""
    raw = [Fraction(percent, 100) for percent in (5, 1, 3, 2, 4)]
    assert adjusted(raw, rule="Holm") == tuple(Fraction(percent, 100) for percent in (9, 5, 9, 8, 9))
    assert adjusted(raw, rule="none") == tuple(raw)


def _hundredths(*numbers: str) -> tuple[Fraction, ...]:
    return tuple(Fraction(number) / 100 for number in numbers)


def test_the_rules_on_the_first_five_hundredths() -> None:
    """0.01 … 0.05: step-up rules end at the largest p; worked by hand, the sum 1 + … + 1/5 is 137/60."""
    raw = _hundredths("1", "2", "3", "4", "5")
    assert adjusted(raw, rule="Hochberg") == _hundredths(*["5"] * 5)
    assert adjusted(raw, rule="Benjamini-Hochberg") == _hundredths(*["5"] * 5)
    assert adjusted(raw, rule="Benjamini-Yekutieli") == (Fraction(5, 100) * Fraction(137, 60),) * 5
    assert adjusted(raw, rule="Bonferroni") == _hundredths("5", "10", "15", "20", "25")


def test_stepping_up_needs_the_largest_only() -> None:
    """0.04 and 0.045 stay at 0.045 by Hochberg and are 0.08 by Holm (worked by hand)."""
    raw = _hundredths("4", "4.5")
    assert adjusted(raw, rule="Hochberg") == _hundredths("4.5", "4.5")
    assert adjusted(raw, rule="Holm") == _hundredths("8", "8")


THROMBOLYSIS = tuple(
    Fraction(parts, 10_000) for parts in (1, 4, 19, 95, 201, 278, 298, 344, 459, 3240, 4262, 5719, 6528, 7590, 10_000)
)
"""Benjamini & Hochberg 1995, section 4."""


@pytest.mark.parametrize(("rule", "found"), [("Bonferroni", 3), ("Hochberg", 3), ("Benjamini-Hochberg", 4)])
def test_the_published_numbers_of_findings_are_found(rule: AdjustmentName, found: int) -> None:
    """At 0.05 Bonferroni and Hochberg keep three and the third rule four (Benjamini & Hochberg 1995)."""
    assert sum(p <= Fraction(1, 20) for p in adjusted(THROMBOLYSIS, rule=rule)) == found


def _found_by_procedure(rule: AdjustmentName, family: tuple[Fraction, ...], alpha: Fraction) -> set[int]:
    """Return the places found at alpha, by the procedures as their papers state them: no adjusted p is formed."""
    m = len(family)
    order = sorted(range(m), key=lambda place: family[place])
    harmonic = sum(Fraction(1, place) for place in range(1, m + 1))
    limits = {
        "Holm": [alpha / (m - j + 1) for j in range(1, m + 1)],
        "Hochberg": [alpha / (m - j + 1) for j in range(1, m + 1)],
        "Bonferroni": [alpha / m] * m,
        "Benjamini-Hochberg": [j * alpha / m for j in range(1, m + 1)],
        "Benjamini-Yekutieli": [j * alpha / (m * harmonic) for j in range(1, m + 1)],
        "none": [alpha] * m,
    }[rule]
    within = [family[place] <= limit for place, limit in zip(order, limits, strict=True)]
    if rule == "Holm":
        last = within.index(False) if False in within else m
    else:
        last = max((j + 1 for j in range(m) if within[j]), default=0)
    return set(order[:last])


@pytest.mark.parametrize("rule", [rule.key for rule in ADJUSTMENTS])
@given(
    st.lists(
        st.sampled_from([Fraction(part, 240) for part in (0, 1, 2, 3, 4, 6, 8, 12, 60, 240)]), min_size=1, max_size=7
    ),
    st.sampled_from([Fraction(part, 240) for part in (3, 6, 12, 24)]),
)
def test_an_adjusted_p_at_or_below_alpha_is_what_the_procedure_finds(
    rule: AdjustmentName, family: list[Fraction], alpha: Fraction
) -> None:
    """The steps of each paper at alpha and the adjusted p-values agree, ties and equality with alpha included."""
    changed = adjusted(family, rule=rule)
    found = {place for place, p in enumerate(changed) if p <= alpha}
    assert found == _found_by_procedure(rule, tuple(family), alpha)


@given(st.lists(st.floats(0, 1), min_size=1, max_size=12))
def test_shares_of_false_findings_agree_with_another_library(family: list[float]) -> None:
    """The two rules for shares of false findings agree with scipy.stats.false_discovery_control."""
    for rule, method in (("Benjamini-Hochberg", "bh"), ("Benjamini-Yekutieli", "by")):
        ours = [float(p) for p in adjusted(family, rule=rule)]
        assert ours == pytest.approx(false_discovery_control(family, method=method), rel=1e-12, abs=1e-300)


@pytest.mark.parametrize("rule", [rule.key for rule in ADJUSTMENTS])
@given(st.lists(st.fractions(0, 1, max_denominator=720), min_size=1, max_size=7), st.integers(1, 3))
def test_a_member_without_p_never_helps_another(rule: AdjustmentName, family: list[Fraction], without: int) -> None:
    """Entering as 1 raises or keeps every adjusted p-value, whatever the rule, and its own is 1."""
    alone, together = adjusted(family, rule=rule), adjusted([*family, *[1] * without], rule=rule)
    assert all(one <= other for one, other in zip(alone, together, strict=False))
    assert together[len(family) :] == (1,) * without


def test_every_rule_says_which_error_it_keeps() -> None:
    """Each rule but none names the size of the family by a slot, and any false finding or the share of them."""
    for rule in ADJUSTMENTS:
        if rule.key != "none":
            assert "{family}" in rule.describe.sentence
            assert ("the chance of any false finding in the family" in rule.describe.sentence) != (
                "expected share of false findings" in rule.describe.sentence
            )
            assert lint(rule.describe.sentence) == ()


def test_the_catalogue_has_a_rule_for_every_word() -> None:
    """Each adjustment of p-values that a spec may name has one rule, in the same order."""
    assert tuple(word for word in WORDS if word != "step-down maxT") == tuple(rule.key for rule in ADJUSTMENTS)


@pytest.mark.parametrize("rule", ADJUSTMENTS, ids=[rule.key for rule in ADJUSTMENTS])
@given(st.lists(st.fractions(0, 1, max_denominator=720), min_size=2, max_size=7), st.data())
def test_an_adjusted_p_never_falls_when_any_p_rises(
    rule: AdjustmentRule, family: list[Fraction], data: st.DataObject
) -> None:
    """So that all p-values at an end of their intervals give that end of every adjusted one."""
    risen = [data.draw(st.sampled_from([p, (p + 1) / 2, Fraction(1)])) for p in family]
    pairs = zip(adjusted(family, rule=rule.key), adjusted(risen, rule=rule.key), strict=True)
    assert all(before <= after for before, after in pairs)


@pytest.mark.parametrize("rule", ADJUSTMENTS, ids=[rule.key for rule in ADJUSTMENTS])
@given(st.lists(st.fractions(0, Fraction(1, 1000), max_denominator=10**6), min_size=1, max_size=7))
def test_factors_bound_what_a_rule_makes_of_a_p(rule: AdjustmentRule, family: list[Fraction]) -> None:
    """They never rise; beside p-values of 1 the largest one is met, and never less than the smallest times p is given."""
    factors = rule.factors(len(family))
    assert len(factors) == len(family)
    assert list(factors) == sorted(factors, reverse=True)
    alone = adjusted([family[0], *[1] * (len(family) - 1)], rule=rule.key)
    assert alone[0] == factors[0] * family[0]
    assert all(new >= factors[-1] * raw for raw, new in zip(family, adjusted(family, rule=rule.key), strict=True))


def test_no_p_values_are_adjusted_to_none() -> None:
    """An empty family stays empty."""
    assert adjusted([], rule="Holm") == ()


@pytest.mark.parametrize("bad", [-0.1, 1.5, float("nan")])
def test_what_is_no_p_value_is_refused(bad: float) -> None:
    """Values outside 0 to 1 are refused with their position."""
    with pytest.raises(ValueError, match="position 1"):
        adjusted([0.5, bad], rule="Holm")


def test_t_p_value_for_two_degrees_of_freedom() -> None:
    """With four rows the two-sided p-value is 1 − |r|, a closed form of Student's t with two degrees of freedom."""
    coefficient = rho(np.arange(4), np.array([0, 1, 3, 2]))
    assert t_value_p(coefficient, "two-sided") == pytest.approx(1 - 0.8, rel=1e-14)
    assert t_value_p(coefficient, "greater") == pytest.approx(0.1, rel=1e-14)
    assert t_value_p(coefficient, "less") == pytest.approx(0.9, rel=1e-14)


def test_t_p_value_at_the_ends() -> None:
    """Perfect order gives 0, no order gives 1, two rows and a constant give nothing."""
    assert t_value_p(rho(np.arange(5), np.arange(5)), "two-sided") == 0
    assert t_value_p(rho(np.array([0, 1, 2, 3]), np.array([1, 3, 0, 2])), "two-sided") == 1
    assert t_value_p(rho(np.arange(2), np.arange(2)), "two-sided") is None
    assert t_value_p(rho(np.zeros(5, dtype=np.int64), np.arange(5)), "two-sided") is None


def test_pearson_r_is_not_lost_far_from_zero() -> None:
    """Adding 10⁹ to a variable or scaling it by 10²⁰⁰ leaves 1/√2 as it is."""
    x, y = np.array([-1.0, 0.0, 1.0, 0.0]), np.array([-1.0, 1.0, 1.0, -1.0])
    for first, second in ((x, y), (x + 1e9, y), (x * 1e200, y * 1e-200), (x, y - 3e12)):
        assert pearson_r(first, second) == pytest.approx(1 / sqrt(2), rel=1e-12)


def test_pearson_r_of_a_constant_is_absent() -> None:
    """Without variation there is no coefficient."""
    assert pearson_r(np.full(4, 0.1), np.arange(4.0)) is None
    assert pearson_r(np.array([]), np.array([])) is None

"""Adjusted p-values, and the approximations that stand beside ours."""

from fractions import Fraction
from math import sqrt

import numpy as np
import pytest

from rankdocket import adjusted
from rankdocket.stats.adjustments import ADJUSTMENTS
from rankdocket.stats.comparisons import pearson_r, t_value_p
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import ADJUSTMENTS as WORDS


def test_holm_steps_down() -> None:
    """0.01 … 0.05 become 0.05, 0.08, 0.09, 0.09, 0.09 (Holm 1979; worked by hand)."""
    raw = [Fraction(percent, 100) for percent in (5, 1, 3, 2, 4)]
    assert adjusted(raw, rule="Holm") == tuple(Fraction(percent, 100) for percent in (9, 5, 9, 8, 9))
    assert adjusted(raw, rule="none") == tuple(raw)


def test_the_catalogue_has_a_rule_for_every_word() -> None:
    """Each adjustment of the vocabulary has one rule, in the same order."""
    assert tuple(rule.key for rule in ADJUSTMENTS) == WORDS


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

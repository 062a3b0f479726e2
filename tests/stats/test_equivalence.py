"""Tests of a value, a minimum effect and equivalence: printed and hand values, and the verdict about size."""

from decimal import Decimal
from fractions import Fraction
from itertools import product
from math import atanh, sqrt

import pytest
from scipy import stats

from rankdocket.stats.equivalence import (
    SIZE_VERDICTS,
    Equivalence,
    MinimumEffect,
    is_within,
    minimum_effect,
    size_verdict,
    tost_z,
    value_test,
)
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.z_scale import PERFECT, TOO_FEW, NullVariance, ZTest

HOUSE: NullVariance = "Bonett-Wright at the null"


def _effect(r: float, n: int, delta: float, variance: NullVariance = HOUSE) -> MinimumEffect:
    found = minimum_effect(r, n, delta, variance=variance)
    assert isinstance(found, MinimumEffect)
    return found


def _equivalence(r: float, n: int, delta: float, variance: NullVariance = HOUSE) -> Equivalence:
    found = tost_z(r, n, delta, variance=variance)
    assert isinstance(found, Equivalence)
    return found


def test_a_value_other_than_nought() -> None:
    """D. G. Bonett’s published example: r = 0.471 against 0.2, n = 100: Z = 3.009628, p = 0.00261568.

    With the estimate in the variance it would be 2.8838.
    """
    found = value_test(0.471, 100, 0.2, variance=HOUSE)
    assert isinstance(found, ZTest)
    assert found.z == pytest.approx(3.009628, abs=5e-7)
    assert found.p("two-sided") == pytest.approx(0.00261568, abs=5e-9)
    at_estimate = value_test(0.471, 100, 0.2, variance="Bonett-Wright at the estimate")
    assert isinstance(at_estimate, ZTest)
    assert at_estimate.z == pytest.approx(2.8838, abs=5e-5)


@pytest.mark.parametrize(("variance", "z", "p"), [(HOUSE, 2.2110, 0.013518), ("Fieller", 2.1529, 0.015664)])
def test_a_minimum_effect_on_one_side(variance: NullVariance, z: float, p: float) -> None:
    """r = 0.4, n = 50 against rho ≤ 0.1 (values by hand, with either factor)."""
    found = _effect(0.4, 50, 0.1, variance)
    assert found.above.z == pytest.approx(z, abs=5e-5)
    assert found.p("greater") == pytest.approx(p, abs=5e-7)


def test_a_minimum_effect_on_either_side_counts_both_tails() -> None:
    """0.015664 + 0.000242 = 0.015906 with factor 1.06 (by hand); the sign of the coefficient does not matter."""
    found = _effect(0.4, 50, 0.1, "Fieller")
    assert found.p("two-sided") == pytest.approx(0.015906, abs=5e-7)
    assert _effect(-0.4, 50, 0.1, "Fieller").p("two-sided") == found.p("two-sided")
    assert _effect(-0.4, 50, 0.1, "Fieller").p("less") == found.p("greater")


@pytest.mark.parametrize("r", [-0.3, -0.1, 0.0, 0.05, 0.2, 0.25])
def test_the_two_tails_are_those_of_a_shifted_normal_distribution(r: float) -> None:
    """At rho = delta, |z| is at least as large as observed with exactly this probability; it falls as |r| grows."""
    delta, n = 0.2, 60
    scale = 1 / sqrt((n - 3) / (1 + delta**2 / 2))
    at_delta = stats.norm(atanh(delta), scale)
    expected = at_delta.sf(abs(atanh(r))) + at_delta.cdf(-abs(atanh(r)))
    assert _effect(r, n, delta).p("two-sided") == pytest.approx(expected, rel=1e-12)


@pytest.mark.parametrize(("variance", "upper", "lower"), [(HOUSE, 0.016919, 0.000222), ("Fieller", 0.018690, 0.000284)])
def test_equivalence_is_the_larger_of_two_p_values(variance: NullVariance, upper: float, lower: float) -> None:
    """r = 0.05, n = 200, delta = 0.2 (values by hand, with either factor)."""
    found = _equivalence(0.05, 200, 0.2, variance)
    assert (round(found.p_upper, 6), round(found.p_lower, 6)) == (upper, lower)
    assert found.p == found.p_upper
    assert _equivalence(-0.05, 200, 0.2, variance).p == found.p


@pytest.mark.parametrize("variance", [HOUSE, "Fieller", "Fisher", "Bonett-Wright at the estimate"])
def test_equivalence_is_shown_when_the_interval_of_the_same_factor_lies_within(variance: NullVariance) -> None:
    """The interval of level 1 − 2·alpha, whatever alpha: both answers agree over many r, n and alpha."""
    outcomes = set()
    for r, n, alpha in product((-0.24, -0.1, 0.0, 0.07, 0.19), (20, 90, 400), ("0.01", "0.05", "0.1")):
        found = _equivalence(r, n, 0.25, variance)
        shown = found.p < float(alpha)
        assert is_within(*found.limits(Decimal(alpha)), 0.25) == shown
        outcomes.add(shown)
    assert outcomes == {True, False}


def test_above_and_below_delta_are_never_both_shown() -> None:
    """Over a grid of coefficients and rows, at alpha 0.05, with both outcomes met."""
    alpha = 0.05
    found = [
        (_effect(r / 20, n, 0.3).p("two-sided") <= alpha, _equivalence(r / 20, n, 0.3).p <= alpha)
        for r in range(-19, 20)
        for n in (5, 30, 500)
    ]
    assert set(found) == {(True, False), (False, True), (False, False)}


@pytest.mark.parametrize(
    ("p_above", "p_below", "p_independence", "verdict"),
    [
        ("0.01", "0.9", "0.001", "size above delta shown"),
        ("0.9", "0.01", "0.5", "size below delta shown"),
        ("0.9", "0.01", "0.001", "size below delta shown"),
        ("0.2", "0.3", "0.04", "independence rejected, size above delta not shown"),
        ("0.2", "0.3", "0.06", "undecided"),
        ("0.05", "0.9", "0.9", "size above delta shown"),
        ("0.0500000000001", "0.9", "0.05", "independence rejected, size above delta not shown"),
        (None, None, None, "undecided"),
        (None, "0.05", None, "size below delta shown"),
    ],
)
def test_the_first_verdict_that_applies_holds(
    p_above: str | None, p_below: str | None, p_independence: str | None, verdict: str
) -> None:
    """A p-value equal to alpha is enough, one that is not there shows nothing."""
    above, below, independence = (None if p is None else Fraction(p) for p in (p_above, p_below, p_independence))
    assert verdict in SIZE_VERDICTS
    assert verdict == size_verdict(p_above=above, p_below=below, p_independence=independence, alpha=Fraction(1, 20))


def test_an_interval_that_touches_delta_is_not_within() -> None:
    """The bounds themselves belong to what equivalence must exclude."""
    assert is_within(-0.19, 0.1, 0.2)
    assert not is_within(-0.2, 0.1, 0.2)
    assert not is_within(-0.1, 0.2, 0.2)


@pytest.mark.parametrize(("r", "n", "reason"), [(1.0, 30, PERFECT), (-1.0, 30, PERFECT), (0.2, 3, TOO_FEW)])
def test_no_place_on_the_z_scale_is_a_reason(r: float, n: int, reason: str) -> None:
    """Perfect order and too few rows have no test of any of the three kinds."""
    assert value_test(r, n, 0.2, variance=HOUSE) == NoAnswer(reason)
    assert minimum_effect(r, n, 0.2, variance=HOUSE) == NoAnswer(reason)
    assert tost_z(r, n, 0.2, variance=HOUSE) == NoAnswer(reason)


def test_bounds_that_are_none_are_refused() -> None:
    """delta lies between 0 and 1, a null value between −1 and 1, a coefficient from −1 to 1."""
    for delta in (0.0, 1.0, -0.2, float("nan")):
        with pytest.raises(ValueError, match="delta"):
            tost_z(0.1, 20, delta, variance=HOUSE)
        with pytest.raises(ValueError, match="delta"):
            minimum_effect(0.1, 20, delta, variance=HOUSE)
    with pytest.raises(ValueError, match="value to be tested"):
        value_test(0.1, 20, 1.0, variance=HOUSE)
    with pytest.raises(ValueError, match="between -1 and 1"):
        tost_z(1.2, 20, 0.2, variance=HOUSE)

"""Partial rank correlation: against regression residuals, by hand, and where there is none."""

from fractions import Fraction

import numpy as np
import pytest
from scipy import stats

from rankdocket.stats.comparisons import t_value_p
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.partial import PartialRho, partial_rho, partial_spearman
from rankdocket.stats.rho import rho


def _answered(found: PartialRho | NoAnswer) -> PartialRho:
    assert isinstance(found, PartialRho)
    return found


def test_three_coefficients_of_one_half_leave_one_third() -> None:
    """(½ − ½·½)/√(¾·¾) = 1/3 (by hand); three orders of five rows whose pairwise Σd² is 10 have rho = ½ each."""
    x, y, control = [1, 2, 3, 4, 5], [1, 3, 5, 2, 4], [2, 1, 5, 4, 3]
    for one, other in ((x, y), (x, control), (y, control)):
        assert rho(np.array(one), np.array(other)).decimal_text() == "0.500000000000"
    found = _answered(partial_spearman(x, y, controls=[control]))
    assert found.decimal_text() == "0.333333333333"
    assert (found.n, found.controls, found.df) == (5, 1, 2)
    assert found.t == pytest.approx((1 / 3) * (2 / (8 / 9)) ** 0.5, rel=1e-14)


@pytest.mark.parametrize("controls", [1, 2, 4])
@pytest.mark.parametrize("levels", [3, 8, 1000])
def test_the_value_is_the_correlation_of_what_regression_on_ranks_leaves(controls: int, levels: int) -> None:
    """numpy’s least squares on scipy’s midranks and scipy’s t distribution give the same value and p-values."""
    rng = np.random.default_rng([controls, levels])
    table = rng.integers(0, levels, (2 + controls, 40)) + rng.integers(0, levels, 40)
    ranks = np.array([stats.rankdata(column) for column in table])
    design = np.vstack((np.ones(40), ranks[2:])).T
    x, y = (column - design @ np.linalg.lstsq(design, column, rcond=None)[0] for column in ranks[:2])
    expected = float(x @ y / np.sqrt((x @ x) * (y @ y)))
    found = _answered(partial_rho(table[0], table[1], tuple(table[2:])))
    assert found.value == pytest.approx(expected, rel=1e-11, abs=1e-13)
    t = expected * (found.df / (1 - expected**2)) ** 0.5
    assert found.p("greater") == pytest.approx(stats.t.sf(t, 38 - controls), rel=1e-9)
    assert found.p("less") == pytest.approx(stats.t.cdf(t, 38 - controls), rel=1e-9)
    assert found.p("two-sided") == pytest.approx(2 * stats.t.sf(abs(t), 38 - controls), rel=1e-9)


def test_without_controls_it_is_rho_and_its_t_value() -> None:
    """Holding nothing fixed changes nothing."""
    rng = np.random.default_rng(3)
    x, y = rng.integers(0, 6, (2, 25))
    found, plain = _answered(partial_rho(x, y, ())), rho(x, y)
    assert (found.numerator, found.x_square, found.y_square) == (plain.numerator, plain.x_square, plain.y_square)
    assert found.plain == plain
    assert found.p("less") == t_value_p(plain, "less")


def test_the_order_of_the_controls_does_not_matter() -> None:
    """To the last digit, since everything is an integer; nor does which variable is called x."""
    rng = np.random.default_rng(4)
    x, y, *controls = rng.integers(0, 9, (6, 30))
    texts = {
        _answered(partial_rho(x, y, tuple(controls))).decimal_text(30),
        _answered(partial_rho(x, y, tuple(reversed(controls)))).decimal_text(30),
        _answered(partial_rho(y, x, tuple(controls))).decimal_text(30),
        _answered(partial_rho(x**3, y, tuple(controls))).decimal_text(30),
    }
    assert len(texts) == 1


def test_a_variable_with_itself_is_one_whatever_is_held_fixed() -> None:
    """At 1 and −1 there is no t value, and the p-value is 0 or 1."""
    rng = np.random.default_rng(5)
    x, control = rng.permutation(12), rng.permutation(12)
    same, reverse = (_answered(partial_rho(x, sign * x, (control,))) for sign in (1, -1))
    assert (same.value, same.t, same.p("greater"), same.p("less")) == (1.0, None, 0.0, 1.0)
    assert (reverse.value, reverse.t, reverse.p("two-sided")) == (-1.0, None, 0.0)


def test_a_control_is_found_out_however_close_it_comes() -> None:
    """One swap of neighbours among 2000 rows still leaves an answer; the same ranks leave none."""
    rng = np.random.default_rng(6)
    x, y, control = (rng.permutation(2000) for _ in range(3))
    swapped = control.copy()
    swapped[[np.argmin(control), np.argmax(-np.abs(control - 1))]] = (1, 0)
    assert isinstance(partial_rho(x, y, (control, swapped)), PartialRho)
    found = partial_rho(x, y, (control, 5 - 2 * control))
    assert found == NoAnswer("the ranks of a variable held fixed follow from those of the variables before it")


@pytest.mark.parametrize(
    ("x", "y", "controls", "reason"),
    [
        ([1, 2, 3, 4], [1, 1, 1, 1], [[1, 2, 4, 3]], "a variable does not vary"),
        ([1, 2, 3, 4, 5], [2, 1, 3, 5, 4], [[1, 3, 2, 4, 5], [7, 7, 7, 7, 7]], "a variable held fixed does not vary"),
        (
            [1, 2, 3],
            [2, 1, 3],
            [[1, 3, 2]],
            "the variables held fixed leave no degree of freedom in so few complete rows",
        ),
        (
            [1, 2, 3, 4, 5],
            [2, 1, 3, 5, 4],
            [[10, 20, 30, 40, 50]],
            "the ranks of a variable follow entirely from those of the variables held fixed",
        ),
    ],
)
def test_where_there_is_no_answer_there_is_a_reason(
    x: list[int], y: list[int], controls: list[list[int]], reason: str
) -> None:
    """Constant variables, too few rows and variables that make each other up have no partial correlation."""
    assert partial_spearman(x, y, controls=controls) == NoAnswer(reason)


def test_what_is_no_number_is_refused() -> None:
    """Columns of different length and values that are not finite are the caller’s error."""
    with pytest.raises(ValueError, match="differ in length: 2, 3"):
        partial_spearman([1, 2, 3], [1, 2, 3], controls=[[1, 2]])
    with pytest.raises(ValueError, match="position 1"):
        partial_spearman([1, float("nan"), 3], [1, 2, 3], controls=[])
    assert _answered(partial_spearman([0.1, 0.3, Fraction(1, 5)], [1, 3, 2], controls=[])).value == 1

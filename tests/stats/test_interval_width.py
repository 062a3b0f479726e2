"""Rows for an interval of a wanted width."""

from math import atanh, sqrt, tanh

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.document.prose import lint
from rankdocket.references import REFERENCES
from rankdocket.stats.interval_width import INTERVAL_WIDTH, rows_for_width, width_at
from rankdocket.stats.intervals.bonett_wright import bonett_wright_limits

levels = st.sampled_from([0.8, 0.9, 0.95, 0.99])


def test_a_case_computed_elsewhere() -> None:
    """At 0.5, as wide on the z scale as 0.4 to 0.6, the 95 % interval needs 241.01 rows, so 242 (methods 3.23)."""
    half = (atanh(0.6) - atanh(0.4)) / 2
    width = tanh(atanh(0.5) + half) - tanh(atanh(0.5) - half)
    needed = rows_for_width(0.5, width, level=0.95)
    assert needed.raw == pytest.approx(241.01, abs=0.005)
    assert needed.rows == 242


def test_the_width_is_that_of_a_case_computed_elsewhere() -> None:
    """r 0.5 with 20 rows: 0.0450789963822 to 0.7831644163301 (reference case meth_ci_bonett_wright_01)."""
    assert width_at(20, 0.5, level=0.95) == pytest.approx(0.783164416330118609 - 0.045078996382231980, rel=1e-12)


@given(st.floats(-0.99, 0.99), st.floats(0.01, 1.9), levels)
def test_rows_and_width_answer_each_other(rho: float, width: float, level: float) -> None:
    """The rows asked for give an interval no wider than wanted, and one fewer a wider one."""
    rows = rows_for_width(rho, width, level=level).rows
    assert width_at(rows, rho, level=level) <= width * (1 + 1e-9)
    if rows > 4:
        assert width_at(rows - 1, rho, level=level) > width * (1 - 1e-9)


@given(st.floats(-0.99, 0.99), st.integers(4, 10_000), levels)
def test_the_formula_undoes_the_limits(rho: float, n: int, level: float) -> None:
    """Asked for the width of n rows, n is the answer, for either sign of rho."""
    width = width_at(n, rho, level=level)
    if width < 1.999:
        assert rows_for_width(rho, width, level=level).raw == pytest.approx(n, rel=1e-6)
        assert rows_for_width(-rho, width, level=level).raw == pytest.approx(n, rel=1e-6)


def test_values_out_of_range_are_refused() -> None:
    """rho at an end, no width, the whole scale, and a level that is none are refused."""
    with pytest.raises(ValueError, match="rho must lie"):
        rows_for_width(1.0, 0.2, level=0.95)
    for width in (0.0, 2.0, float("nan")):
        with pytest.raises(ValueError, match="width must lie"):
            rows_for_width(0.5, width, level=0.95)
    with pytest.raises(ValueError, match="level must lie"):
        rows_for_width(0.5, 0.2, level=1.0)
    with pytest.raises(ValueError, match="at least 4 rows"):
        width_at(3, 0.5, level=0.95)


def test_the_rule_cites_known_works_and_keeps_to_the_wording_rules() -> None:
    """What a plan says of its formula has its works in the bibliography."""
    assert set(INTERVAL_WIDTH.cites) <= set(REFERENCES)
    assert lint(INTERVAL_WIDTH.sentence) == ()


@pytest.mark.simulation
@pytest.mark.parametrize(("correlation", "n"), [(0.0, 50), (0.5, 50), (0.5, 200), (0.8, 50)])
def test_the_mean_width_is_near_the_planned_one_by_simulation(correlation: float, n: int) -> None:
    """Over 4,000 bivariate normal samples the mean width is within 4 % of the width at the mean coefficient."""
    rng = np.random.default_rng(17)
    x = rng.standard_normal((4_000, n))
    y = correlation * x + sqrt(1 - correlation**2) * rng.standard_normal(x.shape)
    a, b = (2.0 * np.argsort(np.argsort(each, axis=1), axis=1) - (n - 1) for each in (x, y))
    r = np.sum(a * b, axis=1) / np.sum(a * a, axis=1)
    limits = [bonett_wright_limits(float(each), n, level=0.95) for each in r]
    mean = float(np.mean([each.high - each.low for each in limits]))
    assert mean == pytest.approx(width_at(n, float(np.mean(r)), level=0.95), rel=0.04)

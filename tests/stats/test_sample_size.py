"""Rows, power and the smallest rho of a plan."""

from decimal import Decimal
from fractions import Fraction
from math import pi, sin, sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket import critical_value_approximate
from rankdocket.document.prose import lint
from rankdocket.references import REFERENCES
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.sample_size import SAMPLE_SIZE, PlannedTest, power_at, sample_size, smallest_rho

PLAIN = PlannedTest(0.05)

rhos = st.floats(0.02, 0.98)
powers = st.floats(0.5, 0.999)
plans = st.builds(
    PlannedTest,
    st.sampled_from([0.1, 0.05, 0.01, 0.001]),
    st.sampled_from(["one-sided", "two-sided"]),
    st.integers(1, 50),
)


def _power(n: int, rho: float, planned: PlannedTest) -> float:
    found = power_at(n, rho, planned)
    assert isinstance(found, float)
    return found


ROWS_PRINTED = [
    (0.2, 0.8, 198, 196),
    (0.2, 0.9, 264, 261),
    (0.3, 0.8, 89, 87),
    (0.3, 0.9, 118, 115),
    (0.4, 0.8, 51, 48),
    (0.4, 0.9, 67, 64),
    (0.5, 0.8, 33, 30),
    (0.5, 0.9, 43, 40),
    (0.6, 0.8, 23, 21),
    (0.6, 0.9, 29, 27),
    (0.7, 0.8, 16, 15),
    (0.7, 0.9, 21, 19),
    (0.8, 0.8, 12, 11),
    (0.8, 0.9, 15, 13),
]
"""rho, power, rows by one variance (Bonett & Wright), rows by two: computed apart from this program (methods B8)."""


@pytest.mark.parametrize(("rho", "power", "one_variance", "two_variances"), ROWS_PRINTED)
def test_rows_agree_with_a_table_computed_elsewhere(
    rho: float, power: float, one_variance: int, two_variances: int
) -> None:
    """Both forms, two-sided at 0.05, give the rows of the table, for rho of either sign."""
    for signed in (rho, -rho):
        found = sample_size(signed, power, PLAIN)
        assert (found.bonett_wright.rows, found.two_variances.rows) == (one_variance, two_variances)
        assert found.rows == two_variances


def test_single_values_computed_elsewhere() -> None:
    """30 rows find rho 0.49976 with power 0.8; rho 0.3 needs 86.03 rows, by 1.06 89.84; 20 rows find it in 25 % (methods 3.23)."""
    assert smallest_rho(30, 0.8, PLAIN) == pytest.approx(0.49976, abs=5e-6)
    found = sample_size(0.3, 0.8, PLAIN)
    assert found.two_variances.raw == pytest.approx(86.03, abs=0.005)
    assert found.fieller.raw == pytest.approx(89.84, abs=0.005)
    assert _power(20, 0.3, PLAIN) == pytest.approx(0.25, abs=0.005)


def test_several_questions_share_alpha() -> None:
    """Five questions at 0.05 are planned like one at 0.01, and two sides like one side at half of it, to the last bit."""
    five = sample_size(0.4, 0.8, PlannedTest(0.05, "two-sided", 5))
    assert five == sample_size(0.4, 0.8, PlannedTest(Decimal("0.01")))
    assert five == sample_size(0.4, 0.8, PlannedTest(Fraction(1, 200), "one-sided"))
    assert five.two_variances.rows == 70
    # 70: reference case meth_n_r4_p8_a01_2s.


@given(rhos, powers, plans)
def test_the_three_questions_answer_each_other(rho: float, power: float, planned: PlannedTest) -> None:
    """The rows asked for have the power, one fewer has not, and the smallest rho with those rows is no larger."""
    needed = sample_size(rho, power, planned)
    rows = needed.rows
    assert _power(rows, rho, planned) >= power - 1e-9
    smallest = smallest_rho(rows, power, planned)
    assert isinstance(smallest, float)
    assert smallest <= rho + 1e-9
    assert _power(rows, smallest, planned) == pytest.approx(power, abs=1e-9)
    if needed.two_variances.rows > needed.fewest_attainable:
        assert _power(rows - 1, rho, planned) < power + 1e-9
        shortfall = smallest_rho(rows - 1, power, planned)
        assert isinstance(shortfall, float)
        assert shortfall > rho - 1e-9


@given(rhos, powers, plans)
def test_more_is_asked_for_more(rho: float, power: float, planned: PlannedTest) -> None:
    """More power, more questions, a smaller rho and the larger variance each ask for at least as many rows."""
    needed = sample_size(rho, power, planned)
    more_questions = PlannedTest(planned.alpha, planned.sidedness, planned.questions + 1)
    assert needed.two_variances.raw <= sample_size(rho, min(0.9999, power + 0.0005), planned).two_variances.raw
    assert needed.two_variances.raw < sample_size(rho, power, more_questions).two_variances.raw
    assert needed.two_variances.raw < sample_size(rho * 0.99, power, planned).two_variances.raw
    assert needed.fisher.raw <= needed.two_variances.raw <= needed.bonett_wright.raw
    assert needed.fisher.raw < needed.fieller.raw


def test_rows_that_could_never_be_enough_are_not_planned() -> None:
    """With twenty questions perfect order needs seven rows, 2/7! < 0.05/20 < 2/6!; a formula asking for fewer gives way."""
    planned = PlannedTest(0.05, "two-sided", 20)
    found = sample_size(0.999, 0.8, planned)
    assert found.two_variances.rows < found.fewest_attainable == found.rows == 7
    for nothing in (power_at(6, 0.999, planned), smallest_rho(6, 0.8, planned)):
        assert isinstance(nothing, NoAnswer)
        assert "perfect order" in nothing.reason
    assert _power(7, 0.999, planned) > 0.99


def test_the_fewest_rows_reach_alpha_exactly() -> None:
    """Equality counts: one-sided at 1/24 four rows suffice, just below it five are needed."""
    assert PlannedTest(Fraction(1, 24), "one-sided").fewest_rows == 4
    assert PlannedTest(Fraction(1, 24) - Fraction(1, 10**9), "one-sided").fewest_rows == 5
    assert PlannedTest(Fraction(1, 12), "two-sided").fewest_rows == 4


@pytest.mark.parametrize("rho", [0.0, 1.0, -1.0, 1.5, float("nan")])
def test_a_rho_that_cannot_be_planned_for_is_refused(rho: float) -> None:
    """0, ±1, values beyond and no number at all are out of range."""
    with pytest.raises(ValueError, match="rho must lie"):
        sample_size(rho, 0.8, PLAIN)
    with pytest.raises(ValueError, match="rho must lie"):
        power_at(20, rho, PLAIN)


@pytest.mark.parametrize("power", [0.49, 1.0, -1.0, float("nan")])
def test_a_power_that_cannot_be_planned_for_is_refused(power: float) -> None:
    """Less than one half, 1 and no number are out of range."""
    with pytest.raises(ValueError, match="power must be"):
        sample_size(0.3, power, PLAIN)
    with pytest.raises(ValueError, match="power must be"):
        smallest_rho(20, power, PLAIN)


def test_other_values_out_of_range_are_refused() -> None:
    """Three rows, no question, and an alpha that is no level are refused."""
    with pytest.raises(ValueError, match="at least 4 rows, not 3"):
        power_at(3, 0.5, PLAIN)
    with pytest.raises(ValueError, match="at least 4 rows, not 3"):
        smallest_rho(3, 0.8, PLAIN)
    with pytest.raises(ValueError, match="at least one question"):
        PlannedTest(0.05, "two-sided", 0)
    for alpha in (0.0, 0.6, -0.05):
        with pytest.raises(ValueError, match="alpha must lie"):
            PlannedTest(alpha)
    with pytest.raises(ValueError, match="nan"):
        PlannedTest(float("nan"))


def test_the_rule_cites_known_works_and_keeps_to_the_wording_rules() -> None:
    """What a plan says of its formula has its works in the bibliography."""
    assert set(SAMPLE_SIZE.cites) <= set(REFERENCES)
    assert lint(SAMPLE_SIZE.sentence) == ()
    assert not any(character.isdigit() for character in SAMPLE_SIZE.sentence)


SAMPLES = 40_000


def _simulated_power(rho: float, n: int, rng: np.random.Generator) -> float:
    """Return how often rho has an exact two-sided p of 0.05 or less on the side of the truth, bivariate normal."""
    slope = 2 * sin(pi * rho / 6)
    critical = critical_value_approximate(n, 0.05, sidedness="two-sided").numerator
    assert critical is not None
    found = 0
    for _ in range(10):
        x = rng.standard_normal((SAMPLES // 10, n))
        y = slope * x + sqrt(1 - slope * slope) * rng.standard_normal(x.shape)
        a, b = (2 * np.argsort(np.argsort(each, axis=1), axis=1) - (n - 1) for each in (x, y))
        found += int(np.count_nonzero(np.sum(a * b, axis=1) >= critical))
    return found / SAMPLES


@pytest.mark.simulation
@pytest.mark.parametrize(
    ("rho", "target", "n", "printed"),
    [
        (0.2, 0.8, 196, 0.804),
        (0.3, 0.8, 87, 0.807),
        (0.3, 0.9, 115, 0.903),
        (0.5, 0.8, 30, 0.807),
        (0.5, 0.9, 40, 0.911),
        (0.6, 0.8, 21, 0.823),
        (0.8, 0.9, 13, 0.915),
    ],
)
def test_the_power_planned_is_there_by_simulation(rho: float, target: float, n: int, printed: float) -> None:
    """Simulated power at the rows of the formula agrees with the printed one, is not below the target, and three rows
    fewer miss it; four standard errors of 40,000 samples each way (methods B8: never below, within two rows).
    """
    assert sample_size(rho, target, PLAIN).rows == n
    rng = np.random.default_rng(int(1000 * rho) + n)
    error = sqrt(target * (1 - target) / SAMPLES)
    power = _simulated_power(rho, n, rng)
    assert abs(power - printed) < 4 * sqrt(2) * error + 0.0005
    assert power > target - 4 * error
    assert _power(n, rho, PLAIN) - 4 * error < power < _power(n, rho, PLAIN) + 0.03
    if n < 100:
        assert _simulated_power(rho, n - 3, rng) < target + 4 * error

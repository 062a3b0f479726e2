"""What expected ties leave of rho."""

from collections.abc import Sequence
from fractions import Fraction
from math import asin, pi, sin, sqrt

import numpy as np
import numpy.typing as npt
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.special import ndtri
from scipy.stats import multivariate_normal

from rankdocket.document.prose import lint
from rankdocket.references import REFERENCES
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes, doubled_midranks
from rankdocket.stats.sample_size import PlannedTest, power_at, sample_size
from rankdocket.stats.tied_target import TIED_TARGET, rho_under_ties

FIVE_POINTS = (1, 2, 4, 2, 1)

cuts = st.lists(st.integers(1, 20), min_size=2, max_size=6)


@pytest.mark.parametrize("rho", [-0.999, -0.5, 0.0, 0.2, 0.8, 0.999])
def test_without_ties_rho_stays(rho: float) -> None:
    """Two uncut variables keep the rho they have."""
    assert rho_under_ties(rho, None, None) == pytest.approx(rho, rel=1e-12, abs=1e-15)


@pytest.mark.parametrize("rho", [-0.9, 0.1, 0.5, 0.95])
def test_two_halves_have_the_coefficient_of_a_fourfold_table(rho: float) -> None:
    """Both cut at the median, rho is (2/π) asin of the normal correlation (Sheppard 1899)."""
    correlation = 2 * sin(pi * rho / 6)
    assert rho_under_ties(rho, [1, 1], [1, 1]) == pytest.approx(2 / pi * asin(correlation), rel=1e-11)


def _by_cells(rho: float, x_shares: Sequence[int], y_shares: Sequence[int]) -> float:
    """Return rho between midranks from the probability of every cell, by another library."""
    correlation = 2 * sin(pi * rho / 6)
    normal = multivariate_normal([0, 0], [[1, correlation], [correlation, 1]])
    x_ends, y_ends = (np.cumsum([0, *shares]) / sum(shares) for shares in (x_shares, y_shares))
    below = np.zeros((len(x_ends), len(y_ends)))
    for row, h in enumerate(x_ends):
        for column, k in enumerate(y_ends):
            if h == 1 or k == 1 or h == 0 or k == 0:
                below[row, column] = h * k
            else:
                below[row, column] = normal.cdf([ndtri(h), ndtri(k)])
    cells = np.diff(np.diff(below, axis=0), axis=1)
    x, y = (ends[:-1] + np.diff(ends) / 2 - 0.5 for ends in (x_ends, y_ends))
    x_square, y_square = (float(np.sum(np.diff(ends) * scores**2)) for ends, scores in ((x_ends, x), (y_ends, y)))
    return float(x @ cells @ y) / sqrt(x_square * y_square)


@pytest.mark.parametrize("rho", [-0.95, -0.3, 0.2, 0.6, 0.9])
@pytest.mark.parametrize(
    ("x_shares", "y_shares"), [(FIVE_POINTS, FIVE_POINTS), ((1, 9), (3, 2, 1)), ((1, 1, 1, 7), (2, 1, 1, 1, 1, 1))]
)
def test_cells_of_the_normal_law_give_the_same(rho: float, x_shares: Sequence[int], y_shares: Sequence[int]) -> None:
    """The sum over steps agrees with the sum over cells, whose probabilities scipy.stats computes."""
    assert rho_under_ties(rho, x_shares, y_shares) == pytest.approx(_by_cells(rho, x_shares, y_shares), abs=2e-6)


def test_many_values_are_as_good_as_no_ties() -> None:
    """A hundred equally frequent values leave rho within a thousandth of itself, from either side."""
    many = [1] * 100
    assert rho_under_ties(0.5, many, many) == pytest.approx(0.5, abs=1e-3)
    assert rho_under_ties(0.5, many, [1, 5]) == pytest.approx(rho_under_ties(0.5, None, [1, 5]), abs=1e-3)


@settings(max_examples=50, deadline=None)
@given(st.floats(0.01, 0.97), cuts, cuts)
def test_turning_a_variable_round_turns_the_sign(rho: float, x_shares: list[int], y_shares: list[int]) -> None:
    """Exchanging the variables changes nothing; reversing one and the sign of rho changes the sign; 0 < result < 1."""
    found = rho_under_ties(rho, x_shares, y_shares)
    assert 0 < found < 1
    assert rho_under_ties(rho, y_shares, x_shares) == pytest.approx(found, rel=1e-9)
    assert rho_under_ties(-rho, x_shares[::-1], y_shares) == pytest.approx(-found, rel=1e-9)


def test_shares_and_counts_mean_the_same() -> None:
    """Only the ratios matter, and decimals are read as written."""
    assert rho_under_ties(0.4, [0.1, 0.2, 0.4, 0.2, 0.1], None) == rho_under_ties(0.4, FIVE_POINTS, None)
    assert rho_under_ties(0.4, [Fraction(1, 3), Fraction(2, 3)], None) == rho_under_ties(0.4, [1, 2], None)


def test_values_out_of_range_are_refused() -> None:
    """rho at an end, one value only, and a share of 0 or less are refused."""
    with pytest.raises(ValueError, match="rho must lie"):
        rho_under_ties(1.0, None, None)
    for shares in ([], [1], [1, 0], [2, -1]):
        with pytest.raises(ValueError, match="two or more numbers above 0"):
            rho_under_ties(0.5, shares, None)


def test_the_rule_cites_known_works_and_keeps_to_the_wording_rules() -> None:
    """What a plan says of expected ties has its works in the bibliography."""
    assert set(TIED_TARGET.cites) <= set(REFERENCES)
    assert lint(TIED_TARGET.sentence) == ()


SAMPLES = 20_000


def _cut(values: npt.NDArray[np.float64], shares: Sequence[int] | None) -> Codes:
    """Return codes of the same shape: places on the expected scale, or the order itself."""
    if shares is None:
        return np.argsort(np.argsort(values, axis=1), axis=1)
    return np.searchsorted(ndtri(np.cumsum(shares)[:-1] / sum(shares)), values).astype(np.int64)


@pytest.mark.simulation
@pytest.mark.parametrize(
    ("rho", "x_shares", "y_shares"),
    [(0.4, FIVE_POINTS, None), (0.5, FIVE_POINTS, FIVE_POINTS), (0.4, (1, 1), FIVE_POINTS), (0.5, (3, 1), (1, 1))],
)
def test_rows_planned_for_ties_have_the_power_by_simulation(
    rho: float, x_shares: Sequence[int], y_shares: Sequence[int] | None
) -> None:
    """At the rows planned with the reduced rho the power is within three hundredths of 0.8, in 20,000 samples.

    The level is taken where the normal law has it for the coefficient times √(n − 1), which is its exact variance for
    any ties.
    """
    planned = PlannedTest(0.05)
    reduced = rho_under_ties(rho, x_shares, y_shares)
    n = sample_size(reduced, 0.8, planned).rows
    rng = np.random.default_rng(int(100 * rho) + n)
    correlation = 2 * sin(pi * rho / 6)
    x = rng.standard_normal((SAMPLES, n))
    y = correlation * x + sqrt(1 - correlation**2) * rng.standard_normal(x.shape)
    found = defined = 0
    for one, other in zip(_cut(x, x_shares), _cut(y, y_shares), strict=True):
        a, b = (doubled_midranks(each) - (n + 1) for each in (one, other))
        square = float(a @ a) * float(b @ b)
        if square > 0:
            defined += 1
            found += float(a @ b) / sqrt(square) * sqrt(n - 1) >= planned.z
    assert defined > SAMPLES * 0.999
    power = power_at(n, reduced, planned)
    assert not isinstance(power, NoAnswer)
    assert found / SAMPLES == pytest.approx(power, abs=0.03)

"""What each row does to a coefficient: against plain counting over all pairs of rows, and against ranking anew."""

from math import atanh

import numpy as np
import pytest
from scipy import stats

from rankdocket.errors import ComputeError
from rankdocket.stats.influence import (
    freedom_of,
    influence_variance,
    is_perfect,
    rho_influence,
    rho_without_each,
    tau_influence,
    tau_without_each,
    z_jackknife_variance,
)
from rankdocket.stats.joint_counts import concordance_of_rows, counts_below, standing
from rankdocket.stats.ranks import centred_ranks
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b


def _pair(kind: str, n: int, seed: int) -> tuple[np.ndarray, np.ndarray]:
    """Two related variables with ties of one kind, as whole numbers."""
    rng = np.random.default_rng(seed)
    x, y = (rng.integers(0, 10 * n, n) for _ in range(2))
    y = y + x
    match kind:
        case "few ties":
            return x, y
        case "no ties":
            return np.argsort(np.argsort(x, kind="stable")), np.argsort(np.argsort(y, kind="stable"))
        case "five levels":
            return x // (2 * n), y // (4 * n)
        case "one tied":
            return np.arange(n), y // (4 * n)
        case "tied at the bottom":
            return np.maximum(x, 3 * n), np.maximum(y, 6 * n)
        case _:
            return (x > 3 * n).astype(np.int64), y


KINDS = ("no ties", "few ties", "five levels", "one tied", "tied at the bottom", "two-valued")


def _signs(codes: np.ndarray) -> np.ndarray:
    return np.sign(codes[:, np.newaxis] - codes[np.newaxis, :])


@pytest.mark.parametrize("kind", KINDS)
def test_coefficients_without_each_row_are_those_of_the_rows_that_remain(kind: str) -> None:
    """The integers of rho and of tau-b without a row are those of the shorter columns, ranked anew."""
    for n in (4, 5, 9, 26):
        x, y = _pair(kind, n, n)
        of_rho, of_tau = rho_without_each(x, y), tau_without_each(x, y)
        for row in range(n):
            for found, whole in ((of_rho, rho), (of_tau, tau_b)):
                alone = whole(np.delete(x, row), np.delete(y, row))
                integers = (found.numerator[row], found.x_square[row], found.y_square[row])
                assert integers == (alone.numerator, alone.x_square, alone.y_square)


@pytest.mark.parametrize("kind", KINDS)
def test_sums_equal_those_over_all_pairs_of_rows(kind: str) -> None:
    """With 400 rows, concordance and sums without each row equal the plain n² forms, in integers."""
    x, y = _pair(kind, 400, 7)
    s, t, a, b = _signs(x), _signs(y), centred_ranks(x), centred_ranks(y)
    assert np.array_equal(concordance_of_rows(standing(x), standing(y)), (s * t).sum(axis=1))
    without = (a[np.newaxis, :] + s, b[np.newaxis, :] + t)
    off = 1 - np.eye(400, dtype=np.int64)
    found = rho_without_each(x, y)
    assert np.array_equal(found.numerator, (without[0] * without[1] * off).sum(axis=1))
    assert np.array_equal(found.x_square, (without[0] ** 2 * off).sum(axis=1))
    assert np.array_equal(found.y_square, (without[1] ** 2 * off).sum(axis=1))


@pytest.mark.parametrize("kind", KINDS)
def test_influence_values_of_rho_equal_the_plain_form(kind: str) -> None:
    """ψ from mid-distribution ranks F, G and h(a, b) = 1{a<b} + ½·1{a=b} over all pairs agrees to 1e-12."""
    x, y = _pair(kind, 300, 8)
    n = len(x)
    h, k = ((1 - _signs(codes)) / 2 for codes in (x, y))
    f, g = h.mean(axis=0), k.mean(axis=0)

    def of(one: np.ndarray, other: np.ndarray, steps: np.ndarray, other_steps: np.ndarray) -> np.ndarray:
        one, other = one - one.mean(), other - other.mean()
        return one * other + steps @ other / n + other_steps @ one / n - 3 * np.mean(one * other)

    vx, vy, covariance = np.var(f), np.var(g), np.mean((f - 0.5) * (g - 0.5))
    r = covariance / np.sqrt(vx * vy)
    plain = of(f, g, h, k) / np.sqrt(vx * vy) - r / 2 * (of(f, f, h, h) / vx + of(g, g, k, k) / vy)
    assert rho_influence(x, y) == pytest.approx(plain, abs=1e-12)


def _weighted_rho(x: np.ndarray, y: np.ndarray, weights: np.ndarray) -> float:
    f, g = (((1 - _signs(codes)) / 2).T @ weights for codes in (x, y))
    f, g = f - weights @ f, g - weights @ g
    return float(weights @ (f * g) / np.sqrt((weights @ f**2) * (weights @ g**2)))


def _weighted_tau(x: np.ndarray, y: np.ndarray, weights: np.ndarray) -> float:
    s, t = _signs(x), _signs(y)
    return float(
        weights @ (s * t) @ weights / np.sqrt((weights @ np.abs(s) @ weights) * (weights @ np.abs(t) @ weights))
    )


@pytest.mark.parametrize("kind", KINDS)
def test_influence_values_are_derivatives(kind: str) -> None:
    """Moving a little weight onto one row changes the coefficient at the rate of its influence value."""
    x, y = _pair(kind, 15, 3)
    step = 1e-5
    for weighted, influence in ((_weighted_rho, rho_influence(x, y)), (_weighted_tau, tau_influence(x, y))):
        assert influence.sum() == pytest.approx(0, abs=1e-12)
        for row in range(15):
            onto = np.zeros(15)
            onto[row] = 1
            even = np.full(15, 1 / 15)
            up, down = (weighted(x, y, (1 - e) * even + e * onto) for e in (step, -step))
            assert influence[row] == pytest.approx((up - down) / (2 * step), abs=1e-7)


@pytest.mark.parametrize("sign", [1, -1])
def test_in_perfect_order_every_influence_value_is_exactly_zero(sign: int) -> None:
    """Also with ties, and for |rho| = 1 only."""
    x = np.array([0, 0, 1, 2, 2, 2, 3, 4, 4, 7])
    assert not rho_influence(x, sign * x).any()
    assert is_perfect(rho(x, sign * x))
    assert rho_influence(x, sign * np.arange(10)).any()
    assert not is_perfect(rho(x, sign * np.arange(10)))


def test_the_jackknife_on_z_agrees_with_ranking_anew() -> None:
    """(n − 1)/n · Σ(z₍ᵢ₎ − mean)² with each coefficient from scipy.stats on the rows that remain, to 1e-12."""
    x, y = _pair("five levels", 20, 5)
    z = [atanh(stats.spearmanr(np.delete(x, row), np.delete(y, row)).statistic) for row in range(20)]
    variance = 19 / 20 * sum((each - sum(z) / 20) ** 2 for each in z)
    assert z_jackknife_variance(rho_without_each(x, y), 0.999) == pytest.approx(variance, rel=1e-12)
    z = [atanh(stats.kendalltau(np.delete(x, row), np.delete(y, row)).statistic) for row in range(20)]
    variance = 19 / 20 * sum((each - sum(z) / 20) ** 2 for each in z)
    assert z_jackknife_variance(tau_without_each(x, y), 0.999) == pytest.approx(variance, rel=1e-12)


def test_an_adjacent_swap_among_ten_rows_has_the_measured_parts() -> None:
    """Variances 0.17506193674862 and 5.2892561983e-4, kurtosis 3.25: measured by an independent prototype."""
    x = np.arange(10)
    y = np.array([1, 0, *range(2, 10)])
    assert z_jackknife_variance(rho_without_each(x, y), 1 - 6 / (9 * 80)) == pytest.approx(0.17506193674862, rel=1e-12)
    assert influence_variance(rho_influence(x, y)) == pytest.approx(5.289256198347e-4, rel=1e-12)
    assert freedom_of(rho_influence(x, y)) == pytest.approx(20 / 2.25, rel=1e-12)


def test_without_a_lone_row_there_is_no_jackknife() -> None:
    """One row that carries all variation of a variable leaves a coefficient undefined."""
    x, y = np.array([0, 0, 0, 0, 1]), np.arange(5)
    found = rho_without_each(x, y)
    assert found.is_defined.tolist() == [True, True, True, True, False]
    assert z_jackknife_variance(found, 0.9) is None
    assert z_jackknife_variance(tau_without_each(x, y), 0.9) is None
    with pytest.raises(ComputeError, match="no coefficient"):
        _ = found.values


def test_a_row_on_top_moves_a_coefficient_of_nought() -> None:
    """Nine rows with Σd² = 120 (rho = 0) and a joint maximum: rho = 1 − 720/990, and 0 without it (by hand)."""
    x = np.arange(1, 11)
    y = np.array([8, 6, 1, 4, 2, 9, 5, 3, 7, 10])
    assert int(((x - y) ** 2).sum()) == 120
    assert rho(x, y).value == pytest.approx(1 - 720 / 990, rel=1e-14)
    assert rho_without_each(x, y).values[9] == 0


def test_degrees_of_freedom_have_bounds() -> None:
    """One value that outweighs all leaves 3, no value at all n, values of one size no end (2n/(k − 1))."""
    assert freedom_of(np.array([1.0, *[0.0] * 49])) == 3
    assert freedom_of(np.zeros(8)) == 8
    assert freedom_of(np.array([1.0, -1.0, 1.0, -1.0])) == float("inf")


def test_counting_below_a_limit_among_the_first() -> None:
    """Counts agree with a plain count for every length and limit, powers of two and repeated values among them."""
    rng = np.random.default_rng(2)
    for n in (1, 2, 3, 8, 13):
        values = rng.integers(0, n, n)
        lengths, limits = (grid.ravel() for grid in np.meshgrid(np.arange(n + 1), np.arange(n + 1)))
        plain = [int(np.sum(values[:length] < limit)) for length, limit in zip(lengths, limits, strict=True)]
        assert counts_below(values, lengths, limits).tolist() == plain


@pytest.mark.parametrize("kind", KINDS)
def test_one_hundred_thousand_rows_keep_their_sums(kind: str) -> None:
    """Concordance of rows adds up to that of pairs, counted otherwise, and influence values to 0."""
    x, y = _pair(kind, 100_000, 1)
    assert int(concordance_of_rows(standing(x), standing(y)).sum()) == 2 * tau_b(x, y).numerator
    assert np.abs(rho_influence(x, y).sum()) < 1e-8
    without = rho_without_each(x, y)
    alone = rho(x[1:], y[1:])
    assert (without.numerator[0], without.x_square[0], without.y_square[0]) == (
        alone.numerator,
        alone.x_square,
        alone.y_square,
    )

"""How far an association that is built into two variables reaches, simulated."""

from collections.abc import Callable
from math import asin, pi, sqrt

import numpy as np
import numpy.typing as npt
import pytest

from rankdocket.stats.built_in import CHANGE_AGAINST_BASELINE, SHARED_DENOMINATOR, SPREAD, BuiltInExample

Columns = npt.NDArray[np.float64]
SAMPLES = 20_000
SEED = 417


def ratios(quantities: Columns) -> tuple[Columns, Columns]:
    """Return x/z and y/z."""
    x, y, z = quantities
    return x / z, y / z


def change(quantities: Columns) -> tuple[Columns, Columns]:
    """Return the baseline x and the change y − x."""
    x, y, _ = quantities
    return x, y - x


@pytest.mark.simulation
@pytest.mark.parametrize(
    ("example", "made"), [(SHARED_DENOMINATOR, ratios), (CHANGE_AGAINST_BASELINE, change)], ids=["ratios", "change"]
)
def test_the_example_is_the_mean_rho_of_quantities_without_any_association(
    example: BuiltInExample, made: Callable[[Columns], tuple[Columns, Columns]]
) -> None:
    """Within the two decimals it is printed with and two Monte Carlo errors."""
    drawn = np.random.default_rng(SEED).standard_normal((3, SAMPLES, example.rows))
    x, y = made(1 + float(SPREAD) * drawn)
    x_ranks, y_ranks = (column.argsort(axis=1).argsort(axis=1) - (example.rows - 1) / 2 for column in (x, y))
    rhos = (x_ranks * y_ranks).sum(axis=1) / (x_ranks**2).sum(axis=1)
    error = rhos.std() / sqrt(SAMPLES)
    assert abs(rhos.mean() - float(example.mean_rho)) <= 0.005 + 2 * error


def test_the_change_against_its_baseline_has_the_mean_rho_of_a_normal_pair() -> None:
    """Pearson of x and y − x is −1/√2; the mean rho of n normal pairs: Moran 1948, Biometrika 35: 203."""
    n, r = CHANGE_AGAINST_BASELINE.rows, -1 / sqrt(2)
    mean = 6 / (pi * (n + 1)) * (asin(r) + (n - 2) * asin(r / 2))
    assert round(mean, 2) == float(CHANGE_AGAINST_BASELINE.mean_rho)

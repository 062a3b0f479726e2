"""Coefficients without each of many sets of rows, against scipy on the rows that remain."""

from itertools import combinations

import numpy as np
import pytest
from scipy import stats

from rankdocket.stats.without_sets import coefficient_at, coefficients_without
from rankdocket.vocabulary import CoefficientName

OUTSIDE = {"Spearman rho": stats.spearmanr, "Kendall tau-b": stats.kendalltau}


@pytest.mark.parametrize("name", OUTSIDE)
@pytest.mark.parametrize("levels", [3, 40])
@pytest.mark.parametrize("size", [1, 2, 3])
def test_each_coefficient_is_that_of_the_rows_that_remain(name: CoefficientName, levels: int, size: int) -> None:
    """Ranked anew, ties and all."""
    rng = np.random.default_rng(levels)
    x, y = rng.integers(0, levels, (2, 9))
    sets = np.array(list(combinations(range(9), size)))
    found = coefficients_without(name, x, y, sets)
    for place, rows in enumerate(sets):
        left = coefficient_at(found, place, name, 9 - size)
        x_left, y_left = np.delete(x, rows), np.delete(y, rows)
        if min(len(set(x_left)), len(set(y_left))) < 2:
            assert not left.is_defined
        else:
            assert left.value == pytest.approx(OUTSIDE[name](x_left, y_left).statistic, abs=1e-12)

"""Products of float matrices: right, silent about the library's flag, loud about a result that is no number."""

import numpy as np
import pytest

from rankdocket.stats.matrix_product import product


def test_products_of_whole_numbers_are_those_of_integer_arithmetic() -> None:
    """Short rows, as where the flag is raised for nothing; numpy's integers are the outside value."""
    generator = np.random.default_rng(7)
    for rows, columns in ((1, 1), (5, 5), (200, 3), (999, 5), (64, 33)):
        left = generator.integers(-40, 40, (rows, columns))
        right = generator.integers(-40, 40, columns)
        for kind in (np.float32, np.float64):
            assert (product(left.astype(kind), right.astype(kind)) == left @ right).all()


def test_the_invalid_flag_of_a_product_is_not_listened_to_and_the_next_step_still_warns() -> None:
    """Infinity times zero raises the flag for certain; the entry it leaves shows when it becomes a whole number."""
    with np.errstate(invalid="raise"):
        found = product(np.array([[np.inf, 1.0]]), np.array([0.0, 1.0]))
        with pytest.raises(FloatingPointError):
            found.astype(np.int64)

"""Two sequences of numbers in, one frozen answer out."""

from dataclasses import FrozenInstanceError
from decimal import Decimal
from fractions import Fraction

import numpy as np
import pandas as pd
import pytest

from rankdocket import associate
from rankdocket.stats.interval import Interval, NoInterval
from rankdocket.stats.null import TailShares


def test_lists_arrays_and_series_are_read_alike() -> None:
    """The container does not matter, and missing marks of every kind leave their row out."""
    x, y = [1.5, 2.0, None, 4.0, 3.0, 9.0], [2, 1, 7, 4, 3, None]
    expected = associate(x, y)
    assert (expected.n_rows, expected.n, expected.rho_text) == (6, 4, "0.800000000000")
    as_floats = np.array([[np.nan if value is None else value for value in column] for column in (x, y)], dtype=float)
    assert associate(as_floats[0], as_floats[1]) == expected
    assert associate(pd.Series(x), pd.Series(y, dtype="Int64")) == expected


def test_values_are_ordered_by_their_exact_worth() -> None:
    """As decimals 0.1 + 0.2 ties with 0.3, as floats it does not."""
    decimals = associate([Decimal("0.1") + Decimal("0.2"), Decimal("0.3"), Decimal(1)], [1, 2, 3])
    floats = associate([0.1 + 0.2, 0.3, 1.0], [1, 2, 3])
    assert (decimals.x_has_ties, floats.x_has_ties) == (True, False)
    assert associate([2**53, 2**53 + 1, 0], [1, 2, 3]).x_has_ties is False


@pytest.mark.parametrize(
    ("x", "y", "reason"),
    [
        ([1, 2], [1, 2], "There are fewer than three complete rows."),
        ([], [], "There are fewer than three complete rows."),
        ([1, 1, 1, 1], [1, 2, 3, 4], "The first variable does not vary among the complete rows."),
        ([1, 2, 3, 4], [5, 5, 5, None], "The second variable does not vary among the complete rows."),
        ([1, 1, 1], [2, 2, 2], "Neither variable varies among the complete rows."),
    ],
)
def test_an_undefined_association_is_an_answer_with_its_reason(x: list[object], y: list[object], reason: str) -> None:
    """Nothing is raised, nothing is not-a-number: each value is absent and the reason is a sentence."""
    result = associate(x, y)
    assert result.reason == reason
    assert (result.rho, result.rho_text, result.tau_b, result.p, result.p_t, result.exact) == (None,) * 6
    assert result.short_form is None
    assert isinstance(result.interval, NoInterval)


def test_p_says_where_it_comes_from() -> None:
    """Few rows are counted completely; many are drawn, the same for the same seed."""
    few = associate([1, 2, 3, 4, 5], [2, 1, 4, 3, 5])
    assert few.exact is not None
    assert few.p == few.exact.p("two-sided") == Fraction(2, 15)
    rows = np.random.default_rng(3).integers(0, 20, size=(2, 60))
    drawn = associate(rows[0], rows[1], permutations=500, seed=4)
    assert drawn.exact is None
    assert drawn.tails is not None
    assert (drawn.tails.method, drawn.tails.of) == ("drawn permutations", 500)
    assert associate(rows[0], rows[1], permutations=500, seed=4).p == drawn.p
    more = associate(rows[0], rows[1], permutations=500, most_draws=4000, seed=4)
    assert more.null is not None
    assert more.null.looks[0].draws == 500


def test_nothing_is_drawn_without_a_seed() -> None:
    """A seed is never a default: what would have to be drawn is not given, and why is said."""
    rows = np.random.default_rng(3).integers(0, 20, size=(2, 60))
    result = associate(rows[0], rows[1])
    assert (result.p, result.null) == (None, None)
    assert result.null_reason == "The p-value needs drawn permutations, and no seed was given."
    at_the_end = associate(np.sort(rows[0]), np.sort(rows[0]))
    assert at_the_end.null_reason is None
    assert at_the_end.null is None
    assert at_the_end.p is not None


def test_many_untied_rows_have_a_series_and_no_count() -> None:
    """Above the shipped counts p is a share with a stated error; nothing is drawn."""
    rows = np.random.default_rng(3).normal(size=(2, 60))
    result = associate(rows[0], rows[1])
    assert result.exact is None
    assert isinstance(result.tails, TailShares)
    assert result.p == result.tails.p("two-sided")
    assert 0 < result.tails.share("two-sided").error < result.p


def test_a_budget_that_is_not_positive_is_a_reason() -> None:
    """The coefficient stands; that there is no p-value is said, not raised."""
    for seconds, memory in ((0, 2**30), (-1, 2**30), (float("nan"), 2**30), (10, 0), (10, -1), (Decimal("NaN"), 1)):
        result = associate([1, 2, 3, 4], [1, 2, 4, 3], budget_seconds=seconds, budget_memory=memory)
        assert result.rho == 0.8
        assert (result.p, result.exact, result.tails, result.null, result.null_choice) == (None,) * 5
        assert result.null_reason == "The budget of the null is not positive."
    for options in ({"budget_seconds": "lots"}, {"level": "95%"}, {"level": float("nan")}):
        with pytest.raises(ValueError):
            associate([1, 2, 3, 4], [1, 2, 4, 3], **options)
    for options in ({"permutations": 1.5}, {"seed": 1.5}):
        with pytest.raises(TypeError):
            associate([1, 2, 3, 4], [1, 2, 4, 3], **options)
    assert associate([1, 2], [1, 2], budget_seconds=0).null_reason == "There are fewer than three complete rows."


def test_the_critical_value_comes_with_the_null() -> None:
    """Ten untied rows: 0.648 at 5% on two sides (published tables)."""
    null = associate(range(10), [3, 0, 1, 2, 5, 4, 7, 6, 9, 8]).null
    assert null is not None
    assert null.critical is not None
    assert null.critical.two_sided is not None
    assert round(null.critical.two_sided.numerator / 330, 3) == 0.648


def test_perfect_order_has_an_exact_p_without_enumeration() -> None:
    """Two of the 40! permutations of forty untied rows are as extreme as perfect order."""
    result = associate(range(40), range(40))
    assert result.exact is not None
    assert (result.exact.greater, result.exact.two_sided) == (1, 2)
    assert isinstance(result.interval, Interval)


@pytest.mark.parametrize(
    ("x", "message", "kind"),
    [
        ([1, float("inf"), 3], "position 1 of x is infinite", ValueError),
        ([1, 2, Decimal("-Infinity")], "position 2 of x is infinite", ValueError),
        (["1", 2, 3], "position 0 of x is '1', not a number", TypeError),
        ([1, 2], "x has 2 values and y has 3", ValueError),
    ],
)
def test_what_cannot_be_ranked_is_refused_with_its_position(
    x: list[object], message: str, kind: type[Exception]
) -> None:
    """The position is counted from 0, as sequences are."""
    with pytest.raises(kind, match=message):
        associate(x, [1, 2, 3])


def test_options_out_of_range_are_refused() -> None:
    """A level of 1 and no permutations are refused."""
    with pytest.raises(ValueError, match="level"):
        associate([1], [1], level=1)
    with pytest.raises(ValueError, match="permutations"):
        associate([1], [1], permutations=0)


def test_the_answer_cannot_be_changed() -> None:
    """The result is frozen."""
    result = associate([1, 2, 3], [1, 2, 3])
    with pytest.raises(FrozenInstanceError):
        result.n = 4  # type: ignore[misc]

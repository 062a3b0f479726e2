"""Laws that ranks and coefficients obey for every data set."""

from decimal import Decimal
from fractions import Fraction
from random import Random

import numpy as np
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from properties.oracles import numerator, surpluses
from rankdocket import associate
from rankdocket.stats.ranks import centred_ranks, dense_codes, doubled_midranks, tie_groups
from rankdocket.stats.rho import rho, short_form, squared_differences, tie_corrected_rho
from rankdocket.stats.tau import inversions, tau_b

rows = st.integers(1, 40).flatmap(
    lambda n: st.tuples(
        st.lists(st.integers(-6, 6), min_size=n, max_size=n), st.lists(st.integers(-6, 6), min_size=n, max_size=n)
    )
)


def _codes(values: list[int]) -> np.ndarray[tuple[int], np.dtype[np.int64]]:
    return np.array(values, dtype=np.int64)


@given(st.lists(st.integers(-9, 9), min_size=1, max_size=60))
def test_midranks_sum_to_the_sum_of_ranks(values: list[int]) -> None:
    """Midranks sum to n(n + 1)/2 whatever the ties, and centred ranks are smaller less larger values."""
    codes = _codes(values)
    n = len(values)
    assert int(doubled_midranks(codes).sum()) == n * (n + 1)
    assert centred_ranks(codes).tolist() == surpluses(values)


@given(st.lists(st.integers(-9, 9), max_size=60))
def test_tie_groups_account_for_every_row(values: list[int]) -> None:
    """Group sizes sum to n, and tied pairs are the pairs of equal values."""
    groups = tie_groups(_codes(values))
    assert groups.n == len(values)
    assert groups.distinct == len(set(values))
    assert groups.tied_rows == sum(values.count(value) > 1 for value in values)
    assert 2 * groups.pairs == sum(values.count(value) - 1 for value in values)


@given(rows)
def test_numerators_are_those_of_the_definition(data: tuple[list[int], list[int]]) -> None:
    """Both coefficients agree with the sums over rows and over pairs."""
    x, y = data
    assert rho(_codes(x), _codes(y)).numerator == numerator("Spearman rho", x, y)
    assert tau_b(_codes(x), _codes(y)).numerator == numerator("Kendall tau-b", x, y)


@given(rows, st.randoms(use_true_random=False))
def test_coefficients_do_not_depend_on_the_order_of_rows_or_the_spacing_of_values(
    data: tuple[list[int], list[int]], shuffler: object
) -> None:
    """Reordering rows and increasing transforms leave both coefficients as they are; reversal negates them."""
    x, y = data
    order = list(range(len(x)))
    shuffler.shuffle(order)  # type: ignore[attr-defined]
    for coefficient in (rho, tau_b):
        plain = coefficient(_codes(x), _codes(y))
        assert coefficient(_codes([x[i] for i in order]), _codes([y[i] for i in order])) == plain
        assert coefficient(_codes([value**3 for value in x]), _codes([7 * value - 2 for value in y])) == plain
        assert coefficient(_codes([-value for value in x]), _codes(y)).numerator == -plain.numerator
        assert coefficient(_codes(y), _codes(x)).numerator == plain.numerator


@given(rows)
def test_both_forms_of_rho_agree_to_every_filed_digit(data: tuple[list[int], list[int]]) -> None:
    """The tie-corrected form of the worksheet is the correlation of midranks, ties or not."""
    x, y = _codes(data[0]), _codes(data[1])
    coefficient = rho(x, y)
    assume(coefficient.is_defined)
    form = tie_corrected_rho(x, y)
    assert form.decimal_text == coefficient.decimal_text()
    assert 4 * form.x_term == coefficient.x_square
    if not tie_groups(x).has_ties and not tie_groups(y).has_ties:
        assert short_form(len(x), squared_differences(x, y)) == Fraction(coefficient.numerator, coefficient.x_square)


@settings(max_examples=50)
@given(st.integers(2, 400), st.integers(1, 400), st.randoms(use_true_random=False))
def test_both_forms_of_rho_agree_in_many_rows_too(n: int, distinct: int, chance: Random) -> None:
    """Between coarse ties and none: a last digit that only seldom differs would show here."""
    x, y = (_codes([chance.randrange(distinct) for _ in range(n)]) for _ in range(2))
    coefficient = rho(x, y)
    assume(coefficient.is_defined)
    form = tie_corrected_rho(x, y)
    assert form.decimal_text == coefficient.decimal_text()
    assert 2 * form.numerator == coefficient.numerator
    assert 4 * form.x_term == coefficient.x_square
    assert 4 * form.y_term == coefficient.y_square


@given(rows)
def test_coefficients_lie_between_minus_one_and_one(data: tuple[list[int], list[int]]) -> None:
    """The value as a double stays within −1 to 1, and its text has twelve significant digits."""
    for coefficient in (rho(_codes(data[0]), _codes(data[1])), tau_b(_codes(data[0]), _codes(data[1]))):
        assume(coefficient.is_defined)
        assert -1 <= coefficient.value <= 1
        text = coefficient.decimal_text()
        assert abs(Decimal(text) - Decimal(coefficient.value)) < Decimal("1e-12")
        assert text == "0" or len(Decimal(text).as_tuple().digits) == 12


@given(st.lists(st.permutations(range(9)), min_size=1, max_size=5))
def test_inversions_are_the_pairs_in_falling_order(permutations: list[list[int]]) -> None:
    """Inversions counted digit by digit are those counted pair by pair."""
    expected = [sum(row[i] > row[j] for i in range(9) for j in range(i + 1, 9)) for row in permutations]
    assert inversions(np.array(permutations, dtype=np.int64)).tolist() == expected


@given(st.lists(st.decimals(allow_nan=False, allow_infinity=False, places=3), min_size=1, max_size=20))
def test_codes_have_the_exact_order_of_decimals(values: list[Decimal]) -> None:
    """Two codes compare as the two decimals do."""
    codes = dense_codes(values).tolist()
    for one, value in zip(codes, values, strict=True):
        assert one == len({other for other in values if other < value})


@settings(max_examples=30)
@given(rows)
def test_a_missing_value_leaves_its_row_out_before_ranking(data: tuple[list[int], list[int]]) -> None:
    """Rows with a missing value change nothing but the number of rows given."""
    x, y = data
    with_gaps = associate([*x, None, 3.0], [*y, 1, float("nan")])
    without = associate(x, y)
    assert with_gaps.n_rows == without.n_rows + 2
    assert (with_gaps.n, with_gaps.coefficient, with_gaps.tau) == (without.n, without.coefficient, without.tau)

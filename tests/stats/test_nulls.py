"""Nulls, tails, draws and the choice between them."""

import re
import struct
import sys
from decimal import Decimal
from fractions import Fraction
from hashlib import sha256
from math import factorial

import numpy as np
import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.attainable import attainable_range, smallest_attainable_p
from rankdocket.stats.choose_null import (
    BYTES_BUDGET,
    OPERATIONS_BUDGET,
    choose_null,
    count_tails,
    exact_null_of,
)
from rankdocket.stats.draws import stream
from rankdocket.stats.forecast import ROWS_LIMIT
from rankdocket.stats.null import ExactNull, TailCounts, exact_null
from rankdocket.stats.nulls.monte_carlo import Draws, drawn_tails, permutations_of
from rankdocket.stats.ranks import TieGroups, tie_groups
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import COEFFICIENTS, CoefficientName


def _tails(x: list[int], y: list[int], name: CoefficientName = "Spearman rho") -> TailCounts:
    x_codes, y_codes = np.array(x), np.array(y)
    coefficient = {"Spearman rho": rho, "Kendall tau-b": tau_b}[name](x_codes, y_codes)
    choice = choose_null(name, tie_groups(x_codes), tie_groups(y_codes), "exact when possible")
    return count_tails(choice, x_codes, y_codes, observed=coefficient, draws=None)


def test_exact_p_with_ties_is_conditional_on_them() -> None:
    """10, 10, 20, 30, 30 against 1 … 5: 8 of 120 permutations, 1/15 (worked by hand)."""
    tails = _tails([10, 10, 20, 30, 30], [1, 2, 3, 4, 5])
    assert tails.method == "exact, conditional on the ties"
    assert tails.p("two-sided") == Fraction(1, 15)


def test_the_two_sided_conventions_can_differ() -> None:
    """1, 1, 1, 2 against itself: one-sided 1/4, both sides 1/4, doubled 1/2 (Gibbons & Pratt 1975; by hand)."""
    tails = _tails([1, 1, 1, 2], [1, 1, 1, 2])
    assert (tails.p("greater"), tails.p("two-sided"), tails.doubled) == (Fraction(1, 4), Fraction(1, 4), Fraction(1, 2))


def test_exact_p_of_tau_without_ties() -> None:
    """1, 2, 3, 4 against 1, 2, 4, 3: 8 of 24 permutations, 1/3 (Kendall 1938)."""
    tails = _tails([1, 2, 3, 4], [1, 2, 4, 3], "Kendall tau-b")
    assert tails.method == "exact, no ties"
    assert tails.p("two-sided") == Fraction(1, 3)


def test_the_null_of_tau_without_ties_counts_inversions() -> None:
    """Permutations of five by inversions: 1, 4, 9, 15, 20, 22, 20, 15, 9, 4, 1 (Kendall 1938)."""
    five = TieGroups((1,) * 5)
    assert exact_null_of("Kendall tau-b", five, five).counts == (1, 4, 9, 15, 20, 22, 20, 15, 9, 4, 1)


def test_counts_beyond_64_bits_stay_exact() -> None:
    """With 60 rows in three tie groups against one of two the counts exceed 64 bits and still sum to 60!."""
    null = exact_null_of("Kendall tau-b", TieGroups((20, 20, 20)), TieGroups((30, 30)))
    assert sum(null.counts) == factorial(60)
    assert max(null.counts) > 2**64
    assert null.counts == null.counts[::-1]


def test_counts_that_do_not_sum_to_all_permutations_are_refused() -> None:
    """A null that lost a permutation is never used."""
    with pytest.raises(ComputeError, match="do not sum"):
        ExactNull("exact, no ties", np.array([-1, 1]), (1, 2), 6)
    with pytest.raises(ComputeError, match="do not divide"):
        exact_null(3, {0: 4}, has_ties=False)


def test_a_drawn_p_value_is_never_zero_and_carries_its_interval() -> None:
    """0 of 999: p is 0.001 (Phipson & Smyth 2010), its interval 0 to 1 − 0.025^(1/999) (Clopper & Pearson 1934)."""
    tails = TailCounts("drawn permutations", 0, 999, 0, 999)
    assert tails.p("greater") == Fraction(1, 1000)
    limits = tails.interval("greater", Decimal("0.95"))
    assert limits is not None
    assert limits[0] == 0
    assert limits[1] == pytest.approx(1 - 0.025 ** (1 / 999), rel=1e-12)
    opposite = tails.interval("less", Decimal("0.95"))
    assert opposite is not None
    assert opposite[0] == pytest.approx(0.025 ** (1 / 999), rel=1e-12)
    assert opposite[1] == 1


def test_an_exact_p_value_has_no_error_of_drawing() -> None:
    """The exact null states no interval for its p-value."""
    assert _tails([1, 2, 3], [1, 2, 3]).interval("greater", Decimal("0.95")) is None


@pytest.mark.parametrize("rows", [12, 17])
def test_untied_rows_are_counted_completely_as_far_as_the_budget_reaches(rows: int) -> None:
    """Up to 17 untied rows are enumerated."""
    untied = TieGroups((1,) * rows)
    choice = choose_null("Spearman rho", untied, untied, "exact when possible")
    assert (choice.method, choice.needs_draws) == ("exact, no ties", False)


@pytest.mark.parametrize(
    ("name", "x", "y"),
    [
        ("Spearman rho", (1,) * 18, (1,) * 18),
        ("Spearman rho", (1,) * 65_537, (1,) * 65_537),
        ("Spearman rho", (40, 41, 42), (1,) * 123),
        ("Spearman rho", (1, 500_000), (2, 499_999)),
        ("Kendall tau-b", (5,) * 9, (4,) * 10 + (5,)),
        ("Kendall tau-b", (1,) * 1_000, (1,) * 1_000),
        ("Kendall tau-b", (1,) * 65_537, (30_000, 35_537)),
    ],
)
def test_what_is_beyond_the_budget_is_drawn(name: CoefficientName, x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """A count that would be too long or too large is not begun, and the forecast says why."""
    choice = choose_null(name, TieGroups(x), TieGroups(y), "exact when possible")
    assert choice.needs_draws
    forecast = choice.forecast
    assert forecast is None or max(forecast.operations, forecast.bytes, forecast.states) < 2**53
    assert forecast is None or forecast.operations > OPERATIONS_BUDGET or forecast.bytes > BYTES_BUDGET


@pytest.mark.parametrize(
    ("name", "x", "y", "of_operations", "of_bytes"),
    [
        ("Spearman rho", (1,) * 37, (6, 7, 7, 8, 9), False, True),
        ("Spearman rho", (1,) * 66, (20, 21, 25), False, True),
        ("Kendall tau-b", (47, 48), (47, 48), True, False),
        ("Spearman rho", (2,) * 18 + (1,), (6, 7, 7, 8, 9), True, True),
        ("Spearman rho", (1,) * 17, (1,) * 17, False, False),
    ],
)
def test_either_budget_alone_is_enough_to_stop_a_complete_count(
    name: CoefficientName, x: tuple[int, ...], y: tuple[int, ...], of_operations: bool, of_bytes: bool
) -> None:
    """Time without memory, memory without time, both, and neither."""
    choice = choose_null(name, TieGroups(x), TieGroups(y), "exact when possible")
    assert choice.forecast is not None
    exceeded = (choice.forecast.operations > OPERATIONS_BUDGET, choice.forecast.bytes > BYTES_BUDGET)
    assert exceeded == (of_operations, of_bytes)
    assert choice.needs_draws == any(exceeded)


@pytest.mark.parametrize("name", COEFFICIENTS)
def test_a_reason_is_one_sentence_without_numbers(name: CoefficientName) -> None:
    """Every reason can be printed as it stands."""
    few, many = TieGroups((1,) * 5), TieGroups((1,) * 3_000)
    reasons = {
        choose_null(name, few, few, "exact when possible").reason,
        choose_null(name, few, few, "permutation").reason,
        choose_null(name, many, many, "exact when possible").reason,
    }
    assert len(reasons) == 3
    for reason in reasons:
        assert re.fullmatch(r"[A-Z][^0-9]*\.", reason)


def test_draws_are_demanded_when_they_are_needed() -> None:
    """A drawn null without a stream is an error of the caller."""
    x = np.arange(5)
    choice = choose_null("Spearman rho", tie_groups(x), tie_groups(x), "permutation")
    with pytest.raises(ComputeError, match="needs drawn permutations"):
        count_tails(choice, x, x, observed=rho(x, x), draws=None)


def test_permutations_are_permutations_and_all_are_likely() -> None:
    """Each row holds every place once; of 24,000 rows of three, every order comes about 4,000 times."""
    blocks = list(permutations_of(3, Draws(24_000, stream(5, "permutations"))))
    rows = np.concatenate(blocks)
    assert rows.shape == (24_000, 3)
    orders, counts = np.unique(rows, axis=0, return_counts=True)
    assert orders.tolist() == [[0, 1, 2], [0, 2, 1], [1, 0, 2], [1, 2, 0], [2, 0, 1], [2, 1, 0]]
    # Five standard deviations of a count with chance 1/6.
    assert np.abs(counts - 4_000).max() < 5 * (24_000 * 5 / 36) ** 0.5


def test_many_rows_are_drawn_in_blocks() -> None:
    """More keys than are held at a time give the same number of permutations."""
    blocks = list(permutations_of(400_000, Draws(5, stream(5, "blocks"))))
    assert [len(block) for block in blocks] == [2, 2, 1]
    assert np.array_equal(np.sort(blocks[2][0]), np.arange(400_000))


def test_draws_of_constant_variables_are_all_as_extreme() -> None:
    """Without variation every permutation ties with the data."""
    tails = drawn_tails(
        "Kendall tau-b", np.zeros(4, dtype=np.int64), np.arange(4), observed=0, draws=Draws(10, stream(1, "a"))
    )
    assert (tails.greater, tails.less, tails.two_sided, tails.of) == (10, 10, 10, 10)


def test_a_stream_belongs_to_its_address() -> None:
    """Equal addresses give equal bits; another seed, word or division of words gives others."""
    first = stream(7, "study", "A1", "null").bit_generator.random_raw(4).tolist()
    assert stream(7, "study", "A1", "null").bit_generator.random_raw(4).tolist() == first
    for other in (stream(8, "study", "A1", "null"), stream(7, "study", "A2", "null"), stream(7, "studyA1", "", "null")):
        assert other.bit_generator.random_raw(4).tolist() != first


def test_a_stream_starts_from_the_seed_and_every_word_of_the_digest() -> None:
    """SHA-256 (FIPS 180-4) has eight words of 32 bits: all of them, in their order, behind the seed."""
    words = struct.unpack(">8I", sha256(b"study\x1fA1\x1fnull").digest())
    drawn = stream(7, "study", "A1", "null").bit_generator.random_raw(4).tolist()

    def bits(*entropy: int) -> list[int]:
        return list(np.random.PCG64(np.random.SeedSequence([7, *entropy])).random_raw(4).tolist())

    assert bits(*words) == drawn
    for place in range(8):
        assert bits(*words[:place], *words[place + 1 :]) != drawn
        assert bits(*words[:place], words[place] ^ 1, *words[place + 1 :]) != drawn


def test_the_attainable_range_of_a_halved_variable() -> None:
    """Two halves against four distinct values reach 0.894427 at most, not 1 (worked by hand: 2/√5)."""
    limits = attainable_range("Spearman rho", TieGroups((2, 2)), TieGroups((1, 1, 1, 1)))
    assert limits.highest.value == pytest.approx(2 / 5**0.5, rel=1e-15)
    assert limits.lowest.numerator == -limits.highest.numerator


@pytest.mark.parametrize("name", COEFFICIENTS)
@pytest.mark.parametrize(("n", "smallest"), [(3, 3), (4, 12), (5, 60), (30, factorial(30) // 2)])
def test_the_smallest_p_without_ties(name: CoefficientName, n: int, smallest: int) -> None:
    """Without ties the smallest two-sided p-value is 2/n!."""
    untied = TieGroups((1,) * n)
    assert smallest_attainable_p(name, untied, untied, "two-sided") == Fraction(1, smallest)
    assert smallest_attainable_p(name, untied, untied, "greater") == Fraction(1, 2 * smallest)


def test_every_exact_count_can_be_written_out() -> None:
    """Up to the most rows that are counted completely n! has fewer digits than Python agrees to print."""
    assert len(str(factorial(ROWS_LIMIT))) < sys.int_info.default_max_str_digits
    many = TieGroups((1, ROWS_LIMIT))
    assert choose_null("Spearman rho", many, many, "exact when possible").needs_draws

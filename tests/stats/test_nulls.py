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
from rankdocket.stats.choose_null import DEFAULT_BUDGET, NANOSECONDS, Budget, Route, choose_null, exact_null_of
from rankdocket.stats.draws import stream
from rankdocket.stats.forecast import ROWS_LIMIT
from rankdocket.stats.null import ExactNull, TailCounts, exact_null
from rankdocket.stats.nulls.untied import reach
from rankdocket.stats.ranks import TieGroups
from rankdocket.vocabulary import COEFFICIENTS, CoefficientName
from stats.asked import answer_of


def _tails(x: list[int], y: list[int], name: CoefficientName = "Spearman rho") -> TailCounts:
    tails = answer_of(x, y, name).tails
    assert isinstance(tails, TailCounts)
    return tails


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


def _route(name: CoefficientName, x: tuple[int, ...], y: tuple[int, ...], budget: Budget = DEFAULT_BUDGET) -> Route:
    return choose_null(name, TieGroups(x), TieGroups(y), "exact when possible", budget).route


@pytest.mark.parametrize(
    ("name", "x", "y", "route"),
    [
        ("Spearman rho", (1,) * 3, (1,) * 3, "counted beforehand"),
        ("Spearman rho", (1,) * reach(), (1,) * reach(), "counted beforehand"),
        ("Spearman rho", (1,) * (reach() + 1), (1,) * (reach() + 1), "series"),
        ("Spearman rho", (1,) * 65_537, (1,) * 65_537, "series"),
        ("Spearman rho", (2, *(1,) * 14), (1,) * 16, "whole"),
        ("Spearman rho", (30, 33, 37), (31, 33, 36), "whole"),
        ("Spearman rho", (1,) * 200, (90, 110), "whole"),
        ("Spearman rho", (3,) * 20, (4,) * 15, "draws"),
        ("Spearman rho", (1, 500_000), (2, 499_999), "draws"),
        ("Kendall tau-b", (1,) * 60, (1,) * 60, "whole"),
        ("Kendall tau-b", (20, 20, 20), (1,) * 60, "whole"),
        ("Kendall tau-b", (5,) * 9, (4,) * 10 + (5,), "draws"),
        ("Kendall tau-b", (1,) * 65_537, (30_000, 35_537), "draws"),
    ],
)
def test_the_surest_null_within_the_budget_is_taken(
    name: CoefficientName, x: tuple[int, ...], y: tuple[int, ...], route: Route
) -> None:
    """Tables first, then complete counts, then tails alone; a series without ties, draws with them."""
    assert _route(name, x, y) == route


def test_a_smaller_budget_leads_down_the_ways_in_their_order() -> None:
    """As time runs short a whole null gives way to its tails, whole numbers to doubles, and these to draws."""
    x, y = (6, 7, 8, 9, 10), (4, 7, 8, 9, 12)
    order: list[Route] = ["whole", "tails, whole numbers", "tails, doubles", "draws"]
    met = [_route("Spearman rho", x, y, Budget(NANOSECONDS * 20 // 2**step, 2**30)) for step in range(12)]
    assert [route for route in order if route in met] == list(dict.fromkeys(met))
    assert (met[0], met[-1]) == ("whole", "draws")


def test_memory_alone_can_exceed_the_budget() -> None:
    """With time without end and a mebibyte nothing is counted whole."""
    x, y = (6, 7, 8, 9, 10), (4, 7, 8, 9, 12)
    assert _route("Spearman rho", x, y, Budget(10**18, 2**20)) == "draws"
    assert _route("Spearman rho", x, y, Budget(10**18, 2**30)) == "whole"


def test_what_exceeded_the_budget_is_told() -> None:
    """A null that is drawn for want of time carries the cheapest forecast that was beyond it; a counted one its own."""
    x, y = TieGroups((3,) * 20), TieGroups((4,) * 15)
    drawn = choose_null("Spearman rho", x, y, "exact when possible")
    assert drawn.exceeded is not None
    assert not DEFAULT_BUDGET.holds(drawn.exceeded)
    counted = choose_null("Spearman rho", TieGroups((5, 5)), TieGroups((4, 6)), "exact when possible")
    assert counted.forecast is not None
    assert DEFAULT_BUDGET.holds(counted.forecast)
    assert choose_null("Spearman rho", x, y, "permutation").exceeded is None


@pytest.mark.parametrize("name", COEFFICIENTS)
def test_a_reason_is_one_sentence_without_numbers(name: CoefficientName) -> None:
    """Every reason can be printed as it stands."""
    few, many, tied = TieGroups((1,) * 5), TieGroups((1,) * 3_000), TieGroups((3,) * 20)
    reasons = {
        choose_null(name, few, few, "exact when possible").reason,
        choose_null(name, few, few, "permutation").reason,
        choose_null(name, many, many, "exact when possible").reason,
        choose_null(name, tied, tied, "exact when possible").reason,
    }
    assert len(reasons) == 4
    for reason in reasons:
        assert re.fullmatch(r"[A-Z][^0-9]*\.", reason)


def test_draws_are_demanded_when_they_are_needed() -> None:
    """A drawn null without a plan of drawing is an error of the caller."""
    x = TieGroups((3,) * 20).codes().tolist()
    y = TieGroups((4,) * 15).codes().tolist()
    with pytest.raises(ComputeError, match="needs drawn permutations"):
        answer_of(x, y)


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

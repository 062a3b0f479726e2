"""The counts for untied rows that come with the program, held against laws and an own count."""

from fractions import Fraction
from importlib.resources import files
from itertools import permutations
from math import comb, factorial

import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.nulls.cumulants import central_moment, cumulants
from rankdocket.stats.nulls.untied import counts_by_half_sum, reach, untied_null
from tooling.make_untied_counts import counted

FEWEST = 4
"""From here on every law has something to say; smaller n are listed one by one."""


def total_is_right(n: int, counts: tuple[int, ...]) -> bool:
    """All n! orders are counted."""
    return sum(counts) == factorial(n)


def even_share_is_right(n: int, counts: tuple[int, ...]) -> bool:
    """The sum of products of ranks is even or odd with the number of odd ranks that meet odd ones, which is hypergeometric."""
    odd = (n + 1) // 2
    even = sum(
        comb(odd, both) * comb(n - odd, odd - both) * factorial(odd) * factorial(n - odd)
        for both in range(0, odd + 1, 2)
    )
    top = n * (n + 1) * (2 * n + 1) // 6
    found = [0, 0]
    for half_sum, count in enumerate(counts):
        found[(top - half_sum) % 2] += count
    return found == [even, factorial(n) - even]


def variance_is_right(n: int, counts: tuple[int, ...]) -> bool:
    """The variance of the sum of squares is n²(n + 1)²(n − 1)/36 (Kendall et al. 1939)."""
    return 4 * _moment(n, counts, 2) == Fraction(n**2 * (n + 1) ** 2 * (n - 1), 36)


def fourth_moment_is_right(n: int, counts: tuple[int, ...]) -> bool:
    """The fourth moment of rho is 3(25n³ − 38n² − 35n + 72)/(25n(n + 1)(n − 1)³) (Kendall et al. 1939)."""
    of_rho = _moment(n, counts, 4) * Fraction(12, n**3 - n) ** 4
    return of_rho == Fraction(3 * (25 * n**3 - 38 * n**2 - 35 * n + 72), 25 * n * (n + 1) * (n - 1) ** 3)


def higher_moments_are_right(n: int, counts: tuple[int, ...]) -> bool:
    """The moments of orders 6 to 12 lie on their polynomials in n."""
    return all(_moment(n, counts, order) == central_moment(n, order) for order in range(6, 13, 2))


def first_counts_are_right(n: int, counts: tuple[int, ...]) -> bool:
    """One order agrees perfectly, n − 1 exchange two neighbours, C(n − 2, 2) exchange two pairs of neighbours apart."""
    return counts[:3] == (1, n - 1, comb(n - 2, 2))


def mirror_is_right(n: int, counts: tuple[int, ...]) -> bool:
    """Turning one variable round mirrors the counts, and perfect disagreement lies n(n² − 1)/6 from agreement."""
    return counts == counts[::-1] and len(counts) == (n**3 - n) // 6 + 1


LAWS = (
    total_is_right,
    even_share_is_right,
    variance_is_right,
    fourth_moment_is_right,
    higher_moments_are_right,
    first_counts_are_right,
    mirror_is_right,
)


def _moment(n: int, counts: tuple[int, ...], order: int) -> Fraction:
    """Return a central moment of half the sum of squares."""
    span = (n**3 - n) // 6
    doubled = sum(count * (2 * half_sum - span) ** order for half_sum, count in enumerate(counts))
    return Fraction(doubled, 2**order * factorial(n))


def _broken(n: int, counts: tuple[int, ...]) -> list[str]:
    return [law.__name__ for law in LAWS if not law(n, counts)]


@pytest.mark.parametrize("n", range(FEWEST, reach() + 1))
def test_the_shipped_counts_keep_every_law(n: int) -> None:
    """For each n: total, even share, moments to order 12, first counts and mirror."""
    assert _broken(n, counts_by_half_sum(n)) == []


@pytest.mark.parametrize("n", [FEWEST, 9, 16, 17, 20, 21, 25, reach() - 1, reach()])
@pytest.mark.parametrize("by", [-1, 1])
def test_one_altered_count_breaks_two_laws_at_least(n: int, by: int) -> None:
    """A count of the file that is off by one, and with it its mirror, is noticed twice or more, wherever it stands."""
    counts = counts_by_half_sum(n)
    last = len(counts) - 1
    for place in {0, 1, 2, last // 7, last // 3, last // 2 - 1, last // 2}:
        altered = list(counts)
        for alike in {place, last - place}:
            altered[alike] += by
        assert len(_broken(n, tuple(altered))) >= 2, place


@pytest.mark.parametrize("n", range(2, 17))
def test_an_own_count_agrees(n: int) -> None:
    """A dynamic programme over sets of columns, written for this test alone, gives the shipped counts."""
    assert counted(n) == counts_by_half_sum(n)


@pytest.mark.slow
@pytest.mark.parametrize("n", [17, 18, 19, 20])
def test_an_own_count_agrees_as_far_as_it_reaches(n: int) -> None:
    """The same for as many rows as the programme counts in a minute."""
    assert counted(n) == counts_by_half_sum(n)


@pytest.mark.parametrize("n", range(1, 8))
def test_listing_every_order_agrees(n: int) -> None:
    """With up to seven rows, the null is that of all orders listed; values that do not occur are left out."""
    ranks = [2 * rank - (n - 1) for rank in range(n)]
    numerators = [sum(a * b for a, b in zip(ranks, order, strict=True)) for order in permutations(ranks)]
    null = untied_null(n)
    assert null.method == "exact, no ties"
    assert null.of == factorial(n)
    assert null.statistics.tolist() == sorted(set(numerators))
    assert list(null.counts) == [numerators.count(numerator) for numerator in sorted(set(numerators))]


@pytest.mark.parametrize("n", [0, reach() + 1])
def test_more_rows_than_were_counted_are_refused(n: int) -> None:
    """The refusal names the range."""
    with pytest.raises(ComputeError, match=f"for 1 to {reach()} rows, not for {n}"):
        untied_null(n)


def test_the_file_is_small() -> None:
    """The counts take 200 kB at most."""
    assert len(files("rankdocket.stats.nulls").joinpath("spearman_counts.npz").read_bytes()) <= 200_000


def test_variance_and_fourth_moment_follow_from_the_polynomials_for_any_n() -> None:
    """The polynomials give the closed forms of Kendall et al. (1939) far above the counts."""
    for n in (2, 31, 1000, 12345):
        assert 4 * cumulants(n)[2] == Fraction(n**2 * (n + 1) ** 2 * (n - 1), 36)
        of_rho = central_moment(n, 4) * Fraction(12, n**3 - n) ** 4
        assert of_rho == Fraction(3 * (25 * n**3 - 38 * n**2 - 35 * n + 72), 25 * n * (n + 1) * (n - 1) ** 3)


@pytest.mark.parametrize("n", [3, 8, reach()])
def test_cumulants_put_together_give_the_moments(n: int) -> None:
    """The sixth moment is κ6 + 15 κ4 κ2 + 15 κ2³ when odd cumulants vanish."""
    k = cumulants(n)
    assert k[6] + 15 * k[4] * k[2] + 15 * k[2] ** 3 == _moment(n, counts_by_half_sum(n), 6)

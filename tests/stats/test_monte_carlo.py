"""Drawn permutations: how they are drawn, counted, and looked at."""

from decimal import Decimal
from fractions import Fraction

import numpy as np
import numpy.typing as npt
import pytest
from scipy import stats

from rankdocket.errors import ComputeError
from rankdocket.stats.draws import stream
from rankdocket.stats.nulls.monte_carlo import (
    MOST_STATISTICS,
    DrawingPlan,
    DrawnNull,
    LookQuestion,
    NumeratorCounts,
    drawn_null,
    drawn_orders,
    look_ends,
    with_numerators,
)
from rankdocket.stats.nulls.rho_exact import rho_null
from rankdocket.stats.nulls.tau_exact import tau_null
from rankdocket.stats.ranks import Codes, tie_groups
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.vocabulary import COEFFICIENTS, CoefficientName, Direction

NO_LEVELS = LookQuestion("two-sided", Decimal("0.95"), ())
NOTHING_COUNTED = NumeratorCounts(np.zeros(0, dtype=np.int64), np.zeros(0, dtype=np.int64), 1)


def _codes(values: object) -> Codes:
    return np.asarray(values, dtype=np.int64)


def _plan(permutations: int, most_draws: int | None = None, word: str = "draws") -> DrawingPlan:
    return DrawingPlan(permutations, most_draws or permutations, stream(29, word))


def _orders(values: Codes, number: int, word: str) -> npt.NDArray[np.integer]:
    blocks, rows = drawn_orders(values, stream(29, word)), []
    while sum(map(len, rows)) < number:
        rows.append(next(blocks))
    return np.concatenate(rows)[:number]


@pytest.mark.parametrize(
    "values",
    [
        (0, 1, 2, 3),
        (0, 1, 2, 3, 4),
        # 64-bit keys, because these values leave too few of 32 bits.
        (0, 1, 2, 2**40),
        # 32-bit keys with five random bits: every eleventh order holds equal keys and must not be used.
        (0, 1, 2**26),
    ],
)
def test_every_order_is_equally_likely(values: tuple[int, ...]) -> None:
    """Each of the n! orders comes equally often, by Pearson's chi-square at 1 in 10,000."""
    rows = _orders(_codes(values), 120_000, "orders")
    assert np.array_equal(np.sort(rows, axis=1), np.broadcast_to(values, rows.shape))
    orders, counts = np.unique(rows, axis=0, return_counts=True)
    assert len(orders) == {3: 6, 4: 24, 5: 120}[len(values)]
    assert stats.chisquare(counts).pvalue > 1e-4


@pytest.mark.parametrize("n", [30, 100])
def test_every_value_comes_equally_often_to_every_place(n: int) -> None:
    """Of n² pairs of a value and a place none stands out, by Pearson's chi-square at 1 in 10,000."""
    rows = _orders(np.arange(n), 60_000, "places")
    counts = np.zeros((n, n), dtype=np.int64)
    for place in range(n):
        counts[place] = np.bincount(rows[:, place].astype(np.int64), minlength=n)
    # Rows and columns of the counts have fixed sums: (n − 1)² degrees of freedom.
    statistic = float(((counts - len(rows) / n) ** 2).sum()) / (len(rows) / n)
    assert 1e-4 < stats.chi2.sf(statistic, (n - 1) ** 2) < 1 - 1e-4


@pytest.mark.parametrize("n", [1, 2, 1_000, 3_000, 70_000])
def test_an_order_holds_every_value_once(n: int) -> None:
    """Whatever the width of the keys, and with more rows than keys are held at a time."""
    rows = _orders(np.arange(n), 3, "once")
    assert np.array_equal(np.sort(rows, axis=1), np.broadcast_to(np.arange(n), (3, n)))


def _numerators_one_by_one(name: CoefficientName, x: Codes, y: Codes, draws: int, word: str) -> list[int]:
    """The numerators of the same draws from the definitions, in Python integers or pair by pair."""
    order = np.lexsort((y, x))
    x, y = x[order], y[order]
    if name == "Spearman rho":
        left = [int(rank) for rank in 2 * stats.rankdata(x) - len(x) - 1]
        dealt = _codes(2 * stats.rankdata(y))
        unit = int(np.gcd.reduce(dealt - dealt.min())) or 1
        rows = _orders((dealt - dealt.min()) // unit, draws, word).tolist()
        return [unit * sum(a * b for a, b in zip(left, row, strict=True)) for row in rows]
    rows = _orders(stats.rankdata(y, method="dense").astype(np.int64) - 1, draws, word).astype(np.int64)
    signs = np.sign(x[:, np.newaxis] - x)
    return [int((signs * np.sign(row[:, np.newaxis] - row)).sum()) // 2 for row in rows]


@pytest.mark.parametrize("name", COEFFICIENTS)
@pytest.mark.parametrize(
    ("n", "values"), [(4, 9), (30, 99), (31, 99), (30, 4), (101, 7), (250, 600), (400, 10**9), (1_700, 5)]
)
def test_numerators_are_exact_whole_numbers(name: CoefficientName, n: int, values: int) -> None:
    """With few and many rows, odd and even, tied and not, each draw has the numerator of the definition."""
    rng = np.random.default_rng(n)
    x, y = rng.integers(0, values, n), rng.integers(0, values, n)
    draws = 40 if n < 1_000 else 3
    drawn = drawn_null(name, x, y, observed=7, plan=_plan(draws, word="one by one"), question=NO_LEVELS)
    numerators = _numerators_one_by_one(name, x, y, draws, "one by one")
    assert np.repeat(drawn.statistics, drawn.hits).tolist() == sorted(numerators)
    assert drawn.tails.greater == sum(numerator >= 7 for numerator in numerators)
    assert drawn.tails.less == sum(numerator <= 7 for numerator in numerators)
    assert drawn.tails.two_sided == sum(abs(numerator) >= 7 for numerator in numerators)


def test_sums_beyond_the_whole_numbers_of_a_double_stay_exact() -> None:
    """With 260,001 rows sums of rank products exceed 2**53, where doubles skip every other whole number."""
    n = 260_001
    x = np.arange(n)
    drawn = drawn_null("Spearman rho", x, x, observed=0, plan=_plan(2, word="large"), question=NO_LEVELS)
    numerators = sorted(_numerators_one_by_one("Spearman rho", x, x, 2, "large"))
    assert drawn.statistics.tolist() == numerators


def test_too_many_rows_for_exact_sums_are_refused() -> None:
    """Where an int64 could overflow nothing is drawn."""
    x = np.arange(2_200_000)
    with pytest.raises(ComputeError, match="too many rows"):
        drawn_null("Spearman rho", x, x, observed=0, plan=_plan(1), question=NO_LEVELS)


@pytest.mark.parametrize("name", COEFFICIENTS)
@pytest.mark.parametrize(
    ("x", "y"), [((0, 1, 2, 3, 4, 5), (0, 1, 2, 3, 4, 5)), ((0, 0, 1, 1, 2, 3, 3), (1, 0, 0, 1, 2, 2, 1))]
)
def test_draws_follow_the_counted_null(name: CoefficientName, x: tuple[int, ...], y: tuple[int, ...]) -> None:
    """Every numerator comes as often as its share of all orders says, by Pearson's chi-square at 1 in 10,000."""
    exact = {"Spearman rho": rho_null, "Kendall tau-b": tau_null}[name](tie_groups(_codes(x)), tie_groups(_codes(y)))
    drawn = drawn_null(name, _codes(x), _codes(y), observed=0, plan=_plan(200_000), question=NO_LEVELS)
    assert drawn.statistics.tolist() == exact.statistics.tolist()
    expected = [200_000 * count / exact.of for count in exact.counts]
    assert stats.chisquare(drawn.hits, expected).pvalue > 1e-4


@pytest.mark.parametrize("name", COEFFICIENTS)
def test_without_variation_every_draw_ties_with_the_data(name: CoefficientName) -> None:
    """A constant beside anything has the numerator 0 in every order."""
    for x, y in ((_codes([5] * 4), np.arange(4)), (np.arange(4), _codes([5] * 4))):
        drawn = drawn_null(name, x, y, observed=0, plan=_plan(10), question=NO_LEVELS)
        assert (drawn.tails.greater, drawn.tails.less, drawn.tails.two_sided, drawn.tails.of) == (10, 10, 10, 10)


def test_looks_end_at_equal_ratios() -> None:
    """From 1,000 to 10,000 in five steps of the fifth root of 10, 1.5849, rounded down (worked by hand)."""
    assert look_ends(1_000, 10_000) == (1_000, 1_584, 2_511, 3_981, 6_309, 10_000)
    assert look_ends(999, 1_000) == (999, 1_000)
    assert look_ends(1, 2) == (1, 2)
    assert look_ends(99_999, 99_999) == look_ends(99_999, 10) == (99_999,)


@pytest.mark.parametrize(("first", "ceiling"), [(999, 10_000_000), (7, 100), (1, 64), (99_999, 100_003)])
def test_there_are_at_most_six_looks(first: int, ceiling: int) -> None:
    """They begin at the first, end at the ceiling and grow."""
    ends = look_ends(first, ceiling)
    assert (ends[0], ends[-1]) == (first, ceiling)
    assert list(ends) == sorted(set(ends))
    assert len(ends) <= 6


def _kendall_of_four(
    plan: DrawingPlan, levels: tuple[Fraction, ...], direction: Direction = "two-sided", level: str = "0.95"
) -> DrawnNull:
    """1, 2, 3, 4 against 1, 2, 4, 3: tau has the two-sided p-value 1/3, the upper one 1/6 (Kendall 1938)."""
    x, y = np.arange(4), _codes([0, 1, 3, 2])
    question = LookQuestion(direction, Decimal(level), levels)
    return drawn_null("Kendall tau-b", x, y, observed=tau_b(x, y).numerator, plan=plan, question=question)


def test_a_level_far_from_p_needs_one_look() -> None:
    """At 1/3 and a level of 1/20 the first draws decide; the error has been split over six looks all the same."""
    drawn = _kendall_of_four(_plan(999, 9_999), (Fraction(1, 20),))
    assert [look.draws for look in drawn.looks] == [999]
    assert (drawn.tails.of, drawn.looks_allowed, drawn.undecided) == (999, 6, ())
    assert drawn.looks[0].hits == drawn.tails.two_sided


def test_a_level_at_p_stays_open_up_to_the_ceiling() -> None:
    """The p-value is 1/3 and so is one level: no number of draws decides, and the draws end and say so."""
    drawn = _kendall_of_four(_plan(999, 9_999), (Fraction(1, 3), Fraction(1, 20)))
    assert [look.draws for look in drawn.looks] == list(look_ends(999, 9_999))
    assert drawn.undecided == (Fraction(1, 3),)
    assert drawn.tails.of == 9_999


def test_looking_goes_on_exactly_as_long_as_a_level_is_open() -> None:
    """With a level somewhat below p every look but the last one leaves it open."""
    taken = set()
    for run in range(12):
        level = Fraction(30, 100)
        drawn = _kendall_of_four(_plan(300, 30_000, f"run {run}"), (level,))
        assert [look.leaves_open(level) for look in drawn.looks] == [True] * (len(drawn.looks) - 1) + [False]
        taken.add(len(drawn.looks))
    assert len(taken) > 1


@pytest.mark.parametrize("direction", ["greater", "less", "two-sided"])
def test_a_look_has_the_interval_of_its_draws(direction: Direction) -> None:
    """The interval is that of scipy.stats.binomtest, exact method, at one less a sixth of the error."""
    drawn = _kendall_of_four(_plan(500, 5_000), (Fraction(1, 3), Fraction(1, 6), Fraction(23, 24)), direction)
    assert drawn.looks_allowed == 6
    assert 1 - drawn.look_level <= Decimal("0.05") / 6
    for look in drawn.looks:
        other = stats.binomtest(look.hits, look.draws).proportion_ci(1 - 0.05 / 6, method="exact")
        assert (look.low, look.high) == pytest.approx((other.low, other.high), rel=1e-9)


def test_one_look_keeps_the_whole_error() -> None:
    """Without room for more draws, or without anything to be decided, nothing is split."""
    for drawn in (
        _kendall_of_four(_plan(500), (Fraction(1, 3),)),
        _kendall_of_four(_plan(500, 10), (Fraction(1, 3),)),
        _kendall_of_four(_plan(500, 5_000), ()),
    ):
        assert (drawn.looks_allowed, len(drawn.looks), drawn.tails.of) == (1, 1, 500)
        assert drawn.look_level == Decimal("0.95")
        assert drawn.tails.interval("two-sided", Decimal("0.95")) == (drawn.looks[0].low, drawn.looks[0].high)


def test_the_intervals_of_all_looks_together_keep_the_level() -> None:
    """Of 100 runs with up to six looks at a level of 0.8, no more than 20 and a margin miss 1/3 at any look."""
    missed = 0
    for run in range(100):
        drawn = _kendall_of_four(_plan(50, 500, f"level {run}"), (Fraction(1, 3),), level="0.8")
        missed += any(not look.low <= 1 / 3 <= look.high for look in drawn.looks)
    assert missed <= stats.binom(100, 0.2).ppf(0.9999)


def test_the_first_draws_are_the_same_whatever_the_ceiling() -> None:
    """A higher ceiling adds draws and changes none."""
    short, long = (_kendall_of_four(_plan(2_000, most), (Fraction(1, 3),)) for most in (2_000, 40_000))
    assert len(long.looks) > 1
    assert (long.looks[0].draws, long.looks[0].hits) == (short.looks[0].draws, short.looks[0].hits)


def test_a_drawing_of_a_given_stream_is_kept() -> None:
    """Golden values of this program, no reference: equal seeds and addresses give equal draws everywhere."""
    x, y = np.arange(12), _codes([3, 1, 0, 2, 5, 4, 9, 7, 8, 6, 11, 10])
    observed = rho(x, y).numerator // 2
    tails = drawn_null("Spearman rho", x, y, observed=observed, plan=_plan(9_999), question=NO_LEVELS).tails
    assert tails.of == 9_999
    assert (tails.greater, tails.less, tails.two_sided) == (706, 9_293, 1_527)


@pytest.mark.parametrize("name", COEFFICIENTS)
def test_counts_by_numerator_and_tails_are_the_same_draws(name: CoefficientName) -> None:
    """The tails can be counted again from the counts per numerator."""
    rng = np.random.default_rng(8)
    x, y = rng.integers(0, 6, 25), rng.integers(0, 9, 25)
    observed = {"Spearman rho": rho, "Kendall tau-b": tau_b}[name](x, y).numerator
    drawn = drawn_null(name, x, y, observed=observed, plan=_plan(5_000), question=NO_LEVELS)
    statistics, hits, tails = drawn.statistics, drawn.hits, drawn.tails
    assert (np.diff(statistics) > 0).all()
    assert (hits > 0).all()
    assert hits.sum() == tails.of == 5_000
    assert hits[statistics >= observed].sum() == tails.greater
    assert hits[statistics <= observed].sum() == tails.less
    assert hits[np.abs(statistics) >= abs(observed)].sum() == tails.two_sided


def test_more_numerators_than_are_kept_apart_are_counted_with_their_neighbours() -> None:
    """Tails that end at a value that was kept hold the same draws as before, on both sides of 0."""
    rng = np.random.default_rng(4)
    numerators = rng.integers(-3_000_000, 3_000_000, 500_000)
    counted = with_numerators(NOTHING_COUNTED, numerators)
    assert MOST_STATISTICS / 2 < len(counted.statistics) <= MOST_STATISTICS
    assert counted.width > 1
    assert counted.hits.sum() == len(numerators)
    for value in counted.statistics[:: MOST_STATISTICS // 40].tolist():
        if value > 0:
            assert counted.hits[counted.statistics >= value].sum() == (numerators >= value).sum()
        else:
            assert counted.hits[counted.statistics <= value].sum() == (numerators <= value).sum()
    assert np.isin(counted.statistics, numerators).all()


def test_counting_does_not_depend_on_how_draws_come_in() -> None:
    """All at once or in uneven blocks, the same values are kept with the same counts."""
    numerators = np.random.default_rng(5).integers(-3_000_000, 2_000_000, 450_000)
    at_once, in_blocks = with_numerators(NOTHING_COUNTED, numerators), NOTHING_COUNTED
    for block in np.split(numerators, [10, 300_000, 300_001]):
        in_blocks = with_numerators(in_blocks, block)
    assert in_blocks.width == at_once.width
    assert np.array_equal(in_blocks.statistics, at_once.statistics)
    assert np.array_equal(in_blocks.hits, at_once.hits)

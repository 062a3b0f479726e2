"""Drawn permutations: the null when counting all of them would take too long (dwass1957).

The draws are looked at after a first number of them and, while their error leaves open on which side of a level the
p-value lies, again after more: at most six times, the error of the interval split evenly over all looks allowed.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import ROUND_FLOOR, Context, Decimal
from fractions import Fraction
from itertools import accumulate
from typing import Any, Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError
from rankdocket.stats.matrix_product import product
from rankdocket.stats.null import TailCounts
from rankdocket.stats.ranks import SAFE_SUM, Codes, centred_ranks, tie_groups
from rankdocket.stats.tau import concordance_difference
from rankdocket.vocabulary import CoefficientName, Direction

Keys: TypeAlias = npt.NDArray[np.uint32] | npt.NDArray[np.uint64]

KEYS_AT_ONCE: Final = 2**16
"""Random keys held at a time: few enough to stay in a processor's cache."""

NARROW_KEYS: Final = 2**31
"""Up to this n² · 2^(bits of a value) keys have 32 bits: at most every fifth order is then discarded."""

SHORT_ROWS: Final = 250
"""Up to here pairs of rows are compared one by one, many draws at a time in single bytes, faster than by sorting."""

INT8_MOST: Final = 127

MOST_LOOKS: Final = 6
"""Times that the draws are looked at, at most."""

LEVEL_DIGITS: Final = 12
"""Significant digits to which the error of one look is rounded down."""

MOST_STATISTICS: Final = 200_000
"""Numerators kept apart; beyond, neighbours are counted together."""

COUNTED_AT_ONCE: Final = 2**20
"""Numerators held before they are counted: 8 MiB of them."""


@dataclass(frozen=True, slots=True, eq=False)
class DrawingPlan:
    """How many permutations are drawn, and from which stream.

    Attributes
    ----------
    permutations
        Permutations drawn before the first look, 1 or more.
    most_draws
        Ceiling of all looks together; one below ``permutations`` counts as equal to it.
    generator
        The stream; drawing moves it on.
    """

    permutations: int
    most_draws: int
    generator: np.random.Generator


@dataclass(frozen=True, slots=True)
class LookQuestion:
    """What the draws are to decide.

    Attributes
    ----------
    direction
        Which tail the p-value counts.
    confidence_level
        Chance that the intervals of all looks together hold the p-value: above 0, below 1.
    levels
        Everything the p-value may be compared with, each above 0 and below 1; without any, one look is enough.
    """

    direction: Direction
    confidence_level: Decimal
    levels: tuple[Fraction, ...]


@dataclass(frozen=True, slots=True)
class Look:
    """One look at the draws so far.

    Attributes
    ----------
    draws
        Permutations drawn in all.
    hits
        Those at least as extreme as the data, in the direction asked for.
    low, high
        The interval for the p-value (clopper1934), at the level of one look.
    """

    draws: int
    hits: int
    low: float
    high: float

    def leaves_open(self, level: Fraction) -> bool:
        """Return whether the p-value may be above ``level`` and may also not be."""
        return Fraction(self.low) <= level < Fraction(self.high)


@dataclass(frozen=True, slots=True, eq=False)
class DrawnNull:
    """What the draws say.

    Attributes
    ----------
    tails
        Draws at least as extreme as the data, of all that were drawn.
    looks
        The looks taken, one or more; the last one has seen every draw.
    looks_allowed
        Looks over which the error was split, taken or not.
    look_level
        The level of each look's interval.
    undecided
        The levels that the last look leaves open, increasing.
    statistics
        Numerators drawn, increasing, shape (k,), k at most MOST_STATISTICS; of neighbours that are counted together
        the one nearest to 0, so that a tail that ends at one of them is counted to the last draw.
    hits
        Draws that gave them, each above 0, shape (k,).
    """

    tails: TailCounts
    looks: tuple[Look, ...]
    looks_allowed: int
    look_level: Decimal
    undecided: tuple[Fraction, ...]
    statistics: Codes
    hits: Codes


def drawn_null(  # noqa: PLR0913 - the two variables are one thing
    name: CoefficientName, x_codes: Codes, y_codes: Codes, *, observed: int, plan: DrawingPlan, question: LookQuestion
) -> DrawnNull:
    """Return the null of drawn permutations of y, and its tails at the numerator ``observed``.

    Numerators are compared as integers.  The first draws are the same whatever the ceiling, and looking decides only
    whether more are drawn.

    Raises
    ------
    ComputeError
        If there are so many rows that sums of rank products could exceed an int64.
    """
    ends = look_ends(plan.permutations, plan.most_draws if question.levels else plan.permutations)
    level = _level_of_one_look(question.confidence_level, len(ends))
    blocks = _numerators(name, x_codes, y_codes, plan.generator)
    counted = NumeratorCounts(np.zeros(0, dtype=np.int64), np.zeros(0, dtype=np.int64), 1)
    rest = np.zeros(0, dtype=np.int64)
    tails = TailCounts("drawn permutations", 0, 0, 0, 0)
    looks: tuple[Look, ...] = ()
    undecided: tuple[Fraction, ...] = ()
    for end in ends:
        while tails.of < end:
            drawn, rest = _next_draws(blocks, rest, min(end - tails.of, COUNTED_AT_ONCE))
            tails = _with_draws(tails, drawn, observed)
            counted = with_numerators(counted, drawn)
        looks = (*looks, _look(tails, question.direction, level))
        undecided = tuple(sorted({each for each in question.levels if looks[-1].leaves_open(each)}))
        if not undecided:
            break
    return DrawnNull(tails, looks, len(ends), level, undecided, counted.statistics, counted.hits)


def look_ends(first: int, ceiling: int) -> tuple[int, ...]:
    """Return after how many draws in all each look allowed is taken: in equal ratios from ``first`` to ``ceiling``."""
    if ceiling <= first:
        return (first,)
    steps = MOST_LOOKS - 1
    return tuple(sorted({_floor_root(first ** (steps - look) * ceiling**look, steps) for look in range(MOST_LOOKS)}))


def smallest_drawn_p(first: int, ceiling: int, question: LookQuestion) -> Fraction:
    """Return the smallest p that draws can show: that of the look at which no hit at all leaves no level open."""
    ends = look_ends(first, ceiling if question.levels else first)
    level = _level_of_one_look(question.confidence_level, len(ends))
    for end in ends:
        look = _look(TailCounts("drawn permutations", 0, 0, 0, end), question.direction, level)
        if not any(look.leaves_open(each) for each in question.levels):
            break
    return Fraction(1, end + 1)


def drawn_orders(values: Codes, generator: np.random.Generator) -> Iterator[Keys]:
    """Yield without end blocks of ``values`` in random order, shape (rows, n), rows at least 1.

    Every order is equally likely: each value is put below random bits of its own, sorting by these carries the value
    along, and an order in which two of them are equal is discarded.  No step depends on the processor.

    Parameters
    ----------
    values
        Shape (n,), n at least 1, not negative.
    generator
        The stream; one raw 64-bit word, or half of one, is used for each value.
    """
    n = len(values)
    bits = int(values.max()).bit_length()
    kind: type[np.uint32 | np.uint64] = np.uint32 if n**2 << bits <= NARROW_KEYS else np.uint64
    key_bytes = np.dtype(kind).itemsize
    low = kind((1 << bits) - 1)
    carried = values.astype(kind)
    rows = max(1, KEYS_AT_ONCE // (2 * n)) * 2
    while True:
        words = generator.bit_generator.random_raw(rows * n * key_bytes // 8).astype("<u8", copy=False)
        keys: npt.NDArray[Any] = words.view(f"<u{key_bytes}").astype(kind, copy=False).reshape(rows, n)
        np.bitwise_and(keys, ~low, out=keys)
        np.bitwise_or(keys, carried, out=keys)
        keys.sort(axis=1)
        in_line = keys.reshape(-1)
        if bool(((in_line[1:] ^ in_line[:-1]) <= low).any()):
            keys = keys[~((keys[:, 1:] ^ keys[:, :-1]) <= low).any(axis=1)]
        if len(keys):
            yield keys & low


def _numerators(
    name: CoefficientName, x_codes: Codes, y_codes: Codes, generator: np.random.Generator
) -> Iterator[Codes]:
    """Yield without end blocks of numerators, one of each drawn permutation."""
    # Sorted by both, so that the draws meet the same pairs whatever order the rows of the file have.
    order = np.lexsort((y_codes, x_codes))
    x, y = x_codes[order], y_codes[order]
    match name:
        case "Spearman rho":
            return _sums_of_products(centred_ranks(x), centred_ranks(y), generator)
        case "Kendall tau-b":
            dense = np.unique(y, return_inverse=True)[1].reshape(-1).astype(np.int64)
            return _differences(x, drawn_orders(dense, generator))


def _differences(x_sorted: Codes, blocks: Iterator[Keys]) -> Iterator[Codes]:
    """Yield blocks of concordant less discordant pairs."""
    if len(x_sorted) > SHORT_ROWS:
        return (concordance_difference(x_sorted, rows.astype(np.int64)) for rows in blocks)
    sizes = tie_groups(x_sorted).sizes
    return (_sign_sums(sizes, np.ascontiguousarray(rows.T, dtype=np.uint8)) for rows in blocks)


def _sign_sums(sizes: tuple[int, ...], columns: npt.NDArray[np.uint8]) -> Codes:
    """Return, for each column, in how many pairs of rows of different tie groups the later is higher less lower."""
    sums = np.zeros(columns.shape[1], dtype=np.int64)
    for end, size in zip(accumulate(sizes), sizes, strict=True):
        for one in columns[end - size : end]:
            for start in range(end, len(columns), INT8_MOST):
                later = columns[start : start + INT8_MOST]
                sums += np.add.reduce((later > one).view(np.int8), axis=0, dtype=np.int8)
                sums -= np.add.reduce((later < one).view(np.int8), axis=0, dtype=np.int8)
    return sums


def _sums_of_products(x_ranks: Codes, y_ranks: Codes, generator: np.random.Generator) -> Iterator[Codes]:
    """Yield blocks of sums of products; as the centred ranks of x sum to 0, those of y may start at 0."""
    raised = y_ranks - y_ranks.min()
    x_unit, y_unit = (max(1, int(np.gcd.reduce(ranks))) for ranks in (x_ranks, raised))
    x_steps, y_steps = x_ranks // x_unit, raised // y_unit
    largest_sum = int(np.abs(x_steps).sum()) * int(y_steps.max())
    if largest_sum * x_unit * y_unit >= SAFE_SUM:
        raise ComputeError("There are too many rows for drawn permutations in exact integers.")
    # Whole numbers below 2**24 and 2**53 are exact in these floats, and so is every partial sum, in any order.
    kind: npt.DTypeLike = np.float32 if largest_sum < 2**24 else np.float64 if largest_sum < 2**53 else np.int64
    factors = x_steps.astype(kind)
    for rows in drawn_orders(y_steps, generator):
        signed = rows.view(np.int32 if rows.itemsize == 4 else np.int64)
        yield product(signed.astype(kind), factors).astype(np.int64) * (x_unit * y_unit)


def _next_draws(blocks: Iterator[Codes], rest: Codes, number: int) -> tuple[Codes, Codes]:
    """Return the next ``number`` numerators, and what is left over of the last block."""
    parts, missing = [rest], number - len(rest)
    while missing > 0:
        parts.append(next(blocks))
        missing -= len(parts[-1])
    drawn: Codes = np.concatenate(parts)
    return drawn[:number], drawn[number:]


def _with_draws(tails: TailCounts, numerators: Codes, observed: int) -> TailCounts:
    return TailCounts(
        tails.method,
        tails.greater + int(np.count_nonzero(numerators >= observed)),
        tails.less + int(np.count_nonzero(numerators <= observed)),
        tails.two_sided + int(np.count_nonzero(np.abs(numerators) >= abs(observed))),
        tails.of + len(numerators),
    )


def _look(tails: TailCounts, direction: Direction, level: Decimal) -> Look:
    limits = tails.interval(direction, level)
    assert limits is not None
    return Look(tails.of, tails.count(direction), *limits)


def _level_of_one_look(confidence_level: Decimal, looks: int) -> Decimal:
    """Return one less an equal part of the error; the part is rounded down, so that together they keep the level."""
    return 1 - Context(prec=LEVEL_DIGITS, rounding=ROUND_FLOOR).divide(1 - confidence_level, Decimal(looks))


def _floor_root(value: int, degree: int) -> int:
    """Return the largest whole number whose power ``degree`` is at most ``value``, by Newton's steps from above."""
    root = 1 << -(-value.bit_length() // degree)
    while (lower := ((degree - 1) * root + value // root ** (degree - 1)) // degree) < root:
        root = lower
    return root


@dataclass(frozen=True, slots=True, eq=False)
class NumeratorCounts:
    """Draws by numerator: values on the same side of 0 are counted together within steps of ``width``, a power of 2."""

    statistics: Codes
    hits: Codes
    width: int


def with_numerators(counted: NumeratorCounts, numerators: Codes) -> NumeratorCounts:
    """Return the counts with further draws; steps grow until at most MOST_STATISTICS are left.

    The result does not depend on how the draws were divided into blocks.
    """
    values, hits = np.unique(numerators, return_counts=True)
    statistics = np.concatenate([counted.statistics, values])
    together = np.concatenate([counted.hits, hits])
    order = np.argsort(statistics, kind="stable")
    width = counted.width
    grouped = _grouped(statistics[order], together[order], width)
    while len(grouped.statistics) > MOST_STATISTICS:
        width *= 2
        grouped = _grouped(grouped.statistics, grouped.hits, width)
    return grouped


def _grouped(statistics: Codes, hits: Codes, width: int) -> NumeratorCounts:
    """Return increasing statistics with those of one step counted together under the one nearest to 0."""
    steps = np.where(statistics >= 0, statistics // width, -1 - (-statistics) // width)
    starts = np.flatnonzero(np.concatenate([[True], steps[1:] != steps[:-1]]))
    ends = np.concatenate([starts[1:], [len(steps)]]) - 1
    nearest = np.where(statistics[starts] >= 0, starts, ends)
    return NumeratorCounts(statistics[nearest], np.add.reduceat(hits, starts), width)

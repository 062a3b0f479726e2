"""What a null is: the distribution of the numerator when the rows of x and y are unrelated, as counts."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import factorial
from types import MappingProxyType
from typing import Final, Literal, TypeAlias, TypeVar

import numpy as np
from scipy.special import betaincinv

from rankdocket.errors import ComputeError
from rankdocket.references import Description
from rankdocket.stats.ranks import Codes
from rankdocket.vocabulary import Direction

NullMethod: TypeAlias = Literal[
    "exact, no ties",
    "exact, conditional on the ties",
    "exact algorithm, 12 digits",
    "Edgeworth series",
    "saddlepoint",
    "drawn permutations",
]
"""Where a p-value comes from; only the first two are counts of all orderings in whole numbers."""

NULL_DESCRIPTIONS: Final[Mapping[NullMethod, Description]] = MappingProxyType(
    {
        "exact, no ties": Description(
            "For {associations} the p-value was exact: every order in which the values of one variable can stand beside "
            "those of the other was counted.",
            ("kendall1939", "vandewiel2001"),
        ),
        "exact, conditional on the ties": Description(
            "For {associations} the p-value was exact, given the ties as they were observed: every order in which the "
            "values of one variable can stand beside those of the other was counted.",
            ("kendall1945", "vandewiel2001"),
        ),
        "exact algorithm, 12 digits": Description(
            "For {associations} every order was accounted for, given the ties as they were observed, in floating-point "
            "numbers that are only ever added: the p-value is exact to {digits} digits and is not stated as a count.",
            ("kendall1945", "vandewiel2001"),
        ),
        "Edgeworth series": Description(
            "For {associations} there are no ties and more than {rows} rows, beyond which orders were not counted. The "
            "p-value was taken from the Edgeworth series with exact cumulants to the fifth power of one over n, corrected "
            "for the steps of the coefficient by half a step. Its error is stated beside it: for one side at most "
            "{absolute}, for two sides twice that, and never more than {relative} of a p-value of {least} or more. These "
            "are the largest errors found over all attainable values with up to {rows} rows, against exact counts; for "
            "more rows these bounds are extrapolated.",
            ("david1951",),
        ),
        "saddlepoint": Description(
            "For {associations} there are no ties, more than {rows} rows, and a p-value below {least}, where a series is "
            "no longer good: it was taken from a saddlepoint approximation. Its error is stated beside it: at most "
            "{relative} of a p-value of {near} or more and {far} of one of {farthest} or more; further out the value tells "
            "the order of size only. These are the largest errors found with up to {rows} rows, where every value was too "
            "small; for more rows these bounds are extrapolated.",
            ("lugannani1980", "mccullagh2014"),
        ),
        "drawn permutations": Description(
            "For {associations} the p-value was taken from permutations drawn at random from seed {seed}, {draws} to "
            "begin with: permutations at least as extreme as the data, the data themselves counted as one more, over all "
            "drawn permutations and the data.",
            ("dwass1957", "phipson2010"),
        ),
    }
)
"""How each null says what it did."""

TWO_SIDED: Final = Description(
    "The two-sided p-value counted the orders in which the coefficient was at least as far from zero as in the data, "
    "on either side; both tails are given beside it.",
    ("gibbons1975",),
)

MONTE_CARLO_INTERVAL: Final = Description(
    "The error of drawing was described by an interval for the p-value with level {level}, from the number of drawn "
    "permutations at least as extreme as the data.",
    ("clopper1934",),
)


MONTE_CARLO_LOOKS: Final = Description(
    "While the interval for a drawn p-value held a level that it may be compared with, more were drawn, up to {most} in "
    "all and {looks} looks; the error of the intervals, {level} for all looks together, was divided evenly among the "
    "looks allowed.",
    ("clopper1934",),
)


Answer = TypeVar("Answer")


def toward(direction: Direction, *, greater: Answer, less: Answer, two_sided: Answer) -> Answer:
    """Return what belongs to ``direction``."""
    match direction:
        case "greater":
            return greater
        case "less":
            return less
        case "two-sided":
            return two_sided


@dataclass(frozen=True, slots=True)
class TailCounts:
    """How many permutations are at least as extreme as the data.

    Attributes
    ----------
    method
        Where the counts come from.
    greater, less
        Permutations with a numerator at least, at most, as large as observed.
    two_sided
        Permutations with a numerator at least as far from 0 as observed.
    of
        n! for an exact null; the permutations drawn otherwise.
    """

    method: NullMethod
    greater: int
    less: int
    two_sided: int
    of: int

    @property
    def is_exact(self) -> bool:
        """Whether every permutation was counted."""
        return self.method != "drawn permutations"

    def count(self, direction: Direction) -> int:
        """Return the permutations at least as extreme in ``direction``."""
        return toward(direction, greater=self.greater, less=self.less, two_sided=self.two_sided)

    def p(self, direction: Direction) -> Fraction:
        """Return the p-value, above 0 to 1: the exact share, or (b + 1)/(B + 1) when drawn (phipson2010)."""
        if self.is_exact:
            return Fraction(self.count(direction), self.of)
        return Fraction(self.count(direction) + 1, self.of + 1)

    @property
    def doubled(self) -> Fraction:
        """Twice the smaller tail, at most 1: the other two-sided convention (gibbons1975)."""
        return min(Fraction(1), 2 * min(self.p("greater"), self.p("less")))

    def interval(self, direction: Direction, level: Decimal) -> tuple[float, float] | None:
        """Return the interval of b out of B for the p-value (clopper1934), or ``None`` for an exact null.

        Parameters
        ----------
        direction
            Which count is meant.
        level
            Above 0, below 1.
        """
        if self.is_exact:
            return None
        hits, tail = self.count(direction), float((1 - level) / 2)
        low = float(betaincinv(hits, self.of - hits + 1, tail)) if hits > 0 else 0.0
        high = float(betaincinv(hits + 1, self.of - hits, 1 - tail)) if hits < self.of else 1.0
        return low, high


@dataclass(frozen=True, slots=True)
class Share:
    """A share of all n! permutations that was computed without counting them one and all in whole numbers.

    Attributes
    ----------
    value
        Above 0 to 1: the computed double at its exact worth.
    error
        Not negative: the true share lies within ``value`` ± ``error``, by the statement of its method.
    """

    value: Fraction
    error: Fraction


@dataclass(frozen=True, slots=True)
class TailShares:
    """Tails that are known as shares with a stated error.

    Attributes
    ----------
    method
        Where the shares come from.
    greater, less, two_sided
        Shares of permutations with a numerator at least as large, at most as large, at least as far from 0.
    """

    method: NullMethod
    greater: Share
    less: Share
    two_sided: Share

    def share(self, direction: Direction) -> Share:
        """Return the share of the permutations at least as extreme in ``direction``."""
        return toward(direction, greater=self.greater, less=self.less, two_sided=self.two_sided)

    def p(self, direction: Direction) -> Fraction:
        """Return the p-value, above 0 to 1."""
        return self.share(direction).value

    @property
    def is_exact(self) -> bool:
        """Whether every permutation was counted in whole numbers: no."""
        return False

    @property
    def doubled(self) -> Fraction:
        """Twice the smaller tail, at most 1: the other two-sided convention (gibbons1975)."""
        return min(Fraction(1), 2 * min(self.p("greater"), self.p("less")))


Tails: TypeAlias = TailCounts | TailShares
"""Tails as counts where permutations were counted or drawn, as shares otherwise."""


@dataclass(frozen=True, slots=True, eq=False)
class ExactNull:
    """A whole null distribution.

    Attributes
    ----------
    statistics
        The values of the numerator that occur, increasing, shape (k,).
    counts
        Permutations that give each of them; they sum to ``of``.
    of
        n!.
    """

    method: NullMethod
    statistics: Codes
    counts: tuple[int, ...]
    of: int

    def __post_init__(self) -> None:
        if sum(self.counts) != self.of or len(self.counts) != len(self.statistics):
            raise ComputeError("The counts of a null do not sum to the number of permutations.")

    def tails(self, observed: int) -> TailCounts:
        """Return the tails at the numerator ``observed``; all comparisons are between integers."""
        greater = less = two_sided = 0
        for statistic, count in zip(self.statistics.tolist(), self.counts, strict=True):
            if statistic >= observed:
                greater += count
            if statistic <= observed:
                less += count
            if abs(statistic) >= abs(observed):
                two_sided += count
        return TailCounts(self.method, greater, less, two_sided, self.of)


def exact_null(n: int, arrangements: dict[int, int], has_ties: bool) -> ExactNull:
    """Return the null of ``n`` rows from distinct arrangements per numerator.

    Parameters
    ----------
    n
        Rows.
    arrangements
        Numerator → distinct arrangements; each stands for equally many of the n! permutations.
    has_ties
        Whether a variable has ties; it decides the name only.
    """
    of = factorial(n)
    each, rest = divmod(of, sum(arrangements.values()))
    if rest:
        raise ComputeError("The arrangements of a null do not divide the number of permutations.")
    statistics = sorted(statistic for statistic, count in arrangements.items() if count)
    return ExactNull(
        "exact, conditional on the ties" if has_ties else "exact, no ties",
        np.asarray(statistics, dtype=np.int64),
        tuple(arrangements[statistic] * each for statistic in statistics),
        of,
    )

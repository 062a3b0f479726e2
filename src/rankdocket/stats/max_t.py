"""One variable against many: p-values adjusted together through the largest coefficient of each permutation.

The ranks of one variable are permuted against the unmoved table of the others’ ranks, so that whatever holds among the
others holds in every permutation (westfall1993, ge2003).  Coefficients of different pairs are compared without roots:
for each two pairs the smallest whole numerator of the one that is as extreme as the other’s observed coefficient is
found once, and permutations are held against these whole numbers.
"""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from itertools import accumulate, permutations
from math import factorial, isqrt
from types import MappingProxyType
from typing import Final, Literal, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError
from rankdocket.references import Description
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.matrix_product import product
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.nulls.monte_carlo import drawn_orders
from rankdocket.stats.ranks import Codes, centred_ranks, doubled_midranks
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import Direction

MaxTMethod: TypeAlias = Literal["all permutations", "drawn permutations"]

COUNTED_MOST_ROWS: Final = 8
"""Rows up to which all permutations can be gone through: 40320 of them."""

EXACT_DOUBLES: Final = 2**53
"""Whole numbers below it are exact as doubles, and so are their sums in any order."""

MAX_T_DESCRIPTIONS: Final[Mapping[MaxTMethod, Description]] = MappingProxyType(
    {
        "all permutations": Description(
            "The p-values of the {family} associations of {variable} were adjusted together by the step-down rule of "
            "Westfall and Young: in every order of the ranks of {variable} against the ranks of the others, which stayed "
            "together row by row, the largest coefficient among an association and all less extreme ones was held "
            "against the observed one. The chance of any false finding is kept at or below alpha if {variable} is "
            "independent of all variables of true nulls taken together, so that their joint null does not depend on "
            "the other associations (subset pivotality).",
            ("westfall1993", "ge2003"),
        ),
        "drawn permutations": Description(
            "The p-values of the {family} associations of {variable} were adjusted together by the step-down rule of "
            "Westfall and Young: the ranks of {variable} were put in random order {draws} times, from seed {seed}, "
            "against the ranks of the others, which stayed together row by row, and the largest coefficient among an "
            "association and all less extreme ones was held against the observed one, the data counted as one more "
            "permutation. The chance of any false finding is kept at or below alpha if {variable} is independent of all "
            "variables of true nulls taken together, so that their joint null does not depend on the other associations "
            "(subset pivotality).",
            ("westfall1993", "ge2003", "phipson2010"),
        ),
    }
)
"""How the rule says what it did, and the condition it needs."""


@dataclass(frozen=True, slots=True, eq=False)
class MaxTQuestion:
    """One variable and those it is associated with, over the rows that are complete in all of them.

    Attributes
    ----------
    x_codes
        Shape (n,).
    other_codes
        One or more arrays of shape (n,), in the order of the answer.
    direction
        Which coefficients are extreme; the same for the whole family.
    held_back
        Places of others whose own answer is not given: they stand last and in every maximum, so that they never lower
        the adjusted p-value of another.

    Raises
    ------
    ValueError
        If there is no other variable or the lengths differ.
    """

    x_codes: Codes
    other_codes: tuple[Codes, ...]
    direction: Direction
    held_back: frozenset[int] = frozenset()

    def __post_init__(self) -> None:
        if not self.other_codes:
            raise ValueError("a family needs at least one other variable")
        if any(len(codes) != len(self.x_codes) for codes in self.other_codes):
            raise ValueError("the variables do not have equally many rows: use those that are complete in all of them")


@dataclass(frozen=True, slots=True)
class MaxT:
    """The answer, each tuple in the order of the other variables.

    Attributes
    ----------
    coefficients
        Spearman rho with each of the others.
    own_hits
        Permutations in which the pair’s own coefficient was at least as extreme as observed; ``None`` where it is
        undefined because that variable does not vary, or held back.
    hits
        Permutations in which the largest among the pair and all less extreme ones was, made monotone by stepping down
        from the most extreme pair; ``None`` as above.
    of
        n! or the permutations drawn.
    """

    method: MaxTMethod
    direction: Direction
    coefficients: tuple[Coefficient, ...]
    own_hits: tuple[int | None, ...]
    hits: tuple[int | None, ...]
    of: int

    @property
    def p(self) -> tuple[Fraction | None, ...]:
        """The p-value of each pair alone, above 0 to 1; ``None`` where the coefficient is undefined."""
        return tuple(self._share(hits) for hits in self.own_hits)

    @property
    def adjusted_p(self) -> tuple[Fraction | None, ...]:
        """The adjusted p-values, above 0 to 1; ``None`` where the coefficient is undefined."""
        return tuple(self._share(hits) for hits in self.hits)

    def _share(self, hits: int | None) -> Fraction | None:
        """Return the exact share, or (b + 1)/(B + 1) when drawn (phipson2010)."""
        if hits is None:
            return None
        return Fraction(hits, self.of) if self.method == "all permutations" else Fraction(hits + 1, self.of + 1)


def counted_max_t(question: MaxTQuestion) -> MaxT | NoAnswer:
    """Return the adjusted p-values over all n! permutations (westfall1993).

    Raises
    ------
    ValueError
        If there are more than COUNTED_MOST_ROWS rows.
    """
    n = len(question.x_codes)
    if n > COUNTED_MOST_ROWS:
        raise ValueError(f"all permutations are gone through for at most {COUNTED_MOST_ROWS} rows, not {n}")
    laid_out = _laid_out(question)
    if isinstance(laid_out, NoAnswer):
        return laid_out
    orders = np.array(list(permutations(laid_out.x_steps.tolist())), dtype=np.int64)
    return _answer("all permutations", question, laid_out, _counted(laid_out, (orders,)))


def drawn_max_t(question: MaxTQuestion, draws: int, generator: np.random.Generator) -> MaxT | NoAnswer:
    """Return the adjusted p-values from drawn permutations, the data counted as one more (westfall1993, phipson2010).

    The order of the rows changes nothing; the draws depend on the order of the other variables only where rows tie.

    Parameters
    ----------
    question
        The variables and which coefficients are extreme.
    draws
        1 or more.
    generator
        The stream; drawing moves it on.

    Raises
    ------
    ValueError
        If ``draws`` is below 1.
    ComputeError
        If there are so many rows that sums of rank products could be rounded.
    """
    if draws < 1:
        raise ValueError(f"at least one permutation must be drawn, not {draws}")
    laid_out = _laid_out(question)
    if isinstance(laid_out, NoAnswer):
        return laid_out
    blocks = _first(drawn_orders(laid_out.x_steps, generator), draws)
    return _answer("drawn permutations", question, laid_out, _counted(laid_out, blocks))


@dataclass(frozen=True, slots=True, eq=False)
class _LaidOut:
    """The question made ready.

    Attributes
    ----------
    places
        Places of the k pairs with a coefficient among the others, the most extreme pair first.
    coefficients
        Of all pairs, in the order of the others.
    x_steps
        Doubled midranks of x less the smallest, shape (n,), not negative.
    columns
        Doubled centred midranks of the others, shape (n, k), most extreme pair first; turned round for "less".
    thresholds
        For the pair at place j of ``places``, shape (j + 1,), increasing: the smallest numerators that are as extreme as
        the observed coefficient of pair j, j − 1, …, 0.
    both_sides
        Whether numerators far below 0 are extreme too.
    """

    places: tuple[int, ...]
    coefficients: tuple[Coefficient, ...]
    x_steps: Codes
    columns: npt.NDArray[np.float64]
    thresholds: tuple[Codes, ...]
    both_sides: bool


@dataclass(frozen=True, slots=True)
class _Counts:
    """Counts by place in the order of extremeness."""

    own: tuple[int, ...]
    largest: tuple[int, ...]
    of: int


def _laid_out(question: MaxTQuestion) -> _LaidOut | NoAnswer:
    # Rows in an order of their own values, so that the draws meet the same rows whatever order the file has.
    order = np.lexsort((*reversed(question.other_codes), question.x_codes))
    x, others = question.x_codes[order], tuple(codes[order] for codes in question.other_codes)
    coefficients = tuple(rho(x, codes) for codes in others)
    if coefficients[0].x_square == 0:
        return NoAnswer("nothing can be adjusted because the variable itself does not vary")
    defined = [place for place, coefficient in enumerate(coefficients) if coefficient.is_defined]
    if not defined:
        return NoAnswer("nothing can be adjusted because none of the other variables varies")
    sign = -1 if question.direction == "less" else 1
    both_sides = question.direction == "two-sided"
    numerators = [
        _least(each, both_sides=both_sides)
        if place in question.held_back
        else abs(each.numerator)
        if both_sides
        else sign * each.numerator
        for place, each in enumerate(coefficients)
    ]
    places = sorted(
        defined,
        key=lambda place: Fraction(numerators[place] * abs(numerators[place]), coefficients[place].y_square),
        reverse=True,
    )
    doubled = doubled_midranks(x)
    columns = np.column_stack([sign * centred_ranks(others[place]) for place in places])
    x_steps = doubled - doubled.min()
    if int(x_steps.max()) * int(np.abs(columns).sum(axis=0).max()) >= EXACT_DOUBLES:
        raise ComputeError("There are too many rows for permutations in exact numbers.")
    thresholds = tuple(
        np.array(
            [
                _threshold(numerators[other], coefficients[other].y_square, coefficients[place].y_square)
                for other in reversed(places[: rank + 1])
            ],
            dtype=np.int64,
        )
        for rank, place in enumerate(places)
    )
    return _LaidOut(tuple(places), coefficients, x_steps, columns.astype(np.float64), thresholds, both_sides)


def _least(coefficient: Coefficient, *, both_sides: bool) -> int:
    """Return a numerator that every permutation reaches."""
    return 0 if both_sides else -isqrt(coefficient.x_square * coefficient.y_square)


def _threshold(numerator: int, its_square: int, square: int) -> int:
    """Return the smallest whole t with t/√square ≥ numerator/√its_square; x’s own square stands on both sides."""
    if numerator > 0:
        return isqrt(-(-(numerator**2) * square // its_square) - 1) + 1
    return -isqrt(numerator**2 * square // its_square)


def _first(blocks: Iterator[npt.NDArray[np.uint32] | npt.NDArray[np.uint64]], rows: int) -> Iterator[Codes]:
    """Yield blocks until they hold ``rows`` rows, the last one cut."""
    missing = rows
    while missing > 0:
        block = next(blocks)[:missing]
        missing -= len(block)
        yield block.astype(np.int64)


def _counted(laid_out: _LaidOut, blocks: Iterable[Codes]) -> _Counts:
    """Return in how many permutations each pair, and the largest from it on, is as extreme as observed.

    Going from the least extreme pair up, ``reached`` is for each permutation the most extreme place whose observed
    coefficient is reached by a pair seen so far; all places below that one are reached too.
    """
    family = len(laid_out.places)
    own, largest, of = [0] * family, [0] * family, 0
    for orders in blocks:
        sums = product(orders.astype(np.float64), laid_out.columns).astype(np.int64)
        numerators = np.abs(sums) if laid_out.both_sides else sums
        reached = np.full(len(orders), family, dtype=np.int64)
        for place in range(family - 1, -1, -1):
            passed = np.searchsorted(laid_out.thresholds[place], numerators[:, place], side="right")
            reached = np.minimum(reached, place + 1 - passed)
            own[place] += int(np.count_nonzero(passed))
            largest[place] += int(np.count_nonzero(reached <= place))
        of += len(orders)
    return _Counts(tuple(own), tuple(largest), of)


def _answer(method: MaxTMethod, question: MaxTQuestion, laid_out: _LaidOut, counts: _Counts) -> MaxT:
    if method == "all permutations" and counts.of != factorial(len(question.x_codes)):
        raise ComputeError("The permutations gone through are not all there are.")
    own = dict(zip(laid_out.places, counts.own, strict=True))
    stepped = dict(zip(laid_out.places, accumulate(counts.largest, max), strict=True))
    members = [-1 if place in question.held_back else place for place in range(len(laid_out.coefficients))]
    return MaxT(
        method,
        question.direction,
        laid_out.coefficients,
        tuple(own.get(place) for place in members),
        tuple(stepped.get(place) for place in members),
        counts.of,
    )

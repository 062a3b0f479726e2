"""The permutation test of rho = 0 for variables that may depend on each other in other ways.

A permutation test of rho itself is one of independence.  Divided by a standard error that holds under dependence too, the
statistic has the same law, in many rows, whether the rows are independent or only uncorrelated in rank (diciccio2017).
The standard error here is that of the influence values, carried to the z scale; the published form for ranks
(yu2024) leaves out what ranking itself adds.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from math import isqrt
from typing import Final

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError
from rankdocket.references import Description
from rankdocket.stats.all_orders import MOST_ENUMERATED, all_orders, enumerated_method
from rankdocket.stats.joint_counts import Standing, standing
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.null import NullMethod, TailCounts
from rankdocket.stats.nulls.monte_carlo import drawn_orders
from rankdocket.stats.ranks import SAFE_SUM, Codes, exact_dot
from rankdocket.stats.rho import rho

Floats = npt.NDArray[np.float64]

STUDENTISED: Final = Description(
    "Whether rho is zero, the variables being free to depend on each other in other ways, was tested by permutations of "
    "rho on the inverse hyperbolic tangent scale over its standard error from influence values; to {enumerated} rows all "
    "permutations were gone through, above {draws} were drawn from the seed of the plan, the data themselves counted as one "
    "more. The test is exact under independence of the rows and holds approximately when only rho is zero.",
    ("diciccio2017", "yu2024", "croux2010", "phipson2010"),
)

FEWEST_ROWS: Final = 4
"""Three rows without ties have one and the same standard error in every order that is not perfect."""

SAME: Final = 1e-10
"""Statistics nearer to each other than this share of their size count as equal: orders that must give one value may
differ by the rounding of their sums, and an equal one counts against the data."""


@dataclass(frozen=True, slots=True)
class StudentisedTest:
    """The studentised permutation test of rho = 0.

    Attributes
    ----------
    statistic
        atanh(r)·(1 − r²)/SE; ``None`` when it is infinite, as at |rho| = 1.
    standard_error
        √(Σψ²)/n of the influence values, on the scale of rho.
    tails
        Permutations, all or drawn, with a statistic at least as large, as small, as far from 0; drawn, p is
        (b + 1)/(B + 1).
    """

    statistic: float | None
    standard_error: float
    tails: TailCounts


def studentised_test(
    x_codes: Codes, y_codes: Codes, *, draws: int, generator: np.random.Generator
) -> StudentisedTest | NoAnswer:
    """Return the studentised permutation test of rho = 0, or why there is none.

    Parameters
    ----------
    x_codes, y_codes
        Shape (n,).
    draws
        Permutations to draw, 1 or more.
    generator
        The stream; drawing moves it on.

    Raises
    ------
    ValueError
        If ``draws`` is less than 1.
    ComputeError
        If the sums could exceed an int64.
    """
    if draws < 1:
        raise ValueError(f"at least one permutation must be drawn, not {draws}")
    obstacle = _obstacle(x_codes, y_codes)
    if obstacle is not None:
        return obstacle
    return _against(x_codes, y_codes, "drawn permutations", _blocks(len(x_codes), draws, generator))


def studentised_of_all_orders(x_codes: Codes, y_codes: Codes) -> StudentisedTest | NoAnswer:
    """Return the studentised test against every permutation, for up to MOST_ENUMERATED rows, or why there is none.

    Two statistics that lie nearer to each other than SAME count as equal; the tails are exact but for that.
    """
    n = len(x_codes)
    if n > MOST_ENUMERATED:
        return NoAnswer("there are too many rows to go through all orders")
    obstacle = _obstacle(x_codes, y_codes)
    if obstacle is not None:
        return obstacle
    has_ties = min(len(np.unique(codes)) for codes in (x_codes, y_codes)) < n
    return _against(x_codes, y_codes, enumerated_method(has_ties=has_ties), iter((all_orders(n),)))


def _obstacle(x_codes: Codes, y_codes: Codes) -> NoAnswer | None:
    if not rho(x_codes, y_codes).is_defined:
        return NoAnswer("a variable does not vary")
    if len(x_codes) < FEWEST_ROWS:
        return NoAnswer("the test needs four or more complete rows")
    return None


def _against(x_codes: Codes, y_codes: Codes, method: NullMethod, blocks: Iterator[Codes]) -> StudentisedTest:
    """Return the test against the orders of y in ``blocks``."""
    # Sorted by both, so that the orders meet the same pairs whatever order the rows of the file have.
    order = np.lexsort((y_codes, x_codes))
    fixed = _Fixed.of(x_codes[order], np.sort(y_codes))
    place = np.empty(len(order), dtype=np.int64)
    place[np.argsort(y_codes[order], kind="stable")] = np.arange(len(order))
    observed, errors = fixed.statistics(place[np.newaxis, :])
    statistic, error = float(observed[0]), float(errors[0])
    near = abs(statistic) * (1 - SAME)
    greater = less = two_sided = of = 0
    for rows in blocks:
        found, _ = fixed.statistics(rows)
        greater += int(np.count_nonzero(found >= (near if statistic > 0 else statistic * (1 + SAME))))
        less += int(np.count_nonzero(found <= (-near if statistic < 0 else statistic * (1 + SAME))))
        two_sided += int(np.count_nonzero(np.abs(found) >= near))
        of += len(rows)
    tails = TailCounts(method, greater, less, two_sided, of)
    return StudentisedTest(None if np.isinf(statistic) else statistic, error, tails)


@dataclass(frozen=True, slots=True, eq=False)
class _Fixed:
    """What no permutation changes.

    Attributes
    ----------
    x, y
        Standing of the sorted columns.
    x_part, y_part
        What each variable alone adds to the influence values, shape (n,), by place in its own order.
    x_square, y_square
        Sums of squares of the doubled centred midranks.
    """

    x: Standing
    y: Standing
    x_part: Floats
    y_part: Floats
    x_square: int
    y_square: int

    @classmethod
    def of(cls, x_sorted: Codes, y_sorted: Codes) -> "_Fixed":
        x, y = standing(x_sorted), standing(y_sorted)
        squares = [exact_dot(each.centred, each.centred) for each in (x, y)]
        if len(x_sorted) * max(squares) >= SAFE_SUM:
            raise ComputeError("The ranks are too large for exact sums: there are too many rows.")
        parts = [
            (each.centred**2 - 2 * each.balance(each.centred)) / square
            for each, square in zip((x, y), squares, strict=True)
        ]
        return cls(x, y, parts[0], parts[1], squares[0], squares[1])

    def statistics(self, places: Codes) -> tuple[Floats, Floats]:
        """Return statistics and standard errors, shape (rows,).

        Parameters
        ----------
        places
            Shape (rows, n): for each place in the order of x the place in the order of y that stands beside it.
        """
        a, b = self.x.centred, self.y.centred[places]
        beside = np.empty_like(b)
        np.put_along_axis(beside, places, np.broadcast_to(a, b.shape), axis=1)
        y_balance = np.take_along_axis(_balances(beside, self.y), places, axis=1)
        numerators = b @ a
        root = np.sqrt(float(self.x_square) * float(self.y_square))
        r = numerators / root
        influence = (a * b - _balances(b, self.x) - y_balance) / root
        influence -= (r / 2)[:, np.newaxis] * (self.x_part + self.y_part[places])
        errors = np.sqrt(np.sum(influence**2, axis=1))
        perfect = np.abs(numerators) == self._numerator_of_one
        # A standard error of 0 away from rho = 0 leaves the statistic without bound; at rho = 0 it is 0 all the same.
        without_bound = perfect | ((errors == 0) & (numerators != 0))
        inner = np.where(without_bound, 0.0, r)
        statistics = np.arctanh(inner) * (1 - inner**2) / np.where(errors > 0, errors, 1.0)
        found: Floats = np.where(without_bound, np.copysign(np.inf, r), statistics)
        return found, np.where(perfect, 0.0, errors)

    @property
    def _numerator_of_one(self) -> int:
        """The numerator at rho = 1; −1 when the ties allow no such order."""
        root = isqrt(self.x_square * self.y_square)
        return root if root**2 == self.x_square * self.y_square else -1


def _balances(values: Codes, own: Standing) -> Codes:
    """Return for each row of ``values`` what :meth:`Standing.balance` returns, the columns being in order."""
    sums = np.zeros((values.shape[0], values.shape[1] + 1), dtype=np.int64)
    np.cumsum(values, axis=1, out=sums[:, 1:])
    balances: Codes = sums[:, own.below] + sums[:, own.upto] - sums[:, -1:]
    return balances


def _blocks(n: int, draws: int, generator: np.random.Generator) -> Iterator[Codes]:
    """Yield blocks of random orders of 0 … n − 1, ``draws`` in all."""
    missing = draws
    for keys in drawn_orders(np.arange(n, dtype=np.int64), generator):
        rows = keys[:missing].astype(np.int64)
        yield rows
        missing -= len(rows)
        if missing == 0:
            return

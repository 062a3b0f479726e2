"""Rank correlation of two variables with others held fixed: the partial correlation of midranks."""

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import sqrt
from typing import Final

from scipy.special import betainc

from rankdocket.references import Description
from rankdocket.stats.coefficient import FILED_DIGITS, FLOAT_DIGITS, Coefficient, root_ratio_text
from rankdocket.stats.exact_values import Given, equally_long, exact_codes
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes, centred_ranks, exact_dot
from rankdocket.stats.rho import rho
from rankdocket.vocabulary import Direction

PARTIAL_RHO: Final = Description(
    "The partial rank correlation was computed as the correlation of the parts of the midranks that were left after "
    "linear regression on the midranks of the variables held fixed, all ranked among the rows complete for all of "
    "them; its p-value is approximate, from Student’s t with as many degrees of freedom as complete rows less two and "
    "less the variables held fixed, and does not test conditional independence in general.",
    ("kendall1942", "korn1984"),
)


@dataclass(frozen=True, slots=True)
class PartialRho:
    """A partial rank correlation: ``numerator / √(x_square · y_square)``.

    Attributes
    ----------
    n
        Complete rows, the same for all variables.
    controls
        Variables held fixed.
    numerator, x_square, y_square
        Integers: sum of products and sums of squares of what the controls leave of the midranks, times one factor
        common to the three.
    plain
        Spearman rho of the same rows, nothing held fixed.
    """

    n: int
    controls: int
    numerator: int
    x_square: int
    y_square: int
    plain: Coefficient

    @property
    def value(self) -> float:
        """The partial correlation, −1 to 1, as the nearest double."""
        return float(self.decimal_text(FLOAT_DIGITS))

    def decimal_text(self, digits: int = FILED_DIGITS) -> str:
        """Return the partial correlation with ``digits`` significant digits, half to even, from the integers."""
        return root_ratio_text(Fraction(self.numerator), Fraction(self.x_square * self.y_square), digits)

    @property
    def df(self) -> int:
        """Degrees of freedom of the t approximation: n − 2 − controls, at least 1."""
        return self.n - 2 - self.controls

    @property
    def t(self) -> float | None:
        """The statistic r√(df/(1 − r²)); ``None`` at ±1, where it exceeds every bound."""
        if self._unexplained == 0:
            return None
        return self.value * sqrt(self.df / float(self._unexplained))

    def p(self, direction: Direction) -> float:
        """Return the approximate p-value of the t value, 0 to 1."""
        both_tails = float(betainc(self.df / 2, 0.5, float(self._unexplained)))
        if direction == "two-sided":
            return both_tails
        if (self.numerator > 0) == (direction == "greater"):
            return both_tails / 2
        return 1 - both_tails / 2

    @property
    def _unexplained(self) -> Fraction:
        square = self.x_square * self.y_square
        return Fraction(square - self.numerator**2, square)


def partial_spearman(
    x: Sequence[Given], y: Sequence[Given], *, controls: Sequence[Sequence[Given]]
) -> PartialRho | NoAnswer:
    """Return the partial rank correlation of two sequences given others; see :func:`partial_rho`.

    Raises
    ------
    ValueError
        If the sequences differ in length, or hold anything but finite numbers.
    """
    return partial_rho(exact_codes(x), exact_codes(y), tuple(exact_codes(control) for control in controls))


def partial_rho(x_codes: Codes, y_codes: Codes, controls: tuple[Codes, ...]) -> PartialRho | NoAnswer:
    """Return the partial rank correlation of x and y given the controls, or why there is none (kendall1942).

    The midranks of the controls are eliminated from the integer matrix of sums of products without a division that
    leaves a remainder (bareiss1968): a control that follows from the others is found exactly, and nothing is lost
    however close it comes.

    Raises
    ------
    ValueError
        If the columns differ in length.
    """
    n = equally_long(x_codes, y_codes, *controls)
    plain = rho(x_codes, y_codes)
    if not plain.is_defined:
        return NoAnswer("a variable does not vary")
    if n - 2 - len(controls) < 1:
        return NoAnswer("the variables held fixed leave no degree of freedom in so few complete rows")
    columns = [centred_ranks(codes) for codes in (*controls, x_codes, y_codes)]
    if not all(column.any() for column in columns[: len(controls)]):
        return NoAnswer("a variable held fixed does not vary")
    left = _eliminated([[exact_dot(one, other) for other in columns] for one in columns], len(controls))
    if isinstance(left, NoAnswer):
        return left
    (x_square, numerator), (_, y_square) = left
    if x_square == 0 or y_square == 0:
        return NoAnswer("the ranks of a variable follow entirely from those of the variables held fixed")
    return PartialRho(n, len(controls), numerator, x_square, y_square, plain)


def _eliminated(products: list[list[int]], steps: int) -> list[list[int]] | NoAnswer:
    """Return what the first ``steps`` columns leave of the rest of a matrix of sums of products, times one factor."""
    before = 1
    for _ in range(steps):
        (pivot, *row), *rest = products
        # Sums of products are never negative on the diagonal; a pivot of 0 is a column that the former ones make up.
        if pivot == 0:
            return NoAnswer("the ranks of a variable held fixed follow from those of the variables before it")
        products = [
            [(own * pivot - first * above) // before for own, above in zip(others, row, strict=True)]
            for first, *others in rest
        ]
        before = pivot
    return products

"""How far a coefficient moves when one row is left out."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from types import MappingProxyType
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.exact_values import equally_long
from rankdocket.stats.influence import WithoutEach, rho_without_each, tau_without_each
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes
from rankdocket.vocabulary import CoefficientName

LEAVE_ONE_OUT: Final = Description(
    "The coefficient was computed anew, the remaining rows ranked anew, with each complete row left out in turn.",
    ("devlin1975", "croux2010"),
)


_WITHOUT_EACH: Final[Mapping[CoefficientName, Callable[[Codes, Codes], WithoutEach]]] = MappingProxyType(
    {"Spearman rho": rho_without_each, "Kendall tau-b": tau_without_each}
)


@dataclass(frozen=True, slots=True)
class RowLeftOut:
    """A coefficient without one row.

    Attributes
    ----------
    row
        Place of the row among the complete rows, from 0.
    coefficient
        Of the rows that remain; undefined when a variable no longer varies.
    """

    row: int
    coefficient: Coefficient

    @property
    def order_key(self) -> Fraction:
        """The coefficient times its size, exactly: ordered as it is.  Only for a defined coefficient."""
        left = self.coefficient
        return Fraction(left.numerator * abs(left.numerator), left.x_square * left.y_square)


@dataclass(frozen=True, slots=True)
class LeaveOneOut:
    """A coefficient without each row in turn.

    Attributes
    ----------
    without
        One for each complete row, in their order.
    lowest, highest
        The least and the greatest coefficient left; of equal ones that of the first row.
    undefined
        Rows without which a variable does not vary.
    """

    without: tuple[RowLeftOut, ...]
    lowest: RowLeftOut
    highest: RowLeftOut
    undefined: tuple[int, ...]


def leave_one_out(x_codes: Codes, y_codes: Codes, name: CoefficientName = "Spearman rho") -> LeaveOneOut | NoAnswer:
    """Return the coefficient without each row in turn, as integers, in n log n steps; or why there is none.

    Raises
    ------
    ValueError
        If the columns differ in length.
    ComputeError
        If the sums could exceed an int64.
    """
    if equally_long(x_codes, y_codes) == 0:
        return NoAnswer("there are no complete rows")
    found = _WITHOUT_EACH[name](x_codes, y_codes)
    integers = zip(found.numerator.tolist(), found.x_square.tolist(), found.y_square.tolist(), strict=True)
    without = tuple(RowLeftOut(row, Coefficient(name, len(x_codes) - 1, *parts)) for row, parts in enumerate(integers))
    defined = [left for left in without if left.coefficient.is_defined]
    if not defined:
        return NoAnswer("without any one row a variable does not vary")
    return LeaveOneOut(
        without,
        min(defined, key=lambda left: left.order_key),
        max(defined, key=lambda left: left.order_key),
        tuple(left.row for left in without if not left.coefficient.is_defined),
    )

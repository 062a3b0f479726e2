"""What an interval is, and what a rule that makes one says of itself."""

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal

from rankdocket.references import Description
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.ranks import Codes
from rankdocket.vocabulary import CoefficientName, Direction


@dataclass(frozen=True, slots=True, eq=False)
class IntervalQuestion:
    """What an interval is asked for.

    Attributes
    ----------
    level
        Above 0, below 1.
    direction
        "greater" asks for a lower bound at ``level`` (the interval ends at 1), "less" for an upper bound.
    """

    coefficient: Coefficient
    x_codes: Codes
    y_codes: Codes
    level: Decimal
    direction: Direction


@dataclass(frozen=True, slots=True)
class Interval:
    """An interval for a coefficient.

    Attributes
    ----------
    low, high
        −1 to 1.
    method
        Key of the rule that made it.
    cap_binds
        Whether the coefficient was so near to ±1 that the rule’s cap replaced it.
    """

    low: float
    high: float
    level: Decimal
    direction: Direction
    method: str
    cap_binds: bool


@dataclass(frozen=True, slots=True)
class NoInterval:
    """That there is no interval, and why, as the end of a sentence without its full stop."""

    reason: str


@dataclass(frozen=True, slots=True)
class IntervalMethod:
    """A rule that makes intervals."""

    key: str
    label: str
    coefficients: tuple[CoefficientName, ...]
    function: Callable[[IntervalQuestion], Interval | NoInterval]
    describe: Description

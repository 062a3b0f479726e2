"""What an interval is, and what a rule that makes one says of itself."""

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal
from typing import Final, Literal, TypeAlias, get_args

import numpy as np

from rankdocket.references import Description
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.ranks import Codes
from rankdocket.vocabulary import CoefficientName, Direction

Restraint: TypeAlias = Literal["cap", "guard", "floor", "ceiling", "fallback"]
"""What a rule did to its own arithmetic.

cap: the coefficient was so near to ±1 that the cap replaced it; guard: a limit was drawn back to the guard; floor and
ceiling: the half-width is the least, the most that the rule allows; fallback: the rule’s own standard error does not
exist for these rows, or may not be used, and another stands in for it.
"""

RESTRAINTS: Final[tuple[Restraint, ...]] = get_args(Restraint)


@dataclass(frozen=True, slots=True, eq=False)
class Resampling:
    """How many times rows are drawn with replacement, and from which stream.

    Attributes
    ----------
    resamples
        1 or more.
    generator
        The stream; drawing moves it on.
    """

    resamples: int
    generator: np.random.Generator


@dataclass(frozen=True, slots=True)
class Resampled:
    """What became of the resamples of an interval.

    Attributes
    ----------
    drawn
        Resamples that were drawn.
    undefined
        Those among them in which a variable did not vary; they were left out.
    """

    drawn: int
    undefined: int


@dataclass(frozen=True, slots=True, eq=False)
class IntervalQuestion:
    """What an interval is asked for.

    Attributes
    ----------
    level
        Above 0, below 1.
    direction
        "greater" asks for a lower bound at ``level`` (the interval ends at 1), "less" for an upper bound.
    resampling
        For the rules that draw; the others do not look at it.
    """

    coefficient: Coefficient
    x_codes: Codes
    y_codes: Codes
    level: Decimal
    direction: Direction
    resampling: Resampling | None = None


def tail_of_level(level: Decimal, direction: Direction) -> Decimal:
    """Return the probability left beyond each limit: half of 1 − ``level``, or all of it for a bound."""
    return (1 - level) / 2 if direction == "two-sided" else 1 - level


@dataclass(frozen=True, slots=True)
class Interval:
    """An interval for a coefficient.

    Attributes
    ----------
    low, high
        −1 to 1; low below high.
    method
        Key of the rule that made it.
    restraints
        What the rule did to its own arithmetic, in the order of :data:`RESTRAINTS`.
    resampled
        Of a rule that draws.
    """

    low: float
    high: float
    level: Decimal
    direction: Direction
    method: str
    restraints: tuple[Restraint, ...]
    resampled: Resampled | None = None

    @property
    def cap_binds(self) -> bool:
        """Whether the coefficient was so near to ±1 that the rule’s cap replaced it."""
        return "cap" in self.restraints


@dataclass(frozen=True, slots=True)
class NoInterval:
    """That there is no interval, and why, as the end of a sentence without its full stop."""

    reason: str


@dataclass(frozen=True, slots=True)
class IntervalMethod:
    """A rule that makes intervals.

    Attributes
    ----------
    validity
        Where the rule can be asked and how well it is known to hold there, as sentences.
    """

    key: str
    label: str
    coefficients: tuple[CoefficientName, ...]
    function: Callable[[IntervalQuestion], Interval | NoInterval]
    describe: Description
    validity: str

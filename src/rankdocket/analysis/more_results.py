"""What was found about more than the two variables of an association: frozen values, all of them supplementary."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Final, Literal, TypeAlias

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.interval import Interval, NoInterval
from rankdocket.stats.partial import PartialRho
from rankdocket.stats.z_scale import EstimateVariance

VARIANCE: Final[EstimateVariance] = "Bonett-Wright at the estimate"
"""The variance from which every difference here is judged: that of the textbook interval of one rho (bonett2000)."""

VARIANCE_WORDS: Final = "one plus half of the squared coefficient"
"""Its k as a text says it."""

DifferenceMethod: TypeAlias = Literal["one variable shared", "no variable shared", "two groups"]


@dataclass(frozen=True, slots=True)
class Absent:
    """That a value is withheld by the plan or does not exist; ``reason`` says why, as a sentence part without digits."""

    state: Literal["withheld", "not estimable"]
    reason: str


@dataclass(frozen=True, slots=True)
class GivenCovariates:
    """The partial rank correlation of an association.

    Attributes
    ----------
    covariates
        The variables held fixed.
    lines
        Lines of the file of the rows complete for all of them.
    answer
        The partial coefficient, with rho of the same rows.
    p
        Approximate, in the direction of the plan.
    """

    covariates: tuple[str, ...]
    lines: tuple[int, ...]
    answer: PartialRho | Absent
    p: float | Absent


@dataclass(frozen=True, slots=True)
class Difference:
    """What is said about a difference of two coefficients: z, two-sided p, interval for the difference, −2 to 2."""

    method: DifferenceMethod
    z: float
    p: float
    low: float
    high: float


@dataclass(frozen=True, slots=True)
class Comparison:
    """An association held against another one on the rows complete for both.

    Attributes
    ----------
    other
        The association compared with.
    variables
        Every variable involved, those of the association itself first.
    lines
        Lines of the file of the rows used.
    coefficients
        rho of the association and of the other one, on these rows.
    difference
        The first less the second.
    """

    other: str
    variables: tuple[str, ...]
    lines: tuple[int, ...]
    coefficients: tuple[Coefficient, Coefficient] | Absent
    difference: Difference | Absent

    @property
    def shared(self) -> int:
        """How many variables the two associations have in common: none or one."""
        return 4 - len(self.variables)


@dataclass(frozen=True, slots=True)
class Group:
    """One group of rows; without a coefficient the reason stands in its place."""

    label: str
    n: int
    coefficient: Coefficient | Absent
    interval: Interval | NoInterval


@dataclass(frozen=True, slots=True)
class GroupComparison:
    """Two of the groups, by their places among all of them; the first less the second."""

    first: int
    second: int
    value: float | Absent
    difference: Difference | Absent


@dataclass(frozen=True, slots=True)
class Subgroups:
    """The groups of an association, in the order in which the plan compares them or the file brings them.

    Attributes
    ----------
    column
        The column that names them, as the plan writes it.
    label_of_line
        Line of the file → group, for every complete row; ``None`` for a row in no group.
    """

    column: str
    groups: tuple[Group, ...]
    label_of_line: Mapping[int, str | None]
    comparison: GroupComparison | None


@dataclass(frozen=True, slots=True)
class MoreVariables:
    """What the plan asks about more than the two variables of an association; ``None`` where it asks nothing."""

    partial: GivenCovariates | None
    comparison: Comparison | None
    subgroups: Subgroups | None

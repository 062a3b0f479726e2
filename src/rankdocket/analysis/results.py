"""The truth of a run: everything the engine found, at full precision, as frozen values.

An association that cannot be estimated or tested keeps its place: the part that is missing is a value of its
own type with the reason in words, so that forgetting the case is a type error.
"""

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from fractions import Fraction
from typing import Literal, TypeAlias

from rankdocket.analysis.max_t_result import FamilyMaxT, MemberMaxT
from rankdocket.analysis.more_results import MoreVariables
from rankdocket.analysis.sensitivity.table import NoTable, SensitivityTable
from rankdocket.analysis.shape import Shape
from rankdocket.analysis.size_results import SizeAnalysis
from rankdocket.stats.choose_null import NullChoice
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.interval import Interval, NoInterval
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.null import Tails
from rankdocket.stats.null_result import NullResult
from rankdocket.stats.ranks import TieGroups
from rankdocket.stats.rho import TieCorrectedForm
from rankdocket.study.spec import AssociationSpec, StudySpec
from rankdocket.study.table import StudyData
from rankdocket.vocabulary import CheckState, Direction, FindingWord


@dataclass(frozen=True, slots=True)
class NotEstimable:
    """No coefficient exists for these rows; ``reason`` says why, as a sentence part without digits."""

    reason: str


@dataclass(frozen=True, slots=True)
class Withheld:
    """Something could be computed and the plan does not allow it to be given; ``reason`` says why."""

    reason: str


@dataclass(frozen=True, slots=True)
class LeftOutRow:
    """A row that the plan leaves out: its line in the file and the plan’s reason."""

    row: int
    reason: str


@dataclass(frozen=True, slots=True)
class RowFlow:
    """From the rows read to the rows used.

    ``read`` = len(``left_out``) + ``missing_x`` + ``missing_y`` + ``missing_both`` + ``complete``; the three missing
    counts concern rows not left out and exclude one another.
    """

    read: int
    left_out: tuple[LeftOutRow, ...]
    missing_x: int
    missing_y: int
    missing_both: int
    complete: int


@dataclass(frozen=True, slots=True)
class CompleteRow:
    """One complete row: its line in the file, both cells as received, both exact values, both doubled midranks."""

    row: int
    x_literal: str
    y_literal: str
    x: Decimal
    y: Decimal
    x_doubled_rank: int
    y_doubled_rank: int


@dataclass(frozen=True, slots=True)
class Screened:
    """An association’s rows, selected first and ranked second, before anything joint is computed."""

    spec: AssociationSpec
    flow: RowFlow
    rows: tuple[CompleteRow, ...]
    x_ties: TieGroups
    y_ties: TieGroups
    suspicious: tuple[LeftOutRow, ...] = ()
    """Rows of the table that the plan calls suspicious and does not leave out, each with its reason."""


@dataclass(frozen=True, slots=True)
class Measure:
    """A figure of a requirement: its exact value as text and how it is printed."""

    exact: str
    kind: Literal["count", "share", "percent", "p"]


@dataclass(frozen=True, slots=True)
class CheckOutcome:
    """What one requirement check found for one association.

    Attributes
    ----------
    key
        The check.
    state
        met, doubtful, not met or not examined.
    limit, found
        The plan’s limit and the figure that was held against it, where there are such figures.
    reason
        A sentence part in words, without digits.
    withholds
        What the plan withholds because of it: nothing, the test, or the estimate and the test.
    waived
        The plan’s written reason for waiving it, where it is not met or doubtful; it then withholds nothing.
    """

    key: str
    state: CheckState
    limit: Measure | None
    found: Measure | None
    reason: str
    withholds: Literal["nothing", "test", "all"] = "nothing"
    waived: str | None = None


@dataclass(frozen=True, slots=True)
class Estimate:
    """A coefficient with what a second person needs to recompute it.

    ``squared_differences``, ``corrected`` and ``short_form`` belong to Spearman’s rho and are ``None`` for tau-b.
    """

    coefficient: Coefficient
    squared_differences: Fraction | None
    corrected: TieCorrectedForm | None
    short_form: Fraction | None


@dataclass(frozen=True, slots=True)
class RankTest:
    """A test against the null that rows of x and y are unrelated.

    Attributes
    ----------
    direction
        The tail or tails that the plan asks for.
    null
        What the chosen null says: tails in all directions, critical values, bars of its picture.
    p
        The exact value ``count/of``, (b + 1)/(B + 1) from drawn permutations, or a share with twelve digits.
    p_interval
        Where p lies by the error of the draws, at the study’s confidence level, or by the stated error of a share;
        ``None`` where p was counted.
    stream
        The address of the random stream; empty without draws.
    """

    direction: Direction
    choice: NullChoice
    null: NullResult
    p: Fraction
    p_interval: tuple[float, float] | None
    stream: tuple[str, ...] = ()

    @property
    def tails(self) -> Tails:
        """The tails at the observed coefficient."""
        return self.null.tails


@dataclass(frozen=True, slots=True)
class Comparisons:
    """Values that other habits would have given; no finding rests on them.

    ``pearson`` is ``None`` unless both variables are numbers.
    """

    t_value_p: float | None
    pearson: float | None
    doubled_p: Fraction | None


@dataclass(frozen=True, slots=True)
class AssociationAnalysis:
    """Everything found for one association.

    Attributes
    ----------
    interval
        The one that is printed: adjusted for the family where the plan says so and the association is concerned.
    interval_alone
        The interval at the plan’s own level where ``interval`` is an adjusted one, else ``None``.
    interval_stream
        The address of the random stream of its resamples; empty without them.
    shape
        A look at the shape, where there is an estimate.
    size
        ``None`` where the plan names neither a null value nor a smallest size of interest, and without a test.
    """

    screened: Screened
    checks: tuple[CheckOutcome, ...]
    estimate: Estimate | Withheld | NotEstimable
    test: RankTest | Withheld | NotEstimable
    interval: Interval | NoInterval
    comparisons: Comparisons
    smallest_attainable_p: Fraction | None
    size: SizeAnalysis | NoAnswer | None = None
    interval_alone: Interval | NoInterval | None = None
    interval_stream: tuple[str, ...] = ()
    shape: Shape | None = None


FindingBasis: TypeAlias = Literal["family", "own p-value", "outside the family"]


@dataclass(frozen=True, slots=True)
class Finding:
    """What the plan’s rule makes of one association.

    Attributes
    ----------
    word
        One of the fixed list, or ``None`` for an association outside the family, for which no finding is stated.
    basis
        Whether the adjusted p of the family decided, the association’s own p, or nothing did.
    p_adjusted
        The adjusted p of a family member whose p is given.
    undecided
        True when p has an error, by draws or by its method, and the ends of its interval lie on different sides of
        alpha, adjusted with the others fixed.
    max_t
        The permutations from which the adjusted p comes, where the coefficients of the family were adjusted together.
    """

    word: FindingWord | None
    basis: FindingBasis
    p_adjusted: Fraction | None
    undecided: bool = False
    max_t: MemberMaxT | None = None


@dataclass(frozen=True, slots=True)
class Analysis:
    """A whole run."""

    spec: StudySpec
    data: StudyData
    results: Mapping[str, AssociationAnalysis]
    findings: Mapping[str, Finding]
    family: tuple[str, ...]
    """Names of the associations whose p-values are adjusted together, in plan order."""
    more: Mapping[str, MoreVariables]
    """What the plan asks about more than two variables, by association."""
    max_t: FamilyMaxT | None = None
    """Their coefficients adjusted together, where the plan asks for that and any of them has a test."""
    sensitivity: Mapping[str, SensitivityTable | NoTable] = field(default_factory=dict)
    """What another method, or other rows, would have said of each association."""

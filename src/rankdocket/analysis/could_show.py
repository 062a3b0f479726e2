"""What rows could show: from their number, their ties and the plan alone, never from a coefficient found in them."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from types import MappingProxyType
from typing import Final, Literal, TypeAlias

from rankdocket.analysis.checks.independence import KEY as INDEPENDENCE
from rankdocket.analysis.family import adjusts_together, sharers_of
from rankdocket.analysis.nulls import levels_of, smallest_possible_p
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.stats.coefficient import FEWEST_ROWS as FEWEST_OF_A_COEFFICIENT
from rankdocket.stats.guarded_width import LARGEST_RHO, LEVELS, guarded_width_at
from rankdocket.stats.interval_width import width_at
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.sample_size import FEWEST_ROWS, PlannedTest, smallest_rho
from rankdocket.study.spec import AssociationSpec, StudySpec

COULD_SHOW: Final = Description(
    "What the rows could show was worked out from their number, their ties and the plan alone: the smallest p that they "
    "allow; the smallest size of rho that the test of independence finds with the planned power, {power}, by the normal "
    "approximation with one variance without association and that of Bonett and Wright with it; and, of an interval with "
    "two limits, the width at two sizes of rho. The coefficient found in these rows enters none of them.",
    ("bonett2000",),
)

WidthBy: TypeAlias = Literal["guarded jackknife", "Bonett-Wright"]

WIDTH_BY: Final[Mapping[WidthBy, Description]] = MappingProxyType(
    {
        "guarded jackknife": Description(
            "The width{of} is the mean width of the guarded jackknife interval, simulated for variables that follow the "
            "bivariate normal law without ties, as a multiple of the width that the formula of Bonett and Wright gives.",
            ("bonett2000",),
        ),
        "Bonett-Wright": Description(
            "The width{of} is that of the textbook interval of Bonett and Wright, whatever the rule of the plan.",
            ("bonett2000",),
        ),
    }
)
"""By what an expected width was found → what is said of it."""


@dataclass(frozen=True, slots=True)
class CouldShow:
    """What the rows of one association could show.

    Attributes
    ----------
    rows
        Complete rows.
    level
        The strictest level at which the p-value may have to lie by the adjustment of its family; alpha outside one.
    attainable_p
        The smallest p that rows, ties and null allow.
    smallest_rho
        The smallest size of rho that the test of independence finds with the planned power at ``level``.
    width_by
        Whose widths they are: those of the plan's own rule where they were simulated.
    width_at_zero, width_at_interest
        Width of an interval for a rho of 0, of the smallest size of interest; the latter is ``None`` where the plan
        names no such size.
    """

    rows: int
    level: Fraction
    attainable_p: Fraction | NoAnswer
    smallest_rho: float | NoAnswer
    width_by: WidthBy
    width_at_zero: float | NoAnswer
    width_at_interest: float | NoAnswer | None


def could_show(screened: Screened, spec: StudySpec, outcomes: tuple[CheckOutcome, ...]) -> CouldShow:
    """Return what the rows of an association could show, or why there is no answer.

    Parameters
    ----------
    screened, spec
        The rows and the plan.
    outcomes
        Of the checks that show nothing joint; others do no harm.
    """
    rows, level, by = len(screened.rows), strictest_level(screened.spec, spec), _width_by(screened.spec, spec)
    if rows < FEWEST_OF_A_COEFFICIENT or min(screened.x_ties.distinct, screened.y_ties.distinct) < 2:
        nothing = NoAnswer("no rank correlation exists for these rows")
        interest = None if screened.spec.hypothesis.smallest_of_interest is None else nothing
        return CouldShow(rows, level, nothing, nothing, by, nothing, interest)
    attainable = smallest_possible_p(screened, spec)
    return CouldShow(
        rows,
        level,
        attainable,
        _smallest_rho(screened, spec, outcomes, attainable),
        by,
        _width(screened, spec, outcomes, Decimal(0)),
        None
        if screened.spec.hypothesis.smallest_of_interest is None
        else _width(screened, spec, outcomes, screened.spec.hypothesis.smallest_of_interest),
    )


def strictest_level(association: AssociationSpec, spec: StudySpec) -> Fraction:
    """Return alpha over the largest factor of the adjustment.

    Step-down maxT has no factors; beside tests that all fail it asks for no stricter level than alpha shared equally.
    """
    if adjusts_together(spec):
        return Fraction(spec.inference.alpha) / sharers_of(association, spec)
    return min(levels_of(association, spec))


def _smallest_rho(
    screened: Screened, spec: StudySpec, outcomes: tuple[CheckOutcome, ...], attainable: Fraction
) -> float | NoAnswer:
    withheld = next((outcome for outcome in outcomes if outcome.withholds != "nothing"), None)
    if withheld is not None:
        return NoAnswer(f"the test is withheld: {withheld.reason}")
    if screened.spec.coefficient != "Spearman rho":
        return _FOR_RHO
    if len(screened.rows) < FEWEST_ROWS:
        return _TOO_FEW
    if attainable > strictest_level(screened.spec, spec):
        return NoAnswer("even perfect order could not reach the strictest level")
    inference = spec.inference
    planned = PlannedTest(strictest_level(screened.spec, spec), inference.sidedness)
    return smallest_rho(len(screened.rows), float(inference.planned_power), planned)


def _width(screened: Screened, spec: StudySpec, outcomes: tuple[CheckOutcome, ...], rho: Decimal) -> float | NoAnswer:
    for outcome in outcomes:
        if outcome.withholds == "all" or (outcome.key == INDEPENDENCE and outcome.withholds != "nothing"):
            return NoAnswer(f"the interval is withheld: {outcome.reason}")
    if screened.spec.coefficient != "Spearman rho":
        return _FOR_RHO
    if spec.inference.sidedness == "one-sided":
        return NoAnswer("a one-sided bound has no width")
    if len(screened.rows) < FEWEST_ROWS:
        return _TOO_FEW
    width = guarded_width_at if _width_by(screened.spec, spec) == "guarded jackknife" else width_at
    return width(len(screened.rows), float(rho), level=spec.inference.confidence_level)


def _width_by(association: AssociationSpec, spec: StudySpec) -> WidthBy:
    """Return whose width is expected; both widths of an association are by one rule, so that they can be compared."""
    inference, size = spec.inference, association.hypothesis.smallest_of_interest or Decimal(0)
    was_simulated = inference.confidence_level in LEVELS and float(size) <= LARGEST_RHO
    return "guarded jackknife" if inference.interval.by == "guarded jackknife" and was_simulated else "Bonett-Wright"


_FOR_RHO: Final = NoAnswer("the formula is for rho")
_TOO_FEW: Final = NoAnswer("the formula needs more than three complete rows")

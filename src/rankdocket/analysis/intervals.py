"""The intervals of a plan: each at the plan’s level first, those of the family adjusted once the findings are there."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from decimal import ROUND_FLOOR, Context, Decimal
from typing import Final

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.checks.independence import KEY as INDEPENDENCE
from rankdocket.analysis.family import family_of
from rankdocket.analysis.filing import DIGITS
from rankdocket.analysis.rank_codes import rank_codes
from rankdocket.analysis.results import AssociationAnalysis, CheckOutcome, Estimate, Finding, Screened
from rankdocket.references import Description
from rankdocket.stats.draws import stream
from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval, Resampling
from rankdocket.stats.intervals import planned_interval
from rankdocket.study.spec import StudySpec

SHOWN: Final = ("shown", "shown, opposite sign")
"""Findings that select an association: its adjusted p lay at or below alpha."""

SIMULTANEOUS: Final = Description(
    "The intervals of the {family} members of the family were computed at {each} each, the error that {level} leaves "
    "divided evenly among the members, estimable or not: as far as each holds its own level, all of them hold together at "
    "{level}, whatever the dependence between them.",
    ("dunn1961",),
)
AFTER_SELECTION: Final = Description(
    "The intervals of the members shown, {selected} of {family} in the family, were computed at {each} each, the error that "
    "{level} leaves times members shown over members: as far as each holds its own level, and estimates are independent or "
    "depend on one another positively, the expected share of intervals so selected that miss is no more than that error; "
    "under other dependence it can be larger.",
    ("benjamini2005",),
)

_DOWN: Final = Context(prec=DIGITS, rounding=ROUND_FLOOR)
_WIDE: Final = Context(prec=100)


@dataclass(frozen=True, slots=True)
class AdjustedLevel:
    """The level of adjusted intervals.

    Attributes
    ----------
    level
        1 less the error left to each interval, which is rounded down to twelve digits.
    names
        The associations whose intervals have it.
    """

    level: Decimal
    names: tuple[str, ...]


def interval_alone(
    screened: Screened, spec: StudySpec, checks: tuple[CheckOutcome, ...], question: IntervalQuestion
) -> Interval | NoInterval:
    """Return the interval that the plan asks for; it needs independent rows as the test does, and is withheld with it."""
    for outcome in checks:
        if outcome.key == INDEPENDENCE and outcome.withholds != "nothing":
            return NoInterval(outcome.reason)
    return interval_as_planned(spec, question, resample_address(screened.spec.name, spec))


def resample_address(association: str, spec: StudySpec) -> tuple[str, ...]:
    """Return the address of the stream of an association’s resamples; empty where the plan’s rule draws none."""
    if spec.inference.interval.by != "BCa bootstrap":
        return ()
    return (spec.study.number, association, "interval", "resamples")


def interval_as_planned(spec: StudySpec, question: IntervalQuestion, address: tuple[str, ...]) -> Interval | NoInterval:
    """Return the interval by the plan’s rule, its resamples, if it draws any, from the stream at ``address``."""
    seed = spec.inference.p_value.seed
    if address and seed is not None:
        resampling = Resampling(spec.inference.interval.resamples, stream(seed, *address))
        question = replace(question, resampling=resampling)
    return planned_interval(spec.inference.interval.by, question)


def adjusted_level(findings: Mapping[str, Finding], spec: StudySpec) -> AdjustedLevel | None:
    """Return the level that the plan’s adjustment gives, and to which intervals; ``None`` where it adjusts none.

    Simultaneous: the error of the plan’s level over the size of the family, for every member (dunn1961). After
    selection: that times the number of members shown, for those (benjamini2005). Members without an estimate count.
    """
    family = family_of(spec)
    match spec.inference.interval.adjusted:
        case "none":
            return None
        case "simultaneous":
            names, parts = family, 1
        case "after selection":
            names = tuple(name for name in family if findings[name].word in SHOWN)
            parts = len(names)
    if not names:
        return None
    error = _DOWN.divide(_WIDE.multiply(parts, 1 - spec.inference.confidence_level), Decimal(len(family)))
    return AdjustedLevel(_WIDE.subtract(Decimal(1), error), names)


def with_adjusted_intervals(
    results: Mapping[str, AssociationAnalysis], findings: Mapping[str, Finding], spec: StudySpec
) -> Mapping[str, AssociationAnalysis]:
    """Return the results with the adjusted intervals that the plan asks for, each beside the one at the plan’s level."""
    adjusted = adjusted_level(findings, spec)
    if adjusted is None:
        return results
    return {
        name: _adjusted(result, spec, adjusted.level) if name in adjusted.names else result
        for name, result in results.items()
    }


def _adjusted(result: AssociationAnalysis, spec: StudySpec, level: Decimal) -> AssociationAnalysis:
    if not isinstance(result.estimate, Estimate) or not isinstance(result.interval, Interval):
        return result
    screened = result.screened
    question = IntervalQuestion(result.estimate.coefficient, *rank_codes(screened), level, direction_of(screened, spec))
    adjusted = interval_as_planned(spec, question, result.interval_stream)
    return replace(result, interval=adjusted, interval_alone=result.interval)

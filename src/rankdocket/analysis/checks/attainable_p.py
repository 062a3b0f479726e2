"""Whether any result could be shown at all: the smallest p that these ties and this number of rows allow."""

from dataclasses import replace
from fractions import Fraction
from typing import Final

from rankdocket.analysis.check import Check, level_measure, p_measure
from rankdocket.analysis.deciding import deciding_test
from rankdocket.analysis.family import adjusts_together, factors_of, family_of
from rankdocket.analysis.family_max_t import smallest_max_t_p
from rankdocket.analysis.nulls import smallest_of_rows, smallest_possible_p
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec

KEY: Final = "attainable_p"


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the smallest attainable p of the rank test against alpha, and say where no finding rests on that test."""
    outcome = _of_the_rank_test(screened, spec)
    if outcome.state not in ("doubtful", "not met") or deciding_test(screened.spec) == "rank test":
        return outcome
    return replace(outcome, reason=f"concerning independence, on which the finding does not rest: {outcome.reason}")


def _of_the_rank_test(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the smallest attainable p against alpha, and against alpha as the adjustment may share it.

    A rule whose smallest factor is above 1 multiplies every p, whatever becomes of the other tests; its largest factor
    meets an association beside others that all fail.  By step-down maxT an adjusted p is at least p, and at most p
    times the size of the family: between the two it is open.
    """
    alpha = Fraction(spec.inference.alpha)
    limit = level_measure(spec.inference.alpha)
    if min(screened.x_ties.distinct, screened.y_ties.distinct) < 2:
        return CheckOutcome(KEY, "not examined", limit, None, "no rank correlation exists for these rows")
    smallest = smallest_possible_p(screened, spec)
    found = p_measure(smallest, spec.inference.alpha)
    # The p is still given: that it could not have been smaller is said beside it.
    if smallest_of_rows(screened, spec) > alpha:
        return CheckOutcome(KEY, "not met", limit, found, "no result of this plan with these rows could reach alpha")
    if smallest > alpha:
        return CheckOutcome(
            KEY, "not met", limit, found, "the draws that the plan allows are too few for a p of alpha or less"
        )
    return _beside_others(screened, spec, smallest)


def _beside_others(screened: Screened, spec: StudySpec, smallest: Fraction) -> CheckOutcome:
    """Return what the adjustment leaves of a smallest p that is not above alpha."""
    alpha, family = Fraction(spec.inference.alpha), family_of(spec)
    limit, found = level_measure(spec.inference.alpha), p_measure(smallest, spec.inference.alpha)
    factors = factors_of(screened.spec, spec)
    together = adjusts_together(spec) and screened.spec.name in family
    drawn = smallest_max_t_p(len(screened.rows), spec.inference.p_value.permutations) if together else Fraction(0)
    if smallest_of_rows(screened, spec) * min(factors) > alpha:
        return CheckOutcome(
            KEY,
            "not met",
            limit,
            found,
            "no result of this plan with these rows could reach alpha once adjusted for the number of tests",
        )
    if max(smallest * min(factors), drawn) > alpha:
        return CheckOutcome(
            KEY,
            "not met",
            limit,
            found,
            "the draws that the plan allows are too few for an adjusted p of alpha or less",
        )
    if together and smallest * len(family) > alpha:
        return CheckOutcome(
            KEY,
            "doubtful",
            limit,
            found,
            "alpha could be reached alone; whether beside the others of the family is open",
        )
    if smallest * max(factors) > alpha:
        return CheckOutcome(
            KEY,
            "doubtful",
            limit,
            found,
            "alpha could be reached, but not if every other test of the family failed",
        )
    return CheckOutcome(KEY, "met", limit, found, "alpha could be reached")


CHECK = Check(
    key=KEY,
    label="Smallest attainable p",
    demand=Description(
        "The smallest p that the complete rows and their ties allow was computed from the two most extreme pairings, "
        "and, where permutations are drawn, raised to the smallest that the draws can show; it was held against alpha, and against what "
        "the adjustment may leave of alpha.",
        ("kendall1939",),
    ),
    joint=False,
    examine=examine,
)

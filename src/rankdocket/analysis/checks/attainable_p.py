"""Whether any result could be shown at all: the smallest p that these ties and this number of rows allow."""

from fractions import Fraction
from typing import Final

from rankdocket.analysis.check import Check, level_measure, p_measure
from rankdocket.analysis.family import family_size
from rankdocket.analysis.nulls import smallest_of_rows, smallest_possible_p
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec

KEY: Final = "attainable_p"


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the smallest attainable p against alpha, and against alpha shared among the family."""
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
    if smallest * family_size(screened.spec, spec) > alpha:
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
        "and, where permutations are drawn, raised to the smallest that the draws can show; it was held against alpha.",
        ("kendall1939",),
    ),
    joint=False,
    examine=examine,
)

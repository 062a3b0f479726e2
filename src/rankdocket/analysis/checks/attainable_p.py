"""Whether any result could be shown at all: the smallest p that these ties and this number of rows allow."""

from fractions import Fraction

from rankdocket.analysis.check import Check, direction_of, level_measure, p_measure
from rankdocket.analysis.family import family_size
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.stats.attainable import smallest_attainable_p
from rankdocket.study.spec import StudySpec


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the smallest attainable p against alpha, and against alpha shared among the family."""
    alpha = Fraction(spec.inference.alpha)
    limit = level_measure(spec.inference.alpha)
    if min(screened.x_ties.distinct, screened.y_ties.distinct) < 2:
        return CheckOutcome(CHECK.key, "not examined", limit, None, "no rank correlation exists for these rows")
    smallest = smallest_attainable_p(
        screened.spec.coefficient, screened.x_ties, screened.y_ties, direction_of(screened, spec)
    )
    found = p_measure(smallest, spec.inference.alpha)
    if smallest > alpha:
        # The p is still given: that it could not have been smaller is said beside it.
        return CheckOutcome(CHECK.key, "not met", limit, found, "no result with these rows and ties could reach alpha")
    if smallest * family_size(screened.spec, spec) > alpha:
        return CheckOutcome(
            CHECK.key,
            "doubtful",
            limit,
            found,
            "alpha could be reached, but not if every other test of the family failed",
        )
    return CheckOutcome(CHECK.key, "met", limit, found, "alpha could be reached")


CHECK = Check(
    key="attainable_p",
    label="Smallest attainable p",
    demand=Description(
        "The smallest p that the number of complete rows and their ties allow was computed from the two most extreme "
        "pairings and held against alpha.",
        ("kendall1939",),
    ),
    joint=False,
    examine=examine,
)

"""Each variable takes at least two values among the complete rows."""

from rankdocket.analysis.check import Check, count
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Count the distinct values of the variable that has fewer of them."""
    del spec  # the requirement has no limit of the plan’s
    if not screened.rows:
        return CheckOutcome(CHECK.key, "not examined", count(2), None, "no complete row was left to look at")
    fewest = min(screened.x_ties.distinct, screened.y_ties.distinct)
    if fewest >= 2:
        return CheckOutcome(CHECK.key, "met", count(2), count(fewest), "both variables vary")
    # Nothing to withhold: without two values there is no coefficient to begin with.
    return CheckOutcome(CHECK.key, "not met", count(2), count(fewest), "a variable has one value in all complete rows")


CHECK = Check(
    key="not_constant",
    label="Distinct values",
    demand=Description(
        "Each variable had to take at least two values among the complete rows; otherwise no rank correlation exists."
    ),
    joint=False,
    examine=examine,
)

"""Whether the plan says that rows are independent of one another."""

from typing import Final

from rankdocket.analysis.check import Check
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec
from rankdocket.vocabulary import NOT_APPLICABLE

KEY: Final = "independence"


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Read the plan’s answers about repeated rows and time order; silence is not an answer."""
    del screened  # a fact of the plan, the same for every association
    rows = spec.rows
    if rows.declared_independent:
        return CheckOutcome(KEY, "met", None, None, "the plan declares the rows independent")
    if rows.repeated_within not in (None, NOT_APPLICABLE):
        reason = "the plan declares rows repeated, and the test at hand exchanges single rows"
    elif rows.time_order not in (None, NOT_APPLICABLE):
        reason = "the plan declares rows in time order, and the test at hand exchanges single rows"
    else:
        reason = "the plan does not say whether rows are repeated or in time order"
    return CheckOutcome(KEY, "not met", None, None, reason, "test")


CHECK = Check(
    key=KEY,
    label="Independent rows",
    demand=Description(
        "The plan had to state whether rows are repeated within something and whether they are in time order; the test "
        "used here needs rows that may be exchanged one by one."
    ),
    joint=False,
    examine=examine,
)

"""Enough complete rows for the plan."""

from rankdocket.analysis.check import Check, count, withheld_by
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the number of complete rows against the fewest that the plan accepts."""
    found, limit = screened.flow.complete, spec.requirements.fewest_complete_rows
    if found >= limit:
        return CheckOutcome(CHECK.key, "met", count(limit), count(found), "the plan’s number was reached")
    return CheckOutcome(
        CHECK.key,
        "not met",
        count(limit),
        count(found),
        "fewer complete rows than the plan asks for",
        withheld_by(spec),
    )


CHECK = Check(
    key="enough_rows",
    label="Enough complete rows",
    demand=Description(
        "The complete rows of each association were counted and held against the plan’s smallest number."
    ),
    joint=False,
    examine=examine,
    waived_as="complete rows",
)

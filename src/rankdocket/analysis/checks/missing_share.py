"""Not too large a share of rows without a value in one of the two variables."""

from decimal import Decimal
from fractions import Fraction

from rankdocket.analysis.check import Check, limit_share, share, withheld_by
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the share of incomplete rows, among rows not left out by the plan, against the plan’s limit."""
    flow, limit = screened.flow, spec.requirements.most_missing
    incomplete = flow.missing_x + flow.missing_y + flow.missing_both
    considered = incomplete + flow.complete
    if not considered:
        return CheckOutcome(CHECK.key, "not examined", limit_share(limit), None, "no row was left to look at")
    found = share(incomplete, considered)
    if Fraction(incomplete, considered) <= Fraction(Decimal(limit)):
        return CheckOutcome(CHECK.key, "met", limit_share(limit), found, "within the plan’s limit")
    return CheckOutcome(
        CHECK.key,
        "not met",
        limit_share(limit),
        found,
        "more rows lack a value than the plan allows",
        withheld_by(spec),
    )


CHECK = Check(
    key="missing_share",
    label="Share of rows lacking a value",
    demand=Description(
        "The share of rows that lacked a value in either variable, rows left out by the plan apart, was held against "
        "the plan’s limit."
    ),
    joint=False,
    examine=examine,
    waived_as="missing values",
)

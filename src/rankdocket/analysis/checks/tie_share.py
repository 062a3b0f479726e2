"""Ties: how much of the ranking is shared."""

from fractions import Fraction

from rankdocket.analysis.check import Check, limit_share, share
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.stats.ranks import TieGroups
from rankdocket.study.spec import StudySpec


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Hold the larger share of rows whose value is shared by another row against the plan’s limit."""
    limit = spec.requirements.most_tied
    if not screened.rows:
        return CheckOutcome(CHECK.key, "not examined", limit_share(limit), None, "no complete row was left to look at")
    worse: TieGroups = max((screened.x_ties, screened.y_ties), key=lambda ties: ties.tied_rows)
    found = share(worse.tied_rows, worse.n)
    if Fraction(worse.tied_rows, worse.n) <= Fraction(limit):
        return CheckOutcome(CHECK.key, "met", limit_share(limit), found, "within the plan’s limit")
    # Ties withhold nothing: the null used is conditional on them. They coarsen what the coefficient can show.
    return CheckOutcome(
        CHECK.key, "doubtful", limit_share(limit), found, "more rows share a value than the plan’s limit"
    )


CHECK = Check(
    key="tie_share",
    label="Share of tied rows",
    demand=Description(
        "The share of rows whose value another row shared was found for each variable, and the larger held against the "
        "plan’s limit.",
        ("kendall1945",),
    ),
    joint=False,
    examine=examine,
    waived_as="ties",
)

"""Would another method, or other rows, have said otherwise?  One table for each estimated association."""

from collections.abc import Mapping
from functools import cache, partial
from typing import Final

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.checks.independence import KEY as INDEPENDENCE
from rankdocket.analysis.decide import decision_rule
from rankdocket.analysis.deciding import deciding_test
from rankdocket.analysis.max_t_result import FamilyMaxT
from rankdocket.analysis.rank_codes import rank_codes
from rankdocket.analysis.results import AssociationAnalysis, Estimate, Finding, NotEstimable, RankTest
from rankdocket.analysis.sensitivity.cheap import draws_of
from rankdocket.analysis.sensitivity.rows import ROWS
from rankdocket.analysis.sensitivity.subject import NO_FINDING, Decision, Subject
from rankdocket.analysis.sensitivity.table import NoTable, SensitivityTable, Verdict
from rankdocket.analysis.sensitivity.threshold import threshold_of
from rankdocket.stats.adjustment import AdjustmentRule
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData

TOGETHER: Final = "the plan adjusts coefficients together, so that no p-value alone decides"

OF_A_CLAIM: Final = "the finding is that of a claim about size, which this does not test"

NOT_REPAIRED: Final = "no row of such a table repairs that"


def sensitivity_of(
    results: Mapping[str, AssociationAnalysis],
    findings: Mapping[str, Finding],
    plan: tuple[StudySpec, StudyData],
    adjustment: AdjustmentRule | FamilyMaxT,
) -> Mapping[str, SensitivityTable | NoTable]:
    """Return the table of every association, or why it has none; the findings must have been made before."""
    return {name: _table(name, results, findings[name], plan, adjustment) for name in results}


def _table(
    name: str,
    results: Mapping[str, AssociationAnalysis],
    finding: Finding,
    plan: tuple[StudySpec, StudyData],
    adjustment: AdjustmentRule | FamilyMaxT,
) -> SensitivityTable | NoTable:
    result, (spec, data) = results[name], plan
    if isinstance(result.estimate, NotEstimable):
        return NoTable(result.estimate.reason)
    for outcome in result.checks:
        if outcome.key == INDEPENDENCE and outcome.withholds != "nothing":
            return NoTable(f"{outcome.reason}; {NOT_REPAIRED}")
    if not isinstance(result.estimate, Estimate):
        return NoTable(result.estimate.reason)
    direction, draws = direction_of(result.screened, spec), draws_of(name, spec)
    x, y = rank_codes(result.screened)
    together = isinstance(adjustment, FamilyMaxT) and name in adjustment.members
    rule = None if isinstance(adjustment, FamilyMaxT) else decision_rule(name, results, spec, adjustment)
    decision = None
    if rule is not None and finding.word is not None and isinstance(result.test, RankTest):
        threshold = partial(threshold_of, rule, (x, y), result.estimate.coefficient, direction, draws)
        decision = Decision(rule, finding.word, cache(threshold))
    undecided = NO_FINDING
    if together:
        undecided = Verdict("not applicable", reason=TOGETHER)
    elif finding.word is not None and deciding_test(result.screened.spec) != "rank test":
        undecided = Verdict("not applicable", reason=OF_A_CLAIM)
    subject = Subject(
        spec,
        data,
        result.screened,
        x,
        y,
        result.estimate.coefficient,
        result.interval,
        direction,
        draws,
        decision,
        undecided,
    )
    rows = tuple(row for each in ROWS for row in each.make(subject))
    return SensitivityTable(rows, None if decision is None else decision.finding)

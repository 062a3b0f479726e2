"""Whose p-value decides a finding: the one place where this is chosen.

A plan that claims no size and names no null value is decided by the rank test.  Any other claim is decided by its own
approximate test, whose p-value enters the family instead; the p-value of independence stays beside it.
"""

from fractions import Fraction

from rankdocket.analysis.results import AssociationAnalysis, Estimate, RankTest
from rankdocket.analysis.size_results import SizeAnalysis
from rankdocket.stats.interval import Interval
from rankdocket.study.spec import AssociationSpec
from rankdocket.vocabulary import DecidingTest


def deciding_test(association: AssociationSpec) -> DecidingTest:
    """Return whose p-value decides the finding of an association."""
    hypothesis = association.hypothesis
    if hypothesis.null_value is not None:
        return "null value"
    return "rank test" if hypothesis.claim == "any" else hypothesis.claim


def deciding_p(result: AssociationAnalysis) -> Fraction | None:
    """Return the p-value that decides, not adjusted; ``None`` where the test is withheld or has no answer."""
    if not isinstance(result.test, RankTest):
        return None
    by = deciding_test(result.screened.spec)
    if by == "rank test":
        return result.test.p
    if not isinstance(result.size, SizeAnalysis):
        return None
    match by:
        case "null value":
            return None if result.size.value is None else result.size.value.p
        case "above":
            return None if result.size.size is None else result.size.size.p_above
        case "within":
            return None if result.size.size is None else result.size.size.p_within


def deciding_p_interval(result: AssociationAnalysis) -> tuple[float, float] | None:
    """Return where the p-value that decides may lie by the error of its draws or of its method."""
    if deciding_test(result.screened.spec) != "rank test" or not isinstance(result.test, RankTest):
        return None
    return result.test.p_interval


def shows_direction(result: AssociationAnalysis) -> bool:
    """Return whether a finding that is shown says that the variables move together: not that rho is small or no value."""
    return deciding_test(result.screened.spec) in ("rank test", "above")


def interval_shows(result: AssociationAnalysis) -> bool | None:
    """Return whether the association’s interval leaves out what its finding is to rule out.

    ``None`` without an interval, and for a claim of a small size, to which an interval of another level belongs.
    """
    interval, hypothesis = result.interval, result.screened.spec.hypothesis
    if not isinstance(interval, Interval):
        return None
    match deciding_test(result.screened.spec):
        case "within":
            return None
        case "above":
            size = float(hypothesis.smallest_of_interest or 0)
            return interval.low > size or interval.high < -size
        case "null value":
            value = float(hypothesis.null_value or 0)
            return interval.low > value or interval.high < value
        case "rank test":
            return interval.low > 0 or interval.high < 0


def is_positive(result: AssociationAnalysis) -> bool:
    """Return whether the rows lie above the null value that the plan names, or above 0 where it names none."""
    if isinstance(result.size, SizeAnalysis) and result.size.value is not None:
        return result.size.value.z > 0
    return isinstance(result.estimate, Estimate) and result.estimate.coefficient.numerator > 0

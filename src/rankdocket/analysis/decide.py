"""Hypotheses, p-values, alpha and the adjustment make findings: one word from a fixed list, decided on fractions."""

from collections.abc import Mapping
from dataclasses import replace
from fractions import Fraction
from typing import Literal

from rankdocket.analysis.family import basis_of, family_of
from rankdocket.analysis.results import AssociationAnalysis, Estimate, Finding, NotEstimable, RankTest
from rankdocket.stats.adjustment import AdjustmentRule
from rankdocket.study.spec import StudySpec
from rankdocket.vocabulary import FindingWord


def decide(
    results: Mapping[str, AssociationAnalysis], spec: StudySpec, adjustment: AdjustmentRule
) -> Mapping[str, Finding]:
    """Return the finding of every association.

    A family member without a p enters the adjustment as p = 1: it never lowers another’s adjusted p.
    """
    family = family_of(spec)
    adjusted, lowest, highest = (
        _adjusted({name: _p_at(results[name], end) for name in family}, adjustment) for end in (None, 0, 1)
    )
    return {
        name: replace(
            _finding(result, spec, adjusted.get(name)),
            undecided=_is_undecided(result, spec, (lowest.get(name), highest.get(name))),
        )
        for name, result in results.items()
    }


def _adjusted(raw: Mapping[str, Fraction], adjustment: AdjustmentRule) -> dict[str, Fraction]:
    return dict(zip(raw, adjustment.function(tuple(raw.values())), strict=True))


def _is_undecided(
    result: AssociationAnalysis, spec: StudySpec, adjusted_ends: tuple[Fraction | None, Fraction | None]
) -> bool:
    """Return whether the errors of p-values reach over alpha, for an association that the plan decides.

    An adjusted p rises with every p of the family: with all of them at their lower ends, and at their upper ends, it
    is as small and as large as these errors allow, whoever among the family has them.
    """
    basis = basis_of(result.screened.spec, spec)
    if basis == "outside the family" or not isinstance(result.test, RankTest):
        return False
    low, high = adjusted_ends if basis == "family" else (_p_at(result, 0), _p_at(result, 1))
    return low is not None and high is not None and low <= Fraction(spec.inference.alpha) < high


def _p_at(result: AssociationAnalysis, end: Literal[0, 1] | None) -> Fraction:
    """Return the p-value, or the lower or upper end of where its error lets it lie; 1 without a test."""
    if not isinstance(result.test, RankTest):
        return Fraction(1)
    if end is None or result.test.p_interval is None:
        return result.test.p
    return Fraction(result.test.p_interval[end])


def _finding(result: AssociationAnalysis, spec: StudySpec, adjusted: Fraction | None) -> Finding:
    basis = basis_of(result.screened.spec, spec)
    if isinstance(result.estimate, NotEstimable):
        return Finding("not estimable", basis, None)
    if not isinstance(result.test, RankTest) or not isinstance(result.estimate, Estimate):
        return Finding("withheld", basis, None)
    if basis == "outside the family":
        return Finding(None, basis, None)
    deciding = result.test.p if adjusted is None else adjusted
    return Finding(_word(result, result.estimate, spec, deciding), basis, adjusted)


def _word(result: AssociationAnalysis, estimate: Estimate, spec: StudySpec, p: Fraction) -> FindingWord:
    if p > Fraction(spec.inference.alpha):
        return "not shown"
    expected = result.screened.spec.hypothesis.expected_sign
    found = "positive" if estimate.coefficient.numerator > 0 else "negative"
    return "shown" if expected in ("either", found) else "shown, opposite sign"

"""Hypotheses, p-values, alpha and the adjustment make findings: one word from a fixed list, decided on fractions."""

from collections.abc import Mapping
from fractions import Fraction

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
    adjusted = dict(zip(family, adjustment.function(tuple(_p_or_one(results[name]) for name in family)), strict=True))
    return {name: _finding(result, spec, adjusted.get(name)) for name, result in results.items()}


def _p_or_one(result: AssociationAnalysis) -> Fraction:
    return result.test.p if isinstance(result.test, RankTest) else Fraction(1)


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

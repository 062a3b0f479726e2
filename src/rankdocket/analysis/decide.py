"""Hypotheses, p-values, alpha and the adjustment make findings: one word from a fixed list, decided on fractions."""

from collections.abc import Mapping
from dataclasses import replace
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
    raw = {name: _p_or_one(results[name]) for name in family}
    adjusted = _adjusted(raw, adjustment)
    return {
        name: replace(
            _finding(result, spec, adjusted.get(name)),
            undecided=_is_undecided(result, spec, raw, adjustment),
        )
        for name, result in results.items()
    }


def _adjusted(raw: Mapping[str, Fraction], adjustment: AdjustmentRule) -> dict[str, Fraction]:
    return dict(zip(raw, adjustment.function(tuple(raw.values())), strict=True))


def _is_undecided(
    result: AssociationAnalysis, spec: StudySpec, raw: Mapping[str, Fraction], adjustment: AdjustmentRule
) -> bool:
    """Return whether the error of p reaches over alpha, for an association that the plan decides."""
    name = result.screened.spec.name
    basis = basis_of(result.screened.spec, spec)
    if basis == "outside the family" or not isinstance(result.test, RankTest) or result.test.p_interval is None:
        return False
    ends = [Fraction(end) for end in result.test.p_interval]
    if basis == "family":
        ends = [_adjusted({**raw, name: end}, adjustment)[name] for end in ends]
    return ends[0] <= Fraction(spec.inference.alpha) < ends[1]


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

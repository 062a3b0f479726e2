"""Hypotheses, p-values, alpha and the adjustment make findings: one word from a fixed list, decided on fractions."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Literal

from rankdocket.analysis.deciding import deciding_p, deciding_p_interval, deciding_test, is_positive
from rankdocket.analysis.family import basis_of, family_of
from rankdocket.analysis.max_t_result import FamilyMaxT
from rankdocket.analysis.results import AssociationAnalysis, Estimate, Finding, NotEstimable, RankTest
from rankdocket.stats.adjustment import AdjustmentRule
from rankdocket.study.spec import StudySpec
from rankdocket.vocabulary import ExpectedSign, FindingWord


@dataclass(frozen=True, slots=True)
class _Adjusted:
    """An adjusted p-value, and how small and how large it can be by the errors of the whole family."""

    p: Fraction
    low: Fraction
    high: Fraction


def decide(
    results: Mapping[str, AssociationAnalysis], spec: StudySpec, adjustment: AdjustmentRule | FamilyMaxT
) -> Mapping[str, Finding]:
    """Return the finding of every association.

    A family member without a p enters the adjustment as p = 1: it never lowers another’s adjusted p.
    """
    by_max_t = adjustment.members if isinstance(adjustment, FamilyMaxT) else {}
    adjusted = (
        {name: _by_max_t(results[name], adjustment) for name in by_max_t}
        if isinstance(adjustment, FamilyMaxT)
        else _by_rule({name: results[name] for name in family_of(spec)}, adjustment)
    )
    return {
        name: replace(
            _finding(result, spec, adjusted[name].p if name in adjusted else None),
            undecided=_is_undecided(result, spec, adjusted.get(name)),
            max_t=by_max_t.get(name),
        )
        for name, result in results.items()
    }


@dataclass(frozen=True, slots=True)
class DecisionRule:
    """What the plan’s rule makes of one association at another p-value, the others of its family keeping theirs.

    Attributes
    ----------
    name
        The association.
    raw
        The p-values of its family, its own among them; empty for an association decided on its own p.
    """

    name: str
    raw: Mapping[str, Fraction]
    adjustment: AdjustmentRule
    alpha: Fraction
    expected: ExpectedSign

    def word(self, p: Fraction, *, positive: bool) -> FindingWord:
        """Return the finding for this p-value of a coefficient above 0, or not."""
        deciding = p
        if self.raw:
            raw = {**self.raw, self.name: p}
            deciding = dict(zip(raw, self.adjustment.function(tuple(raw.values())), strict=True))[self.name]
        return _word_at(deciding, self.alpha, self.expected, positive=positive)


def decision_rule(
    name: str, results: Mapping[str, AssociationAnalysis], spec: StudySpec, adjustment: AdjustmentRule
) -> DecisionRule | None:
    """Return the rule that decides an association by its rank test; ``None`` for one that the plan decides otherwise."""
    association = results[name].screened.spec
    basis = basis_of(association, spec)
    if basis == "outside the family" or deciding_test(association) != "rank test":
        return None
    raw = {member: _p_at(results[member], None) for member in family_of(spec)} if basis == "family" else {}
    return DecisionRule(name, raw, adjustment, Fraction(spec.inference.alpha), association.hypothesis.expected_sign)


def _by_rule(members: Mapping[str, AssociationAnalysis], adjustment: AdjustmentRule) -> dict[str, _Adjusted]:
    """Adjust all p-values, all lower ends, all upper ends.

    By every rule an adjusted p never falls when a p of the family rises: with all of them at their lower ends, and at
    their upper ends, it is as small and as large as these errors allow, whoever among the family has them.
    """
    p, low, high = (
        adjustment.function(tuple(_p_at(member, end) for member in members.values())) for end in (None, 0, 1)
    )
    return {name: _Adjusted(*values) for name, *values in zip(members, p, low, high, strict=True)}


def _by_max_t(result: AssociationAnalysis, family: FamilyMaxT) -> _Adjusted:
    """Return an adjusted p from the permutations of the family, never below the association’s own.

    Among all permutations it is not; drawn ones can put it there by their error alone.
    """
    member = family.members[result.screened.spec.name]
    low, high = member.ends
    return _Adjusted(max(member.share, _p_at(result, None)), max(low, _p_at(result, 0)), max(high, _p_at(result, 1)))


def _is_undecided(result: AssociationAnalysis, spec: StudySpec, adjusted: _Adjusted | None) -> bool:
    """Return whether the errors of p-values reach over alpha, for an association that the plan decides."""
    basis = basis_of(result.screened.spec, spec)
    if basis == "outside the family" or not isinstance(result.test, RankTest):
        return False
    if basis != "family":
        low, high = _p_at(result, 0), _p_at(result, 1)
    elif adjusted is not None:
        low, high = adjusted.low, adjusted.high
    else:
        return False
    return low <= Fraction(spec.inference.alpha) < high


def _p_at(result: AssociationAnalysis, end: Literal[0, 1] | None) -> Fraction:
    """Return the p-value that decides, or the lower or upper end of where its error lets it lie; 1 without one."""
    p, p_interval = deciding_p(result), deciding_p_interval(result)
    if p is None:
        return Fraction(1)
    return p if end is None or p_interval is None else Fraction(p_interval[end])


def _finding(result: AssociationAnalysis, spec: StudySpec, adjusted: Fraction | None) -> Finding:
    basis = basis_of(result.screened.spec, spec)
    if isinstance(result.estimate, NotEstimable):
        return Finding("not estimable", basis, None)
    if not isinstance(result.test, RankTest) or not isinstance(result.estimate, Estimate):
        return Finding("withheld", basis, None)
    if basis == "outside the family":
        return Finding(None, basis, None)
    p = deciding_p(result)
    if p is None:
        return Finding("not shown", basis, None)  # a claim that these rows cannot be asked about
    return Finding(_word(result, spec, p if adjusted is None else adjusted), basis, adjusted)


def _word(result: AssociationAnalysis, spec: StudySpec, p: Fraction) -> FindingWord:
    alpha = Fraction(spec.inference.alpha)
    if deciding_test(result.screened.spec) == "within":
        return "shown" if p <= alpha else "not shown"
    return _word_at(p, alpha, result.screened.spec.hypothesis.expected_sign, positive=is_positive(result))


def _word_at(p: Fraction, alpha: Fraction, expected: ExpectedSign, *, positive: bool) -> FindingWord:
    if p > alpha:
        return "not shown"
    found = "positive" if positive else "negative"
    return "shown" if expected in ("either", found) else "shown, opposite sign"

"""Which associations are decided together, and on what."""

from fractions import Fraction
from typing import Final

from rankdocket.analysis.results import FindingBasis
from rankdocket.stats.adjustment import AdjustmentRule, ErrorRate
from rankdocket.stats.adjustments import ADJUSTMENTS
from rankdocket.stats.adjustments.none import NONE
from rankdocket.study.spec import AssociationSpec, StudySpec
from rankdocket.vocabulary import Family, Role

_MEMBERS: Final[dict[Family, tuple[Role, ...]]] = {
    "primary": ("primary",),
    "primary and secondary": ("primary", "secondary"),
    "all": ("primary", "secondary", "exploratory"),
    "none": (),
}


def family_of(spec: StudySpec) -> tuple[str, ...]:
    """Return the names of the associations whose p-values are adjusted together, in plan order.

    An association that turns out not estimable, or whose p is withheld, stays a member: leaving it out would make
    the adjustment depend on the data.
    """
    roles = _MEMBERS[spec.inference.several_tests.among]
    return tuple(name for name, association in spec.associations.items() if association.role in roles)


def adjusts_together(spec: StudySpec) -> bool:
    """Return whether the coefficients of the family, not its p-values, are adjusted together."""
    return spec.inference.several_tests.adjust == "step-down maxT" and len(family_of(spec)) > 1


def adjustment_of(spec: StudySpec) -> AdjustmentRule:
    """Return the rule that the plan names for p-values; where coefficients are adjusted together, it changes none."""
    named = (rule for rule in ADJUSTMENTS if rule.key == spec.inference.several_tests.adjust)
    return next(named, NONE)


def error_rate_of(spec: StudySpec) -> ErrorRate:
    """Return what alpha bounds in this plan."""
    if not family_of(spec):
        return "each test alone"
    by_max_t = spec.inference.several_tests.adjust == "step-down maxT"
    return "any false finding" if by_max_t else adjustment_of(spec).error_rate


def factors_of(association: AssociationSpec, spec: StudySpec) -> tuple[Fraction, ...]:
    """Return by how much an association’s p may come to be multiplied, the largest first: 1 outside a family.

    Where coefficients are adjusted together no factor is known beforehand, and 1 is returned.
    """
    family = family_of(spec)
    return adjustment_of(spec).factors(len(family)) if association.name in family else (Fraction(1),)


def sharers_of(association: AssociationSpec, spec: StudySpec) -> int:
    """Return among how many alpha is shared equally for what no adjustment covers: 1 outside an adjusted family."""
    family = family_of(spec)
    return len(family) if association.name in family and spec.inference.several_tests.adjust != "none" else 1


def basis_of(association: AssociationSpec, spec: StudySpec) -> FindingBasis:
    """Return what decides an association.

    Without any family the plan makes each primary and secondary association its own decision; exploratory ones,
    and those outside a declared family, get an estimate and an interval but no finding.
    """
    if association.name in family_of(spec):
        return "family"
    if spec.inference.several_tests.among == "none" and association.role != "exploratory":
        return "own p-value"
    return "outside the family"

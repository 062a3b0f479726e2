"""Which associations are decided together, and on what."""

from typing import Final

from rankdocket.analysis.results import FindingBasis
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


def family_size(association: AssociationSpec, spec: StudySpec) -> int:
    """Return by how much alpha is shared at worst when this association is decided: 1 outside a family."""
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

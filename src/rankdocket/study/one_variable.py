"""What step-down maxT asks of a spec: one variable that the whole family shares, one coefficient, one direction."""

from collections.abc import Iterator

from rankdocket.errors import Fault, Place
from rankdocket.study.form import AssociationForm
from rankdocket.study.messages import Message, fault
from rankdocket.study.parts import Parts

_ELSE = "or write another adjust, such as Holm."


def max_t_faults(parts: Parts, roles: tuple[str, ...]) -> Iterator[Fault]:
    """Yield every fault of a family that is to be adjusted by step-down maxT; ``roles`` are those of its members."""
    if parts.inference is None or parts.inference.several_tests.adjust != "step-down maxT":
        return
    names = parts.names("associations")
    keys = ("role", "between", "coefficient", "hypothesis")
    if not all(name in parts.associations and parts.sound(("associations", name), *keys) for name in names):
        return
    family = {name: parts.associations[name] for name in names if parts.associations[name].role in roles}
    if len(family) < 2:
        return
    yield from _variable_faults(parts, family)
    yield from _coefficient_faults(parts, family)
    yield from _claim_faults(parts, family)
    if parts.inference.sidedness == "one-sided":
        yield from _direction_faults(parts, family)


def _variable_faults(parts: Parts, family: dict[str, AssociationForm]) -> Iterator[Fault]:
    if not set.intersection(*(set(association.between) for association in family.values())):
        what = f"step-down maxT permutes one variable that all associations of the family share; {', '.join(family)} share none."
        remedy = f"Make the family those with one variable in common, {_ELSE}"
        yield fault(_place(parts), "inference.several_tests.adjust", Message.CONTRADICTION, what, remedy)


def _coefficient_faults(parts: Parts, family: dict[str, AssociationForm]) -> Iterator[Fault]:
    for name, association in family.items():
        if association.coefficient != "Spearman rho":
            place = parts.value_place("associations", name, "coefficient")
            what = f"step-down maxT compares Spearman rho only, and {name} asks for {association.coefficient}."
            remedy = f"Write coefficient: Spearman rho, {_ELSE}"
            yield fault(place, f"associations.{name}.coefficient", Message.CONTRADICTION, what, remedy)


def _claim_faults(parts: Parts, family: dict[str, AssociationForm]) -> Iterator[Fault]:
    for name, association in family.items():
        key = "null_value" if association.hypothesis.null_value is not None else "claim"
        if key == "claim" and association.hypothesis.claim == "any":
            continue
        place = parts.value_place("associations", name, "hypothesis", key)
        what = f"step-down maxT permutes under independence, and {key} of {name} is decided by a test of its own."
        remedy = f"Leave {key} out, {_ELSE}"
        yield fault(place, f"associations.{name}.hypothesis.{key}", Message.CONTRADICTION, what, remedy)


def _direction_faults(parts: Parts, family: dict[str, AssociationForm]) -> Iterator[Fault]:
    signs = {association.hypothesis.expected_sign for association in family.values()}
    if len(signs) > 1 and "either" not in signs:
        what = "step-down maxT compares coefficients in one direction, and the signs expected in the family differ."
        remedy = f"Turn variables round until all signs are the same, write sidedness: two-sided, {_ELSE}"
        yield fault(_place(parts), "inference.several_tests.adjust", Message.CONTRADICTION, what, remedy)


def _place(parts: Parts) -> Place:
    return parts.value_place("inference", "several_tests", "adjust")

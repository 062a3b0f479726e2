"""The decision rule held against the associations on which it is to decide."""

from collections.abc import Iterator
from typing import Final

from rankdocket.errors import Fault
from rankdocket.study.form import InferenceForm, PValueForm
from rankdocket.study.interval_decision import interval_faults
from rankdocket.study.messages import Message, fault
from rankdocket.study.one_variable import max_t_faults
from rankdocket.study.parts import Parts
from rankdocket.vocabulary import ROLES, Family

_FAMILY_ROLES: Final[dict[Family, tuple[str, ...]]] = {
    "primary": ("primary",),
    "primary and secondary": ("primary", "secondary"),
    "all": ROLES,
}
"""Choice of a family → the roles of its associations; without a family no role is asked for."""


def decision_faults(parts: Parts) -> Iterator[Fault]:
    """Yield every fault between ``inference`` and the associations, and between the keys of ``inference``."""
    if parts.inference is None:
        return
    if parts.inference.sidedness == "one-sided" and parts.sound(("inference",), "sidedness"):
        yield from _sign_faults(parts)
    if parts.sound(("inference",), "several_tests"):
        yield from _family_faults(parts, parts.inference)
        yield from _reason_faults(parts, parts.inference)
        yield from max_t_faults(parts, _FAMILY_ROLES.get(parts.inference.several_tests.among, ()))
    if parts.sound(("inference",), "interval"):
        yield from interval_faults(parts, parts.inference)
    if parts.sound(("inference",), "p_value"):
        yield from _draw_faults(parts, parts.inference.p_value)


def _draw_faults(parts: Parts, p_value: PValueForm) -> Iterator[Fault]:
    if p_value.by == "permutation" and p_value.seed is None:
        what = "seed is missing; by: permutation draws at random."
        place = parts.key_place("inference", "p_value")
        remedy = "Write seed: and a whole number chosen before the data are seen."
        yield fault(place, "inference.p_value", Message.NEEDED_BY_ANOTHER, what, remedy)
    if p_value.most_draws is not None and p_value.most_draws < p_value.permutations:
        what = f"most_draws is {p_value.most_draws}, and {p_value.permutations} permutations are drawn to begin with."
        place = parts.value_place("inference", "p_value", "most_draws")
        remedy = f"Write {p_value.permutations} or more; {p_value.permutations} draws once."
        yield fault(place, "inference.p_value.most_draws", Message.CONTRADICTION, what, remedy)


def _sign_faults(parts: Parts) -> Iterator[Fault]:
    for name, association in parts.associations.items():
        if parts.sound(("associations", name), "hypothesis") and association.hypothesis.expected_sign == "either":
            place = parts.value_place("associations", name, "hypothesis", "expected_sign")
            what = "either gives no side, and inference.sidedness is one-sided."
            remedy = "Write positive or negative, or sidedness: two-sided."
            yield fault(place, f"associations.{name}.hypothesis.expected_sign", Message.SIGN_MISSING, what, remedy)


def _family_faults(parts: Parts, inference: InferenceForm) -> Iterator[Fault]:
    """Yield a fault if no association has a role of the family; the report could name nothing that was decided."""
    among = inference.several_tests.among
    names = parts.names("associations")
    all_read = all(name in parts.associations and parts.sound(("associations", name), "role") for name in names)
    roles = {parts.associations[name].role for name in names} if all_read else set()
    wanted = _FAMILY_ROLES.get(among, ())
    if not wanted or not roles or not roles.isdisjoint(wanted):
        return
    asked = " or ".join(wanted)
    found = " and ".join(role for role in ROLES if role in roles)
    what = f"the family is among: {among}, and no association has the role {asked}; roles found: {found}."
    wider = [f"among: {family}" for family, members in _FAMILY_ROLES.items() if not roles.isdisjoint(members)]
    place = parts.key_place("inference", "several_tests")
    if place == parts.key_place("inference"):
        # The family is the default one; what to write needs the key above it as well.
        field = "inference"
        choices = [f"several_tests: {{{choice}}}" for choice in (*wider, "among: none, reason: …")]
    else:
        field = "inference.several_tests"
        choices = [*wider, "among: none and a reason"]
    remedy = f"Give an association the role {asked}, or write {', or '.join(choices)}."
    yield fault(place, field, Message.FAMILY_EMPTY, what, remedy)


def _reason_faults(parts: Parts, inference: InferenceForm) -> Iterator[Fault]:
    several = inference.several_tests
    for key, word in (("adjust", several.adjust), ("among", several.among)):
        if word == "none" and several.reason is None:
            what = f"reason is missing; {key}: none needs one."
            place = parts.key_place("inference", "several_tests")
            yield fault(place, "inference.several_tests", Message.NEEDED_BY_ANOTHER, what, "Write reason: …")

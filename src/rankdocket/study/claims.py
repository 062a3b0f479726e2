"""Claims about the size of a coefficient held against what else the spec says of their association."""

from collections.abc import Iterator

from rankdocket.errors import Fault
from rankdocket.study.form import AssociationForm
from rankdocket.study.messages import Message, fault
from rankdocket.study.parts import Parts


def claim_faults(parts: Parts) -> Iterator[Fault]:
    """Yield every fault between a claim, a null value, the smallest size of interest and the coefficient."""
    for name, association in parts.associations.items():
        if parts.sound(("associations", name), "hypothesis"):
            yield from _size_faults(parts, name, association)
            yield from _null_faults(parts, name, association)
            if parts.sound(("associations", name), "coefficient"):
                yield from _coefficient_faults(parts, name, association)


def _size_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    hypothesis = association.hypothesis
    if hypothesis.claim != "any" and hypothesis.smallest_of_interest is None:
        place = parts.value_place("associations", name, "hypothesis", "claim")
        what = f"smallest_of_interest is missing; claim: {hypothesis.claim} is about it."
        remedy = "Write smallest_of_interest: and a size fixed before the data are seen, or claim: any."
        yield fault(place, f"associations.{name}.hypothesis.claim", Message.NEEDED_BY_ANOTHER, what, remedy)


def _null_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    hypothesis = association.hypothesis
    if hypothesis.claim != "any" and hypothesis.null_value is not None:
        place = parts.value_place("associations", name, "hypothesis", "null_value")
        what = f"null_value and claim: {hypothesis.claim} are two claims, and an association has one finding."
        remedy = "Leave null_value out, or write claim: any."
        yield fault(place, f"associations.{name}.hypothesis.null_value", Message.CONTRADICTION, what, remedy)
    elif hypothesis.null_value == 0:
        # Its approximate p would decide in the place of a counted one.
        place = parts.value_place("associations", name, "hypothesis", "null_value")
        what = "0 is not possible here: the rank test is of that."
        remedy = "Leave null_value out; the rank test then decides."
        yield fault(place, f"associations.{name}.hypothesis.null_value", Message.OUT_OF_RANGE, what, remedy)


def _coefficient_faults(parts: Parts, name: str, association: AssociationForm) -> Iterator[Fault]:
    hypothesis = association.hypothesis
    if association.coefficient == "Spearman rho":
        return
    for key, is_written in (("claim", hypothesis.claim != "any"), ("null_value", hypothesis.null_value is not None)):
        if is_written:
            place = parts.value_place("associations", name, "hypothesis", key)
            what = f"{key} is tested for Spearman rho alone; this association has {association.coefficient}."
            remedy = f"Write coefficient: Spearman rho, or leave {key} out."
            yield fault(place, f"associations.{name}.hypothesis.{key}", Message.DOES_NOT_APPLY, what, remedy)

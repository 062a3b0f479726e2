"""The planned interval held against the coefficients, the family and the seed that it needs."""

from collections.abc import Iterator

from rankdocket.errors import Fault
from rankdocket.study.form import InferenceForm
from rankdocket.study.messages import Message, fault
from rankdocket.study.parts import Parts
from rankdocket.vocabulary import FOR_BOTH, SELECTING


def interval_faults(parts: Parts, inference: InferenceForm) -> Iterator[Fault]:
    """Yield every fault between ``inference.interval`` and the keys and associations that it needs."""
    yield from _coefficient_faults(parts, inference)
    if inference.interval.by == "BCa bootstrap" and parts.sound(("inference",), "p_value"):
        yield from _seed_faults(parts, inference)
    if inference.interval.adjusted != "none" and parts.sound(("inference",), "several_tests"):
        yield from _family_faults(parts, inference)


def _coefficient_faults(parts: Parts, inference: InferenceForm) -> Iterator[Fault]:
    """Yield a fault if the interval exists for no association of the plan."""
    by = inference.interval.by
    names = parts.names("associations")
    all_read = all(name in parts.associations and parts.sound(("associations", name), "coefficient") for name in names)
    if by in FOR_BOTH or not names or not all_read:
        return
    if any(parts.associations[name].coefficient == "Spearman rho" for name in names):
        return
    what = f"{by} makes no interval for Kendall tau-b, and no association has another coefficient."
    remedy = f"Write {' or '.join(FOR_BOTH)}."
    place = parts.value_place("inference", "interval", "by")
    yield fault(place, "inference.interval.by", Message.DOES_NOT_APPLY, what, remedy)


def _seed_faults(parts: Parts, inference: InferenceForm) -> Iterator[Fault]:
    if inference.p_value.seed is None:
        what = "by: BCa bootstrap draws at random, and inference.p_value states no seed."
        remedy = "Add a number of your own, as in p_value: {seed: 417}."
        place = parts.value_place("inference", "interval", "by")
        yield fault(place, "inference.interval.by", Message.NEEDED_BY_ANOTHER, what, remedy)


def _family_faults(parts: Parts, inference: InferenceForm) -> Iterator[Fault]:
    adjusted, several = inference.interval.adjusted, inference.several_tests
    place, field = parts.value_place("inference", "interval", "adjusted"), "inference.interval.adjusted"
    if several.among == "none":
        what = f"{adjusted} adjusts the intervals of a family, and several_tests has among: none."
        yield fault(place, field, Message.CONTRADICTION, what, "Name a family, or write adjusted: none.")
    elif adjusted == "after selection" and several.adjust not in SELECTING:
        what = f"after selection needs an adjustment that selects by a share of false findings; adjust is {several.adjust}."
        remedy = f"Write adjust: {' or '.join(SELECTING)}, or adjusted: simultaneous."
        yield fault(place, field, Message.CONTRADICTION, what, remedy)

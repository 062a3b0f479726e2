"""Requirements that a plan waives for an association: which may be, and what a written waiver becomes."""

from collections.abc import Iterator, Mapping
from typing import Final

from rankdocket.errors import Fault
from rankdocket.study.messages import Message, fault
from rankdocket.study.parts import Parts
from rankdocket.study.wording import nearest, shown
from rankdocket.vocabulary import WAIVABLE_CHECKS, WaivableCheck

_ABOUT_ROWS: Final = ("independent rows", "independence", "independence of rows", "independent")
"""How somebody may name the one requirement that has a key of its own."""


def waivers_of(written: Mapping[str, str]) -> dict[WaivableCheck, str]:
    """Return the waivers of a faultless spec in report order."""
    return {word: written[word] for word in WAIVABLE_CHECKS if word in written}


def waiver_faults(parts: Parts) -> Iterator[Fault]:
    """Yield a fault for each waived requirement that does not exist or cannot be waived."""
    for name, association in parts.associations.items():
        if not parts.sound(("associations", name), "waived"):
            continue
        for word in association.waived:
            if word not in WAIVABLE_CHECKS:
                place = parts.key_place("associations", name, "waived", word)
                what, remedy = _refusal(word)
                yield fault(place, f"associations.{name}.waived", Message.CHECK_NOT_WAIVABLE, what, remedy)


def _refusal(word: str) -> tuple[str, str]:
    if word.casefold() in _ABOUT_ROWS:
        return (
            "independence of rows cannot be waived; without it neither test nor interval means what it says.",
            "If the rows are independent, write rows.independent_because and the reason.",
        )
    near = nearest(word, WAIVABLE_CHECKS)
    hint = f"nearest: {near}. " if near is not None else ""
    return (
        f"{shown(word)} is not a requirement that can be waived.",
        f"{hint}Those that can: {', '.join(WAIVABLE_CHECKS)}.",
    )

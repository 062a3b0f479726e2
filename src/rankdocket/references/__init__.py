"""The bibliography: the only place in the house where a source is spelled out.

A rule names the works it rests on by key; a report lists the works of the rules that ran, and no others.  The works
stand in two files by the first letter of their key.
"""

from collections.abc import Iterable
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final

from rankdocket.references import a_to_g, h_to_z
from rankdocket.references.work import Reference

__all__ = ["REFERENCES", "Description", "Reference"]


@dataclass(frozen=True, slots=True)
class Description:
    """What a rule says of itself in a methods section, so that a report can only describe what ran.

    Attributes
    ----------
    sentence
        Past tense, with named slots ``{draws}`` for numbers; no number is written into it.
    cites
        Keys of the works the rule rests on.
    """

    sentence: str
    cites: tuple[str, ...] = ()


def _catalogue(works: Iterable[Reference]) -> MappingProxyType[str, Reference]:
    found: dict[str, Reference] = {}
    for work in works:
        if work.key in found:
            raise ValueError("two references share a key")
        found[work.key] = work
    return MappingProxyType(found)


REFERENCES: Final = _catalogue((*a_to_g.WORKS, *h_to_z.WORKS))
"""Every work the program may cite, by key."""

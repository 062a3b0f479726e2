"""Which planned keys two plans hold with other values: a change of the plan, key by key."""

import json
from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from rankdocket.canonical import Plain


@dataclass(frozen=True, slots=True)
class PlanChange:
    """One planned key and its two values.

    Attributes
    ----------
    key
        Dotted, places in lists from 1 as elsewhere.
    old, new
        As they are written in plan.json; ``None`` where that plan has no such key.
    """

    key: str
    old: str | None
    new: str | None


def plan_changes(old: Plain, new: Plain) -> tuple[PlanChange, ...]:
    """Return the keys that differ, in the order of the new plan and after them those that only the old one has."""
    before, now = dict(_leaves(old, "")), dict(_leaves(new, ""))
    return tuple(
        PlanChange(key, before.get(key), now.get(key))
        for key in dict.fromkeys([*now, *before])
        if before.get(key) != now.get(key)
    )


def _leaves(value: Plain, key: str) -> Iterator[tuple[str, str]]:
    """Yield each key with its value; a list of plain values is one value."""
    if isinstance(value, Mapping) and value:
        for name, below in value.items():
            yield from _leaves(below, f"{key}.{name}" if key else name)
    elif isinstance(value, list | tuple) and any(isinstance(item, Mapping) for item in value):
        for place, item in enumerate(value, start=1):
            yield from _leaves(item, f"{key}.{place}")
    else:
        yield key, json.dumps(value, ensure_ascii=False)

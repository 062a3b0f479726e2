"""Where in a spec a key belongs: what to say when one stands too far to the left or to the right."""

from collections.abc import Iterator
from functools import cache
from typing import get_args

from pydantic import BaseModel

from rankdocket.study.form import SpecForm
from rankdocket.study.nodes import MapNode, Node


def homes_of(key: str) -> str:
    """Return "a key of study or of an entry of associations", "a section of the spec", or an empty text."""
    if key in SpecForm.model_fields:
        return "a section of the spec"
    homes = [home for home, keys in _homes() if key in keys]
    return f"a key of {' or of '.join(homes)}" if homes else ""


def is_misplaced(section: str, key: str, value: Node) -> bool:
    """Say whether what stands beside the entries of a section is rather a key of one of them."""
    keys = next((keys for home, keys in _homes() if home == f"an entry of {section}"), ())
    return key in keys and not (isinstance(value, MapNode) and not set(value.entries).isdisjoint(keys))


@cache
def _homes() -> tuple[tuple[str, tuple[str, ...]], ...]:
    return tuple(_below(SpecForm, ""))


def _below(form: type[BaseModel], within: str) -> Iterator[tuple[str, tuple[str, ...]]]:
    """Yield each part below a form, as words, with its keys."""
    for key, found in form.model_fields.items():
        address = f"{key} in {within}" if within.startswith("an entry") else f"{within}.{key}".lstrip(".")
        annotation = found.annotation
        for inner in (annotation, *get_args(annotation)):
            if isinstance(inner, type) and issubclass(inner, BaseModel):
                home = (
                    address if inner is annotation or type(None) in get_args(annotation) else f"an entry of {address}"
                )
                yield home, tuple(inner.model_fields)
                yield from _below(inner, home)

"""What an edition says it was made with, and what of that today's installation has otherwise."""

import json
from dataclasses import dataclass

from rankdocket.canonical import Plain
from rankdocket.register.environment import components, program_digest
from rankdocket.workflow.differences import MALFORMED
from rankdocket.writing.section import Ingredient


class UnreadableError(Exception):
    """A file of a record copy does not hold what it should; the text says which and how."""


@dataclass(frozen=True, slots=True)
class Versions:
    """What versions.json holds."""

    ingredients: tuple[Ingredient, ...]
    program_digest: str
    self_test: str
    self_test_cases: Plain

    @property
    def program(self) -> str:
        """Name and version as a register line files them; without a version when the list has none."""
        return next(
            (f"rankdocket {item.version}" for item in self.ingredients if item.what == "rankdocket"), "rankdocket"
        )


@dataclass(frozen=True, slots=True)
class Change:
    """What has changed since an edition was made.

    Attributes
    ----------
    program
        Whether the program itself is another: then the words of a report may be others.
    told
        Each change as a person would name it; none when everything is as it was.
    """

    program: bool
    told: tuple[str, ...]


def versions_of(data: bytes) -> Versions:
    """Read versions.json.

    Raises
    ------
    UnreadableError
        If it is not what an edition files.
    """
    try:
        plain = json.loads(data)
        ingredients = tuple(
            Ingredient(_text(item["what"]), _text(item["version"]), _text(item["role"])) for item in plain["components"]
        )
        test = plain["self_test"]
        return Versions(ingredients, _text(plain["program_digest"]), _text(test["outcome"]), test["cases"])
    except MALFORMED as error:
        raise UnreadableError(f"versions.json: cannot be read as what it should be ({error!r}).") from None


def change_since(then: Versions) -> Change:
    """Return what today's installation has otherwise than the one that made an edition."""
    versions = {item.what: item.version for item in then.ingredients}
    told = tuple(
        f"{item.name} {versions.get(item.name, 'unknown')} then, {item.version} now"
        for item in components()
        if versions.get(item.name) != item.version
    )
    other_files = then.program_digest != program_digest()
    other_version = any(item.name == "rankdocket" and versions.get(item.name) != item.version for item in components())
    if other_files:
        told += ("the program's own files have changed since",)
    return Change(other_files or other_version, told)


def _text(value: object) -> str:
    if not isinstance(value, str):
        raise TypeError(f"{value!r} is no text")
    return value

"""Names of editions: 1, 2, 3 for issued reports, 1A, 1B for drafts of the coming one."""

import re
from collections.abc import Iterable
from dataclasses import dataclass
from typing import Final

from rankdocket.errors import RegisterError

_NAME: Final = re.compile(r"([1-9][0-9]{0,8})([A-Z]{1,9})?")


@dataclass(frozen=True, slots=True)
class EditionName:
    """An edition's number and, for a draft, its letters.

    Attributes
    ----------
    number
        From 1; a draft has the number of the edition it prepares.
    letter
        "A" to "Z", then "AA"; None for an issued edition.
    """

    number: int
    letter: str | None

    def __post_init__(self) -> None:
        if self.letter == "" or _NAME.fullmatch(self.folder) is None:
            raise ValueError(f"{self.folder!r} is not the name of an edition")

    @property
    def folder(self) -> str:
        """The name as it is written and as its folder is called: "2", "1A"."""
        return f"{self.number}{self.letter or ''}"

    @property
    def is_draft(self) -> bool:
        """True for a lettered name."""
        return self.letter is not None

    @property
    def order(self) -> tuple[int, bool, int, str]:
        """Sort key: the drafts of an edition stand before it, 1Z before 1AA."""
        letter = self.letter or ""
        return (self.number, not self.is_draft, len(letter), letter)

    @classmethod
    def parse(cls, text: str) -> "EditionName":
        """Return the name written as ``text``.

        Raises
        ------
        RegisterError
            If it is not written as a number from 1, or a number and capital letters.
        """
        found = _NAME.fullmatch(text)
        if found is None:
            raise RegisterError(f"{text!r} is not an edition. Write a number such as 2, or 2A for a draft.")
        return cls(int(found[1]), found[2])

    @classmethod
    def is_name(cls, text: str) -> bool:
        """Return whether :meth:`parse` would accept ``text``."""
        return _NAME.fullmatch(text) is not None


def name_after(used: Iterable[EditionName], draft: bool) -> EditionName:
    """Return the first name that comes after all ``used`` ones."""
    names = tuple(used)
    coming = 1 + max((name.number for name in names if not name.is_draft), default=0)
    if not draft:
        return EditionName(coming, None)
    letters = [name.letter for name in names if name.number == coming and name.letter is not None]
    return EditionName(coming, _letter_after(max(letters, key=lambda letter: (len(letter), letter), default="")))


def _letter_after(letter: str) -> str:
    kept = letter.rstrip("Z")
    turned = "A" * (len(letter) - len(kept))
    return f"{kept[:-1]}{chr(ord(kept[-1]) + 1)}{turned}" if kept else f"A{turned}"

"""The few words that the page itself says: labels, running head and foot, the mark of a draft."""

from types import MappingProxyType
from typing import Final

from rankdocket.document.model import Furniture
from rankdocket.render.fonts import SANS_TEXT, width

TABLE: Final = "Table"
FIGURE: Final = "Figure"
CAVEAT: Final = "Caveat"
CONTINUED: Final = "continued"
CONTENTS: Final = "Contents"
REFERENCES: Final = "References"
PAGE: Final = "page"
PAGE_OF: Final = "of"
PAGES: Final = "pages"
CHECK_REGISTER: Final = "check the register for the current edition"
SIGNATURE_HEADS: Final = ("Step", "Name", "Role", "Date and signature")
SIGNATURES: Final = "Signatures"
BETWEEN: Final = "\u2002·\u2002"

STATUS_MARKS: Final = MappingProxyType({"draft": "draft, not for reliance"})
"""Status → words that stand across every page."""

LONGEST_HEAD: Final = 52.0
"""Em of the running head's face that fit one line of the text block."""


def running_head(furniture: Furniture) -> str:
    """Return study number, short title and marking; a title too long for the line is cut at a word."""
    number, marking = furniture.study_number, furniture.marking
    head = _joined(number, furniture.short_title, marking)
    words = furniture.short_title.split()
    while width(head, SANS_TEXT) > LONGEST_HEAD and len(words) > 1:
        words.pop()
        head = _joined(number, " ".join(words) + "\u00a0…", marking)
    return head


def running_foot(furniture: Furniture) -> str:
    """Return edition, status and date, and where the current edition is to be found."""
    status = "" if furniture.status in furniture.edition else furniture.status
    return _joined(", ".join(part for part in (furniture.edition, status) if part), furniture.date, CHECK_REGISTER)


def status_mark(furniture: Furniture) -> str:
    """Return the words across every page, empty when there are none."""
    return STATUS_MARKS.get(furniture.status, "")


def origin(furniture: Furniture, part: str) -> str:
    """Return where a copied text comes from."""
    return ", ".join(piece for piece in (furniture.study_number, furniture.edition, part) if piece)


def _joined(*parts: str) -> str:
    return BETWEEN.join(part for part in parts if part)

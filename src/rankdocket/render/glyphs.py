"""Every character of a page must be in one of its faces: found out before layout, not on paper."""

import unicodedata
from html.parser import HTMLParser
from typing import Final

from rankdocket.errors import RenderError
from rankdocket.render.fonts import text_signs

_LAYOUT_SIGNS: Final = frozenset("\n\t")
_UNPRINTED: Final = frozenset({"style"})
_SHOWN_AT_MOST: Final = 10


class _Reader(HTMLParser):
    """Collects the characters no face has, each with the id of the part it first stood in."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.found: dict[str, str] = {}
        self._part = ""
        self._open: list[str] = []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self._part = dict(attrs).get("id") or self._part
        if tag in _UNPRINTED:
            self._open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        if self._open and self._open[-1] == tag:
            self._open.pop()

    def handle_data(self, data: str) -> None:
        if not self._open:
            for sign in sorted(set(data) - _LAYOUT_SIGNS):
                if ord(sign) not in text_signs():
                    self.found.setdefault(sign, self._part)


def require_glyphs(page: str, furniture: tuple[str, ...] = ()) -> None:
    """Check the text of a page, and the texts its style sheet prints, against the faces.

    Raises
    ------
    RenderError
        If a character has no shape in any face; it is named with its number and where it stands.
    """
    reader = _Reader()
    reader.feed(page)
    reader.close()
    for text in furniture:
        for sign in sorted(set(text) - _LAYOUT_SIGNS):
            if ord(sign) not in text_signs():
                reader.found.setdefault(sign, "the head or foot of the pages")
    if reader.found:
        named = [
            f"{_named(sign)} in {part or 'the page'}" for sign, part in sorted(reader.found.items())[:_SHOWN_AT_MOST]
        ]
        raise RenderError(f"The faces of the report have no shape for: {'; '.join(named)}. Write it another way.")


def _named(sign: str) -> str:
    shown = f"'{sign}' " if sign.isprintable() else ""
    return f"{shown}U+{ord(sign):04X} {unicodedata.name(sign, 'without a name')}"

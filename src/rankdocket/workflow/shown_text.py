"""What a page says to somebody who reads it: its words without tags and style sheets."""

import re
from html.parser import HTMLParser
from typing import Final

_SPOKEN: Final = ("alt", "title", "aria-label", "content", "placeholder", "value")
"""Attributes whose text a reader, or a reader's machine, is told."""

_GENERATED: Final = re.compile(r"\bcontent\s*:\s*([^;}]+)")
"""Words that a style sheet puts on the page."""


def markup_text(page: str) -> str:
    """Return the words of an HTML page or an SVG drawing in their order; what a style sheet writes comes in its place."""
    reader = _Reader()
    reader.feed(page)
    reader.close()
    return "".join(reader.parts)


class _Reader(HTMLParser):
    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.parts: list[str] = []
        self._in_style = False

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self._in_style = tag == "style"
        self._take(attrs)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        del tag  # nothing can stand in it
        self._take(attrs)

    def handle_endtag(self, tag: str) -> None:
        if tag == "style":
            self._in_style = False

    def handle_data(self, data: str) -> None:
        self.parts.extend(_GENERATED.findall(data) if self._in_style else [data])

    def _take(self, attrs: list[tuple[str, str | None]]) -> None:
        for name, value in attrs:
            if name in _SPOKEN and value:
                self.parts.append(f" {value} ")
            elif name == "style" and value:
                self.parts.extend(_GENERATED.findall(value))

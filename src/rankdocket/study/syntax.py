"""Text that is no YAML, said in our own sentences: forbidden characters, tabs, errors of form."""

import re
from typing import Final

import yaml

from rankdocket.errors import Fault, Place
from rankdocket.study.indentation import Misfit, misfit_of
from rankdocket.study.messages import Message, fault
from rankdocket.study.wording import counted

# Control characters, lone surrogates, non-characters, and the three line ends that editors do not count.
_FORBIDDEN: Final = re.compile("[^\t\n\r\x20-\x7e\xa0-\u2027\u202a-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")
_TABBED: Final = re.compile(r"^( *)\t[ \t]*[^ \t\r\n]", re.MULTILINE)

_COLON: Final = "mapping values are not allowed"

_PROBLEMS: Final = (
    (_COLON, 'a ": " stands where no key can be.', "Quote a text that holds a colon."),
    ("could not find expected ':'", "a key stands without its colon.", "Write key: value."),
    ("unexpected end of stream", "quotation marks are opened and not closed.", "Close them."),
    ("unexpected document indicator", "quotation marks are opened and not closed.", "Close them."),
    ("expected ',' or", "a bracket is opened and not closed, or a comma is missing.", "Close it, or write the comma."),
    ("flow", "a bracket is opened and not closed, or a comma is missing.", "Close it, or write the comma."),
    ("block sequence entries", 'a "- " stands where no list can be.', "Begin the list on a line of its own."),
    ("cannot start any token", "a value cannot begin with this character.", "Put the value in quotes."),
    ("escape", "a backslash in double quotes has no known letter after it.", "Use single quotes for a backslash."),
    ("expected key", "the indentation of this line fits no line above.", "Align it with the keys it belongs to."),
    ("block end", "the indentation of this line fits no line above.", "Align it with the keys it belongs to."),
    ("expected '-' indicator", "this line is neither part of the list above nor a key.", "Check the indentation."),
    ("<document start>", "this line is outside the keys of the file.", "Check the indentation."),
    ("directive", "a line that begins with % is not used in a spec.", "Leave it out."),
    ("anchor", "a name after & or * is expected here.", "Put a value that begins with & or * in quotes."),
    ("alias", "a name after & or * is expected here.", "Put a value that begins with & or * in quotes."),
    ("tag", "a value that begins with ! is not used in a spec.", "Put it in quotes."),
)
"""Fragments of a parser's complaint → our sentence and remedy; the first that occurs is taken."""

_OFTEN_INDENTATION: Final = (
    _COLON,
    "expected key",
    "block end",
    "expected '-' indicator",
    "<document start>",
    "block sequence entries",
)
"""Fragments that a wrong indentation gives as well."""


def forbidden_in(text: str) -> str | None:
    """Return the first character of ``text`` that no spec may hold, or ``None``."""
    found = _FORBIDDEN.search(text)
    if found is not None:
        return found.group()
    return "\r" if "\r" in text else None


def character_faults(text: str, path: str) -> list[Fault]:
    """Return a fault for each line that holds a forbidden character."""
    return [
        fault(
            Place(path, number, found.start() + 1),
            "",
            Message.CHARACTER,
            f"the character U+{ord(found.group()):04X} cannot stand in a spec.",
            "Delete it; an editor may not show it.",
        )
        for number, line in enumerate(_lines(text), start=1)
        if (found := _FORBIDDEN.search(line)) is not None
    ]


def tab_faults(text: str, path: str) -> list[Fault]:
    """Return a fault for each line whose indentation holds a tab."""
    return [
        fault(
            Place(path, number, len(found.group(1)) + 1),
            "",
            Message.TAB,
            "a tab stands in the indentation.",
            "Indent with spaces.",
        )
        for number, line in enumerate(_lines(text), start=1)
        if (found := _TABBED.match(line)) is not None
    ]


def syntax_fault(error: yaml.YAMLError, text: str, path: str) -> Fault:
    """Return what a parser's error means to somebody who writes a spec."""
    problem = str(getattr(error, "problem", None) or "")
    context = str(getattr(error, "context", None) or "")
    mark = getattr(error, "problem_mark", None)
    if "quoted scalar" in context and "end of stream" in problem:
        # The end of the file is where it was noticed; where the quotation marks open is where to look.
        mark = getattr(error, "context_mark", None) or mark
    place = Place(path) if mark is None else Place(path, mark.line + 1, mark.column + 1)
    if place.line is not None and place.line > len(_lines(text)):
        place = Place(path, len(_lines(text)))
    for complaint in (problem, context):
        for fragment, what, remedy in _PROBLEMS:
            if fragment in complaint:
                odd = misfit_of(_lines(text), place.line or 1) if fragment in _OFTEN_INDENTATION else None
                if odd is not None:
                    return _misfit_fault(odd, path, fragment)
                return fault(place, "", Message.SYNTAX, what, remedy)
    return fault(place, "", Message.SYNTAX, "the text cannot be read as YAML from here on.", "Check this line.")


def _misfit_fault(odd: Misfit, path: str, fragment: str) -> Fault:
    what = f"line {odd.line} is indented unlike its neighbours, by {counted(odd.indent, 'space')}."
    remedy = f"Indent it by {' or '.join(str(depth) for depth in odd.fitting)}, like the keys it belongs to."
    if not odd.fitting:
        remedy = "Align it with the keys it belongs to."
    if fragment == _COLON:
        remedy = f"{remedy} Or, if it goes on with the text of the line above, put that whole text in quotes."
    return fault(Place(path, odd.line, odd.indent + 1), "", Message.SYNTAX, what, remedy)


def _lines(text: str) -> list[str]:
    return re.split(r"\r\n|\r|\n", text)

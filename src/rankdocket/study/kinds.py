"""The kinds of value that a key of the spec can take: how each is read from text, and its JSON Schema.

Each kind is written once and stands in the annotation of a key, so that what is accepted, what is refused in
which words, and what the schema says cannot drift apart.
"""

import re
from abc import ABC, abstractmethod
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import Any, Final

from pydantic import GetCoreSchemaHandler, GetJsonSchemaHandler
from pydantic_core import PydanticCustomError, core_schema

from rankdocket.study.messages import Message
from rankdocket.study.nodes import LONGEST_KEY
from rankdocket.study.wording import shown

REFUSED: Final = "rankdocket"
"""Type of every validation error that these kinds raise; its context holds number, what and remedy."""

_TEXT_SCHEMA: Final = {"type": ["string", "number"]}
_WHOLE: Final = re.compile(r"[0-9]+")
_DECIMAL: Final = re.compile(r"([0-9]+(\.[0-9]+)?|\.[0-9]+)([eE][-+]?[0-9]{1,2})?")
_DATE: Final = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}")
_MEMORY: Final = re.compile(r"(0|[1-9][0-9]*) (MiB|GiB)")
_MEMORY_UNITS: Final = {"MiB": 2**20, "GiB": 2**30}
_MINUS_SIGNS: Final = ("-", "\u2212")
_LONGEST_NUMBER: Final = 40
"""Characters of a number in a spec: twice the longest seed."""

Schema = dict[str, Any]


def refuse(number: Message, what: str, remedy: str = "") -> PydanticCustomError:
    """Return the error that says, in our words, why a value is refused."""
    return PydanticCustomError(REFUSED, "{what}", {"number": number.value, "what": what, "remedy": remedy})


def text_of(value: object) -> str:
    """Return ``value`` if it is text; refuse a list or keys."""
    if isinstance(value, str):
        return value
    found = "a list stands" if isinstance(value, list) else "keys stand"
    raise refuse(Message.WRONG_SHAPE, f"{found} here; one value is expected.", "Write one value after the colon.")


@dataclass(frozen=True, slots=True)
class _Kind(ABC):
    """What all kinds share: pydantic asks them to read, and asks for their schema."""

    @abstractmethod
    def read(self, value: object) -> object:
        """Return the value that stands in the spec as what the key means."""

    @abstractmethod
    def schema(self) -> Schema:
        """Return the JSON Schema of what ``read`` accepts."""

    def __get_pydantic_core_schema__(self, source: object, handler: GetCoreSchemaHandler) -> core_schema.CoreSchema:
        return core_schema.no_info_plain_validator_function(self.read)

    def __get_pydantic_json_schema__(self, core: core_schema.CoreSchema, handler: GetJsonSchemaHandler) -> Schema:
        return self.schema()


@dataclass(frozen=True, slots=True)
class Prose(_Kind):
    """A text that is not blank; blanks around it are dropped."""

    def read(self, value: object) -> str:
        """Return the text."""
        text = text_of(value).strip()
        if not text:
            raise refuse(Message.NOTHING_WRITTEN, "the text is blank.", "Write a text, or leave the key out.")
        return text

    def schema(self) -> Schema:
        """Text; a number that stands for text is text."""
        return {**_TEXT_SCHEMA, "minLength": 1}


@dataclass(frozen=True, slots=True)
class CellText(_Kind):
    """The text of a data cell, exactly; it may be empty."""

    def read(self, value: object) -> str:
        """Return the text as it stands."""
        return text_of(value)

    def schema(self) -> Schema:
        """Any text."""
        return dict(_TEXT_SCHEMA)


@dataclass(frozen=True, slots=True)
class OneOf(_Kind):
    """A word of a closed list."""

    words: tuple[str, ...]

    def read(self, value: object) -> str:
        """Return the word."""
        text = text_of(value)
        if text not in self.words:
            remedy = f"Write one of: {', '.join(shown(w) if not w.isprintable() else w for w in self.words)}."
            raise refuse(Message.NOT_IN_LIST, f"{shown(text)} is not in the list.", remedy)
        return text

    def schema(self) -> Schema:
        """The closed list."""
        return {"enum": list(self.words)}


@dataclass(frozen=True, slots=True)
class Mark(_Kind):
    """A character of a closed list; some of them are written as words."""

    characters: tuple[str, ...]
    words: tuple[tuple[str, str], ...] = ()

    def read(self, value: object) -> str:
        """Return the character."""
        text = dict(self.words).get(text_of(value), text_of(value))
        if text not in self.characters:
            remedy = f"Write one of: {' '.join(self._written())}"
            raise refuse(Message.NOT_IN_LIST, f"{shown(text)} is not such a mark.", remedy)
        return text

    def schema(self) -> Schema:
        """The characters and the words for them."""
        return {"enum": [*self.characters, *(word for word, _ in self.words)]}

    def _written(self) -> list[str]:
        named = {character: word for word, character in self.words}
        return [f'"{_escaped(named.get(character, character))}"' for character in self.characters]


@dataclass(frozen=True, slots=True)
class CommentMark(_Kind):
    """One to three visible characters."""

    def read(self, value: object) -> str:
        """Return the characters."""
        text = text_of(value)
        if re.fullmatch(r'[^\s"]{1,3}', text) is None:
            remedy = 'Write one to three characters, such as "#".'
            raise refuse(Message.NOT_IN_LIST, f"{shown(text)} cannot mark a comment.", remedy)
        return text

    def schema(self) -> Schema:
        """One to three characters without blanks and quotation marks."""
        return {"type": "string", "pattern": '^[^\\s"]{1,3}$'}


@dataclass(frozen=True, slots=True)
class WholeNumber(_Kind):
    """A whole number from ``low`` to ``high``."""

    low: int
    high: int

    def read(self, value: object) -> int:
        """Return the number."""
        text = text_of(value)
        if _WHOLE.fullmatch(text) is None or len(text) > _LONGEST_NUMBER:
            remedy = f"Write digits only, {self.low} to {self.high}."
            raise refuse(Message.NOT_A_NUMBER, f"{shown(text)} is not a whole number.", remedy)
        number = int(text)
        if text != str(number):
            what = f"{text} begins with 0 and is read by some as a number to another base than ten."
            raise refuse(Message.YAML_TRAP, what, f"Write {number}.")
        if not self.low <= number <= self.high:
            raise refuse(Message.OUT_OF_RANGE, f"{text} is not possible here.", f"Write {self.low} to {self.high}.")
        return number

    def schema(self) -> Schema:
        """A JSON number or its digits as text."""
        number = {"type": "integer", "minimum": self.low, "maximum": self.high}
        return {"anyOf": [number, {"type": "string", "pattern": "^(0|[1-9][0-9]*)$"}]}


@dataclass(frozen=True, slots=True)
class DecimalNumber(_Kind):
    """A decimal from ``low`` to ``high``; an end in ``excluded`` is not reached."""

    low: Decimal
    high: Decimal
    excluded: tuple[Decimal, ...] = ()

    def read(self, value: object) -> Decimal:
        """Return the number, exactly."""
        text = text_of(value)
        self._refuse_sign(text)
        if _DECIMAL.fullmatch(text) is None or len(str(Decimal(text))) > _LONGEST_NUMBER:
            raise refuse(Message.NOT_A_NUMBER, f"{shown(text)} is not a number.", self._rescue(text))
        number = Decimal(text)
        if not self._holds(number):
            remedy = f"Write {self._range()}.{self._percent_hint(text)}"
            raise refuse(Message.OUT_OF_RANGE, f"{text} is not possible here.", remedy)
        return number

    def schema(self) -> Schema:
        """A JSON number or its decimal text."""
        low = "exclusiveMinimum" if self.low in self.excluded else "minimum"
        high = "exclusiveMaximum" if self.high in self.excluded else "maximum"
        number: Schema = {"type": "number", low: _json_number(self.low), high: _json_number(self.high)}
        return {"anyOf": [number, {"type": "string", "pattern": f"^({_DECIMAL.pattern})$"}]}

    def _holds(self, number: Decimal) -> bool:
        return self.low <= number <= self.high and number not in self.excluded

    def _range(self) -> str:
        low = f"more than {self.low}" if self.low in self.excluded else f"at least {self.low}"
        high = f"less than {self.high}" if self.high in self.excluded else f"at most {self.high}"
        return f"a number {low} and {high}"

    def _rescue(self, text: str) -> str:
        """Return what to write instead: the same number with a point or without a percent sign, if it is one."""
        pointed = text.replace(",", ".", 1)
        if _DECIMAL.fullmatch(pointed) is not None and self._holds(Decimal(pointed)):
            return f"Write {pointed}."
        percent = pointed.removesuffix("%").strip()
        if pointed.endswith("%") and _DECIMAL.fullmatch(percent) is not None and len(percent) < _LONGEST_NUMBER:
            share = Decimal(percent) / 100
            if self._holds(share):
                return f"Write {share:f}."
        return f"Write {self._range()}."

    def _percent_hint(self, text: str) -> str:
        """Return what the number is without percent, if that is possible here."""
        share = Decimal(text).scaleb(-2)
        if self.high > 1 or Decimal(text) <= 1 or not self._holds(share):
            return ""
        return f" {text} percent is {share:f}."

    def _refuse_sign(self, text: str) -> None:
        """Refuse a number with a minus as such: it can be read, and no number of a spec is below 0."""
        if text.startswith(_MINUS_SIGNS) and _DECIMAL.fullmatch(text[1:]) is not None:
            raise refuse(Message.OUT_OF_RANGE, f"{shown(text)} is below what is possible.", f"Write {self._range()}.")


@dataclass(frozen=True, slots=True)
class Memory(_Kind):
    """An amount of memory as "512 MiB" or "1 GiB" (IEC 80000-13), read as bytes."""

    most: int

    def read(self, value: object) -> int:
        """Return the bytes."""
        text = text_of(value)
        parts = _MEMORY.fullmatch(text)
        remedy = f"Write a whole number and its unit, MiB or GiB, up to {memory_text(self.most)}; such as 1 GiB."
        if parts is None or len(text) > _LONGEST_NUMBER:
            raise refuse(Message.NOT_A_NUMBER, f"{shown(text)} is not an amount of memory.", remedy)
        amount = int(parts[1]) * _MEMORY_UNITS[parts[2]]
        if not 0 < amount <= self.most:
            raise refuse(Message.OUT_OF_RANGE, f"{text} is not possible here.", remedy)
        return amount

    def schema(self) -> Schema:
        """A whole number above 0 and a unit."""
        return {"type": "string", "pattern": "^[1-9][0-9]* (MiB|GiB)$"}


def memory_text(amount: int) -> str:
    """Return bytes as :class:`Memory` reads them, in the largest unit that leaves a whole number."""
    unit = next(unit for unit in ("GiB", "MiB") if amount % _MEMORY_UNITS[unit] == 0)
    return f"{amount // _MEMORY_UNITS[unit]} {unit}"


@dataclass(frozen=True, slots=True)
class Size(DecimalNumber):
    """How large a coefficient is, whichever its sign."""

    def _refuse_sign(self, text: str) -> None:
        """Refuse a number with a sign, and say the size that it has."""
        bare = text[1:].replace(",", ".", 1)
        if text.startswith((*_MINUS_SIGNS, "+")) and _DECIMAL.fullmatch(bare) is not None:
            what = f"{shown(text)} has a sign; a size is written without its sign."
            is_possible = len(bare) < _LONGEST_NUMBER and self._holds(Decimal(bare))
            remedy = f"Write {bare}." if is_possible else f"Write {self._range()}."
            raise refuse(Message.OUT_OF_RANGE, what, remedy)


@dataclass(frozen=True, slots=True)
class IsoDate(_Kind):
    """A day as 2026-04-09."""

    def read(self, value: object) -> str:
        """Return the date as written."""
        text = text_of(value)
        remedy = "Write year-month-day, such as 2026-04-09."
        if _DATE.fullmatch(text) is None:
            raise refuse(Message.DATE, f"{shown(text)} is not a date.", remedy)
        try:
            date.fromisoformat(text)
        except ValueError:
            raise refuse(Message.DATE, f"{shown(text)} is not in the calendar.", remedy) from None
        return text

    def schema(self) -> Schema:
        """ISO 8601 calendar date."""
        return {"type": "string", "format": "date", "pattern": f"^{_DATE.pattern}$"}


@dataclass(frozen=True, slots=True)
class FolderPath(_Kind):
    """A file inside the study folder, with forward slashes."""

    def read(self, value: object) -> str:
        """Return the path as written."""
        text = text_of(value)
        remedy = "Write the path from the folder of the spec, such as received/zinc.csv."
        if not text.strip():
            raise refuse(Message.PATH, "the path is blank.", remedy)
        if re.match(r"[A-Za-z]:", text) or text.startswith(("/", "\\", "~")):
            raise refuse(Message.PATH, f"{shown(text)} does not begin at the folder of the spec.", remedy)
        if "\\" in text:
            raise refuse(Message.PATH, f"{shown(text)} holds a backslash.", f"Write {text.replace(chr(92), '/')}.")
        if any(part in ("", ".", "..") for part in text.split("/")) or not text.isprintable():
            raise refuse(Message.PATH, f"{shown(text)} is not a plain path inside the study folder.", remedy)
        return text

    def schema(self) -> Schema:
        """A relative path."""
        return {"type": "string", "pattern": r"^(?![A-Za-z]:)(?![/~])(?!(.*/)?\.{0,2}(/|$))[^\\]+$"}


@dataclass(frozen=True, slots=True)
class MissingCodes(_Kind):
    """Codes that mean "missing": a list of them, or each with its meaning."""

    def read(self, value: object) -> dict[str, str]:
        """Return code → meaning, codes without blanks around them."""
        if isinstance(value, str):
            what = "one value stands here; a list of codes is expected."
            raise refuse(Message.WRONG_SHAPE, what, f'Write ["{_escaped(value)}"], or [] when no code is used.')
        written = value.items() if isinstance(value, Mapping) else [(code, "missing") for code in _listed(value)]
        codes: dict[str, str] = {}
        for written_code, meaning in written:
            code = text_of(written_code).strip()
            if code in codes:
                raise refuse(Message.ENTRY_TWICE, f"the code {shown(code)} stands twice.", "Keep one of them.")
            if len(code) > LONGEST_KEY:
                raise refuse(Message.TOO_LARGE, f"the code {shown(code)} is longer than {LONGEST_KEY} characters.")
            codes[code] = Prose().read(meaning)
        return codes

    def schema(self) -> Schema:
        """A list of texts, or an object of texts."""
        meanings = {"type": "object", "additionalProperties": {**_TEXT_SCHEMA, "minLength": 1}}
        return {"anyOf": [{"type": "array", "items": dict(_TEXT_SCHEMA), "uniqueItems": True}, meanings]}


@dataclass(frozen=True, slots=True)
class TableAndColumn:
    """Before a column's own form: "chemistry / Zn_diss" is taken apart."""

    def __get_pydantic_core_schema__(self, source: object, handler: GetCoreSchemaHandler) -> core_schema.CoreSchema:
        return core_schema.no_info_before_validator_function(self.take_apart, handler(source))

    def __get_pydantic_json_schema__(self, core: core_schema.CoreSchema, handler: GetJsonSchemaHandler) -> Schema:
        return {"anyOf": [{**_TEXT_SCHEMA, "minLength": 1}, handler(core)]}

    def take_apart(self, value: object) -> object:
        """Return table and name; a text without " / " is a column's name."""
        if not isinstance(value, str):
            return value
        table, slash, name = value.partition(" / ")
        return {"table": table, "name": name} if slash else {"name": value}


def _listed(value: object) -> list[object]:
    return list(value) if isinstance(value, list) else []


def _escaped(text: str) -> str:
    return "".join(c if c.isprintable() else f"\\u{ord(c):04X}" for c in text)


def _json_number(number: Decimal) -> int | float:
    return int(number) if number == int(number) else float(number)

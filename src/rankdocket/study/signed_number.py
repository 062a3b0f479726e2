"""A number of the spec that may lie below 0."""

import re
from dataclasses import dataclass
from decimal import Decimal
from typing import Final

from rankdocket.study.kinds import DecimalNumber, Schema, refuse, text_of
from rankdocket.study.messages import Message
from rankdocket.study.wording import shown

LONGEST: Final = 40
_SIGNED: Final = re.compile(r"[-\u2212]?([0-9]+(\.[0-9]+)?|\.[0-9]+)")


@dataclass(frozen=True, slots=True)
class SignedNumber(DecimalNumber):
    """A decimal from ``low`` to ``high`` with its sign; a typographic minus is read as one."""

    def read(self, value: object) -> Decimal:
        """Return the number, exactly."""
        text = text_of(value)
        if _SIGNED.fullmatch(text) is None or len(text) > LONGEST:
            raise refuse(Message.NOT_A_NUMBER, f"{shown(text)} is not a number.", self._rescue(text))
        number = Decimal(text.replace("\u2212", "-"))
        if not self._holds(number):
            raise refuse(Message.OUT_OF_RANGE, f"{text} is not possible here.", f"Write {self._range()}.")
        return number or Decimal(0)

    def schema(self) -> Schema:
        """A JSON number or its decimal text."""
        number = DecimalNumber.schema(self)["anyOf"][0]
        return {"anyOf": [number, {"type": "string", "pattern": f"^({_SIGNED.pattern})$"}]}

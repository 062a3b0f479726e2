"""The unit that the spec declares against the one that stands in the file."""

import unicodedata
from typing import Final

from rankdocket.errors import Fault, Place
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import VariableSpec
from rankdocket.study.table import Table
from rankdocket.study.wording import composed, shown

PURE_NUMBER: Final = "1"
"""How a spec writes the unit of a number without one (ISO 80000-1 gives such a quantity the unit one)."""

_NO_UNIT: Final = ("", "-", "\u2013", PURE_NUMBER)
_BRACKETS: Final = (("[", "]"), ("(", ")"))


def unit_faults(table: Table, spec: VariableSpec) -> list[Fault]:
    """Return a fault if the unit row names another unit than the spec.

    Brackets around a unit are dropped, and characters that look the same (the micro sign and the Greek letter)
    are taken as the same.  A blank in the unit row says nothing.
    """
    found = table.units.get(composed(spec.column), "")
    bare = _bare(found)
    if spec.unit is None or not bare or bare == _bare(spec.unit):
        return []
    if spec.unit == PURE_NUMBER and bare in _NO_UNIT:
        return []
    row = table.spec.units_in_row
    what = f"the file gives the unit {shown(found)}, the spec {shown(spec.unit)}."
    remedy = f"Write unit: {shown(found)}, or take the column whose unit is meant; nothing is converted."
    field = f"row {row}, column {spec.column}"
    return [fault(Place(table.source.path, row), field, Message.UNIT_DIFFERS, what, remedy)]


def _bare(unit: str) -> str:
    text = unicodedata.normalize("NFKC", unit).strip()
    for opening, closing in _BRACKETS:
        if text.startswith(opening) and text.endswith(closing):
            text = text[1:-1].strip()
    return text

"""Small tables for the tests of this room, read from text as a user's file would be."""

from dataclasses import replace
from typing import Any

from rankdocket.errors import Place
from rankdocket.study.spec import DataSpec, VariableSpec
from rankdocket.study.table import Table
from rankdocket.study.tables import read_table

SPEC_PLACE = Place("s.yaml", 20, 3)

DATA = DataSpec(
    name="survey",
    file="received/survey.csv",
    separator=",",
    decimal_mark=".",
    thousands_mark=None,
    text_encoding="utf-8",
    comment_mark=None,
    column_names_in_row=1,
    units_in_row=None,
    first_data_row=2,
    last_data_row=None,
    missing_codes={"": "missing", "n/a": "missing"},
    received_on=None,
    received_from=None,
    place=Place("s.yaml", 7, 3),
)

VARIABLE = VariableSpec(
    name="clarity",
    table="survey",
    column="secchi",
    label="Secchi depth",
    unit="m",
    scale="measured",
    lowest_to_highest=(),
    other_spellings={},
    missing_codes={},
    derived_from=None,
    place=SPEC_PLACE,
)


def table(data: bytes | str, **rules: Any) -> Table:
    """Read a table; text is taken as utf-8."""
    return read_table(data.encode("utf-8") if isinstance(data, str) else data, replace(DATA, **rules))


def column(cells: list[str], name: str = "secchi", **rules: Any) -> Table:
    """Read a table of one column whose cells are quoted."""
    return table("".join('"' + cell.replace('"', '""') + '"\n' for cell in (name, *cells)), **rules)

"""Files that are not what the spec says of them: nothing in them, names in a comment, another separator."""

from collections.abc import Sequence
from dataclasses import dataclass, replace

from rankdocket.errors import Fault, InputError, Place
from rankdocket.study.cells import is_number_like
from rankdocket.study.delimited import records_of
from rankdocket.study.form import SEPARATORS, TAB_WORD
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import DataSpec
from rankdocket.study.wording import counted, shown


def content_fault(lines: Sequence[str], spec: DataSpec) -> Fault | None:
    """Return the fault that a file has no data, or that its row of column names is a comment."""
    field = f"data.{spec.name}"
    filled = [number for number, line in enumerate(lines, start=1) if line.replace(spec.separator, "").strip()]
    written = [number for number in filled if not _is_comment(lines[number - 1], spec)]
    if not written:
        what = "the file holds comments and nothing else." if filled else "the file is empty."
        return fault(Place(spec.file), field, Message.NO_DATA, what, "Ask for the file again, with its data.")
    if spec.column_names_in_row in filled and spec.column_names_in_row not in written:
        return _commented_fault(lines, spec, written[0])
    if spec.column_names_in_row in written and set(written) <= {spec.column_names_in_row, spec.units_in_row}:
        units = ", units" if spec.units_in_row in written else ""
        what = f"the file holds column names{units} and no data."
        place = Place(spec.file, spec.column_names_in_row)
        return fault(place, field, Message.NO_DATA, what, "Ask for the file again, with its data.")
    return None


def _is_comment(line: str, spec: DataSpec) -> bool:
    return spec.comment_mark is not None and line.startswith(spec.comment_mark)


def _commented_fault(lines: Sequence[str], spec: DataSpec, first: int) -> Fault:
    names = spec.column_names_in_row
    what = f"row {names} is to hold the column names and begins with the comment mark {shown(spec.comment_mark or '')}."
    fields = lines[first - 1].split(spec.separator)
    choices: list[str] = []
    if not any(is_number_like(text) for text in fields):
        choices.append(f"write: column_names_in_row: {first}")
    if not choices or (len(fields) > 1 and lines[names - 1].count(spec.separator) == len(fields) - 1):
        choices.append(f"if row {names} does hold the names, leave comment_mark out.")
    remedy = "; or, ".join(choices)
    field = f"data.{spec.name}.column_names_in_row"
    return fault(Place(spec.file, names), field, Message.NAMES_COMMENTED, what, remedy[0].upper() + remedy[1:])


@dataclass(frozen=True, slots=True)
class _Split:
    """How a separator takes the file apart: fields of the names, and how many of all other rows have as many."""

    separator: str
    names_in_row: int
    fields: int
    agreeing: int
    rows: int

    def __str__(self) -> str:
        rows = f"{self.agreeing} of {counted(self.rows, 'row')}"
        found = f"{counted(self.fields, 'field')} in row {self.names_in_row}"
        return f"separator {_written(self.separator)} finds {found} and as many in {rows} below"


def separator_fault(lines: list[str], spec: DataSpec) -> Fault | None:
    """Return the fault that another separator than the declared one takes the rows apart.

    It is not raised where the declared one gives two fields or more, as many in each row as there are names.
    """
    declared = _split(lines, spec)
    if declared is not None and declared.fields > 1 and declared.agreeing == declared.rows:
        return None
    alone = declared is None or declared.fields == 1
    fewest = 0 if alone or declared is None else declared.agreeing
    splits = [_split(lines, replace(spec, separator=other)) for other in SEPARATORS if other != spec.separator]
    better = [s for s in splits if s is not None and s.fields > 1 and s.agreeing > max(fewest, s.rows / 2)]
    if not better:
        return None
    best = max(better, key=lambda split: (split.agreeing, split.fields))
    unmatched = f"with separator {_written(spec.separator)} the quotation marks do not match"
    told = unmatched if declared is None else str(declared)
    remedy = f"Write: separator: {_written(best.separator)}"
    place = Place(spec.file, spec.column_names_in_row)
    return fault(place, f"data.{spec.name}.separator", Message.OTHER_SEPARATOR, f"{told}; {best}.", remedy)


def _written(separator: str) -> str:
    return TAB_WORD if separator == "\t" else shown(separator)


def _split(lines: list[str], spec: DataSpec) -> _Split | None:
    """Return how the file comes apart, or ``None`` when it cannot be taken apart so."""
    try:
        records = records_of(lines, spec)
    except InputError:
        return None
    rows = records.data if records.units is None else (records.units, *records.data)
    fields = len(records.names.fields)
    return _Split(spec.separator, records.names.line, fields, sum(len(row.fields) == fields for row in rows), len(rows))

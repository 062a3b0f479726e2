"""Delimited text to a table: names, units and cells as received, or every fault of the file's form."""

from collections import Counter
from collections.abc import Sequence

from rankdocket.canonical import digest_of, sha256
from rankdocket.errors import Fault, InputError, Place
from rankdocket.study.delimited import Record, Records, lines_of, records_of
from rankdocket.study.messages import Message, fault, in_file_order
from rankdocket.study.misread import content_fault, separator_fault
from rankdocket.study.spec import DataSpec
from rankdocket.study.table import SourceFile, Table
from rankdocket.study.wording import composed, counted, first_places, first_rows, looks_alike, shown, suggestion


def read_table(data: bytes, spec: DataSpec) -> Table:
    """Read a delimited text file exactly as its spec says; nothing about the file is guessed.

    Parameters
    ----------
    data
        The bytes as received.
    spec
        How they are to be read.

    Returns
    -------
    Table
        Column names are in Unicode normal form C without blanks around them; cells are as received, save that
        a line break inside a quoted cell is a line feed.

    Raises
    ------
    InputError
        With every fault of the file's form.
    """
    lines = lines_of(data, spec)
    records = _records(lines, spec)
    names = [composed(name) for name in records.names.fields]
    faults = [*_name_faults(names, records.names, spec), *_length_faults(records, spec)]
    if faults or len(names) == 1:
        separated = separator_fault(lines, spec)
        # With the right separator the names and the fields are others.
        faults = faults if separated is None else [separated]
    if faults:
        raise InputError(in_file_order(faults))
    units = [] if records.units is None else [composed(unit) for unit in records.units.fields]
    rows = [record.fields for record in records.data]
    columns = {name: tuple(row[position] for row in rows) for position, name in enumerate(names)}
    values_digest = digest_of({"names": names, "units": units, "columns": [columns[name] for name in names]})
    return Table(
        spec=spec,
        source=SourceFile(spec.file, len(data), sha256(data), values_digest),
        units=dict(zip(names, units, strict=True)) if units else {},
        columns=columns,
        row_numbers=tuple(record.line for record in records.data),
    )


def _records(lines: list[str], spec: DataSpec) -> Records:
    found = content_fault(lines, spec)
    if found is not None:
        raise InputError((found,))
    try:
        return records_of(lines, spec)
    except InputError as error:
        # A quoted field that ends before another separator looks like quotation marks that do not match.
        quoted = any(one.number == Message.QUOTATION for one in error.faults)
        separated = separator_fault(lines, spec) if quoted else None
        if separated is None:
            raise
        raise InputError((separated,)) from None


def cells_of(table: Table, column: str) -> tuple[str, ...] | None:
    """Return the cells of a column, its name compared in Unicode normal form C; ``None`` without such a column."""
    return table.columns.get(composed(column))


def column_fault(table: Table, column: str, place: Place, field: str) -> Fault:
    """Return the fault that ``column``, promised by the spec at ``place``, is not in the table."""
    names = list(table.columns)
    alike = [(name, points) for name in names if (points := looks_alike(composed(column), name)) is not None]
    where = f"Names are read from row {table.spec.column_names_in_row} of {table.source.path}; if they are in "
    remedy = f"{where}another row write column_names_in_row."
    what = f"no column {shown(column)}; {suggestion(column, names, 'columns')}"
    if alike:
        name, points = alike[0]
        what = f"no column {shown(column)}; {shown(name)} looks the same but has another character ({points})."
        remedy = "Copy the name from the file."
    return fault(place, field, Message.COLUMN_NOT_FOUND, what, remedy)


def _name_faults(names: Sequence[str], record: Record, spec: DataSpec) -> list[Fault]:
    place = Place(spec.file, record.line)
    field = f"row {record.line}"
    faults: list[Fault] = []
    blank = [position for position, name in enumerate(names, start=1) if not name]
    if blank:
        what = f"the column name is blank in {first_places('field', blank)}; the row has {len(names)}."
        remedy = "Give every column a name in the file, or write column_names_in_row."
        faults.append(fault(place, field, Message.COLUMN_NAMES, what, remedy))
    for name, count in Counter(names).items():
        if name and count > 1:
            places = [position for position, other in enumerate(names, start=1) if other == name]
            what = f"the column name {shown(name)} stands in {first_places('field', places)}."
            faults.append(fault(place, field, Message.COLUMN_NAMES, what, "Rename one of them in the file."))
    return faults


def _length_faults(records: Records, spec: DataSpec) -> list[Fault]:
    expected = len(records.names.fields)
    units = [] if records.units is None else [records.units]
    odd = [record for record in (*units, *records.data) if len(record.fields) != expected]
    if not odd:
        return []
    first = odd[0]
    what = (
        f"{counted(len(first.fields), 'field')} where the names in row "
        f"{records.names.line} give {expected}; {first_rows([record.line for record in odd])}."
    )
    remedy = "Check separator, quotation marks and, for lines that are no data, comment_mark or last_data_row."
    return [fault(Place(spec.file, first.line), f"row {first.line}", Message.FIELD_COUNT, what, remedy)]

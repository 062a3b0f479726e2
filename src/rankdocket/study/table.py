"""A table as read: text in, values out, with every literal and every row number kept."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

from rankdocket.study.spec import DataSpec, VariableSpec


@dataclass(frozen=True, slots=True)
class SourceFile:
    """A file as received.

    Attributes
    ----------
    path
        As written in the spec.
    size
        Bytes.
    digest
        SHA-256 of the bytes as filed.
    values_digest
        Digest of the cells as read: unchanged by line ends, quoting or a byte-order mark.
    """

    path: str
    size: int
    digest: str
    values_digest: str


@dataclass(frozen=True, slots=True)
class Table:
    """Columns of text, one row a line of the file.

    Attributes
    ----------
    spec
        How it was to be read.
    source
        What was read.
    units
        Column name → text of the unit row; empty without one.
    columns
        Column name → cells as received, all of one length, in file order of columns.
    row_numbers
        Line number of each row as a person sees it in the file, header counted from 1.
    """

    spec: DataSpec
    source: SourceFile
    units: Mapping[str, str]
    columns: Mapping[str, tuple[str, ...]]
    row_numbers: tuple[int, ...]


@dataclass(frozen=True, slots=True)
class VariableValues:
    """One variable, read: a value, or the kind of missing, for every row of its table.

    Attributes
    ----------
    spec
        The variable.
    values
        Exact decimals (for ordered labels: 1 for the lowest), ``None`` where missing.
    missing
        The meaning of the missing code where a value is missing, else ``None``.
    literals
        The cells as received.
    labels
        For ordered labels, the declared labels lowest first (value 1 is ``labels[0]``); else empty.
    respelled
        Other spelling → rows in which it stood for its declared label.
    """

    spec: VariableSpec
    values: tuple[Decimal | None, ...]
    missing: tuple[str | None, ...]
    literals: tuple[str, ...]
    labels: tuple[str, ...]
    respelled: Mapping[str, int]


@dataclass(frozen=True, slots=True)
class StudyData:
    """Everything read for a study: tables and variables by their names in the spec."""

    tables: Mapping[str, Table]
    variables: Mapping[str, VariableValues]

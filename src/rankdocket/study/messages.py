"""The stable message numbers: each number has one meaning, for ever, in every release.

A number that is no longer raised keeps its line; a new meaning takes the next free number.
"""

from enum import IntEnum, unique
from typing import Final

from rankdocket.errors import Fault, Place


@unique
class Message(IntEnum):
    """Every message about a user's files, by number."""

    NUMBER_NOT_READABLE = 1
    NUMBER_AMBIGUOUS = 2
    LIMIT_NOT_GIVEN = 3
    LABEL_UNKNOWN = 4
    ORDER_MISSING = 5
    COLUMN_NOT_FOUND = 6
    JOIN_GREW = 7
    JOIN_LOST_ROWS = 8
    CONSTANT = 9
    TOO_FEW = 10
    REPEATS_UNDECLARED = 11
    TIME_UNDECLARED = 12
    LOCKED = 13
    DATA_CHANGED = 14
    KEY_UNKNOWN = 15
    YAML_TRAP = 16
    SYNTAX = 17
    TAB = 18
    CHARACTER = 19
    FEATURE = 20
    KEY_TWICE = 21
    KEY_NOT_TEXT = 22
    SEVERAL_DOCUMENTS = 23
    TOO_LARGE = 24
    NO_KEYS = 25
    NOTHING_WRITTEN = 26
    KEY_MISSING = 27
    WRONG_SHAPE = 28
    NOT_IN_LIST = 29
    NOT_A_NUMBER = 30
    OUT_OF_RANGE = 31
    NAME = 32
    PATH = 33
    DATE = 34
    ENTRY_TWICE = 35
    NAME_UNKNOWN = 36
    SAME_VARIABLE = 37
    TWO_TABLES = 38
    SIGN_MISSING = 39
    CONTRADICTION = 40
    NEEDED_BY_ANOTHER = 41
    DOES_NOT_APPLY = 42
    ROW_ORDER = 43
    ENCODING = 44
    FIELD_COUNT = 45
    COLUMN_NAMES = 46
    ROW_NOT_THERE = 47
    QUOTATION = 48
    NOT_A_COUNT = 49
    MORE_THAN_TWO = 50
    UNIT_DIFFERS = 51
    NO_ROW_MATCHED = 52
    FILE_NOT_READABLE = 53
    SEED_MISSING = 54
    NO_SUCH_STUDY = 55
    NO_SUCH_EDITION = 56
    FAMILY_EMPTY = 57
    NAMES_COMMENTED = 58
    OTHER_SEPARATOR = 59
    NO_DATA = 60
    FAMILY_ROWS_DIFFER = 61
    DERIVED_IN_A_CIRCLE = 62
    CHECK_NOT_WAIVABLE = 63


MEANINGS: Final = {
    Message.NUMBER_NOT_READABLE: "a cell is not a number",
    Message.NUMBER_AMBIGUOUS: "a cell could be two numbers",
    Message.LIMIT_NOT_GIVEN: "a value below a limit has no limit",
    Message.LABEL_UNKNOWN: "a label is not among the declared ones",
    Message.ORDER_MISSING: "the order of the labels is not given",
    Message.COLUMN_NOT_FOUND: "a column does not exist",
    Message.JOIN_GREW: "a join multiplied rows",
    Message.JOIN_LOST_ROWS: "a join lost rows",
    Message.CONSTANT: "a variable has one value",
    Message.TOO_FEW: "too few complete rows",
    Message.REPEATS_UNDECLARED: "repeated rows are not declared",
    Message.TIME_UNDECLARED: "an order in time is not declared",
    Message.LOCKED: "the plan was locked and differs",
    Message.DATA_CHANGED: "the data are not those that were locked",
    Message.KEY_UNKNOWN: "a key does not exist",
    Message.YAML_TRAP: "a word or number that readers of YAML take in different ways",
    Message.SYNTAX: "the spec cannot be read as YAML",
    Message.TAB: "a tab stands in the indentation",
    Message.CHARACTER: "a character that no text may hold",
    Message.FEATURE: "a feature of YAML that a spec does not use",
    Message.KEY_TWICE: "a key stands twice",
    Message.KEY_NOT_TEXT: "a key is not text",
    Message.SEVERAL_DOCUMENTS: "a file holds more than one document",
    Message.TOO_LARGE: "a file, a nesting or a text is too large",
    Message.NO_KEYS: "the spec holds no keys",
    Message.NOTHING_WRITTEN: "nothing is written where a value is needed",
    Message.KEY_MISSING: "a required key or entry is missing",
    Message.WRONG_SHAPE: "a text, a list or keys stand where another of them is needed",
    Message.NOT_IN_LIST: "a word is not in its closed list",
    Message.NOT_A_NUMBER: "a number of the spec cannot be read",
    Message.OUT_OF_RANGE: "a number of the spec is outside its range",
    Message.NAME: "a name is not made of the allowed characters",
    Message.PATH: "a path does not stay inside the study folder",
    Message.DATE: "a date is not in the form year-month-day",
    Message.ENTRY_TWICE: "an entry stands twice",
    Message.NAME_UNKNOWN: "a name that nothing in the spec carries",
    Message.SAME_VARIABLE: "an association has one variable twice",
    Message.TWO_TABLES: "the variables of an association stand in different tables",
    Message.SIGN_MISSING: "a one-sided test without an expected sign",
    Message.CONTRADICTION: "two keys contradict one another",
    Message.NEEDED_BY_ANOTHER: "a key that another key makes necessary is missing",
    Message.DOES_NOT_APPLY: "a key does not apply here",
    Message.ROW_ORDER: "row numbers of the data file are out of order",
    Message.ENCODING: "bytes are not text of the declared encoding",
    Message.FIELD_COUNT: "a row has another number of fields than the column names",
    Message.COLUMN_NAMES: "a column name is blank or stands twice",
    Message.ROW_NOT_THERE: "a row that the spec names is not in the file",
    Message.QUOTATION: "quotation marks of a data file do not match",
    Message.NOT_A_COUNT: "a count is not a whole number from 0",
    Message.MORE_THAN_TWO: "a two-valued variable has more than two values",
    Message.UNIT_DIFFERS: "the unit in the file differs from the declared one",
    Message.NO_ROW_MATCHED: "an entry of leave_out or suspicious matches no row",
    Message.FILE_NOT_READABLE: "a file that the spec names cannot be read",
    Message.SEED_MISSING: "permutations must be drawn and no seed is stated",
    Message.NO_SUCH_STUDY: "a study is asked for that is not there",
    Message.NO_SUCH_EDITION: "an edition is asked for that the study does not have",
    Message.FAMILY_EMPTY: "no association has a role of the family",
    Message.NAMES_COMMENTED: "the row of the column names is marked as a comment",
    Message.OTHER_SEPARATOR: "the fields of a data file are separated by another mark than the declared one",
    Message.NO_DATA: "a data file holds no data",
    Message.FAMILY_ROWS_DIFFER: "the associations of a family do not have the same complete rows",
    Message.DERIVED_IN_A_CIRCLE: "a variable is derived from itself",
    Message.CHECK_NOT_WAIVABLE: "a requirement that cannot be waived, or that does not exist",
}
"""Message → what it means, in short."""


def fault(place: Place, field: str, number: Message, what: str, remedy: str = "") -> Fault:
    """Return a fault with a catalogued number."""
    return Fault(place, field, what, remedy, number.value)


def in_file_order(faults: list[Fault]) -> tuple[Fault, ...]:
    """Return the faults by file (as first met), line and column, each once."""
    files = {f.place.file: position for position, f in reversed(list(enumerate(faults)))}
    unique_faults = list(dict.fromkeys(faults))
    unique_faults.sort(key=lambda f: (files[f.place.file], f.place.line or 0, f.place.column or 0))
    return tuple(unique_faults)

"""Data files that hold nothing, have their names in a comment, or are separated by another mark than told."""

import pytest

from study.faults import messages
from study.reading import table

FILE = "received/survey.csv"
AGAIN = "Ask for the file again, with its data. (message 60)"
NOTHING: tuple[tuple[bytes | str, dict[str, object], str], ...] = (
    ("", {}, f"{FILE}: data.survey: the file is empty. {AGAIN}"),
    (" \n\n", {}, f"{FILE}: data.survey: the file is empty. {AGAIN}"),
    (b"\xef\xbb\xbf", {}, f"{FILE}: data.survey: the file is empty. {AGAIN}"),
    ("# a\n#b\n", {"comment_mark": "#"}, f"{FILE}: data.survey: the file holds comments and nothing else. {AGAIN}"),
    ("a,b\n , \n\n", {}, f"{FILE}:1: data.survey: the file holds column names and no data. {AGAIN}"),
    ("a,b\n", {"last_data_row": 9}, f"{FILE}:1: data.survey: the file holds column names and no data. {AGAIN}"),
    (
        "a,b\n# none yet\n",
        {"comment_mark": "#"},
        f"{FILE}:1: data.survey: the file holds column names and no data. {AGAIN}",
    ),
    (
        "a,b\nm,s\n",
        {"units_in_row": 2, "first_data_row": 3},
        f"{FILE}:1: data.survey: the file holds column names, units and no data. {AGAIN}",
    ),
)


@pytest.mark.parametrize(("data", "rules", "expected"), NOTHING)
def test_a_file_without_data_is_told_as_such(data: bytes | str, rules: dict[str, object], expected: str) -> None:
    """A file that is empty, or holds names alone, gives one message and no advice about row numbers."""
    assert messages(lambda: table(data, **rules)) == [expected]


def test_rows_that_the_spec_passes_over_are_told_by_their_numbers() -> None:
    """A file with more in it than names gets the row numbers that are possible."""
    assert messages(lambda: table("title\nx\na,b\n", column_names_in_row=3, first_data_row=4)) == [
        (
            f"{FILE}: data.survey: no data stand from row 4 on; the file has 3 lines. Write column_names_in_row: and an "
            "earlier row. (message 47)"
        )
    ]
    assert messages(lambda: table("a,b\n1,2\n3,4\n", first_data_row=9)) == [
        (
            f"{FILE}: data.survey: no data stand from row 9 on; the file has 3 lines. Write first_data_row: and a row from 2 "
            "to 3. (message 47)"
        )
    ]
    assert messages(lambda: table("a,b\n1,2\n", column_names_in_row=5, first_data_row=6)) == [
        (
            f"{FILE}: data.survey: no column names begin in row 5; the file has 2 lines. Write column_names_in_row: and a row "
            "from 1 to 2. (message 47)"
        )
    ]


COMMENTED = (
    ("# sent by mail\n\n# twice\na,b\n1,2\n", "Write: column_names_in_row: 4"),
    ("#a,b\n1,2\n", "If row 1 does hold the names, leave comment_mark out."),
    ("#a,b\nx,y\n1,2\n", "Write: column_names_in_row: 2; or, if row 1 does hold the names, leave comment_mark out."),
)


@pytest.mark.parametrize(("data", "remedy"), COMMENTED)
def test_names_in_a_comment_are_refused_with_the_row_to_write(data: str, remedy: str) -> None:
    """The first line that is no comment is named, unless numbers in it show that it is data."""
    assert messages(lambda: table(data, comment_mark="#")) == [
        (
            f"{FILE}:1: data.survey.column_names_in_row: row 1 is to hold the column names and begins with the comment mark "
            f'"#". {remedy} (message 58)'
        )
    ]


SEPARATED = (
    (
        "a;b;c\n1;2;3\n4;5;6\n",
        ",",
        (
            'separator "," finds 1 field in row 1 and as many in 2 of 2 rows below; separator ";" finds 3 fields in row 1 and '
            'as many in 2 of 2 rows below. Write: separator: ";"'
        ),
    ),
    (
        "a;b\n1,5;2,5\n3,5;4,5\n",
        ",",
        (
            'separator "," finds 1 field in row 1 and as many in 0 of 2 rows below; separator ";" finds 2 fields in row 1 and '
            'as many in 2 of 2 rows below. Write: separator: ";"'
        ),
    ),
    (
        "a, or A;b\n1,5;2\n3;4\nsum\n",
        ",",
        (
            'separator "," finds 2 fields in row 1 and as many in 1 of 3 rows below; separator ";" finds 2 fields in row 1 and '
            'as many in 2 of 3 rows below. Write: separator: ";"'
        ),
    ),
    (
        "a\tb\n1\t2\n",
        ";",
        (
            'separator ";" finds 1 field in row 1 and as many in 1 of 1 row below; separator tab finds 2 fields in row 1 and '
            "as many in 1 of 1 row below. Write: separator: tab"
        ),
    ),
    (
        "a,b\n1,2\n",
        "\t",
        (
            'separator tab finds 1 field in row 1 and as many in 1 of 1 row below; separator "," finds 2 fields in row 1 and '
            'as many in 1 of 1 row below. Write: separator: ","'
        ),
    ),
    (
        '"a"|"b"\n"1"|"2"\n',
        ",",
        (
            'with separator "," the quotation marks do not match; separator "|" finds 2 fields in row 1 and as many in 1 of 1 '
            'row below. Write: separator: "|"'
        ),
    ),
)


@pytest.mark.parametrize(("data", "separator", "expected"), SEPARATED)
def test_another_separator_that_fits_is_told(data: str, separator: str, expected: str) -> None:
    """When the declared separator leaves the rows whole or ragged and another does not, that one is to be written."""
    assert messages(lambda: table(data, separator=separator)) == [
        f"{FILE}:1: data.survey.separator: {expected} (message 59)"
    ]


def test_the_advised_separator_makes_the_file_readable() -> None:
    """What the message says to write takes the same rows apart."""
    assert table("a;b\n1,5;2,5\n", separator=";").columns == {"a": ("1,5",), "b": ("2,5",)}


@pytest.mark.parametrize("data", ["a\n1\n2\n", "a b\n1,5\n2,5\n", "a;x,b\n1,2\n"])
def test_a_file_that_comes_apart_as_told_is_not_doubted(data: str) -> None:
    """One column, or a mark in one name that no row has, is no sign of another separator."""
    assert messages(lambda: table(data, separator="," if ";" in data else ";")) == []


def test_ragged_rows_that_no_separator_mends_are_told_as_ragged() -> None:
    """Without a separator that fits better, the rows with another number of fields are listed."""
    (message,) = messages(lambda: table("a,b\n1,2\n3\n"))
    assert message.startswith(f"{FILE}:3: row 3: 1 field where the names in row 1 give 2; 1 row: 3.")
    assert message.endswith("(message 45)")


def test_lines_that_are_no_text_are_counted() -> None:
    """Bytes that are no text are shown where they first stand, with the first lines that hold any."""
    (message,) = messages(lambda: table(b"a\r\n\xb5\r\n1\r\n" + b"\xb5\r\n" * 6))
    assert message.startswith(f"{FILE}:2: data.survey: the bytes B5 0D 0A 31 0D are no text of utf-8; ")
    assert (
        "; 7 lines, the first five: 2, 4, 5, 6, 7. If the file was saved so write: text_encoding: windows-1252"
        in message
    )


def test_many_blank_names_are_counted() -> None:
    """More blank names than a message lists are counted."""
    (message,) = messages(lambda: table("a" + "," * 7 + "\n" + "1," * 7 + "1\n"))
    assert message.startswith(
        f"{FILE}:1: row 1: the column name is blank in 7 fields, the first five: 2, 3, 4, 5, 6; the row has 8."
    )

"""Delimited text: cells as received, rows as a person counts them, and every fault of the form."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.canonical import sha256
from study.faults import messages
from study.reading import table

FILE = "received/survey.csv"


def test_cells_are_kept_as_received() -> None:
    """Blanks, leading zeros and other literals are not touched; names are trimmed."""
    read = table(" a ,b\n 01 ,1.10\n-9,NA\n")
    assert read.columns == {"a": (" 01 ", "-9"), "b": ("1.10", "NA")}
    assert read.row_numbers == (2, 3)
    assert (read.source.path, read.source.size) == (FILE, 22)
    assert read.source.digest == sha256(b" a ,b\n 01 ,1.10\n-9,NA\n")


def test_rows_are_numbered_as_a_person_sees_them() -> None:
    """Title, comment and unit lines count, and so does each line of a quoted cell."""
    text = 'a "loose" title\na,b\nm,s\n---\n"1\n2",x\n# note\n"#",y\n\n'
    read = table(text, column_names_in_row=2, units_in_row=3, first_data_row=5, comment_mark="#")
    assert read.row_numbers == (5, 8)
    assert read.columns == {"a": ("1\n2", "#"), "b": ("x", "y")}
    assert read.units == {"a": "m", "b": "s"}


def test_a_comment_mark_inside_quotation_marks_is_text() -> None:
    """A line of a quoted cell that begins with the comment mark belongs to the cell."""
    assert table('a,b\n"1\n#2",x\n#3,y\n', comment_mark="#").columns["a"] == ("1\n#2",)


def test_data_end_where_the_spec_says() -> None:
    """Lines below last_data_row are not read, whatever they hold."""
    assert table('a,b\n1,2\n3,4\nsum "\n', last_data_row=3).columns["a"] == ("1", "3")


def test_blank_rows_at_the_end_are_dropped() -> None:
    """Empty lines and lines of separators at the end of a file are no rows."""
    assert table("a,b\n1,2\n,\n\n , \n").row_numbers == (2,)
    assert table('a\n1\n""\n\n').row_numbers == (2, 3)


@pytest.mark.parametrize(
    ("data", "rules"),
    [
        (b"a;\xc2\xb5\n1;2\n", {}),
        (b"\xef\xbb\xbfa;\xc2\xb5\r\n1;2\r\n", {}),
        (b'"a";"\xc2\xb5"\r1;"2"', {}),
        (b"a;\xb5\n1;2\n", {"text_encoding": "windows-1252"}),
        (b"a;\xb5\n1;2\n", {"text_encoding": "latin-1"}),
        (b"a;\xb5\n1;2\n", {"text_encoding": "iso-8859-1"}),
        ("a;µ\n1;2\n".encode("utf-16"), {"text_encoding": "utf-16"}),
        ("\ufeffa;µ\n1;2\n".encode("utf-16-be"), {"text_encoding": "utf-16"}),
        (b"a\t\xc2\xb5\n1\t2\n", {"separator": "\t"}),
        (b"a|\xc2\xb5\n1|2\n", {"separator": "|"}),
    ],
)
def test_one_table_in_many_clothes_has_one_values_digest(data: bytes, rules: dict[str, str]) -> None:
    """Line ends, quotation marks, a byte-order mark, encoding and separator do not change the values."""
    read = table(data, **{"separator": ";", **rules})
    assert read.columns == {"a": ("1",), "µ": ("2",)}
    assert read.source.values_digest == table("a,µ\n1,2\n").source.values_digest


def test_another_cell_or_name_is_another_values_digest() -> None:
    """A changed cell, a changed name, an exchanged column and a changed unit are other values."""
    texts = ("a,b\n1,2\n", "a,b\n1,3\n", "a,c\n1,2\n", "b,a\n2,1\n", "a,b\n1,2\n1,2\n", "a,b\n1.0,2\n")
    digests = {table(text).source.values_digest for text in texts}
    with_units = [
        table(f"a,b\n{unit},s\n1,2\n", units_in_row=2, first_data_row=3).source.values_digest for unit in ("m", "cm")
    ]
    assert len(digests | set(with_units)) == len(texts) + 2


def test_names_are_compared_in_one_normal_form() -> None:
    """A letter with its accent apart is the letter with its accent."""
    assert list(table("e\u0301,b\n1,2\n").columns) == ["\u00e9", "b"]


REFUSED: tuple[tuple[bytes | str, dict[str, object], str], ...] = (
    (
        "a,b\n1,2\n3\n4,5,6\n\n7,8\n",
        {},
        (
            f"{FILE}:3: row 3: 1 field where the names in row 1 give 2; 3 rows: 3, 4, 5. Check separator, quotation marks "
            "and, for lines that are no data, comment_mark or last_data_row. (message 45)"
        ),
    ),
    (
        "a,b\n" + "1\n" * 7,
        {},
        (
            f"{FILE}:2: row 2: 1 field where the names in row 1 give 2; 7 rows, the first five: 2, 3, 4, 5, 6. Check "
            "separator, quotation marks and, for lines that are no data, comment_mark or last_data_row. (message 45)"
        ),
    ),
    (
        "a,,b,\n1,2,3,4\n",
        {},
        (
            f"{FILE}:1: row 1: the column name is blank in 2 fields: 2, 4; the row has 4. Give every column a name in the file, or "
            "write column_names_in_row. (message 46)"
        ),
    ),
    (
        "a,b, a\n1,2,3\n",
        {},
        f'{FILE}:1: row 1: the column name "a" stands in 2 fields: 1, 3. Rename one of them in the file. (message 46)',
    ),
    (
        'a,b\n1,2\n1,"2\n3,4\n',
        {},
        (
            f"{FILE}:3: row 3: quotation marks are opened and not closed before the next separator. Close them; a "
            'quotation mark inside a quoted field is written twice: "". (message 48)'
        ),
    ),
    (
        'a,b\n"1" m,2\n',
        {},
        (
            f"{FILE}:2: row 2: quotation marks are opened and not closed before the next separator. Close them; a "
            'quotation mark inside a quoted field is written twice: "". (message 48)'
        ),
    ),
    (
        "a,b\n" + "x" * 140_000 + ",2\n",
        {},
        (
            f"{FILE}:2: row 2: a field of this row is longer than 131072 characters. Look for a missing quotation mark. "
            "(message 24)"
        ),
    ),
    (
        "",
        {},
        (f"{FILE}: data.survey: the file is empty. Ask for the file again, with its data. (message 60)"),
    ),
    (
        "a,b\n",
        {},
        (
            f"{FILE}:1: data.survey: the file holds column names and no data. Ask for the file again, with its data. "
            "(message 60)"
        ),
    ),
    (
        "a,b\n1,2\n",
        {"units_in_row": 4},
        (
            f"{FILE}: data.survey: no units begin in row 4; the file has 2 lines. Write units_in_row: and a row "
            "from 1 to 2. Or leave it out. (message 47)"
        ),
    ),
    (
        "a,b\n1,2\n",
        {"last_data_row": 9},
        (
            f"{FILE}: data.survey: last_data_row is 9; the file has 2 lines. Write last_data_row: 2, or leave it out. "
            "(message 47)"
        ),
    ),
    (
        b"a,b\n1,2\n\xb5,2\n",
        {},
        (
            f'{FILE}:3: data.survey: the bytes B5 2C 32 0A are no text of utf-8; near "a,b<U+000A>1,2<U+000A>"; 1 line: 3. If the '
            "file was saved so write: text_encoding: windows-1252 (message 44)"
        ),
    ),
    (
        b"a,b\n\x81,2\n",
        {"text_encoding": "windows-1252"},
        (
            f'{FILE}:2: data.survey: the bytes 81 2C 32 0A are no text of windows-1252; near "a,b<U+000A>"; 1 line: 2. Write '
            "text_encoding as the file was saved. (message 44)"
        ),
    ),
    (
        b"a,b\n\x80,2\n",
        {"text_encoding": "latin-1"},
        (
            f"{FILE}:2: data.survey: the character U+0080 is no text; 1 row: 2. If the file was saved so write: "
            "text_encoding: windows-1252 (message 44)"
        ),
    ),
    (
        "a,b\n1,2\n".encode("utf-16"),
        {},
        (
            f"{FILE}: data.survey: the file begins with the mark of utf-16, and text_encoding is utf-8. Write "
            "text_encoding: utf-16 (message 44)"
        ),
    ),
    (
        b"\xef\xbb\xbfa,b\n1,2\n",
        {"text_encoding": "windows-1252"},
        (
            f"{FILE}: data.survey: the file begins with the mark of utf-8, and text_encoding is windows-1252. Write "
            "text_encoding: utf-8 (message 44)"
        ),
    ),
    (
        b"a,b\n1,2\n",
        {"text_encoding": "utf-16"},
        (
            f"{FILE}: data.survey: the file does not begin with the mark by which utf-16 is known. If the file was saved "
            "so write: text_encoding: utf-8 (message 44)"
        ),
    ),
)


@pytest.mark.parametrize(("data", "rules", "expected"), REFUSED)
def test_a_file_that_is_not_as_told_is_refused(data: bytes | str, rules: dict[str, object], expected: str) -> None:
    """A file that differs from what the spec says of it is refused with the row and what to write."""
    assert messages(lambda: table(data, **rules)) == [expected]


def test_faults_of_names_and_rows_come_together() -> None:
    """A blank name, a name twice and a short row are told at once."""
    found = messages(lambda: table("a,,a\n1,2,3\n4\n"))
    assert [message.split(": ")[0] for message in found] == [f"{FILE}:1", f"{FILE}:1", f"{FILE}:3"]


CELL = st.text(st.characters(exclude_categories=("Cc", "Cs"), include_characters="\n"), max_size=8)


@given(st.lists(st.tuples(CELL, CELL), min_size=1, max_size=6))
def test_any_cells_come_back_from_a_quoted_file(rows: list[tuple[str, str]]) -> None:
    """Whatever stands in quotation marks is the cell, with the line on which its row begins."""
    quoted = ["{},{}".format(*('"' + cell.replace('"', '""') + '"' for cell in row)) for row in (*rows, ("z", "z"))]
    read = table("a,b\n" + "\n".join(quoted) + "\n")
    assert read.columns["a"] == (*(row[0] for row in rows), "z")
    assert read.columns["b"] == (*(row[1] for row in rows), "z")
    lines = [2]
    for record in quoted[:-1]:
        lines.append(lines[-1] + record.count("\n") + 1)
    assert read.row_numbers == tuple(lines)

"""Whatever a file holds, the outcome is a value or an InputError with catalogued numbers."""

from dataclasses import replace

from hypothesis import given
from hypothesis import strategies as st

from rankdocket.errors import InputError
from rankdocket.study.form import DECIMAL_MARKS, ENCODINGS, SEPARATORS
from rankdocket.study.messages import MEANINGS, Message
from rankdocket.study.reader import read_spec
from rankdocket.study.spec import DataSpec, StudySpec
from rankdocket.study.table import Table, VariableValues
from rankdocket.study.tables import read_table
from rankdocket.study.variables import read_variable
from rankdocket.vocabulary import SCALES, Scale
from study.reading import DATA, VARIABLE, column
from study.specs import PANEL, PLANKTON


def assert_catalogued(error: InputError) -> None:
    assert error.faults
    for fault in error.faults:
        assert Message(fault.number) in MEANINGS
        assert fault.what
        assert fault.place.file


PIECES = (*"ab:-[]{},&*!|>'\"%@`#?~ \n\t", "\n  ", ": ", "- ", "<<: ", "study", "on")
YAML_PIECES = st.lists(st.sampled_from(PIECES)).map("".join)


@given(st.one_of(st.text(), YAML_PIECES))
def test_any_text_is_a_spec_or_an_input_error(text: str) -> None:
    """No text makes the reader of specs fail in another way."""
    try:
        assert isinstance(read_spec(text, "s.yaml"), StudySpec)
    except InputError as error:
        assert_catalogued(error)


@given(
    st.sampled_from([PLANKTON, PANEL]),
    st.lists(
        st.tuples(
            st.floats(0, 1), st.integers(0, 12), st.sampled_from([*"\n:[]{},-'\"&* x0~", "", "? ", "!a ", "null"])
        ),
        min_size=1,
        max_size=4,
    ),
)
def test_a_damaged_spec_is_a_spec_or_an_input_error(text: str, damages: list[tuple[float, int, str]]) -> None:
    """A spec with parts cut out or put in fails in no other way."""
    for share, length, instead in damages:
        start = int(share * len(text))
        text = text[:start] + instead + text[start + length :]
    try:
        assert isinstance(read_spec(text, "s.yaml"), StudySpec)
    except InputError as error:
        assert_catalogued(error)


SHAPES = st.recursive(
    st.sampled_from(['""', "x", "1", "0.05", "not applicable", "primary", "measured", "ordered"]),
    lambda inner: st.one_of(
        st.lists(inner, max_size=3).map(lambda items: f"[{', '.join(items)}]"),
        st.dictionaries(
            st.sampled_from(["name", "table", "file", "column", "where", "reason", "between", "by", "A1", "alpha"]),
            inner,
            max_size=3,
        ).map(lambda keys: "{" + ", ".join(f"{key}: {value}" for key, value in keys.items()) + "}"),
    ),
    max_leaves=8,
)
SECTIONS = ("study", "data", "rows", "variables", "associations", "inference", "requirements", "report")


@given(st.dictionaries(st.sampled_from(SECTIONS), SHAPES, min_size=1))
def test_any_shape_under_any_key_is_an_input_error(sections: dict[str, str]) -> None:
    """Texts, lists and keys in each other's place are refused in our words."""
    text = "\n".join(f"{name}: {shape}" for name, shape in sections.items())
    try:
        read_spec(text, "s.yaml")
    except InputError as error:
        assert_catalogued(error)
    else:
        raise AssertionError(text)


RULES = st.builds(
    lambda separator, mark, encoding, rows: replace(
        DATA,
        separator=separator,
        decimal_mark=mark,
        text_encoding=encoding,
        comment_mark="#",
        units_in_row=2 if rows else None,
        first_data_row=3 if rows else 2,
    ),
    st.sampled_from(SEPARATORS),
    st.sampled_from(DECIMAL_MARKS),
    st.sampled_from(ENCODINGS),
    st.booleans(),
)
LINES = st.lists(st.text(st.sampled_from('ab1,;|\t"#. \xb5'), max_size=8), max_size=6).map("\n".join)


@given(st.one_of(st.binary(), LINES.map(str.encode), LINES.map(lambda text: text.encode("utf-16"))), RULES)
def test_any_bytes_are_a_table_or_an_input_error(data: bytes, rules: DataSpec) -> None:
    """No bytes make the reader of tables fail in another way; a table has all its columns of one length."""
    try:
        read = read_table(data, rules)
    except InputError as error:
        assert_catalogued(error)
    else:
        assert isinstance(read, Table)
        assert {len(cells) for cells in read.columns.values()} == {len(read.row_numbers)}
        assert list(read.row_numbers) == sorted(set(read.row_numbers))


CELLS = st.lists(
    st.one_of(st.text(max_size=6), st.text(st.sampled_from("0123456789.,-+e <\u202f"), max_size=9)), min_size=1
)


@given(CELLS, st.sampled_from(SCALES), st.sampled_from(DECIMAL_MARKS))
def test_any_cells_are_values_or_an_input_error(cells: list[str], scale: Scale, mark: str) -> None:
    """No cell makes the reader of variables fail in another way; a value is absent only where missing says why."""
    spec = replace(VARIABLE, scale=scale)
    try:
        read = read_variable(column([*cells, "0"], decimal_mark=mark), spec)
    except InputError as error:
        assert_catalogued(error)
    else:
        assert isinstance(read, VariableValues)
        assert all(
            (value is None) != (meaning is None) for value, meaning in zip(read.values, read.missing, strict=True)
        )

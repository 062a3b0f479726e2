"""Variables: values, kinds of missing, and every cell that is neither."""

from collections import Counter
from dataclasses import replace
from decimal import Decimal
from typing import Any

import pytest

from rankdocket.study.reader import read_spec
from rankdocket.study.spec import VariableSpec
from rankdocket.study.variables import read_variable, read_variables
from rankdocket.vocabulary import Scale
from study.faults import changed, messages
from study.reading import VARIABLE, column, table
from study.specs import PLANKTON

FILE = "received/survey.csv"
COUNT = replace(VARIABLE, scale="count", unit=None)
ORDERED = replace(
    VARIABLE,
    scale="ordered",
    unit=None,
    lowest_to_highest=("Bad", "Moderate", "Good"),
    other_spellings={"Mod.": "Moderate"},
)
TWO_VALUED = replace(VARIABLE, scale="two-valued", unit=None)


def test_values_and_kinds_of_missing_stand_side_by_side() -> None:
    """Each row has a value or the meaning of its missing code, and its literal."""
    codes = {"": "missing", "-9": "lost", "NA": "refused"}
    read = read_variable(column(["1.0", " -9 ", "", "1.00", "NA"], missing_codes=codes), VARIABLE)
    assert read.values == (Decimal("1.0"), None, None, Decimal("1.00"), None)
    assert read.missing == (None, "lost", "missing", None, "refused")
    assert read.literals == ("1.0", " -9 ", "", "1.00", "NA")


def test_only_declared_codes_are_missing_and_capitals_count() -> None:
    """na is not NA, and NA is nothing special without being declared."""
    found = messages(lambda: read_variable(column(["1", "na", "NA"], missing_codes={"NA": "missing"}), VARIABLE))
    assert found == [
        (
            f'{FILE}:3: row 3, column secchi: found "na". This is not a number; 1 row: 3. Rows by text: "na" in 1. If '
            'these mean missing write: missing_codes: ["NA", "na"] (message 1)'
        )
    ]


def test_a_code_of_the_column_goes_before_one_of_the_table() -> None:
    """99 may be missing in one column, under a meaning of its own, and a value in another."""
    spec = replace(VARIABLE, missing_codes={"99": "not measured", "n/a": "out of range"})
    read = read_variable(column(["99", "n/a", "9"]), spec)
    assert read.missing == ("not measured", "out of range", None)
    assert read_variable(column(["99"]), VARIABLE).values == (Decimal(99),)


NUMBERS: tuple[tuple[list[str], dict[str, Any], str], ...] = (
    (
        ["2", "1,25", "3,5"],
        {},
        (
            f'{FILE}:3: row 3, column secchi: found "1,25". With decimal_mark: "." this is not a number; 2 rows: 3, 4. If '
            'the file writes its numbers so, write: decimal_mark: "," (message 1)'
        ),
    ),
    (
        ["1 234", "1"],
        {},
        (
            f'{FILE}:2: row 2, column secchi: found "1 234". With decimal_mark: "." this is not a number; 1 row: 2. If the '
            'file writes its numbers so, write: decimal_mark: "." and thousands_mark: " " (message 1)'
        ),
    ),
    (
        ["1\u202f234,5"],
        {},
        (
            f'{FILE}:2: row 2, column secchi: found "1<U+202F>234,5". With decimal_mark: "." this is not a number; 1 row: '
            '2. If the file writes its numbers so, write: decimal_mark: "," and thousands_mark: "\\u202F" (message 1)'
        ),
    ),
    (
        ["1.250", "2"],
        {"decimal_mark": ","},
        (
            f'{FILE}:2: row 2, column secchi: "1.250" could be 1.25 or 1250; 1 row: 2. State how the file writes its '
            'numbers: decimal_mark: "."; or decimal_mark: "," and thousands_mark: ".". (message 2)'
        ),
    ),
    (
        ["1.250", "1.250.300"],
        {},
        (
            f'{FILE}:2: row 2, column secchi: "1.250" could be 1.25 or 1250; 1 row: 2. State how the file writes its '
            'numbers: decimal_mark: "," and thousands_mark: ".". (message 2)'
        ),
    ),
    (
        ["1.2.3"],
        {},
        (
            f'{FILE}:2: row 2, column secchi: found "1.2.3". With decimal_mark: "." this is not a number; 1 row: 2. Mend '
            'the file at its source; or, if these mean missing, write: missing_codes: ["", "n/a", "1.2.3"] (message 1)'
        ),
    ),
    (
        ["1", "ND", "trace", "ND"],
        {},
        (
            f'{FILE}:3: row 3, column secchi: found "ND". This is not a number; 3 rows: 3, 4, 5. Rows by text: "ND" in 2, '
            '"trace" in 1. If these mean missing write: missing_codes: ["", "n/a", "ND", "trace"] (message 1)'
        ),
    ),
    (
        ["x"],
        {"missing_codes": {"": "lost"}},
        (
            f'{FILE}:2: row 2, column secchi: found "x". This is not a number; 1 row: 2. Rows by text: "x" in 1. If these '
            'mean missing write: missing_codes: {…, "x": its meaning} (message 1)'
        ),
    ),
    (
        ["<0.05", "1"],
        {},
        (
            f'{FILE}:2: row 2, column secchi: found "<0.05". This is not a number; 1 row: 2. Rows by text: "<0.05" in 1. A '
            "value beyond a limit of measurement is no number; such columns cannot be ranked here. (message 1)"
        ),
    ),
    (
        ["-inf"],
        {},
        (
            f'{FILE}:2: row 2, column secchi: found "-inf". This is not a number; 1 row: 2. Rows by text: "-inf" in 1. '
            "Infinity is no measurement. Mend the file at its source; or, if these mean missing, write: missing_codes: "
            '["", "n/a", "-inf"] (message 1)'
        ),
    ),
)


@pytest.mark.parametrize(("cells", "rules", "expected"), NUMBERS)
def test_cells_that_are_no_numbers_are_told_with_what_to_write(
    cells: list[str], rules: dict[str, Any], expected: str
) -> None:
    """An unreadable column gives one message of its kind, with the first rows and the line for the spec."""
    assert messages(lambda: read_variable(column(cells, **rules), VARIABLE)) == [expected]


def test_the_advised_line_makes_the_column_readable() -> None:
    """What a message says to write is what makes the same cells readable."""
    read = read_variable(column(["2", "1,25"], decimal_mark=","), VARIABLE)
    assert read.values == (Decimal(2), Decimal("1.25"))


def test_other_marks_and_other_texts_are_told_apart() -> None:
    """A decimal comma, a value below a limit and a word in one column are three messages."""
    found = messages(lambda: read_variable(column(["1,25", "<1", "ND"]), VARIABLE))
    assert [message.split(": ")[0] for message in found] == [f"{FILE}:2", f"{FILE}:3", f"{FILE}:4"]


def test_counts_are_whole_and_not_negative() -> None:
    """2.0 is a count, 2.5 and -1 are not."""
    assert read_variable(column(["0", "2.0"]), COUNT).values == (Decimal(0), Decimal(2))
    assert messages(lambda: read_variable(column(["1", "-1", "2.5"]), COUNT)) == [
        (
            f'{FILE}:3: row 3, column secchi: found "-1". A count is a whole number from 0; 2 rows: 3, 4. Write scale: '
            'measured if the column is no count; or, if these mean missing, write: missing_codes: ["", "n/a", "-1", '
            '"2.5"] (message 49)'
        )
    ]


def test_ordered_labels_become_their_position() -> None:
    """The lowest label is 1; other spellings stand for their label and are counted."""
    read = read_variable(column(["Good", "Mod.", "Bad", " Mod. ", "Moderate", ""]), ORDERED)
    assert read.values == (Decimal(3), Decimal(2), Decimal(1), Decimal(2), Decimal(2), None)
    assert read.labels == ("Bad", "Moderate", "Good")
    assert read.respelled == {"Mod.": 2}


def test_an_unknown_label_is_told_with_the_nearest() -> None:
    """Each unknown label has its own message, its rows, and the entry that would declare it."""
    assert messages(lambda: read_variable(column(["Good", "Moderat", "x", "Moderat"]), ORDERED)) == [
        (
            f'{FILE}:3: row 3, column secchi: "Moderat" is not in lowest_to_highest (nearest: "Moderate"); 2 rows: 3, 5. '
            'Write it under other_spellings with the label it means: {"Moderat": "Moderate"}, or under missing_codes. '
            "(message 4)"
        ),
        (
            f'{FILE}:4: row 4, column secchi: "x" is not in lowest_to_highest; 1 row: 4. Write it under other_spellings '
            'with the label it means: {"x": its label}, or under missing_codes. (message 4)'
        ),
    ]


def test_a_number_is_not_taken_for_a_misspelt_other_number() -> None:
    """11 is not a misspelt 1: among numbers no label is suggested, among words beside them one is."""
    graded = replace(ORDERED, lowest_to_highest=("1", "2", "10", "best"), other_spellings={})
    assert messages(lambda: read_variable(column(["1", "11", "bets"]), graded)) == [
        (
            f'{FILE}:3: row 3, column secchi: "11" is not in lowest_to_highest; 1 row: 3. Write it under other_spellings '
            'with the label it means: {"11": its label}, or under missing_codes. (message 4)'
        ),
        (
            f'{FILE}:4: row 4, column secchi: "bets" is not in lowest_to_highest (nearest: "best"); 1 row: 4. Write it '
            'under other_spellings with the label it means: {"bets": "best"}, or under missing_codes. (message 4)'
        ),
    ]


def test_no_number_is_suggested_in_the_spec_either() -> None:
    """Another spelling whose label is an unknown number gets the list of labels."""
    grades = "scale: ordered\n    lowest_to_highest: [1, 2, 10]\n    other_spellings: {ten: 11}"
    text = changed(PLANKTON, ("    unit: \u00b5g/L\n    scale: measured", f"    {grades}"))
    assert messages(lambda: read_spec(text, "s.yaml")) == [
        (
            's.yaml:20:28: variables.chlorophyll.other_spellings: "11" is not in lowest_to_highest. Labels: 1, 2, 10. '
            "(message 4)"
        )
    ]


@pytest.mark.parametrize("scale", ["ordered", "two-valued"])
def test_labels_without_an_order_are_listed_as_they_come(scale: Scale) -> None:
    """Without an order, the labels of the file are listed, and no order is made up."""
    spec = replace(VARIABLE, scale=scale, unit=None)
    assert messages(lambda: read_variable(column(["High", "Bad", "High", ""]), spec)) == [
        (
            f"s.yaml:20:3: variables.clarity: the scale is {scale} but no order is given. Labels found, as they come: "
            '"High", "Bad". Write lowest_to_highest: [lowest, …, highest]. Alphabetical order is never used. (message 5)'
        )
    ]


def test_two_values_are_two_numbers_or_two_labels() -> None:
    """0 and 1 need no order; labels are ranked as declared; a third number is a fault."""
    assert read_variable(column(["1", "0", "1.0"]), TWO_VALUED).values == (Decimal(1), Decimal(0), Decimal(1))
    labelled = replace(TWO_VALUED, lowest_to_highest=("no", "yes"))
    assert read_variable(column(["yes", "no"]), labelled).values == (Decimal(2), Decimal(1))
    assert messages(lambda: read_variable(column(["1", "0", "2", "1"]), TWO_VALUED)) == [
        (
            f'{FILE}:4: row 4, column secchi: "2" is a third value; a two-valued column has two. Rows by value: 1 in 2, 0 '
            'in 1, 2 in 1. Write another scale; or, if "2" means missing, write: missing_codes: ["", "n/a", "2"] '
            "(message 50)"
        )
    ]


def test_one_value_is_no_fault() -> None:
    """A constant column is a finding about the data, not a fault of the files."""
    assert Counter(read_variable(column(["1", "1"]), TWO_VALUED).values) == {Decimal(1): 2}


def test_a_column_that_is_not_there_is_told_with_the_nearest() -> None:
    """A missing column names the line of the spec that promised it."""
    assert messages(lambda: read_variable(column(["1"], name="secchi_m"), VARIABLE)) == [
        (
            's.yaml:20:3: variables.clarity.column: no column "secchi"; nearest: secchi_m. Names are read from row 1 of '
            "received/survey.csv; if they are in another row write column_names_in_row. (message 6)"
        )
    ]


def test_names_that_look_the_same_are_told_by_their_code_points() -> None:
    """The micro sign and the Greek letter look the same; the message says which stands where."""
    greek = replace(VARIABLE, column="\u03bcg")
    assert messages(lambda: read_variable(column(["1"], name="\u00b5g"), greek)) == [
        (
            's.yaml:20:3: variables.clarity.column: no column "\u03bcg"; "\u00b5g" looks the same but has another '
            "character (U+03BC against U+00B5). Copy the name from the file. (message 6)"
        )
    ]


def with_unit(unit: str, spec: VariableSpec) -> list[str]:
    return messages(lambda: read_variable(table(f"secchi,b\n{unit},x\n1,2\n", units_in_row=2, first_data_row=3), spec))


def test_another_unit_in_the_file_is_a_fault() -> None:
    """A unit row that names another unit than the spec is a fault; nothing is converted."""
    assert with_unit("cm", VARIABLE) == [
        (
            f'{FILE}:2: row 2, column secchi: the file gives the unit "cm", the spec "m". Write unit: "cm", or take the '
            "column whose unit is meant; nothing is converted. (message 51)"
        )
    ]


@pytest.mark.parametrize(("found", "declared"), [("m", "m"), ("[m]", "m"), ("(m)", "m"), ("", "m"), ("-", "1")])
def test_the_same_unit_may_be_written_with_brackets(found: str, declared: str) -> None:
    """Brackets around a unit, a blank, and a dash for a pure number are no other unit."""
    assert with_unit(found, replace(VARIABLE, unit=declared)) == []
    assert with_unit("\u03bcg", replace(VARIABLE, unit="\u00b5g")) == []


def test_faults_of_all_variables_come_together() -> None:
    """A missing column, a missing time column and unreadable cells are told in one go."""
    spec = read_spec(changed(PLANKTON, ("time_order: not applicable", "time_order: day")), "s.yaml")
    tables = {"survey": table("chla,secchi\n1,x\n")}
    assert [message.split(" ")[0] for message in messages(lambda: read_variables(spec, tables))] == [
        "s.yaml:10:1:",
        "s.yaml:15:3:",
        f"{FILE}:2:",
    ]


def test_sound_variables_come_by_name() -> None:
    """All variables of the spec are read, in its order, each with one entry a row."""
    read = read_variables(read_spec(PLANKTON, "s.yaml"), {"survey": table("chl_a,secchi\n3.1,n/a\n2.5,4\n")})
    assert list(read) == ["chlorophyll", "clarity"]
    assert read["clarity"].values == (None, Decimal(4))

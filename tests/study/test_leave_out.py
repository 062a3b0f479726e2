"""Rows left out by plan."""

from rankdocket.errors import Place
from rankdocket.study.leave_out import matching_rows, rows_left_out
from rankdocket.study.spec import LeaveOutSpec
from study.faults import messages
from study.reading import table

PLACE = Place("s.yaml", 13, 7)
SAMPLES = table("station,day\nE07,1\nE07,2\n E08 ,1\n")


def entry(reason: str, **where: str) -> LeaveOutSpec:
    return LeaveOutSpec(where, reason, PLACE)


def test_rows_are_found_by_all_their_columns() -> None:
    """A row is left out when every named column holds the text, blanks around both aside."""
    found = matching_rows(SAMPLES, [entry("broken", station="E07", day="2"), entry("late", station="E08")])
    assert found == {3: "broken", 4: "late"}


def test_two_reasons_for_one_row_are_both_kept() -> None:
    """A row that two entries leave out has both reasons, in the order of the spec."""
    assert matching_rows(SAMPLES, [entry("broken", station="E07"), entry("rain", day="1")]) == {
        2: "broken; rain",
        3: "broken",
        4: "rain",
    }


def test_nothing_to_leave_out_leaves_nothing_out() -> None:
    """Without entries no row is left out."""
    assert matching_rows(SAMPLES, []) == {}


def test_an_entry_that_matches_no_row_is_a_fault() -> None:
    """An entry for a row that does not exist would be believed to have worked."""
    assert messages(lambda: matching_rows(SAMPLES, [entry("x", station="E07", day="3")])) == [
        (
            's.yaml:13:7: rows.leave_out.1: no row has station "E07", day "3". Write the cells as they stand in the file, '
            "or strike the entry. (message 52)"
        )
    ]


def test_a_column_that_does_not_exist_is_a_fault() -> None:
    """Every column of every entry must exist, and all that do not are told."""
    found = messages(lambda: matching_rows(SAMPLES, [entry("x", staton="E07"), entry("y", dayy="1")]))
    assert [message.split(" Names")[0] for message in found] == [
        's.yaml:13:7: rows.leave_out.1.where: no column "staton"; nearest: station.',
        's.yaml:13:7: rows.leave_out.2.where: no column "dayy"; nearest: day.',
    ]


def test_an_entry_concerns_the_tables_that_have_its_columns() -> None:
    """With several tables an entry is looked for where its columns are."""
    tables = {"survey": SAMPLES, "loaves": table("loaf\n7\n", name="loaves")}
    assert rows_left_out(tables, [entry("burnt", loaf="7"), entry("rain", day="2")]) == {
        "survey": {3: "rain"},
        "loaves": {2: "burnt"},
    }

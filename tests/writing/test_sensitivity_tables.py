"""Sensitivity tables in words: columns, the caveat that names rows, the clause of the summary, suspicious rows listed."""

from dataclasses import replace

from analysis.invented import INDEPENDENT, Invented
from rankdocket.analysis.sensitivity.table import SensitivityTable, Verdict
from rankdocket.document.model import TableBlock
from rankdocket.document.prose import text_of
from rankdocket.writing.sensitivity import changing_in_words, sensitivity_blocks
from writing.reports import Told, demonstration_report, study_of_every_finding, told

SUSPECT = Invented(
    columns={"u": "1 2 3 4 5 6 7 8 9 10 11 12", "v": "2 1 4 3 7 5 9 6 12 8 10 11"},
    rows=INDEPENDENT
    + ', suspicious: [{where: {u: "12"}, reason: seal broken}], leave_out: [{where: {u: "5"}, reason: spilt}]',
    inference="alpha: 0.0002, p_value: {by: exact when possible, seed: 3}",
)


def cells(table: TableBlock) -> dict[str, list[str]]:
    """Return the first cell of each row and the others."""
    return {text_of(row[0]): [text_of(cell) for cell in row[1:]] for row in table.rows}


def first(report: Told, begin: str, name: str = "A1") -> list[str]:
    """Return the cells of the row whose first one begins so."""
    return next(found for head, found in cells(report.table(f"sensitivity-{name}")).items() if head.startswith(begin))


def test_each_row_says_what_it_is_and_what_it_would_change() -> None:
    """A kind, a value, a p or an interval, and an answer; lines and the plan's reasons stand in the first cell."""
    report = told(SUSPECT.analysed())
    table = report.table("sensitivity-A1")
    assert table.number == "11.1"
    assert text_of(table.columns[-1].head) == "Would the finding change?"
    for found in cells(table).values():
        assert found[0] in ("sensitivity", "supplementary")
        assert found[3].startswith(("yes", "no"))
    assert first(report, "Kendall tau-b in place of Spearman rho")[0] == "supplementary"
    heads = list(cells(table))
    assert "Without a row that the plan calls suspicious: line 13 (seal broken)" in heads
    assert "With rows put back that the plan leaves out: line 6 (spilt)" in heads
    assert first(report, "Studentised")[2].endswith("9,999 draws")


def test_a_change_is_a_caveat_and_a_clause_of_the_summary() -> None:
    """Both point to the table; a supplementary row is no reason for either."""
    report = told(SUSPECT.analysed())
    changing = list(report.story.analysis.sensitivity["A1"].changing)  # type: ignore[union-attr]
    assert changing
    assert all(row.standing == "sensitivity" for row in changing)
    (sentence, *_) = report.caveats()["would_change"]
    assert sentence.startswith("A1: the finding would be another one ")
    assert "Table 11.1" in sentence
    notes = [text_of(block.prose) for block in report.section("summary").blocks if hasattr(block, "prose")]
    (note,) = [text for text in notes if text.startswith("By sensitivity rows, beside the search for rows to remove, ")]
    counted = [
        row
        for head, row in cells(report.table("sensitivity-A1")).items()
        if row[0] == "sensitivity" and row[3].startswith(("yes", "no")) and not head.startswith("The smallest set")
    ]
    assert not any(row[3].startswith(("no finding", "not applicable")) for row in counted)
    changed = sum(row[3].startswith("yes") for row in counted)
    assert f"the finding would change: A1 by {changed or 'none'} of {len(counted)} (Table 11.1)." in note


def test_one_row_is_spoken_of_as_one() -> None:
    """In the table and in the caveat; more rows are counted."""
    report = demonstration_report("two-kilns")
    story = report.story
    row = next(row for row in story.analysis.sensitivity["A1"].rows if row.ends is not None)  # type: ignore[union-attr]
    assert row.ends is not None
    one = replace(row, ends=replace(row.ends, changing=1), verdict=Verdict("yes"))
    single = replace(
        story,
        analysis=replace(story.analysis, sensitivity={"A1": SensitivityTable((one,), "shown")}),
    )
    assert [text_of(part) for part in changing_in_words(single, "A1")] == ["without one row"]
    (table,) = sensitivity_blocks(single, "A1")
    assert isinstance(table, TableBlock)
    assert text_of(table.rows[0][4]) == "yes, for one row left out alone"


def test_all_orderings_of_the_studentised_test_are_not_called_an_exact_test() -> None:
    """The test allows other dependence, for which no p-value of it is exact."""
    eight = Invented(columns={"u": "1 2 3 4 5 6 7 8", "v": "2 1 4 3 6 5 8 7"}, requirements="fewest_complete_rows: 6")
    report = told(eight.analysed())
    beside = first(report, "Studentised")[2]
    assert beside.endswith(", all orderings gone through")


def test_suspicious_rows_are_listed_as_such() -> None:
    """In the screening and in the listing of the data, where they have a column of their own."""
    report = told(SUSPECT.analysed())
    assert "Line 13 of trials: seal broken" in report.text()
    listing = report.table("listing-trials")
    assert [column.name for column in listing.columns][-1] == "suspicious"
    assert [text_of(row[-1]) for row in listing.rows if text_of(row[-1]) != "–"] == ["seal broken"]
    plain = told(replace(SUSPECT, rows=INDEPENDENT).analysed()).table("listing-trials")
    assert [column.name for column in plain.columns][-1] == "left_out"


def test_methods_describe_what_ran_and_cite_it() -> None:
    """The permutation tests, the row left out, the sets, and the other intervals."""
    (said,) = [text for text in demonstration_report("weld-smoke").methods() if text.startswith("What other methods")]
    for words in ("Pitman 1937", "Yu & Hutson 2024", "Walsh et al. 2014", "Efron 1987", "Devlin et al. 1975"):
        assert words in said


def test_an_association_without_a_finding_has_no_clause_and_no_caveat() -> None:
    """A6 lies outside the family, A5 is not estimable and has no table at all."""
    report = study_of_every_finding()
    assert {found[3] for found in cells(report.table("sensitivity-A6")).values()} == {"no finding"}
    assert not any("A6" in sentence for sentence in report.caveats()["would_change"])
    assert "sensitivity-A5" not in {getattr(block, "key", None) for block in report.section("association-A5").blocks}


def test_dependent_rows_are_the_reason_why_there_is_no_table() -> None:
    """Said where the table would stand."""
    report = told(replace(SUSPECT, rows="repeated_within: u, time_order: not applicable").analysed())
    assert "no row of such a table repairs that." in report.text()


def test_a_claim_that_no_row_tests_is_said_once() -> None:
    """Below the table, and not in every row of it."""
    report = demonstration_report("two-kilns")
    for name, is_claim in (("A1", False), ("A2", True), ("A3", True)):
        table = report.table(f"sensitivity-{name}")
        assert ({found[3] for found in cells(table).values()} == {"not applicable"}) == is_claim
        told_of = [text_of(note) for note in table.notes if text_of(note).startswith("The finding of this association")]
        assert len(told_of) == is_claim


def test_sets_of_one_row_are_rows() -> None:
    """Where only single rows were all tried, no "sets of up to 1" are."""
    heads = list(cells(demonstration_report("two-kilns").table("sensitivity-A1")))
    assert heads[-1].endswith(
        "none found among sets of up to 13 rows; every row alone was tried, larger ones by a greedy search"
    )


def test_caveats_stand_with_the_finding_and_tables_below_them() -> None:
    """So that their line never falls alone on a page behind the tables."""
    blocks = demonstration_report("two-kilns").section("association-A1").blocks
    keys = [getattr(block, "key", None) or text_of(block.prose)[:7] for block in blocks[-4:]]  # type: ignore[union-attr]
    assert keys == ["numbers-A1", "Caveats", "groups-A1", "sensitivity-A1"]

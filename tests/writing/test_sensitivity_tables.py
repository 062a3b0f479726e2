"""Sensitivity tables in words: columns, the caveat that names rows, the clause of the summary, suspicious rows listed."""

from dataclasses import replace

from analysis.invented import INDEPENDENT, Invented
from rankdocket.document.model import TableBlock
from rankdocket.document.prose import text_of
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
    assert table.number == "6.1"
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
    assert "Table 6.1" in sentence
    notes = [text_of(block.prose) for block in report.section("summary").blocks if hasattr(block, "prose")]
    (note,) = [text for text in notes if text.startswith("By sensitivity rows the finding would change")]
    assert f"A1 by {len(changing)} of " in note
    assert note.endswith("(Table 6.1).")


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

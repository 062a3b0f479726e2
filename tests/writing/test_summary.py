"""Page 2 and the results that it is drawn from."""

from dataclasses import replace

import pytest

from analysis.invented import FALLING, RISING, Invented, association, read_texts
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.results import Estimate
from rankdocket.document.model import Document, FieldList, Items, Link, Paragraph
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import text_of
from rankdocket.writing.sections.summary import MOST_ASSOCIATIONS, MOST_CAVEATS
from writing.reports import EVERY_FINDING, Told, demonstration_report, sections_of, study_of_every_finding, told


def answers(document: Document) -> list[FieldList]:
    return [block for block in document.summary.blocks if isinstance(block, FieldList)]


def paragraphs(document: Document) -> list[str]:
    return [text_of(block.prose) for block in document.summary.blocks if isinstance(block, Paragraph)]


@pytest.mark.parametrize("name", ["first-look", "gasket-creep", "weld-smoke", "every finding"])
def test_the_summary_has_at_most_three_associations_and_three_caveats(name: str) -> None:
    """So that it stays on one page, however large the study."""
    report = study_of_every_finding() if name == "every finding" else demonstration_report(name)
    caveats = [block for block in report.document.summary.blocks if isinstance(block, Items)]
    told_of = len(answers(report.document))
    assert 1 <= told_of <= min(MOST_ASSOCIATIONS, len(report.analysis.results)) <= 3
    (quoted,) = (len(block.items) for block in caveats)
    assert 2 <= quoted <= MOST_CAVEATS == 3
    more = len(report.analysis.results) > told_of
    assert any(text.startswith("The others: ") for text in paragraphs(report.document)) == more


def test_long_answers_leave_room_for_fewer() -> None:
    """The page is never longer than a page: of three short questions two are told of, of three long ones a single one."""
    plan = {name: association() for name in ("A1", "A2", "A3")}
    short = replace(Invented(), associations=plan)
    long = replace(
        short, associations={name: association().replace("rise together", "rise " * 99 + "together") for name in plan}
    )
    assert [len(answers(told(study.analysed()).document)) for study in (short, long)] == [2, 1]


def test_primary_associations_come_first() -> None:
    """Then secondary, then exploratory ones, each in plan order."""
    plan = {
        "A1": association(role="exploratory"),
        "A2": association(role="secondary"),
        "A3": association(role="primary"),
        "A4": association(role="primary"),
    }
    document = told(replace(Invented(), associations=plan).analysed()).document
    assert [block.key for block in answers(document)] == ["summary-A3", "summary-A4"]
    others = next(text for text in paragraphs(document) if text.startswith("The others: "))
    assert others.index("A2") < others.index("A1")


def test_the_heaviest_caveats_are_chosen_one_of_each_kind() -> None:
    """One kind does not crowd out the others."""
    report = study_of_every_finding()
    (items,) = [block for block in report.document.summary.blocks if isinstance(block, Items)]
    chosen = [next(caveat for caveat in report.story.caveats if caveat.block.prose == item) for item in items.items]
    weights = [caveat.weight for caveat in chosen]
    assert weights == sorted(weights, reverse=True)
    assert len(set(weights)) == len(weights)
    assert weights == sorted({caveat.weight for caveat in report.story.caveats}, reverse=True)[:3]


def test_the_tally_names_every_finding_that_occurs() -> None:
    """In the order of the fixed list (golden)."""
    assert paragraphs(study_of_every_finding().document)[1] == (
        "The plan names 6 associations. Findings by its rule: shown: 1; shown, opposite sign: 1; not shown: 1; "
        "withheld: 1; not estimable: 1; no finding stated: 1. By the adjustment of the family (Holm) alpha bounds the "
        "chance of any false finding in the family."
    )
    assert paragraphs(demonstration_report("gasket-creep").document)[1] == "The plan names 1 association."


def test_the_main_number_is_the_one_of_the_results() -> None:
    """Estimate, interval and rows, as in the table (golden)."""
    report = demonstration_report("gasket-creep")
    (answer,) = answers(report.document)
    found = {label: text_of(content).replace("\u00a0", " ") for label, content in answer.rows}
    assert found["Main number"] == "rho 0.85 (95% interval 0.10 to 0.98), complete rows n = 7"
    row = [text_of(cell) for cell in report.table("results").rows[0]]
    assert row[3:12] == ["7", "29%, 0%", "Spearman rho", "0.85", "0.10 to 0.98", "0.024", "0.024", "positive", "shown"]


def test_what_has_no_estimate_has_no_main_number() -> None:
    """The reason stands in its place."""
    report = told(replace(Invented(), columns={"u": RISING, "v": "5 " * 10}).analysed())
    (answer,) = answers(report.document)
    assert [label for label, _ in answer.rows] == ["A1, primary", "Answer", "Finding"]
    assert text_of(answer.rows[1][1]) == "Not estimable: the second variable has one value in all complete rows."


def test_the_other_associations_are_named_with_their_findings() -> None:
    """In the order of the page; none is left out (golden)."""
    report = study_of_every_finding()
    assert (
        "The others: A3 not shown, A4 withheld and A6 no finding stated. All stand in Table 5. Each interval holds for its "
        "association alone."
    ) in paragraphs(report.document)
    (note,) = [
        block.prose
        for block in report.document.summary.blocks
        if isinstance(block, Paragraph) and text_of(block.prose).startswith("The others: ")
    ]
    assert {piece.target for piece in note.pieces if isinstance(piece, Link)} == {
        "association-A3",
        "association-A4",
        "association-A6",
        "results",
    }


def caveat_lines(report: Told) -> list[str]:
    (items,) = [block for block in report.document.summary.blocks if isinstance(block, Items)]
    return [text_of(item) for item in items.items]


def test_of_one_kind_the_caveat_about_an_association_on_this_page_is_chosen() -> None:
    """Perfect order of A1, which is only pointed to, gives way to that of A2, which is told of."""
    plan = {
        "A1": association(role="exploratory"),
        **{f"A{place}": association(role="primary") for place in range(2, 5)},
    }
    study = Invented(columns={"u": RISING, "v": RISING, "w": "1 3 2 5 4 7 6 9 8 10"}, associations=plan)
    lines = caveat_lines(told(study.analysed()))
    assert lines[0].startswith("A2: all rows follow one order")
    assert not any(line.startswith("A1: ") for line in lines)
    # A caveat about none that is told of still stands where its kind has no other.
    apart = {**{name: association("u", "w") for name in ("A2", "A3", "A4")}, "A1": plan["A1"]}
    assert caveat_lines(told(replace(study, associations=apart).analysed()))[0].startswith("A1: all rows follow")


def keys(report: Told) -> set[str]:
    return {section.key for section in sections_of(report.document)}


def test_an_association_without_an_estimate_has_no_worksheet_and_no_figure() -> None:
    """Ranks of a withheld or missing estimate would give it away, or mean nothing."""
    report = study_of_every_finding()
    assert {key for key in keys(report) if key.startswith("worksheet-")} == {
        f"worksheet-{name}" for name in ("A1", "A2", "A3", "A4", "A6")
    }
    withheld = told(
        replace(EVERY_FINDING, requirements="fewest_complete_rows: 13, if_not_met: withhold all").analysed()
    )
    assert not [key for key in keys(withheld) if key.startswith("worksheet-")]
    blocks = [block for section in sections_of(withheld.document) for block in section.blocks]
    assert not [block for block in blocks if str(getattr(block, "kind", "")) in ("raw-plot", "rank-plot")]
    assert "worksheets" in keys(withheld)


def test_a_withheld_estimate_is_nowhere_in_the_report() -> None:
    """No number of the estimate, the test or the interval is printed or filed."""
    report = told(
        replace(
            Invented(),
            columns={"u": RISING, "v": FALLING},
            requirements="fewest_complete_rows: 11, if_not_met: withhold all",
        ).analysed()
    )
    text = report.text()
    assert "rho " not in text.replace("Spearman rho", "")
    for part in ("estimate", "test", "interval"):
        described = look_up(report.plain, f"associations/A1/{part}")
        assert isinstance(described, dict)
        assert set(described) == {"state", "reason"}


def test_every_association_keeps_its_row_in_every_table() -> None:
    """Whatever became of it; the worksheets alone leave out what has no estimate."""
    report = study_of_every_finding()
    names = list(report.analysis.results)
    assert [text_of(row[0]) for row in report.table("results").rows] == names
    assert [text_of(row[0]) for row in report.table("flow").rows] == names
    assert list(dict.fromkeys(text_of(row[0]) for row in report.table("requirements-table").rows)) == names


def test_two_forms_of_rho_agree_to_every_filed_digit() -> None:
    """What the worksheet claims holds for every association with a rho."""
    for report in (study_of_every_finding(), demonstration_report("weld-smoke"), demonstration_report("first-look")):
        for name, result in report.analysis.results.items():
            if isinstance(result.estimate, Estimate) and result.estimate.corrected is not None:
                at = f"associations/{name}/estimate"
                assert look_up(report.plain, f"{at}/corrected_form") == look_up(report.plain, f"{at}/value")


def test_a_column_named_in_another_composition_is_listed() -> None:
    """A name with a combining accent in the spec is the same column as one without in the file."""
    spec_text = Invented().spec_text().replace("column: v,", 'column: "de\u0301bit",')
    data = Invented().data_text().replace("u,v", "u,d\u00e9bit")
    report = told(analyse(*read_texts(spec_text, {"received/trials.csv": data})))
    assert [column.name for column in report.table("listing-trials").columns] == ["line", "u", "d\u00e9bit", "left_out"]

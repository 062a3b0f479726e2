"""Section 7 and page 2: what changed since the edition before, input by input and association by association."""

from dataclasses import replace

import pytest

from analysis.invented import INDEPENDENT, MIXED, RISING, Invented, association, read_texts
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.deciding import deciding_p
from rankdocket.analysis.results import Analysis
from rankdocket.document.model import FieldList, Items, Link, Number, Paragraph, Supplied, TableBlock
from rankdocket.document.prose import text_of
from writing.reports import EVERY_FINDING, Occasion, Told, replacing, study_of_every_finding, told

NOW = EVERY_FINDING.analysed()


def opening(report: Told) -> str:
    """Return the first sentences of section 7."""
    block = report.section("changes").blocks[0]
    assert isinstance(block, Paragraph)
    return text_of(block.prose)


def page_2(report: Told) -> str:
    """Return the last sentences of the summary."""
    block = report.document.summary.blocks[-1]
    assert isinstance(block, Paragraph)
    return text_of(block.prose)


def inputs(report: Told) -> list[str]:
    """Return what is said of tables and plan."""
    block = report.section("changes").blocks[1]
    assert isinstance(block, Items)
    return [text_of(item) for item in block.items]


def rows(report: Told) -> list[list[str]]:
    """Return the table of section 7 as it is printed."""
    return [[text_of(cell).replace("\u202f", " ") for cell in row] for row in report.table("changes-table").rows]


def test_a_first_edition_has_nothing_before_it() -> None:
    """The section stands in every report, without a table."""
    report = told(NOW)
    assert opening(report) == "First edition: nothing was issued before it."
    assert page_2(report) == "Changes: nothing was issued before."
    assert len(report.section("changes").blocks) == 1


def test_an_edition_says_what_it_replaces_and_that_no_finding_changed() -> None:
    """On page 2 and in its section (golden)."""
    report = told(NOW, replacing(NOW))
    assert opening(report) == (
        "This edition replaces edition 1 of 2026-01-05. Reason given: a corrected file. No finding changed."
    )
    assert page_2(report) == (
        "Changes: this edition replaces edition 1 of 2026-01-05. Reason: a corrected file. No finding changed."
    )


def test_a_draft_says_what_it_would_replace() -> None:
    """It replaces nothing itself: in its section, on page 2 and on the control page (golden)."""
    report = told(NOW, replacing(NOW, is_draft=True))
    assert opening(report) == (
        "This is a draft of an edition that would replace edition 1 of 2026-01-05. Reason given: a corrected file. "
        "No finding changed."
    )
    assert page_2(report) == (
        "Changes: draft of an edition that would replace edition 1 of 2026-01-05. Reason: a corrected file. No finding "
        "changed."
    )
    control = report.document.control[0]
    assert isinstance(control, FieldList)
    assert text_of(dict(control.rows)["Replaces"]) == (
        "nothing; the edition it prepares would replace edition 1 of 2026-01-05"
    )


@pytest.mark.parametrize(
    ("reason", "printed"),
    [
        ("a corrected file", "a corrected file."),
        ("A corrected file.", "A corrected file."),
        ("corrected! ", "corrected! "),
        ("why not?", "why not?"),
        ("and so on …", "and so on …"),
        ("blank at the end ", "blank at the end."),
    ],
)
def test_a_reason_closes_with_one_stop(reason: str, printed: str) -> None:
    """Wherever it stands inside a sentence of ours."""
    report = told(NOW, replacing(NOW, reason=reason))
    assert f"Reason given: {printed} No finding changed." in opening(report)
    assert f"Reason: {printed} No finding changed." in page_2(report)


BEFORE = replace(
    EVERY_FINDING,
    columns={**EVERY_FINDING.columns, "mixed": RISING + " 12 11"},
    associations={
        **{name: entry for name, entry in EVERY_FINDING.associations.items() if name != "A2"},
        "A9": association("u", "rising", role="secondary"),
    },
)
"""Another file, A2 not yet in the plan, and A9 that is no longer in it."""


def test_every_association_stands_before_and_now() -> None:
    """Findings, estimates and p, also of what is in one plan only (golden; values as in the two analyses)."""
    report = told(NOW, replacing(BEFORE.analysed(), plan_changed=True))
    assert rows(report) == [
        ["A1", "shown", "shown", "1.000", "1.000", "< 0.001", "< 0.001"],
        ["A3", "shown", "not shown", "0.993", "0.51", "< 0.001", "0.094"],
        ["A4", "withheld", "withheld", "1.000", "1.000", "–", "–"],
        ["A5", "not estimable", "not estimable", "–", "–", "–", "–"],
        ["A6", "no finding stated", "no finding stated", "−0.970", "−0.36", "< 0.001", "0.116"],
        ["A9", "shown", "not in this plan", "1.000", "–", "< 0.001", "–"],
        ["A2", "not in that plan", "shown, opposite sign", "–", "−1.000", "–", "< 0.001"],
    ]
    assert [column.name for column in report.table("changes-table").columns] == [
        "association",
        "finding_before",
        "finding",
        "estimate_before",
        "estimate",
        "p_before",
        "p",
    ]


def test_findings_that_moved_are_named_also_one_that_went_with_its_association() -> None:
    """On page 2 as in section 7; the name of an association that is gone points nowhere."""
    report = told(NOW, replacing(BEFORE.analysed(), plan_changed=True))
    assert opening(report).endswith(" Findings changed: A3, A9 and A2.")
    assert page_2(report).endswith(" Findings changed: A3, A9 and A2.")
    fewer = replace(EVERY_FINDING, associations={"A1": EVERY_FINDING.associations["A1"]})
    assert opening(told(fewer.analysed(), replacing(NOW))).endswith(" Findings changed: A2, A3, A4, A5 and A6.")
    (row,) = [row for row in report.table("changes-table").rows if text_of(row[0]) == "A9"]
    assert isinstance(row[0].pieces[0], Supplied)
    assert not any(isinstance(piece, Link) and piece.text == "A9" for cell in row for piece in cell.pieces)


def test_values_of_the_edition_before_are_no_numbers_of_this_one() -> None:
    """They stand in another analysis.json; only what is found now has an address."""
    report = told(NOW, replacing(BEFORE.analysed()))
    table = report.table("changes-table")
    places = {column.name: place for place, column in enumerate(table.columns)}
    for row in table.rows:
        for name in ("estimate_before", "p_before"):
            assert not any(isinstance(piece, Number) for piece in row[places[name]].pieces)
        for name in ("estimate", "p"):
            assert text_of(row[places[name]]) == "–" or isinstance(row[places[name]].pieces[0], Number)


CLAIMED = Invented(
    columns={"u": RISING, "v": "3 4 1 9 2 5 6 8 10 7", "w": RISING},
    associations={
        "A1": association("u", "v", more="smallest_of_interest: 0.30, claim: above"),
        "A2": association("u", "v", more="null_value: 0.3"),
        "A3": association("u", "w"),
    },
)
UNCLAIMED = replace(CLAIMED, associations={name: association("u", "v") for name in ("A1", "A2", "A3")})


def p_of(analysis: Analysis, name: str, *, of_claim: bool) -> float:
    """Return the p-value that a test of the analysis gave."""
    p = deciding_p(analysis.results[name]) if of_claim else getattr(analysis.results[name].test, "p", None)
    assert p is not None
    return float(p)


@pytest.mark.parametrize(
    ("before", "now", "notes"),
    [
        (
            UNCLAIMED,
            CLAIMED,
            [" now is that of the claim, which decided, for A1 and A2; for others that of independence."],
        ),
        (CLAIMED, UNCLAIMED, [" before is that of the claim, which decided, for A1 and A2; for others that of "]),
        (CLAIMED, CLAIMED, [" before is that of the claim", " now is that of the claim"]),
        (UNCLAIMED, UNCLAIMED, []),
    ],
    ids=["claim made", "claim dropped", "claim kept", "no claim"],
)
def test_the_p_that_decided_is_the_one_compared(before: Invented, now: Invented, notes: list[str]) -> None:
    """That of independence would not show why a finding about a claim moved; whose p it is, is said."""
    old, new = before.analysed(), now.analysed()
    report = told(new, replacing(old, plan_changed=True))
    for row in rows(report):
        of_claim = row[0] != "A3"
        assert float(row[5].removeprefix("< ")) == pytest.approx(
            p_of(old, row[0], of_claim=of_claim and before is CLAIMED), abs=0.001
        )
        assert float(row[6].removeprefix("< ")) == pytest.approx(
            p_of(new, row[0], of_claim=of_claim and now is CLAIMED), abs=0.001
        )
    told_notes = [text_of(note) for note in report.table("changes-table").notes][1:]
    assert len(told_notes) == len(notes)
    for note, expected in zip(told_notes, notes, strict=True):
        assert expected in note
    claimed = old if before is CLAIMED else new
    if notes:
        assert abs(p_of(claimed, "A1", of_claim=True) - p_of(claimed, "A1", of_claim=False)) > 0.01


def test_an_edition_from_before_there_were_claims_shows_its_p_of_independence() -> None:
    """Its record does not say what decided."""
    occasion = replacing(UNCLAIMED.analysed())
    assert occasion.before is not None
    associations = occasion.before.plain["associations"]
    assert isinstance(associations, dict)
    for entry in associations.values():
        assert isinstance(entry, dict)
        assert isinstance(entry["finding"], dict)
        del entry["finding"]["by"], entry["finding"]["p"]
    now = UNCLAIMED.analysed()
    assert all(row[5] == row[6] != "–" for row in rows(told(now, occasion)))


def with_file(text: str) -> Analysis:
    """Return a study of two associations read from the text of its file."""
    invented = Invented(columns={"u": RISING, "v": MIXED})
    return analyse(*read_texts(invented.spec_text(), {"received/trials.csv": text}))


FILE = Invented(columns={"u": RISING, "v": MIXED}).data_text()


@pytest.mark.parametrize(
    ("before", "plan_changed", "said"),
    [
        (FILE, False, ["the file is the same, byte for byte.", "The planned keys of the spec are the same."]),
        (FILE.replace("\n", "\r\n"), False, ["the bytes differ, the values read are the same.", "The planned keys"]),
        (FILE.replace("10,5", "10,50"), False, ["the values differ.", "The planned keys of the spec are the same."]),
        (
            FILE,
            True,
            [
                "the file is the same, byte for byte.",
                "The planned keys of the spec differ: the plan was changed after an edition with results had been issued.",
            ],
        ),
    ],
    ids=["same", "other bytes", "other values", "other plan"],
)
def test_each_input_is_compared_with_the_one_before(before: str, plan_changed: bool, said: list[str]) -> None:
    """Bytes, values, plan: each has its own sentence."""
    table, plan = inputs(told(with_file(FILE), replacing(with_file(before), plan_changed=plan_changed)))
    assert table == f"Table trials: {said[0]}"
    assert plan.startswith(said[1])


def deviations(report: Told) -> str:
    """Return what is said of the plan's history."""
    (section,) = [each for each in report.section("methods").sections if each.key == "deviations"]
    block = section.blocks[0]
    assert isinstance(block, Paragraph)
    return text_of(block.prose)


def test_a_plan_changed_after_results_were_seen_is_said_and_its_keys_are_listed() -> None:
    """In section 7 by key, and under the heading of deviations; an unchanged plan is said to be so."""
    changed = told(NOW, replacing(NOW, plan_changed=True))
    table = changed.table("plan-changes-table")
    assert [[text_of(cell) for cell in row] for row in table.rows] == [["inference.alpha", '"0.05"', '"0.01"']]
    assert len(table.notes) == 1
    assert deviations(changed).endswith(
        "The plan differs from that of edition 1 of 2026-01-05, whose results had been seen: section 7 lists the keys."
    )
    same = told(NOW, replacing(NOW))
    assert all(getattr(block, "key", "") != "plan-changes-table" for block in same.section("changes").blocks)
    assert deviations(same).endswith("It is the plan of edition 1 of 2026-01-05, unchanged.")
    assert "edition" not in deviations(told(NOW))


def test_of_many_changed_keys_twenty_are_printed_and_the_others_counted() -> None:
    """The rest stands in the record copy."""
    occasion = replacing(NOW, plan_changed=True)
    assert occasion.before is not None
    many = replace(occasion, before=replace(occasion.before, plan_changes=occasion.before.plan_changes * 23))
    table = told(NOW, many).table("plan-changes-table")
    assert len(table.rows) == 20
    assert text_of(table.notes[-1]) == "And 3 more, in the record copy."


def test_the_table_of_findings_is_one_of_the_numbered_tables() -> None:
    """No two tables of a report share a number."""
    report = told(NOW, replacing(NOW))
    numbers = [
        block.number
        for section in (report.document.summary, *report.document.sections)
        for block in section.blocks
        if isinstance(block, TableBlock)
    ]
    assert len(numbers) == len(set(numbers))
    assert report.table("changes-table").number in numbers


def test_a_reason_or_a_change_touches_no_result() -> None:
    """The results section of a later edition is that of the first."""
    first, later = study_of_every_finding(), told(NOW, replacing(BEFORE.analysed()))
    assert first.section("results-section") == later.section("results-section")
    assert INDEPENDENT in EVERY_FINDING.rows


def test_a_record_that_is_not_at_hand_is_said_to_be_missing() -> None:
    """An edition whose predecessor was deleted from the disk does not pass for a first edition."""
    report = told(NOW, Occasion(reason="new data", replaces="edition 1 of 2026-04-02"))
    assert opening(report) == (
        "This edition replaces edition 1 of 2026-04-02, whose record was not at hand: nothing could be set against it. "
        "Reason given: new data."
    )

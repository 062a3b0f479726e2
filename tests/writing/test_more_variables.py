"""More than two variables in print: what stands in the three tables, in the methods text and in the record copy."""

import csv
import io
from dataclasses import replace
from functools import cache
from typing import Any

import pytest
from scipy.stats import spearmanr

from analysis.invented import Invented, association
from analysis.open_data import new_york_air
from analysis.test_more_variables import AIR, SMALL
from rankdocket.document.numbers import MINUS, look_up
from rankdocket.document.prose import all_prose, lint_document, numbers_of, text_of
from rankdocket.study.writer import spec_as_used
from rankdocket.workflow.record_tables import record_tables
from writing.reports import Told, told


@cache
def report() -> Told:
    return told(AIR.analysed())


def cells(report: Told, key: str) -> list[list[str]]:
    table = report.table(key)
    return [[text_of(cell) for cell in row] for row in (*table.rows, *table.foot)]


def notes(report: Told, key: str) -> str:
    return " ".join(text_of(note) for note in report.table(key).notes)


def printed(value: float) -> str:
    return f"{value:.2f}".replace("-", MINUS)


def filed(address: str) -> float:
    return float(str(look_up(report().plain, f"associations/A1/{address}")))


def test_the_tables_stand_in_the_spread_under_their_numbers() -> None:
    """Given covariates, compared, groups, each numbered by the place of the association."""
    keys = [getattr(block, "key", "") for block in report().section("association-A1").blocks]
    tables = [key for key in keys if key in {"given-covariates-A1", "compared-A1", "groups-A1"}]
    assert tables == ["given-covariates-A1", "compared-A1", "groups-A1"]
    assert [report().table(key).number for key in tables] == ["8.1", "9.1", "10.1"]
    others = {getattr(block, "key", "") for block in report().section("association-A2").blocks}
    assert not {key for key in others if key and key.startswith(("given", "compared", "groups"))}


def test_a_partial_coefficient_stands_above_rho_of_the_same_rows() -> None:
    """Printed from the filed values, with its degrees of freedom and what it does not test."""
    (given, n, estimate, _), (_, same_n, plain, none) = cells(report(), "given-covariates-A1")
    assert given == "Partial rank correlation given value of solar and month"
    assert (n, same_n, none) == ("111", "111", "–")
    assert (estimate, plain) == (printed(filed("partial/value")), printed(filed("partial/rho/value")))
    below = notes(report(), "given-covariates-A1")
    assert "the association itself has 116" in below
    assert "107 degrees of freedom" in below
    assert "not a test of conditional independence in general" in below


def test_a_difference_of_two_associations_is_printed_with_its_interval() -> None:
    """rho of the 111 days as scipy gives it, the method by name, no finding."""
    rows = [row for row in zip(*list(new_york_air().values())[:3], strict=True) if "-" not in row]
    ozone, solar, wind = ([float(cell) for cell in column] for column in zip(*rows, strict=True))
    first, second, difference = cells(report(), "compared-A1")
    assert first[1:] == ["111", printed(spearmanr(ozone, wind).statistic), "–", "–"]
    assert second[1:] == ["111", printed(spearmanr(ozone, solar).statistic), "–", "–"]
    assert difference[0] == "A1 less A2"
    at = "comparison/difference"
    # A value near one in size has three decimals.
    assert difference[2].startswith(printed(filed(f"{at}/value"))[:5])
    assert "one variable in common; z of Meng, Rosenthal and Rubin" in notes(report(), "compared-A1")


def test_groups_are_printed_with_the_warning_and_without_a_word_or_a_p_of_their_own() -> None:
    """The compared ones first; p stands beside the difference alone."""
    rows = cells(report(), "groups-A1")
    assert [row[0] for row in rows] == [
        "May", "August", "June", "July", "September", "Difference: May less August",
    ]  # fmt: skip
    assert [row[-1] for row in rows[:-1]] == ["–"] * 5
    assert rows[-1][2] == printed(filed("subgroups/difference/value"))
    assert (
        rows[-1][3] == f"{printed(filed('subgroups/difference/low'))} to {printed(filed('subgroups/difference/high'))}"
    )
    assert "“shown here, not shown there” is no difference" in notes(report(), "groups-A1")
    without = replace(AIR, associations={"A1": association("ozone", "wind", more="groups: {column: month}")})
    plain = told(without.analysed())
    assert "“shown here, not shown there” is no difference" in notes(plain, "groups-A1")
    assert [column.name for column in plain.table("groups-A1").columns] == ["group", "n", "estimate", "interval"]


@pytest.mark.parametrize(
    "study",
    [
        AIR,
        SMALL,
        replace(SMALL, rows="leave_out: []"),
        replace(SMALL, requirements="fewest_complete_rows: 12, most_missing: 1, if_not_met: withhold all"),
        replace(SMALL, inference="alpha: 0.05, sidedness: one-sided"),
        replace(SMALL, columns={**SMALL.columns, "v": "1 2 3 4 5 6 7 8 - 10 11 12"}),
        replace(SMALL, columns={**SMALL.columns, "w": "- - - - - - - - - - 1 2"}),
        replace(SMALL, columns={**SMALL.columns, "w": "1 2 3 4 5 6 7 8 9 10 11 12"}),
        replace(
            SMALL,
            associations={"A1": association(more="coefficient: Kendall tau-b, groups: {column: site}")},
        ),
    ],
    ids=["air", "small", "dependent", "withhold all", "one-sided", "perfect", "few", "follows", "tau-b"],
)
def test_every_case_can_be_told(study: Invented) -> None:
    """Whatever is absent is said in words that keep the rules, and every printed number stands at its address."""
    report = told(study.analysed())
    assert lint_document(report.document) == ()
    assert all(str(look_up(report.plain, number.key)) == number.exact for number in numbers_of(report.document))
    own = [piece for content in all_prose(report.document) for piece in content.pieces if isinstance(piece, str)]
    assert not [piece for piece in own if any(letter.isdigit() for letter in piece.replace("SHA-256", ""))]


def test_withheld_parts_are_dashes_and_a_reason() -> None:
    """With dependent rows no p and no interval is printed in any of the three tables."""
    report = told(replace(SMALL, rows="leave_out: []").analysed())
    for key in ("given-covariates-A1", "compared-A1", "groups-A1"):
        assert {row[-1] for row in cells(report, key)} == {"–"}
        assert "the plan does not say whether rows are repeated or in time order" in notes(report, key)


def test_the_methods_text_describes_what_ran_and_nothing_else() -> None:
    """Each rule with its works; a report without these keys says nothing of them."""
    text = " ".join(report().methods())
    assert "partial rank correlation was computed" in text
    assert "one variable in common were compared by the z of Meng, Rosenthal and Rubin" in text
    assert "two groups of different rows were compared" in text
    assert "no variable in common" not in text
    plain = told(replace(AIR, associations={"A1": association("ozone", "wind")}).analysed())
    assert "These are supplementary" not in plain.text()


def test_the_record_holds_every_cell_from_which_it_can_be_recomputed() -> None:
    """rows.csv with more_rows.csv gives the rows, the covariates and the groups that were used."""
    analysis = AIR.analysed()
    tables = record_tables(analysis, report().plain)
    rows, more = (
        list(csv.DictReader(io.StringIO(tables[name].decode("utf-8")))) for name in ("rows.csv", "more_rows.csv")
    )
    own = {row["row"]: row for row in rows if row["association"] == "A1"}
    used = [row for row in more if (row["association"], row["used_for"]) == ("A1", "comparison")]
    assert {row["variable"] for row in used} == {"solar"}
    found = [(own[row["row"]]["x_value"], own[row["row"]]["y_value"], row["value"]) for row in used]
    ozone, wind, solar = ([float(cell) for cell in column] for column in zip(*found, strict=True))
    assert filed("comparison/first/value") == pytest.approx(spearmanr(ozone, wind).statistic, abs=1e-11)
    assert filed("comparison/second/value") == pytest.approx(spearmanr(ozone, solar).statistic, abs=1e-11)
    held = [row for row in more if row["used_for"] == "partial"]
    assert [row["variable"] for row in held] == ["solar"] * 111 + ["month"] * 111
    groups = {row["row"]: row["value"] for row in more if row["used_for"] == "groups"}
    assert groups.keys() == own.keys()
    may = [own[line] for line, label in groups.items() if label == "May"]
    r: Any = spearmanr([float(row["x_value"]) for row in may], [float(row["y_value"]) for row in may]).statistic
    assert filed("subgroups/groups/0/value") == pytest.approx(r, abs=1e-11)


def test_a_record_of_two_variables_alone_has_no_further_rows() -> None:
    """Nothing is added to editions that ask nothing of it: neither a file nor a key of the spec as used."""
    plain = told(replace(AIR, associations={"A1": association("ozone", "wind")}).analysed())
    assert "more_rows.csv" not in record_tables(plain.analysis, plain.plain)
    assert "covariates" not in spec_as_used(plain.analysis.spec)

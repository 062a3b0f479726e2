"""Which rows an association uses: complete rows first, ranks second, whatever else stands in the file."""

import random
from collections import Counter
from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from analysis.invented import INDEPENDENT, MISSING, Invented, association, read_texts
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.results import AssociationAnalysis, RankTest
from rankdocket.analysis.screen import screen_all, screen_association
from rankdocket.analysis.variables import summarise
from rankdocket.errors import Place

OWN_DECISIONS = "alpha: 0.05, several_tests: {among: none, reason: each question is its own}"
CELLS = st.sampled_from(["1", "2", "2.0", "3", "10", "-4", MISSING])
FILES = st.lists(st.tuples(CELLS, CELLS, CELLS), min_size=1, max_size=7)
UNHURRIED = settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.too_slow])


def study(cells: Sequence[tuple[str, ...]], names: tuple[str, ...] = ("u", "v"), **parts: Any) -> Invented:
    """Return a study of the rows; an association joins the first two columns."""
    columns = {name: " ".join(row[place] for row in cells) for place, name in enumerate(names)}
    return replace(Invented(), columns=columns, **parts)


def without_rows(result: AssociationAnalysis) -> tuple[object, ...]:
    """Return everything that may not depend on where a row stands in the file."""
    return (result.estimate, result.test, result.interval, result.comparisons, result.smallest_attainable_p)


def off_the_page(result: AssociationAnalysis) -> AssociationAnalysis:
    """Return the same without the line of the spec on which the association stands."""
    spec = replace(result.screened.spec, place=Place("study.yaml"))
    return replace(result, screened=replace(result.screened, spec=spec))


@UNHURRIED
@given(FILES)
def test_incomplete_rows_matter_as_little_as_if_they_were_not_in_the_file(rows: list[tuple[str, ...]]) -> None:
    """Ranks are taken among complete rows: deleting the others by hand changes nothing."""
    complete = [row for row in rows if MISSING not in row[:2]]
    if not complete:
        return
    with_gaps = study(rows, ("u", "v", "w")).analysed().results["A1"]
    by_hand = study(complete, ("u", "v", "w")).analysed().results["A1"]
    assert without_rows(with_gaps) == without_rows(by_hand)
    assert (with_gaps.screened.x_ties, with_gaps.screened.y_ties) == (by_hand.screened.x_ties, by_hand.screened.y_ties)
    ranks = [
        [(row.x_doubled_rank, row.y_doubled_rank) for row in found.screened.rows] for found in (with_gaps, by_hand)
    ]
    assert ranks[0] == ranks[1]


@UNHURRIED
@given(FILES)
def test_rows_read_are_left_out_or_lack_a_value_or_are_used(rows: list[tuple[str, ...]]) -> None:
    """The flow adds up, and its counts are those of a count by hand."""
    left_out = INDEPENDENT + ', leave_out: [{where: {w: "3"}, reason: the rig was broken}]'
    rows = [*rows, ("1", "2", "3")]
    flow = study(rows, ("u", "v", "w"), rows=left_out).analysed().results["A1"].screened.flow
    kept = [row for row in rows if row[2] != "3"]
    lacking = Counter((row[0] == MISSING, row[1] == MISSING) for row in kept)
    assert (flow.missing_x, flow.missing_y, flow.missing_both, flow.complete) == (
        lacking[True, False],
        lacking[False, True],
        lacking[True, True],
        lacking[False, False],
    )
    assert flow.read == len(rows)
    assert flow.read == len(flow.left_out) + flow.missing_x + flow.missing_y + flow.missing_both + flow.complete
    assert [left.row for left in flow.left_out] == [line for line, row in enumerate(rows, start=2) if row[2] == "3"]
    assert {left.reason for left in flow.left_out} == {"the rig was broken"}


@UNHURRIED
@given(FILES, st.randoms(use_true_random=False))
def test_the_order_of_the_rows_does_not_matter(rows: list[tuple[str, ...]], chance: random.Random) -> None:
    """Only the line numbers of the worksheet move."""
    shuffled = list(rows)
    chance.shuffle(shuffled)
    one, other = (study(order).analysed() for order in (rows, shuffled))
    assert without_rows(one.results["A1"]) == without_rows(other.results["A1"])
    assert one.results["A1"].checks == other.results["A1"].checks
    assert one.findings == other.findings


@UNHURRIED
@given(FILES)
def test_an_association_alone_is_what_it_is_in_company(rows: list[tuple[str, ...]]) -> None:
    """Another association, and the rows that it lacks, change nothing where each is its own decision."""
    company = {"A1": association("u", "w"), "A2": association("u", "v"), "A3": association("w", "v", role="secondary")}
    together = study(rows, ("u", "v", "w"), inference=OWN_DECISIONS, associations=company).analysed()
    for name, entry in company.items():
        alone = study(rows, ("u", "v", "w"), inference=OWN_DECISIONS, associations={name: entry}).analysed()
        assert off_the_page(alone.results[name]) == off_the_page(together.results[name])
        assert alone.findings[name] == together.findings[name]


def test_a_complete_row_keeps_its_line_its_cells_and_its_midranks() -> None:
    """Lines are counted as a person counts them, cells stand as received, equal values share a rank."""
    spec, data = study([("3", "1"), (MISSING, "5"), ("2.0", "10"), ("2", "-4")]).read()
    rows = screen_all(spec, data)["A1"].rows
    assert [(row.row, row.x_literal, row.y_literal, row.x, row.y) for row in rows] == [
        (2, "3", "1", Decimal(3), Decimal(1)),
        (4, "2.0", "10", Decimal(2), Decimal(10)),
        (5, "2", "-4", Decimal(2), Decimal(-4)),
    ]
    assert [(row.x_doubled_rank, row.y_doubled_rank) for row in rows] == [(6, 4), (3, 6), (3, 2)]


def test_screening_takes_every_association_in_plan_order() -> None:
    """The same rows are found one by one and all together."""
    spec, data = replace(Invented(), associations={"B": association(), "A": association("v", "u")}).read()
    screened = screen_all(spec, data)
    assert list(screened) == ["B", "A"]
    assert screened["A"] == screen_association(spec.associations["A"], spec, data)


TWO_TABLES = """
study: {number: "T-1", client: Nobody, title: Two tables, question: Do they?}
data:
  one: {file: one.csv, missing_codes: []}
  two: {file: two.csv, missing_codes: []}
rows:
  one_row_is: one trial
  repeated_within: not applicable
  time_order: not applicable
  leave_out: [{where: {lab: Q}, reason: the laboratory was closed}]
variables:
  a: {column: one / a, label: a, scale: measured, unit: m}
  b: {column: one / b, label: b, scale: measured, unit: m}
  c: {column: two / c, label: c, scale: measured, unit: m}
  d: {column: two / d, label: d, scale: measured, unit: m}
associations:
  A1: {between: [a, b], question: Do they?, role: primary, hypothesis: {expected_sign: positive}}
  A2: {between: [c, d], question: Do they?, role: primary, hypothesis: {expected_sign: positive}}
inference: {alpha: 0.05}
"""


def test_rows_are_left_out_of_the_table_that_has_the_column() -> None:
    """An entry about one table neither touches nor stops the associations of another."""
    one, two = "a,b\n1,2\n2,3\n3,4\n4,1\n", "c,d,lab\n1,2,P\n2,3,P\n3,4,P\n4,1,Q\n"
    spec, data = read_texts(TWO_TABLES, {"one.csv": one, "two.csv": two})
    results = analyse(spec, data).results
    assert [len(results[name].screened.flow.left_out) for name in ("A1", "A2")] == [0, 1]
    assert [results[name].screened.flow.complete for name in ("A1", "A2")] == [4, 3]
    assert [summarise(data.variables[name], spec, data).n for name in ("a", "c")] == [4, 3]


def test_a_variable_alone_is_described_among_the_rows_not_left_out() -> None:
    """Missing by kind, ties, and the five points, quartiles interpolated between neighbours."""
    left_out = INDEPENDENT + ', leave_out: [{where: {v: "99"}, reason: the rig was broken}]'
    invented = study([("4", "1"), ("1", "2"), ("2", "3"), ("2", "4"), (MISSING, "5"), ("1000", "99")], rows=left_out)
    spec, data = invented.read()
    found = summarise(data.variables["u"], spec, data)
    assert (found.n, dict(found.missing)) == (4, {"not measured": 1})
    assert (found.distinct, found.largest_tie, found.tied_rows) == (3, 2, 2)
    # By hand: 1, 2, 2, 4; a quarter of the way from the first to the fourth value lies 0.75 above the first.
    assert found.five == ("1", "1.75", "2", "2.5", "4")
    assert found.levels == {}


def test_labels_are_described_by_labels() -> None:
    """The median of two different labels is the lower one; labels that do not occur count 0."""
    keys = "label: grade, scale: ordered, lowest_to_highest: [poor, fair, good]"
    invented = replace(study([("poor", "1"), ("good", "2"), ("good", "3"), ("poor", "4")]), variables={"u": keys})
    spec, data = invented.read()
    found = summarise(data.variables["u"], spec, data)
    assert found.five == ("poor", "poor", "poor", "good", "good")
    assert dict(found.levels) == {"poor": 2, "fair": 0, "good": 2}


def test_a_variable_without_values_has_no_five_points() -> None:
    """Nothing is described where nothing is known."""
    spec, data = study([(MISSING, "1"), (MISSING, "2"), (MISSING, "3")]).read()
    found = summarise(data.variables["u"], spec, data)
    assert (found.n, found.five, found.distinct, found.largest_tie) == (0, (), 0, 0)


@pytest.mark.parametrize("direction", ["greater", "less", "two-sided"])
def test_reversing_one_variable_mirrors_the_test(direction: str) -> None:
    """What was at least as large is at least as small when y is turned round."""
    rows = [("1", "2"), ("2", "1"), ("3", "5"), ("4", "3"), ("5", "5")]
    turned = [(x, f"-{y}") for x, y in rows]
    one, other = (study(order).analysed().results["A1"].test for order in (rows, turned))
    assert isinstance(one, RankTest)
    assert isinstance(other, RankTest)
    mirrored = {"greater": "less", "less": "greater", "two-sided": "two-sided"}
    assert one.tails.p(direction) == other.tails.p(mirrored[direction])  # type: ignore[arg-type]
    assert 0 < one.p <= Fraction(1)

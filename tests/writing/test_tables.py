"""Tables and spreads: what their columns are, which rows stand only where there is something to say."""

from dataclasses import replace
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Estimate
from rankdocket.canonical import Plain
from rankdocket.document.model import FieldList, Items, Number, Paragraph, Prose, TableBlock
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import text_of
from writing.reports import EVERY_FINDING, Told, demonstration_report, sections_of, study_of_every_finding, told

TAU = {"A1": association(more="coefficient: Kendall tau-b")}
ONE_SIDED = "alpha: 0.05, sidedness: one-sided"
UNADJUSTED = "several_tests: {adjust: none, reason: one question}"


def study(v: str = MIXED, **parts: Any) -> Told:
    """Return the report on one association between a rising variable and v."""
    return told(Invented(columns={"u": RISING, "v": v}, **parts).analysed())


def heads(report: Told, key: str) -> dict[str, str]:
    """Return name → head of the columns of a table."""
    return {column.name: text_of(column.head) for column in report.table(key).columns}


def fields(report: Told, key: str) -> dict[str, Prose]:
    """Return label → content of a field list."""
    block = report.block(key)
    assert isinstance(block, FieldList)
    return dict(block.rows)


@pytest.mark.parametrize(
    ("inference", "head"),
    [
        ("alpha: 0.05", "95% interval, unadjusted"),
        (f"alpha: 0.05, {UNADJUSTED}", "95% interval"),
        (ONE_SIDED, "95% bound, one-sided, unadjusted"),
        (f"{ONE_SIDED}, {UNADJUSTED}", "95% bound, one-sided"),
        ("alpha: 0.05, confidence_level: 0.90", "90% interval, unadjusted"),
    ],
)
def test_the_head_says_which_interval_stands_below(inference: str, head: str) -> None:
    """Its level, whether it is a bound, and that it is not adjusted where the p-values beside it are."""
    assert heads(study(inference=inference), "results")["interval"] == head


@pytest.mark.parametrize(
    ("parts", "cell"),
    [
        ({}, "−0.52 to 0.72"),
        ({"inference": ONE_SIDED}, "from −0.43 up"),
        ({"inference": ONE_SIDED, "associations": {"A1": association(sign="negative")}}, "up to 0.66"),
        ({"rows": "leave_out: []"}, "–"),
        ({"associations": TAU}, "−0.39 to 0.57"),
    ],
    ids=["two-sided", "lower bound", "upper bound", "dependent rows", "tau-b"],
)
def test_an_interval_in_the_table_of_results(parts: dict[str, Any], cell: str) -> None:
    """Two ends, one end, or a dash (golden)."""
    report = study(**parts)
    place = [column.name for column in report.table("results").columns].index("interval")
    assert text_of(report.table("results").rows[0][place]) == cell


def test_doubling_is_compared_only_with_a_two_sided_test() -> None:
    """A one-sided study has no column for it; a two-sided one has it even where a test is withheld."""
    assert "p_doubled" in heads(study(), "comparisons")
    assert "p_doubled" not in heads(study(inference=ONE_SIDED), "comparisons")
    everything = study_of_every_finding()
    place = [column.name for column in everything.table("comparisons").columns].index("p_doubled")
    cells = {text_of(row[0]): text_of(row[place]) for row in everything.table("comparisons").rows}
    assert (cells["A4"], cells["A3"]) == ("–", "0.094")


def test_comparisons_are_printed_as_p_values_are() -> None:
    """The t value of perfect order gives a p of 0, which no report prints."""
    report = study(RISING)
    names = [column.name for column in report.table("comparisons").columns]
    row = dict(zip(names, report.table("comparisons").rows[0], strict=True))
    assert look_up(report.plain, "associations/A1/comparisons/t_value_p") == "0"
    assert text_of(row["p_t"]) == text_of(row["p"]) == "<\u202f0.001"


def test_a_missing_interval_has_its_reason_in_the_spread() -> None:
    """And an interval that is given has no such row."""
    reasons = {
        "none: the plan does not say whether rows are repeated or in time order": study(rows="leave_out: []"),
        "none: the plan asks for Fisher z, which makes no interval for tau-b": study(
            associations={"A1": association(), "A2": TAU["A1"]}, inference="alpha: 0.05, interval: {by: Fisher z}"
        ),
        "none: no interval exists for fewer than four complete rows": told(
            Invented(columns={"u": "1 2 3", "v": "1 3 2"}).analysed()
        ),
    }
    for expected, report in reasons.items():
        name = list(report.analysis.results)[-1]
        assert text_of(fields(report, f"numbers-{name}")["Interval"]) == expected
    assert "Interval" not in fields(study(), "numbers-A1")


def test_a_cap_that_binds_is_said_to_bind() -> None:
    """At perfect order, either way; not before."""
    words = (
        "the estimate lay beyond the cap that the tie steps set; the interval is that of the cap, its outer limit set to "
        "one in size"
    )
    for report in (study(RISING), study(FALLING), study(RISING, associations=TAU)):
        assert text_of(fields(report, "numbers-A1")["Cap"]) == words
    for report in (study(), study(RISING, rows="leave_out: []")):
        assert "Cap" not in fields(report, "numbers-A1")


def test_the_error_of_the_draws_ends_above_0() -> None:
    """No draw as extreme as the data: the lower end is 0, which is printed as a bound (golden)."""
    report = study(
        RISING, inference="alpha: 0.05, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 5}"
    )
    rows = fields(report, "numbers-A1")
    assert look_up(report.plain, "associations/A1/test/p_low") == "0"
    assert text_of(rows["Error of the draws"]) == ("95% interval of p over all orderings: <\u202f0.000001 to 0.004")
    assert text_of(rows["Smallest attainable p"]) == "0.001"


def test_only_a_spread_with_plots_opens_a_page() -> None:
    """What has no estimate follows on the same one."""
    report = study_of_every_finding()
    for name, result in report.analysis.results.items():
        opens = report.section(f"association-{name}").opens
        assert opens == ("page" if isinstance(result.estimate, Estimate) else "here")
    assert report.section("association-A5").opens == "here"


def test_the_worksheet_of_tau_b_has_ranks_and_no_differences() -> None:
    """Rank differences lead to rho alone; the caption promises none (golden)."""
    tau, rho = study(associations=TAU), study()
    assert list(heads(tau, "worksheet-table-A1")) == ["row", "x", "y", "rank_x", "rank_y"]
    assert list(heads(rho, "worksheet-table-A1")) == ["row", "x", "y", "rank_x", "rank_y", "difference", "squared"]
    captions = [text_of(report.table("worksheet-table-A1").caption) for report in (tau, rho)]
    assert captions == [
        "Complete rows of A1 with midranks",
        "Complete rows of A1 with midranks and rank differences",
    ]
    assert [len(report.table("worksheet-table-A1").foot) for report in (tau, rho)] == [0, 1]
    assert set(fields(tau, "forms-A1")) == {
        "Row pairings in the same order less those in opposite order",
        "Pairings of two rows not tied",
        "tau-b",
    }


def test_the_worksheets_open_with_what_they_hold() -> None:
    """Or with why there is none (golden)."""
    first = study().section("worksheets").blocks[0]
    assert isinstance(first, Paragraph)
    assert text_of(first.prose) == (
        "Each worksheet holds the complete rows of one association with both midranks, and below them the sums from which "
        "the coefficient follows; for rho two textbook forms are worked out side by side."
    )
    none = study("5 " * 10).section("worksheets").blocks[0]
    assert isinstance(none, Paragraph)
    assert text_of(none.prose) == "There is no worksheet: not one of the associations has an estimate."


def numbers_in(content: Prose) -> list[Number]:
    return [piece for piece in content.pieces if isinstance(piece, Number)]


@pytest.mark.parametrize("name", ["first-look", "gasket-creep", "weld-smoke", "every finding"])
def test_the_two_forms_print_two_values_that_agree(name: str) -> None:
    """The second form has the address of the tie-corrected form, not of the estimate; both show every filed digit."""
    report = study_of_every_finding() if name == "every finding" else demonstration_report(name)
    told_of = [
        name
        for name, result in report.analysis.results.items()
        if isinstance(result.estimate, Estimate) and result.estimate.corrected is not None
    ]
    assert told_of
    for association_name in told_of:
        rows = fields(report, f"forms-{association_name}")
        (midrank,) = numbers_in(rows["Midrank form"])
        _, difference = numbers_in(rows["Difference form"])
        at = f"associations/{association_name}/estimate"
        assert (midrank.key, difference.key) == (f"{at}/value", f"{at}/corrected_form")
        assert midrank.exact == difference.exact
        assert midrank.text == difference.text == midrank.exact.replace("-", "−")


CELLS = st.lists(st.tuples(st.integers(1, 9), st.integers(1, 9)), min_size=3, max_size=12)


@settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(CELLS)
def test_both_forms_are_filed_with_the_same_digits(rows: list[tuple[int, int]]) -> None:
    """Whatever the rows and their ties: a stranger who works either form comes to the filed coefficient."""
    columns = {"u": " ".join(str(x) for x, _ in rows), "v": " ".join(str(y) for _, y in rows)}
    plain: Plain = analysis_to_plain(Invented(columns=columns).analysed())
    estimate = look_up(plain, "associations/A1/estimate")
    assert isinstance(estimate, dict)
    constant = any(len(set(column)) < 2 for column in zip(*rows, strict=True))
    assert (estimate["state"] == "not estimable") == constant
    assert estimate.get("corrected_form") == estimate.get("value")
    assert ("corrected_form" in estimate) == (not constant)


OWN_CODES = "label: load, scale: measured, unit: N, missing_codes: {x: not read, '': blank cell}"


def test_missing_codes_of_one_column_are_listed_with_the_column() -> None:
    """Those of the table stand in its row; nothing is listed where no column has its own (golden)."""
    report = study(variables={"u": OWN_CODES})
    blocks = report.section("data").blocks
    (items,) = [block for block in blocks if isinstance(block, Items)]
    assert [text_of(item) for item in items.items] == ["Load: x (not read) and blank (blank cell)"]
    before = blocks[blocks.index(items) - 1]
    assert isinstance(before, Paragraph)
    assert text_of(before.prose) == "Missing codes that hold for one column alone:"
    assert not [block for block in study().section("data").blocks if isinstance(block, Items)]


def test_large_sums_are_grouped_in_the_worksheet() -> None:
    """Thirty opposed rows: the sum of squared differences is (30³ − 30)/3 = 8,990."""
    thirty = [str(place) for place in range(1, 31)]
    drawn = "alpha: 0.05, p_value: {permutations: 999, most_draws: 999, seed: 5}"
    report = told(
        replace(Invented(columns={"u": " ".join(thirty), "v": " ".join(reversed(thirty))}), inference=drawn).analysed()
    )
    assert text_of(report.table("worksheet-table-A1").foot[0][-1]) == "8,990"


def test_numbers_of_a_plan_follow_the_number_style() -> None:
    """Alpha and the size of interest lose their zero with the p-values beside them."""
    invented = replace(
        EVERY_FINDING, report="marking: Invented, number_style: no leading zero", inference="alpha: 0.05"
    )
    report = told(
        replace(
            invented,
            associations={
                "A1": association("u", "mixed", sign="either", more="smallest_of_interest: 0.30"),
                "A2": association("u", "rising"),
            },
        ).analysed()
    )
    text = report.text()
    assert "alpha, .05." in text
    assert "size of interest .30" in text
    assert "0.05" not in text
    assert "0.30" not in text


def test_tables_are_numbered_in_the_order_of_the_pages() -> None:
    """Upwards within the body and within each spread, and a number that counts associations is no other table’s."""
    report = demonstration_report("two-kilns")
    seen = [
        (section.key, block.number)
        for section in sections_of(report.document)
        for block in section.blocks
        if isinstance(block, TableBlock) and block.number[0].isdigit()
    ]
    whole = [int(number) for _, number in seen if "." not in number]
    assert whole == sorted(whole)
    assert whole == list(range(1, len(whole) + 1))
    for key in {key for key, number in seen if "." in number}:
        kinds = [int(number.split(".")[0]) for section, number in seen if section == key]
        assert kinds == sorted(kinds)
        assert min(kinds) > max(whole)

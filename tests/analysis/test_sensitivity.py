"""Sensitivity tables: what each row gives, and whether the plan’s rule would then have said otherwise."""

import subprocess
import sys
from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from itertools import combinations
from pathlib import Path

import numpy as np
import pytest
from scipy import stats

from analysis.invented import INDEPENDENT, MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis, RankTest
from rankdocket.analysis.sensitivity.cheap import NO_SEED
from rankdocket.analysis.sensitivity.table import NoTable, SensitivityTable, TableRow
from rankdocket.document.numbers import look_up
from rankdocket.errors import InputError
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.product_moment import ProductMoment

SEEDED = "alpha: 0.05, p_value: {by: exact when possible, permutations: 9999, seed: 417}"
TWELVE = "1 2 3 4 5 6 7 8 9 10 11 12"
CLIMBING = "2 1 4 3 7 5 9 6 12 8 10 11"


def table(analysis: Analysis, name: str = "A1") -> SensitivityTable:
    found = analysis.sensitivity[name]
    assert isinstance(found, SensitivityTable)
    return found


def row(analysis: Analysis, key: str, name: str = "A1") -> TableRow:
    return next(found for found in table(analysis, name).rows if found.key == key)


def value(found: TableRow) -> float:
    assert found.value is not None
    return found.value.value if isinstance(found.value, Coefficient) else float(found.value.decimal_text)


def p_of(found: TableRow) -> Fraction:
    assert found.p is not None
    return found.p.p


def numbers(cells: str) -> list[float]:
    return [float(cell) for cell in cells.split()]


def cells(values: Sequence[object]) -> str:
    return " ".join(str(each) for each in values)


CLEAR = Invented(columns={"u": TWELVE, "v": CLIMBING}, inference=SEEDED)


def test_the_other_coefficient_has_its_own_exact_test() -> None:
    """Tau-b in place of rho, as scipy counts it; another quantity, and so supplementary."""
    found = row(CLEAR.analysed(), "other-coefficient")
    outside = stats.kendalltau(numbers(TWELVE), numbers(CLIMBING), method="exact")
    assert (value(found), float(p_of(found))) == pytest.approx((outside.statistic, outside.pvalue))
    assert (found.standing, found.verdict.change, found.verdict.finding) == ("supplementary", "no", "shown")


def test_the_product_moment_coefficient_is_of_the_values() -> None:
    """Its permutation test counts all orders of eight rows; another law than that of ranks."""
    x, y = "1 2 4 8 16 32 64 128", "3 1 9 27 81 2 243 729"
    found = row(replace(CLEAR, columns={"u": x, "v": y}).analysed(), "product-moment")
    assert isinstance(found.value, ProductMoment)
    assert value(found) == pytest.approx(stats.pearsonr(numbers(x), numbers(y)).statistic)
    assert p_of(found).denominator <= 40_320
    assert found.p is not None
    assert found.p.draws is None


def test_labels_have_no_product_moment() -> None:
    """Their distances mean nothing."""
    ordered = {"v": "label: grade, scale: ordered, lowest_to_highest: [a, b, c]"}
    study = replace(CLEAR, columns={"u": TWELVE, "v": "a a a b a b b c b c c c"}, variables=ordered)
    found = row(study.analysed(), "product-moment")
    assert (found.value, found.verdict.change, found.absent) == (
        None,
        "not applicable",
        "labels and places have no distances",
    )


def test_every_rule_that_serves_the_coefficient_and_was_not_printed_has_a_row() -> None:
    """Zero on the other side of the limits than in the printed interval would be a change."""
    analysis = Invented(columns={"u": RISING, "v": "3 4 1 9 2 5 6 8 10 7"}, inference=SEEDED).analysed()
    rows = [found for found in table(analysis).rows if found.kind == "interval"]
    printed = analysis.results["A1"].interval
    assert len(rows) == 5
    assert "BCa bootstrap" in {found.interval.method for found in rows if found.interval is not None}
    for found in rows:
        assert found.interval is not None
        moved = (found.interval.low <= 0) != (printed.low <= 0)  # type: ignore[union-attr]
        assert found.verdict.change == ("yes" if moved else "no")
    assert {found.verdict.change for found in rows} == {"yes", "no"}


def test_without_a_seed_rows_that_need_draws_say_so() -> None:
    """All else is there; a seed is never a default."""
    analysis = replace(CLEAR, inference="alpha: 0.05").analysed()
    for key in ("product-moment", "studentised", "interval-bca-bootstrap"):
        found = row(analysis, key)
        assert (found.absent, found.verdict.change) == (NO_SEED, "not applicable")
    assert row(analysis, "leave-one-out").verdict.change in ("yes", "no")


def test_draws_come_from_streams_of_their_own() -> None:
    """Another row, another association or another run changes none of them."""
    analysis = replace(CLEAR, associations={"A0": association(), "A1": association()}).analysed()
    alone = CLEAR.analysed()
    assert row(analysis, "studentised").p == row(alone, "studentised").p
    drawn = row(alone, "studentised").p
    assert drawn is not None
    assert drawn.stream == ("IN-1", "A1", "sensitivity", "studentised")
    assert drawn.draws == 9_999
    assert row(analysis, "studentised", "A0").p != drawn


@pytest.mark.parametrize("coefficient", ["Spearman rho", "Kendall tau-b"])
def test_leaving_each_row_out_gives_range_ends_and_changes(coefficient: str) -> None:
    """Ends, their lines and the rows that change the finding, from scipy on eleven rows and exact p-values."""
    u, v = numbers(TWELVE), numbers("5 1 4 3 7 2 9 6 12 8 10 11")
    study = Invented(
        columns={"u": TWELVE, "v": cells([int(each) for each in v])},
        associations={"A1": association(more=f"coefficient: {coefficient}")},
        inference="alpha: 0.002",
    )
    outside = stats.spearmanr if coefficient == "Spearman rho" else stats.kendalltau
    without = [outside(np.delete(u, place), np.delete(v, place)).statistic for place in range(12)]
    analysis = study.analysed()
    ends = row(analysis, "leave-one-out").ends
    assert ends is not None
    assert (ends.low.value, ends.high.value) == pytest.approx((min(without), max(without)))
    assert (ends.low_line, ends.high_line) == (int(np.argmin(without)) + 2, int(np.argmax(without)) + 2)
    before = analysis.findings["A1"].word
    changed = 0
    for place in range(12):
        less = replace(study, columns={"u": cells(np.delete(u, place)), "v": cells(np.delete(v, place))})
        changed += less.analysed().findings["A1"].word != before
    assert ends.changing == changed
    assert (row(analysis, "leave-one-out").verdict.change == "yes") == (changed > 0)


PLANTED = Invented(
    columns={"u": "100 101 1 2 3 4 5 6 7 8 9 10 11 12", "v": "100 101 2 1 3 9 12 5 10 8 4 7 6 11"},
    inference=SEEDED,
)
"""Two rows far above all in both variables, then twelve of which scipy says too little for alpha."""


def test_a_planted_pair_of_rows_is_found() -> None:
    """No single row changes the finding, the two planted ones do; the row says what is left without them."""
    analysis = PLANTED.analysed()
    found = row(analysis, "removal")
    assert row(analysis, "leave-one-out").verdict.change == "no"
    assert found.rows is not None
    assert found.search is not None
    assert found.rows.lines == (2, 3)
    assert (found.search.how_sure, found.search.tried) == ("exhaustive", 1)
    assert (found.verdict.change, found.verdict.finding) == ("yes", "not shown")
    u, v = (numbers(PLANTED.columns[name])[2:] for name in "uv")
    assert value(found) == pytest.approx(stats.spearmanr(u, v).statistic)
    assert p_of(found) > Fraction(1, 20)
    assert table(analysis).changing[-1] is found


@pytest.mark.parametrize("levels", [4, 30])
def test_sets_of_two_are_found_as_single_analyses_find_them(levels: int) -> None:
    """Whatever is compared with a bound instead of getting a p, the first set found is the same, ties or none."""
    rng = np.random.default_rng(levels)
    x = rng.integers(0, levels, 11) if levels < 30 else rng.permutation(11)
    y = x + rng.integers(0, 5, 11) if levels < 30 else np.argsort(np.argsort(x + rng.normal(0, 3, 11)))
    study = Invented(columns={"u": cells(x), "v": cells(y)}, inference=SEEDED)
    analysis = study.analysed()
    found = row(analysis, "removal")
    expected = None
    for rows in (sets for size in (1, 2) for sets in combinations(range(11), size)):
        less = replace(study, columns={"u": cells(np.delete(x, rows)), "v": cells(np.delete(y, rows))})
        if less.analysed().findings["A1"].word != analysis.findings["A1"].word:
            expected = tuple(place + 2 for place in rows)
            break
    if expected is None:
        assert found.rows is None or len(found.rows.lines) > 2
    else:
        assert found.rows is not None
        assert found.rows.lines == expected


SUSPICIOUS = INDEPENDENT + (
    ', suspicious: [{where: {u: "1"}, reason: seal broken}, {where: {v: "12"}, reason: clerk in doubt}]'
)


def test_suspicious_rows_stay_in_and_are_looked_at_without() -> None:
    """Each alone and both together; the main analysis holds them, and analysis.json lists their lines."""
    analysis = replace(CLEAR, rows=SUSPICIOUS).analysed()
    assert analysis.results["A1"].screened.flow.complete == 12
    assert analysis.results["A1"].estimate == CLEAR.analysed().results["A1"].estimate
    u, v = numbers(TWELVE), numbers(CLIMBING)
    for key, rows in {"suspicious-1": [0], "suspicious-2": [8], "suspicious-all": [0, 8]}.items():
        found = row(analysis, key)
        assert value(found) == pytest.approx(stats.spearmanr(np.delete(u, rows), np.delete(v, rows)).statistic)
        assert found.rows is not None
        assert found.rows.lines == tuple(place + 2 for place in rows)
    assert look_up(analysis_to_plain(analysis), "associations/A1/rows/suspicious_lines") == [2, 10]


def test_a_suspicious_entry_must_match_a_row() -> None:
    """As an entry of leave_out must; the fault names the key."""
    nowhere = INDEPENDENT + ', suspicious: [{where: {u: "77"}, reason: seal broken}]'
    with pytest.raises(InputError) as refused:
        replace(CLEAR, rows=nowhere).analysed()
    assert [fault.field for fault in refused.value.faults] == ["rows.suspicious.1"]


def test_rows_left_out_are_put_back_by_reason_and_all() -> None:
    """One analysis of the whole file gives the last row; rows that lack a value cannot come back."""
    left_out = INDEPENDENT + (
        ', leave_out: [{where: {u: "1"}, reason: broken}, {where: {u: "2"}, reason: spilt}, {where: {u: "13"}, reason: empty}]'
    )
    study = replace(CLEAR, columns={"u": TWELVE + " 13", "v": CLIMBING + " -"}, rows=left_out)
    analysis = study.analysed()
    u, v = numbers(TWELVE), numbers(CLIMBING)
    for key, rows in {"put-back-1": [1], "put-back-2": [0], "put-back-all": []}.items():
        expected = stats.spearmanr(np.delete(u, rows), np.delete(v, rows)).statistic
        assert value(row(analysis, key)) == pytest.approx(expected)
    whole = CLEAR.analysed().results["A1"].test
    assert isinstance(whole, RankTest)
    assert p_of(row(analysis, "put-back-all")) == whole.p
    assert row(analysis, "put-back-3").verdict.change == "not applicable"


def test_the_rule_of_the_plan_decides_with_the_others_fixed() -> None:
    """By Holm a second association without a small p doubles the first one's p: the same row then changes the finding."""
    columns = {"u": TWELVE, "v": CLIMBING, "w": MIXED + " 12 11"}
    inference = SEEDED.replace("0.05", "0.0003") + ", several_tests: {among: all}"
    alone = Invented(columns=columns, inference=inference).analysed()
    p = p_of(row(alone, "other-coefficient"))
    alpha = Decimal(p.numerator * 3) / Decimal(p.denominator * 2)
    inference = SEEDED.replace("0.05", f"{alpha:.9f}") + ", several_tests: {among: all}"
    one = Invented(columns=columns, inference=inference).analysed()
    two = replace(
        Invented(columns=columns, inference=inference), associations={"A1": association(), "A2": association("u", "w")}
    ).analysed()
    assert row(one, "other-coefficient").verdict.finding == "shown"
    assert row(two, "other-coefficient").verdict.finding == "not shown"


def test_an_association_outside_the_family_has_figures_and_no_verdict() -> None:
    """Nothing is said of a finding that the plan does not state."""
    study = replace(CLEAR, associations={"A1": association(), "A2": association(role="exploratory")})
    rows = table(study.analysed(), "A2").rows
    assert {found.verdict.change for found in rows} == {"no finding"}
    assert row(study.analysed(), "studentised", "A2").p is not None


def test_coefficients_adjusted_together_leave_no_verdict_on_a_p() -> None:
    """By step-down maxT the joint permutations decide, and no row of the table has such."""
    inference = SEEDED + ", several_tests: {adjust: step-down maxT, among: all}"
    columns = {"u": TWELVE, "v": CLIMBING, "w": MIXED + " 12 11"}
    study = Invented(
        columns=columns, associations={"A1": association(), "A2": association("u", "w")}, inference=inference
    )
    rows = table(study.analysed()).rows
    assert {found.verdict.change for found in rows} == {"not applicable"}


def test_a_claim_of_a_size_leaves_no_verdict_on_a_p_of_independence() -> None:
    """Another test decides it; the figures stand all the same."""
    claimed = {"A1": association(more="smallest_of_interest: 0.2, claim: above")}
    rows = table(replace(CLEAR, associations=claimed).analysed()).rows
    assert {found.verdict.change for found in rows} == {"not applicable"}
    assert next(found for found in rows if found.key == "studentised").p is not None


def test_dependent_rows_leave_no_table() -> None:
    """The reason says that no row of it would repair that."""
    found = replace(CLEAR, rows="repeated_within: u, time_order: not applicable").analysed().sensitivity["A1"]
    assert isinstance(found, NoTable)
    assert found.reason.endswith("no row of such a table repairs that")


def test_tables_are_filed_row_by_row() -> None:
    """Everything printed has an address; figures that are absent have a reason."""
    plain = analysis_to_plain(replace(CLEAR, rows=SUSPICIOUS).analysed())
    rows = look_up(plain, "associations/A1/sensitivity/rows")
    assert isinstance(rows, dict)
    for found in rows.values():
        assert isinstance(found, dict)
        assert {"p", "low", "lowest", "absent", "tried"} & set(found)
        assert found["change"] in ("yes", "no", "no finding", "not applicable")
    assert look_up(plain, "sensitivity/draws") == 9_999


def test_coefficients_of_arrays_do_not_pay_for_tables() -> None:
    """The functions that take two sequences import nothing of the room."""
    code = (
        "import sys; from rankdocket import associate; associate([1, 2, 3, 4, 5], [2, 1, 4, 3, 5]);"
        "print([m for m in sys.modules if 'sensitivity.make' in m or m == 'scipy.stats'])"
    )
    source = Path(__file__).resolve().parents[2] / "src"
    ran = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, check=True, env={"PYTHONPATH": str(source)}
    )
    assert ran.stdout.strip() == "[]"

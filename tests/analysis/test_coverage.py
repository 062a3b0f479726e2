"""The simulated coverage of an association’s interval: how it is judged and what is filed."""

from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest

from analysis.invented import MIXED, RISING, Invented, association
from rankdocket.analysis.coverage import coverage_of, judged
from rankdocket.analysis.coverage_plain import coverage_to_plain
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import AssociationAnalysis
from rankdocket.stats.coverage.lookup import SimulatedCoverage
from rankdocket.stats.coverage.table import SEED, CoverageRow, coverage_table


def analysed(inference: str = "alpha: 0.05", *, sign: str = "either", v: str = MIXED) -> AssociationAnalysis:
    study = Invented(columns={"u": RISING, "v": v}, associations={"A1": association(sign=sign)}, inference=inference)
    return study.analysed().results["A1"]


def found(level: str, covered: int) -> SimulatedCoverage:
    """Return an answer of the table’s kind whose nearest row covers so many of 5,000 samples."""
    row = next(row for row in coverage_table() if str(row.level) == level)
    nearest: CoverageRow = replace(row, given=5_000, covered=covered)
    return SimulatedCoverage(nearest, nearest)


@pytest.mark.parametrize(
    ("level", "covered", "word"),
    [
        ("0.95", 4_649, "too low"),
        ("0.95", 4_650, "near"),
        ("0.95", 4_850, "near"),
        ("0.95", 4_851, "wide"),
        ("0.9", 4_299, "too low"),
        ("0.9", 4_701, "wide"),
        ("0.99", 4_929, "too low"),
        ("0.99", 4_971, "wide"),
    ],
)
def test_judged_by_93_and_97_percent_at_95(level: str, covered: int, word: str) -> None:
    """At other levels by the same share of the misses that the level allows: from 86 and 94 % at 0.9."""
    assert judged(found(level, covered)) == word


def test_the_row_used_is_filed() -> None:
    """Rows, coefficient, pattern, family and counts, of the nearest and of the lowest; the seed beside them."""
    study = Invented(columns={"u": RISING, "v": MIXED}, associations={"A1": association(sign="either")}).analysed()
    plain: Any = analysis_to_plain(study)
    filed = plain["associations"]["A1"]["interval"]["coverage"]
    answer = coverage_of(study.results["A1"])
    assert isinstance(answer, SimulatedCoverage)
    assert (filed["state"], filed["seed"], filed["n"]) == ("simulated", SEED, 10)
    assert (filed["tie_pattern"], filed["family"]) == ("no ties or small tie groups", "normal-type dependence")
    assert Fraction(filed["share"]) == answer.nearest.coverage
    assert filed["share"] == f"{answer.nearest.covered}/{filed['samples']}"
    assert Fraction(filed["lowest"]["share"]) == answer.lowest.coverage <= answer.nearest.coverage
    assert filed["lowest"]["n"] == 10
    assert filed["lowest"]["family"] == answer.lowest.family.words


def test_a_bound_and_another_level_are_filed_as_not_simulated() -> None:
    """With the reason in words."""
    bound = analysed("alpha: 0.05, sidedness: one-sided", sign="positive")
    filed: Any = coverage_to_plain(bound)["coverage"]
    assert filed["state"] == "not simulated"
    assert filed["reason"].startswith("coverage not simulated at this level: ")
    filed = coverage_to_plain(analysed("alpha: 0.03, confidence_level: 0.97"))["coverage"]
    assert filed == {"state": "not simulated", "reason": "coverage not simulated at this level"}


def test_without_an_interval_nothing_is_filed() -> None:
    """A variable of one value has no coefficient and no interval."""
    assert coverage_to_plain(analysed(v=" ".join(["5"] * 10))) == {}

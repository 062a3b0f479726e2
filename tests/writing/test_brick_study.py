"""The study of two kilns, worked out again from its data file alone: scipy and textbook formulas, none of our own."""

import csv
from collections.abc import Mapping
from functools import cache
from math import atanh, sqrt
from typing import Any

import numpy as np
import pytest
from scipy.stats import false_discovery_control, kendalltau, norm, rankdata, spearmanr, t

from analysis.invented import STUDIES
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import text_of
from writing.reports import demonstration_report

FILE = STUDIES / "two-kilns" / "received" / "2026-04-13" / "brick_tests.csv"
ORDERS = {"colour": ["straw", "salmon", "red", "plum"], "bloom": ["none", "trace", "patches", "coat"]}

RHO = {
    "A1": ("soak", "absorption"),
    "A2": ("absorption", "strength"),
    "A3": ("course", "strength"),
    "A4": ("soak", "strength"),
    "A5": ("colour", "strength"),
    "A6": ("density", "specific"),
}
COLUMNS = {"soak": "soak_c"}
"""Names of the plan that are not those of the file."""


@cache
def rows() -> tuple[Mapping[str, str], ...]:
    """Return the bricks that the plan does not leave out; the line below the heads holds units."""
    with FILE.open(encoding="utf-8", newline="") as lines:
        bricks = list(csv.DictReader(lines))[1:]
    return tuple(brick for brick in bricks if brick["note"] != "cracked")


def values(name: str, bricks: tuple[Mapping[str, str], ...] | None = None) -> np.ndarray[Any, Any]:
    cells = [brick[COLUMNS.get(name, name)] for brick in (rows() if bricks is None else bricks)]
    return np.array([ORDERS[name].index(cell) if name in ORDERS else float(cell) for cell in cells])


def rho(name: str, bricks: tuple[Mapping[str, str], ...] | None = None) -> float:
    x, y = RHO[name]
    return float(spearmanr(values(x, bricks), values(y, bricks)).statistic)


@cache
def plain() -> Any:
    return analysis_to_plain(demonstration_report("two-kilns").analysis)


def filed(address: str) -> Any:
    return look_up(plain(), f"associations/{address}")


def is_filed(address: str, value: float) -> bool:
    return float(filed(address)) == pytest.approx(value, rel=1e-9, abs=1e-13)


def printed(column: str) -> dict[str, str]:
    """Return a column of the master table by association."""
    table = demonstration_report("two-kilns").table("results")
    (place,) = (place for place, found in enumerate(table.columns) if found.name == column)
    return {text_of(row[0]): text_of(row[place]) for row in table.rows}


def p_of_claims() -> dict[str, float]:
    """Return p of the z tests with the variance of Bonett and Wright 2000 at the size: above 0.40, and within it."""
    root = sqrt((len(rows()) - 3) / (1 + 0.40**2 / 2))
    larger, within = abs(atanh(rho("A2"))), abs(atanh(rho("A3")))
    return {
        # Were the size just 0.40: a coefficient as large as the one found, on either side of zero.
        "A2": float(norm.sf((larger - atanh(0.40)) * root) + norm.sf((larger + atanh(0.40)) * root)),
        "A3": float(norm.cdf((within - atanh(0.40)) * root)),
    }


def test_the_file_keeps_what_the_plan_says_of_it() -> None:
    """One brick is left out, one is suspicious and stays, three have no bloom, and both kilns are there."""
    assert len(rows()) == 65
    assert [brick["note"] for brick in rows() if brick["note"]] == ["platen jammed"]
    assert sum(brick["bloom"] == "?" for brick in rows()) == 3
    assert {brick["kiln"] for brick in rows()} == {"Long", "Round"}
    ratio = 1000 * values("strength") / values("density")
    assert values("specific") == pytest.approx(ratio, abs=0.04)


@pytest.mark.parametrize("name", RHO)
def test_each_rho_is_that_of_scipy_filed_and_printed(name: str) -> None:
    """Twelve digits in analysis.json, two on the page."""
    assert filed(f"{name}/estimate/n") == len(rows())
    assert is_filed(f"{name}/estimate/value", rho(name))
    assert printed("estimate")[name] == f"{rho(name):.2f}".replace("-", "\u2212")


def test_tau_b_is_that_of_scipy() -> None:
    """Of the bricks whose bloom was graded."""
    graded = tuple(brick for brick in rows() if brick["bloom"] != "?")
    expected = float(kendalltau(values("absorption", graded), values("bloom", graded)).statistic)
    assert filed("A7/estimate/n") == len(graded) == 62
    assert is_filed("A7/estimate/value", expected)
    assert printed("estimate")["A7"] == f"{expected:.2f}"


def test_the_covariate_leaves_what_the_inverse_of_the_matrix_leaves() -> None:
    """Colour and strength given soak temperature, with Student’s t."""
    inverse = np.linalg.inv(np.corrcoef([rankdata(values(name)) for name in ("colour", "strength", "soak")]))
    expected = -inverse[0, 1] / sqrt(inverse[0, 0] * inverse[1, 1])
    df = len(rows()) - 3
    assert is_filed("A5/partial/value", expected)
    assert is_filed("A5/partial/test/p", 2 * t.sf(abs(expected) * sqrt(df / (1 - expected**2)), df))


def test_groups_and_their_difference_are_those_of_the_kilns() -> None:
    """The z test of two coefficients of different rows, each with the variance of Bonett and Wright 2000."""
    found = {}
    for place, kiln in enumerate(("Long", "Round")):
        bricks = tuple(brick for brick in rows() if brick["kiln"] == kiln)
        found[kiln] = (rho("A1", bricks), len(bricks))
        assert filed(f"A1/subgroups/groups/{place}/n") == len(bricks)
        assert is_filed(f"A1/subgroups/groups/{place}/value", found[kiln][0])
    variance = sum((1 + r**2 / 2) / (n - 3) for r, n in found.values())
    z = (atanh(found["Long"][0]) - atanh(found["Round"][0])) / sqrt(variance)
    assert is_filed("A1/subgroups/difference/p", 2 * norm.sf(abs(z)))


def test_claims_have_the_p_of_their_formulas() -> None:
    """One above a size, one within it; neither is the p of independence."""
    for name, p in p_of_claims().items():
        assert is_filed(f"{name}/finding/p", p)
        assert float(filed(f"{name}/test/p")) != float(filed(f"{name}/finding/p"))


@pytest.mark.parametrize("name", ["A1", "A4", "A5", "A6"])
def test_drawn_p_values_surround_that_of_the_t_distribution(name: str) -> None:
    """Drawn permutations and the t value agree within three thousandths at 65 rows."""
    x, y = RHO[name]
    assert float(filed(f"{name}/test/p")) == pytest.approx(spearmanr(values(x), values(y)).pvalue, abs=0.003)


def test_the_family_is_adjusted_as_scipy_adjusts_it() -> None:
    """Benjamini and Hochberg over six members: two claims and four drawn p-values; A7 lies outside."""
    own = {name: float(filed(f"{name}/test/p")) for name in RHO} | p_of_claims()
    adjusted = dict(zip(own, false_discovery_control(list(own.values()), method="bh"), strict=True))
    for name, p in adjusted.items():
        assert is_filed(f"{name}/finding/p_adjusted", float(p))
        assert filed(f"{name}/finding/word") == ("shown" if p <= 0.05 else "not shown")
        assert printed("finding")[name] == filed(f"{name}/finding/word")
    assert filed("A7/finding/word") == "no finding"


def test_intervals_after_selection_allow_for_the_members_shown() -> None:
    """The error left to each is alpha times the share of members shown; the others keep the level of the plan."""
    shown = [name for name in RHO if filed(f"{name}/finding/word") == "shown"]
    assert 0 < len(shown) < len(RHO)
    for name in RHO:
        level = 1 - 0.05 * len(shown) / len(RHO) if name in shown else 0.95
        assert float(filed(f"{name}/interval/level")) == pytest.approx(level, abs=1e-11)
        assert ("alone" in printed("interval")[name]) == (name not in shown)

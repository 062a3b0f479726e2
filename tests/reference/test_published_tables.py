"""Published critical values of Spearman rho without ties: what ours must be, and misprints that ours must not be."""

import csv
from decimal import Decimal
from fractions import Fraction
from pathlib import Path

import pytest

from rankdocket import critical_value, critical_value_approximate
from rankdocket.stats.nulls.untied import reach, untied_null
from rankdocket.vocabulary import Sidedness

TABLE = Path(__file__).parent / "critical_values.csv"


def _rows() -> list[dict[str, str]]:
    with TABLE.open(newline="", encoding="utf-8") as file:
        return list(csv.DictReader(file))


ROWS = _rows()


@pytest.mark.parametrize("n", sorted({int(row["n"]) for row in ROWS}))
def test_critical_values_are_those_of_the_table(n: int) -> None:
    """Eight two-sided levels for each n from 4 to 30: a table worked out from the same counts by other code."""
    for row in ROWS:
        if int(row["n"]) != n:
            continue
        found = critical_value(n, Decimal(row["alpha_two_sided"]), sidedness="two-sided")
        if row["rs_critical"] == "":
            assert not found.attainable
            continue
        assert found.rho == Fraction(int(row["rs_numerator"]), int(row["rs_denominator"]))
        assert found.sum_d2 == int(row["sum_d2_at_critical"])
        assert found.attained_p is not None
        assert f"{float(found.rho):.6f}" == row["rs_critical"]
        assert float(found.attained_p) == pytest.approx(float(row["p_two_sided_at_critical"]), rel=1e-9)
        assert critical_value_approximate(n, Decimal(row["alpha_two_sided"]), sidedness="two-sided").rho == found.rho


def test_the_table_is_as_long_as_it_says() -> None:
    """Every n from 4 to 30 has the same eight levels, and the counts reach the last."""
    assert {int(row["n"]) for row in ROWS} == set(range(4, 31))
    assert len(ROWS) == 8 * 27
    assert reach() >= 30


PUBLISHED = (
    (7, "0.05", "two-sided", "0.786", "the widely reprinted table of upper critical values"),
    (10, "0.05", "two-sided", "0.648", "the widely reprinted table of upper critical values"),
)


@pytest.mark.parametrize(("n", "alpha", "sidedness", "printed", "source"), PUBLISHED)
def test_published_values_found_right_are_ours(
    n: int, alpha: str, sidedness: Sidedness, printed: str, source: str
) -> None:
    """To the three printed decimals."""
    assert _three(n, alpha, sidedness) == printed, source


MISPRINTS = (
    (17, "0.05", "two-sided", "0.485", "0.488", "a web reprint of the table of Zar (1984)"),
    (20, "0.01", "one-sided", "0.520", "0.522", "a web reprint of the table of Zar (1984)"),
    (21, "0.025", "one-sided", "0.435", "0.436", "a web reprint of the table of Zar (1984)"),
    (11, "0.01", "two-sided", "0.818", "0.755", "tables after Olds in introductory texts"),
    (9, "0.05", "two-sided", "0.683", "0.700", "tables after Olds in introductory texts"),
    (7, "0.10", "two-sided", "0.679", "0.714", "school tables that take the nearest probability"),
)
"""n, level, sides, what is printed, what the exact counts give, and where the misprint stands."""


@pytest.mark.parametrize("entry", MISPRINTS, ids=lambda entry: f"n = {entry[0]}, {entry[5]}")
def test_misprints_are_not_repeated(entry: tuple[int, str, Sidedness, str, str, str]) -> None:
    """Ours is the exact value, not the one printed."""
    n, alpha, sidedness, misprint, exact, _ = entry
    assert _three(n, alpha, sidedness) == exact != misprint


def test_the_nearest_probability_is_not_a_critical_value() -> None:
    """0.679 at n = 7, printed for a one-sided 0.05, has a one-sided p-value of 0.0548."""
    assert f"{float(_tail(7, Fraction(19, 28))):.4f}" == "0.0548"
    assert f"{19 / 28:.3f}" == "0.679"


def test_reject_when_greater_names_the_value_one_step_lower() -> None:
    """A 0.975 quantile at n = 7, after which one rejects when greater, is 0.7500, printed as 0.7450 in a table after Conover."""
    found = critical_value(7, Fraction(1, 20), sidedness="two-sided")
    assert found.rho is not None
    quantile = found.rho - Fraction(12, 7**3 - 7)
    assert quantile == Fraction(3, 4) != Fraction("0.7450")
    assert _tail(7, quantile) > Fraction(25, 1000) >= _tail(7, found.rho)


@pytest.mark.parametrize(("n", "printed"), [(14, "0.6747"), (17, "0.6152")])
def test_borderline_levels_are_decided_on_integers(n: int, printed: str) -> None:
    """Values with a one-sided p-value of 0.0050028, equal to 0.005 in four decimals, do not reach 0.005."""
    steps = next(steps for steps in range(n**3) if f"{float(1 - Fraction(12 * steps, n**3 - n)):.4f}" == printed)
    border = 1 - Fraction(12 * steps, n**3 - n)
    assert f"{float(_tail(n, border)):.7f}" == "0.0050028"
    found = critical_value(n, Fraction(5, 1000), sidedness="one-sided")
    assert found.rho == border + Fraction(12, n**3 - n)


def _three(n: int, alpha: str, sidedness: Sidedness) -> str:
    found = critical_value(n, Decimal(alpha), sidedness=sidedness)
    assert found.rho is not None
    return f"{float(found.rho):.3f}"


def _tail(n: int, rho: Fraction) -> Fraction:
    """Return the exact upper tail at a coefficient."""
    numerator = rho * ((n**3 - n) // 3)
    assert numerator.denominator == 1
    return untied_null(n).tails(int(numerator)).p("greater")

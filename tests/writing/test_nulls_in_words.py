"""What a report says of the null: which one and why, how wrong p can be, critical values, and the picture in words."""

from collections.abc import Mapping
from functools import cache
from itertools import pairwise
from random import Random
from typing import Any

import pytest

from analysis.invented import MIXED, RISING, Invented, association
from rankdocket.document.model import FieldList, FigureBlock
from rankdocket.document.prose import text_of
from rankdocket.stats.ranks import TieGroups
from stats.asked import only_doubles
from writing.reports import Told, told

SEEDED = "alpha: 0.05, p_value: {permutations: 999, seed: 5}"


def related(n: int, categories: int | None = None) -> dict[str, str]:
    """Return two columns that lean the same way, drawn from a stated seed, sorted into categories or not."""
    source = Random(20261201)
    u = [source.gauss(0, 1) for _ in range(n)]
    v = [0.35 * value + source.gauss(0, 1) for value in u]
    return {name: " ".join(_graded(values, categories)) for name, values in (("u", u), ("v", v))}


def _graded(values: list[float], categories: int | None) -> list[str]:
    if categories is None:
        return [f"{value + 10:.9f}" for value in values]
    return [str(min(categories - 1, max(0, int((value + 2) * categories / 4)))) for value in values]


@cache
def report(n: int, categories: int | None = None, inference: str = "alpha: 0.05", more: str = "") -> Told:
    return told(
        Invented(
            columns=related(n, categories), inference=inference, associations={"A1": association(more=more)}
        ).analysed()
    )


def rows_of(found: Told) -> Mapping[str, str]:
    block = found.block("numbers-A1")
    assert isinstance(block, FieldList)
    return {name: text_of(words) for name, words in block.rows}


def picture_of(found: Told) -> FigureBlock:
    block = found.block("A1-null")
    assert isinstance(block, FigureBlock)
    return block


def filed(found: Told) -> Any:
    associations: Any = found.plain["associations"]
    return associations["A1"]


def test_thirty_rows_without_ties_are_a_count_over_n_factorial() -> None:
    """The largest shipped table is read: both whole numbers are printed and filed, and the picture holds them."""
    found = report(30)
    assert filed(found)["test"]["of"] == "265252859812191058636308480000000"
    assert "of 265,252,859,812,191,058,636,308,480,000,000 orderings of the rows" in rows_of(found)["Test"]
    assert "265,252,859,812,191,058,636,308,480,000,000 orderings" in picture_of(found).alternative
    assert rows_of(found)["Null"].startswith("Exact, no ties. All orderings of so many rows were counted beforehand")


def test_one_row_more_is_a_series_with_its_error() -> None:
    """Above the table there is no count: null is filed, the error is printed, and the methods text states the bound."""
    found = report(31)
    test = filed(found)["test"]
    assert test["count"] is None
    assert "of" not in test
    assert test["method"] == "Edgeworth series"
    assert float(test["p_low"]) < float(test["p"]) < float(test["p_high"])
    assert rows_of(found)["Error of approximation"].startswith("of p at most 0.0")
    assert "the Edgeworth series with exact cumulants" in found.text()
    assert "these bounds are extrapolated" in found.text()
    assert "the share of all orderings at each stretch of values, by the series" in text_of(picture_of(found).caption)


def test_a_tiny_p_above_the_table_comes_from_the_saddlepoint() -> None:
    """Nearly perfect agreement of forty rows: p is far below the reach of the series, above 0, printed as below a limit."""
    columns = {"u": " ".join(map(str, range(1, 41))), "v": " ".join(map(str, [*range(2, 41), 1]))}
    found = told(Invented(columns=columns).analysed())
    test = filed(found)["test"]
    assert test["method"] == "saddlepoint"
    assert 0 < float(test["p"]) < 1e-9
    assert "saddlepoint approximation" in found.text()


def test_perfect_order_above_the_table_is_counted() -> None:
    """At an end of the null the count is known in closed form: two of 40! orderings."""
    column = " ".join(str(place) for place in range(1, 41))
    found = told(Invented(columns={"u": column, "v": column}).analysed())
    assert (filed(found)["test"]["method"], filed(found)["test"]["count"]) == ("exact, no ties", "2")
    assert rows_of(found)["Null"].startswith("Exact, no ties. The data lie at an end of the null")


def test_ties_within_the_budget_are_counted() -> None:
    """Forty rows in three classes: a count, its critical values, and both in the picture."""
    found = report(40, 3)
    test, null = filed(found)["test"], filed(found)["null"]
    assert test["method"] == "exact, conditional on the ties"
    assert int(test["count"]) <= int(test["of"])
    assert null["critical"]["two-sided"]["state"] == "given"
    assert float(null["critical"]["two-sided"]["p"]) <= 0.05
    assert "A complete count was made" in rows_of(found)["Null"]


FIVE_BY_FIVE = TieGroups((4, 5, 6, 7, 8)), TieGroups((3, 6, 6, 7, 8))


@cache
def five_by_five(budget: str) -> Told:
    """Thirty rows in five unequal classes, those of v partly out of order."""
    u, v = (groups.codes().tolist() for groups in FIVE_BY_FIVE)
    columns = {"u": " ".join(map(str, u)), "v": " ".join(map(str, v[12:] + v[:12]))}
    inference = f"alpha: 0.05, p_value: {{budget: {{seconds: {budget}}}}}"
    return told(Invented(columns=columns, inference=inference).analysed())


def test_a_smaller_budget_gives_twelve_digits() -> None:
    """Between the cost of doubles and that of whole numbers, p is filed with twelve digits and without a count."""
    whole, found = five_by_five("10"), five_by_five(str(only_doubles(*FIVE_BY_FIVE)))
    test = filed(found)["test"]
    assert (test["method"], test["count"]) == ("exact algorithm, 12 digits", None)
    assert rows_of(found)["Null"].startswith("Exact algorithm, 12 digits.")
    assert "Whole numbers would have needed, by the forecast," in rows_of(found)["Null"]
    assert len(test["p"].replace(".", "").lstrip("0")) <= 12
    assert abs(float(test["p"]) / float(filed(whole)["test"]["p"]) - 1) < 1e-11
    assert filed(whole)["test"]["count"] is not None


def test_what_the_budget_does_not_hold_is_said() -> None:
    """Where only the tails fit, no critical value and no picture is made, and the report says why."""
    found = five_by_five(str(only_doubles(*FIVE_BY_FIVE)))
    words = "not worked out: the whole null, from which they are read, would have taken more than the budget"
    assert rows_of(found)["Critical values"] == words
    assert "Critical value, two-sided" not in rows_of(found)
    with pytest.raises(StopIteration):
        picture_of(found)
    assert "bars" not in filed(found)["null"]
    assert "A critical value is" not in found.text()


def test_tails_in_whole_numbers_stand_beside_a_null_in_doubles() -> None:
    """Below the cost of a whole count, the count of the tails stays exact; critical values come from doubles."""
    whole, found = five_by_five("10"), five_by_five("0.6")
    assert found.analysis.results["A1"].test.choice.route == "tails, whole numbers"  # type: ignore[union-attr]
    assert filed(found)["test"]["count"] == filed(whole)["test"]["count"]
    assert filed(found)["null"]["method"] == "exact algorithm, 12 digits"
    for direction in ("two-sided", "greater", "less"):
        one, other = (filed(made)["null"]["critical"][direction] for made in (whole, found))
        assert (one["numerator"], one["value"]) == (other["numerator"], other["value"])
        assert abs(float(one["p"]) / float(other["p"]) - 1) < 1e-11
    assert picture_of(found).data["steps"]


def test_what_an_exact_count_would_have_needed_is_said() -> None:
    """Eighty rows in seven classes: drawn, with the forecast that spoke against counting and the plan's budget."""
    words = rows_of(report(80, 7, SEEDED))["Null"]
    assert words.startswith("Drawn permutations. A complete count was not attempted: its forecast exceeded the budget.")
    assert "A complete count would have needed, by the forecast," in words
    assert "the budget was 10 seconds and 1.0\u202fGiB." in words


def test_draws_name_their_seed_stream_and_looks() -> None:
    """Whoever draws again needs seed and stream; looks are counted and each is filed."""
    found = report(80, 7, SEEDED)
    draws = filed(found)["test"]["draws"]
    assert rows_of(found)["Draws"].startswith("seed 5, stream IN-1 / A1 / permutations; ")
    assert 1 <= draws["looks_taken"] == len(draws["looks"]) <= 6
    assert [one["draws"] < two["draws"] for one, two in pairwise(draws["looks"])] == [True] * (len(draws["looks"]) - 1)
    assert draws["looks"][-1]["draws"] == int(filed(found)["test"]["of"])
    assert 0 < float(draws["saddlepoint_p"]) <= 1


def test_the_saddlepoint_stands_near_the_draws() -> None:
    """The cross-check is another way to the same p: within a fifth of it for a smooth null."""
    test = filed(report(80, 7, SEEDED))["test"]
    assert float(test["p_low"]) * 0.8 <= float(test["draws"]["saddlepoint_p"]) <= float(test["p_high"]) * 1.2


def test_without_a_ceiling_there_is_one_look() -> None:
    """most_draws equal to permutations draws once and says so in the methods text."""
    found = report(80, 7, "alpha: 0.05, p_value: {permutations: 999, most_draws: 999, seed: 5}")
    assert filed(found)["test"]["of"] == "999"
    assert rows_of(found)["Draws"] == "seed 5, stream IN-1 / A1 / permutations; 999 drawn in 1 look"
    assert "looks allowed" not in found.text()
    assert "looks allowed" in report(80, 7, SEEDED).text()


def test_what_no_row_can_reach_is_said() -> None:
    """Four rows: no two-sided 5%, which the critical value, the picture and its words all say."""
    found = told(Invented(columns={"u": "1 2 3 4", "v": "1 2 3 4"}).analysed())
    words = "cannot be reached: no coefficient of these rows and ties has a p-value of alpha or less"
    assert rows_of(found)["Critical value, two-sided"] == words
    assert rows_of(found)["Critical value, one-sided"] == "rho of 1.000 or more has p\u00a0=\u00a00.042"
    assert picture_of(found).data["regions"] == ()
    assert picture_of(found).data["note"] == "no attainable value reaches alpha"
    assert "No attainable value reaches alpha." in picture_of(found).alternative


def test_the_critical_value_and_the_rule_of_thumb_stand_side_by_side() -> None:
    """Ten untied rows: 0.648 (published tables), and the large-sample value 1.96/3 = 0.653 with its true size."""
    found = told(Invented(columns={"u": RISING, "v": MIXED}).analysed())
    assert rows_of(found)["Critical value, two-sided"] == "rho of 0.648 or more in size has p\u00a0=\u00a00.049"
    assert "would say 0.65; the share of orderings that reach it is 0.0" in rows_of(found)["For comparison"]


def test_too_few_draws_say_nothing_about_the_rows() -> None:
    """From 999 draws no p lies below 0.001: at an alpha below, that is said of the draws, not of rows and ties."""
    inference = "alpha: 0.0005, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 5}"
    found = told(Invented(columns={"u": RISING, "v": RISING}, inference=inference).analysed())
    assert rows_of(found)["Critical value, two-sided"] == "not placed: these draws are too few to place it"
    assert "these draws are too few to place a critical value" in text_of(picture_of(found).caption)
    assert "the draws that the plan allows are too few for a p of alpha or less" in found.text()
    assert "no coefficient of these rows" not in found.text()
    assert "no attainable value" not in found.text()


def test_what_is_drawn_is_said_to_be_drawn() -> None:
    """A critical value and a share from draws are estimates and named as such."""
    rows = rows_of(report(80, 7, SEEDED))
    assert rows["Critical value, two-sided"].startswith("by these draws, rho of ")
    assert "the share of drawn orderings that reach it is" in rows["For comparison"]


def test_a_coarse_null_hatches_what_is_there() -> None:
    """Twenty rows, one of them apart in both: rho is -0.05 or 1; nothing is hatched where no value lies."""
    nearly = " ".join(["5"] * 19 + ["7"])
    picture = picture_of(told(Invented(columns={"u": nearly, "v": nearly}).analysed()))
    (region,) = picture.data["regions"]  # type: ignore[misc]
    assert 0.9 < float(region["from"]) <= 1  # type: ignore[arg-type,index,call-overload]
    steps = picture.data["steps"]
    assert isinstance(steps, tuple)
    assert len(steps) == 2
    assert all(float(step["low"]) > -0.1 and float(step["high"]) < 1.1 for step in steps)


def test_a_lopsided_null_has_two_one_sided_critical_values() -> None:
    """Six equal values of eight: the upper and the lower side differ, and each is printed."""
    found = told(Invented(columns={"u": "1 1 1 1 1 1 2 3", "v": "1 1 1 1 1 2 2 3"}).analysed())
    rows = rows_of(found)
    assert rows["Critical value, upper side"].startswith("rho of 0.819 or more")
    assert rows["Critical value, lower side"].startswith("cannot be reached")


def test_the_picture_hatches_the_side_that_decides() -> None:
    """Two regions for two sides; one for one side, beginning half a step before the critical value."""
    both = picture_of(report(30)).data["regions"]
    upper = picture_of(report(30, None, "alpha: 0.05, sidedness: one-sided")).data["regions"]
    assert isinstance(both, tuple)
    assert isinstance(upper, tuple)
    assert (len(both), len(upper)) == (2, 1)
    critical = filed(report(30))["null"]["critical"]["two-sided"]
    assert 0 < float(critical["value"]) - float(critical["edge"]) < 0.001


def test_tau_has_its_null_and_its_picture() -> None:
    """Sixty untied rows by tau-b: a count over n!, critical values, no large-sample rule of rho."""
    found = report(60, None, "alpha: 0.05", "coefficient: Kendall tau-b")
    assert filed(found)["test"]["method"] == "exact, no ties"
    assert "For comparison" not in rows_of(found)
    assert "tau-b of 0." in rows_of(found)["Critical value, two-sided"]
    assert "null of tau-b" in picture_of(found).alternative


@pytest.mark.parametrize("found", [lambda: report(30), lambda: report(31), lambda: report(80, 7, SEEDED)])
def test_the_bars_hold_nearly_everything(found: Any) -> None:
    """Shares of the picture sum to nearly 1, and edges rise."""
    null = filed(found())["null"]
    bars = null["bars"]
    assert 0.999 < sum(float(share) for share in bars["share"]) < 1.0000001
    assert len(bars["low"]) == len(bars["high"]) == len(bars["share"])
    assert all(float(left) < float(right) for left, right in pairwise(bars["low"]))

"""The look at the shape in a report: what the plots say of their line, xi beside the numbers, ranks against values."""

from math import exp

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.shape import MOST_STEPS
from rankdocket.document.model import FieldList, FigureBlock
from rankdocket.document.prose import text_of
from writing.reports import Told, told


def figure(report: Told) -> FigureBlock:
    found = report.block("A1-raw")
    assert isinstance(found, FigureBlock)
    return found


def numbers(report: Told) -> dict[str, str]:
    found = report.block("numbers-A1")
    assert isinstance(found, FieldList)
    return {label: text_of(content).replace("\u00a0", " ") for label, content in found.rows}


@pytest.mark.parametrize(("v", "trend"), [(RISING, "rising"), (FALLING, "falling")])
def test_the_raw_plot_says_which_line_it_shows(v: str, trend: str) -> None:
    """In the caption and, with its ends, in words."""
    found = figure(told(Invented(columns={"u": RISING, "v": v}).analysed()))
    assert text_of(found.caption).endswith(f"The line is the {trend} step curve nearest to the rows.")
    ends = "1 to 10" if trend == "rising" else "10 to 1"
    assert found.alternative.endswith(f"A {trend} step curve goes from {ends} on the upright axis.")
    curve = found.data["curve"]
    assert isinstance(curve, tuple)
    assert curve[2] == {"x_from": "3", "x_to": "3", "y": "3" if trend == "rising" else "8"}


def test_a_curve_of_many_steps_says_that_they_were_merged() -> None:
    """With both numbers."""
    n = 2 * MOST_STEPS
    places = " ".join(str(place) for place in range(1, n + 1))
    found = figure(told(Invented(columns={"u": places, "v": places}).analysed()))
    assert text_of(found.caption).endswith("nearest to the rows, its 200 steps merged to 100 for the picture.")
    assert isinstance(found.data["curve"], tuple)
    assert len(found.data["curve"]) == MOST_STEPS


def test_xi_stands_beside_the_numbers_and_makes_no_finding() -> None:
    """For ten rows in order: 1 − 3·9/99 both ways (chatterjee2021)."""
    report = told(Invented().analysed())
    assert numbers(report)["Chatterjee’s xi"] == (
        "y on x 0.73 (p <\u202f0.001); x on y 0.73 (p <\u202f0.001). A diagnostic of shape without a finding; p-values of the upper "
        "tail, approximate"
    )


def test_a_withheld_test_withholds_the_p_values_of_xi() -> None:
    """The coefficients stay."""
    report = told(Invented(rows="leave_out: []").analysed())
    assert numbers(report)["Chatterjee’s xi"] == ("y on x 0.73; x on y 0.73. A diagnostic of shape without a finding")


def test_without_an_estimate_xi_is_not_named() -> None:
    """Neither among the numbers nor in the methods."""
    report = told(Invented(columns={"u": RISING, "v": "5 " * 10}).analysed())
    assert "Chatterjee" not in report.text()


def test_what_ranks_gain_on_a_curve_stands_in_the_table() -> None:
    """Y is exp(x): the rank coefficient is 1, the product-moment coefficient beside it 0.72."""
    values = " ".join(str(round(exp(place), 3)) for place in range(1, 11))
    table = told(Invented(columns={"u": RISING, "v": values}).analysed()).table("comparisons")
    row = dict(zip([column.name for column in table.columns], map(text_of, table.rows[0]), strict=True))
    assert (row["coefficient"], row["pearson"]) == ("1.000", "0.72")


def test_a_relation_without_direction_is_pointed_out_for_tau_b_by_its_own_name() -> None:
    """Rho decides whether it is hidden; the sentence names the coefficient of the plan."""
    places = range(1, 21)
    bent = {"u": " ".join(map(str, places)), "v": " ".join(str(abs(10 * place - 103)) for place in places)}
    tau = {"A1": association(more="coefficient: Kendall tau-b", sign="either")}
    (found,) = told(Invented(columns=bent, associations=tau).analysed()).caveats()["hidden_shape"]
    assert "tau-b is near zero" in found
    assert told(Invented(columns={"u": RISING, "v": MIXED}).analysed()).caveats()["hidden_shape"] == []

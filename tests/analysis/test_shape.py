"""The look at the shape: the step curve, xi both ways, and a relation that rho does not see."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from math import exp

import numpy as np
import pytest
from scipy.optimize import isotonic_regression
from scipy.stats import chatterjeexi

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import AssociationAnalysis, Estimate
from rankdocket.analysis.shape import MOST_STEPS, Shape, shape_of
from rankdocket.document.numbers import look_up
from rankdocket.stats.rho import rho

BENT = Invented(
    columns={
        "u": " ".join(str(place) for place in range(1, 21)),
        "v": " ".join(str(abs(10 * place - 103)) for place in range(1, 21)),
    }
)
"""Twenty values that fall and rise again: rho 0.09."""


def shape(study: Invented) -> Shape:
    found = study.analysed().results["A1"].shape
    assert found is not None
    return found


def test_the_curve_is_the_nearest_one_of_its_direction() -> None:
    """scipy.optimize.isotonic_regression comes to the same heights, rising and falling."""
    values = [int(value) for value in MIXED.split()]
    rising = shape(Invented(columns={"u": RISING, "v": MIXED}))
    assert rising.trend == "rising"
    heights = [float(step.y) for step in rising.curve for _ in range(int(step.x_from), int(step.x_to) + 1)]
    assert heights == pytest.approx(isotonic_regression(values).x)
    falling = shape(Invented(columns={"u": FALLING, "v": MIXED}))
    assert falling.trend == "falling"
    turned = [float(step.y) for step in falling.curve for _ in range(int(step.x_from), int(step.x_to) + 1)]
    assert turned == pytest.approx(isotonic_regression(values[::-1], increasing=False).x)


def test_rows_tied_in_x_share_a_height_and_labels_count_by_place() -> None:
    """The second and third place of an ordered scale have the mean 5/2."""
    study = Invented(
        columns={"u": "1 2 2 3", "v": "low mid high high"},
        variables={"v": "label: verdict, scale: ordered, lowest_to_highest: [low, mid, high]"},
    )
    assert [(step.x_from, step.x_to, step.y) for step in shape(study).curve] == [
        (1, 1, 1),
        (2, 2, Fraction(5, 2)),
        (3, 3, 3),
    ]


def test_a_coefficient_of_nothing_takes_the_nearer_curve() -> None:
    """Rho 0: the falling curve, (3.5, 3.5, 3, 2.5, 2.5), leaves squares of 9 over, the rising one, (2, 3, 3, 3, 4), 8."""
    study = Invented(columns={"u": "1 2 3 4 5", "v": "2 5 3 1 4"}, associations={"A1": association(sign="either")})
    result = study.analysed().results["A1"]
    assert isinstance(result.estimate, Estimate)
    assert result.estimate.coefficient.numerator == 0
    assert [step.y for step in shape(study).curve] == [2, 3, 4]


def test_xi_of_either_variable_on_the_other_is_that_of_scipy() -> None:
    """Without ties."""
    found = shape(BENT)
    u, v = ([float(cell) for cell in BENT.columns[name].split()] for name in ("u", "v"))
    assert found.y_on_x.value == pytest.approx(chatterjeexi(u, v).statistic)
    assert found.x_on_y.value == pytest.approx(chatterjeexi(v, u).statistic)


@pytest.mark.parametrize("more", ["", "coefficient: Kendall tau-b"])
def test_a_relation_without_direction_is_seen_and_filed(more: str) -> None:
    """Y is a function of x, x is none of y; for tau-b the question is the same."""
    study = replace(BENT, associations={"A1": association(more=more, sign="either")})
    assert shape(study).hidden == "y on x"
    assert look_up(analysis_to_plain(study.analysed()), "associations/A1/shape/hidden") == "y on x"
    assert shape(Invented(columns={"u": RISING, "v": MIXED})).hidden is None


def test_without_a_test_the_null_of_xi_is_not_given_either() -> None:
    """It needs rows that may be exchanged, as every test does."""
    study = replace(BENT, rows="leave_out: []")
    plain = analysis_to_plain(study.analysed())
    assert look_up(plain, "associations/A1/shape/xi_y_on_x") == {
        "value": look_up(analysis_to_plain(BENT.analysed()), "associations/A1/shape/xi_y_on_x/value")
    }
    assert look_up(plain, "associations/A1/shape/steps")
    shown = look_up(plain, "associations/A1/shape")
    assert isinstance(shown, dict)
    assert "hidden" not in shown


def test_without_an_estimate_there_is_no_look() -> None:
    """And no key for it."""
    study = Invented(columns={"u": RISING, "v": "5 " * 10})
    assert study.analysed().results["A1"].shape is None
    associations = analysis_to_plain(study.analysed())["associations"]
    assert isinstance(associations, dict)
    assert "shape" not in associations["A1"]


def test_the_ranks_see_all_of_a_curved_relation_that_keeps_its_direction() -> None:
    """Rho is 1; the product-moment coefficient of x and exp(x) at 1 to 10 is that of numpy, far below."""
    values = [round(exp(place), 3) for place in range(1, 11)]
    result: AssociationAnalysis = (
        Invented(columns={"u": RISING, "v": " ".join(map(str, values))}).analysed().results["A1"]
    )
    assert isinstance(result.estimate, Estimate)
    assert result.estimate.coefficient.value == 1
    expected = float(np.corrcoef(range(1, 11), values)[0, 1])
    assert result.comparisons.pearson == pytest.approx(expected)
    assert expected < 0.75


def test_many_steps_are_merged_for_the_picture() -> None:
    """Neighbours become their mean; the curve still goes from the first x to the last and keeps its direction."""
    n = 2 * MOST_STEPS + 50
    places = " ".join(str(place) for place in range(1, n + 1))
    found = shape(Invented(columns={"u": places, "v": places}))
    assert (found.steps, len(found.curve)) == (n, MOST_STEPS)
    assert (found.curve[0].x_from, found.curve[-1].x_to) == (1, n)
    assert all(step.y == Fraction(int(step.x_from) + int(step.x_to), 2) for step in found.curve)


def test_rows_without_a_coefficient_have_no_shape() -> None:
    """Whoever asks is told why."""
    flat = np.zeros(4, dtype=np.int64)
    with pytest.raises(ValueError, match="does not vary"):
        shape_of(rho(flat, flat), (flat, flat), [(Decimal(1), Decimal(1))] * 4)

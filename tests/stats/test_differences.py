"""Differences of coefficients: against printed and hand values, against each other, and where there are none."""

from math import atanh, sqrt

import pytest

from rankdocket.stats.differences import (
    GroupCoefficient,
    GroupDifference,
    Limits,
    difference_limits,
    difference_two_groups,
)
from rankdocket.stats.intervals.bonett_wright import bonett_wright_limits
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.same_row_differences import (
    IMPOSSIBLE,
    SAME_BY_CONSTRUCTION,
    NoneShared,
    NoneSharedDifference,
    OneShared,
    OneSharedDifference,
    difference_no_variable_shared,
    difference_one_variable_shared,
)
from rankdocket.stats.z_scale import PERFECT, TOO_FEW


def _groups(r1: float, n1: int, r2: float, n2: int) -> GroupDifference:
    found = difference_two_groups(
        GroupCoefficient(r1, n1), GroupCoefficient(r2, n2), variance="Bonett-Wright at the estimate", level="0.95"
    )
    assert isinstance(found, GroupDifference)
    return found


def _one_shared(r12: float, r13: float, r23: float, n: int) -> OneSharedDifference:
    found = difference_one_variable_shared(OneShared(r12, r13, r23), n, variance="Fisher", level="0.95")
    assert isinstance(found, OneSharedDifference)
    return found


def test_two_groups_of_fifty() -> None:
    """0.5 against 0.2 with factor 1.06: Z = 1.631836, p = 0.102714 (by hand: (atanh 0.5 − atanh 0.2)/√(2.12/47))."""
    found = difference_two_groups(
        GroupCoefficient(0.5, 50), GroupCoefficient(0.2, 50), variance="Fieller", level="0.95"
    )
    assert isinstance(found, GroupDifference)
    assert found.test.z == pytest.approx((atanh(0.5) - atanh(0.2)) / sqrt(2.12 / 47), rel=1e-14)
    assert (round(found.test.z, 6), round(found.p("two-sided"), 6)) == (1.631836, 0.102714)
    assert found.p("greater") == pytest.approx(found.p("two-sided") / 2, rel=1e-14)
    assert found.p("less") == pytest.approx(1 - found.p("greater"), rel=1e-14)


def test_each_group_has_the_variance_of_its_own_coefficient() -> None:
    """With 1 + r²/2 the two variances are 1.125/47 and 1.02/27 (by hand)."""
    assert _groups(0.5, 50, 0.2, 30).test.z == pytest.approx(
        (atanh(0.5) - atanh(0.2)) / sqrt(1.125 / 47 + 1.02 / 27), rel=1e-14
    )


def test_groups_that_change_places_change_every_sign() -> None:
    """Difference, statistic and limits are mirrored."""
    one, other = _groups(0.7, 40, 0.1, 25), _groups(0.1, 25, 0.7, 40)
    assert (other.difference, other.test.z) == (-one.difference, -one.test.z)
    assert (other.low, other.high) == (-one.high, -one.low)
    assert one.low < one.difference < one.high


def test_limits_of_a_difference_join_the_arms_of_the_intervals() -> None:
    """Arms 0.3 and 0.4 join to 0.5 at a right angle, to 0.1 and 0.7 when the coefficients move as one or against."""
    first, second = Limits(0.5, 0.2, 0.6), Limits(0.1, 0.0, 0.5)
    assert difference_limits(first, second, correlation=0.0)[0] == pytest.approx(0.4 - 0.5, rel=1e-14)
    assert difference_limits(first, second, correlation=1.0)[0] == pytest.approx(0.4 - 0.1, rel=1e-14)
    assert difference_limits(first, second, correlation=-1.0)[0] == pytest.approx(0.4 - 0.7, rel=1e-14)
    assert difference_limits(first, second, correlation=0.0)[1] == pytest.approx(0.4 + sqrt(0.02), rel=1e-14)


def test_the_interval_is_made_from_the_intervals_of_the_groups() -> None:
    """Those of the rule bonett_wright_limits, joined at a right angle."""
    found = _groups(0.6, 33, -0.3, 21)
    parts = [bonett_wright_limits(r, n, level="0.95") for r, n in ((0.6, 33), (-0.3, 21))]
    joined = difference_limits(
        Limits(0.6, parts[0].low, parts[0].high), Limits(-0.3, parts[1].low, parts[1].high), correlation=0.0
    )
    assert (found.low, found.high) == joined


def test_coefficients_with_one_variable_in_common() -> None:
    """0.5 and 0.3, 0.4 between the others, n = 100: z of Meng, Rosenthal and Rubin 2.02735, p = 0.04263 (by hand)."""
    found = _one_shared(0.5, 0.3, 0.4, 100)
    assert (round(found.meng.z, 5), round(found.meng.p("two-sided"), 5)) == (2.02735, 0.04263)


def test_the_factor_of_meng_is_capped_at_one() -> None:
    """0.9 and 0.1 with −0.3 between them: 1.3/(2·0.59) is above 1, so the spread is 2·1.3 (by hand; meng1992)."""
    found = _one_shared(0.9, 0.1, -0.3, 43)
    assert found.meng.z == pytest.approx((atanh(0.9) - atanh(0.1)) * sqrt(40 / 2.6), rel=1e-13)


def test_an_example_of_the_interval_with_one_variable_in_common() -> None:
    """Zou 2007 prints (−0.093, 0.517) for 0.396 and 0.179, 0.088 between, n = 66 (from memory)."""
    found = _one_shared(0.396, 0.179, 0.088, 66)
    assert (round(found.low, 3), round(found.high, 3)) == (-0.093, 0.517)


def test_one_shared_is_the_case_of_none_shared_with_a_variable_twice() -> None:
    """The correlation of r12 and r13 comes from either formula, here with j and h as the same variable."""
    r12, r13, r23 = 0.45, -0.2, 0.3
    none = difference_no_variable_shared(
        NoneShared(jk=r12, hm=r13, jh=1.0, jm=r13, kh=r12, km=r23), 80, variance="Fisher", level="0.9"
    )
    one = difference_one_variable_shared(OneShared(r12, r13, r23), 80, variance="Fisher", level="0.9")
    assert isinstance(none, NoneSharedDifference)
    assert isinstance(one, OneSharedDifference)
    assert none.correlation == pytest.approx(one.correlation, rel=1e-13)
    assert (none.low, none.high) == pytest.approx((one.low, one.high), rel=1e-13)


def test_unrelated_variables_are_as_two_groups_of_the_same_size() -> None:
    """When no variable of one pair goes with one of the other, the correlation is 0 and z is that of two groups."""
    found = difference_no_variable_shared(
        NoneShared(jk=0.5, hm=0.2, jh=0, jm=0, kh=0, km=0), 50, variance="Fisher", level="0.95"
    )
    groups = difference_two_groups(
        GroupCoefficient(0.5, 50), GroupCoefficient(0.2, 50), variance="Fisher", level="0.95"
    )
    assert isinstance(found, NoneSharedDifference)
    assert isinstance(groups, GroupDifference)
    assert found.correlation == 0
    assert found.dunn_clark.z == pytest.approx(groups.test.z, rel=1e-14)
    assert (found.low, found.high) == (groups.low, groups.high)


def test_equal_coefficients_do_not_differ() -> None:
    """Every statistic is 0, every two-sided p-value 1, and 0 lies in the interval."""
    found = _one_shared(0.4, 0.4, 0.1, 30)
    assert (found.t_williams, found.steiger.z, found.meng.z) == (0, 0, 0)
    assert (found.p_williams, found.steiger.p("two-sided"), found.meng.p("two-sided")) == (1, 1, 1)
    assert found.low < 0 < found.high


def test_three_variables_in_one_plane_still_have_an_answer() -> None:
    """0.6, 0.8 and 0 fit exactly: the determinant is 0 but for rounding."""
    assert _one_shared(0.6, 0.8, 0.0, 12).t_williams < 0


@pytest.mark.parametrize(
    ("given", "n", "reason"),
    [
        (OneShared(1.0, 0.3, 0.3), 20, PERFECT),
        (OneShared(0.3, -1.0, -0.3), 20, PERFECT),
        (OneShared(0.3, 0.2, 0.1), 3, TOO_FEW),
        (OneShared(0.3, 0.3, 1.0), 20, SAME_BY_CONSTRUCTION),
        (OneShared(0.3, -0.3, -1.0), 20, SAME_BY_CONSTRUCTION),
        (OneShared(0.9, -0.9, 0.9), 20, IMPOSSIBLE),
    ],
)
def test_one_shared_without_an_answer(given: OneShared, n: int, reason: str) -> None:
    """Perfect order, too few rows, the same variable twice, and coefficients that no rows can have together."""
    assert difference_one_variable_shared(given, n, variance="Fieller", level="0.95") == NoAnswer(reason)


@pytest.mark.parametrize(
    ("given", "n", "reason"),
    [
        (NoneShared(jk=1.0, hm=0.3, jh=0, jm=0, kh=0, km=0), 20, PERFECT),
        (NoneShared(jk=0.4, hm=0.3, jh=0, jm=0, kh=0, km=0), 3, TOO_FEW),
        (NoneShared(jk=0.9, hm=0.3, jh=0.9, jm=0, kh=-0.9, km=0), 20, IMPOSSIBLE),
        (NoneShared(jk=0.4, hm=0.4, jh=1, jm=0.4, kh=0.4, km=1), 20, SAME_BY_CONSTRUCTION),
    ],
)
def test_none_shared_without_an_answer(given: NoneShared, n: int, reason: str) -> None:
    """Perfect order, too few rows, impossible coefficients, and one pair of variables set against itself."""
    assert difference_no_variable_shared(given, n, variance="Fieller", level="0.95") == NoAnswer(reason)


def test_groups_without_an_answer_say_which() -> None:
    """The reason names the group."""
    whole, perfect, few = GroupCoefficient(0.2, 20), GroupCoefficient(-1.0, 20), GroupCoefficient(0.2, 3)
    assert difference_two_groups(perfect, whole, variance="Fisher", level="0.95") == NoAnswer(
        f"in the first group {PERFECT}"
    )
    assert difference_two_groups(whole, few, variance="Fisher", level="0.95") == NoAnswer(
        f"in the second group {TOO_FEW}"
    )


def test_what_is_no_coefficient_is_refused() -> None:
    """Beyond ±1, or not a number, is the caller’s error; so is a level that is none."""
    fine = GroupCoefficient(0.2, 20)
    for wrong in (1.5, float("nan")):
        with pytest.raises(ValueError, match="between -1 and 1"):
            difference_two_groups(fine, GroupCoefficient(wrong, 20), variance="Fisher", level="0.95")
        with pytest.raises(ValueError, match="between -1 and 1"):
            difference_one_variable_shared(OneShared(0.1, 0.2, wrong), 20, variance="Fisher", level="0.95")
        with pytest.raises(ValueError, match="between -1 and 1"):
            difference_no_variable_shared(
                NoneShared(jk=0, hm=0, jh=0, jm=0, kh=wrong, km=0), 20, variance="Fisher", level="0.95"
            )
    with pytest.raises(ValueError, match="level"):
        difference_two_groups(fine, fine, variance="Fisher", level=1)

"""Intervals: textbook forms against printed values, and house forms on examples."""

from collections.abc import Callable, Sequence
from decimal import Decimal
from math import atanh, sqrt, tanh

import numpy as np
import pytest

from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.influence import freedom_of, rho_influence, rho_without_each, z_jackknife_variance
from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval, Restraint
from rankdocket.stats.intervals import INTERVAL_METHODS, interval_by, interval_of, planned_interval
from rankdocket.stats.intervals.bonett_wright import bonett_wright_limits
from rankdocket.stats.intervals.fieller import fieller_limits, fieller_tau_limits
from rankdocket.stats.intervals.fisher import fisher_limits
from rankdocket.stats.intervals.jackknife import guard_of
from rankdocket.stats.intervals.tau_jackknife import tau_guard_of
from rankdocket.stats.rho import rho
from rankdocket.stats.tau import tau_b
from rankdocket.stats.z_interval import t_quantile, tau_tie_cap, tie_cap, untied_cap, untied_tau_cap
from rankdocket.vocabulary import FOR_BOTH, INTERVAL_BY, Direction
from stats.interval_questions import BONETT, JACKKNIFE, TAU_JACKKNIFE, Y12, Asked, by, given

BONETT_X = np.array([67, 28, 30, 28, 52, 40, 25, 37, 44, 10, 14, 20, 28, 40, 51])
BONETT_Y = np.array([21, 4, 9, 12, 35, 18, 10, 22, 24, 1, 6, 8, 13, 16, 19])


def _interval(x: list[int], y: list[int], direction: Direction = "two-sided") -> Interval | NoInterval:
    x_codes, y_codes = np.array(x), np.array(y)
    return interval_by(BONETT, IntervalQuestion(rho(x_codes, y_codes), x_codes, y_codes, Decimal("0.95"), direction))


def test_the_house_form_is_the_textbook_form_away_from_one() -> None:
    """D. G. Bonett's published example with n = 15 prints 0.5840951 and 0.9638297."""
    found = _interval(BONETT_X.tolist(), BONETT_Y.tolist())
    assert isinstance(found, Interval)
    assert (round(found.low, 7), round(found.high, 7), found.cap_binds) == (0.5840951, 0.9638297, False)
    textbook = bonett_wright_limits(rho(BONETT_X, BONETT_Y).value, 15, level="0.95")
    assert (textbook.low, textbook.high) == (found.low, found.high)


@pytest.mark.parametrize("n", [4, 7, 20])
def test_the_cap_without_ties_is_half_of_one_adjacent_swap(n: int) -> None:
    """Without ties the cap is 1 − 6/(n(n² − 1)); one swap of neighbours costs twice that."""
    assert tie_cap(np.arange(n), np.arange(n)) == pytest.approx(1 - 6 / (n * (n * n - 1)), rel=1e-14)


def test_the_cap_is_lower_when_the_ties_are_coarse() -> None:
    """Two halves against themselves: midranks 1.5 and 3.5 apart by 2, squares 4, so 1 − 2·2/(2·4) = 0.5."""
    assert tie_cap(np.array([0, 0, 1, 1]), np.array([0, 0, 1, 1])) == pytest.approx(0.5, rel=1e-15)


def test_the_cap_rests_on_the_widest_step_of_unequal_tie_groups() -> None:
    """Groups of 1, 1 and 6 have midranks 1, 2 and 5.5: the widest step is 3.5, the squares sum to 24.5 (by hand).

    So the cap against itself is 1 − 3.5²/(2·24.5) = 0.75; against eight untied rows, whose step is 1 and whose
    squares sum to 42, it is 1 − 3.5/(2√(24.5·42)).
    """
    grouped, untied = np.array([0, 1, 2, 2, 2, 2, 2, 2]), np.arange(8)
    assert tie_cap(grouped, grouped) == pytest.approx(0.75, rel=1e-15)
    assert tie_cap(grouped[::-1], grouped) == pytest.approx(0.75, rel=1e-15)
    mixed = 1 - 3.5 / (2 * sqrt(24.5 * 42))
    assert tie_cap(grouped, untied) == tie_cap(untied, grouped) == pytest.approx(mixed, rel=1e-15)


def test_the_cap_of_one_lone_row_and_of_two_rows() -> None:
    """Ten ties and a lone row: midranks 5.5 and 11, squares 27.5, so 1 − 5.5²/55 = 0.45; two rows leave 0 (by hand)."""
    lone = np.array([0] * 10 + [1])
    assert tie_cap(lone, lone) == pytest.approx(0.45, rel=1e-15)
    assert tie_cap(np.array([0, 1]), np.array([0, 1])) == pytest.approx(0, abs=1e-15)


def test_perfect_order_still_has_an_interval_with_width() -> None:
    """At rho = 1 the interval ends at 1 and begins where the cap less its half-width lies; −1 mirrors it."""
    cap = 1 - 6 / (10 * 99)
    half = 1.959963984540054 * sqrt((1 + cap * cap / 2) / 7)
    rising, falling = _interval(list(range(10)), list(range(10))), _interval(list(range(10)), list(range(10, 0, -1)))
    assert isinstance(rising, Interval)
    assert isinstance(falling, Interval)
    assert rising.low == pytest.approx(tanh(atanh(cap) - half), rel=1e-12)
    assert (rising.high, rising.cap_binds) == (1.0, True)
    assert (falling.low, falling.high, falling.cap_binds) == (-1.0, -rising.low, True)


def test_a_one_sided_bound_has_its_whole_error_on_one_side() -> None:
    """The lower bound at level 0.95 is the lower limit at level 0.90; the other end is 1, and the reverse."""
    x, y = BONETT_X.tolist(), BONETT_Y.tolist()
    greater, less = _interval(x, y, "greater"), _interval(x, y, "less")
    assert isinstance(greater, Interval)
    assert isinstance(less, Interval)
    both = bonett_wright_limits(rho(BONETT_X, BONETT_Y).value, 15, level="0.90")
    assert greater.low == pytest.approx(both.low, rel=1e-14)
    assert less.high == pytest.approx(both.high, rel=1e-14)
    assert (greater.high, less.low) == (1, -1)


@pytest.mark.parametrize(
    ("x", "y", "reason"),
    [
        ([1, 2, 3], [1, 3, 2], "fewer than four complete rows"),
        ([1, 1, 1, 1, 1], [1, 2, 3, 4, 5], "undefined"),
    ],
)
def test_there_is_not_always_an_interval(x: list[int], y: list[int], reason: str) -> None:
    """Too few rows or a constant variable give a reason instead."""
    found = _interval(x, y)
    assert isinstance(found, NoInterval)
    assert reason in found.reason


def test_the_usual_interval_is_the_guarded_jackknife_of_either_coefficient() -> None:
    """Rho and tau-b each have their own rule behind one word."""
    x, y = np.arange(12), np.array(Y12)
    for coefficient, key in ((rho(x, y), JACKKNIFE), (tau_b(x, y), TAU_JACKKNIFE)):
        question = IntervalQuestion(coefficient, x, y, Decimal("0.95"), "two-sided")
        found = interval_of(question)
        assert isinstance(found, Interval)
        assert (found, found.method) == (interval_by(key, question), key)


def test_no_other_rule_stands_in_for_a_planned_one() -> None:
    """A word that has no rule for tau-b gives its reason; Fieller, Hartley and Pearson made one for either."""
    x, y = np.arange(12), np.array(Y12)
    question = IntervalQuestion(tau_b(x, y), x, y, Decimal("0.95"), "two-sided")
    for word in INTERVAL_BY:
        found = planned_interval(word, question)
        if word in FOR_BOTH:
            assert isinstance(found, Interval)
        else:
            assert found == NoInterval(f"the plan asks for {word}, which makes no interval for tau-b")


@pytest.mark.parametrize("limits", [bonett_wright_limits, fisher_limits, fieller_limits, fieller_tau_limits])
@pytest.mark.parametrize(("r", "n", "level"), [(1.0, 10, "0.95"), (-1.0, 10, "0.95"), (0.5, 3, "0.95"), (0.5, 10, "1")])
def test_the_textbook_forms_refuse_what_they_cannot_answer(
    limits: Callable[..., object], r: float, n: int, level: str
) -> None:
    """A perfect coefficient, three rows or a level of 1 are refused."""
    with pytest.raises(ValueError, match=r"must lie|needs at least"):
        limits(r, n, level=level)


def test_four_rows_are_too_few_for_tau_b() -> None:
    """Its variance 0.437/(n − 4) needs five."""
    with pytest.raises(ValueError, match="at least 5"):
        fieller_tau_limits(0.5, 4, level="0.95")
    found = fieller_tau_limits(0.5, 5, level="0.95")
    assert found.low == pytest.approx(tanh(atanh(0.5) - 1.959963984540054 * sqrt(0.437)), rel=1e-14)


def test_each_interval_rule_has_its_own_key() -> None:
    """Keys in the catalogue are distinct."""
    assert len({method.key for method in INTERVAL_METHODS}) == len(INTERVAL_METHODS)


LEVELS = [1, 1, 1, 2, 2, 2, 3, 3, 3, 3, 4, 4, 4, 5, 5, 5]
FEW_OFF = [1, 2, 1, 1, 2, 3, 2, 3, 4, 3, 3, 5, 4, 4, 5, 5]
ONE_FAR_OFF = [*FEW_OFF[:-1], 1]
LONE_Y = [3, 1, 2, 5, 4, 6, 8, 7, 9, 10]


def _swapped(n: int) -> list[int]:
    return [1, 0, *range(2, n)]


@pytest.mark.parametrize(
    ("x", "y", "level", "limits", "restraints"),
    [
        (range(6), _swapped(6), "0.95", (0.036973571975435604, 0.9981387817696509), ()),
        (range(7), [2, 1, 4, 3, 7, 5, 6], "0.95", (0.0278882116271756, 0.9798781551475122), ("floor",)),
        (range(7), [2, 1, 4, 3, 7, 5, 6], "0.90", (0.20706206934677848, 0.9711589077776634), ("floor",)),
        (
            [1, 1, 2, 2, 3, 3, 4, 4, 5],
            [1, 2, 2, 3, 3, 3, 5, 4, 1],
            "0.95",
            (-0.9610002634952196, 0.9925700422748417),
            (),
        ),
        (range(10), _swapped(10), "0.95", (0.6915028921812392, 0.9981714618227681), ("guard",)),
        (range(12), Y12, "0.95", (0.4013160474700728, 0.9680107938859897), ()),
        (range(12), Y12, "0.90", (0.5328362717622875, 0.9554436640949743), ()),
        (BONETT_X, BONETT_Y, "0.95", (0.5840950937594717, 0.9638296741569936), ("floor",)),
        (LEVELS, FEW_OFF, "0.95", (0.6011698341257272, 0.9619527835514116), ("floor",)),
        (LEVELS, ONE_FAR_OFF, "0.95", (-0.6454252179578741, 0.9754991812607487), ("ceiling",)),
        ([1] * 9 + [2], LONE_Y, "0.95", (-0.6061666968654942, 0.9528310082241892), ("fallback",)),
        (range(20), [19, *range(19)], "0.95", (-0.4099105674251582, 0.9770155635899471), ("ceiling",)),
    ],
)
def test_the_guarded_jackknife_agrees_with_an_independent_computation(
    x: Sequence[int],
    y: Sequence[int],
    level: str,
    limits: tuple[float, float],
    restraints: tuple[Restraint, ...],
) -> None:
    """Limits measured by an independent prototype: few rows, ties, a lone row, a gross error, each way to be bound."""
    found = given(JACKKNIFE, x, y, Asked(level))
    assert (found.low, found.high) == pytest.approx(limits, rel=1e-9)
    assert (found.method, found.restraints) == (JACKKNIFE, restraints)


def test_one_adjacent_swap_and_none_lead_to_the_same_guard() -> None:
    """Ten rows: .692 in both; without the guard the limit of one swap would be .922 (independent prototype)."""
    perfect, swapped = given(JACKKNIFE, range(10), range(10)), given(JACKKNIFE, range(10), _swapped(10))
    assert (round(perfect.low, 3), round(swapped.low, 3)) == (0.692, 0.692)
    assert perfect.restraints == ("cap", "guard", "floor")
    x, y = np.arange(10), np.array(_swapped(10))
    variance = z_jackknife_variance(rho_without_each(x, y), untied_cap(9))
    assert variance is not None
    half = t_quantile(freedom_of(rho_influence(x, y)), 0.025) * sqrt(variance)
    assert round(tanh(atanh(rho(x, y).value) - half), 3) == 0.922


@pytest.mark.parametrize(("n", "low"), [(6, 0.632), (8, 0.903), (10, 0.963), (12, 0.983)])
def test_perfect_order_without_a_guard(n: int, low: float) -> None:
    """Lower limits of Bonett-Wright with its cap at rho = 1, measured by an independent prototype."""
    assert round(given(BONETT, range(n), range(n)).low, 3) == low


@pytest.mark.parametrize(
    ("n", "guard"), [(8, 0.631), (10, 0.692), (20, 0.832), (30, 0.884), (50, 0.929), (100, 0.964), (200, 0.982)]
)
def test_the_guard(n: int, guard: float) -> None:
    """.025 to the power 1/n, and the limit at rho = 1 where it binds (independent prototype)."""
    assert round(guard_of(0.025, n), 3) == guard
    assert round(given(JACKKNIFE, range(n), range(n)).low, 3) == guard


@pytest.mark.parametrize(("n", "low"), [(4, -0.692), (5, 0.161)])
def test_with_four_or_five_rows_the_cap_binds_before_the_guard(n: int, low: float) -> None:
    """Limits at rho = 1 measured by an independent prototype; the guard alone would give .398 and .478."""
    found = given(JACKKNIFE, range(n), range(n))
    assert (round(found.low, 3), found.high) == (low, 1)
    assert found.restraints == ("cap", "floor")


def test_the_guard_of_tau_b_is_tau_of_a_mixture() -> None:
    """Rows related with probability g, else not: tau = g² + 2g(1 − g)/3, counted here in a large drawn sample."""
    rng = np.random.default_rng(8)
    share = guard_of(0.025, 10)
    x = rng.permutation(200_000)
    y = np.where(rng.random(200_000) < share, x, rng.integers(0, 200_000, 200_000))
    assert tau_b(x, y).value == pytest.approx(tau_guard_of(0.025, 10), abs=0.005)
    assert tau_guard_of(0.025, 10) == pytest.approx(share**2 + 2 * share * (1 - share) / 3, rel=1e-14)


def test_the_cap_of_tau_b_is_half_of_one_swap() -> None:
    """One swap of neighbours costs 4/(n(n − 1)) without ties; of two pairs tied alike it costs everything."""
    x = np.arange(7)
    swapped = 1 - tau_b(x, np.array(_swapped(7))).value
    assert 1 - tau_tie_cap(tau_b(x, x), x, x) == pytest.approx(swapped / 2, rel=1e-13)
    assert untied_tau_cap(7) == pytest.approx(tau_tie_cap(tau_b(x, x), x, x), rel=1e-14)
    tied = np.array([0, 0, 1, 1])
    assert tau_b(tied, np.array([0, 1, 0, 1])).value == 0
    assert tau_tie_cap(tau_b(tied, tied), tied, tied) == 0.5


def test_a_cap_never_reaches_one() -> None:
    """With a million rows 1 − 6/(n(n² − 1)) would round to 1; the interval at rho = 1 still has width."""
    x = np.arange(1_000_000)
    assert untied_cap(1_000_000) == tie_cap(x, x) < 1
    found = given(BONETT, x, x)
    assert found.low < found.high == 1


def test_tau_b_has_intervals_by_name() -> None:
    """The jackknife is no narrower than Fieller-Hartley-Pearson; at tau-b = 1 cap and guard bind."""
    asked = Asked(coefficient="Kendall tau-b")
    own, textbook = (given(key, range(12), Y12, asked) for key in (TAU_JACKKNIFE, "Fieller-Hartley-Pearson"))
    tau = tau_b(np.arange(12), np.array(Y12)).value
    assert (textbook.low, textbook.high) == pytest.approx(
        (fieller_tau_limits(tau, 12, level="0.95").low, fieller_tau_limits(tau, 12, level="0.95").high), rel=1e-14
    )
    assert own.low <= textbook.low < tau < textbook.high <= own.high
    perfect = given(TAU_JACKKNIFE, range(12), range(12), asked)
    assert (perfect.low, perfect.high) == (tau_guard_of(0.025, 12), 1)
    assert perfect.restraints == ("cap", "guard", "floor")
    lone = given(TAU_JACKKNIFE, [0] * 9 + [1], range(10), asked)
    assert "fallback" in lone.restraints
    few = by(TAU_JACKKNIFE, range(4), range(4), asked)
    assert few == NoInterval("no interval exists for fewer than five complete rows")


def test_comparison_rules_for_rho_are_their_textbook_forms_away_from_one() -> None:
    """Fisher (0.6453, 0.9561) and 1.06 (0.6354, 0.9575) for the published example with n = 15 (independent prototype)."""
    for key, limits, low, high in (
        ("Fisher z", fisher_limits, 0.6453, 0.9561),
        ("Fieller-Hartley-Pearson", fieller_limits, 0.6354, 0.9575),
    ):
        found, textbook = given(key, BONETT_X, BONETT_Y), limits(rho(BONETT_X, BONETT_Y).value, 15, level="0.95")
        assert (found.low, found.high) == (textbook.low, textbook.high)
        assert (round(found.low, 4), round(found.high, 4)) == (low, high)


def test_the_standard_error_on_the_scale_of_rho_is_the_printed_one() -> None:
    """D. G. Bonett's published example prints 0.08241326: (1 − r²) times that of atanh r."""
    found = bonett_wright_limits(rho(BONETT_X, BONETT_Y).value, 15, level="0.95")
    assert round(found.se_of_r, 8) == 0.08241326


def test_influence_values_fall_back_where_they_vanish() -> None:
    """At rho = 1 the variance is that of Bonett and Wright, with its cap; just below, their own (by hand)."""
    perfect = given("influence values on z", range(10), range(10))
    cap = untied_cap(10)
    half = t_quantile(8, 0.025) * sqrt((1 + cap**2 / 2) / 7)
    assert (perfect.low, perfect.high) == pytest.approx((tanh(atanh(cap) - half), 1), rel=1e-12)
    assert perfect.restraints == ("cap", "fallback")
    swapped = given("influence values on z", range(10), _swapped(10))
    r = rho(np.arange(10), np.array(_swapped(10))).value
    half = t_quantile(8, 0.025) * sqrt(5.289256198347e-4 * 10 / 8) / (1 - r * r)
    assert (swapped.low, swapped.restraints) == (pytest.approx(tanh(atanh(r) - half), rel=1e-9), ())


def test_a_rule_must_exist_and_serve_the_coefficient() -> None:
    """An unknown key is refused with the keys there are; a rule for rho makes none for tau-b."""
    with pytest.raises(ValueError, match="write one of: jackknife on z, guarded, Bonett-Wright"):
        by("jackknife", range(5), range(5))
    found = by(JACKKNIFE, range(5), range(5), Asked(coefficient="Kendall tau-b"))
    assert found == NoInterval(f"the rule {JACKKNIFE} makes no interval for tau-b")


@pytest.mark.parametrize("key", [JACKKNIFE, "influence values on z", "BCa bootstrap"])
def test_rules_with_sums_over_products_end_at_two_million_rows(key: str) -> None:
    """Beyond, their integers could overflow: a reason instead."""
    large = Coefficient("Spearman rho", 2_000_001, 0, 1, 1)
    found = interval_by(key, IntervalQuestion(large, np.arange(1), np.arange(1), Decimal("0.95"), "two-sided"))
    assert found == NoInterval("no interval by this rule exists for more than 2000000 complete rows")

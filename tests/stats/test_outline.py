"""A null laid out: its bars hold all of it, evenly, and leave out only what cannot be seen."""

from fractions import Fraction
from itertools import pairwise

import numpy as np
import pytest

from rankdocket.errors import ComputeError
from rankdocket.stats.choose_null import exact_null_of
from rankdocket.stats.outline import FEWEST_BARS, MOST_BARS, UNSEEN, NullOutline, outline_of, picture_of
from rankdocket.stats.ranks import TieGroups

UNTIED = TieGroups((1,) * 12)
LOPSIDED = TieGroups((6, 1, 1)), TieGroups((5, 2, 1))
COARSE = TieGroups((4, 4)), TieGroups((3, 5))
WIDE = TieGroups((2, 3, 1, 1, 1, 1, 1, 1)), TieGroups((1, 1, 1, 2, 2, 4))


@pytest.mark.parametrize("groups", [(UNTIED, UNTIED), LOPSIDED, COARSE, WIDE])
def test_bars_hold_nearly_everything(groups: tuple[TieGroups, TieGroups]) -> None:
    """Bars are of one width, do not overlap, are not empty, and hold all orderings but those too rare to be drawn."""
    bars = picture_of(outline_of(exact_null_of("Spearman rho", *groups))).bars
    assert len(bars) <= MOST_BARS
    assert all(left.high <= right.low for left, right in pairwise(bars))
    assert len({bar.high - bar.low for bar in bars}) == 1
    assert 1 - 2 * UNSEEN <= sum(bar.share for bar in bars) <= 1
    assert all(bar.share > 0 for bar in bars)


def test_many_places_touch_one_another() -> None:
    """A fine null is one outline without gaps."""
    bars = picture_of(outline_of(exact_null_of("Spearman rho", UNTIED, UNTIED))).bars
    assert all(left.high == right.low for left, right in pairwise(bars))


@pytest.mark.parametrize("groups", [COARSE, (TieGroups((19, 1)), TieGroups((19, 1)))])
def test_few_values_get_a_narrow_bar_each(groups: tuple[TieGroups, TieGroups]) -> None:
    """A coarse null keeps every value apart; each bar is centred on its value and reaches hardly past the ends."""
    null = exact_null_of("Spearman rho", *groups)
    picture = picture_of(outline_of(null))
    assert [(bar.low + bar.high) / 2 for bar in picture.bars] == null.statistics.tolist()
    assert [bar.share for bar in picture.bars] == [Fraction(count, null.of) for count in null.counts]
    span = int(null.statistics[-1] - null.statistics[0])
    assert picture.half <= Fraction(span, FEWEST_BARS)


def test_each_bar_of_a_fine_null_holds_equally_many_places() -> None:
    """Without ties all places of the lattice are taken near 0: no bar there stands out by the binning alone."""
    bars = picture_of(outline_of(exact_null_of("Spearman rho", UNTIED, UNTIED))).bars
    middle = [bar.share for bar in bars if abs(bar.low + bar.high) < 80]
    assert max(middle) < Fraction(11, 10) * min(middle)


def test_a_symmetric_null_has_symmetric_bars() -> None:
    """Bars of a symmetric null are each other's mirror image about 0 up to one place of the lattice."""
    bars = picture_of(outline_of(exact_null_of("Spearman rho", UNTIED, UNTIED))).bars
    assert abs(bars[0].low + bars[-1].high) <= 4


def test_one_value_alone_is_one_bar() -> None:
    """A null of a single value is a single bar that holds everything."""
    (bar,) = picture_of(NullOutline("drawn permutations", np.array([7], dtype=np.int64), (3,), 3)).bars
    assert bar.share == 1
    assert bar.low < 7 < bar.high


def test_an_outline_without_values_is_refused() -> None:
    """Values and weights belong together, and there is at least one."""
    with pytest.raises(ComputeError, match="a weight for each"):
        NullOutline("drawn permutations", np.array([], dtype=np.int64), (), 0)

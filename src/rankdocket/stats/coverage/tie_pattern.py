"""Which pattern of ties two variables show, and which simulated families show the like."""

from fractions import Fraction
from typing import Final

from rankdocket.stats.coverage.families import (
    FAMILIES,
    FIVE_LEVELS,
    FIVE_SKEWED_LEVELS,
    NORMAL,
    ONE_IN_LEVELS,
    SIXTY_BELOW,
    THIRTY_BELOW,
    THREE_LEVELS,
    TiePattern,
)
from rankdocket.stats.ranks import TieGroups

MOST_LEVELS: Final = 10
"""A variable with more distinct values has not few levels, however many rows there are."""

LEVELS_PER_ROW: Final = Fraction(2, 3)
"""Nor has one with more distinct values than this share of its rows: two rows level by chance make no scale of levels."""

LEAST_END: Final = Fraction(15, 100)
"""Rows that must share the lowest or the highest value, as a share of all, to count as tied at that end: half of the
smaller share simulated."""

HALF_WAY: Final = Fraction(45, 100)
"""Share tied at one end above which the population with six rows in ten is nearer than that with three."""

SKEWED_SHARE: Final = Fraction(2, 5)
"""Share of rows in the lowest or highest of few levels from which the skewed population is nearer: in the even one an
end level holds a tenth of the rows, in the skewed one more than half."""

FEWEST_EVEN: Final = 3
"""So many levels or fewer are nearest to the population in three."""


def tie_pattern(x: TieGroups, y: TieGroups) -> TiePattern:
    """Return the pattern of ties of two variables, from their tie groups alone.

    A variable is *tied at one end* when its largest tie group is that of its lowest or its highest value, holds at least two
    rows and 15 % of them, and the other rows are not in few levels; it is *in few levels* when it is not tied at one end and
    has at most ten distinct values and at most two for every three rows. Two variables are

    * "few levels in both variables" or "few levels in one variable", where they are in few levels;
    * "tied at one end", where neither is in few levels and at least one is tied at one end;
    * "no ties or small tie groups" otherwise.
    """
    in_levels = [_in_few_levels(ties) for ties in (x, y)]
    if all(in_levels):
        return "few levels in both variables"
    if any(in_levels):
        return "few levels in one variable"
    return "tied at one end" if _end_share(x) or _end_share(y) else "no ties or small tie groups"


def nearest_families(x: TieGroups, y: TieGroups) -> tuple[str, ...]:
    """Return the families of the pattern, those whose ties are nearest first.

    Without ties, normal-type dependence is the first: what the ties do not tell, only the lowest coverage of all families
    can. Few levels: three where a variable has at most three, skewed ones where its lowest or highest level holds two rows of
    five or more. Tied at one end: by the larger share tied there.
    """
    pattern = tie_pattern(x, y)
    match pattern:
        case "no ties or small tie groups":
            first = NORMAL
        case "few levels in one variable":
            first = ONE_IN_LEVELS
        case "few levels in both variables":
            skewed = any(Fraction(max(ties.sizes[0], ties.sizes[-1]), ties.n) >= SKEWED_SHARE for ties in (x, y))
            fewest = min(x.distinct, y.distinct)
            first = THREE_LEVELS if fewest <= FEWEST_EVEN else FIVE_SKEWED_LEVELS if skewed else FIVE_LEVELS
        case "tied at one end":
            first = SIXTY_BELOW if max(_end_share(x), _end_share(y)) > HALF_WAY else THIRTY_BELOW
    others = tuple(key for key, family in FAMILIES.items() if family.pattern == pattern and key != first)
    return (first, *others)


def _in_few_levels(ties: TieGroups) -> bool:
    return not _end_share(ties) and _are_few(ties.distinct, ties.n)


def _are_few(distinct: int, rows: int) -> bool:
    return distinct <= MOST_LEVELS and distinct <= LEVELS_PER_ROW * rows


def _end_share(ties: TieGroups) -> Fraction:
    """Return the share of rows tied at one end, 0 for a variable that is not."""
    end = max(ties.sizes[0], ties.sizes[-1])
    share = Fraction(end, ties.n)
    alone = end > 1 and end == ties.largest and share >= LEAST_END
    return share if alone and not _are_few(ties.distinct - 1, ties.n - end) else Fraction(0)

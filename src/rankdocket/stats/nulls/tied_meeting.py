"""Where the walks from both ends of the rows meet, and what a tail asks of them."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Final, TypeVar

import numpy as np

from rankdocket.stats.nulls.tied_cost import cheaper_deal, meeting_row
from rankdocket.stats.nulls.tied_deal import Deal, deal
from rankdocket.stats.nulls.tied_plan import Layer
from rankdocket.stats.ranks import Codes, TieGroups

SLOTS_AT_ONCE: Final = 2**17
"""Scores compared at a time: 3 MiB of them."""

Amount = TypeVar("Amount", int, Fraction)
"""Permutations, or a share of them."""


@dataclass(frozen=True, slots=True, eq=False)
class Run:
    """One pass for the upper tail of a deal.

    Attributes
    ----------
    meet
        The row after which the walks meet, 0 to n.
    limit, above
        The least sums of products (of ranks and values) that are at least, and above, the observed one.
    """

    plan: Deal
    meet: int
    limit: int
    above: int


def is_symmetric(x: TieGroups, y: TieGroups) -> bool:
    """Return whether the null is symmetric for certain: the ties of one variable mirror themselves."""
    return x.sizes == x.sizes[::-1] or y.sizes == y.sizes[::-1]


@dataclass(frozen=True, slots=True)
class Question:
    """Two variables and the numerator that was observed."""

    x: TieGroups
    y: TieGroups
    observed: int

    def runs(self) -> list[Run]:
        """Return the pass for the tail on the side of the observed numerator and, where it differs, the other."""
        plan = cheaper_deal(self.x, self.y)
        mirrored = deal(plan.rows, TieGroups(plan.dealt.sizes[::-1]))
        near, far = (plan, mirrored) if self.observed >= 0 else (mirrored, plan)
        size = abs(self.observed)
        limit, above = -(-size // plan.unit), size // plan.unit + 1
        needed = [near] if is_symmetric(self.x, self.y) or size == 0 else [near, far]
        return [Run(one, meeting_row(one), limit, above) for one in needed]

    def tails(self, counted: Sequence[tuple[Amount, Amount]], of: Amount) -> tuple[Amount, Amount, Amount]:
        """Return the tails greater, less and two-sided.

        Parameters
        ----------
        counted
            For each of :meth:`runs` how much is at least, and above, the limit.
        of
            All permutations.
        """
        (near, beyond), *far = counted
        two_sided = of if self.observed == 0 else near + (far[0][0] if far else near)
        greater, less = (near, of - beyond) if self.observed >= 0 else (of - beyond, near)
        return greater, less, two_sided


@dataclass(frozen=True, slots=True)
class Match:
    """A state in which the walks meet.

    Attributes
    ----------
    low, high
        Its place in the layer of the walk from the lowest rows, and of its complement in the other.
    enough, more
        For each score of the low walk, how many of the highest scores of the high walk bring it to at least, and
        above, the limit.
    """

    low: int
    high: int
    enough: Codes
    more: Codes


def matched_states(run: Run, low: Layer, high: Layer) -> Iterator[Match]:
    """Yield the states that both walks have reached."""
    plan = run.plan
    _, in_low, in_high = np.intersect1d(low.codes, plan.places[-1] - 1 - high.codes, return_indices=True)
    slots = low.slots[in_low]
    blocks = np.flatnonzero(np.diff(np.cumsum(slots) // SLOTS_AT_ONCE)) + 1
    for lows, highs in zip(np.split(in_low, blocks), np.split(in_high, blocks), strict=True):
        sizes = low.slots[lows]
        ends = np.cumsum(sizes)
        places = np.arange(ends[-1] if len(ends) else 0) - np.repeat(ends - sizes, sizes)
        scores = np.repeat(low.lowest[lows], sizes) + places * low.gap
        highest = high.lowest[highs] + (high.slots[highs] - 1) * max(1, high.gap)
        fixed = plan.ranks[0] * low.dealt[lows] + plan.ranks[-1] * high.dealt[highs] + plan.step * highest
        spare = np.repeat(fixed, sizes) + plan.step * scores
        most = np.repeat(high.slots[highs], sizes)
        gap = plan.step * max(1, high.gap)
        enough, more = (np.clip((spare - least) // gap + 1, 0, most) for least in (run.limit, run.above))
        starts = (ends - sizes).tolist()
        for place, (start, end) in enumerate(zip(starts, ends.tolist(), strict=True)):
            yield Match(int(lows[place]), int(highs[place]), enough[start:end], more[start:end])

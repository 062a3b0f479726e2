"""The plan by which the values of one variable are dealt to the rows of another, and what of it matters for a tail.

The rows are taken from both ends of their order towards a row where the two walks meet.  How a sum of products can
go on depends only on how many members of each tie group have been dealt, its state.  A walk keeps the ways to reach
a state apart by their score; scores that no completion can bring to the limit are never kept.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import accumulate
from math import comb, gcd
from typing import Final

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError
from rankdocket.stats.forecast import distinct_arrangements
from rankdocket.stats.nulls.tied_deal import Deal, Members
from rankdocket.stats.ranks import SAFE_SUM, Codes, TieGroups

NO_LIMIT: Final = -SAFE_SUM
"""A limit below every score: nothing is dropped."""


@dataclass(frozen=True, slots=True)
class Side:
    """One end of the rows, from which a walk begins.

    Attributes
    ----------
    sizes
        Rows in each tie group, from the end inwards.
    raises
        What a dealt value of 1 adds to the score in each of them: 0 in the first, so that all ways to deal to it
        have one score; above 0 from the lowest rows on, below 0 from the highest on.
    outer
        The rank of the rows at this end: a partial sum of products is ``outer`` times the sum of the dealt values
        plus ``step`` times the score.
    is_low
        Whether it is the end with the lowest ranks.
    groups
        The tie group of the row taken as number 1 … n; that of the first again as number 0.
    gaps
        The gap of the scores after 0 … n rows: 0 as long as there is but one.
    """

    sizes: tuple[int, ...]
    raises: tuple[int, ...]
    outer: int
    is_low: bool
    groups: tuple[int, ...]
    gaps: tuple[int, ...]


def sides(plan: Deal) -> tuple[Side, Side]:
    """Return the end with the lowest ranks and the end with the highest."""
    return _side(plan.ranks, plan.rows.sizes, plan.step), _side(plan.ranks[::-1], plan.rows.sizes[::-1], plan.step)


def _side(ranks: tuple[int, ...], sizes: tuple[int, ...], step: int) -> Side:
    outer = ranks[0]
    raises = tuple((rank - outer) // step for rank in ranks)
    groups = (0, *(place for place, size in enumerate(sizes) for _ in range(size)))
    gaps = tuple(accumulate(raises, gcd))
    return Side(sizes, raises, outer, outer == min(ranks), groups, tuple(gaps[group] for group in groups))


@dataclass(frozen=True, slots=True, eq=False)
class Layer:
    """The states that matter after as many rows as ``taken``.

    Attributes
    ----------
    codes
        Their codes, increasing.
    lowest
        The lowest score that is kept for each.
    slots
        Scores that are kept for each, at distances of ``gap``.
    dealt
        The sum of the values that have been dealt.
    """

    taken: int
    codes: Codes
    lowest: Codes
    slots: Codes
    gap: int
    dealt: Codes


@dataclass(frozen=True, slots=True, eq=False)
class Move:
    """One row taken: from which state to which, and by how many slots its scores move up (or, below 0, down).

    Before the moves the slots of the states left behind are spread from their own gap to the gap of ``to``.
    """

    to: Layer
    source: Codes
    target: Codes
    shift: Codes


def first_layer(plan: Deal, side: Side, taken: int, limit: int) -> tuple[Layer, list[int]]:
    """Return the layer after ``taken`` rows of the first tie group, and the ways to reach each of its states.

    Raises
    ------
    ComputeError
        If there are so many states that their codes could exceed an int64.
    """
    if plan.places[-1] >= SAFE_SUM:
        raise ComputeError("There are too many tie groups for a complete count.")
    partial = {0: (taken, 1)}
    room = plan.dealt.n
    for place, size in zip(plan.places, plan.dealt.sizes, strict=False):
        room -= size
        partial = {
            code + number * place: (left - number, ways * comb(left, number))
            for code, (left, ways) in partial.items()
            for number in range(max(0, left - room), min(size, left) + 1)
        }
    codes = np.fromiter(sorted(partial), dtype=np.int64, count=len(partial))
    layer, _ = _layer(plan, side, codes, taken=taken, limit=limit)
    return layer, [partial[code][1] for code in layer.codes.tolist()]


def moves(plan: Deal, side: Side, layer: Layer, upto: int, limit: int) -> Iterator[Move]:
    """Yield the moves from ``layer`` until ``upto`` rows have been taken."""
    sizes = np.asarray(plan.dealt.sizes, dtype=np.int64)
    for taken in range(layer.taken + 1, upto + 1):
        members = plan.members(layer.codes)
        source, group = np.nonzero(members < sizes[None, :])
        codes = layer.codes[source] + np.asarray(plan.places, dtype=np.int64)[group]
        reached, target = np.unique(codes, return_inverse=True)
        following, kept = _layer(plan, side, reached, taken=taken, limit=limit)
        # By target, so that the row that is added to stays in the processor's nearest memory.
        wanted = np.argsort(target, kind="stable")
        wanted = wanted[kept[target[wanted]]]
        source, group, target = source[wanted], group[wanted], (np.cumsum(kept) - 1)[target[wanted]]
        raised = layer.lowest[source] + side.raises[side.groups[taken]] * plan.values[group]
        shift = (raised - following.lowest[target]) // max(1, following.gap)
        yield Move(following, source, target, shift)
        layer = following


def _layer(plan: Deal, side: Side, codes: Codes, *, taken: int, limit: int) -> tuple[Layer, npt.NDArray[np.bool_]]:
    """Return the layer of the states that can still reach the limit, and which of ``codes`` they are."""
    members = plan.members(codes)
    gap = side.gaps[taken]
    lowest, slots = scores_kept(plan, side, members, limit)
    kept = slots > 0
    return Layer(taken, codes[kept], lowest[kept], slots[kept], gap, (members @ plan.values)[kept]), kept


def scores_kept(plan: Deal, side: Side, members: Members, limit: int) -> tuple[Codes, Codes]:
    """Return for each of these states the lowest score that can still reach the limit, and how many slots are kept.

    A state that cannot reach the limit keeps 0 slots or fewer.
    """
    taken = members.sum(axis=1)
    first, first_left = (0, taken) if side.is_low else (plan.rows.n - taken, 0)
    dealt = members @ plan.values
    highest = (plan.most(members, first) - side.outer * dealt) // plan.step
    lowest = (plan.least(members, first) - side.outer * dealt) // plan.step
    if limit > NO_LIMIT:
        left = np.asarray(plan.dealt.sizes, dtype=np.int64) - members
        needed = limit - side.outer * dealt - plan.most(left, first_left)
        lowest = np.maximum(lowest, -(-needed // plan.step))
    gaps = np.maximum(1, np.asarray(side.gaps, dtype=np.int64))[taken]
    lowest = -(-lowest // gaps) * gaps
    return lowest, (highest - lowest) // gaps + 1


@dataclass(frozen=True, slots=True, eq=False)
class Remainder:
    """How the whole null follows from a walk that has left but the last tie group of the rows.

    Attributes
    ----------
    ways
        For each state of the layer the distinct ways to deal what is left.
    starts
        Where its lowest slot stands in the whole.
    apart
        Distance of its slots there.
    slots
        Slots of the whole.
    lowest, step
        The numerators of the slots of the whole: the lowest, and their distance.
    """

    ways: list[int]
    starts: Codes
    apart: int
    slots: int
    lowest: int
    step: int


def remainder(plan: Deal, side: Side, layer: Layer) -> Remainder:
    """Return what is left to do after all tie groups of the rows but the last from this side."""
    left = np.asarray(plan.dealt.sizes, dtype=np.int64) - plan.members(layer.codes)
    last = plan.ranks[-1] if side.is_low else plan.ranks[0]
    lowest, _ = plan.ends
    sums = side.outer * layer.dealt + plan.step * layer.lowest + last * (plan.whole - layer.dealt)
    return Remainder(
        ways=[distinct_arrangements(TieGroups(tuple(members))) for members in left.tolist()],
        starts=(sums - lowest) // plan.step,
        apart=max(1, layer.gap),
        slots=plan.span,
        lowest=lowest * plan.unit,
        step=plan.step * plan.unit,
    )

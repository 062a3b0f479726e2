"""Tails of the exact null of Spearman rho in whole numbers, by two walks that meet (vandewiel2001)."""

from dataclasses import dataclass
from itertools import accumulate
from math import factorial
from operator import mul

from rankdocket.stats.forecast import distinct_arrangements
from rankdocket.stats.null import NullMethod, TailCounts
from rankdocket.stats.nulls.packed import Relay, counts_of, slot_widths
from rankdocket.stats.nulls.tied_deal import Deal
from rankdocket.stats.nulls.tied_meeting import Question, Run, matched_states
from rankdocket.stats.nulls.tied_plan import Layer, Side, first_layer, moves, sides
from rankdocket.stats.ranks import TieGroups


def rho_tails_integers(x: TieGroups, y: TieGroups, observed: int) -> TailCounts:
    """Return how many of the n! permutations have a numerator at least as extreme as ``observed``.

    Parameters
    ----------
    x, y
        Tie groups of the two variables, of the same n, two distinct values or more in each.
    observed
        The sum of products of the doubled centred midranks.

    Raises
    ------
    ComputeError
        If there are so many states that their codes could exceed an int64.
    """
    question = Question(x, y, observed)
    of = factorial(x.n)
    counted = []
    for run in question.runs():
        at_least, above = _arrangements(run)
        each = of // distinct_arrangements(run.plan.dealt)
        counted.append((at_least * each, above * each))
    greater, less, two_sided = question.tails(counted, of)
    method: NullMethod = "exact, conditional on the ties" if x.has_ties or y.has_ties else "exact, no ties"
    return TailCounts(method, greater, less, two_sided, of)


def _arrangements(run: Run) -> tuple[int, int]:
    """Return the distinct arrangements with a sum of at least, and above, the limit."""
    low, high = (
        walk_packed(run.plan, side, upto, run.limit)
        for side, upto in zip(sides(run.plan), (run.meet, run.plan.rows.n - run.meet), strict=True)
    )
    at_least = above = 0
    for match in matched_states(run, low.layer, high.layer):
        counts = counts_of(low.rows[match.low], low.bits, int(low.layer.slots[match.low]))
        slots = int(high.layer.slots[match.high])
        # From the highest score downwards, so that entry i is the ways to one of the i highest scores.
        ways = [0, *accumulate(reversed(counts_of(high.rows[match.high], high.bits, slots)))]
        at_least += sum(map(mul, counts, map(ways.__getitem__, match.enough.tolist())))
        above += sum(map(mul, counts, map(ways.__getitem__, match.more.tolist())))
    return at_least, above


@dataclass(frozen=True, slots=True, eq=False)
class PackedWalk:
    """Where a walk in whole numbers has come to: counts of distinct arrangements, packed in slots of ``bits``."""

    layer: Layer
    rows: list[int]
    bits: int


def walk_packed(plan: Deal, side: Side, upto: int, limit: int) -> PackedWalk:
    """Return the counts of the ways to deal to ``upto`` rows from this side that can still reach ``limit``."""
    layer, rows = first_layer(plan, side, min(upto, side.sizes[0]), limit)
    bits, *widths = slot_widths(plan.dealt, layer.taken, upto)
    for move, width in zip(moves(plan, side, layer, upto, limit), widths, strict=True):
        relay = Relay(bits, width, max(1, layer.gap) // move.to.gap)
        if relay.is_needed:
            rows = list(map(relay.laid, rows, layer.slots.tolist()))
        bits = width
        following = [0] * len(move.to.codes)
        for source, target, shift in zip(
            move.source.tolist(), move.target.tolist(), (move.shift * bits).tolist(), strict=True
        ):
            row = rows[source]
            following[target] += row << shift if shift >= 0 else row >> -shift
        layer, rows = move.to, following
    return PackedWalk(layer, rows, bits)

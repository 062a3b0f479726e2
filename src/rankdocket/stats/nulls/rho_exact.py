"""The whole exact null of Spearman rho, with or without ties, by counting distinct arrangements (vandewiel2001).

The rows are taken in the order of one variable, one by one; the values of the other variable are dealt to them.
How the sum can go on depends only on how many members of each tie group have been dealt, so all ways that
agree in this are kept together, as counts per score.  Ties make it cheaper, not impossible.
"""

from rankdocket.stats.forecast import distinct_arrangements, slot_bits
from rankdocket.stats.null import ExactNull, exact_null
from rankdocket.stats.nulls.packed import Relay, unpacked
from rankdocket.stats.nulls.tied_cost import cheaper_whole
from rankdocket.stats.nulls.tied_integers import walk_packed
from rankdocket.stats.nulls.tied_plan import NO_LIMIT, remainder
from rankdocket.stats.ranks import TieGroups


def rho_null(x: TieGroups, y: TieGroups) -> ExactNull:
    """Return the null of rho’s numerator for variables with these tie groups; both have the same n.

    Raises
    ------
    ComputeError
        If there are so many states that their codes could exceed an int64.
    """
    plan, side = cheaper_whole(x, y)
    walk = walk_packed(plan, side, plan.rows.n - side.sizes[-1], NO_LIMIT)
    rest = remainder(plan, side, walk.layer)
    bits = max(walk.bits, slot_bits(distinct_arrangements(plan.dealt)))
    relay = Relay(walk.bits, bits, 1)
    # Rows whose slots fall between each other's are added up separately, without the empty slots between.
    sums = [0] * rest.apart
    for row, slots, ways, start in zip(
        walk.rows, walk.layer.slots.tolist(), rest.ways, rest.starts.tolist(), strict=True
    ):
        sums[start % rest.apart] += relay.laid(row, slots) * ways << start // rest.apart * bits
    counts = {
        rest.lowest + rest.step * (place * rest.apart + offset): count
        for offset, slots in enumerate(sums)
        for place, count in unpacked((0, slots), bits).items()
    }
    return exact_null(x.n, counts, x.has_ties or y.has_ties)

"""The whole exact null of Spearman rho, with or without ties, by counting distinct arrangements (vandewiel2001).

The rows are taken in the order of one variable, one by one; the values of the other variable are dealt to them.
How the sum can go on depends only on how many members of each tie group have been dealt, so all ways that
agree in this are kept together, as counts per score.  Ties make it cheaper, not impossible.
"""

from collections import Counter

from rankdocket.stats.forecast import distinct_arrangements, slot_bits
from rankdocket.stats.null import ExactNull, exact_null
from rankdocket.stats.nulls.packed import Packed, Relay, summed, unpacked
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
    places: Counter[int] = Counter()
    # Rows whose slots fall between each other's are added up separately, without the empty slots between.
    long_rows: list[list[Packed]] = [[] for _ in range(rest.apart)]
    for row, slots, ways, start in zip(
        walk.rows, walk.layer.slots.tolist(), rest.ways, rest.starts.tolist(), strict=True
    ):
        if slots == 1:
            places[start] += row * ways
        else:
            long_rows[start % rest.apart].append((start // rest.apart, relay.laid(row, slots) * ways))
    for offset, rows in enumerate(long_rows):
        for place, count in unpacked(summed(rows, bits), bits).items():
            places[place * rest.apart + offset] += count
    counts = {rest.lowest + rest.step * place: count for place, count in places.items()}
    return exact_null(x.n, counts, x.has_ties or y.has_ties)

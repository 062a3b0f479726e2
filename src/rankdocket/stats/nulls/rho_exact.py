"""The exact null of Spearman rho, with or without ties, by counting distinct arrangements (vandewiel2001).

The rows are taken in the order of one variable, one by one; the values of the other variable are dealt to them.
How the sum can go on depends only on how many members of each tie group have been dealt, so all ways that
agree in this are kept together, as counts per score.  Ties make it cheaper, not impossible.
"""

from itertools import pairwise
from math import gcd

import numpy as np

from rankdocket.stats.forecast import (
    DIGIT_BITS,
    DIGIT_BYTES,
    STEP_OPERATIONS,
    Forecast,
    count_states,
    distinct_arrangements,
    fewer_states_first,
    slot_bits,
    states_by_members,
)
from rankdocket.stats.null import ExactNull, exact_null
from rankdocket.stats.nulls.packed import Packed, merged, unpacked
from rankdocket.stats.ranks import TieGroups, centred_ranks, exact_dot


def rho_null(x: TieGroups, y: TieGroups) -> ExactNull:
    """Return the null of rho’s numerator for variables with these tie groups; both have the same n."""
    dealt, rows = fewer_states_first(x, y)
    row_ranks, dealt_ranks = centred_ranks(rows.codes()), np.unique(centred_ranks(dealt.codes()))
    row_step, dealt_step = _step(np.unique(row_ranks).tolist()), _step(dealt_ranks.tolist())
    row_scores = [(rank - int(row_ranks[0])) // row_step for rank in row_ranks.tolist()]
    dealt_scores = [(rank - int(dealt_ranks[0])) // dealt_step for rank in dealt_ranks.tolist()]
    bits = slot_bits(distinct_arrangements(dealt))
    scores = unpacked(_deal(row_scores, dealt_scores, dealt.sizes, bits), bits)
    # The centred ranks sum to 0, so only one mixed term of the expanded product is left beside the scores.
    shift = (
        int(row_ranks[0])
        * dealt_step
        * sum(score * size for score, size in zip(dealt_scores, dealt.sizes, strict=True))
    )
    unit = row_step * dealt_step
    return exact_null(x.n, {shift + unit * score: count for score, count in scores.items()}, x.has_ties or y.has_ties)


def forecast_rho(x: TieGroups, y: TieGroups) -> Forecast | None:
    """Return what :func:`rho_null` would cost, or ``None`` when its states are too many to list."""
    if count_states(x) is None and count_states(y) is None:
        return None
    dealt, rows = fewer_states_first(x, y)
    row_ranks, dealt_ranks = centred_ranks(rows.codes()), centred_ranks(dealt.codes())
    unit = _step(np.unique(row_ranks).tolist()) * _step(np.unique(dealt_ranks).tolist())
    span = (exact_dot(row_ranks, dealt_ranks) - exact_dot(row_ranks, dealt_ranks[::-1])) // unit + 1
    layers = states_by_members(dealt)
    bits = slot_bits(distinct_arrangements(dealt))
    n = x.n
    # After k of n rows the scores spread over about (k/n)² of the whole span.
    digits = [max(1, span * k * k * bits // (n * n * DIGIT_BITS)) for k in range(n + 1)]
    operations = sum(
        count * dealt.distinct * (STEP_OPERATIONS + width) for count, width in zip(layers, digits, strict=True)
    )
    widest = max(layers[k] * digits[k] + layers[k + 1] * digits[k + 1] for k in range(n))
    return Forecast(sum(layers), operations, widest * DIGIT_BYTES)


def _step(values: list[int]) -> int:
    """Return the greatest common divisor of the gaps; 1 for a constant."""
    return gcd(*(high - low for low, high in pairwise(values))) or 1


def _deal(rows: list[int], scores: list[int], sizes: tuple[int, ...], bits: int) -> Packed:
    """Return the counts per sum of products over all distinct ways to deal the scores to the rows."""
    places = [1]
    for size in sizes:
        places.append(places[-1] * (size + 1))
    groups = list(zip(places, sizes, scores, strict=False))
    layer: dict[int, Packed] = {0: (0, 1)}
    for row in rows:
        following: dict[int, Packed] = {}
        for state, (low, slots) in layer.items():
            for place, size, score in groups:
                if state // place % (size + 1) == size:
                    continue
                target = state + place
                raised = (low + row * score, slots)
                present = following.get(target)
                following[target] = raised if present is None else merged(present, raised, bits)
        layer = following
    return layer[places[-1] - 1]

"""The exact null of Kendall’s concordant less discordant pairs, with or without ties.

With ties in one variable at most, the discordant pairs of the distinct arrangements have a generating function
in closed form.  With ties in both, the rows are taken one tie group at a time.
"""

from math import comb
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.stats.forecast import (
    DIGIT_BITS,
    DIGIT_BYTES,
    STATES_LIMIT,
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
from rankdocket.stats.ranks import TieGroups

Integers: TypeAlias = npt.NDArray[np.object_]
"""Python integers, which no count can overflow."""

SLOWER_THAN_RHO: Final = 3
"""A step with ties in both variables took about three times the time of one of rho's (5.2 s for 1.7e9, one core)."""


def tau_null(x: TieGroups, y: TieGroups) -> ExactNull:
    """Return the null of concordant less discordant pairs for variables with these tie groups."""
    has_ties = x.has_ties or y.has_ties
    if x.has_ties and y.has_ties:
        dealt, rows = fewer_states_first(x, y)
        return exact_null(x.n, _both_tied(dealt, rows), has_ties)
    tied = x if x.has_ties else y
    decided = _pairs(tied.n) - tied.pairs
    discordant = _discordant_counts(tied)
    return exact_null(x.n, {decided - 2 * number: count for number, count in enumerate(discordant)}, has_ties)


def forecast_tau(x: TieGroups, y: TieGroups) -> Forecast | None:
    """Return what :func:`tau_null` would cost, or ``None`` when its states are too many to list."""
    if x.has_ties and y.has_ties:
        if count_states(x) is None and count_states(y) is None:
            return None
        return _forecast_both_tied(*fewer_states_first(x, y))
    tied = x if x.has_ties else y
    decided = _pairs(tied.n) - tied.pairs
    if decided > STATES_LIMIT:
        return None
    digits = 1 + slot_bits(distinct_arrangements(tied)) // DIGIT_BITS
    factors = tied.n + sum(tied.sizes)
    # Vectors of Python integers: each of their additions costs a part of a step, not of a digit.
    operations = factors * (decided + 1) * (digits + STEP_OPERATIONS // 16)
    return Forecast(decided + 1, operations, 2 * (decided + 1) * (digits + 8) * DIGIT_BYTES)


def _pairs(n: int) -> int:
    return n * (n - 1) // 2


def _discordant_counts(tied: TieGroups) -> list[int]:
    """Return distinct arrangements with 0, 1, … discordant pairs beside an untied variable.

    They are the coefficients of ∏_{i ≤ n}(1 − q^i) over the same product for every tie group.
    """
    decided = _pairs(tied.n) - tied.pairs
    counts: Integers = np.zeros(decided + 1, dtype=object)
    counts[0] = 1
    powers = [1 - sum(size >= exponent for size in tied.sizes) for exponent in range(1, tied.n + 1)]
    for exponent, power in enumerate(powers, start=1):
        if power > 0 and exponent <= decided:
            counts[exponent:] = counts[exponent:] - counts[:-exponent]
    for exponent, power in enumerate(powers, start=1):
        for _ in range(-power):
            counts = _strided_sums(counts, exponent)
    return [int(count) for count in counts]


def _strided_sums(counts: Integers, step: int) -> Integers:
    """Return the counts divided by 1 − q^step, to the same length."""
    length = len(counts)
    rows = -(-length // step)
    padded = np.zeros(rows * step, dtype=object)
    padded[:length] = counts
    sums = np.add.accumulate(padded.reshape(rows, step), axis=0)
    divided: Integers = sums.reshape(-1)[:length]
    return divided


def _both_tied(dealt: TieGroups, rows: TieGroups) -> dict[int, int]:
    """Return numerator → distinct arrangements of the dealt values, both variables tied.

    Each value dealt to a row scores twice the lower and once the equal values of the rows before its tie group:
    never negative, and the numerator plus the number of those rows.
    """
    bits = slot_bits(distinct_arrangements(dealt))
    places = [1]
    for size in dealt.sizes:
        places.append(places[-1] * (size + 1))
    layer: dict[int, Packed] = {0: (0, 1)}
    before = surplus = 0
    for members in rows.sizes:
        layer = _deal_tie_group(layer, (before, members), (tuple(places), dealt.sizes), bits)
        surplus += members * before
        before += members
    return {score - surplus: count for score, count in unpacked(layer[places[-1] - 1], bits).items()}


def _deal_tie_group(
    layer: dict[int, Packed],
    group: tuple[int, int],
    shape: tuple[tuple[int, ...], tuple[int, ...]],
    bits: int,
) -> dict[int, Packed]:
    """Deal to the rows of one tie group (rows before it, its members), one dealt value after the other."""
    before, members = group
    places, sizes = shape
    # Beside the state: members dealt so far, and rows before the group that hold a lower value.
    partial: dict[tuple[int, int, int], Packed] = {(state, 0, 0): row for state, row in layer.items()}
    for index, (place, size) in enumerate(zip(places, sizes, strict=False)):
        room_above = sum(sizes[index + 1 :])
        following: dict[tuple[int, int, int], Packed] = {}
        for (state, dealt, lower), (low, slots) in partial.items():
            used = state // place % (size + 1)
            score = 2 * lower + used
            used_above = before - lower - used
            fewest = max(0, members - dealt - (room_above - used_above))
            for number in range(fewest, min(size - used, members - dealt) + 1):
                target = (state + number * place, dealt + number, lower + used)
                raised = (low + number * score, slots * comb(dealt + number, number))
                present = following.get(target)
                following[target] = raised if present is None else merged(present, raised, bits)
        partial = following
    finished: dict[int, Packed] = {}
    for (state, _, _), row in partial.items():
        present = finished.get(state)
        finished[state] = row if present is None else merged(present, row, bits)
    return finished


def _forecast_both_tied(dealt: TieGroups, rows: TieGroups) -> Forecast:
    layers = states_by_members(dealt)
    bits = slot_bits(distinct_arrangements(dealt))
    span = 2 * (_pairs(dealt.n) - dealt.pairs) + 1
    operations = before = widest = 0
    for members in rows.sizes:
        after = before + members
        width = max(1, span * after * after * bits // (dealt.n * dealt.n * DIGIT_BITS))
        states = sum(layers[before : after + 1])
        steps = sum(1 + min(size, members) // 2 for size in dealt.sizes)
        operations += states * steps * (STEP_OPERATIONS + width) * SLOWER_THAN_RHO
        widest = max(widest, 2 * states * width)
        before = after
    return Forecast(sum(layers), operations, widest * DIGIT_BYTES)

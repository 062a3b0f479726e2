"""The exact null of Kendall’s concordant less discordant pairs, with or without ties.

With ties in one variable at most, the discordant pairs of the distinct arrangements have a generating function
in closed form; two two-valued variables are a fourfold table.  With other ties in both, the rows are taken one tie
group at a time.
"""

from collections import Counter
from collections.abc import Mapping
from math import comb, prod
from types import MappingProxyType
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.references import Description
from rankdocket.stats.forecast import DIGIT_BITS, DIGIT_BYTES, Forecast, distinct_arrangements, slot_bits
from rankdocket.stats.null import ExactNull, NullMethod, exact_null
from rankdocket.stats.nulls.packed import Packed, merged, unpacked
from rankdocket.stats.ranks import Codes, TieGroups

TAU_NULL_DESCRIPTIONS: Final[Mapping[NullMethod, Description]] = MappingProxyType(
    {
        "exact, no ties": Description(
            "For {associations} the p-value was exact: of all orders in which the values of one variable can stand beside "
            "those of the other, as many were counted as have each number of discordant pairs.",
            ("kendall1938",),
        ),
        "exact, conditional on the ties": Description(
            "For {associations} the p-value was exact, given the ties as they were observed: of all orders in which the "
            "values of one variable can stand beside those of the other, as many were counted as have each difference of "
            "concordant and discordant pairs.",
            ("kendall1938", "kendall1945"),
        ),
    }
)
"""How the counts for tau-b say what they did."""

Integers: TypeAlias = npt.NDArray[np.object_]
"""Python integers, which no count can overflow."""

SUM_NANOSECONDS: Final = 24
"""One sum in a vector of Python integers (this and the next two measured with 60 to 400 rows)."""

SUM_DIGIT_PICOSECONDS: Final = 350
"""What each digit of the largest count adds to it: most sums are made while counts are still short."""

VALUE_NANOSECONDS: Final = 600
"""What each value of the finished null costs."""

VALUE_BYTES: Final = 300
"""What each value of the finished null takes beside the digits of its count."""

SLOT_NANOSECONDS: Final = 300
"""What each slot of the last row of counts costs until it is a value of the null."""

KEY_NANOSECONDS: Final = 380
"""One partial dealing that is gone on from (this and the next two measured with twelve patterns of ties)."""

STEP_NANOSECONDS: Final = 600
"""One way to go on, beside the digits of its counts."""

STEP_DIGIT_PICOSECONDS: Final = 1_500
"""What each digit of its counts adds: they are multiplied, shifted and added."""

LONG_DIGIT_PICOSECONDS: Final = 5_000
"""The same in rows of counts above LONG_ROW digits, which leave a processor's cache (measured with 2 to 30 MiB)."""

LONG_ROW: Final = 2**18

KEY_BYTES: Final = 400
"""What a partial dealing takes beside its counts."""

STATES_IN_DETAIL: Final = 2**36
"""Up to here, and up to ROWS_IN_DETAIL, partial dealings are counted, and an int64 holds all sums made for that."""

ROWS_IN_DETAIL: Final = 2_000


def tau_null(x: TieGroups, y: TieGroups) -> ExactNull:
    """Return the null of concordant less discordant pairs for variables with these tie groups."""
    has_ties = x.has_ties or y.has_ties
    if x.distinct == y.distinct == 2:
        return exact_null(x.n, _fourfold(x, y), has_ties)
    if x.has_ties and y.has_ties:
        return exact_null(x.n, _both_tied(*_cheaper_dealing(x, y)), has_ties)
    tied = x if x.has_ties else y
    decided = _decided_pairs(tied)
    counts: dict[int, int] = {}
    for discordant, count in enumerate(_discordant_counts(tied)):
        counts[decided - 2 * discordant] = counts[2 * discordant - decided] = count
    return exact_null(x.n, counts, has_ties)


def forecast_tau(x: TieGroups, y: TieGroups) -> Forecast:
    """Return what :func:`tau_null` would cost."""
    if x.distinct == y.distinct == 2:
        tables = min(*x.sizes, *y.sizes) + 1
        digits = 1 + max(_bits_of_arrangements(x), _bits_of_arrangements(y)) // DIGIT_BITS
        return Forecast(tables, tables * digits * VALUE_NANOSECONDS, tables * (VALUE_BYTES + digits * DIGIT_BYTES))
    if x.has_ties and y.has_ties:
        return _forecast_both_tied(*_cheaper_dealing(x, y))
    tied = x if x.has_ties else y
    values = _decided_pairs(tied) + 1
    digits = 1 + _bits_of_arrangements(tied) // DIGIT_BITS
    sums = (values // 2 + 1) * sum(abs(power) for power in _powers(tied))
    picoseconds = sums * (1_000 * SUM_NANOSECONDS + digits * SUM_DIGIT_PICOSECONDS)
    return Forecast(
        values, picoseconds // 1_000 + values * VALUE_NANOSECONDS, values * (VALUE_BYTES + digits * DIGIT_BYTES)
    )


def _decided_pairs(groups: TieGroups) -> int:
    return groups.n * (groups.n - 1) // 2 - groups.pairs


def _powers(tied: TieGroups) -> list[int]:
    """Return the power of 1 − q, 1 − q², … 1 − q^n in the generating function of discordant pairs."""
    ending = Counter(tied.sizes)
    powers, reaching = [], tied.distinct
    for exponent in range(1, tied.n + 1):
        powers.append(1 - reaching)
        reaching -= ending[exponent]
    return powers


def _discordant_counts(tied: TieGroups) -> list[int]:
    """Return distinct arrangements with 0, 1, … discordant pairs beside an untied variable.

    They are the coefficients of ∏_{i ≤ n}(1 − q^i) over the same product for every tie group.  Read from the other
    end they are the same, so only the first half is worked out, up to half of the decided pairs.
    """
    length = _decided_pairs(tied) // 2 + 1
    counts: Integers = np.zeros(length, dtype=object)
    counts[0] = 1
    powers = list(enumerate(_powers(tied), start=1))[: length - 1]
    # Products first: as long as nothing has been divided, the coefficients stay small.
    for exponent, power in powers:
        if power > 0:
            counts[exponent:] = counts[exponent:] - counts[:-exponent]
    for exponent, power in powers:
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


def _fourfold(x: TieGroups, y: TieGroups) -> dict[int, int]:
    """Return numerator → distinct arrangements of y for all fourfold tables with these margins."""
    low_x, low_y, n = x.sizes[0], y.sizes[0], x.n
    return {
        both_low * n - low_x * low_y: comb(low_x, both_low) * comb(n - low_x, low_y - both_low)
        for both_low in range(max(0, low_x + low_y - n), min(low_x, low_y) + 1)
    }


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
                raised = (low + number * score, slots * comb(dealt + number, number) if number and dealt else slots)
                present = following.get(target)
                following[target] = raised if present is None else merged(present, raised, bits)
        partial = following
    finished: dict[int, Packed] = {}
    for (state, _, _), row in partial.items():
        present = finished.get(state)
        finished[state] = row if present is None else merged(present, row, bits)
    return finished


def _cheaper_dealing(x: TieGroups, y: TieGroups) -> tuple[TieGroups, TieGroups]:
    """Return the two variables, first the one whose values are better dealt to the rows of the other."""
    return min((x, y), (y, x), key=lambda pair: _forecast_both_tied(*pair).nanoseconds)


def _forecast_both_tied(dealt: TieGroups, rows: TieGroups) -> Forecast:
    """Return the cost of dealing value after value to tie group after tie group of the rows.

    Partial dealings are counted to the last one; the ways to go on from each, and the spread of its scores, are taken
    as if every tie group were used up in proportion.
    """
    sizes, n = dealt.sizes, dealt.n
    states = prod(size + 1 for size in sizes)
    digits_of_a_count = 1 + _bits_of_arrangements(dealt) // DIGIT_BITS
    if states > STATES_IN_DETAIL or n > ROWS_IN_DETAIL:
        half = (1 + _decided_pairs(dealt) // 2) * digits_of_a_count
        picoseconds = 1_000 * (KEY_NANOSECONDS + 2 * STEP_NANOSECONDS) + 2 * _picoseconds_of(half)
        keys = states * dealt.distinct
        return Forecast(keys, keys * picoseconds // 1_000, states // n * (KEY_BYTES + half * DIGIT_BYTES))
    lower = [_ways_to_use(sizes[:index]) for index in range(len(sizes))]
    upper = [_ways_to_use(sizes[index:]) for index in range(len(sizes))]
    room = [sum(sizes[index:]) for index in range(len(sizes) + 1)]
    apart = [(n - left) ** 2 - sum(low**2 for low in sizes[:index]) for index, left in enumerate(room)]
    decided = _mean_decided_pairs(sizes)
    keys = picoseconds = widest = before = decided_in_rows = 0
    for members in rows.sizes:
        # Only pairs of different values among the lower ones have made scores of this group differ so far.
        differing = [before * members * pairs // n**2 for pairs in apart]
        digits = [
            1 + digits_of_a_count * (1 + 2 * min(decided_in_rows + made, decided[before + members * (n - left) // n]))
            for made, left in zip(differing, room, strict=True)
        ]
        for index, size in enumerate(sizes):
            found = _partial_dealings((lower[index], upper[index]), (before, members), room[index])
            most = min(size * (n - before), members * room[index])
            fewest = max(0, members * room[index] - room[index + 1] * (n - before))
            steps = found * (n + most - fewest) // n
            keys += found
            picoseconds += 1_000 * (found * KEY_NANOSECONDS + steps * STEP_NANOSECONDS)
            # In a group of one row nothing is multiplied, and its digits cost half.
            picoseconds += steps * _picoseconds_of((digits[index] + digits[index + 1]) // (4 if members == 1 else 2))
            # Dealing the lowest value changes no counts, so that they are shared.
            held = found if index > 1 else int(upper[0][before])
            widest = max(widest, 2 * (found * KEY_BYTES + held * digits[index] * DIGIT_BYTES))
        decided_in_rows += before * members
        before += members
    slots = 1 + 2 * min(_decided_pairs(dealt), _decided_pairs(rows))
    return Forecast(keys, picoseconds // 1_000 + slots * SLOT_NANOSECONDS, widest + slots * VALUE_BYTES)


def _picoseconds_of(digits: int) -> int:
    return digits * (LONG_DIGIT_PICOSECONDS if digits > LONG_ROW else STEP_DIGIT_PICOSECONDS)


def _partial_dealings(ways: tuple[Codes, Codes], group: tuple[int, int], room: int) -> int:
    """Return how many partial dealings there are to a group (rows before it, its members) from some value on.

    Parameters
    ----------
    ways
        Ways to use the lower values, and this one with the higher ones, by members used in all.
    group
        Rows before the group, and its members.
    room
        Members of this value and the higher ones.
    """
    lower, upper = ways
    before, members = group
    found = 0
    for dealt in range(min(members, len(lower) - 1) + 1):
        # What was dealt lies among the lower values, and the rest of the group must find room above.
        first = max(dealt, before + members - room)
        last = min(len(lower) - 1, before + dealt)
        if first <= last:
            above = upper[before + dealt - last : before + dealt - first + 1]
            found += int(np.dot(lower[first : last + 1], above[::-1]))
    return found


def _ways_to_use(sizes: tuple[int, ...]) -> Codes:
    """Return, for 0, 1, … members used in all, in how many ways these tie groups can be used in part."""
    ways: Codes = np.ones(1, dtype=np.int64)
    for size in sizes:
        ways = np.convolve(ways, np.ones(size + 1, dtype=np.int64))
    return ways


def _mean_decided_pairs(sizes: tuple[int, ...]) -> list[int]:
    """Return, for 0, 1, … members used in all, the mean number of pairs of different values over all ways."""
    ways, squares = np.ones(1, dtype=np.int64), np.zeros(1, dtype=np.int64)
    for size in sizes:
        all_parts, parts_squared = np.ones(size + 1, dtype=np.int64), np.arange(size + 1, dtype=np.int64) ** 2
        squares = np.convolve(squares, all_parts) + np.convolve(ways, parts_squared)
        ways = np.convolve(ways, all_parts)
    return [
        (used * used - square // number) // 2
        for used, (square, number) in enumerate(zip(squares.tolist(), ways.tolist(), strict=True))
    ]


def _bits_of_arrangements(groups: TieGroups) -> int:
    """Return the length of n!/∏t! in binary, to within a few digits."""
    parts = sum(number * _bits_of_factorial(size) for size, number in Counter(groups.sizes).items())
    return max(1, _bits_of_factorial(groups.n) - parts)


def _bits_of_factorial(n: int) -> int:
    """Return log₂ n! by its first terms, n log₂ n − n log₂ e + log₂(2πn)/2, rounded down."""
    if n < 2:
        return 0
    logarithm = (n**64).bit_length() - 1
    return (1_000 * n * logarithm - 64 * 1_443 * n + 32 * 1_000 * n.bit_length() + 64 * 1_000) // (64 * 1_000)

"""The size of the walks before they are begun, layer by layer, from tie-group sizes alone.

All states are looked at, or, where there are many, an evenly spaced sample of them: with the scores that a tail of
about five per cent leaves to keep, or all of them.  Everything is whole numbers, the same on every machine.
"""

from dataclasses import dataclass
from functools import lru_cache
from math import gcd, isqrt
from typing import Final, Literal, TypeAlias

import numpy as np

from rankdocket.errors import ComputeError
from rankdocket.stats.nulls.tied_deal import Deal, Members, deal
from rankdocket.stats.nulls.tied_plan import NO_LIMIT, Side, scores_kept, sides
from rankdocket.stats.ranks import SAFE_SUM, Codes, TieGroups, centred_ranks, exact_dot

Scope: TypeAlias = Literal["tail", "half", "whole null"]
"""How much of a null is wanted: a tail of about five per cent, everything above 0, or everything."""

PROFILES_KEPT: Final = 64
"""Profiles remembered: one association asks for the same ones several times."""

STATES_SEEN: Final = 2**13
"""States looked at, at most."""

USUAL_TAIL: Final = (1_645, 1_000)
"""Standard deviations of the numerator at a one-sided p-value of about 0.05, as a ratio."""

STATE: Final = 5_000
"""Nanoseconds that a state costs in the first and in the last layer."""

MOVE: Final = 600
"""Nanoseconds that a move costs beside its slots."""

SLOT_BITS: Final = 16
"""A slot costs a nanosecond in a move, and one more for each so many bits of the counts it has to hold."""

MEETING_STATE: Final = 25_000
"""Nanoseconds that a state costs where the walks meet, beside MEETING_SLOT for each of its slots."""

MEETING_SLOT: Final = 40


@dataclass(frozen=True, slots=True)
class Profile:
    """The size of a walk from one side; each entry belongs to 0 … n rows taken.

    Attributes
    ----------
    states
        States that are kept.
    moves
        Moves into them; none as far as the first tie group of the rows reaches.
    slots
        Slots of all these states.
    work
        Slots to be added by the moves.
    start
        Rows in the first tie group.
    """

    states: tuple[int, ...]
    moves: tuple[int, ...]
    slots: tuple[int, ...]
    work: tuple[int, ...]
    start: int


def usual_limit(plan: Deal) -> int:
    """Return the least sum of products in a tail of about five per cent."""
    x, y = centred_ranks(plan.rows.codes()), centred_ranks(plan.dealt.codes())
    deviation = isqrt(exact_dot(x, x) * exact_dot(y, y) // (plan.rows.n - 1))
    times, parts = USUAL_TAIL
    return deviation * times // (parts * plan.unit)


@lru_cache(maxsize=PROFILES_KEPT)
def profiles(rows: TieGroups, dealt: TieGroups, scope: Scope) -> tuple[Profile, Profile] | None:
    """Return the size of the walk from the lowest rows and of that from the highest.

    Parameters
    ----------
    rows, dealt
        Tie groups of the two variables.
    scope
        What is wanted.

    Returns
    -------
    Profile, Profile
        ``None`` when there are so many states that their codes would exceed an int64.
    """
    plan = deal(rows, dealt)
    if plan.places[-1] >= SAFE_SUM:
        return None
    members = _sample(plan)
    limit = {"tail": usual_limit(plan), "half": 0, "whole null": NO_LIMIT}[scope]
    low, high = sides(plan)
    return _profile(plan, low, members, limit=limit), _profile(plan, high, members, limit=limit)


def _sample(plan: Deal) -> Members:
    """Return the members dealt in all states, or in STATES_SEEN of them, evenly spaced by the golden section."""
    states = plan.places[-1]
    if states <= STATES_SEEN:
        return plan.members(np.arange(states, dtype=np.int64))
    stride = (isqrt(5 * states * states) - states) // 2
    while gcd(stride, states) > 1:
        stride += 1
    codes = [place * stride % states for place in range(STATES_SEEN)]
    return plan.members(np.asarray(codes, dtype=np.int64))


def _profile(plan: Deal, side: Side, members: Members, *, limit: int) -> Profile:
    _, slots = scores_kept(plan, side, members, limit)
    taken = members.sum(axis=1)
    kept = slots > 0
    start = side.sizes[0]
    moves = np.count_nonzero(members, axis=1) * (taken > start)

    def by_rows(amounts: Codes) -> tuple[int, ...]:
        sums = np.zeros(plan.rows.n + 1, dtype=np.int64)
        np.add.at(sums, taken[kept], amounts[kept])
        return tuple(total * plan.places[-1] // len(members) for total in sums.tolist())

    return Profile(by_rows(np.ones_like(slots)), by_rows(moves), by_rows(slots), by_rows(moves * slots), start)


def meeting_row(plan: Deal) -> int:
    """Return after how many rows the walks from both ends should meet."""
    return _cheapest(plan.rows, plan.dealt)[1]


def cheaper_deal(x: TieGroups, y: TieGroups) -> Deal:
    """Return the deal of one variable to the rows of the other by which a tail costs less."""
    if _cheapest(x, y)[0] < _cheapest(y, x)[0]:
        return deal(x, y)
    return deal(y, x)


@lru_cache(maxsize=PROFILES_KEPT)
def _cheapest(rows: TieGroups, dealt: TieGroups) -> tuple[int, int]:
    """Return the least cost of two walks that meet, in nanoseconds, and after which row they do."""
    found = profiles(rows, dealt, "tail")
    if found is None:
        return coarse_cost(rows, dealt)[0], 0
    low, high = found
    n = rows.n
    low_cost, high_cost = walk_costs(dealt, low), walk_costs(dealt, high)
    return min(
        (
            low_cost[row]
            + high_cost[n - row]
            + max(low.states[row], high.states[n - row]) * MEETING_STATE
            + (low.slots[row] + high.slots[n - row]) * MEETING_SLOT,
            row,
        )
        for row in range(n + 1)
    )


def walk_costs(dealt: TieGroups, profile: Profile) -> list[int]:
    """Return the cost of walks of 0 … n rows, in nanoseconds."""
    costs, walked = [], 0
    for taken, (states, moves, work) in enumerate(zip(profile.states, profile.moves, profile.work, strict=True)):
        if taken <= profile.start:
            costs.append(states * STATE)
            continue
        bits = taken * (dealt.distinct - 1).bit_length()
        walked += moves * MOVE + work * (SLOT_BITS + bits) // SLOT_BITS
        costs.append(costs[profile.start] + walked)
    return costs


def coarse_cost(rows: TieGroups, dealt: TieGroups) -> tuple[int, int, int]:
    """Return nanoseconds, states and bytes for states too many to be numbered: a tenth of all scores kept for each."""
    plan = deal(rows, dealt)
    states = plan.places[-1]
    return (
        states * dealt.distinct * (MOVE + plan.span * (SLOT_BITS + rows.n) // (10 * SLOT_BITS)),
        states,
        states * plan.span * 8 // rows.n,
    )


def cheaper_whole(x: TieGroups, y: TieGroups) -> tuple[Deal, Side]:
    """Return the deal, and the side to begin from, by which the whole null costs least.

    Raises
    ------
    ComputeError
        If there are so many states that their codes could exceed an int64.
    """
    choices: list[tuple[int, int, TieGroups, TieGroups, int]] = []
    for rows, dealt in ((x, y), (y, x)):
        for place, profile in enumerate(profiles(rows, dealt, "whole null") or ()):
            walked = rows.n - (rows.sizes[0] if place else rows.sizes[-1])
            cost = walk_costs(dealt, profile)[walked] + profile.states[walked] * STATE
            choices.append((cost, len(choices), rows, dealt, place))
    if not choices:
        raise ComputeError("There are too many tie groups for a complete count.")
    _, _, rows, dealt, place = min(choices, key=lambda choice: choice[:2])
    plan = deal(rows, dealt)
    return plan, sides(plan)[place]

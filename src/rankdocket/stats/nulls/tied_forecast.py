"""What the nulls of Spearman rho would cost, told from tie-group sizes alone, before anything is dealt.

The unit costs were measured once, on one core (tests/benchmarks/tied.py compares), and are fixed: a forecast is the
same on every machine.
"""

from dataclasses import dataclass
from typing import Final, Literal, TypeAlias

from rankdocket.stats.forecast import Forecast, distinct_arrangements, slot_bits
from rankdocket.stats.nulls.packed import slot_widths
from rankdocket.stats.nulls.tied_cost import (
    Profile,
    Scope,
    cheaper_deal,
    cheaper_whole,
    coarse_cost,
    meeting_row,
    profiles,
)
from rankdocket.stats.nulls.tied_deal import Deal
from rankdocket.stats.nulls.tied_meeting import SLOTS_AT_ONCE, is_symmetric
from rankdocket.stats.ranks import TieGroups

Numbers: TypeAlias = Literal["whole numbers", "doubles"]
"""In which numbers arrangements are counted."""


@dataclass(frozen=True, slots=True)
class Rates:
    """Unit costs of one kind of numbers, in nanoseconds.

    Attributes
    ----------
    layer, state, move
        For each row taken, for each state of the first layer, and for each move.
    byte
        A thousandth of a nanosecond: for each byte of the slots that moves add.
    far_byte
        The same in layers above FAR_BYTES.
    relay
        For each state whose slots are laid out anew.
    meeting_state, meeting_slot
        For each state, and each of its slots, where the walks meet or the whole is put together.
    """

    layer: int
    state: int
    move: int
    byte: int
    far_byte: int
    relay: int
    meeting_state: int
    meeting_slot: int


RATES: Final[dict[Numbers, Rates]] = {
    "whole numbers": Rates(190_000, 5_000, 150, 550, 850, 9_000, 28_000, 50),
    "doubles": Rates(210_000, 5_000, 850, 95, 190, 0, 26_000, 8),
}

FIXED: Final = 3_000_000
"""Nanoseconds of every null."""

ENTRY: Final = 1_100
"""Nanoseconds of each numerator of a whole null in whole numbers."""

FAR_BYTES: Final = 2**22
"""Layers above it do not stay in the processor's nearer memory."""

MOVE_BYTES: Final = 200
"""Memory of a move: its places in arrays and in lists."""

STATE_BYTES: Final = 60
"""Memory of a state beside its slots."""

FIXED_BYTES: Final = 2**18
"""Memory of every null."""

COMPARED_BYTES: Final = 80
"""Memory of a score that is compared where the walks meet."""

ENTRY_BYTES: Final = 260
"""Memory of each numerator of a whole null in whole numbers, beside its count."""


def forecast_rho(x: TieGroups, y: TieGroups) -> Forecast:
    """Return what the whole null in whole numbers would cost (:func:`rho_exact.rho_null`)."""
    return _forecast_whole(x, y, "whole numbers")


def forecast_shares(x: TieGroups, y: TieGroups) -> Forecast:
    """Return what the whole null in doubles would cost (:func:`tied_doubles.rho_shares`)."""
    return _forecast_whole(x, y, "doubles")


def forecast_tails(x: TieGroups, y: TieGroups, numbers: Numbers) -> Forecast:
    """Return what all tails would cost: time at a one-sided p-value of about 0.05, memory at the worst.

    Near a p-value of one half the same tails take up to two and a half times as long.

    For ``"whole numbers"`` it is the cost of :func:`tied_integers.rho_tails_integers`, for ``"doubles"`` that of
    :func:`tied_doubles.rho_tails_doubles`.
    """
    plan = cheaper_deal(x, y)
    found = profiles(plan.rows, plan.dealt, "tail")
    passes = 1 if is_symmetric(x, y) else 2
    if found is None:
        return _coarse(x, y, passes)
    meet = meeting_row(plan)
    walks = [_walk(plan, profile, upto, numbers)[0] for profile, upto in zip(found, (meet, x.n - meet), strict=True)]
    low, high = found
    states = max(low.states[meet], high.states[x.n - meet])
    slots = low.slots[meet] + high.slots[x.n - meet]
    rates = RATES[numbers]
    meeting = states * rates.meeting_state + slots * rates.meeting_slot
    return Forecast(
        passes * sum(walk.states for walk in walks),
        FIXED + passes * (meeting + sum(walk.nanoseconds for walk in walks)),
        _bytes_of_tails(plan, meet, numbers),
    )


def _bytes_of_tails(plan: Deal, meet: int, numbers: Numbers) -> int:
    """Return the memory of two walks that meet, for the tail of half of everything: no observed value needs more."""
    found = profiles(plan.rows, plan.dealt, "half")
    assert found is not None
    both = [_walk(plan, one, upto, numbers) for one, upto in zip(found, (meet, plan.rows.n - meet), strict=True)]
    walks, last = [walk for walk, _ in both], [size for _, size in both]
    compared = min(found[0].slots[meet], SLOTS_AT_ONCE)
    return FIXED_BYTES + max(walks[0].bytes, last[0] + walks[1].bytes, sum(last) + compared * COMPARED_BYTES)


def _forecast_whole(x: TieGroups, y: TieGroups, numbers: Numbers) -> Forecast:
    scope: Scope = "whole null"
    if profiles(x, y, scope) is None and profiles(y, x, scope) is None:
        return _coarse(x, y, 1)
    plan, side = cheaper_whole(x, y)
    low_and_high = profiles(plan.rows, plan.dealt, scope)
    assert low_and_high is not None
    profile = low_and_high[0 if side.is_low else 1]
    upto = x.n - side.sizes[-1]
    walk, _ = _walk(plan, profile, upto, numbers)
    rates = RATES[numbers]
    meeting = profile.states[upto] * rates.meeting_state + profile.slots[upto] * rates.meeting_slot
    entries = entry_bytes = merging = 0
    if numbers == "whole numbers":
        states, slots = profile.states[upto], profile.slots[upto]
        count_bytes = slot_bits(distinct_arrangements(plan.dealt)) // 8
        # Rows of one slot each are gathered one by one; longer ones are added over the whole span, level by level.
        entries = min(plan.span, slots) if slots <= states else plan.span
        merging = 0 if slots <= states else count_bytes * (2 * slots + plan.span * states.bit_length())
        entry_bytes = ENTRY_BYTES + count_bytes
    return Forecast(
        walk.states,
        FIXED + walk.nanoseconds + meeting + entries * ENTRY + merging * rates.byte // 1_000,
        FIXED_BYTES + walk.bytes + plan.span * 8 + entries * entry_bytes,
    )


def _walk(plan: Deal, profile: Profile, upto: int, numbers: Numbers) -> tuple[Forecast, int]:
    """Return what a walk of ``upto`` rows costs, and the bytes of its last layer."""
    rates = RATES[numbers]
    start = min(profile.start, upto)
    widths = slot_widths(plan.dealt, start, upto) if numbers == "whole numbers" else [64] * (upto - start + 1)
    sizes = [profile.slots[start + step] * width // 8 for step, width in enumerate(widths)]
    nanoseconds = profile.states[start] * rates.state + (upto - start) * rates.layer
    widest = sizes[0]
    for step in range(1, len(widths)):
        taken = start + step
        rate = rates.far_byte if sizes[step] > FAR_BYTES else rates.byte
        nanoseconds += profile.moves[taken] * rates.move + profile.work[taken] * widths[step] // 8 * rate // 1_000
        if widths[step] != widths[step - 1]:
            nanoseconds += profile.states[taken - 1] * rates.relay
        carried = profile.moves[taken] * MOVE_BYTES + profile.states[taken] * STATE_BYTES
        widest = max(widest, sizes[step - 1] + sizes[step] + carried)
    return Forecast(sum(profile.states[start : upto + 1]), nanoseconds, widest), sizes[-1]


def _coarse(x: TieGroups, y: TieGroups, passes: int) -> Forecast:
    nanoseconds, states, plan_bytes = min(coarse_cost(x, y), coarse_cost(y, x))
    return Forecast(states, passes * nanoseconds, plan_bytes)

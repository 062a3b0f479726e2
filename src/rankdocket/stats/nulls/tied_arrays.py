"""A walk whose counts stand in one array of doubles per layer."""

from dataclasses import dataclass
from typing import Final, TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.stats.nulls.tied_deal import Deal
from rankdocket.stats.nulls.tied_plan import Layer, Move, Side, first_layer, moves
from rankdocket.stats.ranks import Codes

Doubles: TypeAlias = npt.NDArray[np.float64]

LARGEST_EXPONENT: Final = 400
"""Doubles are scaled down above two to this power: the product of two walks must stay finite."""


@dataclass(frozen=True, slots=True, eq=False)
class DoublesWalk:
    """Where a walk has come to.

    Attributes
    ----------
    amounts
        The slots of all states of the layer, one after the other.
    starts
        Where the slots of each state begin, and at last where they end.
    exponent
        The distinct arrangements are the amounts times two to this power.
    """

    layer: Layer
    amounts: Doubles
    starts: list[int]
    exponent: int

    def row(self, place: int) -> Doubles:
        """Return the slots of the state at this place of the layer, from the lowest score upwards."""
        return self.amounts[self.starts[place] : self.starts[place + 1]]


def walk_doubles(plan: Deal, side: Side, upto: int, limit: int) -> DoublesWalk:
    """Return the ways to deal to ``upto`` rows as doubles: sums of positive numbers only, so no digit is lost."""
    layer, ways = first_layer(plan, side, min(upto, side.sizes[0]), limit)
    exponent = max(0, max(ways, default=1).bit_length() - LARGEST_EXPONENT)
    amounts = np.array([number / (1 << exponent) for number in ways], dtype=np.float64)
    for move in moves(plan, side, layer, upto, limit):
        amounts = _moved(amounts, layer, move)
        layer = move.to
        excess = int(np.frexp(amounts.max(initial=0.0))[1]) - LARGEST_EXPONENT
        if excess > 0:
            amounts = np.ldexp(amounts, -excess)
            exponent += excess
    return DoublesWalk(layer, amounts, _starts(layer.slots).tolist(), exponent)


def _moved(amounts: Doubles, layer: Layer, move: Move) -> Doubles:
    """Return the slots of the next layer."""
    apart = max(1, layer.gap) // move.to.gap
    slots = (layer.slots - 1) * apart + 1
    if apart > 1:
        amounts = _spread(amounts, layer.slots, apart)
    target_starts, source_starts = _starts(move.to.slots), _starts(slots)
    skipped = np.maximum(0, -move.shift)
    length = slots[move.source] - skipped
    into = target_starts[move.target] + np.maximum(0, move.shift)
    out_of = source_starts[move.source] + skipped
    wanted = length > 0
    into, out_of, length = into[wanted], out_of[wanted], length[wanted]
    following = np.zeros(target_starts[-1], dtype=np.float64)
    add = np.add
    for first, last, begin, end in zip(
        into.tolist(), (into + length).tolist(), out_of.tolist(), (out_of + length).tolist(), strict=True
    ):
        part = following[first:last]
        add(part, amounts[begin:end], part)
    return following


def _spread(amounts: Doubles, slots: Codes, apart: int) -> Doubles:
    """Return the slots moved ``apart`` times as far from each other, with empty slots between."""
    starts = _starts(slots)[:-1]
    wider = _starts((slots - 1) * apart + 1)
    places = np.arange(len(amounts)) - np.repeat(starts, slots)
    spread = np.zeros(wider[-1], dtype=np.float64)
    spread[np.repeat(wider[:-1], slots) + places * apart] = amounts
    return spread


def _starts(slots: Codes) -> Codes:
    return np.concatenate(([0], np.cumsum(slots)))

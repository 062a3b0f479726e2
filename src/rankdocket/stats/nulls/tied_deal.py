"""Values of one variable that are to be dealt to the rows of another, as integers."""

from dataclasses import dataclass
from itertools import accumulate
from typing import TypeAlias

import numpy as np
import numpy.typing as npt

from rankdocket.errors import ComputeError
from rankdocket.stats.ranks import SAFE_SUM, Codes, TieGroups, centred_ranks, lattice_step

Members: TypeAlias = npt.NDArray[np.int64]
"""Members dealt from each tie group, shape (states, tie groups)."""


@dataclass(frozen=True, slots=True, eq=False)
class Deal:
    """Values to be dealt, and the rows they are dealt to.

    Attributes
    ----------
    rows, dealt
        The tie groups of the two variables; both have the same n.
    ranks
        The distinct doubled centred midranks of the rows, increasing.
    step
        The greatest common divisor of their gaps.
    values
        The same ranks of the dealt values, less the lowest, divided by ``unit``.
    unit
        The greatest common divisor of the gaps between the dealt ranks: the numerator is ``unit`` times the sum of
        products of ``ranks`` and ``values``, since the ranks of the rows sum to 0.
    sums
        Sums of the ranks of the first 0 … n rows, shape (n + 1,).
    places
        What one more member of each tie group adds to the code of a state; last the number of all states.
    """

    rows: TieGroups
    dealt: TieGroups
    ranks: tuple[int, ...]
    step: int
    values: Codes
    unit: int
    sums: Codes
    places: tuple[int, ...]

    @property
    def whole(self) -> int:
        """The sum of all dealt values."""
        return sum(value * size for value, size in zip(self.values.tolist(), self.dealt.sizes, strict=True))

    @property
    def ends(self) -> tuple[int, int]:
        """The smallest and the largest sum of products of ranks and values."""
        every = np.asarray(self.dealt.sizes, dtype=np.int64)[None, :]
        return int(self.least(every, 0)[0]), int(self.most(every, 0)[0])

    @property
    def span(self) -> int:
        """The sums of products from the smallest to the largest, at their distance of ``step``."""
        lowest, highest = self.ends
        return (highest - lowest) // self.step + 1

    def members(self, codes: Codes) -> Members:
        """Return the members dealt in the states with these codes."""
        sizes = np.asarray(self.dealt.sizes, dtype=np.int64)
        places = np.asarray(self.places[:-1], dtype=np.int64)
        members: Members = codes[:, None] // places[None, :] % (sizes + 1)[None, :]
        return members

    def most(self, members: Members, first: int | Codes) -> Codes:
        """Return the largest sums of products of these members with the rows from ``first`` on."""
        ends = np.asarray(first)[..., None] + np.cumsum(members, axis=1)
        starts = ends - members
        most: Codes = (self.sums[ends] - self.sums[starts]) @ self.values
        return most

    def least(self, members: Members, first: int | Codes) -> Codes:
        """Return the smallest sums of products of these members with the rows from ``first`` on."""
        starts = np.asarray(first)[..., None] + np.cumsum(members[:, ::-1], axis=1)[:, ::-1] - members
        least: Codes = (self.sums[starts + members] - self.sums[starts]) @ self.values
        return least


def deal(rows: TieGroups, dealt: TieGroups) -> Deal:
    """Return the deal of the values with tie groups ``dealt`` to rows with tie groups ``rows``.

    Raises
    ------
    ComputeError
        If there are so many rows that sums of products could exceed an int64.
    """
    row_ranks = centred_ranks(rows.codes())
    ranks, dealt_ranks = np.unique(row_ranks).tolist(), np.unique(centred_ranks(dealt.codes()))
    unit = lattice_step(dealt_ranks.tolist())
    places = tuple(accumulate(dealt.sizes, lambda place, size: place * (size + 1), initial=1))
    if 8 * rows.n**3 >= SAFE_SUM:
        raise ComputeError("There are too many rows for sums in exact integers.")
    return Deal(
        rows=rows,
        dealt=dealt,
        ranks=tuple(ranks),
        step=lattice_step(ranks),
        values=(dealt_ranks - dealt_ranks[0]) // unit,
        unit=unit,
        sums=np.concatenate(([0], np.cumsum(row_ranks))),
        places=places,
    )

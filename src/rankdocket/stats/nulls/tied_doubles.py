"""The exact null of Spearman rho in doubles: the same count of orderings, to 12 digits (vandewiel2001)."""

from fractions import Fraction
from math import fsum
from typing import Final

import numpy as np

from rankdocket.stats.forecast import distinct_arrangements
from rankdocket.stats.null import Share, TailShares
from rankdocket.stats.nulls.tied_arrays import Doubles, walk_doubles
from rankdocket.stats.nulls.tied_cost import cheaper_whole
from rankdocket.stats.nulls.tied_integers import rho_tails_integers
from rankdocket.stats.nulls.tied_meeting import Question, Run, matched_states
from rankdocket.stats.nulls.tied_plan import NO_LIMIT, remainder, sides
from rankdocket.stats.ranks import Codes, TieGroups

RELATIVE_ERROR: Final = Fraction(6, 10**12)
"""Stated error of a share: half a unit of its twelfth digit at the worst, to which it is rounded when it is filed, and one
unit of the twelfth for the arithmetic, which against whole numbers never erred by more than 1e-13."""


def rho_tails_doubles(x: TieGroups, y: TieGroups, observed: int) -> TailShares:
    """Return the shares of permutations with a numerator at least as extreme as ``observed``.

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
    shares = question.tails([_shares(run) for run in question.runs()], Fraction(1))
    if min(shares) <= 0:
        # Smaller than any double, or not attainable: whole numbers tell.
        counts = rho_tails_integers(x, y, observed)
        shares = counts.p("greater"), counts.p("less"), counts.p("two-sided")
    greater, less, two_sided = (_share(min(Fraction(1), share)) for share in shares)
    return TailShares("exact algorithm, 12 digits", greater, less, two_sided)


def _share(share: Fraction) -> Share:
    rounded = Fraction(float(share)) or share
    return Share(rounded, rounded * RELATIVE_ERROR)


def _shares(run: Run) -> tuple[Fraction, Fraction]:
    """Return the share of arrangements with a sum of at least, and above, the limit."""
    low, high = (
        walk_doubles(run.plan, side, upto, run.limit)
        for side, upto in zip(sides(run.plan), (run.meet, run.plan.rows.n - run.meet), strict=True)
    )
    at_least: list[float] = []
    above: list[float] = []
    for match in matched_states(run, low.layer, high.layer):
        amounts = low.row(match.low)
        # From the highest score downwards, so that entry i is the ways to one of the i highest scores.
        ways = np.concatenate(([0.0], np.cumsum(high.row(match.high)[::-1])))
        at_least.append(float((amounts * ways[match.enough]).sum()))
        above.append(float((amounts * ways[match.more]).sum()))
    scale = Fraction(2) ** (low.exponent + high.exponent) / distinct_arrangements(run.plan.dealt)
    return Fraction(fsum(at_least)) * scale, Fraction(fsum(above)) * scale


def rho_shares(x: TieGroups, y: TieGroups) -> tuple[Codes, Doubles]:
    """Return the whole null: the numerators that occur, increasing, and the share of permutations of each.

    Parameters
    ----------
    x, y
        As for :func:`rho_tails_doubles`.

    Returns
    -------
    numerators, shares
        Both of shape (k,); the shares sum to 1 within 1e-12.

    Raises
    ------
    ComputeError
        If there are so many states that their codes could exceed an int64.
    """
    plan, side = cheaper_whole(x, y)
    walk = walk_doubles(plan, side, plan.rows.n - side.sizes[-1], NO_LIMIT)
    rest = remainder(plan, side, walk.layer)
    shares = np.zeros(rest.slots, dtype=np.float64)
    whole = distinct_arrangements(plan.dealt)
    for place, (ways, start) in enumerate(zip(rest.ways, rest.starts.tolist(), strict=True)):
        row = walk.row(place)
        # One division of whole numbers, so that the largest counts cannot overflow.
        shares[start : start + (len(row) - 1) * rest.apart + 1 : rest.apart] += row * ((ways << walk.exponent) / whole)
    occurring = np.flatnonzero(shares)
    return rest.lowest + rest.step * occurring, shares[occurring]

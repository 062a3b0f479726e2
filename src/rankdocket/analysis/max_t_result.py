"""What step-down maxT made of a family, as frozen values."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction

from rankdocket.stats.max_t import MaxTMethod


@dataclass(frozen=True, slots=True)
class MemberMaxT:
    """The adjusted p-value of one member, from the permutations of the whole family.

    Attributes
    ----------
    own_hits
        Permutations in which its own coefficient was at least as extreme as observed.
    hits
        Permutations in which the largest among it and all less extreme ones was, made monotone by stepping down.
    of
        n! or the permutations drawn.
    share
        ``hits`` over ``of``, or (b + 1)/(B + 1) when drawn: above 0, at most 1.
    ends
        Where the error of the draws lets the share lie, at the study’s confidence level; twice the share when all
        permutations were counted.
    """

    own_hits: int
    hits: int
    of: int
    share: Fraction
    ends: tuple[Fraction, Fraction]


@dataclass(frozen=True, slots=True)
class FamilyMaxT:
    """A family adjusted together.

    Attributes
    ----------
    variable
        The variable that all its associations share, whose ranks were permuted.
    of
        n! or the permutations drawn.
    members
        Association → its answer, for those whose p-value is given.
    held_back
        Members without a p-value whose coefficient exists all the same; it stands in every maximum.
    stream
        The address of the random stream; empty without draws.
    level
        Of the interval of a drawn share.
    """

    variable: str
    method: MaxTMethod
    of: int
    members: Mapping[str, MemberMaxT]
    held_back: tuple[str, ...]
    stream: tuple[str, ...]
    level: Decimal

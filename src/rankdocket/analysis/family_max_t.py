"""Step-down maxT over the family of a plan: what it needs, and what it gives.

It asks for one variable shared by all members, for Spearman rho and, where tests are one-sided, for one direction: the
spec is refused without these.  Whether the members have the same complete rows is known after reading only; where they
have not, the plan is refused before anything joint is computed, because the rows common to all would give other
coefficients than those reported.
"""

from collections.abc import Mapping
from fractions import Fraction
from math import factorial
from typing import Final

import numpy as np

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.family import adjusts_together, family_of
from rankdocket.analysis.max_t_result import FamilyMaxT, MemberMaxT
from rankdocket.analysis.results import AssociationAnalysis, RankTest, Screened
from rankdocket.errors import ComputeError, InputError
from rankdocket.stats.draws import stream
from rankdocket.stats.max_t import COUNTED_MOST_ROWS, MaxT, MaxTQuestion, counted_max_t, drawn_max_t
from rankdocket.stats.null import TailCounts
from rankdocket.stats.ranks import Codes
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import StudySpec

STREAM: Final = ("family", "step-down maxT")
"""Where the draws of a family stand behind the number of its study."""


def shared_variable(spec: StudySpec, family: tuple[str, ...]) -> str | None:
    """Return the variable that all members share, the first one’s x before its y; ``None`` where there is none."""
    pairs = [(spec.associations[name].x, spec.associations[name].y) for name in family]
    return next((name for name in pairs[0] if all(name in pair for pair in pairs)), None) if pairs else None


def draws_together(rows: Screened, spec: StudySpec) -> bool:
    """Return whether an association’s adjusted p-value needs drawn permutations."""
    return adjusts_together(spec) and rows.spec.name in family_of(spec) and len(rows.rows) > COUNTED_MOST_ROWS


def unlike_rows(spec: StudySpec, screened: Mapping[str, Screened]) -> tuple[str, ...]:
    """Return the members whose complete rows are not those of the first, where the family is adjusted together."""
    if not adjusts_together(spec):
        return ()
    rows = {name: tuple(row.row for row in screened[name].rows) for name in family_of(spec)}
    first = next(iter(rows.values()))
    return tuple(name for name, its_own in rows.items() if its_own != first)


def require_like_rows(spec: StudySpec, screened: Mapping[str, Screened]) -> None:
    """Refuse a plan whose family has to have the same complete rows and has not."""
    unlike = unlike_rows(spec, screened)
    if unlike:
        family = family_of(spec)
        raise InputError(
            (
                fault(
                    spec.inference.place,
                    "inference.several_tests.adjust",
                    Message.FAMILY_ROWS_DIFFER,
                    f"step-down maxT needs the same complete rows in all of {', '.join(family)}; those of "
                    f"{', '.join(unlike)} are not those of {family[0]}.",
                    "Leave out the rows that lack a value in any of them, by leave_out and with a reason, or write "
                    "adjust: Holm, which needs no common rows.",
                ),
            )
        )


def family_max_t(results: Mapping[str, AssociationAnalysis], spec: StudySpec) -> FamilyMaxT | None:
    """Adjust a family together (westfall1993); ``None`` where the plan does not, or no member has a test.

    A member that does not vary has no part in any maximum; one whose test is withheld has, and is not answered.
    """
    family = family_of(spec)
    tests = {name: test for name in family if isinstance(test := results[name].test, RankTest)}
    variable = shared_variable(spec, family)
    if not adjusts_together(spec) or not tests or variable is None:
        return None
    sides = [_sides(results[name].screened, variable) for name in family]
    held_back = frozenset(place for place, name in enumerate(family) if name not in tests)
    question = MaxTQuestion(
        sides[0][0],
        tuple(other for _, other in sides),
        direction_of(results[family[0]].screened, spec),
        held_back,
    )
    n = len(question.x_codes)
    address = () if n <= COUNTED_MOST_ROWS else (spec.study.number, *STREAM)
    found = _answer(question, spec, address)
    varying = {name for place, name in enumerate(family) if found.coefficients[place].is_defined}
    return FamilyMaxT(
        variable=variable,
        method=found.method,
        of=found.of,
        members={name: _member(found, family.index(name), spec) for name in tests},
        held_back=tuple(name for name in family if name not in tests and name in varying),
        stream=address,
        level=spec.inference.confidence_level,
    )


def smallest_max_t_p(rows: int, permutations: int) -> Fraction:
    """Return the smallest adjusted p-value that the permutations can show."""
    return Fraction(1, factorial(rows)) if rows <= COUNTED_MOST_ROWS else Fraction(1, permutations + 1)


def _answer(question: MaxTQuestion, spec: StudySpec, address: tuple[str, ...]) -> MaxT:
    rule = spec.inference.p_value
    if not address:
        found = counted_max_t(question)
    elif rule.seed is None:
        raise ComputeError("Permutations must be drawn and the plan states no seed.")
    else:
        found = drawn_max_t(question, rule.permutations, stream(rule.seed, *address))
    if not isinstance(found, MaxT):
        raise ComputeError(f"A family with a test was not adjusted: {found.reason}.")
    return found


def _sides(screened: Screened, variable: str) -> tuple[Codes, Codes]:
    """Return the doubled midranks of the shared variable and of the other one."""
    x = np.array([row.x_doubled_rank for row in screened.rows], dtype=np.int64)
    y = np.array([row.y_doubled_rank for row in screened.rows], dtype=np.int64)
    return (x, y) if screened.spec.x == variable else (y, x)


def _member(found: MaxT, place: int, spec: StudySpec) -> MemberMaxT:
    own, hits, share = found.own_hits[place], found.hits[place], found.adjusted_p[place]
    if own is None or hits is None or share is None:
        raise ComputeError("A member with a test was not adjusted.")
    ends = (share, share)
    if found.method == "drawn permutations":
        tails = TailCounts("drawn permutations", hits, hits, hits, found.of)
        limits = tails.interval("two-sided", spec.inference.confidence_level)
        if limits is not None:
            ends = (Fraction(limits[0]), Fraction(limits[1]))
    return MemberMaxT(own, hits, found.of, share, ends)

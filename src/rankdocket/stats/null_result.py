"""What the chosen null says of one coefficient: tails, critical values, the bars of its picture, and how it was got."""

from dataclasses import dataclass, replace
from decimal import Decimal
from fractions import Fraction
from math import isqrt
from typing import Final

from rankdocket.errors import ComputeError
from rankdocket.stats.attainable import tails_at_limit
from rankdocket.stats.choose_null import Budget, NullChoice, exact_null_of, shares_within
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.critical import Critical, CriticalValues, LargeSample, critical_values, large_sample
from rankdocket.stats.null import Tails
from rankdocket.stats.nulls.monte_carlo import DrawingPlan, Look, LookQuestion, drawn_null
from rankdocket.stats.nulls.saddlepoint import saddlepoint_tail
from rankdocket.stats.nulls.series import STEP, series_tails
from rankdocket.stats.nulls.tied_doubles import rho_shares, rho_tails_doubles
from rankdocket.stats.nulls.tied_integers import rho_tails_integers
from rankdocket.stats.outline import NullOutline, Picture, lattice_between, outline_of, picture_of
from rankdocket.stats.ranks import Codes, TieGroups, tie_groups
from rankdocket.stats.tables import CriticalValue, critical_value_approximate, critical_value_large_sample
from rankdocket.vocabulary import Direction

SMOOTH_CLASSES: Final = 5
"""Values that a variable takes at least for the saddlepoint to be near: with fewer its errors reach the size of p."""

SEEN_DEVIATIONS: Final = 4
"""The picture of a series ends at this many standard deviations: some thirty orderings in a million lie beyond."""


@dataclass(frozen=True, slots=True)
class NullQuestion:
    """What is asked of a null.

    Attributes
    ----------
    observed
        The coefficient of the data.
    direction
        The tail or tails that decide.
    alpha
        Level of the critical values, above 0, below 1.
    levels
        Levels that the p-value may come to be compared with, alpha among them.
    confidence_level
        Of the interval for a drawn p-value.
    """

    observed: Coefficient
    direction: Direction
    alpha: Fraction
    levels: tuple[Fraction, ...]
    confidence_level: Decimal


@dataclass(frozen=True, slots=True)
class NullResult:
    """The answer of a null.

    Attributes
    ----------
    tails
        At the observed coefficient.
    critical
        Critical values; ``None`` where only the tails could be worked out within the budget.
    picture
        The null laid out; ``None`` in the same case.
    large_sample
        The large-sample rule and its true size; ``None`` for tau-b and where the null is not laid out.
    looks
        The looks at drawn permutations, in order; empty without draws.
    look_level
        The level of the interval of each look; ``None`` without draws.
    saddlepoint
        For drawn permutations of rho: an approximation of p by another way, as a check on the draws.  ``None`` where
        a variable has fewer than SMOOTH_CLASSES values: over so coarse a lattice no smooth approximation is near.
    """

    tails: Tails
    critical: CriticalValues | None
    picture: Picture | None
    large_sample: LargeSample | None
    looks: tuple[Look, ...] = ()
    look_level: Decimal | None = None
    saddlepoint: float | None = None


def null_result(
    choice: NullChoice,
    rows: tuple[Codes, Codes],
    question: NullQuestion,
    budget: Budget,
    drawing: DrawingPlan | None,
) -> NullResult:
    """Return what the chosen null says of the observed coefficient.

    Parameters
    ----------
    choice
        From :func:`rankdocket.stats.choose_null.choose_null` with the same budget.
    rows
        Codes of x and of y, equally long; both vary.
    question
        What is asked.
    budget
        What the null laid out beside its tails may cost.
    drawing
        How permutations are drawn; needed for that choice only.

    Raises
    ------
    ComputeError
        If permutations must be drawn and ``drawing`` is ``None``.
    """
    x, y = (tie_groups(codes) for codes in rows)
    observed = question.observed
    match choice.route:
        case "counted beforehand" | "whole":
            null = exact_null_of(observed.name, x, y)
            return _laid_out(null.tails(observed.numerator), outline_of(null), question)
        case "tails, whole numbers":
            return _beside(rho_tails_integers(x, y, observed.numerator), (x, y), question, budget.less(choice.forecast))
        case "tails, doubles":
            return _beside(rho_tails_doubles(x, y, observed.numerator), (x, y), question, budget.less(choice.forecast))
        case "series":
            return _from_series(question)
        case "draws":
            if drawing is None:
                raise ComputeError("The p-value needs drawn permutations, and none were provided for.")
            return _drawn(rows, question, drawing)


def _laid_out(tails: Tails, outline: NullOutline, question: NullQuestion) -> NullResult:
    rule = None
    if question.observed.name == "Spearman rho":
        rule = large_sample(outline, question.observed, question.alpha, question.direction)
    return NullResult(tails, critical_values(outline, question.alpha), picture_of(outline), rule)


def _beside(tails: Tails, groups: tuple[TieGroups, TieGroups], question: NullQuestion, budget: Budget) -> NullResult:
    """Return tails with the null laid out in doubles, where what is left of the budget allows that."""
    if not shares_within(*groups, budget):
        return NullResult(tails, None, None, None)
    statistics, shares = rho_shares(*groups)
    return _laid_out(tails, NullOutline("exact algorithm, 12 digits", statistics, tuple(shares.tolist()), 1), question)


def _drawn(rows: tuple[Codes, Codes], question: NullQuestion, drawing: DrawingPlan) -> NullResult:
    observed = question.observed
    drawn = drawn_null(
        observed.name,
        *rows,
        observed=observed.numerator,
        plan=drawing,
        question=LookQuestion(question.direction, question.confidence_level, question.levels),
    )
    outline = NullOutline("drawn permutations", drawn.statistics, tuple(drawn.hits.tolist()), drawn.tails.of)
    laid_out = _laid_out(drawn.tails, outline, question)
    check = _saddlepoint(tie_groups(rows[0]), tie_groups(rows[1]), question)
    return replace(laid_out, looks=drawn.looks, look_level=drawn.look_level, saddlepoint=check)


def _saddlepoint(x: TieGroups, y: TieGroups, question: NullQuestion) -> float | None:
    """Return the saddlepoint approximation of the p-value, or ``None`` where there is none."""
    if question.observed.name != "Spearman rho" or min(x.distinct, y.distinct) < SMOOTH_CLASSES:
        return None
    numerator = question.observed.numerator
    mirrored = TieGroups(tuple(reversed(y.sizes)))
    match question.direction:
        case "greater":
            return saddlepoint_tail(x, y, numerator)
        case "less":
            return saddlepoint_tail(x, mirrored, -numerator)
        case "two-sided":
            upper = saddlepoint_tail(x, y, abs(numerator))
            lower = saddlepoint_tail(x, mirrored, abs(numerator))
            return None if upper is None or lower is None else min(1.0, upper + lower)


def _from_series(question: NullQuestion) -> NullResult:
    """Return what the series says; without ties the null is symmetric, and one side serves both."""
    observed, n = question.observed, question.observed.n
    one_sided = critical_value_approximate(n, question.alpha, sidedness="one-sided")
    two_sided = critical_value_approximate(n, question.alpha, sidedness="two-sided")
    untied = TieGroups((1,) * n)
    return NullResult(
        # At the ends of the null the count is known in closed form, whatever n.
        tails_at_limit(untied, untied, observed) or series_tails(n, observed.numerator),
        CriticalValues(
            two_sided.method,
            None,
            greater=_critical(one_sided, "greater"),
            less=_critical(one_sided, "less"),
            two_sided=_critical(two_sided, "two-sided"),
        ),
        _series_picture(n, observed.x_square),
        critical_value_large_sample(
            n, question.alpha, sidedness="two-sided" if question.direction == "two-sided" else "one-sided"
        ),
    )


def _critical(found: CriticalValue, direction: Direction) -> Critical | None:
    if found.numerator is None or found.attained_p is None:
        return None
    numerator = -found.numerator if direction == "less" else found.numerator
    opposite = -found.numerator if direction == "two-sided" else None
    return Critical(numerator, found.attained_p, None, found.error, opposite)


def _series_picture(n: int, largest: int) -> Picture:
    """Return the bars of an untied null from its series; ``largest`` is the numerator of perfect agreement."""
    seen = SEEN_DEVIATIONS * isqrt(largest**2 // (n - 1))
    # The places are those of perfect agreement less multiples of the step, the same on both sides.
    end = largest - (largest - seen) // STEP * STEP
    lattice = lattice_between(-end, end, STEP)
    beyond = [series_tails(n, lattice.start(bar)).p("greater") for bar in range(lattice.bars + 1)]
    shares = (max(Fraction(0), beyond[bar] - beyond[bar + 1]) for bar in range(lattice.bars))
    return Picture(tuple(lattice.bar(bar, share) for bar, share in enumerate(shares) if share), lattice.half)

"""Tests of a value other than nought and of size: for one association, what the plan asks of them."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from typing import Final

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.family import sharers_of
from rankdocket.analysis.filing import DIGITS, filed, rounded_down
from rankdocket.analysis.intervals import interval_as_planned, resample_address
from rankdocket.analysis.results import RankTest, Screened
from rankdocket.analysis.size_results import SizeAnalysis, SizeTests, ValueTest
from rankdocket.stats.equivalence import minimum_effect, size_verdict, tost_z, value_test
from rankdocket.stats.interval import Interval, IntervalQuestion, NoInterval
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.z_interval import capped, tie_cap
from rankdocket.stats.z_scale import NullVariance, null_factor
from rankdocket.study.spec import AssociationSpec, HypothesisSpec, StudySpec

VARIANCE: Final[NullVariance] = "Bonett-Wright at the null"

LEAST_P: Final = 1e-300
"""A p-value of the normal law is never 0; what a double cannot hold is filed as this."""

LEVEL_DIGITS: Final = 3
"""Significant digits of 1 less the level of an interval, where alpha cannot be shared in whole digits; rounded down."""


def asks_about_size(hypothesis: HypothesisSpec) -> bool:
    """Return whether the plan asks for a test of a value or of a size."""
    return hypothesis.null_value is not None or hypothesis.smallest_of_interest is not None


def share_of_alpha(association: AssociationSpec, spec: StudySpec) -> Fraction:
    """Return the level of a verdict about size: alpha over the members of an adjusted family, else alpha."""
    return Fraction(spec.inference.alpha) / sharers_of(association, spec)


def size_analysis(
    screened: Screened, spec: StudySpec, test: RankTest, question: IntervalQuestion, interval: Interval | NoInterval
) -> SizeAnalysis | NoAnswer | None:
    """Return what the rows say about size; ``None`` where the plan does not ask.

    Parameters
    ----------
    screened, spec
        The rows and the plan.
    test
        Of independence; the verdict takes its p-value.
    question, interval
        As asked and answered for the association’s own interval.
    """
    hypothesis = screened.spec.hypothesis
    if not asks_about_size(hypothesis):
        return None
    if screened.spec.coefficient != "Spearman rho":
        return NoAnswer("size is tested for rho alone")
    estimate, n = question.coefficient.value, question.coefficient.n
    r = capped(estimate, tie_cap(question.x_codes, question.y_codes))
    found = SizeAnalysis(r, r != estimate, None, None)
    if hypothesis.null_value is not None:
        value = _value_test(screened, spec, r, hypothesis.null_value)
        if isinstance(value, NoAnswer):
            return value
        found = replace(found, value=value)
    if hypothesis.smallest_of_interest is None:
        return found
    delta = float(hypothesis.smallest_of_interest)
    above, within = minimum_effect(r, n, delta, variance=VARIANCE), tost_z(r, n, delta, variance=VARIANCE)
    if isinstance(above, NoAnswer):
        return above
    if isinstance(within, NoAnswer):
        return within
    p_above, p_within = twelve_digits(above.p(direction_of(screened, spec))), twelve_digits(within.p)
    level = share_of_alpha(screened.spec, spec)
    return replace(
        found,
        size=SizeTests(
            hypothesis.smallest_of_interest,
            above.factor,
            above.above.z,
            above.below.z,
            p_above,
            p_within,
            level,
            _interval_of_equivalence(screened, spec, question, interval),
            size_verdict(p_above=p_above, p_below=p_within, p_independence=test.p, alpha=level),
        ),
    )


def twelve_digits(p: float) -> Fraction:
    """Return a p-value as it is filed, compared and adjusted."""
    return Fraction(filed(max(p, LEAST_P)))


def equivalence_level(alpha: Decimal, members: int) -> Decimal:
    """Return 1 − 2·alpha/``members``; rounded up where the quotient has no end, so that the interval is the wider one."""
    share = 2 * Fraction(alpha) / members
    beyond = rounded_down(share, DIGITS)
    return 1 - (beyond if beyond == share else rounded_down(share, LEVEL_DIGITS))


def _value_test(screened: Screened, spec: StudySpec, r: float, null: Decimal) -> ValueTest | NoAnswer:
    test = value_test(r, len(screened.rows), float(null), variance=VARIANCE)
    if isinstance(test, NoAnswer):
        return test
    p = twelve_digits(test.p(direction_of(screened, spec)))
    return ValueTest(null, null_factor(VARIANCE, r, float(null)), test.z, p)


def _interval_of_equivalence(
    screened: Screened, spec: StudySpec, question: IntervalQuestion, interval: Interval | NoInterval
) -> Interval | NoInterval:
    """Return the interval that belongs to two one-sided tests at the level of the verdict."""
    if isinstance(interval, NoInterval):
        return interval
    level = equivalence_level(spec.inference.alpha, sharers_of(screened.spec, spec))
    if level <= 0:
        return NoInterval("alpha leaves no level for it")
    # The stream is that of the printed interval, so that both rest on the same resamples.
    asked = replace(question, level=level, direction="two-sided")
    return interval_as_planned(spec, asked, resample_address(screened.spec.name, spec))

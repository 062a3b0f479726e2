"""The walk of a study through the engine; this file is its table of contents."""

from collections.abc import Callable, Mapping
from decimal import Decimal
from fractions import Fraction

import numpy as np

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.decide import decide
from rankdocket.analysis.family import adjustment_of, family_of
from rankdocket.analysis.family_max_t import draws_together, family_max_t, require_like_rows
from rankdocket.analysis.filing import filed
from rankdocket.analysis.intervals import interval_alone, resample_address, with_adjusted_intervals
from rankdocket.analysis.more_variables import examine_more_variables
from rankdocket.analysis.nulls import budget_of, drawing_plan, levels_of, null_choice, smallest_possible_p
from rankdocket.analysis.rank_codes import rank_codes
from rankdocket.analysis.results import (
    Analysis,
    AssociationAnalysis,
    CheckOutcome,
    Comparisons,
    Estimate,
    NotEstimable,
    RankTest,
    Screened,
    Withheld,
)
from rankdocket.analysis.screen import screen_association
from rankdocket.analysis.sensitivity.make import sensitivity_of
from rankdocket.analysis.shape import shape_of
from rankdocket.analysis.size import size_analysis
from rankdocket.errors import InputError
from rankdocket.stats.coefficient import FEWEST_ROWS, Coefficient
from rankdocket.stats.comparisons import pearson_r, t_value_p
from rankdocket.stats.interval import IntervalQuestion, NoInterval
from rankdocket.stats.null import TailShares
from rankdocket.stats.null_result import NullQuestion, NullResult, null_result
from rankdocket.stats.ranks import Codes
from rankdocket.stats.rho import rho, short_form, tie_corrected_rho
from rankdocket.stats.tau import tau_b
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData
from rankdocket.vocabulary import Direction


def analyse(spec: StudySpec, data: StudyData, progress: Callable[[str], None] = lambda _: None) -> Analysis:
    """Do everything the spec asks, and nothing else.

    Parameters
    ----------
    spec
        The plan.
    data
        Everything read for it.
    progress
        Told the name of each association when it is done.

    Raises
    ------
    InputError
        If permutations must be drawn and the plan states no seed, or a family that is adjusted together has unlike rows;
        nothing joint has been computed then.
    """
    screened = {name: screen_association(association, spec, data) for name, association in spec.associations.items()}
    require_like_rows(spec, screened)
    require_seed(spec, screened)
    results = {}
    for name, rows in screened.items():
        results[name] = analyse_association(rows, spec)
        progress(name)
    together = family_max_t(results, spec)
    adjustment = adjustment_of(spec) if together is None else together
    findings = decide(results, spec, adjustment)
    printed = with_adjusted_intervals(results, findings, spec)
    more = {name: examine_more_variables(name, results, spec, data) for name in results}
    sensitivity = sensitivity_of(printed, findings, (spec, data), adjustment)
    return Analysis(spec, data, printed, findings, family_of(spec), more, together, sensitivity)


def analyse_association(screened: Screened, spec: StudySpec) -> AssociationAnalysis:
    """Check, estimate, test and compare one association."""
    checks = tuple(check.outcome(screened, spec) for check in CHECKS)
    x, y = rank_codes(screened)
    estimate = _estimate(screened, checks, x, y)
    direction = direction_of(screened, spec)
    if isinstance(estimate, NotEstimable):
        return AssociationAnalysis(
            screened, checks, estimate, estimate, NoInterval(estimate.reason), Comparisons(None, None, None), None
        )
    smallest = smallest_possible_p(screened, spec)
    if isinstance(estimate, Withheld):
        return AssociationAnalysis(
            screened, checks, estimate, estimate, NoInterval(estimate.reason), Comparisons(None, None, None), smallest
        )
    test = _test(screened, spec, checks, estimate.coefficient)
    question = IntervalQuestion(estimate.coefficient, x, y, spec.inference.confidence_level, direction)
    interval = interval_alone(screened, spec, checks, question)
    comparisons = Comparisons(
        t_value_p=t_value_p(estimate.coefficient, direction)
        if screened.spec.coefficient == "Spearman rho" and isinstance(test, RankTest)
        else None,
        pearson=_pearson(screened, spec),
        doubled_p=test.tails.doubled if isinstance(test, RankTest) and direction == "two-sided" else None,
    )
    size = size_analysis(screened, spec, test, question, interval) if isinstance(test, RankTest) else None
    return AssociationAnalysis(
        screened,
        checks,
        estimate,
        test,
        interval,
        comparisons,
        smallest,
        size,
        interval_stream=resample_address(screened.spec.name, spec),
        shape=shape_of(estimate.coefficient, (x, y), [(row.x, row.y) for row in screened.rows]),
    )


def without_seed(spec: StudySpec, screened: Mapping[str, Screened]) -> tuple[str, ...]:
    """Return the associations whose test needs draws although the plan states no seed."""
    if spec.inference.p_value.seed is not None:
        return ()
    return tuple(
        name
        for name, rows in screened.items()
        if _will_be_tested(rows, spec) and (null_choice(rows, spec).needs_draws or draws_together(rows, spec))
    )


def require_seed(spec: StudySpec, screened: Mapping[str, Screened]) -> None:
    """Refuse a plan that needs draws and states no seed, naming every association concerned."""
    drawn = without_seed(spec, screened)
    if drawn:
        raise InputError(
            (
                fault(
                    spec.inference.place,
                    "inference.p_value",
                    Message.SEED_MISSING,
                    f"the p-value of {', '.join(drawn)} needs drawn permutations and the plan states no seed.",
                    "Add a number of your own to p_value, as in p_value: {by: exact when possible, seed: 417}.",
                ),
            )
        )


def _will_be_tested(screened: Screened, spec: StudySpec) -> bool:
    """Return whether a test is to come, from what may be looked at before anything joint is computed."""
    if min(screened.x_ties.distinct, screened.y_ties.distinct) < 2 or len(screened.rows) < FEWEST_ROWS:
        return False
    return all(check.outcome(screened, spec).withholds == "nothing" for check in CHECKS if not check.joint)


def _estimate(
    screened: Screened, checks: tuple[CheckOutcome, ...], x: Codes, y: Codes
) -> Estimate | Withheld | NotEstimable:
    if len(screened.rows) < FEWEST_ROWS:
        return NotEstimable("fewer than three complete rows")
    constant = [ties.distinct < 2 for ties in (screened.x_ties, screened.y_ties)]
    if any(constant):
        which = (
            "both variables have"
            if all(constant)
            else "the first variable has"
            if constant[0]
            else "the second variable has"
        )
        return NotEstimable(f"{which} one value in all complete rows")
    for outcome in checks:
        if outcome.withholds == "all":
            return Withheld(outcome.reason)
    if screened.spec.coefficient == "Kendall tau-b":
        return Estimate(tau_b(x, y), None, None, None)
    coefficient, corrected = rho(x, y), tie_corrected_rho(x, y)
    differences = corrected.squared_differences
    return Estimate(coefficient, differences, corrected, short_form(coefficient.n, differences))


def _test(
    screened: Screened, spec: StudySpec, checks: tuple[CheckOutcome, ...], observed: Coefficient
) -> RankTest | Withheld:
    for outcome in checks:
        if outcome.withholds != "nothing":
            return Withheld(outcome.reason)
    choice = null_choice(screened, spec)
    direction = direction_of(screened, spec)
    inference = spec.inference
    address = (spec.study.number, screened.spec.name, "permutations") if choice.needs_draws else ()
    null = null_result(
        choice,
        rank_codes(screened),
        NullQuestion(
            observed, direction, Fraction(inference.alpha), levels_of(screened.spec, spec), inference.confidence_level
        ),
        budget_of(spec),
        drawing_plan(spec, address),
    )
    p, p_interval = _p_with_interval(null, direction, inference.confidence_level)
    return RankTest(direction, choice, null, p, p_interval, address)


def _p_with_interval(
    null: NullResult, direction: Direction, level: Decimal
) -> tuple[Fraction, tuple[float, float] | None]:
    """Return p and where its error lets it lie."""
    tails = null.tails
    if isinstance(tails, TailShares):
        share = tails.share(direction)
        # A share is its twelve digits: whoever adjusts the filed p must come to the same adjusted p.
        p = Fraction(filed(share.value))
        return p, (float(max(Fraction(0), p - share.error)), float(min(Fraction(1), p + share.error)))
    if null.looks:
        # After several looks, the interval of the last one, which shares the level with them.
        return tails.p(direction), (null.looks[-1].low, null.looks[-1].high)
    return tails.p(direction), tails.interval(direction, level)


def _pearson(screened: Screened, spec: StudySpec) -> float | None:
    scales = {spec.variables[screened.spec.x].scale, spec.variables[screened.spec.y].scale}
    if scales & {"ordered", "already ranked"}:
        return None  # labels and places have no distances
    x = np.array([float(row.x) for row in screened.rows])
    y = np.array([float(row.y) for row in screened.rows])
    return pearson_r(x, y)

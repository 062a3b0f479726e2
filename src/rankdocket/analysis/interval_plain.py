"""Intervals to plain data: limits, level, what the rule did to its own arithmetic, and what the ties allow."""

from rankdocket.analysis.coverage_plain import coverage_to_plain
from rankdocket.analysis.filing import filed
from rankdocket.analysis.intervals import SHOWN, adjusted_level
from rankdocket.analysis.results import Analysis, AssociationAnalysis, Estimate
from rankdocket.canonical import Plain
from rankdocket.stats.attainable import attainable_range
from rankdocket.stats.interval import Interval, NoInterval, tail_of_level
from rankdocket.stats.intervals.jackknife import KEY as JACKKNIFE
from rankdocket.stats.intervals.jackknife import guard_of
from rankdocket.stats.intervals.tau_jackknife import KEY as TAU_JACKKNIFE


def interval_plan_to_plain(analysis: Analysis) -> dict[str, Plain]:
    """Return how intervals were planned; the level of adjusted ones, where there are such."""
    rule = analysis.spec.inference.interval
    plain: dict[str, Plain] = {"by": rule.by, "adjusted": rule.adjusted}
    if rule.by == "BCa bootstrap":
        plain["resamples"] = rule.resamples
    if rule.adjusted == "after selection":
        plain["selected"] = sum(analysis.findings[name].word in SHOWN for name in analysis.family)
    adjusted = adjusted_level(analysis.findings, analysis.spec)
    if adjusted is not None:
        plain["level"] = str(adjusted.level)
    return plain


def intervals_to_plain(result: AssociationAnalysis, adjusted: str) -> dict[str, Plain]:
    """Return the interval as printed, the one at the plan’s level where that is another, and the attainable range."""
    holds = "alone" if result.interval_alone is None else adjusted
    plain: dict[str, Plain] = {
        "interval": {**_interval(result, result.interval, holds), **coverage_to_plain(result)},
    }
    if result.interval_alone is not None:
        plain["interval_alone"] = _interval(result, result.interval_alone, "alone")
    if isinstance(result.estimate, Estimate):
        screened = result.screened
        limits = attainable_range(screened.spec.coefficient, screened.x_ties, screened.y_ties)
        plain["attainable"] = {"lowest": limits.lowest.decimal_text(), "highest": limits.highest.decimal_text()}
    return plain


def limits_to_plain(interval: Interval | NoInterval) -> dict[str, Plain]:
    """Return limits, level and rule of an interval, or why there is none."""
    if not isinstance(interval, Interval):
        return {"state": "none", "reason": interval.reason}
    return {
        "state": "given",
        "low": filed(interval.low),
        "high": filed(interval.high),
        "level": str(interval.level),
        "by": interval.method,
    }


def _interval(result: AssociationAnalysis, interval: Interval | NoInterval, holds: str) -> dict[str, Plain]:
    if not isinstance(interval, Interval):
        return limits_to_plain(interval)
    plain: dict[str, Plain] = {
        **limits_to_plain(interval),
        "holds": holds,
        "cap_binds": interval.cap_binds,
        "restraints": list(interval.restraints),
    }
    if interval.method in (JACKKNIFE, TAU_JACKKNIFE):
        tail = tail_of_level(interval.level, interval.direction)
        share = 1 - guard_of(float(tail), result.screened.flow.complete)
        plain["unseen"] = {"share": filed(share), "probability": str(tail)}
    if interval.resampled is not None:
        plain["resampled"] = {
            "drawn": interval.resampled.drawn,
            "undefined": interval.resampled.undefined,
            "stream": list(result.interval_stream),
        }
    return plain

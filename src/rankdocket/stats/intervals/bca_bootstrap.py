"""The bias-corrected and accelerated bootstrap interval for rho."""

from typing import Final

from rankdocket.references import Description
from rankdocket.stats.bootstrap import MOST_ROWS, NoLimits, bca_limits, resampled_rho
from rankdocket.stats.influence import rho_without_each
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval, Resampled
from rankdocket.stats.z_interval import tail_of, why_none

KEY: Final = "BCa bootstrap"
FEWEST_ROWS: Final = 4


def bca_bootstrap(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval from the resamples that the question plans; a seed is never a default."""
    none = why_none(question.coefficient, FEWEST_ROWS, MOST_ROWS)
    if none is not None:
        return none
    if question.resampling is None:
        return NoInterval("no bootstrap interval exists because no resamples are planned")
    without_each = rho_without_each(question.x_codes, question.y_codes)
    if not without_each.is_defined.all():
        return NoInterval("no bootstrap interval exists because one row carries all variation of a variable")
    tail = tail_of(question)
    resampled = resampled_rho(question.x_codes, question.y_codes, question.resampling)
    limits = bca_limits(resampled.values, question.coefficient.value, without_each.values, tail)
    if isinstance(limits, NoLimits):
        return NoInterval(f"no bootstrap interval exists because {limits.reason}")
    low, high = limits
    return Interval(
        -1.0 if question.direction == "less" else low,
        1.0 if question.direction == "greater" else high,
        question.level,
        question.direction,
        KEY,
        (),
        Resampled(resampled.drawn, resampled.undefined),
    )


BCA_BOOTSTRAP: Final = IntervalMethod(
    KEY,
    "Bias-corrected and accelerated bootstrap interval",
    ("Spearman rho",),
    bca_bootstrap,
    Description(
        "The interval was computed from {resamples} resamples of the rows, drawn with replacement and ranked anew, by "
        "the bias-corrected and accelerated method; resamples in which a variable did not vary were left out.",
        ("efron1987",),
    ),
    "From 4 rows, with planned resamples; none at perfect order or when one row carries all variation of a variable. In "
    "simulations no nearer to its level than rules without resamples, and well below it for few distinct values near "
    "perfect order and when the spread of one variable changes with the other.",
)

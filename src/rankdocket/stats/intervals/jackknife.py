"""The recommended interval for rho: jackknife on the z scale, kept between a floor, a ceiling and a guard."""

from dataclasses import dataclass
from math import sqrt
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.influence import (
    LEAST_FREEDOM,
    MOST_ROWS,
    freedom_of,
    influence_variance,
    is_perfect,
    rho_influence,
    rho_without_each,
    z_jackknife_variance,
)
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval, Restraint
from rankdocket.stats.intervals.bonett_wright import FEWEST_ROWS, bonett_wright_variance
from rankdocket.stats.z_interval import (
    MOST_FREEDOM,
    ZShape,
    back_from_z,
    capped,
    normal_quantile,
    t_quantile,
    tail_of,
    tie_cap,
    untied_cap,
    why_none,
)

KEY: Final = "jackknife on z, guarded"

SMALL_BELOW: Final = 10
"""Below this number of rows the variances are mixed."""

PRIOR_ROWS: Final = 10
"""Weight of the Bonett-Wright variance in the mixture, in rows."""

MOST_TIMES: Final = 2.5
"""A half-width is at most this many times that of Bonett and Wright."""


@dataclass(frozen=True, slots=True)
class _Parts:
    """What the half-width is made of: variances on the z scale, degrees of freedom, the tail and the rows."""

    floor: float
    jackknife: float
    influence: float
    freedom: float
    tail: float
    n: int


def jackknife(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval; one-sided bounds are a limit of the two-sided interval that leaves twice the error."""
    coefficient = question.coefficient
    none = why_none(coefficient, FEWEST_ROWS, MOST_ROWS)
    if none is not None:
        return none
    n, r = coefficient.n, coefficient.value
    cap = tie_cap(question.x_codes, question.y_codes)
    centre = capped(r, cap)
    influence = rho_influence(question.x_codes, question.y_codes)
    variance = z_jackknife_variance(rho_without_each(question.x_codes, question.y_codes), untied_cap(n - 1))
    tail = tail_of(question)
    parts = _Parts(
        bonett_wright_variance(centre, n),
        bonett_wright_variance(r, n) if variance is None else variance,
        0.0 if is_perfect(coefficient) else n / (n - 2) * influence_variance(influence) / (1 - centre**2) ** 2,
        freedom_of(influence),
        tail,
        n,
    )
    half, restraints = _half_of_few(parts) if n < SMALL_BELOW else _half(parts)
    if variance is None:
        restraints = (*restraints, "fallback")
    return back_from_z(question, KEY, ZShape(cap, half, guard_of(tail, n), restraints))


def guard_of(tail: float, n: int) -> float:
    """Return ``tail`` to the power 1/n.

    If a share 1 − g of the rows followed no relation at all, n rows would show none of them with probability gⁿ; a
    mixture with that share of unrelated rows on the same margins has rho = g.
    """
    return float(tail ** (1 / n))


def _half(parts: _Parts) -> tuple[float, tuple[Restraint, ...]]:
    least = normal_quantile(parts.tail) * sqrt(parts.floor)
    own = t_quantile(parts.freedom, parts.tail) * sqrt(parts.jackknife)
    return between(least, own)


def between(least: float, own: float) -> tuple[float, tuple[Restraint, ...]]:
    """Return ``own`` half-width, kept between ``least`` and 2.5 times it, and which of the two bound it."""
    most = MOST_TIMES * least
    if own <= least:
        return least, ("floor",)
    return (most, ("ceiling",)) if own > most else (own, ())


def _half_of_few(parts: _Parts) -> tuple[float, tuple[Restraint, ...]]:
    least = normal_quantile(parts.tail) * sqrt(parts.floor)
    larger = max(parts.influence, parts.jackknife)
    if larger == 0:
        return least, ("floor",)
    weight = PRIOR_ROWS / (PRIOR_ROWS + parts.n)
    mixed = weight * parts.floor + (1 - weight) * larger
    share = min(mixed / ((1 - weight) * larger), MOST_FREEDOM)
    freedom = max(LEAST_FREEDOM, min(parts.freedom, MOST_FREEDOM) * share**2)
    own = t_quantile(freedom, parts.tail) * sqrt(mixed)
    return (least, ("floor",)) if own <= least else (own, ())


JACKKNIFE: Final = IntervalMethod(
    KEY,
    "Guarded jackknife interval on the z scale",
    ("Spearman rho",),
    jackknife,
    Description(
        "The interval was computed on the inverse hyperbolic tangent scale with the jackknife standard error, every "
        "row left out in turn and the others ranked anew, and a quantile of Student’s t whose degrees of freedom are twice "
        "the rows over the kurtosis of the influence values less one, three at least; half its width is never less than that "
        "of Bonett and Wright, nor more than two and a half times it. With fewer than ten rows the variance is instead a "
        "mean of that of Bonett and Wright, with the weight of ten rows, and the larger of the jackknife’s and that of the "
        "influence values, with the weight of the rows there are; the degrees of freedom are then multiplied by the square of "
        "this mean over the part that the larger one has in it. A coefficient nearer to one than a cap, half of the "
        "discordance of one row moved across the widest tie steps, was replaced by that cap, and a limit was drawn back to a "
        "guard, the error left to one side to the power of one over the rows: the largest share of related rows at which "
        "unrelated ones could have gone unseen. Its level is approximate.",
        ("tukey1958", "satterthwaite1946", "bonett2000", "croux2010"),
    ),
    "From 4 rows; simulated at the two-sided level 0.95 for 6 to 200 rows. It holds its level in nearly all kinds of "
    "dependence simulated; not when the spread of one variable changes with the other and rho is about 0.8 or more, nor "
    "when a nearly perfect relation holds gross errors. From 4 to 9 rows it says little.",
)

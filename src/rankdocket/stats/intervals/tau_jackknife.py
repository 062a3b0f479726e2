"""The interval for tau-b: jackknife on the z scale, kept between a floor, a ceiling and a guard."""

from math import sqrt
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.influence import freedom_of, tau_influence, tau_without_each, z_jackknife_variance
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.intervals.fieller import TAU_FEWEST_ROWS, fieller_tau_variance
from rankdocket.stats.intervals.jackknife import between, guard_of
from rankdocket.stats.z_interval import (
    ZShape,
    back_from_z,
    normal_quantile,
    t_quantile,
    tail_of,
    tau_tie_cap,
    untied_tau_cap,
    why_none,
)

KEY: Final = "tau-b jackknife on z, guarded"


def tau_jackknife(question: IntervalQuestion) -> Interval | NoInterval:
    """Return the interval, built as that for rho; its floor is the variance of Fieller, Hartley and Pearson."""
    coefficient = question.coefficient
    none = why_none(coefficient, TAU_FEWEST_ROWS)
    if none is not None:
        return none
    n, x, y = coefficient.n, question.x_codes, question.y_codes
    variance = z_jackknife_variance(tau_without_each(x, y), untied_tau_cap(n - 1))
    tail = tail_of(question)
    least = normal_quantile(tail) * sqrt(fieller_tau_variance(n))
    own = least if variance is None else t_quantile(freedom_of(tau_influence(x, y)), tail) * sqrt(variance)
    half, restraints = between(least, own)
    if variance is None:
        restraints = (*restraints, "fallback")
    cap = tau_tie_cap(coefficient, x, y)
    return back_from_z(question, KEY, ZShape(cap, half, tau_guard_of(tail, n), restraints))


def tau_guard_of(tail: float, n: int) -> float:
    """Return g(g + 2)/3 with g = ``tail`` to the power 1/n.

    That is tau of a perfect relation mixed with a share 1 − g of unrelated rows on the same margins: g² from pairs of
    related rows, and a third of the 2g(1 − g) pairs of which one row is related.
    """
    share = guard_of(tail, n)
    return share * (share + 2) / 3


TAU_JACKKNIFE: Final = IntervalMethod(
    KEY,
    "Guarded jackknife interval for tau-b on the z scale",
    ("Kendall tau-b",),
    tau_jackknife,
    Description(
        "The interval for tau-b was computed on the inverse hyperbolic tangent scale with the jackknife standard error "
        "and a quantile of Student’s t whose degrees of freedom follow from the influence values; it is never narrower "
        "than the interval of Fieller, Hartley and Pearson. A coefficient nearer to one than a cap, half of the "
        "smallest discordance that the ties could show, was replaced by that cap, and a limit was drawn back to a "
        "guard, tau-b of the largest share of related rows at which unrelated ones could have gone unseen. Its level "
        "is approximate.",
        ("tukey1958", "satterthwaite1946", "fieller1957", "croux2010"),
    ),
    "From 5 rows. Simulated under normal-type dependence at the two-sided level 0.95 for 10 to 100 rows only.",
)

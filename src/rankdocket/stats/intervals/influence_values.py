"""The interval for rho on the z scale with the standard error of the influence values."""

from math import sqrt
from typing import Final

from rankdocket.references import Description
from rankdocket.stats.influence import MOST_ROWS, influence_variance, rho_influence
from rankdocket.stats.interval import Interval, IntervalMethod, IntervalQuestion, NoInterval
from rankdocket.stats.intervals.bonett_wright import FEWEST_ROWS, bonett_wright_variance
from rankdocket.stats.z_interval import ZShape, back_from_z, capped, t_quantile, tail_of, tie_cap, why_none

KEY: Final = "influence values on z"


def influence_values(question: IntervalQuestion) -> Interval | NoInterval:
    """Return atanh r ∓ t √(Σψ²/(n(n − 2)))/(1 − r²) taken back, t with n − 2 degrees of freedom.

    At or beyond the cap, where influence values vanish, the variance is at least that of Bonett and Wright.
    """
    coefficient = question.coefficient
    none = why_none(coefficient, FEWEST_ROWS, MOST_ROWS)
    if none is not None:
        return none
    n, r = coefficient.n, coefficient.value
    cap = tie_cap(question.x_codes, question.y_codes)
    centre = capped(r, cap)
    spread = influence_variance(rho_influence(question.x_codes, question.y_codes))
    own = n / (n - 2) * spread / (1 - centre**2) ** 2
    other = bonett_wright_variance(centre, n)
    stands_in = own < other and (abs(r) >= cap or spread == 0)
    half = t_quantile(n - 2, tail_of(question)) * sqrt(other if stands_in else own)
    return back_from_z(question, KEY, ZShape(cap, half, restraints=("fallback",) if stands_in else ()))


INFLUENCE_VALUES: Final = IntervalMethod(
    KEY,
    "Interval from influence values on the z scale",
    ("Spearman rho",),
    influence_values,
    Description(
        "The interval was computed on the inverse hyperbolic tangent scale with the standard error of the influence "
        "values, ties included, and a quantile of Student’s t; at or beyond a cap that the tie steps set, the "
        "coefficient was replaced by the cap and the variance was at least that of Bonett and Wright.",
        ("croux2010", "bonett2000"),
    ),
    "From 4 rows. Without its cap, in simulations of 10 rows and more, well below its level for few distinct values near "
    "perfect order and when the spread of one variable changes with the other; not to be relied on below 10 rows.",
)

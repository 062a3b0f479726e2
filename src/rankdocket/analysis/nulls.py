"""Which null an association gets, and how small a p that null can give; nothing joint is looked at."""

from fractions import Fraction

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.results import Screened
from rankdocket.stats.attainable import smallest_attainable_p
from rankdocket.stats.choose_null import NullChoice, choose_null
from rankdocket.study.spec import StudySpec


def null_choice(screened: Screened, spec: StudySpec) -> NullChoice:
    """Return which null the number of rows, the ties and the plan allow."""
    return choose_null(screened.spec.coefficient, screened.x_ties, screened.y_ties, spec.inference.p_value.by)


def smallest_possible_p(screened: Screened, spec: StudySpec) -> Fraction:
    """Return the smallest p that rows, ties and null allow: no p from B draws lies below 1/(B + 1).

    Both variables must take two values at least.
    """
    smallest = smallest_attainable_p(
        screened.spec.coefficient, screened.x_ties, screened.y_ties, direction_of(screened, spec)
    )
    if null_choice(screened, spec).needs_draws:
        return max(smallest, Fraction(1, spec.inference.p_value.permutations + 1))
    return smallest

"""Which null an association gets, from what the plan says of it; nothing joint is looked at."""

from fractions import Fraction

from rankdocket.analysis.check import direction_of
from rankdocket.analysis.family import factors_of
from rankdocket.analysis.results import Screened
from rankdocket.stats.attainable import smallest_attainable_p
from rankdocket.stats.choose_null import NANOSECONDS, Budget, NullChoice, choose_null
from rankdocket.stats.draws import stream
from rankdocket.stats.nulls.monte_carlo import DrawingPlan, LookQuestion, smallest_drawn_p
from rankdocket.study.spec import AssociationSpec, StudySpec


def null_choice(screened: Screened, spec: StudySpec) -> NullChoice:
    """Return which null the number of rows, the ties and the plan allow."""
    return choose_null(
        screened.spec.coefficient, screened.x_ties, screened.y_ties, spec.inference.p_value.by, budget_of(spec)
    )


def budget_of(spec: StudySpec) -> Budget:
    """Return what the plan lets an exact null cost."""
    budget = spec.inference.p_value.budget
    return Budget(int(budget.seconds * NANOSECONDS), budget.memory)


def drawing_plan(spec: StudySpec, address: tuple[str, ...]) -> DrawingPlan | None:
    """Return how permutations are drawn from the stream at ``address``; ``None`` without address or seed."""
    rule = spec.inference.p_value
    if rule.seed is None or not address:
        return None
    return DrawingPlan(rule.permutations, rule.most_draws, stream(rule.seed, *address))


def levels_of(association: AssociationSpec, spec: StudySpec) -> tuple[Fraction, ...]:
    """Return the levels that a p-value may come to be held against, decreasing: alpha over each factor of the rule.

    Step-down maxT compares no p-value of one association with anything but alpha.
    """
    alpha = Fraction(spec.inference.alpha)
    return tuple(sorted({alpha / factor for factor in factors_of(association, spec)}, reverse=True))


def smallest_of_rows(screened: Screened, spec: StudySpec) -> Fraction:
    """Return the smallest p that rows and ties allow; both variables must take two values at least."""
    return smallest_attainable_p(
        screened.spec.coefficient, screened.x_ties, screened.y_ties, direction_of(screened, spec)
    )


def smallest_possible_p(screened: Screened, spec: StudySpec) -> Fraction:
    """Return the smallest p that rows, ties and null allow: drawn permutations show none below their own number."""
    smallest = smallest_of_rows(screened, spec)
    if not null_choice(screened, spec).needs_draws:
        return smallest
    rule = spec.inference.p_value
    question = LookQuestion(
        direction_of(screened, spec), spec.inference.confidence_level, levels_of(screened.spec, spec)
    )
    return max(smallest, smallest_drawn_p(rule.permutations, rule.most_draws, question))

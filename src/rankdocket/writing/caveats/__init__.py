"""The catalogue of caveats, in the order in which a report numbers them."""

from typing import Final

from rankdocket.document.model import CaveatBlock
from rankdocket.writing.caveat import CaveatRule
from rankdocket.writing.caveats import (
    adjustment,
    built_in,
    coverage,
    intervals,
    more_variables,
    requirements,
    results,
    sensitivity,
    shape,
    size,
    study,
)
from rankdocket.writing.section import NumberedCaveat, Story

CAVEATS: Final[tuple[CaveatRule, ...]] = (
    requirements.DEPENDENT_ROWS,
    study.SUPPLIED_WORDS,
    results.NOT_ESTIMABLE,
    built_in.BUILT_IN,
    built_in.BUILT_IN_SIZE,
    requirements.REQUIREMENTS,
    results.UNDECIDED,
    results.TWO_SIDED_RULE,
    results.TEST_AND_INTERVAL,
    size.EQUIVALENCE_AND_INTERVAL,
    size.SIZE_FINDING,
    sensitivity.WOULD_CHANGE,
    coverage.LOW_COVERAGE,
    shape.HIDDEN_SHAPE,
    intervals.PERFECT,
    intervals.GUARD,
    intervals.CAP,
    intervals.FALLBACK,
    results.SMALL_SAMPLE,
    study.LEFT_OUT_ROWS,
    study.INCOMPLETE_ROWS,
    more_variables.GROUPS,
    more_variables.GIVEN_COVARIATES,
    intervals.BEYOND,
    intervals.RESAMPLES,
    intervals.NO_INTERVAL,
    adjustment.CONDITION_OF_ADJUSTMENT,
    size.SIZE_BASIS,
    intervals.INTERVAL_BASIS,
    study.ASSOCIATION_ONLY,
    study.INDEPENDENCE_NULL,
    study.DECISION,
)


def find_caveats(story: Story) -> tuple[NumberedCaveat, ...]:
    """Return every caveat of the study, numbered through the report."""
    found = [(rule, caveat) for rule in CAVEATS for caveat in rule.find(story)]
    return tuple(
        NumberedCaveat(CaveatBlock(f"caveat-{number}", number, caveat.prose), caveat.about, rule.weight)
        for number, (rule, caveat) in enumerate(found, start=1)
    )

"""A look at the shape: does one direction hold over the whole range of x?

This check looks at both variables together and is therefore never shown by a screening.
"""

from typing import Final

import numpy as np

from rankdocket.analysis.check import Check
from rankdocket.analysis.results import CheckOutcome, CompleteRow, Screened
from rankdocket.references import Description
from rankdocket.stats.rho import rho
from rankdocket.study.spec import StudySpec

FEWEST_ROWS: Final = 10
"""With fewer rows the coefficient of a half wanders too far to say anything (house rule)."""

OPPOSED: Final = 0.3
"""Both halves must lean at least so far, in opposite directions, before the shape is called doubtful (house rule)."""


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Compare the direction in the lower and in the upper half of x."""
    del spec  # the look has no limit of the plan’s
    middle = len(screened.rows) + 1
    # Tied rows stay together: a tie group cut at the middle would make the outcome depend on the order of the rows.
    lower = [row for row in screened.rows if row.x_doubled_rank < middle]
    upper = [row for row in screened.rows if row.x_doubled_rank >= middle]
    if min(len(lower), len(upper)) < FEWEST_ROWS:
        return CheckOutcome(CHECK.key, "not examined", None, None, "too few rows for a look at two halves")
    halves = [_direction(lower), _direction(upper)]
    known = [value for value in halves if value is not None]
    if len(known) < 2:
        return CheckOutcome(CHECK.key, "not examined", None, None, "a variable is constant in one half of the rows")
    low, high = known
    if min(abs(low), abs(high)) >= OPPOSED and low * high < 0:
        return CheckOutcome(
            CHECK.key,
            "doubtful",
            None,
            None,
            "the direction in the lower half of x is opposite to that in the upper half",
        )
    return CheckOutcome(CHECK.key, "met", None, None, "the two halves of x do not lean in opposite directions")


def _direction(rows: list[CompleteRow]) -> float | None:
    x = np.array([row.x_doubled_rank for row in rows], dtype=np.int64)
    y = np.array([row.y_doubled_rank for row in rows], dtype=np.int64)
    coefficient = rho(x, y)
    return coefficient.value if coefficient.is_defined else None


CHECK = Check(
    key="shape",
    label="One direction throughout",
    demand=Description(
        "A rank correlation describes an association that keeps one direction; the direction in the lower half of x "
        "was compared with that in the upper half as a rough look, beside the plots (house rule, no source)."
    ),
    joint=True,
    examine=examine,
)

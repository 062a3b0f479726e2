"""Which single rows would change the finding if they were left out, from integers that follow from sums over all rows."""

from typing import Final

import numpy as np

from rankdocket.analysis.sensitivity.subject import Subject, ties_without
from rankdocket.analysis.sensitivity.threshold import Threshold
from rankdocket.stats.influence import WithoutEach
from rankdocket.stats.leave_one_out import LeaveOneOut, leave_one_out
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.ranks import Codes

NO_FINDING_STATED: Final = "no finding is stated"
NOT_REPEATED: Final = "the finding lies so near alpha that the null of this table does not repeat it"
FEW: Final = "four rows or more must remain"

FEWEST_LEFT: Final = 4
"""Below, no coefficient is worth a finding."""


def without_each(subject: Subject) -> LeaveOneOut | NoAnswer:
    """Return the coefficient without each row in turn, or why there is none."""
    if subject.coefficient.n <= FEWEST_LEFT:
        return NoAnswer(FEW)
    return leave_one_out(subject.x, subject.y, subject.coefficient.name)


def threshold_for(subject: Subject) -> Threshold | NoAnswer:
    """Return where the finding changes, if the null that says so repeats the finding itself."""
    if subject.decision is None:
        return NoAnswer(subject.undecided.reason or NO_FINDING_STATED)
    threshold = subject.decision.threshold()
    if isinstance(threshold, NoAnswer):
        return threshold
    repeated = threshold.finding(subject.coefficient, ties_without(subject.x, subject.y, ()))
    return threshold if repeated == subject.decision.finding else NoAnswer(NOT_REPEATED)


def changing_rows(subject: Subject, found: LeaveOneOut) -> tuple[int, ...] | NoAnswer:
    """Return the places of the rows each of which changes the finding when it alone is left out."""
    threshold = threshold_for(subject)
    if isinstance(threshold, NoAnswer) or subject.decision is None:
        return threshold if isinstance(threshold, NoAnswer) else NoAnswer(NO_FINDING_STATED)
    before = subject.decision.finding
    near = threshold.may_differ(_as_arrays(found), subject.coefficient.n - 1, before)
    return tuple(
        place
        for place in np.flatnonzero(near).tolist()
        if threshold.finding(found.without[place].coefficient, ties_without(subject.x, subject.y, (place,))) != before
    )


def _as_arrays(found: LeaveOneOut) -> WithoutEach:
    def column(name: str) -> Codes:
        return np.array([getattr(left.coefficient, name) for left in found.without], dtype=np.int64)

    return WithoutEach(column("numerator"), column("x_square"), column("y_square"))

"""What a requirement check is: one thing the method needs, looked at for one association.

A check sees the screened rows and the plan, never a coefficient: its outcome may be shown before any joint
result is known.  The one exception, the shape look, says so in its own file.
"""

from collections.abc import Callable
from dataclasses import dataclass, replace
from decimal import Decimal
from fractions import Fraction
from typing import Literal

from rankdocket.analysis.filing import filed_beside
from rankdocket.analysis.results import CheckOutcome, Measure, Screened
from rankdocket.references import Description
from rankdocket.study.spec import StudySpec
from rankdocket.vocabulary import Direction, WaivableCheck


@dataclass(frozen=True, slots=True)
class Check:
    """One requirement.

    Attributes
    ----------
    key
        Stable identifier.
    label
        As it stands in the table of requirements.
    demand
        What the method needs, in one sentence.
    joint
        True when the check looks at both variables together, so that a screening must not show it.
    examine
        The check itself.
    waived_as
        The word by which a plan may waive it; ``None`` for a check that withholds nothing, or may not be waived.
    """

    key: str
    label: str
    demand: Description
    joint: bool
    examine: Callable[[Screened, StudySpec], CheckOutcome]
    waived_as: WaivableCheck | None = None

    def outcome(self, screened: Screened, spec: StudySpec) -> CheckOutcome:
        """Return what it finds; where the plan waives it, it withholds nothing and keeps its state."""
        found = self.examine(screened, spec)
        reason = None if self.waived_as is None else screened.spec.waived.get(self.waived_as)
        if reason is None or found.state not in ("not met", "doubtful"):
            return found
        return replace(found, withholds="nothing", waived=reason)


def direction_of(screened: Screened, spec: StudySpec) -> Direction:
    """Return the tail that the plan asks for: both, or the one of the expected sign."""
    if spec.inference.sidedness == "two-sided":
        return "two-sided"
    return "greater" if screened.spec.hypothesis.expected_sign == "positive" else "less"


def withheld_by(spec: StudySpec) -> Literal["nothing", "test", "all"]:
    """Return what the plan withholds when a requirement with a limit is not met."""
    match spec.requirements.if_not_met:
        case "estimate without test":
            return "test"
        case "withhold all":
            return "all"
        case "test with caveat":
            return "nothing"


def count(value: int) -> Measure:
    """Return a whole number as a measure."""
    return Measure(str(value), "count")


def share(part: int, of: int) -> Measure:
    """Return ``part`` out of ``of`` as a measure; the fraction is not reduced, so that both can be read back."""
    return Measure(f"{part}/{of}", "share")


def limit_share(value: Decimal) -> Measure:
    """Return a limit of the plan between 0 and 1 as a measure."""
    return Measure(str(value), "percent")


def p_measure(value: Fraction, level: Decimal) -> Measure:
    """Return a p-value as a measure that stays on its own side of the level it is held against."""
    return Measure(filed_beside(value, level), "p")


def level_measure(level: Decimal) -> Measure:
    """Return a level as the plan states it."""
    return Measure(str(level), "p")

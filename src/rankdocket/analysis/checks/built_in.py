"""Whether one of the two variables was worked out from the other, or both from the same: an association built in."""

from typing import Final

from rankdocket.analysis.check import Check, withheld_by
from rankdocket.analysis.results import CheckOutcome, Screened
from rankdocket.references import Description
from rankdocket.study.derivation import shared_origins
from rankdocket.study.spec import StudySpec

KEY: Final = "built_in"


def examine(screened: Screened, spec: StudySpec) -> CheckOutcome:
    """Follow what the plan says of the origin of both variables; silence about both is not an answer."""
    x, y = screened.spec.x, screened.spec.y
    if all(spec.variables[name].derived_from is None for name in (x, y)):
        return CheckOutcome(
            KEY, "not examined", None, None, "the plan does not say from what the variables were worked out"
        )
    shared = shared_origins(spec, x, y)
    if not shared:
        return CheckOutcome(KEY, "met", None, None, "nothing that the plan declares is common to both variables")
    if {x, y} & set(shared):
        reason = "one of the variables was worked out from the other"
    else:
        reason = "both variables were worked out from the same"
    return CheckOutcome(KEY, "not met", None, None, reason, withheld_by(spec))


CHECK = Check(
    key=KEY,
    label="Separate origins",
    demand=Description(
        "By what the plan says of their origin, neither variable might have been worked out from the other, nor both "
        "from the same: a common denominator, a change held against its own baseline and a part held against its whole "
        "bring an association of their own.",
        ("pearson1897", "oldham1962"),
    ),
    joint=False,
    examine=examine,
    waived_as="built-in association",
)

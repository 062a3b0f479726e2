"""The catalogue of requirement checks, in report order."""

from typing import Final

from rankdocket.analysis.check import Check
from rankdocket.analysis.checks import (
    attainable_p,
    built_in,
    enough_rows,
    independence,
    missing_share,
    not_constant,
    shape,
    tie_share,
)

CHECKS: Final[tuple[Check, ...]] = (
    enough_rows.CHECK,
    missing_share.CHECK,
    not_constant.CHECK,
    tie_share.CHECK,
    attainable_p.CHECK,
    independence.CHECK,
    built_in.CHECK,
    shape.CHECK,
)

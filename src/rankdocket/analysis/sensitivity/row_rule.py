"""What a rule of the sensitivity table is: one thing done otherwise, for one association."""

from collections.abc import Callable
from dataclasses import dataclass

from rankdocket.analysis.sensitivity.subject import Subject
from rankdocket.analysis.sensitivity.table import TableRow


@dataclass(frozen=True, slots=True)
class RowRule:
    """One kind of rows.

    Attributes
    ----------
    key
        Stable identifier.
    make
        The rows; none where the rule has nothing to do.
    """

    key: str
    make: Callable[[Subject], tuple[TableRow, ...]]

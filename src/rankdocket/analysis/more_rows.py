"""Rows complete for more than two variables, and what may be said about them."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from rankdocket.analysis.check import withheld_by
from rankdocket.analysis.more_results import Absent
from rankdocket.analysis.results import AssociationAnalysis, NotEstimable, Screened, Withheld
from rankdocket.stats.coefficient import FEWEST_ROWS
from rankdocket.stats.ranks import Codes, dense_codes
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData, Table

TOO_FEW: Final = "too few rows"
NOT_VARYING: Final = "a variable has one value in these rows"
OTHER: Final = " (the association compared with)"


@dataclass(frozen=True, slots=True)
class TableRows:
    """The complete rows of an association as positions in its table."""

    data: StudyData
    table: Table
    positions: tuple[int, ...]

    @classmethod
    def of(cls, screened: Screened, data: StudyData) -> "TableRows":
        """Return the complete rows of an association."""
        table = data.tables[data.variables[screened.spec.x].spec.table]
        place = {line: position for position, line in enumerate(table.row_numbers)}
        return cls(data, table, tuple(place[row.row] for row in screened.rows))

    def complete_for(self, variables: Sequence[str]) -> tuple[int, ...]:
        """Return the positions of rows in which none of the variables is missing."""
        values = [self.data.variables[variable].values for variable in variables]
        return tuple(at for at in self.positions if all(column[at] is not None for column in values))

    def codes(self, variable: str, positions: Sequence[int]) -> Codes:
        """Return a variable as codes, ranked among these rows alone."""
        column = self.data.variables[variable].values
        return dense_codes([value for at in positions if (value := column[at]) is not None])

    def lines(self, positions: Sequence[int]) -> tuple[int, ...]:
        """Return the lines of the file at which the positions stand."""
        return tuple(self.table.row_numbers[at] for at in positions)


def no_estimate(results: tuple[AssociationAnalysis, ...], n: int, spec: StudySpec) -> Absent | None:
    """Return why no estimate can stand here: that of an association, or too few rows that are complete for all."""
    absent = absent_estimate(results)
    if absent is not None:
        return absent
    if n < FEWEST_ROWS:
        return Absent("not estimable", "fewer than three rows are complete for all variables")
    return Absent("withheld", TOO_FEW) if _are_few(n, spec) and withheld_by(spec) == "all" else None


def no_inference(results: tuple[AssociationAnalysis, ...], n: int, spec: StudySpec) -> Absent | None:
    """Return why p and interval may not be given: that of a test, or too few rows that are complete for all."""
    withheld = withheld_test(results)
    if withheld is not None:
        return withheld
    return Absent("withheld", TOO_FEW) if _are_few(n, spec) and withheld_by(spec) != "nothing" else None


def _are_few(n: int, spec: StudySpec) -> bool:
    return n < spec.requirements.fewest_complete_rows


def absent_estimate(results: tuple[AssociationAnalysis, ...]) -> Absent | None:
    """Return why an association, the first that has none, has no estimate."""
    for place, result in enumerate(results):
        match result.estimate:
            case NotEstimable(reason):
                return Absent("not estimable", _of(place, reason))
            case Withheld(reason):
                return Absent("withheld", _of(place, reason))
            case _:
                continue
    return None


def withheld_test(results: tuple[AssociationAnalysis, ...]) -> Absent | None:
    """Return why the test of an association, the first concerned, is withheld."""
    for place, result in enumerate(results):
        if isinstance(result.test, Withheld):
            return Absent("withheld", _of(place, result.test.reason))
    return None


def _of(place: int, reason: str) -> str:
    return f"{reason}{OTHER}" if place else reason

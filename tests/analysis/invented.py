"""Invented studies for the tests of three rooms, written as a user would write them: a spec and a data file as text."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from functools import cache
from pathlib import Path

from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.results import Analysis
from rankdocket.study.reader import read_spec
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData
from rankdocket.study.tables import read_table
from rankdocket.study.variables import read_variables

STUDIES = Path(__file__).resolve().parents[2] / "studies"
DEMONSTRATIONS = ("first-look", "gasket-creep", "weld-smoke", "two-kilns")

INDEPENDENT = "repeated_within: not applicable, time_order: not applicable"
NO_LIMITS = "fewest_complete_rows: 3, most_missing: 1, most_tied: 1"
MISSING = "-"
"""How an invented file writes that a value is missing."""

RISING = "1 2 3 4 5 6 7 8 9 10"
FALLING = "10 9 8 7 6 5 4 3 2 1"
MIXED = "4 7 1 9 3 10 2 6 8 5"
"""Ten values that stand in no direction with RISING: a two-sided p far above any alpha."""


def association(
    first: str = "u", second: str = "v", *, role: str = "primary", sign: str = "positive", more: str = ""
) -> str:
    """Return one entry of associations."""
    size = f", {more}" if more.startswith(("smallest_of_interest", "null_value")) else ""
    rest = f", {more}" if more and not size else ""
    return (
        f"{{between: [{first}, {second}], question: Do {first} and {second} rise together?, role: {role}, "
        f"hypothesis: {{expected_sign: {sign}{size}}}{rest}}}"
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class Invented:
    """A study of one table; every part but the columns may be left as it is.

    Attributes
    ----------
    columns
        Column and variable name → its cells between blanks; ``-`` is the missing code, "not measured".
    associations
        Name → the text of its entry.
    variables
        Variable name → the text of its keys but the column, where it is not simply measured.
    rows, inference, requirements, report, study
        The keys of these parts, in one line.
    """

    columns: Mapping[str, str] = field(default_factory=lambda: {"u": RISING, "v": RISING})
    associations: Mapping[str, str] = field(default_factory=lambda: {"A1": association()})
    variables: Mapping[str, str] = field(default_factory=dict)
    rows: str = INDEPENDENT
    inference: str = "alpha: 0.05"
    requirements: str = NO_LIMITS
    report: str = "marking: Invented"
    study: str = "title: An invented study, question: Do they rise together?"

    def spec_text(self) -> str:
        """Return the spec."""
        measured = "scale: measured, unit: mm"
        variables = {name: self.variables.get(name, f"label: value of {name}, {measured}") for name in self.columns}
        return "\n".join(
            (
                f'study: {{number: "IN-1", client: Nobody, {self.study}}}',
                f'data: {{trials: {{file: received/trials.csv, missing_codes: {{"{MISSING}": not measured}}}}}}',
                f"rows: {{one_row_is: one trial, {self.rows}}}",
                "variables:",
                *(f"  {name}: {{column: {name}, {keys}}}" for name, keys in variables.items()),
                "associations:",
                *(f"  {name}: {keys}" for name, keys in self.associations.items()),
                f"inference: {{{self.inference}}}",
                f"requirements: {{{self.requirements}}}",
                f"report: {{{self.report}}}",
            )
        )

    def data_text(self) -> str:
        """Return the data file."""
        columns = [cells.split() for cells in self.columns.values()]
        lines = [",".join(self.columns), *(",".join(row) for row in zip(*columns, strict=True))]
        return "".join(f"{line}\n" for line in lines)

    def read(self) -> tuple[StudySpec, StudyData]:
        """Return the study as the program reads it."""
        return read_texts(self.spec_text(), {"received/trials.csv": self.data_text()})

    def analysed(self) -> Analysis:
        """Return everything the program finds."""
        return analyse(*self.read())


def read_texts(spec_text: str, files: Mapping[str, str]) -> tuple[StudySpec, StudyData]:
    """Read a study from the text of its spec and of its data files."""
    spec = read_spec(spec_text, "study.yaml")
    tables = {name: read_table(files[data.file].encode(), data) for name, data in spec.data.items()}
    return spec, StudyData(tables, read_variables(spec, tables))


def demonstration_texts(name: str) -> tuple[str, dict[str, str]]:
    """Return the spec and the data files of a demonstration study."""
    folder = STUDIES / name
    received = folder / "received"
    files = {path.relative_to(folder).as_posix(): path.read_text("utf-8") for path in received.rglob("*.csv")}
    return (folder / "study.yaml").read_text("utf-8"), files


@cache
def demonstration(name: str) -> Analysis:
    """Return the analysis of a demonstration study."""
    return analyse(*read_texts(*demonstration_texts(name)))

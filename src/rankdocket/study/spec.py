"""A study's spec as frozen values: what was asked, in the words of the spec, nothing computed.

Each part keeps the :class:`~rankdocket.errors.Place` it was read from, so that a fault found much later (a
missing column, a cell that is not a number) can still name the line of the spec that promised otherwise.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

from rankdocket.errors import Place
from rankdocket.vocabulary import (
    Adjustment,
    Claim,
    CoefficientName,
    ExpectedSign,
    Family,
    IfNotMet,
    IntervalAdjustment,
    IntervalBy,
    NumberStyle,
    PBy,
    Reader,
    Role,
    Scale,
    Sidedness,
    Signature,
    WaivableCheck,
)


@dataclass(frozen=True, slots=True)
class Person:
    """Somebody named in the spec; the program cannot check who they are."""

    name: str
    role: str | None


@dataclass(frozen=True, slots=True)
class StudySection:
    """``study``: what the investigation is and who stands for it."""

    number: str
    title: str
    client: str
    question: str
    population: str | None
    rows_were_fixed_by: str | None
    prepared_by: Person | None
    checked_by: Person | None
    released_by: Person | None
    place: Place


@dataclass(frozen=True, slots=True)
class DataSpec:
    """One entry of ``data``: a delimited text file and how it is to be read.

    Attributes
    ----------
    name
        The key under ``data``; names the table.
    file
        Path as written, relative to the spec's folder.
    missing_codes
        Literal cell text → what it means.  Only these are missing; there is no built-in list.
    column_names_in_row, units_in_row, first_data_row, last_data_row
        Line numbers of the file, counted from 1; ``units_in_row`` and ``last_data_row`` may be absent.
    """

    name: str
    file: str
    separator: str
    decimal_mark: str
    thousands_mark: str | None
    text_encoding: str
    comment_mark: str | None
    column_names_in_row: int
    units_in_row: int | None
    first_data_row: int
    last_data_row: int | None
    missing_codes: Mapping[str, str]
    received_on: str | None
    received_from: str | None
    place: Place


@dataclass(frozen=True, slots=True)
class LeaveOutSpec:
    """Rows that the plan leaves out, or calls suspicious: those in which all the named columns hold the given text."""

    where: Mapping[str, str]
    reason: str
    place: Place


@dataclass(frozen=True, slots=True)
class RowsSpec:
    """``rows``: what one row is and whether rows stand in one another's way.

    ``repeated_within`` and ``time_order`` hold a column name, the words "not applicable", or ``None`` when the
    spec is silent, which is not an answer.  Rows that are ``suspicious`` stay in the analysis; a sensitivity table looks
    at it without them.
    """

    one_row_is: str
    repeated_within: str | None
    time_order: str | None
    independent_because: str | None
    leave_out: tuple[LeaveOutSpec, ...]
    place: Place
    suspicious: tuple[LeaveOutSpec, ...] = ()

    @property
    def declared_independent(self) -> bool:
        """True when the spec answers both questions with "not applicable" or states why rows are independent."""
        answered = self.repeated_within == "not applicable" and self.time_order == "not applicable"
        return answered or (self.independent_because is not None and not self.declared_dependent)

    @property
    def declared_dependent(self) -> bool:
        """True when the spec names a column within which rows repeat, or one that gives their order in time."""
        return any(answer not in (None, "not applicable") for answer in (self.repeated_within, self.time_order))


@dataclass(frozen=True, slots=True)
class VariableSpec:
    """One entry of ``variables``: a column of a table and what its cells mean.

    Attributes
    ----------
    name
        The key under ``variables``.
    table, column
        The ``data`` entry and the column's name in it.
    lowest_to_highest
        The labels of an ordered (or two-valued) variable from lowest to highest; empty for numbers.
    other_spellings
        Label as it may stand in the file → label of ``lowest_to_highest``.
    missing_codes
        Codes of this column alone, beside those of its table.
    derived_from
        Names of variables, or of columns of its table, from which it was worked out; empty when the spec says that it
        was not worked out from anything, ``None`` when it is silent.
    """

    name: str
    table: str
    column: str
    label: str
    unit: str | None
    scale: Scale
    lowest_to_highest: tuple[str, ...]
    other_spellings: Mapping[str, str]
    missing_codes: Mapping[str, str]
    derived_from: tuple[str, ...] | None
    place: Place


@dataclass(frozen=True, slots=True)
class HypothesisSpec:
    """What was expected in advance.

    Attributes
    ----------
    expected_sign
        With a null value, the side of it on which the coefficient is expected.
    smallest_of_interest
        Absolute, above 0, below 1.
    claim
        What the finding is about: any association; a size above ``smallest_of_interest``, or within it.
    null_value
        The value that the finding is about, above −1, below 1; with the claim "any" only.
    """

    expected_sign: ExpectedSign
    smallest_of_interest: Decimal | None
    claim: Claim
    null_value: Decimal | None


@dataclass(frozen=True, slots=True)
class GroupsSpec:
    """Groups of rows by the text of ``column``; ``compared`` holds two of its texts or nothing."""

    column: str
    compared: tuple[str, ...]
    place: Place


@dataclass(frozen=True, slots=True)
class AssociationSpec:
    """One entry of ``associations``; the first variable of ``between`` is the horizontal axis.

    Attributes
    ----------
    waived
        Each requirement that the plan waives, with the written reason.
    covariates
        Variables of the same table that a partial rank correlation holds fixed; empty when none is asked for.
    compare_with
        Another association of the same table, whose coefficient is compared on the same rows.
    groups
        Groups of rows that are looked at one by one.
    """

    name: str
    x: str
    y: str
    question: str
    role: Role
    hypothesis: HypothesisSpec
    coefficient: CoefficientName
    waived: Mapping[WaivableCheck, str]
    place: Place
    covariates: tuple[str, ...] = ()
    compare_with: str | None = None
    groups: GroupsSpec | None = None


@dataclass(frozen=True, slots=True)
class SeveralTestsSpec:
    """How the p-values of the family are adjusted, and which associations are the family."""

    adjust: Adjustment
    among: Family
    reason: str | None


@dataclass(frozen=True, slots=True)
class BudgetSpec:
    """What an exact null may be forecast to cost: processor seconds (above 0) and bytes of memory (above 0)."""

    seconds: Decimal
    memory: int


@dataclass(frozen=True, slots=True)
class PValueSpec:
    """How p is got.

    ``seed`` may be absent as long as no draw is needed; ``most_draws`` is at least ``permutations``.
    """

    by: PBy
    permutations: int
    most_draws: int
    seed: int | None
    budget: BudgetSpec


@dataclass(frozen=True, slots=True)
class IntervalSpec:
    """How intervals are computed, what those of the family are adjusted for, and resamples where a rule draws."""

    by: IntervalBy
    adjusted: IntervalAdjustment
    resamples: int


@dataclass(frozen=True, slots=True)
class InferenceSpec:
    """``inference``: the decision rule of the study."""

    alpha: Decimal
    sidedness: Sidedness
    confidence_level: Decimal
    planned_power: Decimal
    interval: IntervalSpec
    several_tests: SeveralTestsSpec
    p_value: PValueSpec
    place: Place


@dataclass(frozen=True, slots=True)
class RequirementsSpec:
    """``requirements``: limits and what follows when one is not met.  Shares are 0 to 1."""

    fewest_complete_rows: int
    most_missing: Decimal
    most_tied: Decimal
    if_not_met: IfNotMet
    place: Place


@dataclass(frozen=True, slots=True)
class ReportSpec:
    """``report``: for whom, with how many decimals, and the furniture of the pages."""

    readers: tuple[Reader, ...]
    coefficient_decimals: int
    p_value_decimals: int
    number_style: NumberStyle
    marking: str | None
    distribution: tuple[str, ...]
    signatures: tuple[Signature, ...]
    place: Place


@dataclass(frozen=True, slots=True)
class StudySpec:
    """A whole spec.  Mappings keep the order of the file."""

    study: StudySection
    data: Mapping[str, DataSpec]
    rows: RowsSpec
    variables: Mapping[str, VariableSpec]
    associations: Mapping[str, AssociationSpec]
    inference: InferenceSpec
    requirements: RequirementsSpec
    report: ReportSpec

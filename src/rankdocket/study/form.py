"""The shape of the YAML: which keys there are, what each means, what it takes; the JSON Schema comes from it.

The forms hold what stands in the file, key by key.  What needs two keys at once is in
:mod:`rankdocket.study.consistency`, the way to the frozen values in :mod:`rankdocket.study.conversion`.
"""

from decimal import Decimal
from typing import Annotated, Final

from pydantic import BaseModel, ConfigDict, Field
from pydantic.config import JsonDict

from rankdocket.study import kinds
from rankdocket.study.signed_number import SignedNumber
from rankdocket.vocabulary import (
    ADJUSTMENTS,
    CLAIMS,
    COEFFICIENTS,
    EXPECTED_SIGNS,
    FAMILIES,
    IF_NOT_MET,
    INTERVAL_ADJUSTMENTS,
    INTERVAL_BY,
    NUMBER_STYLES,
    P_BY,
    READERS,
    ROLES,
    SCALES,
    SIDEDNESS,
    SIGNATURES,
    WAIVABLE_CHECKS,
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
)

NAME_PATTERN: Final = "[A-Za-z][A-Za-z0-9_-]*"
TRAP_WORDS: Final = ("on", "off", "yes", "no", "y", "n", "null", "true", "false")
"""Words that readers of YAML 1.1 take for true, false or nothing; no name and no key may be one of them."""

ENCODINGS: Final = ("utf-8", "windows-1252", "latin-1", "iso-8859-1", "utf-16")
SEPARATORS: Final = (",", ";", "\t", "|")
TAB_WORD: Final = "tab"
DECIMAL_MARKS: Final = (".", ",")
THOUSANDS_MARKS: Final = (",", ".", " ", "'", "\u2019", "\u00a0", "\u202f")

LAST_ROW: Final = 100_000_000
MOST_PERMUTATIONS: Final = 10_000_000
FEWEST_PERMUTATIONS: Final = 999
FEWEST_RESAMPLES: Final = 999
MOST_RESAMPLES: Final = 1_000_000
MOST_SECONDS: Final = Decimal(86_400)
MOST_MEMORY: Final = 64 * 2**30
LARGEST_SEED: Final = 2**63 - 1
MOST_DECIMALS: Final = 6
SMALLEST_N: Final = 3
"""With two complete rows rho can only be +1 or -1."""

_ZERO, _HALF, _ONE = Decimal(0), Decimal("0.5"), Decimal(1)

Prose = Annotated[str, kinds.Prose()]
OptionalProse = Annotated[str | None, kinds.Prose()]
RowNumber = Annotated[int, kinds.WholeNumber(1, LAST_ROW)]
OptionalRowNumber = Annotated[int | None, kinds.WholeNumber(1, LAST_ROW)]
Share = Annotated[Decimal, kinds.DecimalNumber(_ZERO, _ONE)]
Decimals = Annotated[int, kinds.WholeNumber(2, MOST_DECIMALS)]
_Names: Final[JsonDict] = {
    "propertyNames": {"pattern": f"^{NAME_PATTERN}$", "not": {"pattern": f"^(?:{'|'.join(TRAP_WORDS)})$"}},
    "minProperties": 1,
}


class Form(BaseModel):
    """Keys of one part of the spec; a key that is not listed is refused."""

    model_config = ConfigDict(extra="forbid", frozen=True)


class PersonForm(Form):
    """Somebody who stands for the study."""

    name: Prose = Field(description="Name of the person, printed as written.")
    role: OptionalProse = Field(default=None, description="What the person does in the study.")


class StudyForm(Form):
    """What the investigation is and who stands for it."""

    number: Prose = Field(description="Number of the study in the office's own counting.")
    title: Prose = Field(description="Title of the report.")
    client: Prose = Field(description="For whom the study is made.")
    question: Prose = Field(description="The question of the study, as one sentence.")
    population: OptionalProse = Field(default=None, description="What the rows are taken to stand for.")
    rows_were_fixed_by: OptionalProse = Field(default=None, description="How and by whom the number of rows was fixed.")
    prepared_by: PersonForm | None = Field(default=None, description="Who prepared the report.")
    checked_by: PersonForm | None = Field(default=None, description="Who checked it.")
    released_by: PersonForm | None = Field(default=None, description="Who released it.")


class DataForm(Form):
    """A delimited text file and how it is to be read."""

    file: Annotated[str, kinds.FolderPath()] = Field(description="Path of the file from the folder of the spec.")
    separator: Annotated[str, kinds.Mark(SEPARATORS, ((TAB_WORD, "\t"),))] = Field(
        default=",", description="Character between two fields; tab may be written as a word."
    )
    decimal_mark: Annotated[str, kinds.Mark(DECIMAL_MARKS)] = Field(
        default=".", description="Mark before the decimals."
    )
    thousands_mark: Annotated[str | None, kinds.Mark(THOUSANDS_MARKS)] = Field(
        default=None, description="Mark between groups of three digits; left out when the file has none."
    )
    text_encoding: Annotated[str, kinds.OneOf(ENCODINGS)] = Field(
        default="utf-8", description="How bytes stand for text."
    )
    comment_mark: Annotated[str | None, kinds.CommentMark()] = Field(
        default=None, description="A line that begins with this mark is not data."
    )
    column_names_in_row: RowNumber = Field(default=1, description="Line of the column names, counted from 1.")
    units_in_row: OptionalRowNumber = Field(default=None, description="Line of the units, if the file has one.")
    first_data_row: OptionalRowNumber = Field(
        default=None, description="First line of data; the line after names and units when left out."
    )
    last_data_row: OptionalRowNumber = Field(
        default=None, description="Last line of data; the end of the file when left out."
    )
    missing_codes: Annotated[dict[str, str], kinds.MissingCodes()] = Field(
        description="Cell texts that mean missing: a list, or each with its meaning. [] when there are none."
    )
    received_on: Annotated[str | None, kinds.IsoDate()] = Field(default=None, description="Day the file arrived.")
    received_from: OptionalProse = Field(default=None, description="Who sent the file.")


class LeaveOutForm(Form):
    """Rows that the plan leaves out, or calls suspicious."""

    where: dict[str, Annotated[str, kinds.CellText()]] = Field(
        description="Column and cell text; a row is meant when all of them agree.",
        json_schema_extra={"minProperties": 1},
    )
    reason: Prose = Field(description="Why these rows are named; printed.")


class RowsForm(Form):
    """What one row is, and whether rows stand in one another's way."""

    one_row_is: Prose = Field(description="What one row is, as words that can follow 'one row is'.")
    repeated_within: OptionalProse = Field(
        default=None, description="Column within which rows repeat, or: not applicable. Silence is no answer."
    )
    time_order: OptionalProse = Field(
        default=None, description="Column that gives the order in time, or: not applicable. Silence is no answer."
    )
    independent_because: OptionalProse = Field(default=None, description="Why rows are independent; printed.")
    leave_out: tuple[LeaveOutForm, ...] = Field(default=(), description="Rows left out, each with its reason.")
    suspicious: tuple[LeaveOutForm, ...] = Field(
        default=(), description="Rows that stay in the analysis and without which it is looked at as well."
    )


class ColumnForm(Form):
    """Where a variable stands."""

    table: OptionalProse = Field(default=None, description="Entry of data; may be left out when there is one.")
    name: Prose = Field(description="Name of the column in the file.")


class VariableForm(Form):
    """A column and what its cells mean."""

    column: Annotated[ColumnForm, kinds.TableAndColumn()] = Field(
        description="Column name, or table / column, or {table, name}."
    )
    label: Prose = Field(description="Name of the variable in the report.")
    unit: OptionalProse = Field(default=None, description='Unit, required when measured; "1" for a pure number.')
    scale: Annotated[Scale, kinds.OneOf(SCALES)] = Field(description="What kind of values the column holds.")
    lowest_to_highest: tuple[Prose, ...] = Field(default=(), description="The labels from lowest to highest.")
    other_spellings: dict[str, Prose] = Field(
        default={}, description="Label as it may stand in the file, and what it means."
    )
    missing_codes: Annotated[dict[str, str], kinds.MissingCodes()] = Field(
        default={}, description="Cell texts that mean missing in this column alone."
    )
    derived_from: tuple[Prose, ...] | None = Field(
        default=None,
        description="What it was worked out from: names of variables, or of columns of its table. [] when from nothing "
        "else; silence is no answer.",
    )


class HypothesisForm(Form):
    """What was expected in advance."""

    expected_sign: Annotated[ExpectedSign, kinds.OneOf(EXPECTED_SIGNS)] = Field(description="Expected direction.")
    smallest_of_interest: Annotated[Decimal | None, kinds.Size(_ZERO, _ONE, (_ZERO, _ONE))] = Field(
        default=None, description="Smallest size of the coefficient that matters, without sign."
    )
    claim: Annotated[Claim, kinds.OneOf(CLAIMS)] = Field(
        default="any",
        description="What the finding is about: any association; a coefficient above, or within plus or minus, "
        "smallest_of_interest.",
    )
    null_value: Annotated[Decimal | None, SignedNumber(-_ONE, _ONE, (-_ONE, _ONE))] = Field(
        default=None,
        description="Value of rho to be tested; the finding is then about it, and expected_sign names the side of it.",
    )


class GroupsForm(Form):
    """Groups of rows by the text of a column."""

    column: Prose = Field(
        description="Column of the same table; its text, as received, says to which group a row goes."
    )
    compared: tuple[Prose, ...] = Field(
        default=(), min_length=2, max_length=2, description="Two groups whose coefficients are compared."
    )


class AssociationForm(Form):
    """Two variables examined together."""

    between: tuple[Prose, ...] = Field(
        min_length=2, max_length=2, description="Two entries of variables; the first is the horizontal axis."
    )
    question: Prose = Field(description="The question of this association, as one sentence.")
    role: Annotated[Role, kinds.OneOf(ROLES)] = Field(description="Its rank among the questions of the study.")
    hypothesis: HypothesisForm = Field(description="What was expected in advance.")
    coefficient: Annotated[CoefficientName, kinds.OneOf(COEFFICIENTS)] = Field(
        default="Spearman rho", description="The rank coefficient."
    )
    covariates: tuple[Prose, ...] = Field(
        default=(), min_length=1, description="Other variables that a partial rank correlation holds fixed."
    )
    compare_with: OptionalProse = Field(
        default=None, description="Another association of the same table, whose rho is compared on the same rows."
    )
    groups: GroupsForm | None = Field(default=None, description="Groups of rows that are looked at one by one.")
    waived: dict[str, Prose] = Field(
        default={},
        description="Requirements that the plan waives for it, each with the written reason; printed.",
        json_schema_extra={"propertyNames": {"enum": list(WAIVABLE_CHECKS)}},
    )


class SeveralTestsForm(Form):
    """How p is adjusted for several tests."""

    adjust: Annotated[Adjustment, kinds.OneOf(ADJUSTMENTS)] = Field(
        default="Holm",
        description="The adjustment. Holm, Hochberg, Bonferroni and step-down maxT bound the chance of any false finding, "
        "Benjamini-Hochberg and Benjamini-Yekutieli the expected share of false ones among the findings.",
    )
    among: Annotated[Family, kinds.OneOf(FAMILIES)] = Field(
        default="primary", description="Which associations are the family."
    )
    reason: OptionalProse = Field(default=None, description="Why nothing is adjusted; required then.")


class BudgetForm(Form):
    """What an exact p may cost."""

    seconds: Annotated[Decimal, kinds.DecimalNumber(_ZERO, MOST_SECONDS, (_ZERO,))] = Field(
        default=Decimal(10), description="Processor seconds that an exact p may be forecast to take."
    )
    memory: Annotated[int, kinds.Memory(MOST_MEMORY)] = Field(
        default=2**30, description="Memory that an exact p may be forecast to take, such as 512 MiB or 1 GiB."
    )


class PValueForm(Form):
    """How p is computed."""

    by: Annotated[PBy, kinds.OneOf(P_BY)] = Field(default="exact when possible", description="The way to p.")
    permutations: Annotated[int, kinds.WholeNumber(FEWEST_PERMUTATIONS, MOST_PERMUTATIONS)] = Field(
        default=99_999, description="Random permutations drawn where p is not exact."
    )
    most_draws: Annotated[int | None, kinds.WholeNumber(FEWEST_PERMUTATIONS, MOST_PERMUTATIONS)] = Field(
        default=None,
        description="Ceiling up to which more are drawn while the error of the draws leaves the side of alpha open; "
        "ten times permutations by default.",
    )
    budget: BudgetForm = Field(default_factory=BudgetForm, description="What an exact p may cost.")
    seed: Annotated[int | None, kinds.WholeNumber(0, LARGEST_SEED)] = Field(
        default=None, description="Whole number from which random draws start; needed when permutations are drawn."
    )


class IntervalForm(Form):
    """How intervals are computed."""

    by: Annotated[IntervalBy, kinds.OneOf(INTERVAL_BY)] = Field(
        default="guarded jackknife", description="The interval rule."
    )
    adjusted: Annotated[IntervalAdjustment, kinds.OneOf(INTERVAL_ADJUSTMENTS)] = Field(
        default="none", description="What the intervals of the family are adjusted for."
    )
    resamples: Annotated[int, kinds.WholeNumber(FEWEST_RESAMPLES, MOST_RESAMPLES)] = Field(
        default=9_999, description="Resamples of the rows drawn for the BCa bootstrap."
    )


class InferenceForm(Form):
    """The decision rule of the study."""

    alpha: Annotated[Decimal, kinds.DecimalNumber(_ZERO, _HALF, (_ZERO,))] = Field(
        description="Largest p at which an association counts as shown."
    )
    sidedness: Annotated[Sidedness, kinds.OneOf(SIDEDNESS)] = Field(
        default="two-sided", description="Tails of the test."
    )
    confidence_level: Annotated[Decimal, kinds.DecimalNumber(_HALF, _ONE, (_ONE,))] = Field(
        default=Decimal("0.95"), description="Level of the intervals."
    )
    planned_power: Annotated[Decimal, kinds.DecimalNumber(_HALF, _ONE, (_HALF, _ONE))] = Field(
        default=Decimal("0.80"),
        description="Probability with which the smallest detectable coefficient is to be found.",
    )
    interval: IntervalForm = Field(default_factory=IntervalForm, description="How intervals are computed.")
    several_tests: SeveralTestsForm = Field(
        default_factory=SeveralTestsForm, description="Adjustment for several tests."
    )
    p_value: PValueForm = Field(default_factory=PValueForm, description="How p is computed.")


class RequirementsForm(Form):
    """Limits, and what follows when one is not met."""

    fewest_complete_rows: Annotated[int, kinds.WholeNumber(SMALLEST_N, LAST_ROW)] = Field(
        default=5, description="Fewest complete rows of an association."
    )
    most_missing: Share = Field(default=Decimal("0.20"), description="Largest share of missing values, 0 to 1.")
    most_tied: Share = Field(default=Decimal("0.50"), description="Largest share of tied values, 0 to 1.")
    if_not_met: Annotated[IfNotMet, kinds.OneOf(IF_NOT_MET)] = Field(
        default="estimate without test", description="What follows when a requirement is not met."
    )


class DecimalsForm(Form):
    """Printed decimals."""

    coefficient: Decimals = Field(default=2, description="Decimals of a coefficient.")
    p_value: Decimals = Field(default=3, description="Decimals of p.")


class ReportForm(Form):
    """For whom the report is, and the furniture of its pages."""

    readers: tuple[Annotated[Reader, kinds.OneOf(READERS)], ...] = Field(
        default=("client", "reviewer"), min_length=1, description="For whom the report is written."
    )
    decimals: DecimalsForm = Field(default_factory=DecimalsForm, description="Printed decimals.")
    number_style: Annotated[NumberStyle, kinds.OneOf(NUMBER_STYLES)] = Field(
        default="leading zero", description="How a number below 1 is printed."
    )
    marking: OptionalProse = Field(default=None, description="Confidentiality line of every page.")
    distribution: tuple[Prose, ...] = Field(default=(), description="Who receives the report.")
    signatures: tuple[Annotated[Signature, kinds.OneOf(SIGNATURES)], ...] = Field(
        default=("prepared", "checked", "released"), description="Lines of the signature block."
    )


class SpecForm(Form):
    """The whole spec of a study."""

    study: StudyForm = Field(description="What the investigation is and who stands for it.")
    data: dict[str, DataForm] = Field(description="The data files, each under a name.", json_schema_extra=_Names)
    rows: RowsForm = Field(description="What one row is.")
    variables: dict[str, VariableForm] = Field(description="The variables by name.", json_schema_extra=_Names)
    associations: dict[str, AssociationForm] = Field(description="The associations by name.", json_schema_extra=_Names)
    inference: InferenceForm = Field(description="The decision rule of the study.")
    requirements: RequirementsForm = Field(
        default_factory=RequirementsForm, description="Limits, and what follows when one is not met."
    )
    report: ReportForm = Field(default_factory=ReportForm, description="How the report is made.")

"""The closed lists of the house: each word that a spec, a record and a report may use, once.

A ``Literal`` is the list for the type checker; the tuple beside it is the same list, in report order, for
schemas and messages.
"""

from typing import Final, Literal, TypeAlias, get_args

Scale: TypeAlias = Literal["measured", "count", "ordered", "already ranked", "two-valued"]
Role: TypeAlias = Literal["primary", "secondary", "exploratory"]
ExpectedSign: TypeAlias = Literal["positive", "negative", "either"]
Claim: TypeAlias = Literal["any", "above", "within"]
CoefficientName: TypeAlias = Literal["Spearman rho", "Kendall tau-b"]
Sidedness: TypeAlias = Literal["two-sided", "one-sided"]
Adjustment: TypeAlias = Literal[
    "Holm", "Hochberg", "Bonferroni", "Benjamini-Hochberg", "Benjamini-Yekutieli", "step-down maxT", "none"
]
Family: TypeAlias = Literal["primary", "primary and secondary", "all", "none"]
IntervalBy: TypeAlias = Literal[
    "guarded jackknife",
    "Bonett-Wright",
    "influence values",
    "BCa bootstrap",
    "Fieller-Hartley-Pearson",
    "Fisher z",
]
IntervalAdjustment: TypeAlias = Literal["none", "simultaneous", "after selection"]
PBy: TypeAlias = Literal["exact when possible", "permutation"]
IfNotMet: TypeAlias = Literal["estimate without test", "withhold all", "test with caveat"]
Reader: TypeAlias = Literal["client", "reviewer", "regulator", "court"]
Signature: TypeAlias = Literal["prepared", "checked", "released"]
NumberStyle: TypeAlias = Literal["leading zero", "no leading zero"]
WaivableCheck: TypeAlias = Literal["complete rows", "missing values", "ties", "built-in association"]

CheckState: TypeAlias = Literal["met", "doubtful", "not met", "not examined"]
FindingWord: TypeAlias = Literal["shown", "shown, opposite sign", "not shown", "withheld", "not estimable"]
Status: TypeAlias = Literal["draft", "for review", "issued", "superseded", "withdrawn"]
DecidingTest: TypeAlias = Literal["rank test", "null value", "above", "within"]
"""Whose p decides a finding: the test of independence, or the approximate test of a claim of the plan."""
Direction: TypeAlias = Literal["greater", "less", "two-sided"]

SCALES: Final = get_args(Scale)
ROLES: Final = get_args(Role)
EXPECTED_SIGNS: Final = get_args(ExpectedSign)
CLAIMS: Final = get_args(Claim)
COEFFICIENTS: Final = get_args(CoefficientName)
SIDEDNESS: Final = get_args(Sidedness)
ADJUSTMENTS: Final = get_args(Adjustment)
FAMILIES: Final = get_args(Family)
INTERVAL_BY: Final = get_args(IntervalBy)
INTERVAL_ADJUSTMENTS: Final = get_args(IntervalAdjustment)
P_BY: Final = get_args(PBy)
IF_NOT_MET: Final = get_args(IfNotMet)
READERS: Final = get_args(Reader)
SIGNATURES: Final = get_args(Signature)
NUMBER_STYLES: Final = get_args(NumberStyle)
CHECK_STATES: Final = get_args(CheckState)
WAIVABLE_CHECKS: Final = get_args(WaivableCheck)
FINDINGS: Final = get_args(FindingWord)

FOR_BOTH: Final[tuple[IntervalBy, ...]] = ("guarded jackknife", "Fieller-Hartley-Pearson")
"""Words of the intervals that exist for either coefficient; the others are made for Spearman rho alone."""

SELECTING: Final = ("Benjamini-Hochberg", "Benjamini-Yekutieli")
"""Adjustments that keep a share of false findings, so that intervals can be adjusted for the selection they make."""

NOT_APPLICABLE: Final = "not applicable"
"""What a spec writes where a question about the rows does not arise; it is an answer, silence is not."""

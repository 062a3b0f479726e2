"""Requirement checks: one invented study for each outcome of each check of the catalogue."""

import ast
import inspect
import pkgutil
import sys
from dataclasses import dataclass, replace

import pytest

from analysis.invented import FALLING, INDEPENDENT, MISSING, MIXED, RISING, Invented, association
from rankdocket.analysis import checks
from rankdocket.analysis.check import Check
from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.results import CheckOutcome
from rankdocket.references import REFERENCES
from rankdocket.vocabulary import CHECK_STATES, CheckState

TWENTY = " ".join(str(place) for place in range(1, 21))
HILL = " ".join(str(10 - abs(place - 10)) for place in range(1, 21))
"""Twenty values that rise to the middle and fall again."""
NOTHING = " ".join([MISSING] * 10)
ALL_LEFT_OUT = INDEPENDENT + ", leave_out: [{where: {lab: Q}, reason: the laboratory was closed}]"

BASE = Invented()
SHORT = replace(BASE, columns={"u": "1 2 3 4", "v": "1 2 3 4"})
FIVE = replace(BASE, columns={"u": "1 2 3 4 5", "v": "1 2 3 4 5"})
GONE = replace(BASE, columns={"u": RISING, "v": RISING, "lab": "Q " * 10}, rows=ALL_LEFT_OUT)
GONE = replace(GONE, variables={"lab": "label: laboratory, scale: ordered, lowest_to_highest: [P, Q]"})
GAPS = replace(BASE, columns={"u": "1 2 - 4 5 6 7 8 9 10", "v": "1 2 - 4 - 6 7 8 9 10"})
TIED = replace(BASE, columns={"u": RISING, "v": "1 1 2 2 2 3 4 5 6 7"})


@dataclass(frozen=True, slots=True)
class Case:
    """A study and what one check must say of its association A1."""

    check: str
    study: Invented
    state: CheckState
    reason: str
    figures: tuple[str | None, str | None] = (None, None)
    """Limit and found."""
    withholds: str = "nothing"


FEWER = "fewer complete rows than the plan asks for"
DRAWN = "alpha: 0.05, p_value: {by: permutation, permutations: 999, most_draws: 999, seed: 5}"
LACK = "more rows lack a value than the plan allows"
CONSTANT = "a variable has one value in all complete rows"
SILENT = "the plan does not say whether rows are repeated or in time order"
REPEATED = "the plan declares rows repeated, and the test at hand exchanges single rows"
ORDERED = "the plan declares rows in time order, and the test at hand exchanges single rows"
DECLARED = "the plan declares the rows independent"
NO_ROW = "no complete row was left to look at"
REACHED = "alpha could be reached"
SHARED = "alpha could be reached, but not if every other test of the family failed"
ADJUSTED_UNREACHED = "no result of this plan with these rows could reach alpha once adjusted for the number of tests"
OPEN_TOGETHER = "alpha could be reached alone; whether beside the others of the family is open"
TOO_FEW_ADJUSTED = "the draws that the plan allows are too few for an adjusted p of alpha or less"
TOO_FEW_DRAWS = "the draws that the plan allows are too few for a p of alpha or less"
UNREACHED = "no result of this plan with these rows could reach alpha"
TOO_FEW = "too few rows for a look at two halves"
FLAT_HALF = "a variable is constant in one half of the rows"
ONE_WAY = "the two halves of x do not lean in opposite directions"
OPPOSED = "the direction in the lower half of x is opposite to that in the upper half"

UNTOLD = "the plan does not say from what the variables were worked out"
NOTHING_SHARED = "nothing that the plan declares is common to both variables"
OF_THE_OTHER = "one of the variables was worked out from the other"
OF_THE_SAME = "both variables were worked out from the same"

TWENTY_TWO = " ".join(str(place) for place in range(1, 23))
LEANS_BY_03 = (1, 6, 7, 4, 2, 8, 11, 10, 9, 5, 3)
"""Eleven places whose squared differences from 1 ... 11 sum to 154."""
LEANS_BY_029 = (3, 8, 7, 1, 5, 10, 4, 2, 11, 9, 6)
"""The same with a sum of 156."""


def bent(lower: tuple[int, ...], upper: tuple[int, ...]) -> str:
    """Return values that lean upwards as the first half does and then downwards as the second does."""
    return " ".join(str(value) for value in (*lower, *(12 - value for value in upper)))


def derived(**origins: str) -> Invented:
    """Return the base study with a third column and with what some variables were worked out from."""
    keys = {
        name: f"label: value of {name}, scale: measured, unit: mm, derived_from: {of}" for name, of in origins.items()
    }
    return replace(BASE, columns={**BASE.columns, "w": MIXED}, variables=keys)


def drawn_at(alpha: str) -> str:
    return DRAWN.replace("0.05", alpha)


def limits(fewest: int = 3, missing: str = "1", tied: str = "1", then: str = "estimate without test") -> str:
    return f"fewest_complete_rows: {fewest}, most_missing: {missing}, most_tied: {tied}, if_not_met: {then}"


def in_lab(rows: str) -> Invented:
    """Return the base study with one more column that a question about the rows can name."""
    keys = "label: laboratory, scale: ordered, lowest_to_highest: [P, Q]"
    return replace(BASE, columns={**BASE.columns, "lab": "P Q " * 5}, variables={"lab": keys}, rows=rows)


def of_five(tests: int, adjust: str) -> Invented:
    """Return a family of as many associations, all of the same five rows."""
    plan = {f"A{place}": association() for place in range(1, tests + 1)}
    return replace(FIVE, associations=plan, inference=f"alpha: 0.05, several_tests: {{adjust: {adjust}}}")


CASES = (
    Case("enough_rows", replace(BASE, requirements=limits(10)), "met", "the plan’s number was reached", ("10", "10")),
    Case("enough_rows", replace(BASE, requirements=limits(11)), "not met", FEWER, ("11", "10"), "test"),
    Case(
        "enough_rows",
        replace(BASE, requirements=limits(11, then="withhold all")),
        "not met",
        FEWER,
        ("11", "10"),
        "all",
    ),
    Case(
        "enough_rows", replace(BASE, requirements=limits(11, then="test with caveat")), "not met", FEWER, ("11", "10")
    ),
    Case(
        "missing_share",
        replace(GAPS, requirements=limits(missing="0.2")),
        "met",
        "within the plan’s limit",
        ("0.2", "2/10"),
    ),
    Case(
        "missing_share", replace(GAPS, requirements=limits(missing="0.19")), "not met", LACK, ("0.19", "2/10"), "test"
    ),
    Case(
        "missing_share",
        replace(GAPS, requirements=limits(missing="0.19", then="withhold all")),
        "not met",
        LACK,
        ("0.19", "2/10"),
        "all",
    ),
    Case(
        "missing_share",
        replace(GAPS, requirements=limits(missing="0.19", then="test with caveat")),
        "not met",
        LACK,
        ("0.19", "2/10"),
    ),
    Case("missing_share", GONE, "not examined", "no row was left to look at", ("1", None)),
    Case("not_constant", BASE, "met", "both variables vary", ("2", "10")),
    Case(
        "not_constant",
        replace(BASE, columns={"u": "1 1 1 2", "v": "1 2 3 4"}),
        "met",
        "both variables vary",
        ("2", "2"),
    ),
    Case("not_constant", replace(BASE, columns={"u": "7 7 7 7", "v": "1 2 3 4"}), "not met", CONSTANT, ("2", "1")),
    Case("not_constant", replace(BASE, columns={"u": "1 2 3 4", "v": "7 7.0 7 7"}), "not met", CONSTANT, ("2", "1")),
    Case("not_constant", replace(BASE, columns={"u": RISING, "v": NOTHING}), "not examined", NO_ROW, ("2", None)),
    Case(
        "tie_share", replace(TIED, requirements=limits(tied="0.5")), "met", "within the plan’s limit", ("0.5", "5/10")
    ),
    Case(
        "tie_share",
        replace(TIED, requirements=limits(tied="0.49")),
        "doubtful",
        "more rows share a value than the plan’s limit",
        ("0.49", "5/10"),
    ),
    Case("tie_share", GONE, "not examined", NO_ROW, ("1", None)),
    # Smallest two-sided p: n=4 1/12, n=5 1/60 (Kendall, Kendall & Babington Smith 1939).
    Case("attainable_p", FIVE, "met", REACHED, ("0.05", "0.0166666666667")),
    Case("attainable_p", SHORT, "not met", UNREACHED, ("0.05", "0.0833333333333")),
    Case(
        "attainable_p",
        replace(SHORT, inference="alpha: 0.05, sidedness: one-sided"),
        "met",
        REACHED,
        ("0.05", "0.0416666666667"),
    ),
    Case(
        "attainable_p",
        replace(FIVE, associations={f"A{place}": association() for place in range(1, 5)}),
        "doubtful",
        SHARED,
        ("0.05", "0.0166666666667"),
    ),
    # Three tests share 0.05: each could still reach 1/60, which is just enough.
    Case(
        "attainable_p",
        replace(FIVE, associations={f"A{place}": association() for place in range(1, 4)}),
        "met",
        REACHED,
        ("0.05", "0.0166666666667"),
    ),
    # One of 20 distinct orderings is the most extreme: 1/20 is alpha itself, and a p at alpha is shown.
    Case(
        "attainable_p",
        replace(FIVE, columns={"u": "1 2 3 4 5", "v": "1 1 1 2 3"}, inference="alpha: 0.05, sidedness: one-sided"),
        "met",
        REACHED,
        ("0.05", "0.05"),
    ),
    # No p from 999 draws lies below 1/1000 (Phipson & Smyth 2010), although 2/10! would be far below.
    Case("attainable_p", replace(BASE, inference=drawn_at("0.0009")), "not met", TOO_FEW_DRAWS, ("0.0009", "0.001")),
    Case("attainable_p", replace(BASE, inference=drawn_at("0.001")), "met", REACHED, ("0.001", "0.001")),
    Case(
        "attainable_p",
        replace(BASE, inference=drawn_at("0.0019"), associations={"A1": association(), "A2": association()}),
        "doubtful",
        SHARED,
        ("0.0019", "0.001"),
    ),
    # Where the ties allow less than the draws, the ties decide: 1/60 from 999 draws as from all orderings.
    Case("attainable_p", replace(FIVE, inference=DRAWN), "met", REACHED, ("0.05", "0.0166666666667")),
    Case(
        "attainable_p",
        replace(
            FIVE,
            associations={f"A{place}": association() for place in range(1, 5)},
            inference="alpha: 0.05, several_tests: {adjust: none, reason: four questions of their own}",
        ),
        "met",
        REACHED,
        ("0.05", "0.0166666666667"),
    ),
    # The smallest p of five rows is 1/60; with four tests 4/60 is above 0.05, with three 3/60 is 0.05.
    *(
        Case("attainable_p", of_five(tests, rule), state, reason, ("0.05", "0.0166666666667"))
        for tests, rule, state, reason in (
            (4, "Bonferroni", "not met", ADJUSTED_UNREACHED),
            (3, "Bonferroni", "met", REACHED),
            # By 1 + 1/2 + 1/3 + 1/4 = 25/12 at best, times 4 at worst; 125/3600 is below 0.05.
            (4, "Benjamini-Yekutieli", "doubtful", SHARED),
            (12, "Benjamini-Yekutieli", "not met", ADJUSTED_UNREACHED),
            (4, "Benjamini-Hochberg", "doubtful", SHARED),
            (4, "Hochberg", "doubtful", SHARED),
            (4, "step-down maxT", "doubtful", OPEN_TOGETHER),
            (3, "step-down maxT", "met", REACHED),
        )
    ),
    # No adjusted p from 999 permutations lies below 1/1000.
    Case(
        "attainable_p",
        replace(
            BASE,
            associations={"A1": association(), "A2": association()},
            inference="alpha: 0.0009, several_tests: {adjust: step-down maxT}, p_value: {permutations: 999, seed: 1}",
        ),
        "not met",
        TOO_FEW_ADJUSTED,
        ("0.0009", "0.00000055114638448"),
    ),
    Case(
        "attainable_p",
        replace(BASE, columns={"u": "7 7 7 7", "v": "1 2 3 4"}),
        "not examined",
        "no rank correlation exists for these rows",
        ("0.05", None),
    ),
    Case("built_in", BASE, "not examined", UNTOLD),
    Case("built_in", derived(u="[]"), "met", NOTHING_SHARED),
    Case("built_in", derived(u="[w]", v="[u]"), "not met", OF_THE_OTHER, withholds="test"),
    Case("built_in", derived(u="[v]"), "not met", OF_THE_OTHER, withholds="test"),
    Case("built_in", derived(u="[w]", v="[w]"), "not met", OF_THE_SAME, withholds="test"),
    Case("built_in", replace(derived(u="[v]"), requirements=limits(then="test with caveat")), "not met", OF_THE_OTHER),
    Case(
        "built_in",
        replace(derived(u="[v]"), requirements=limits(then="withhold all")),
        "not met",
        OF_THE_OTHER,
        withholds="all",
    ),
    Case("independence", BASE, "met", DECLARED),
    Case("independence", in_lab("independent_because: each trial had its own rig"), "met", DECLARED),
    Case(
        "independence",
        in_lab("repeated_within: lab, time_order: not applicable"),
        "not met",
        REPEATED,
        withholds="test",
    ),
    Case(
        "independence", in_lab("repeated_within: not applicable, time_order: lab"), "not met", ORDERED, withholds="test"
    ),
    Case("independence", in_lab("repeated_within: lab, time_order: lab"), "not met", REPEATED, withholds="test"),
    Case("independence", in_lab("repeated_within: not applicable"), "not met", SILENT, withholds="test"),
    Case("independence", in_lab("time_order: not applicable"), "not met", SILENT, withholds="test"),
    Case("independence", in_lab("leave_out: []"), "not met", SILENT, withholds="test"),
    Case("shape", replace(BASE, columns={"u": TWENTY, "v": TWENTY}, inference=DRAWN), "met", ONE_WAY),
    Case(
        "shape",
        replace(BASE, columns={"u": TWENTY, "v": HILL}, inference=DRAWN),
        "doubtful",
        OPPOSED,
    ),
    # Two halves of eleven rows lean apart by 1 - 6 * 154/1320 = 0.3 each: that is just far enough.
    Case(
        "shape",
        replace(BASE, columns={"u": TWENTY_TWO, "v": bent(LEANS_BY_03, LEANS_BY_03)}, inference=DRAWN),
        "doubtful",
        OPPOSED,
    ),
    # The upper half leans by 1 - 6 * 156/1320 = 0.291 only, whichever way round.
    Case(
        "shape",
        replace(BASE, columns={"u": TWENTY_TWO, "v": bent(LEANS_BY_03, LEANS_BY_029)}, inference=DRAWN),
        "met",
        ONE_WAY,
    ),
    Case(
        "shape",
        replace(BASE, columns={"u": TWENTY_TWO, "v": bent(LEANS_BY_029, LEANS_BY_03)}, inference=DRAWN),
        "met",
        ONE_WAY,
    ),
    Case("shape", replace(BASE, columns={"u": RISING, "v": FALLING}), "not examined", TOO_FEW),
    Case(
        "shape",
        replace(BASE, columns={"u": TWENTY, "v": "3 " * 10 + FALLING}, inference=DRAWN),
        "not examined",
        FLAT_HALF,
    ),
)


def outcome_of(case: Case) -> CheckOutcome:
    return next(found for found in case.study.analysed().results["A1"].checks if found.key == case.check)


@pytest.mark.parametrize("case", CASES, ids=[f"{case.check} {case.state} {place}" for place, case in enumerate(CASES)])
def test_a_check_says_what_it_found(case: Case) -> None:
    """State, limit, figure, reason and consequence are those of the case."""
    found = outcome_of(case)
    figures = tuple(None if figure is None else figure.exact for figure in (found.limit, found.found))
    assert (found.state, found.reason, figures, found.withholds) == (
        case.state,
        case.reason,
        case.figures,
        case.withholds,
    )


@pytest.mark.parametrize("check", CHECKS, ids=[check.key for check in CHECKS])
def test_the_cases_cover_every_outcome_that_the_source_of_a_check_can_return(check: Check) -> None:
    """States and reasons are read from the source: a new outcome without a case fails here."""
    states, reasons = outcomes_in_source(inspect.getsource(sys.modules[check.examine.__module__]))
    cases = [case for case in CASES if case.check == check.key]
    assert {case.state for case in cases} == states
    assert {case.reason for case in cases} == reasons


def outcomes_in_source(source: str) -> tuple[set[str], set[str]]:
    """Return the states and the reasons that stand in a check's calls of CheckOutcome."""
    states: set[str] = set()
    reasons: set[str] = set()
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id == "CheckOutcome":
            _, state, _, _, reason, *_ = node.args
            states.add(str(ast.literal_eval(state)))
            if isinstance(reason, ast.Constant):
                reasons.add(str(reason.value))
        if isinstance(node, ast.Assign) and isinstance(node.targets[0], ast.Name) and node.targets[0].id == "reason":
            reasons.add(str(ast.literal_eval(node.value)))
    return states, reasons


def test_the_catalogue_holds_every_file_of_its_folder_once() -> None:
    """A check that is written and not listed would never run."""
    files = {module.name for module in pkgutil.iter_modules(checks.__path__)}
    assert {check.examine.__module__.rpartition(".")[2] for check in CHECKS} == files
    assert sorted(check.key for check in CHECKS) == sorted(files)


@pytest.mark.parametrize("check", CHECKS, ids=[check.key for check in CHECKS])
def test_a_check_describes_itself_without_a_number(check: Check) -> None:
    """Its demand is one sentence or more, its works are in the bibliography, its states in the vocabulary."""
    assert check.demand.sentence.endswith(".")
    assert not any(character.isdigit() for character in check.demand.sentence + check.label)
    assert set(check.demand.cites) <= set(REFERENCES)
    assert {case.state for case in CASES if case.check == check.key} <= set(CHECK_STATES)


def test_only_the_look_at_the_shape_is_joint() -> None:
    """A screening shows all others before any joint result is known."""
    assert [check.key for check in CHECKS if check.joint] == ["shape"]


def test_checks_come_in_the_order_of_the_catalogue() -> None:
    """For every association, whatever became of it."""
    for result in GONE.analysed().results.values():
        assert [outcome.key for outcome in result.checks] == [check.key for check in CHECKS]


def test_the_shape_does_not_hang_on_the_order_of_tied_rows() -> None:
    """Rows tied at the middle of x stand on one side together, in whatever order the file has them."""
    u = [
        "3",
        "3",
        "3",
        "4",
        "4",
        "4",
        "1",
        "2",
        "4",
        "2",
        "1",
        "2",
        "2",
        "2",
        "4",
        "4",
        "2",
        "2",
        "3",
        "3",
        "1",
        "3",
        "4",
        "4",
    ]
    v = [
        "3",
        "3",
        "1",
        "6",
        "7",
        "9",
        "6",
        "9",
        "8",
        "6",
        "2",
        "5",
        "9",
        "5",
        "7",
        "1",
        "5",
        "2",
        "8",
        "2",
        "9",
        "4",
        "5",
        "7",
    ]
    outcomes = {
        next(found.reason for found in shaped.analysed().results["A1"].checks if found.key == "shape")
        for shaped in (
            replace(BASE, columns={"u": " ".join(u), "v": " ".join(v)}, inference=DRAWN),
            replace(BASE, columns={"u": " ".join(reversed(u)), "v": " ".join(reversed(v))}, inference=DRAWN),
        )
    }
    assert outcomes == {ONE_WAY}

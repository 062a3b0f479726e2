"""What others computed or printed: each case is answered or of a kind not answered."""

import ast
from pathlib import Path

import pytest

from rankdocket import critical_value
from reference.answers import RULES, answer
from reference.checker import Case, disagreements, inputs_of, misprints, reference_cases

CASES = reference_cases()

ANSWERED = (
    "adjusted_p",
    "chatterjee_xi",
    "ci_bonett_wright",
    "ci_fieller",
    "ci_fisher",
    "critical_value",
    "critical_value_approximate",
    "critical_value_large_sample",
    "dataset_pair",
    "difference_no_variable_shared",
    "difference_one_variable_shared",
    "difference_two_groups",
    "exact_conditional",
    "null_counts",
    "partial_spearman",
    "runs_test_median",
    "sample_size",
    "shapiro_wilk",
    "spearman",
    "tost_z",
    "von_neumann",
)

NOT_ANSWERED = ("page_trend",)


def _is_answerable(case: Case) -> bool:
    return case["function"] in ANSWERED


ANSWERABLE = tuple(case for case in CASES if _is_answerable(case))


def _name(case: Case) -> str:
    return str(case["id"])


@pytest.mark.parametrize("case", ANSWERABLE, ids=_name)
def test_answer_agrees_with_the_case(case: Case) -> None:
    """Every expected value is given: integers exactly, others within the tolerance of the case."""
    got = answer(case["function"], inputs_of(case))
    assert got is not None
    assert disagreements(case, got) == []


@pytest.mark.parametrize("case", [case for case in ANSWERABLE if "published" in case], ids=_name)
def test_answer_rounds_to_what_was_printed(case: Case) -> None:
    """Values printed in the source and found right are within half a unit of their last digit."""
    got = answer(case["function"], inputs_of(case))
    assert got is not None
    assert misprints(case, got) == []


def test_functions_are_all_listed() -> None:
    """Each function of the cases is either answered or listed as not answered."""
    assert {case["function"] for case in CASES} == {*ANSWERED, *NOT_ANSWERED}
    assert {case["input"]["method"] for case in CASES if case["function"] == "adjusted_p"} == set(RULES)


@pytest.mark.parametrize("case", [case for case in CASES if not _is_answerable(case)], ids=_name)
def test_a_function_listed_as_not_answered_gets_none(case: Case) -> None:
    """No answer is invented for what the program does not do."""
    assert answer(case["function"], inputs_of(case)) is None


def test_a_missing_answer_is_a_disagreement() -> None:
    """Leaving out an expected key does not pass for agreement."""
    case = next(case for case in CASES if case["id"] == "pub_zar_exams")
    got = answer(case["function"], inputs_of(case))
    assert got is not None
    del got["rs"]
    assert disagreements(case, got) == ["rs: not answered, '0.563636363636363636363636363636' expected"]


@pytest.mark.parametrize(("key", "wrong"), [("count_ge", 174687), ("rs", 0.5636363637), ("ties_x", True), ("n", None)])
def test_a_wrong_answer_is_a_disagreement(key: str, wrong: object) -> None:
    """An integer off by one, a coefficient off in the tenth digit and a wrong claim are all noticed."""
    case = next(case for case in CASES if case["id"] == "pub_zar_exams")
    got = answer(case["function"], inputs_of(case))
    assert got is not None
    assert [line.partition(":")[0] for line in disagreements(case, {**got, key: wrong})] == [key]


def test_a_critical_value_that_no_order_reaches_is_said_to_be_unattainable() -> None:
    """With four rows no two-sided p-value is 0.05 or less (methods: the smallest is 1/12)."""
    assert not critical_value(4, 0.05, sidedness="two-sided").attainable


ALLOWED = (
    ast.Module,
    ast.ImportFrom,
    ast.alias,
    ast.FunctionDef,
    ast.arguments,
    ast.arg,
    ast.AnnAssign,
    ast.Assign,
    ast.Return,
    ast.If,
    ast.Compare,
    ast.Eq,
    ast.In,
    ast.Is,
    ast.BoolOp,
    ast.And,
    ast.Call,
    ast.keyword,
    ast.Attribute,
    ast.Subscript,
    ast.Name,
    ast.Load,
    ast.Store,
    ast.Dict,
    ast.Tuple,
    ast.Constant,
    ast.Expr,
)
"""Calling, naming and choosing; no operator, no loop, no comprehension."""


def test_answers_contain_no_arithmetic() -> None:
    """The answers come from the public API: its calls and a renaming of their results, nothing else."""
    tree = ast.parse((Path(__file__).parent / "answers.py").read_text(encoding="utf-8"))
    annotations = {
        id(node)
        for function in ast.walk(tree)
        if isinstance(function, ast.FunctionDef)
        for note in (function.returns, *(argument.annotation for argument in function.args.args))
        if note is not None
        for node in ast.walk(note)
    }
    used = [node for node in ast.walk(tree) if id(node) not in annotations]
    assert [type(node).__name__ for node in used if not isinstance(node, ALLOWED)] == []
    called = {node.func.id for node in used if isinstance(node, ast.Call) and isinstance(node.func, ast.Name)}
    own = {node.name for node in used if isinstance(node, ast.FunctionDef)}
    public = {
        "GroupCoefficient",
        "NoneShared",
        "OneShared",
        "PlannedTest",
        "adjusted",
        "associate",
        "bonett_wright_limits",
        "chatterjee_xi",
        "critical_value",
        "critical_value_approximate",
        "critical_value_large_sample",
        "difference_no_variable_shared",
        "difference_one_variable_shared",
        "difference_two_groups",
        "fieller_limits",
        "fisher_limits",
        "null_counts",
        "partial_spearman",
        "runs_test_median",
        "sample_size",
        "shapiro_wilk",
        "tost_z",
        "von_neumann",
    }
    assert called <= own | public
    methods = {node.func.attr for node in used if isinstance(node, ast.Call) and isinstance(node.func, ast.Attribute)}
    assert methods == {"p"}

"""The checker of a record copy computes tests of size and null values again, and the findings that rest on them."""

from dataclasses import replace
from typing import Any

import pytest

import rankdocket.workflow.record_checker as checker
from analysis.invented import FALLING, MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.canonical import readable_bytes
from rankdocket.study.plan import plan_of
from rankdocket.workflow.record_tables import record_tables

NEAR = "3 4 1 9 2 5 6 8 10 7"
FIVE = "1 1 2 2 3 3 3 4 4 5"
STUDY = Invented(
    columns={"u": RISING, "near": NEAR, "mixed": MIXED, "falling": FALLING, "five": FIVE},
    associations={
        "A1": association("u", "near", more="smallest_of_interest: 0.30, claim: above"),
        "A2": association("u", "mixed", sign="either", more="smallest_of_interest: 0.90, claim: within"),
        "A3": association("u", "five", more="null_value: 0.5"),
        "A4": association("u", "falling", more="smallest_of_interest: 0.2, claim: above"),
        "A5": association("near", "mixed", sign="negative", more="null_value: -0.1"),
        "A6": association("near", "five", more="smallest_of_interest: 0.30").removesuffix("}")
        + ", coefficient: Kendall tau-b}",
        "A7": association("falling", "five", role="secondary", sign="negative", more="smallest_of_interest: 0.1"),
    },
)
FEW = replace(
    Invented(),
    columns={"u": "1 2 3", "v": "1 3 2"},
    associations={"A1": association(more="null_value: 0.3"), "A2": association()},
)
ONE_SIDED = "alpha: 0.05, sidedness: one-sided"


def problems(invented: Invented, tmp_path: Any, *forged: tuple[str, Any]) -> list[str]:
    """File a study's record, forge values of its analysis, and return what the checker says."""
    analysis = invented.analysed()
    plain: Any = analysis_to_plain(analysis)
    tables = record_tables(analysis, plain)
    for key, value in forged:
        *way, last = key.split("/")
        part = plain["associations"]
        for step in way:
            part = part[step]
        part[last] = value
    for name, content in tables.items():
        (tmp_path / name).write_bytes(content)
    (tmp_path / "plan.json").write_bytes(readable_bytes(plan_of(analysis.spec)))
    found: list[str] = []
    checker.check_associations(tmp_path, plain, found)
    checker.check_sizes(tmp_path, plain, found)
    checker.check_findings(tmp_path, plain, found)
    checker.check_results(tmp_path, plain, found)
    return found


@pytest.mark.parametrize(
    "invented",
    [
        STUDY,
        replace(
            STUDY,
            associations={
                "A1": association("u", "near", more="smallest_of_interest: 0.30, claim: above"),
                "A2": association("u", "falling", sign="negative", more="smallest_of_interest: 0.30, claim: above"),
                "A3": association("u", "falling", more="null_value: 0.2"),
            },
            inference=ONE_SIDED,
        ),
        replace(STUDY, inference="alpha: 0.05, several_tests: {adjust: none, reason: seven questions}"),
        replace(STUDY, rows="leave_out: []"),
        FEW,
    ],
    ids=["two-sided", "one-sided", "not adjusted", "withheld", "three rows"],
)
def test_what_was_filed_comes_again(invented: Invented, tmp_path: Any) -> None:
    """Capped and plain coefficients, both tails and one, claims with an answer and without."""
    assert problems(invented, tmp_path) == []


@pytest.mark.parametrize(
    ("key", "value", "told"),
    [
        ("A1/size/p_above", "0.0100000000000", "A1: size: p_above is 0.0100000000000, made anew "),
        ("A1/size/z_upper", "2.5", "A1: size: z_upper is 2.5, made anew "),
        ("A2/size/p_within", "0.001", "A2: size: p_within is 0.001, made anew "),
        ("A3/size/value/p", "0.9", "A3: size: p of the null value is 0.9, made anew "),
        ("A3/size/value/null", "0.4", "A3: size: null value is 2/5, made anew 1/2."),
        ("A4/size/coefficient", "-1", "A4: the coefficient of its tests of size is -1, made anew -0.99"),
        ("A7/size/verdict", "undecided", "A7: size: verdict is undecided, made anew size above delta shown."),
        ("A1/finding/by", "rank test", "A1: what decided is rank test, made anew above."),
        ("A1/finding/p", "0.04", "A1: p of the finding is 0.04, made anew "),
        ("A4/finding/word", "shown", "A4: the finding is shown, made anew shown, opposite sign."),
        ("A2/finding/p_adjusted", "0.0001", "A2: p_adjusted is 0.0001, made anew "),
    ],
)
def test_a_forged_size_is_named(key: str, value: str, told: str, tmp_path: Any) -> None:
    """From the rows, the plan and the formula; whatever else the forger changed."""
    assert any(problem.startswith(told) for problem in problems(STUDY, tmp_path, (key, value)))

"""The checker of a record copy computes tests of size and null values again, and the findings that rest on them."""

from dataclasses import replace
from typing import Any

import pytest

from analysis.invented import FALLING, MIXED, RISING, Invented, association
from workflow.record import problems

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

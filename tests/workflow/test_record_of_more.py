"""The checker of a record copy holds waivers, levels, coverage and what goes beyond two variables against their rules."""

import csv
import json
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest

import rankdocket.workflow.record_checker as checker
from analysis.invented import FALLING, MISSING, MIXED, RISING, Invented, association
from rankdocket.analysis.plain import analysis_to_plain
from workflow.office import SPEC, copy_study, replaced_once, run
from workflow.record import problems

CLOSE = "5 1 2 4 6 3 8 10 9 7"
LIMITS = "fewest_complete_rows: {fewest}, most_missing: {missing}, most_tied: {tied}"
WAIVED = Invented(
    columns={"u": "1 2 - 4 5 6 7 8 9 9", "v": "1 3 2 5 5 - 7 6 9 8"},
    variables={"v": "label: the ratio, scale: measured, unit: mm, derived_from: [u]"},
    associations={
        "A1": association(
            more="waived: {complete rows: a rare material, missing values: two broken, ties: a coarse scale, "
            "built-in association: agreed}"
        )
    },
    requirements=LIMITS.format(fewest=11, missing="0.1", tied="0.1"),
)
FAMILY = Invented(
    columns={"u": RISING, "close": CLOSE, "mixed": MIXED, "falling": FALLING, "one": "5 " * 10},
    associations={
        "A1": association("u", "close"),
        "A2": association("u", "falling", sign="negative"),
        "A3": association("u", "mixed"),
        "A4": association("u", "one"),
        "B1": association("close", "mixed", role="exploratory"),
    },
    inference="alpha: 0.05, interval: {by: Bonett-Wright, adjusted: simultaneous}",
)
SELECTED = replace(
    FAMILY,
    inference="alpha: 0.050, confidence_level: 0.90, several_tests: {adjust: Benjamini-Hochberg}, "
    "interval: {adjusted: after selection}",
)
NOTHING_SELECTED = replace(SELECTED, associations={name: FAMILY.associations[name] for name in ("A3", "A4")})
MORE = Invented(
    columns={
        "u": f"{RISING} 11 12",
        "close": f"{CLOSE} {MISSING} 12",
        "mixed": f"{MIXED} 11 {MISSING}",
        "near": f"3 4 1 9 2 5 6 8 10 7 {MISSING} 11",
        "site": "-5 -5 -5 -5 =b =b =b =b =b = - -",
    },
    variables={"site": 'label: site, scale: ordered, lowest_to_highest: ["-5", "=b", "="]'},
    associations={
        "A1": association(
            "u",
            "close",
            more='covariates: [mixed, near], compare_with: A2, groups: {column: site, compared: ["-5", "=b"]}',
        ),
        "A2": association("mixed", "near", more="compare_with: A3"),
        "A3": association("near", "close"),
        "A4": association("u", "mixed", more="coefficient: Kendall tau-b, groups: {column: site}"),
    },
)


@pytest.mark.parametrize(
    "invented",
    [WAIVED, FAMILY, SELECTED, NOTHING_SELECTED, replace(FAMILY, inference="alpha: 0.05, sidedness: one-sided"), MORE],
    ids=["waived", "simultaneous", "after selection", "nothing selected", "one-sided", "more variables"],
)
def test_what_was_filed_comes_again(invented: Invented, tmp_path: Path) -> None:
    """With missing rows, groups named like formulas, and a member of the family that has no interval."""
    assert problems(invented, tmp_path) == []


@pytest.mark.parametrize(
    ("study", "key", "value", "told"),
    [
        (
            WAIVED,
            "A1/checks/enough_rows/withholds",
            "test",
            "A1: enough_rows: what it withholds is test, made anew nothing.",
        ),
        (
            WAIVED,
            "A1/checks/missing_share/waived",
            "all are there",
            "A1: missing_share: why it is waived is all are there",
        ),
        (
            WAIVED,
            "A1/checks/tie_share/waived",
            None,
            "A1: tie_share: why it is waived is None, made anew a coarse scale.",
        ),
        (
            WAIVED,
            "A1/checks/independence/waived",
            "trust me",
            "A1: independence: why it is waived is trust me, made anew ",
        ),
        (FAMILY, "inference/interval/level", "0.95", "inference: adjusted level is 0.95, made anew 0.9875."),
        (FAMILY, "inference/interval/adjusted", "none", "inference: how intervals are adjusted is none, made anew "),
        (FAMILY, "A1/interval/level", "0.95", "A1: interval: level is 0.95, made anew 0.9875."),
        (FAMILY, "A3/interval_alone", None, "A3: a second interval is False, made anew True."),
        (FAMILY, "A2/interval/holds", "alone", "A2: interval: holds is alone, made anew simultaneous."),
        (FAMILY, "A2/interval_alone/level", "0.90", "A2: interval_alone: level is 0.90, made anew 0.95."),
        (FAMILY, "B1/interval/high", "-1", "B1: interval: -0."),
        (SELECTED, "inference/interval/selected", 1, "inference: how many are selected is 1, made anew 2."),
        (SELECTED, "A3/interval/holds", "after selection", "A3: interval: holds is after selection, made anew alone."),
        (SELECTED, "A3/interval/level", "0.95", "A3: interval: level is 0.95, made anew 0.9."),
        (NOTHING_SELECTED, "inference/interval/level", "0.90", "inference: adjusted level is 0.90, made anew None."),
        (FAMILY, "B1/interval/coverage/samples", 5999, "B1: coverage: samples is 5999, made anew 6000."),
        (FAMILY, "B1/interval/coverage/lowest/samples", 1, "B1: lowest coverage: samples is 1, made anew 6000."),
        (
            FAMILY,
            "B1/interval/coverage/lowest/share",
            "5999/6000",
            "B1: the lowest coverage 5999/6000 is above the nearest ",
        ),
        (FAMILY, "B1/interval/coverage/judged", "wide", "B1: coverage: judged is wide, made anew near."),
        (FAMILY, "B1/interval/coverage/share", "5579/6000", "B1: coverage: judged is near, made anew too low."),
        (MORE, "A1/partial/rho/value", "0.7", "A1: partial: rho: the coefficient is 0.7, made anew 0.745454545455."),
        (MORE, "A1/partial/value", "0.5", "A1: partial: the coefficient is 0.5, made anew 0.485398570986."),
        (MORE, "A1/partial/n", 11, "A1: partial: rows is 11, made anew 10."),
        (MORE, "A1/comparison/first/numerator", "247", "A1: comparison: first: numerator is 247, made anew 246."),
        (MORE, "A2/comparison/second/value", "0.9", "A2: comparison: second: the coefficient is 0.9, made anew 0.58"),
        (MORE, "A2/comparison/n", 9, "A2: comparison: rows is 9, made anew 10."),
        (MORE, "A2/comparison", None, "A2: comparison is False, made anew True."),
        (MORE, "A1/subgroups/groups/1/value", "0.9", "A1: group =b: the coefficient is 0.9, made anew 0.8"),
        (MORE, "A4/subgroups/groups/0/numerator", "4", "A4: group -5: numerator is 4, made anew 2."),
        (MORE, "A1/subgroups/groups/2/n", 2, "A1: group =: rows is 2, made anew 1."),
        (MORE, "A1/subgroups/without_group", 0, "A1: rows without a group is 0, made anew 1."),
    ],
)
def test_a_forged_value_is_named(study: Invented, key: str, value: Any, told: str, tmp_path: Path) -> None:
    """Whatever its kind, with what it is when made anew."""
    found = problems(study, tmp_path, (key, value))
    assert any(problem.startswith(told) for problem in found), found


@pytest.mark.parametrize(
    ("study", "levels"), [(FAMILY, ["0.9875"] * 3 + ["", "0.95"]), (SELECTED, ["0.95", "0.95", "0.90", "", "0.90"])]
)
def test_results_say_the_level_of_each_interval(study: Invented, levels: list[str], tmp_path: Path) -> None:
    """That of the interval whose limits stand beside it, none without one; another level in the table is named."""
    assert problems(study, tmp_path) == []
    file = tmp_path / "results.csv"
    with file.open(encoding="utf-8", newline="") as lines:
        rows = list(csv.DictReader(lines))
    assert [row["interval_level"] for row in rows] == levels
    assert [bool(row["interval_low"]) for row in rows] == [bool(level) for level in levels]
    file.write_text(file.read_text("utf-8").replace(f",{levels[0]},", ",0.99,", 1), "utf-8")
    found: list[str] = []
    checker.check_results(tmp_path, analysis_to_plain(study.analysed()), found)
    assert found == [f"results.csv, line 2: interval_level is 0.99, analysis.json has {levels[0]}."]


def test_a_forged_cell_beyond_two_variables_is_named(tmp_path: Path) -> None:
    """A value changed in more_rows.csv alone, and a row taken away, do not give the filed coefficients."""
    assert problems(MORE, tmp_path) == []
    file = tmp_path / "more_rows.csv"
    text = file.read_text("utf-8")
    plain: Any = analysis_to_plain(MORE.analysed())
    for line, forged, told in (
        (
            "A2,comparison,2,close,5,5\n",
            "A2,comparison,2,close,5,7.5\n",
            "A2: comparison: second: numerator is 194, made anew ",
        ),
        ("A1,partial,2,near,3,3\n", "", "A1: partial: rows is 10, made anew 9."),
        ("A1,groups,2,site,-5,-5\n", "A1,groups,2,site,-5,'=b\n", "A1: group -5: rows is 4, made anew 3."),
    ):
        file.write_text(replaced_once(line, forged)(text), "utf-8")
        found: list[str] = []
        checker.check_more_variables(tmp_path, plain, found)
        assert any(problem.startswith(told) for problem in found), found


def test_a_level_that_is_not_printed_is_named(tmp_path: Path) -> None:
    """An adjusted interval without its level would pass for one at the plan's level."""
    study = copy_study("first-look", tmp_path / "first-look")
    adjusted = "alpha: 0.05\n  interval: {adjusted: simultaneous}\n"
    spec = replaced_once("alpha: 0.05\n", adjusted)((study / SPEC).read_text("utf-8"))
    (study / SPEC).write_text(spec, "utf-8")
    assert run("issue", ".", "--reason", "first issue", cwd=study).status == 0
    edition = study / "editions" / "1"
    assert checker.main(edition) == 0
    analysis = json.loads((edition / "analysis.json").read_bytes())
    found: list[str] = []
    assert checker.check_printed(edition, analysis, found) > 0
    assert found == []
    (edition / "document.json").write_text(
        (edition / "document.json").read_text("utf-8").replace("associations/A1/interval/level", "inference/alpha"),
        "utf-8",
    )
    checker.check_printed(edition, analysis, found)
    assert "document.json does not print associations/A1/interval/level." in found

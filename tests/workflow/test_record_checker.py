"""The checker that every edition carries: it needs bare Python alone, and finds what was altered by itself."""

import ast
import itertools
import json
import re
import shutil
import subprocess
import sys
from collections import Counter
from decimal import Decimal
from fractions import Fraction
from pathlib import Path

import pytest

import rankdocket.workflow.record_checker as checker
from rankdocket.stats.adjustment import AdjustmentRule
from rankdocket.stats.adjustments import ADJUSTMENTS, adjusted
from rankdocket.stats.nulls.tied_forecast import forecast_rho, forecast_tails
from rankdocket.stats.ranks import TieGroups
from rankdocket.workflow.study_folder import open_study
from workflow.office import DATA, SPEC, STUDIES, Ran, Sealed, copy_study, forge, numbers_in, replaced_once, run

SOURCE = Path(checker.__file__)


def _check(copy: Path) -> Ran:
    """Run check.py as a stranger would: no environment, no installed library, another working folder."""
    done = subprocess.run(
        [sys.executable, "-I", "-S", "-X", "utf8", str(copy / "check.py")],
        env={},
        cwd="/",
        capture_output=True,
        check=False,
        encoding="utf-8",
    )
    return Ran(done.returncode, done.stdout, done.stderr)


@pytest.fixture
def study(issued: Sealed, tmp_path: Path) -> Path:
    """A copy of the issued study that may be spoiled."""
    return Path(shutil.copytree(issued.study, tmp_path / "first-look"))


def _findings(study: Path) -> tuple[str, str]:
    """Return the finding of the only association and the one that a forger would like."""
    analysis = json.loads((study / "editions" / "1" / "analysis.json").read_bytes())
    was = analysis["associations"]["A1"]["finding"]["word"]
    return was, {"shown": "not shown", "not shown": "shown"}[was]


@pytest.mark.parametrize("name", ["issued", "drafted"])
def test_a_record_copy_agrees(name: str, request: pytest.FixtureRequest, tmp_path: Path) -> None:
    """A record copy carried elsewhere agrees, counts included, with every number and file looked at."""
    sealed = request.getfixturevalue(name)
    copy = Path(shutil.copytree(sealed.edition, tmp_path / "handed over"))
    numbers = len(list(numbers_in(json.loads((copy / "document.json").read_bytes()))))
    files = len([path for path in copy.rglob("*") if path.is_file()]) - 1
    assert _check(copy) == Ran(0, f"Everything agrees ({numbers} numbers, {files} files).\n", "")


def test_a_changed_rank_is_named(study: Path) -> None:
    """A rank changed in the worksheet file is named with what it is when ranked anew."""
    lines = (study / "editions" / "1" / "ranks-A1.csv").read_text(encoding="utf-8").splitlines()
    cells = lines[5].split(",")
    was, cells[4] = cells[4], "11.5"
    forge(study, "1", "ranks-A1.csv", replaced_once(lines[5], ",".join(cells)))
    ran = _check(study / "editions" / "1")
    assert (ran.status, ran.err) == (1, "")
    assert f"ranks-A1.csv, line 6: rank_y is 11.5, made anew {was}." in ran.out


@pytest.mark.parametrize(
    ("touched", "told"),
    [(("README.txt",), "1 thing does not agree"), (("README.txt", "extracts/summary.txt"), "2 things do not agree")],
)
def test_what_disagrees_is_counted(study: Path, touched: tuple[str, ...], told: str) -> None:
    """Touched files are told in the number that they have."""
    for name in touched:
        (study / "editions" / "1" / name).write_bytes(b"")
    ran = _check(study / "editions" / "1")
    assert (ran.status, ran.err) == (1, "")
    assert re.match(rf"{told} \(\d+ numbers, \d+ files looked at\):\n  1\. README\.txt ", ran.out)


@pytest.mark.parametrize("name", ["report.html", "document.json"])
def test_a_changed_digit_is_named(study: Path, name: str) -> None:
    """A digit changed on the page alone or in the document alone is named by the number's address."""
    pattern = {
        "report.html": r'(data-key="associations/A1/estimate/value">)([^<]+)(<)',
        "document.json": r'("key": "associations/A1/estimate/value",\s*"text": ")([^"]+)(")',
    }[name]
    forge(study, "1", name, lambda text: re.sub(pattern, r"\g<1>0.99\g<3>", text, count=1))
    ran = _check(study / "editions" / "1")
    assert ran.status == 1
    assert f"{name} prints associations/A1/estimate/value as 0.99, 1 times;" in ran.out


def test_a_changed_result_is_named(study: Path) -> None:
    """A finding changed in results.csv is not what analysis.json says."""
    was, told = _findings(study)
    forge(study, "1", "results.csv", replaced_once(f",{was}\n", f",{told}\n"))
    ran = _check(study / "editions" / "1")
    assert f"results.csv, line 2: finding is {told}, analysis.json has {was}." in ran.out


def test_a_finding_changed_everywhere_is_decided_anew(study: Path) -> None:
    """A finding changed in analysis.json itself is decided again from count, alpha and plan."""
    was, told = _findings(study)
    forge(study, "1", "analysis.json", replaced_once(f'"word": "{was}"', f'"word": "{told}"'))
    ran = _check(study / "editions" / "1")
    assert f"A1: the finding is {told}, made anew {was}." in ran.out


@pytest.mark.parametrize(
    ("key", "forged", "told"),
    [
        ("numerator", "296", "A1: critical value, two-sided: numerator is 296, made anew "),
        ("value", "0.123", "A1: critical value, two-sided is 0.123, made anew "),
        ("count", "1", "A1: critical value, two-sided: count is "),
        ("of", "1", "A1: critical value, two-sided: count is "),
        ("p", "0.000001", "A1: critical value, two-sided: p is 0.000001, made anew "),
        ("state", "none", "A1: critical value, two-sided: state is none, made anew given."),
    ],
)
def test_a_forged_critical_value_is_named(study: Path, key: str, forged: str, told: str) -> None:
    """Whatever of a critical value is filed follows from all orderings, and is held against them."""

    def forgery(text: str) -> str:
        analysis = json.loads(text)
        analysis["associations"]["A1"]["null"]["critical"]["two-sided"][key] = forged
        return json.dumps(analysis)

    forge(study, "1", "analysis.json", forgery)
    ran = _check(study / "editions" / "1")
    assert ran.status == 1
    assert told in ran.out


def test_a_forged_smallest_p_is_named(study: Path) -> None:
    """The smallest attainable p is that of the farthest ordering."""

    def forgery(text: str) -> str:
        analysis = json.loads(text)
        analysis["associations"]["A1"]["smallest_attainable_p"] = "0.01"
        return json.dumps(analysis)

    forge(study, "1", "analysis.json", forgery)
    assert "A1: the smallest attainable p is 0.01, made anew " in _check(study / "editions" / "1").out


def test_a_null_that_was_not_laid_out_is_not_asked_for(tmp_path: Path) -> None:
    """Where the budget let the tails alone be counted there is no critical value to hold; the count still is."""
    copy = copy_study("first-look", tmp_path / "first-look")
    x, y = TieGroups((1, 2, 1, 3, 1, 2, 4)), TieGroups((1, 1, 3, 1, 5, 1, 2))
    rows = zip(x.codes().tolist(), reversed(y.codes().tolist()), strict=True)
    lines = [(copy / DATA).read_text("utf-8").splitlines()[0], *(f"E{i:02},{a},{b}" for i, (a, b) in enumerate(rows))]
    (copy / DATA).write_text("\n".join(lines) + "\n", "utf-8")
    forecasts = forecast_tails(x, y, "whole numbers"), forecast_rho(x, y)
    seconds = Decimal(sum(forecast.nanoseconds for forecast in forecasts) // 2).scaleb(-9)
    budget = f"alpha: 0.05\n  p_value: {{budget: {{seconds: {seconds}}}}}\n"
    (copy / SPEC).write_text(replaced_once("alpha: 0.05\n", budget)((copy / SPEC).read_text("utf-8")), "utf-8")
    assert run("issue", ".", "--reason", "first issue", cwd=copy).status == 0
    edition = copy / "editions" / "1"
    found = json.loads((edition / "analysis.json").read_bytes())["associations"]["A1"]
    assert found["test"]["count"] is not None
    assert "not worked out" in (edition / "report.html").read_text("utf-8")
    ran = _check(edition)
    assert (ran.status, ran.out.startswith("Everything agrees")) == (0, True)


def test_files_touched_without_repair_are_named(study: Path) -> None:
    """An altered, a removed and an added file are each named."""
    edition = study / "editions" / "1"
    (edition / "README.txt").write_bytes(b"Nothing to see here.\n")
    (edition / "spec.yaml").unlink()
    (edition / "more.txt").write_bytes(b"")
    ran = _check(edition)
    assert ran.status == 1
    for told in (
        "README.txt is not the file that was sealed.",
        "spec.yaml is missing.",
        "more.txt is not listed in SHA256SUMS.",
    ):
        assert told in ran.out


def test_a_record_that_cannot_be_read_is_told_in_a_sentence(study: Path) -> None:
    """A torn file ends the check with 1 and a sentence, not with a trace."""
    forge(study, "1", "analysis.json", lambda text: text[:-20])
    ran = _check(study / "editions" / "1")
    assert (ran.status, ran.err) == (1, "")
    assert "the record cannot be read to its end: " in ran.out


def test_the_checker_is_the_file_that_editions_carry(issued: Sealed) -> None:
    """check.py is the module as it stands, and speaks the Python of 2020."""
    assert (issued.edition / "check.py").read_bytes() == SOURCE.read_bytes()
    tree = ast.parse(SOURCE.read_text(encoding="utf-8"), feature_version=(3, 9))
    imported = {
        name.split(".")[0]
        for node in ast.walk(tree)
        for name in (
            [alias.name for alias in node.names]
            if isinstance(node, ast.Import)
            else [node.module or ""]
            if isinstance(node, ast.ImportFrom)
            else []
        )
    }
    assert imported <= sys.stdlib_module_names
    names = {node.attr for node in ast.walk(tree) if isinstance(node, ast.Attribute)}
    newer = {"bit_count", "pairwise", "batched", "file_digest", "removeprefix_"}
    assert names.isdisjoint(newer)
    assert not any(
        keyword.arg == "strict" for node in ast.walk(tree) if isinstance(node, ast.Call) for keyword in node.keywords
    )


def _study_at_alpha(folder: Path) -> Path:
    """Write a study of six rows in two groups: 36 of 720 orderings are as far in the expected sign, p is one in twenty."""
    study = copy_study("first-look", folder / "first-look")
    rows = "".join(f"D{place},{60 if place <= 3 else 90},{1800 + place}\n" for place in range(1, 7))
    (study / DATA).write_text(f"dough,rising_min,volume_ml\n{rows}", encoding="utf-8")
    spec = (study / SPEC).read_text(encoding="utf-8")
    decided = "alpha: 0.050\n  sidedness: one-sided\n\nrequirements:\n  fewest_complete_rows: 5\n  most_tied: 1"
    (study / SPEC).write_text(spec.replace("alpha: 0.05", decided, 1), encoding="utf-8")
    return study


def test_a_p_filed_as_the_very_words_of_alpha_agrees(tmp_path: Path) -> None:
    """With alpha 0.050 a p of exactly one in twenty is filed as 0.050; the checker compares values, not their digits."""
    study = _study_at_alpha(tmp_path)
    assert run("issue", ".", "--reason", "first issue", cwd=study).status == 0
    edition = study / "editions" / "1"
    found = json.loads((edition / "analysis.json").read_bytes())["associations"]["A1"]
    assert (found["test"]["p"], found["test"]["count"], found["test"]["of"]) == ("0.050", "36", "720")
    assert found["finding"]["word"] == "shown"
    assert _check(edition).out.startswith("Everything agrees (")
    forge(study, "1", "analysis.json", lambda text: text.replace('"p": "0.050"', '"p": "0.051"'))
    assert "A1: p is 0.051, made anew 0.05." in _check(edition).out


@pytest.mark.parametrize(
    ("filed", "agrees"),
    [
        ("0.333333333333", True),
        ("0.33333333333333", True),
        ("0.33333333333334", False),
        ("0.33333333333", False),
        ("0.333333333334", False),
    ],
)
def test_a_p_may_have_more_digits_when_all_are_right(filed: str, agrees: bool) -> None:
    """A third is 0.333333333333 to twelve digits; more digits have to be right to the last, fewer are too few."""
    problems: list[str] = []
    checker.hold_p("p", filed, Fraction(1, 3), problems)
    assert (problems == []) is agrees


TIED = [
    ([1, 2, 3, 4, 5], [2, 1, 4, 3, 5]),
    ([1, 1, 2, 3, 3, 3], [4, 2, 2, 1, 1, 5]),
    ([1, 1, 1, 2, 2, 2], [1, 2, 1, 2, 1, 2]),
    ([3, 1, 2, 2], [7, 7, 7, 9]),
    ([1, 2], [2, 1]),
]


@pytest.mark.parametrize("name", ["Spearman rho", "Kendall tau-b"])
@pytest.mark.parametrize(("x", "y"), TIED)
def test_its_count_is_that_of_all_orderings(name: str, x: list[int], y: list[int]) -> None:
    """The packed count equals listing every ordering of y, one by one, for both coefficients, with and without ties."""
    ranks_x = checker.doubled_midranks([checker.Fraction(value) for value in x])
    ranks_y = checker.doubled_midranks([checker.Fraction(value) for value in y])
    sums = checker.rho_sums if name == "Spearman rho" else checker.tau_sums
    listed = Counter(sums(ranks_x, list(order))[0] for order in itertools.permutations(ranks_y))
    assert checker.orderings(ranks_x, ranks_y, name) == listed


@pytest.mark.parametrize("rule", ADJUSTMENTS, ids=[rule.key for rule in ADJUSTMENTS])
@pytest.mark.parametrize(
    "hundredths", [(1, 2, 3, 4, 5), (40, 1, 1, 30, 100), (100, 100), (7,), (2, 90, 2, 2, 3, 4, 5, 60)]
)
def test_it_adjusts_by_every_rule_as_the_program_does(rule: AdjustmentRule, hundredths: tuple[int, ...]) -> None:
    """Its own lines give the same fractions, with ties and with p-values of 1."""
    p_values = {f"A{place}": Fraction(value, 100) for place, value in enumerate(hundredths)}
    anew = checker.adjust(rule.key, p_values)
    assert tuple(anew[name] for name in p_values) == adjusted(tuple(p_values.values()), rule=rule.key)
    assert checker.error_rate(rule.key, list(p_values)) == rule.error_rate


def _family(folder: Path, adjust: str) -> Path:
    """Issue a study of two associations of one variable, adjusted by a rule; return its folder."""
    study = copy_study("first-look", folder / "first-look")
    spec = (study / SPEC).read_text("utf-8")
    decided = f"alpha: 0.05\n  several_tests: {{adjust: {adjust}}}\n  p_value: {{permutations: 999, seed: 4}}\n"
    spec = replaced_once("alpha: 0.05\n", decided)(spec)
    head, _, rest = spec.partition("associations:\n")
    entries, _, rest = rest.partition("\ninference:")
    both = entries + "\n" + entries.replace("A1:", "A2:", 1)
    (study / SPEC).write_text(f"{head}associations:\n{both}\ninference:{rest}", "utf-8")
    assert run("issue", ".", "--reason", "first issue", cwd=study).status == 0
    return study


def test_a_family_adjusted_together_is_said_not_to_be_made_anew(tmp_path: Path) -> None:
    """Its counts are held against its p-values and findings; a forged adjusted p is named."""
    study = _family(tmp_path, "step-down maxT")
    edition = study / "editions" / "1"
    ran = _check(edition)
    assert ran.status == 0
    assert ran.out.startswith("Everything agrees (")
    assert "Not made anew by step-down maxT, only held against its own count: the adjusted p of A1, A2.\n" in ran.out

    def forgery(text: str) -> str:
        analysis = json.loads(text)
        analysis["associations"]["A1"]["finding"]["p_adjusted"] = "0.5"
        return json.dumps(analysis)

    forge(study, "1", "analysis.json", forgery)
    assert "A1: p_adjusted is 0.5, made anew " in _check(edition).out


def test_another_rule_in_the_record_is_named(tmp_path: Path) -> None:
    """The adjusted p by another rule than the plan's, and the words for what alpha bounds, do not agree."""
    study = _family(tmp_path, "Benjamini-Yekutieli")
    edition = study / "editions" / "1"
    assert _check(edition).out.startswith("Everything agrees (")
    forge(study, "1", "analysis.json", replaced_once('"adjust": "Benjamini-Yekutieli"', '"adjust": "Hochberg"'))
    assert "inference: adjust is Hochberg, made anew Benjamini-Yekutieli." in _check(edition).out
    forge(study, "1", "plan.json", lambda text: text.replace("Benjamini-Yekutieli", "Hochberg"))
    told = _check(edition).out
    assert "inference: error_rate is share of false findings, made anew any false finding." in told
    assert "A1: p_adjusted is " in told


def test_no_demonstration_needs_more_than_it_says() -> None:
    """The two small demonstrations lie within what the checker counts, the large one does not."""
    rows = {
        name: len(next(iter(open_study(str(STUDIES / name)).data.tables.values())).row_numbers)
        for name in ("first-look", "gasket-creep", "weld-smoke")
    }
    assert rows["first-look"] <= checker.MOST_ROWS_COUNTED < rows["weld-smoke"]
    assert rows["gasket-creep"] <= checker.MOST_ROWS_COUNTED

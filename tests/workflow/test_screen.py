"""Screening shows the data and the requirements and nothing joint; report in memory writes nothing."""

from collections.abc import Callable
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

import rankdocket
from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.workflow.study_folder import open_study
from workflow.office import DATA, STUDIES, Ran, copy_study, keys_in, replaced_once, snapshot

DEMONSTRATIONS = ("first-look", "gasket-creep", "weld-smoke")
"""Those whose joint values can be told by their digits: in two-kilns a drawn p is the smallest one that a draw can give."""
JOINT = {"estimate", "test", "interval", "comparisons", "finding", "worksheet", "coefficient", "tally"}


@pytest.fixture(scope="module", params=DEMONSTRATIONS)
def demonstration(request: pytest.FixtureRequest) -> tuple[str, dict[str, Any]]:
    """A demonstration study with its whole analysis."""
    study = open_study(str(STUDIES / request.param))
    return request.param, dict(analysis_to_plain(analyse(study.spec, study.data)))


def _joint_texts(analysis: dict[str, Any]) -> set[str]:
    """Return the joint values of an analysis in full and as they would be printed."""
    found = set()
    for association in analysis["associations"].values():
        parts = (association["estimate"], association["test"], association["interval"], association["comparisons"])
        for part in parts:
            for key, value in part.items():
                if key in {
                    "value",
                    "p",
                    "p_greater",
                    "p_less",
                    "low",
                    "high",
                    "pearson",
                    "squared_differences",
                    "count",
                }:
                    found.add(str(value))
                    if "." in str(value):
                        found.add(f"{abs(Decimal(value)):.3f}")
    return {text for text in found if len(text) > 4}


def test_nothing_joint_is_shown(
    demonstration: tuple[str, dict[str, Any]], here: Callable[..., Ran], tmp_path: Path
) -> None:
    """Neither the words nor the JSON of a screening hold a coefficient, a p-value or any other joint value."""
    name, analysis = demonstration
    study = copy_study(name, tmp_path / name)
    before = snapshot(study)
    words, plain = here("screen", ".", cwd=study), here("screen", ".", "--json", cwd=study)
    joint = _joint_texts(analysis)
    assert len(joint) > 5
    assert [text for text in joint if text in words.out or text in plain.out] == []
    assert JOINT.isdisjoint(keys_in(plain.plain))
    assert (words.status, words.err) == (plain.status, plain.err)
    assert snapshot(study) == before


def test_what_is_shown_is_what_the_analysis_files(
    demonstration: tuple[str, dict[str, Any]], here: Callable[..., Ran], tmp_path: Path
) -> None:
    """Tables, variables, rows, ties and checks of a screening are those of the later analysis."""
    name, analysis = demonstration
    plain = here("screen", ".", "--json", cwd=copy_study(name, tmp_path / name)).plain
    assert (plain["tables"], plain["variables"]) == (analysis["tables"], analysis["variables"])
    assert plain["associations"].keys() == analysis["associations"].keys()
    for key, association in plain["associations"].items():
        later = analysis["associations"][key]
        for part in ("rows", "ties_x", "ties_y"):
            assert association[part] == later[part]
        assert association["checks"].items() <= later["checks"].items()


def test_the_sections_stand_in_our_order(first_look: Path, here: Callable[..., Ran]) -> None:
    """A screening has its six headings in order, and its sentences are numbered through."""
    ran = here("screen", "study.yaml", cwd=first_look)
    headings = [line for line in ran.out.splitlines() if line and not line.startswith("  ")][1:]
    assert headings == [
        "What arrived",
        "How it was read",
        "Each variable alone",
        "Keys and partners",
        "Questions to the client",
        "What this sample could show",
    ]
    numbers = [int(line.split(".")[0]) for line in ran.out.splitlines() if line.startswith("  ")]
    assert numbers == list(range(1, len(numbers) + 1))


@pytest.mark.parametrize(
    ("name", "status"), [("first-look", 0), ("gasket-creep", 0), ("weld-smoke", 1), ("two-kilns", 0)]
)
def test_the_status_tells_whether_requirements_are_met(
    name: str, status: int, here: Callable[..., Ran], tmp_path: Path
) -> None:
    """Screening ends with 1 when a requirement is not met and asks the client about it; else with 0."""
    study = copy_study(name, tmp_path / name)
    ran = here("screen", ".", cwd=study)
    assert ran.status == status
    assert (" is not met: " in ran.out) == (status == 1)
    quiet = here("screen", ".", "--quiet", cwd=study)
    assert quiet == Ran(status, "", "")


def test_a_report_in_memory_writes_nothing_and_is_no_edition(first_look: Path) -> None:
    """rankdocket.report computes and words a study, marked as a draft, and leaves its folder alone."""
    before = snapshot(first_look)
    report = rankdocket.report(str(first_look))
    page = report.html()
    assert report.document.furniture.status == "draft"
    assert "a look, not an edition" in page
    assert page == report._repr_html_()
    table = report.result_table()
    assert list(table["association"]) == ["A1"]
    assert snapshot(first_look) == before
    assert sorted(path.name for path in first_look.iterdir()) == ["received", "study.yaml"]


def test_a_spec_with_two_kinds_of_fault_tells_the_spec_first(first_look: Path, here: Callable[..., Ran]) -> None:
    """Data files are read once the spec is right: a wrong spec is told alone, by screen as by issue."""
    spec = first_look / "study.yaml"
    spec.write_text(replaced_once("scale: measured", "scale: meassured")(spec.read_text("utf-8")), encoding="utf-8")
    (first_look / DATA).unlink()
    screened, issued = here("screen", ".", cwd=first_look), here("issue", ".", "--reason", "x", cwd=first_look)
    assert (screened.status, issued.status) == (3, 3)
    assert screened.err == issued.err
    assert "there is no file" not in screened.err

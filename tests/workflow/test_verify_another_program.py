"""Verifying what another program issued: its words and looks may differ, nothing that it states may."""

import json
import re
import shutil
from collections.abc import Callable
from pathlib import Path

import pytest

from rankdocket.document.plain import document_to_plain
from rankdocket.render.rendition import render
from rankdocket.workflow.edition_files import rendition_files
from rankdocket.workflow.verify import verify
from rankdocket.workflow.verify_files import document_of
from workflow.office import (
    Sealed,
    copy_of_program,
    copy_study,
    forge,
    repair_inputs,
    replaced_once,
    reseal,
    run,
    surroundings,
    with_black_boxes,
)

SENTENCE = "A printed copy cannot be recalled"
OTHER_SENTENCE = "Nobody can call a printed copy back"


@pytest.fixture(scope="module")
def older(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """First look as a program with another sentence and other headings issued it."""
    desk = tmp_path_factory.mktemp("older")
    sources = copy_of_program(desk / "program")
    control = sources / "rankdocket" / "writing" / "sections" / "control.py"
    control.write_text(replaced_once(SENTENCE, OTHER_SENTENCE)(control.read_text(encoding="utf-8")), encoding="utf-8")
    [looks] = desk.rglob("body.css")
    looks.write_text(looks.read_text(encoding="utf-8") + "\nh1{color:#223344}\n", encoding="utf-8")
    study = copy_study("first-look", desk / "first-look")
    ran = run("issue", ".", "--reason", "first issue", cwd=study, environment=surroundings(sources))
    assert ran.status == 0
    return study


@pytest.fixture
def study(older: Path, tmp_path: Path) -> Path:
    """A copy of that study that may be spoiled."""
    return Path(shutil.copytree(older, tmp_path / "first-look"))


def _other_program_digest(text: str) -> str:
    return json.dumps(json.loads(text) | {"program_digest": "0" * 64})


def _other_version_of(what: str) -> Callable[[str], str]:
    def change(text: str) -> str:
        versions = json.loads(text)
        next(item for item in versions["components"] if item["what"] == what)["version"] = "0.0.9"
        return json.dumps(versions)

    return change


def _finding(edition: Path) -> tuple[str, str]:
    word = json.loads((edition / "analysis.json").read_bytes())["associations"]["A1"]["finding"]["word"]
    return word, {"shown": "not shown", "not shown": "shown"}[word]


def _replaced(pattern: str, new: str) -> Callable[[str], str]:
    return lambda text: re.sub(pattern, new, text, count=1)


def _forge_what_is_shown(study: Path) -> None:
    edition = study / "editions" / "1"
    was, told = _finding(edition)
    forge(study, "1", "report.html", _replaced(rf">{was}<", f">{told}<"))
    forge(study, "1", "tables/results.csv", _replaced(r",0\.0\d+,", ",0.0001,"))
    forge(study, "1", "extracts/summary.txt", _replaced(r"rho 0\.\d+", "rho 0.99"))
    forge(study, "1", "figures/A1-raw.svg", _replaced(r">(\d)(\d)<", r">9\2<"))
    forge(study, "1", "spec-as-used.yaml", _replaced(r"alpha: 0\.05", "alpha: 0.10"))


FORGED = ("report.html", "tables/results.csv", "extracts/summary.txt", "figures/A1-raw.svg", "spec-as-used.yaml")


def test_another_program_with_other_words_agrees(older: Path) -> None:
    """Other words and looks are remarks, which quote the words and name the cause; everything else agrees."""
    found = verify(str(older))
    assert (found.grade, found.problems) == ("same", ())
    [words] = [remark for remark in found.remarks if remark.startswith("document.json: the control page says “")]
    assert OTHER_SENTENCE in words
    assert "report.html: other looks, the same words and numbers; looks were not checked." in found.remarks
    assert "report.pdf: other looks, the same words and numbers; looks were not checked." in found.remarks
    assert found.remarks[-1] == "Possible cause: the program's own files have changed since."


def test_what_is_shown_is_held_against_the_filed_document(study: Path) -> None:
    """Forged words, cells, numbers and labels of an edition by another program are each named; so is a foreign alpha."""
    _forge_what_is_shown(study)
    found = verify(str(study))
    assert found.grade == "different"
    assert {name for name in FORGED if any(told.startswith(f"{name}: ") for told in found.problems)} == set(FORGED)


def test_a_foreign_report_is_named_page_by_page(study: Path, drafted: Sealed) -> None:
    """The PDF of another study in the place of the report does not say what the filed document says."""
    shutil.copy(drafted.edition / "report.pdf", study / "editions" / "1" / "report.pdf")
    reseal(study, "1")
    found = verify(str(study))
    assert found.grade == "different"
    assert any(problem.startswith("report.pdf, page 1: reads ") for problem in found.problems)


@pytest.mark.parametrize(
    "change",
    [_other_program_digest, _other_version_of("rankdocket"), _other_version_of("weasyprint")],
    ids=["digest", "version", "library"],
)
def test_to_write_another_program_into_the_versions_hides_nothing(
    issued: Sealed, tmp_path: Path, change: Callable[[str], str]
) -> None:
    """Who claims that another program or library made the edition is named, and so is all that it was to excuse."""
    study = Path(shutil.copytree(issued.study, tmp_path / "first-look"))
    forge(study, "1", "versions.json", change)
    report = study / "editions" / "1" / "report.pdf"
    report.write_bytes(with_black_boxes(report.read_bytes()))
    _forge_what_is_shown(study)
    repair_inputs(study, "1")
    found = verify(str(study))
    assert found.grade == "different"
    assert any(told.startswith("document.json: ") for told in found.problems)
    assert {name for name in FORGED if any(told.startswith(f"{name}: ") for told in found.problems)} == set(FORGED)


def test_a_finding_forged_in_document_and_pages_alike_is_named(study: Path) -> None:
    """A document with another finding, and pages set from it, agree with one another and not with the analysis."""
    edition = study / "editions" / "1"
    was, told = _finding(edition)
    forge(
        study,
        "1",
        "document.json",
        lambda text: text.replace(f'"{was}"', f'"{told}"').replace(f" was {was}", f" was {told}"),
    )
    again = render(document_of((edition / "document.json").read_bytes()))
    for name, content in rendition_files(again).items():
        (edition / name).write_bytes(content)
    reseal(study, "1")
    found = verify(str(study))
    assert found.grade == "different"
    problems = "\n".join(found.problems)
    assert f"document.json: table results, row A1, states {told}" in problems
    assert f"does not state {was}" in problems
    assert "report.html: reads" not in problems


@pytest.mark.parametrize("content", ["{", '{"schema": "urn:rankdocket:document:2", "document": {}}'])
def test_a_document_that_this_program_cannot_read_is_not_verified(study: Path, content: str) -> None:
    """Nothing is vouched for that could not be held against the document: what was not checked is named."""
    (study / "editions" / "1" / "document.json").write_text(content, encoding="utf-8")
    reseal(study, "1")
    found = verify(str(study))
    assert (found.grade, found.agrees) == ("not verified", False)
    for name in ("document.json", "report.html", "report.pdf", "tables/results.csv", "extracts/summary.txt"):
        assert any(told.startswith(f"{name}: not verified, because ") for told in found.problems)


def test_a_document_read_back_is_set_to_the_same_files(issued: Sealed) -> None:
    """What verifying sets from the filed document is byte for byte what issuing set from the written one."""
    document = document_of((issued.edition / "document.json").read_bytes())
    assert document_to_plain(document) == json.loads((issued.edition / "document.json").read_bytes())
    again = rendition_files(render(document))
    assert [name for name, content in again.items() if content != (issued.edition / name).read_bytes()] == []

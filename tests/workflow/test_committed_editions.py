"""The editions that come with the demonstration studies still agree, number by number."""

import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from pypdf import PdfReader

from rankdocket.register import chain, manifest
from rankdocket.workflow.verify import verify
from workflow.office import STUDIES

COMMITTED = ["gasket-creep", *(pytest.param(name, marks=pytest.mark.slow) for name in ("weld-smoke", "two-kilns"))]


@pytest.mark.parametrize("name", COMMITTED)
def test_a_committed_edition_agrees(name: str, tmp_path: Path) -> None:
    """Whatever has changed since in words and looks, no number of a committed edition has moved."""
    study = Path(shutil.copytree(STUDIES / name, tmp_path / name))
    found = verify(str(study))
    assert found.problems == ()
    assert found.edition == "1"


@pytest.mark.parametrize("name", ["gasket-creep", "weld-smoke", "two-kilns"])
def test_the_summary_of_a_committed_edition_is_page_2_and_no_more(name: str) -> None:
    """It begins there and its last line, about changes, stands there too."""
    pages = [page.extract_text() for page in PdfReader(STUDIES / name / "editions" / "1" / "report.pdf").pages]
    (begins,) = [place for place, text in enumerate(pages, start=1) if "Question. " in text]
    assert begins == 2
    assert "Changes: nothing was issued before." in pages[1]


@pytest.mark.parametrize("name", ["gasket-creep", "weld-smoke", "two-kilns"])
def test_a_committed_edition_is_whole(name: str) -> None:
    """Files, digests and register of a committed edition are as they were sealed, and its own checker agrees."""
    edition = STUDIES / name / "editions" / "1"
    assert manifest.check(edition) == ()
    [line] = chain.read(STUDIES / name / "register.jsonl")
    assert line.event.actor == "demonstration"
    done = subprocess.run([sys.executable, "-I", str(edition / "check.py")], capture_output=True, check=False)
    assert done.returncode == 0
    assert done.stdout.startswith(b"Everything agrees (")

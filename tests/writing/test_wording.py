"""The program’s own words: every literal of the room obeys the wording rules, and a report that does not is not made."""

import ast
import re
from dataclasses import replace
from pathlib import Path

import pytest

import rankdocket
from analysis.invented import Invented
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import NotEstimable
from rankdocket.document.model import Paragraph, Section, Supplied
from rankdocket.document.prose import lint, only, prose
from rankdocket.errors import RenderError
from rankdocket.writing.write import refuse_forbidden_words, write
from writing.reports import facts, study_of_every_finding

SOURCE = Path(rankdocket.__file__).parent
ROOMS = ("writing", "analysis", "stats")
FILES = sorted(path for room in ROOMS for path in (SOURCE / room).rglob("*.py"))


def literals(path: Path) -> list[str]:
    """Return the texts of a file that are no docstrings."""
    tree = ast.parse(path.read_text("utf-8"))
    docstrings = {
        id(node.value) for node in ast.walk(tree) if isinstance(node, ast.Expr) and isinstance(node.value, ast.Constant)
    }
    return [
        node.value
        for node in ast.walk(tree)
        if isinstance(node, ast.Constant) and isinstance(node.value, str) and id(node) not in docstrings
    ]


@pytest.mark.parametrize("path", FILES, ids=[path.relative_to(SOURCE).as_posix() for path in FILES])
def test_no_sentence_of_the_program_breaks_the_wording_rules(path: Path) -> None:
    """Also those that no test study brings to light."""
    assert [hit for text in literals(path) for hit in lint(text)] == []


@pytest.mark.parametrize("path", FILES, ids=[path.relative_to(SOURCE).as_posix() for path in FILES])
def test_no_sentence_of_the_program_uses_a_word_that_the_house_avoids(path: Path) -> None:
    """One vocabulary: rows and not records or cases, caveats and not warnings, findings and not verdicts."""
    avoided = re.compile(
        r"\b(warnings?|datasets?|dataframes?|payloads?|data points?|significan\w*|outliers?)\b", re.IGNORECASE
    )
    assert [text for text in literals(path) if " " in text and avoided.search(text)] == []


@pytest.mark.parametrize("phrase", ["this proves it", "load causes creep", "there was no correlation"])
def test_a_report_whose_own_words_claim_too_much_is_not_made(phrase: str) -> None:
    """A phrase planted in a reason, which the program words itself, stops the report and is quoted."""
    sound = replace(Invented(), columns={"u": "1 2", "v": "1 2"}).analysed()
    planted = replace(sound.results["A1"], estimate=NotEstimable(phrase))
    for analysis, is_made in ((sound, True), (replace(sound, results={"A1": planted}), False)):
        plain = analysis_to_plain(analysis)
        issue = facts(analysis=analysis, plain=plain)
        if is_made:
            assert write(analysis, plain, issue).sections
            continue
        (hit,) = lint(phrase)
        with pytest.raises(RenderError, match=f"break its wording rules: “{hit.phrase}”.*Nothing was sealed"):
            write(analysis, plain, issue)


def test_a_forbidden_phrase_in_a_heading_or_on_the_control_page_stops_the_report() -> None:
    """The rules hold for every run of text."""
    document = study_of_every_finding().document
    refuse_forbidden_words(document)
    heading = Section("more", "9", only("What load causes"), ())
    for wrong in (
        replace(document, sections=(*document.sections, heading)),
        replace(document, sections=(replace(document.sections[0], sections=(heading,)),)),
        replace(document, control=(Paragraph(only("It is guaranteed.")),)),
    ):
        with pytest.raises(RenderError):
            refuse_forbidden_words(wrong)


def test_supplied_words_do_not_stop_a_report() -> None:
    """They are the client's, and get a caveat instead."""
    document = study_of_every_finding().document
    words = Paragraph(prose("Question. {words}", words=Supplied("Does it prove that load causes creep?")))
    refuse_forbidden_words(replace(document, control=(words,)))

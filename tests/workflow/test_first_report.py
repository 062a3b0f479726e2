"""From a spec to a PDF by the real command line: each number once computed, once rounded, printed everywhere alike."""

import html
import io
import json
import platform
import re
from collections import Counter
from html.parser import HTMLParser

from pypdf import PdfReader

from rankdocket.document.numbers import look_up
from rankdocket.register import chain, manifest
from workflow.office import ACCOUNT, Sealed, numbers_in, snapshot


class _Numbers(HTMLParser):
    """Collects the text of every element that carries a number's address."""

    def __init__(self) -> None:
        super().__init__()
        self.open: list[tuple[str, str, str]] = []
        self.found: Counter[tuple[str, str]] = Counter()

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        key = dict(attrs).get("data-key")
        if key:
            self.open.append((tag, key, ""))

    def handle_data(self, data: str) -> None:
        self.open = [(tag, key, text + data) for tag, key, text in self.open]

    def handle_endtag(self, tag: str) -> None:
        if self.open and self.open[-1][0] == tag:
            _, key, text = self.open.pop()
            self.found[key, text] += 1


def _document(sealed: Sealed) -> list[dict[str, str]]:
    return list(numbers_in(json.loads((sealed.edition / "document.json").read_bytes())))


def _one_line(text: str) -> str:
    return " ".join(text.split())


def test_a_spec_becomes_an_edition_with_one_command(issued: Sealed) -> None:
    """The command ends with 0, says where the report lies, and every file is as its list and the register say."""
    assert (issued.ran.status, issued.ran.err) == (0, "")
    first, *where, last = issued.ran.out.splitlines()
    assert re.fullmatch(r"Edition 1 is sealed, [1-9]\d* pages\. Findings: A1 (not )?shown\.", first)
    assert [line.strip() for line in where] == ["first-look/editions/1/report.pdf", "first-look/editions/1/report.html"]
    assert last.endswith(chain.head(issued.study / "register.jsonl"))
    assert manifest.check(issued.edition) == ()
    assert chain.check(issued.study / "register.jsonl") == ()


def test_every_number_stands_in_the_analysis_as_the_document_says(issued: Sealed) -> None:
    """Every address of document.json resolves in analysis.json, and what stands there is the number's exact value."""
    analysis = json.loads((issued.edition / "analysis.json").read_bytes())
    numbers = _document(issued)
    assert len(numbers) > 100
    assert [number for number in numbers if str(look_up(analysis, number["key"])) != number["exact"]] == []


def test_the_page_prints_every_number_with_its_address(issued: Sealed) -> None:
    """The elements of report.html that carry an address are the numbers of document.json, as often and as printed."""
    page = _Numbers()
    page.feed((issued.edition / "report.html").read_text(encoding="utf-8"))
    assert page.found == Counter((number["key"], number["text"]) for number in _document(issued))


def test_the_pdf_prints_every_number(issued: Sealed) -> None:
    """The PDF's own text holds every printed number of document.json at least as often as the document does."""
    reader = PdfReader(io.BytesIO((issued.edition / "report.pdf").read_bytes()))
    text = _one_line(" ".join(page.extract_text() for page in reader.pages))
    told = Counter(_one_line(number["text"]) for number in _document(issued))
    short = {
        number: times
        for number, times in told.items()
        if len(re.findall(rf"(?<![\d.,]){re.escape(number)}(?!\d)", text)) < times
    }
    assert short == {}
    assert _one_line("twelve trial doughs") in text


def test_supplied_words_stand_in_page_and_pdf(issued: Sealed) -> None:
    """Title, client and question of the spec are printed as they were written."""
    page = html.unescape((issued.edition / "report.html").read_text(encoding="utf-8"))
    reader = PdfReader(io.BytesIO((issued.edition / "report.pdf").read_bytes()))
    text = _one_line(" ".join(sheet.extract_text() for sheet in reader.pages))
    for words in ("Harrow Lane Bakehouse", "Do doughs that rise longer give larger loaves?"):
        assert words in page
        assert words in text


def test_no_file_of_an_edition_knows_who_made_it_and_where(issued: Sealed, issued_apart: Sealed) -> None:
    """No file holds the account's name, the machine's name or a folder of the machine."""
    for sealed in (issued, issued_apart):
        telling = {ACCOUNT, "Quentin Elsewhere", "another desk", str(sealed.study.parent), "/site-packages"}
        telling |= {name for name in (platform.node(),) if len(name) > 3}
        for name, data in snapshot(sealed.edition).items():
            told = data
            if name.endswith(".pdf"):
                reader = PdfReader(io.BytesIO(data))
                told = " ".join(str(value) for value in (reader.metadata or {}).values()).encode()
                told += data + " ".join(page.extract_text() for page in reader.pages).encode()
            assert [word for word in telling if word.encode() in told] == [], name


def test_two_desks_issue_the_same_bytes(issued: Sealed, issued_apart: Sealed) -> None:
    """Folder, account, hash seed, time zone and locale move no byte of an edition when time and reason are the same."""
    assert issued_apart.ran.status == 0
    ours, theirs = snapshot(issued.edition), snapshot(issued_apart.edition)
    assert ours.keys() == theirs.keys()
    assert [name for name in ours if ours[name] != theirs[name]] == []
    assert {"report.pdf", "report.html", "analysis.json", "document.json"} <= ours.keys()


def test_the_answer_as_json_tells_the_same(issued_apart: Sealed) -> None:
    """With --json the answer is one object: edition, files, findings and the register's head."""
    plain = issued_apart.ran.plain
    assert plain["schema"] == "urn:rankdocket:issued:1"
    assert (plain["changed"], plain["edition"]) == (True, "1")
    assert plain["report"] == "a copy of it/editions/1/report.pdf"
    assert plain["head"] == chain.head(issued_apart.study / "register.jsonl")
    analysis = json.loads((issued_apart.edition / "analysis.json").read_bytes())
    assert plain["findings"] == {"A1": analysis["associations"]["A1"]["finding"]["word"]}
    assert plain["pages"] == len(PdfReader(issued_apart.edition / "report.pdf").pages)


def test_a_draft_is_lettered_and_marked_on_every_page(drafted: Sealed) -> None:
    """--draft seals edition 1A, whose every page carries the word draft."""
    assert drafted.ran.status == 0
    assert drafted.ran.out.startswith("Draft 1A is sealed, ")
    pages = PdfReader(drafted.edition / "report.pdf").pages
    assert len(pages) > 5
    assert [number for number, page in enumerate(pages, 1) if not re.search("(?i)draft", page.extract_text())] == []
    [line] = chain.read(drafted.study / "register.jsonl")
    assert (line.event.action, line.event.details["edition"]) == ("drafted", "1A")

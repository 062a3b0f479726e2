"""The PDF: every number on paper, every page numbered and marked, the same bytes everywhere, nothing from outside."""

import hashlib
import io
import json
import os
import re
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import pypdf
import pytest
from page import validate_pdf

from rankdocket.document.model import Section
from rankdocket.errors import RenderError
from rankdocket.render.fetcher import ClosedFetcher
from rankdocket.render.fonts import SERIF_TEXT
from rankdocket.render.html import page
from rankdocket.render.pdf import pdf_of
from rankdocket.render.rendition import Rendition, render
from render.sample import FURNITURE, paragraph, prose, sample
from render.test_html import figures_of, numbers_of

HERE = Path(__file__).parent

MAKE = """
import hashlib, json
from render.sample import sample
from rankdocket.render.rendition import render
made = render(sample())
files = {"html": made.html, "pdf": made.pdf, **made.figures, **made.tables, **made.extracts}
print(json.dumps({name: hashlib.sha256(data).hexdigest() for name, data in files.items()}))
"""


def pages_of(pdf: bytes) -> list[str]:
    return [part.extract_text() for part in pypdf.PdfReader(io.BytesIO(pdf)).pages]


def wide_of(pdf: bytes) -> list[bool]:
    return [part.mediabox.width > part.mediabox.height for part in pypdf.PdfReader(io.BytesIO(pdf)).pages]


def simple(body: str) -> str:
    head = f"<title>t</title><style>{faces()}</style>"
    return f'<!DOCTYPE html><html lang="en"><head>{head}</head><body>{body}</body></html>'


def faces() -> str:
    return f'@font-face{{font-family:T;src:url("{SERIF_TEXT.address}")}}html{{font-family:T}}'


@pytest.fixture(scope="module")
def pages(rendition: Rendition) -> list[str]:
    return pages_of(rendition.pdf)


def test_every_number_of_the_document_stands_in_the_text_of_the_pdf(pages: list[str]) -> None:
    text = "\n".join(pages)
    missing = {number.text for number in numbers_of(sample()) if number.text not in text}
    assert missing == set()


def test_every_page_says_which_of_how_many_it_is(rendition: Rendition, pages: list[str]) -> None:
    assert rendition.pages == len(pages) >= 10
    for i, text in enumerate(pages, 1):
        assert re.findall(r"page \d+ of \d+", text) == [f"page {i} of {len(pages)}"]


def test_every_page_carries_head_and_foot(pages: list[str]) -> None:
    for text in (" ".join(text.split()) for text in pages):
        assert "HF-0231 · Vigour of oak seedlings · Confidential to the client" in text
        assert "edition 2, issued · 2026-03-09 · check the register for the current edition" in text


def test_a_draft_is_marked_on_every_page_and_an_issued_edition_on_none(drafted: Rendition, pages: list[str]) -> None:
    drafts = pages_of(drafted.pdf)
    assert len(drafts) >= 10
    assert all("draft, not for reliance" in text for text in drafts)
    assert not any("draft" in text for text in pages)


def test_control_is_page_one_and_the_summary_has_page_two_to_itself(pages: list[str]) -> None:
    assert "Distribution" in pages[0]
    assert "Summary" not in pages[0]
    assert "Summary" in pages[1]
    assert "Instructions and question" not in pages[1]
    assert "Instructions and question" in pages[2]


def test_only_a_wide_table_has_a_landscape_page_and_the_text_after_it_an_upright_one(rendition: Rendition) -> None:
    wide = wide_of(rendition.pdf)
    texts = pages_of(rendition.pdf)
    assert [i for i, turned in enumerate(wide) if turned] == [i for i, text in enumerate(texts) if "Table 3." in text]
    assert wide.count(True) == 1


def test_the_heading_above_a_wide_table_goes_with_it(pages: list[str]) -> None:
    page_of_table = next(text for text in pages if "Table 3." in text)
    assert "Screening" in page_of_table
    assert "Each variable was looked at alone." in page_of_table


def test_a_table_over_a_page_repeats_its_head_and_says_continued(pages: list[str]) -> None:
    holding = [text for text in pages if "Product of doubled centred ranks" in text]
    assert len(holding) == 2
    assert "Table A.1, continued" not in holding[0]
    assert "Table A.1, continued" in holding[1]
    assert sum("continued" in text for text in pages) == 1


def test_the_end_mark_stands_once_on_the_last_page_with_the_page_count(pages: list[str]) -> None:
    mark = f"End of report HF-0231, edition 2, {len(pages)} pages"
    assert mark in pages[-1]
    assert sum("End of report" in text for text in pages) == 1


def test_the_file_names_its_title_author_language_and_date_and_is_tagged(rendition: Rendition) -> None:
    reader = pypdf.PdfReader(io.BytesIO(rendition.pdf))
    assert reader.metadata is not None
    assert reader.metadata.title == f"{FURNITURE.title}, HF-0231, edition 2"
    assert reader.metadata.author == FURNITURE.author
    assert "20260309101500" in str(reader.metadata["/CreationDate"])
    assert reader.trailer["/Root"]["/Lang"] == "en-GB"
    assert reader.trailer["/Root"]["/MarkInfo"]["/Marked"]


def test_the_file_is_what_its_metadata_say(rendition: Rendition, tmp_path: Path) -> None:
    """The metadata name an archival variant with tags; a validator made by others finds nothing against it."""
    file = tmp_path / "report.pdf"
    file.write_bytes(rendition.pdf)
    assert validate_pdf(str(file), profile="3a").failures == []


def test_every_face_in_the_file_is_embedded_and_ours(rendition: Rendition) -> None:
    names = set()
    for part in pypdf.PdfReader(io.BytesIO(rendition.pdf)).pages:
        for font in part["/Resources"]["/Font"].values():
            below = font.get_object()["/DescendantFonts"][0].get_object()
            assert {"/FontFile2", "/FontFile3"} & set(below["/FontDescriptor"])
            names.add(re.sub(r"^/\w{6}\+|-.*$", "", below["/BaseFont"]))
    assert names <= {"Source", "Source-Serif-Pro", "Source-Sans-Pro", "DejaVu", "DejaVu-Sans", "DejaVu-Sans-Mono"}


def test_bytes_do_not_depend_on_process_folder_hash_seed_zone_or_locale(tmp_path: Path, rendition: Rendition) -> None:
    own = {"html": rendition.html, "pdf": rendition.pdf, **rendition.figures, **rendition.tables, **rendition.extracts}
    wanted = {name: hashlib.sha256(data).hexdigest() for name, data in own.items()}
    modules = os.pathsep.join([str(HERE.parent), *(entry for entry in sys.path if entry)])
    for seed, zone in (("4242", "Asia/Kathmandu"), ("0", "America/St_Johns")):
        folder = tmp_path / f"folder {seed}"
        folder.mkdir()
        environment = {**os.environ, "PYTHONPATH": modules, "PYTHONHASHSEED": seed, "TZ": zone, "LC_ALL": "C"}
        done = subprocess.run(
            [sys.executable, "-c", MAKE], cwd=folder, env=environment, capture_output=True, check=True
        )
        assert json.loads(done.stdout) == wanted


@pytest.mark.parametrize(
    "body",
    [
        '<img alt="x" src="http://192.0.2.1/x.png">',
        '<img alt="x" src="file:///etc/hostname">',
        '<img alt="x" src="neighbour.png">',
        '<img alt="x" src="data:image/svg+xml,%3Csvg%20xmlns=%22http://www.w3.org/2000/svg%22/%3E">',
        "<style>@import url(http://192.0.2.1/x.css);</style>",
        "<style>body{background:url(file:///etc/hostname)}</style>",
        '<svg width="9" height="9"><title>t</title><image href="file:///etc/hostname" width="9" height="9"/></svg>',
        '<link rel="attachment" href="file:///etc/hostname">',
    ],
)
def test_a_page_that_asks_for_anything_from_outside_makes_no_pdf(body: str) -> None:
    with pytest.raises(RenderError, match="outside the report"):
        pdf_of(simple(f"<p>a</p>{body}"))


def test_the_fetcher_serves_what_is_on_its_list_and_remembers_what_it_refused() -> None:
    fetcher = ClosedFetcher({"face:a": (b"bytes", "font/otf")})
    assert fetcher.fetch("face:a").read() == b"bytes"
    with pytest.raises(BaseException, match="not a part of the report"):
        fetcher.fetch("face:b")
    assert fetcher.refused == ["face:b"]


def test_a_complaint_of_the_layout_engine_is_an_error() -> None:
    with pytest.raises(RenderError, match=r"laid out cleanly.*no-such-property"):
        pdf_of(simple('<p style="no-such-property:1">a</p>'))


def test_missing_system_libraries_are_told_with_the_command_that_brings_them(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "weasyprint.py").write_text("raise OSError(\"cannot load library 'libpango-1.0-0'\")\n")
    monkeypatch.syspath_prepend(str(tmp_path))
    with pytest.raises(RenderError) as told:
        pdf_of(simple("<p>a</p>"))
    assert "libpango-1.0-0" in str(told.value)
    assert "apt-get install --no-install-recommends libpangoft2-1.0-0 libharfbuzz-subset0" in str(told.value)
    assert "The HTML report needs none of them." in str(told.value)


def test_a_layout_process_that_dies_is_told_with_its_last_words(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "weasyprint.py").write_text("raise SystemExit('out of paper')\n")
    monkeypatch.syspath_prepend(str(tmp_path))
    with pytest.raises(RenderError, match="ended with status 1: out of paper"):
        pdf_of(simple("<p>a</p>"))


def test_a_module_in_the_current_folder_cannot_take_the_place_of_a_library(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    (tmp_path / "weasyprint.py").write_text("raise SystemExit('an impostor')\n")
    monkeypatch.chdir(tmp_path)
    assert pdf_of(simple("<p>a</p>")).pages == 1


@pytest.mark.parametrize(("sign", "named"), [("\U0001f980", "CRAB"), ("\u4e2d", "CJK"), ("\x07", "U+0007")])
def test_a_character_without_a_shape_is_refused_by_name_and_place(sign: str, named: str) -> None:
    document = sample()
    extra = Section("extra", "", prose("Extra"), (paragraph("A sign: ", sign),))
    document = replace(document, sections=(*document.sections, extra))
    with pytest.raises(RenderError, match=rf"{re.escape(named)}.*section-extra"):
        render(document)


def test_a_character_without_a_shape_in_the_running_head_is_refused() -> None:
    document = replace(sample(), furniture=replace(FURNITURE, marking="secret \U0001f980"))
    with pytest.raises(RenderError, match="CRAB"):
        render(document)


def test_headings_are_never_the_last_thing_on_a_page() -> None:
    document = sample()
    lines = [paragraph(f"Filler {i}.") for i in range(36)]
    parts = tuple(
        Section(
            f"fill{i}",
            f"{i}",
            prose(f"Heading number {i}"),
            tuple(lines[: 25 + i % 12]),
            opens="page" if i % 3 == 0 else "here",
        )
        for i in range(12)
    )
    document = replace(document, sections=(*document.sections, *parts))
    pdf = pdf_of(page(document, figures_of(document), "print"))
    for text in pages_of(pdf.file):
        body = [line for line in text.splitlines() if line.strip() and "HF-0231" not in line and "page " not in line]
        body = [line for line in body if not line.startswith("edition 2, issued")]
        assert not body[-1].strip().endswith(tuple(f"Heading number {i}" for i in range(12)))

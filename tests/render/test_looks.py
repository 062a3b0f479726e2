"""Templates hold looks only; words, column widths and the faces of the page."""

import os
import re
import shutil
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import pytest
from jinja2 import UndefinedError

import rankdocket.render.assets
from rankdocket.document.model import Column, Emphasis, TableBlock
from rankdocket.errors import RenderError
from rankdocket.render import words
from rankdocket.render.anchors import all_blocks
from rankdocket.render.assets import package_file, templates_folder
from rankdocket.render.columns import set_columns, tail
from rankdocket.render.fonts import FACES, SANS_TEXT, SERIF_ITALIC, advances, slanted_signs, text_signs, width
from rankdocket.render.html import ROUNDING_FILTERS, environment
from render.sample import FURNITURE, number, prose, requirements_table, results_table, sample, variables_table

TEMPLATES = sorted(path for path in templates_folder().rglob("*") if path.is_file())
EXPRESSION = re.compile(r"{{(.*?)}}|{%(.*?)%}", re.DOTALL)
STRING = re.compile(r'"[^"]*"')


def test_the_templates_are_found_beside_the_sources() -> None:
    assert (templates_folder() / "report.html.j2").is_file()
    assert len(TEMPLATES) >= 14


def test_the_templates_are_found_inside_an_installed_package(tmp_path: Path) -> None:
    source = Path(rankdocket.render.assets.__file__).parent.parent
    package = tmp_path / "site" / "rankdocket"
    shutil.copytree(source, package, ignore=shutil.ignore_patterns("__pycache__"))
    shutil.copytree(templates_folder(), package / "report_templates")
    ask = "from rankdocket.render.assets import templates_folder; print(templates_folder())"
    environment = {**os.environ, "PYTHONPATH": str(package.parent), "PYTHONDONTWRITEBYTECODE": "1"}
    done = subprocess.run([sys.executable, "-c", ask], env=environment, capture_output=True, check=True, text=True)
    assert done.stdout.strip() == str(package / "report_templates")
    shutil.rmtree(package / "report_templates")
    done = subprocess.run([sys.executable, "-c", ask], env=environment, capture_output=True, check=False, text=True)
    assert "The folder report_templates is missing" in done.stderr


def test_a_file_that_no_package_carries_is_an_error_that_names_it() -> None:
    with pytest.raises(RenderError, match=r"files/none\.otf of the package font_source_serif_pro"):
        package_file("font_source_serif_pro", "files/none.otf")
    with pytest.raises(RenderError, match="no_such_package"):
        package_file("no_such_package", "a")


@pytest.mark.parametrize("path", TEMPLATES, ids=lambda path: path.name)
def test_a_template_computes_nothing(path) -> None:
    for found in EXPRESSION.finditer(path.read_text(encoding="utf-8")):
        inside = STRING.sub("", found[1] or found[2])
        assert not re.search(r"[+*/%]|\s-\s|//|\d", inside), inside
        filters = set(re.findall(r"\|\s*(\w+)", inside))
        assert filters <= {"cssstr", "safe"}, inside


@pytest.mark.parametrize("path", [path for path in TEMPLATES if ".html." in path.name], ids=lambda path: path.name)
def test_a_page_template_holds_no_word_for_the_reader(path) -> None:
    text = EXPRESSION.sub("", path.read_text(encoding="utf-8"))
    for said in re.findall(r'(?:aria-label|title|alt|content)="([^"]*)"', text):
        assert not said or said.startswith(("width=device-width", "default-src", "no-referrer", "light dark"))
    visible = re.sub(r"<[^>]*>", "", text)
    assert not re.search(r"[A-Za-z]", visible)


@pytest.mark.parametrize("path", [path for path in TEMPLATES if ".css" in path.name], ids=lambda path: path.name)
def test_a_style_sheet_says_nothing_of_its_own(path) -> None:
    text = EXPRESSION.sub("", path.read_text(encoding="utf-8"))
    for content in re.findall(r"[{;]content:([^;}]*)", text):
        assert not any(re.search("[A-Za-z]", re.sub(r"\\a ", "", said)) for said in STRING.findall(content)), content


def test_filters_that_round_are_gone_and_what_is_undefined_is_an_error() -> None:
    templates = environment()
    assert not set(ROUNDING_FILTERS) & set(templates.filters)
    with pytest.raises(UndefinedError):
        templates.from_string("{{ nothing }}").render()
    assert templates.from_string("{{ text }}").render(text="<b>") == "&lt;b&gt;"


def test_every_face_is_there_and_the_page_has_the_signs_of_the_house() -> None:
    assert all(face.path.is_file() for face in FACES)
    assert {ord(sign) for sign in "ρταΣχ²⁻⁵₀≤≥−×½±–—’“”…\u00a0\u2009\u202f"} <= text_signs()
    assert ord("ρ") not in slanted_signs()
    assert ord("n") in advances(SERIF_ITALIC)


def test_digits_of_the_table_face_are_all_of_one_width() -> None:
    assert len({width(digit, SANS_TEXT) for digit in "0123456789"}) == 1


@pytest.mark.parametrize(
    "table", [requirements_table(), results_table(), variables_table()], ids=lambda table: table.key
)
def test_every_number_fits_its_column(table: TableBlock) -> None:
    setting = set_columns(table)
    assert sum(setting.shares) == pytest.approx(100)
    for i, share in enumerate(setting.shares):
        room = setting.total * share / 100
        for row in table.rows:
            for piece in row[i].pieces:
                if hasattr(piece, "key") and hasattr(piece, "exact"):
                    assert width(piece.text, SANS_TEXT) < room


def test_no_table_is_wider_than_its_line() -> None:
    for block in all_blocks(sample()):
        if isinstance(block, TableBlock):
            setting = set_columns(block)
            points = {"normal": 8.6, "dense": 7.6, "tight": 6.8}[setting.size]
            assert setting.total * points <= (700.5 if block.landscape else 430.5)


def test_a_table_that_needs_the_room_is_set_smaller_and_a_long_text_is_broken_instead() -> None:
    def table(columns: int, text: str) -> TableBlock:
        heads = tuple(Column(prose(f"Head {i}"), f"c{i}") for i in range(columns))
        return TableBlock("t", "1", prose("c"), heads, (tuple(prose(text) for _ in heads),))

    assert set_columns(table(3, "short")).size == "normal"
    assert set_columns(table(9, "0.12 to 0.31")).size == "dense"
    assert set_columns(table(4, "a long sentence that goes on and on until it has to be broken")).size == "normal"
    assert set_columns(table(14, "incomprehensible")).size == "tight"


def test_shares_steer_the_columns_that_have_to_break() -> None:
    text = "words and more words " * 8
    columns = (Column(prose("A"), "a", share=1), Column(prose("B"), "b", share=3))
    setting = set_columns(TableBlock("t", "1", prose("c"), columns, ((prose(text), prose(text)),)))
    assert setting.shares[1] > 1.5 * setting.shares[0]


def test_a_decimal_column_measures_what_stands_behind_the_mark() -> None:
    assert tail(prose(number("k", "12"))) == 0
    assert tail(prose(number("k", "0.25"))) == pytest.approx(width(".25", SANS_TEXT))
    assert tail(prose("withheld")) is None
    assert tail(prose(Emphasis("–", "strong"))) is None


def test_a_running_head_that_is_too_long_is_cut_at_a_word() -> None:
    long = replace(FURNITURE, short_title="A title that goes on " * 12)
    head = words.running_head(long)
    assert width(head, SANS_TEXT) <= words.LONGEST_HEAD
    assert head.startswith("HF-0231")
    assert head.endswith("Confidential to the client")
    assert "\u00a0…" in head


def test_the_foot_does_not_say_draft_twice() -> None:
    draft = replace(FURNITURE, edition="draft 1A", status="draft")
    assert words.running_foot(draft).startswith("draft 1A\u2002·")
    assert words.running_foot(FURNITURE).startswith("edition 2, issued\u2002·")


def test_a_report_without_marking_has_a_head_of_two_parts() -> None:
    assert words.running_head(replace(FURNITURE, marking="")) == "HF-0231\u2002·\u2002Vigour of oak seedlings"

"""The HTML page: complete, well-formed for readers and machines, closed to the outside."""

import re
from dataclasses import fields, is_dataclass, replace
from html.parser import HTMLParser
from itertools import pairwise

import pytest

from rankdocket.document.model import CaveatBlock, Citation, Document, Emphasis, FigureBlock, Link, Number, Section
from rankdocket.errors import RenderError
from rankdocket.render.anchors import all_blocks
from rankdocket.render.html import css_string, page
from rankdocket.render.rendition import Rendition, html_only
from render.sample import FURNITURE, draft, number, paragraph, prose, sample

VOID = {"meta", "col", "br", "img", "input", "link", "hr"}


class Reader(HTMLParser):
    """Notes every element with its attributes, and the text below every element that bears a data-key."""

    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self.elements: list[tuple[str, dict[str, str]]] = []
        self.keyed: list[tuple[str, str]] = []
        self.unbalanced: list[str] = []
        self._open: list[tuple[str, str | None]] = []

    def handle_starttag(self, tag, attrs):
        found = {name: value or "" for name, value in attrs}
        self.elements.append((tag, found))
        if tag not in VOID:
            self._open.append((tag, found.get("data-key")))

    def handle_startendtag(self, tag, attrs):
        self.elements.append((tag, {name: value or "" for name, value in attrs}))

    def handle_endtag(self, tag):
        if tag in VOID:
            return
        if not self._open or self._open.pop()[0] != tag:
            self.unbalanced.append(tag)

    def handle_data(self, data):
        if self._open and self._open[-1][1] is not None:
            self.keyed.append((self._open[-1][1], data))


def read(html: str) -> Reader:
    reader = Reader()
    reader.feed(html)
    reader.close()
    return reader


@pytest.fixture(scope="module")
def screen(rendition: Rendition) -> Reader:
    return read(rendition.html.decode("utf-8"))


def numbers_of(part: object) -> list[Number]:
    """Every Number anywhere in a document."""
    if isinstance(part, Number):
        return [part]
    if isinstance(part, tuple | list):
        return [found for item in part for found in numbers_of(item)]
    if is_dataclass(part) and not isinstance(part, FigureBlock):
        return [found for field in fields(part) for found in numbers_of(getattr(part, field.name))]
    return []


def with_blocks(*blocks: object) -> Document:
    extra = Section("extra", "9", prose("Extra"), blocks)  # type: ignore[arg-type]
    document = sample()
    return replace(document, sections=(*document.sections, extra))


def figures_of(document: Document) -> dict[str, str]:
    return {block.key: "<svg></svg>" for block in all_blocks(document) if isinstance(block, FigureBlock)}


def test_every_number_stands_in_the_page_with_its_address(screen: Reader) -> None:
    found = set(screen.keyed)
    wanted = {(number.key, number.text) for number in numbers_of(sample())}
    assert len(wanted) > 200
    assert wanted <= found


def test_nothing_bears_an_address_but_numbers_of_the_document(screen: Reader) -> None:
    wanted = {(number.key, number.text) for number in numbers_of(sample())}
    assert set(screen.keyed) <= wanted


def test_a_cell_that_is_one_number_bears_the_address_itself(rendition: Rendition) -> None:
    assert re.search(r'<td class="right whole" data-key="rows/used">61</td>', rendition.html.decode())


def test_every_element_is_closed_in_order(screen: Reader) -> None:
    assert screen.unbalanced == []


def test_ids_are_unique_and_every_link_leads_to_one(screen: Reader) -> None:
    ids = [attrs["id"] for _, attrs in screen.elements if "id" in attrs]
    assert len(ids) == len(set(ids))
    links = {attrs["href"] for tag, attrs in screen.elements if tag == "a"}
    uses = {attrs["xlink:href"] for tag, attrs in screen.elements if tag == "use"}
    named = {f"#{name}" for _, attrs in screen.elements for name in attrs.get("aria-labelledby", "").split()}
    assert {"#reference-kendall1945", "#table-rows"} <= links
    assert links | uses | named <= {f"#{name}" for name in ids}


def test_nothing_comes_from_outside_and_the_policy_forbids_it(rendition: Rendition, screen: Reader) -> None:
    html = rendition.html.decode()
    assert not re.search(r"url\(|@import|<script|<link|<iframe|<img|\bon\w+=", html)
    addresses = {value for _, attrs in screen.elements for name, value in attrs.items() if name in {"src", "href"}}
    assert all(address.startswith("#") for address in addresses)
    assert set(re.findall(r"https?://[^\"' <]+", html)) <= {
        "http://www.w3.org/2000/svg",
        "http://www.w3.org/1999/xlink",
    }
    policy = next(
        attrs["content"] for _, attrs in screen.elements if attrs.get("http-equiv") == "Content-Security-Policy"
    )
    assert policy.startswith("default-src 'none'")


def test_headings_descend_one_level_at_a_time_under_one_first_heading(screen: Reader) -> None:
    levels = [int(tag[1]) for tag, _ in screen.elements if re.fullmatch(r"h[1-6]", tag)]
    assert levels[0] == 1
    assert levels.count(1) == 1
    assert all(after - before <= 1 for before, after in pairwise(levels))


def test_the_page_has_a_language_one_main_part_and_scopes_in_every_table(screen: Reader) -> None:
    tags = [tag for tag, _ in screen.elements]
    assert dict(screen.elements)["html"]["lang"] == "en-GB"
    assert tags.count("main") == 1
    assert tags.count("caption") == tags.count("table") == 6
    assert all(attrs.get("scope") in {"row", "col"} for tag, attrs in screen.elements if tag == "th")


def test_a_figure_is_an_image_named_by_its_alternative(rendition: Rendition) -> None:
    html = rendition.html.decode()
    images = re.findall(r'<svg [^>]*role="img"[^>]*><title id="[^"]*">([^<]*)</title>', html)
    assert images == [block.alternative for block in all_blocks(sample()) if isinstance(block, FigureBlock)]


def test_screen_and_print_share_their_body_and_differ_in_the_style(rendition: Rendition) -> None:
    document = sample()
    drawn = figures_of(document)
    screen, printed = (page(document, drawn, target) for target in ("screen", "print"))
    assert screen[screen.index("</head>") :] == printed[printed.index("</head>") :]
    without = re.compile(r"<style>.*?</style>", re.DOTALL)
    assert without.sub("", screen) == without.sub("", printed)
    assert screen != printed


def test_markup_in_words_of_others_is_printed_not_obeyed() -> None:
    title = '<script>alert("1")</script></style>\\"}'
    document = replace(sample(), furniture=replace(FURNITURE, title=title, short_title=title))
    html = page(document, figures_of(document), "print")
    assert "<script" not in html
    assert html.count("</style>") == 1


def test_a_css_string_keeps_no_sign_that_could_end_it() -> None:
    assert css_string('a "b"\\ ·') == "a \\000022 b\\000022 \\00005c  \\0000b7 "


def test_greek_in_italics_stands_upright() -> None:
    document = with_blocks(paragraph(Emphasis("rρ", "italic")))
    html = page(document, figures_of(document), "screen")
    assert '<i>r</i><span class="upright">ρ</span>' in html


def test_a_caveat_printed_again_keeps_its_number_and_leaves_the_id_to_the_first(rendition: Rendition) -> None:
    html = rendition.html.decode()
    assert html.count("Caveat 1.") == 2
    assert html.count('id="caveat-ties"') == 1


def test_half_width_figures_stand_two_in_a_line(rendition: Rendition) -> None:
    html = rendition.html.decode()
    assert html.count('<div class="pair">') == 2
    first = html.index('<div class="pair">')
    assert html[first : html.index("</div>", first)].count("<figure ") == 2


def test_a_draft_says_so_on_the_screen_and_an_issued_edition_does_not(rendition: Rendition) -> None:
    assert b"draft, not for reliance" in html_only(draft())
    assert b"draft, not for reliance" not in rendition.html


def test_the_html_alone_is_the_html_of_the_rendition(rendition: Rendition) -> None:
    assert html_only(sample()) == rendition.html


def test_references_are_listed_at_the_end_when_no_section_is_kept_for_them() -> None:
    document = sample()
    kept = tuple(section for section in document.sections if section.key != "references")
    document = replace(document, sections=kept)
    html = page(document, figures_of(document), "screen")
    assert (
        html.index('id="section-record"')
        < html.index('id="section-references"')
        < html.index('id="reference-kendall1945"')
    )


@pytest.mark.parametrize(
    ("block", "message"),
    [
        (paragraph(Link("nowhere", "there")), "nowhere"),
        (paragraph(Link("results", "there")), "more than one"),
        (paragraph(Citation("student1921", "Student 1921")), "student1921"),
        (CaveatBlock("ties", 8, prose("Another caveat under a key in use.")), "caveat-ties"),
    ],
)
def test_a_reference_that_leads_nowhere_or_twice_is_refused(block: object, message: str) -> None:
    document = with_blocks(block)
    if message == "more than one":
        assert {"section-results", "table-results"} <= {
            attrs.get("id") for _, attrs in read(page(sample(), figures_of(sample()), "screen")).elements
        }
    with pytest.raises(RenderError, match=message):
        page(document, figures_of(document), "screen")


def test_a_table_with_a_short_row_is_refused() -> None:
    document = sample()
    table = next(block for block in all_blocks(document) if getattr(block, "key", "") == "rows")
    broken = replace(table, key="broken", rows=((prose(number("k", "1")),),))  # type: ignore[type-var]
    with pytest.raises(RenderError, match="broken"):
        page(with_blocks(broken), figures_of(document), "screen")

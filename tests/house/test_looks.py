"""Templates hold looks only, and nothing that a report is made of leads out of it."""

import re
from html.parser import HTMLParser
from pathlib import Path

import pytest
from jinja2 import Environment, nodes

from house.ground import TEMPLATES
from workflow.office import Sealed, snapshot

PAGES = sorted(TEMPLATES.rglob("*.html.j2"))
LOOKS = sorted(path for path in TEMPLATES.rglob("*") if path.is_file())
ARITHMETIC = (nodes.Add, nodes.Sub, nodes.Mul, nodes.Div, nodes.FloorDiv, nodes.Mod, nodes.Pow, nodes.Neg, nodes.Pos)
FILTERS = {"cssstr", "safe"}
NAMESPACES = {"http://www.w3.org/2000/svg", "http://www.w3.org/1999/xlink"}
"""Names of formats, which nothing fetches."""


@pytest.mark.parametrize("path", LOOKS, ids=lambda path: path.name)
def test_a_template_does_no_arithmetic(path: Path) -> None:
    """No template adds, divides, rounds or formats anything: numbers come to it as text."""
    tree = Environment(autoescape=True).parse(path.read_text(encoding="utf-8"))
    assert list(tree.find_all(ARITHMETIC)) == []
    assert {node.name for node in tree.find_all(nodes.Filter)} <= FILTERS


class _Words(HTMLParser):
    """Collects what would stand between the tags."""

    def __init__(self) -> None:
        super().__init__()
        self.text = ""

    def handle_data(self, data: str) -> None:
        self.text += data


@pytest.mark.parametrize("path", PAGES, ids=lambda path: path.name)
def test_a_template_says_nothing(path: Path) -> None:
    """No word of a report stands in a template: all of them come from the document."""
    template = path.read_text(encoding="utf-8")
    words = _Words()
    template = re.sub(r"(</?)\{\{.*?\}\}", r"\1i", template)  # an element whose name is chosen
    words.feed(re.sub(r"\{%.*?%\}|\{\{.*?\}\}|\{#.*?#\}", "", template, flags=re.DOTALL))
    assert re.findall(r"[A-Za-z]+", words.text) == []


def test_a_template_leads_nowhere() -> None:
    """No template names an address of the network."""
    assert [path.name for path in LOOKS if re.search(r"(?:https?|ftp|file):", path.read_text(encoding="utf-8"))] == []


def test_an_edition_leads_nowhere(issued: Sealed) -> None:
    """Page and figures hold no address, no script and no link but those within the report."""
    for name, data in snapshot(issued.edition).items():
        if name.endswith((".html", ".svg")):
            text = data.decode("utf-8")
            assert set(re.findall(r"(?:https?|ftp|file)://[^\s\"'<>)]*", text)) <= NAMESPACES, name
            assert [link for link in re.findall(r'\b(?:href|src|action)="([^"]*)"', text) if link[:1] != "#"] == []
            assert re.findall(r"<(?:script|iframe|object|embed|link|base)\b", text) == []
            assert re.findall(r"\son[a-z]+=", text) == []


def test_every_link_of_the_page_has_its_target(issued: Sealed) -> None:
    """Each link within the report leads to one element, and no two elements share an id."""
    text = (issued.edition / "report.html").read_text(encoding="utf-8")
    ids = re.findall(r'\bid="([^"]+)"', text)
    assert len(ids) == len(set(ids))
    links = set(re.findall(r'href="#([^"]+)"', text))
    assert len(links) > 5
    assert links <= set(ids)

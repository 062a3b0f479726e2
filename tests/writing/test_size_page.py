"""The page about rows: its words, its numbers, and that nothing else stands on it."""

import re
from dataclasses import replace
from decimal import Decimal

import pytest

from rankdocket.analysis.sizing import Circumstances, MeasureQuestion, ShowQuestion, SizeQuestion, size
from rankdocket.analysis.sizing_plain import size_to_plain
from rankdocket.document.model import FigureBlock, Leaf
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import all_prose, lint_document, numbers_of, text_of
from rankdocket.render.anchors import all_blocks
from rankdocket.render.leaf import leaf_html, leaf_pdf
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.writing.size_page import size_leaf, told
from rankdocket.writing.size_words import Told

FIVE = tuple(map(Decimal, (10, 20, 40, 20, 10)))
SEVEN = tuple(map(Decimal, range(1, 8)))
PLAIN = Circumstances(None, None, Decimal(0), Decimal("0.95"))
FULL = Circumstances(FIVE, SEVEN, Decimal("0.10"), Decimal("0.99"))
SHOW = ShowQuestion(Decimal("0.40"), Decimal("0.80"), Decimal("0.05"), "two-sided", 1, PLAIN)
QUESTIONS: dict[str, SizeQuestion] = {
    "show": SHOW,
    "show everything": ShowQuestion(Decimal("-0.40"), Decimal("0.85"), Decimal("0.05"), "one-sided", 6, FULL),
    "show near 1": replace(SHOW, rho=Decimal("0.97")),
    "show next to nothing": replace(SHOW, rho=Decimal("0.001")),
    "measure": MeasureQuestion(Decimal("0.40"), Decimal("0.30"), PLAIN),
    "measure everything": MeasureQuestion(Decimal("-0.90"), Decimal("0.10"), FULL),
    "measure nothing": MeasureQuestion(Decimal("0.00"), Decimal("1.90"), PLAIN),
}


def _told(name: str) -> Told:
    answer = size(QUESTIONS[name])
    assert not isinstance(answer, NoAnswer)
    return told(answer, size_to_plain(answer, "9.9.9"))


def _leaf(name: str) -> Leaf:
    return size_leaf(_told(name), "9.9.9")


def _words(leaf: Leaf) -> str:
    return " ".join(text_of(content) for content in all_prose(leaf))


@pytest.mark.parametrize("name", QUESTIONS)
def test_every_number_stands_in_the_filed_answer(name: str) -> None:
    """Each number points to the value it was rounded from, and keeps to the wording rules with its sentence."""
    story = _told(name)
    leaf = size_leaf(story, "9.9.9")
    found = list(numbers_of(leaf))
    assert len(found) > 20
    for number in found:
        assert str(look_up(story.plain, number.key)) == number.exact, number.key
    assert lint_document(leaf) == ()


@pytest.mark.parametrize("name", ["show everything", "measure everything"])
def test_the_page_is_one(name: str) -> None:
    """The plans with most to say fit on one page, whose file holds no date."""
    pdf = leaf_pdf(_leaf(name))
    assert pdf.pages == 1
    assert b"/CreationDate" not in pdf.file


@pytest.mark.parametrize("name", QUESTIONS)
def test_the_page_names_no_date_and_no_register(name: str) -> None:
    """Made twice, its bytes are the same; it holds no date, points to no edition, and has every number at its address."""
    html = leaf_html(_leaf(name)).decode("utf-8")
    assert html == leaf_html(_leaf(name)).decode("utf-8")
    assert re.search(r"\b20\d\d-\d\d-\d\d\b|register|dcterms", html) is None
    for number in numbers_of(_leaf(name)):
        assert f'data-key="{number.key}"' in html


def test_the_answer_says_how_it_is_decided() -> None:
    """Rho, power, rows, what each question is tested at, ties and rows to collect stand in one paragraph."""
    words = _words(_leaf("show everything"))
    assert "To show a rho of −0.40 with power 0.85, " in words
    assert "6 questions share an alpha of 0.05, each tested at 0.0083 one-sided, on the side of that rho." in words
    assert re.search(r"The expected ties \([^)]*\) bring that rho nearer to zero, to −0\.37\d, and", words)
    assert re.search(r"With 10% of the rows lacking a value, \d+ rows have to be collected\.", words)
    assert "Dunn 1961" in words
    assert "Nešlehová 2007" in words
    assert "bivariate normal law" in words


def test_so_few_rows_that_the_formula_overstates_are_said_to_be_few() -> None:
    """In the answer, beside the power, below the table, as the first caveat and in the filed answer."""
    story = _told("show near 1")
    words = _words(size_leaf(story, "9.9.9"))
    assert story.plain["power_may_be_overstated"] is True
    assert (
        " complete rows are needed by a formula that tends to overstate the power with so few rows, tested at" in words
    )
    assert re.search(r"the power is 0\.\d+ by the formula, though the exact test can have less", words)
    assert "Where fewer than 12 rows stand, the formula tends to overstate the power" in words
    assert (
        "With so few rows, fewer than 12, the formula tends to overstate the power; the exact test can have less."
        in words
    )
    assert _told("show").plain["power_may_be_overstated"] is False
    assert "overstate" not in _words(_leaf("show"))


def test_expected_shares_are_named_and_said_to_be_rescaled_where_they_do_not_add_up() -> None:
    """Those of the second variable add up to 28; shares that add up to a hundred are used as they are."""
    words = _words(_leaf("show everything"))
    assert "The expected ties (values in shares of 10 : 20 : 40 : 20 : 10, and of 1 : 2 : 3" in words
    rescaled = "Shares that do not add up to a hundred percent were rescaled to do so."
    assert rescaled in words
    five = size(replace(SHOW, rows=replace(PLAIN, first=FIVE)))
    assert not isinstance(five, NoAnswer)
    assert rescaled not in _words(size_leaf(told(five, size_to_plain(five, "9.9.9")), "9.9.9"))


def test_what_does_not_apply_is_not_said() -> None:
    """Without ties, losses and company the page speaks of none, but for the caveat that ties change the plan."""
    words = _words(_leaf("show"))
    assert "With power 0.80" not in words
    assert "To show a rho of 0.40 with power 0.80, 48 complete rows are needed, tested at 0.05 two-sided." in words
    assert "have to be collected" not in words
    assert "Dunn" not in words
    assert "Left by the ties" not in words
    assert "Ties lower the rho that can be found" in words


def test_the_factor_of_the_interval_is_stated() -> None:
    """A plan for a width says how much wider than the formula the interval is, and what the formula alone asks for."""
    words = _words(_leaf("measure"))
    assert re.search(r"the mean width is 0\.\d+, 1\.0\d+ times that of the formula of Bonett and Wright", words)
    assert "alone would ask for 132 rows" in words


@pytest.mark.parametrize("name", QUESTIONS)
def test_the_figure_shows_the_plan(name: str) -> None:
    """The mark of the figure is the answer, and its first curve passes through or beside it."""
    story = _told(name)
    [figure] = (block for block in all_blocks(size_leaf(story, "9")) if isinstance(block, FigureBlock))
    mark = figure.data["mark"]
    assert isinstance(mark, dict)
    assert mark["x"] == str(story.plain["rows"])
    assert mark["label"] in figure.alternative or mark["label"] in text_of(figure.caption)

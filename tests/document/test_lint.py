"""The wording rules: what claims more than a rank correlation can is found, what only looks like it is not.

The forbidden phrases are those of Altman & Bland 1995 (BMJ 311: 485) and Greenland et al. 2016 (European Journal of
Epidemiology 31: 337-350) as the house reads them.
"""

import pytest

from document.specimen import EVERY_BLOCK, with_words
from rankdocket.document.model import CaveatBlock, FieldList, Items, Paragraph, Supplied
from rankdocket.document.prose import _RULES, Hit, lint, lint_document, numbers_of, only, prose

ABSENCE = "absence of evidence is not evidence of absence"
DEGREES = "a p-value has no degrees"
PROOF = "a sample neither proves nor confirms"
WHY = "an association does not say why"
SIZE = "no adjective for size without a stated scale"
PROBABILITY = "p is not the probability of a hypothesis"
ZERO = "p is never zero"
PLAN = "a finding is stated in the plan’s own words"
ABSOLUTE = "no absolute claims"
MARKS = "no marks for p-values"

FORBIDDEN = (
    ("There was no correlation.", "no correlation", ABSENCE),
    ("Zero correlation was found.", "Zero correlation", ABSENCE),
    ("We found no association between them.", "no association", ABSENCE),
    ("There is no relationship.", "no relationship", ABSENCE),
    ("Load and creep are unrelated.", "are unrelated", ABSENCE),
    ("They were uncorrelated.", "were uncorrelated", ABSENCE),
    ("The two variables are independent.", "variables are independent", ABSENCE),
    ("Both were independent.", "Both were independent", ABSENCE),
    ("There was a trend towards more creep.", "trend towards", "a p-value above alpha is not almost below it"),
    ("It was trending toward alpha.", "trending toward", "a p-value above alpha is not almost below it"),
    ("The result was marginally smaller.", "marginally", DEGREES),
    ("It is borderline significant.", "borderline significant", DEGREES),
    ("It is highly significant.", "highly significant", DEGREES),
    ("This proves the point.", "proves", PROOF),
    ("It was proven.", "proven", PROOF),
    ("The data confirm it.", "confirm", PROOF),
    ("Load causes creep.", "causes", WHY),
    ("A causal path.", "causal", WHY),
    ("Load leads to creep.", "leads to", WHY),
    ("This led to creep.", "led to", WHY),
    ("Load drives creep.", "drives", WHY),
    ("The effect of load.", "effect of", WHY),
    ("The effects of load.", "effects of", WHY),
    ("Creep due to load.", "due to", WHY),
    ("A strong association.", "strong association", SIZE),
    ("They were weakly correlated.", "weakly correlated", SIZE),
    ("A moderate rank correlation.", "moderate rank correlation", SIZE),
    ("Here p is the probability that rho is nil.", "p is the probability that", PROBABILITY),
    ("The p-value was the probability that chance did it.", "p-value was the probability that", PROBABILITY),
    ("p = 0.000", "p = 0.000", ZERO),
    ("p = .000", "p = .000", ZERO),
    ("p=0", "p=0", ZERO),
    ("The result was n.s. here.", "n.s.", PLAN),
    ("It was not significant.", "not significant", PLAN),
    ("A statistically significant result.", "statistically significant", PLAN),
    ("Known beyond any doubt.", "beyond any doubt", ABSOLUTE),
    ("It is guaranteed.", "guaranteed", ABSOLUTE),
    ("rho 0.85*", "5*", MARKS),
    ("rho 0.85 ***", "5 ***", MARKS),
)

ALLOWED = (
    "No rank correlation could be computed: fewer than three complete rows.",
    "The plan declares the rows independent.",
    "Each pump was tested independently of the others.",
    "That does not show that there is none.",
    "A trend line was not drawn.",
    "A margin of alpha, a border and a line.",
    "The provision of gloves improved; the firm was approved.",
    "Because of the ties the null is lopsided.",
    "The lead time of the led lamps.",
    "The driver of the lorry.",
    "Side effects were counted.",
    "Payment is due today.",
    "A strong smell; weak solder; moderate heat.",
    "The probability that a permutation is at least as extreme.",
    "p = 0.05",
    "p = 0.0004",
    "p = 0.024, p < 0.001",
    "The row was significant to the client.",
    "footnote * and **",
)


@pytest.mark.parametrize(("text", "phrase", "rule"), FORBIDDEN, ids=[text for text, _, _ in FORBIDDEN])
def test_a_forbidden_phrase_is_found_as_it_stands(text: str, phrase: str, rule: str) -> None:
    """The phrase is quoted with its own capitals, and the rule says why."""
    assert Hit(phrase, rule) in lint(text)


@pytest.mark.parametrize("text", ALLOWED)
def test_a_near_miss_is_left_alone(text: str) -> None:
    """Words that only look like a forbidden phrase are allowed."""
    assert lint(text) == ()


def test_every_rule_has_an_example() -> None:
    """No rule of the lint is without a sentence that it finds."""
    found = {hit.rule for text, _, _ in FORBIDDEN for hit in lint(text)}
    assert found == {why for _, why in _RULES}


def test_hits_come_in_the_order_of_the_text() -> None:
    """Several phrases of one sentence are all found."""
    assert [hit.phrase for hit in lint("It proves that load causes creep, p = 0.000.")] == [
        "proves",
        "causes",
        "p = 0.000",
    ]


def test_a_document_without_forbidden_words_has_no_hit() -> None:
    """The specimen with every block is clean, although its supplied words are not."""
    assert lint_document(EVERY_BLOCK) == ()


WORDS = only("This proves it.")


@pytest.mark.parametrize(
    "block",
    [
        Paragraph(WORDS),
        Items((only("Fine."), WORDS)),
        FieldList((("Answer", WORDS),)),
        FieldList((("Answer", only("Fine.")),), caption=WORDS),
        CaveatBlock("caveat-1", 1, WORDS),
    ],
    ids=["paragraph", "items", "field list", "caption of a field list", "caveat"],
)
def test_forbidden_words_of_the_program_are_found_in_any_block(
    block: Paragraph | Items | FieldList | CaveatBlock,
) -> None:
    """Wherever the sentence stands, it is found once."""
    assert lint_document(with_words(block)) == (Hit("proves", PROOF),)


def test_supplied_words_are_not_the_programs_own() -> None:
    """The same words, supplied, are no fault of the program."""
    assert lint_document(with_words(Paragraph(prose("{words}", words=Supplied("This proves it."))))) == ()


def test_numbers_are_given_in_print_order_as_often_as_they_stand() -> None:
    """A number printed twice is given twice."""
    assert [number.text for number in numbers_of(EVERY_BLOCK)][:3] == ["7", "0.85", "7"]

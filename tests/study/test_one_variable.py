"""Step-down maxT asks for one shared variable, one coefficient and one direction; a spec without them is refused."""

import pytest

from analysis.invented import Invented, association
from rankdocket.study.reader import read_spec
from rankdocket.vocabulary import ADJUSTMENTS
from study.faults import spec_messages

RULE = "alpha: 0.05, several_tests: {adjust: step-down maxT}"
ONE_SIDED = RULE + ", sidedness: one-sided"
COLUMNS = dict.fromkeys(("u", "v", "w", "z"), "1 2 3 4 5")


def messages(*associations: str, inference: str = RULE) -> list[str]:
    """Return what a spec of these associations is refused with."""
    plan = {f"A{place}": text for place, text in enumerate(associations, start=1)}
    return spec_messages(Invented(columns=COLUMNS, associations=plan, inference=inference).spec_text())


def test_every_word_can_be_written() -> None:
    """Each adjustment of the list is read as it is written."""
    for word in ADJUSTMENTS:
        text = Invented(inference=f"alpha: 0.05, several_tests: {{adjust: {word}, reason: as agreed}}").spec_text()
        assert read_spec(text, "s.yaml").inference.several_tests.adjust == word


def test_a_family_without_a_shared_variable_is_refused() -> None:
    """Each two of them share one, all three none."""
    (message,) = messages(association("u", "v"), association("v", "w"), association("w", "u"))
    assert "inference.several_tests.adjust: step-down maxT permutes one variable that all associations" in message
    assert "A1, A2, A3 share none" in message
    assert message.endswith("(message 40)")


@pytest.mark.parametrize(
    "associations",
    [
        (association("u", "v"), association("w", "u"), association("u", "z")),
        (association("u", "v"), association("v", "u")),
        (association("u", "v"),),
        # Outside the family nothing is asked.
        (association("u", "v"), association("w", "u"), association("w", "z", role="secondary")),
        (
            association("u", "v"),
            association("w", "u"),
            association("w", "z", role="secondary", more="coefficient: Kendall tau-b"),
        ),
    ],
)
def test_a_shared_variable_may_stand_on_either_side(associations: tuple[str, ...]) -> None:
    """First or second, in a family of one, or beside associations outside the family."""
    assert messages(*associations) == []


def test_another_coefficient_is_refused_where_it_stands() -> None:
    """Coefficients of two kinds have no common maximum."""
    (message,) = messages(association("u", "v"), association("u", "w", more="coefficient: Kendall tau-b"))
    assert (
        "associations.A2.coefficient: step-down maxT compares Spearman rho only, and A2 asks for Kendall tau-b."
        in message
    )


@pytest.mark.parametrize(
    ("signs", "inference", "refused"),
    [
        (("positive", "negative"), ONE_SIDED, True),
        (("negative", "negative"), ONE_SIDED, False),
        (("positive", "negative"), RULE, False),
    ],
)
def test_signs_that_differ_are_refused_in_one_sided_tests(
    signs: tuple[str, str], inference: str, refused: bool
) -> None:
    """The largest coefficient is the largest in one direction."""
    found = messages(
        *(association("u", other, sign=sign) for other, sign in zip("vw", signs, strict=True)), inference=inference
    )
    assert [("the signs expected in the family differ" in message) for message in found] == [True] * refused


def test_other_rules_ask_for_none_of_it() -> None:
    """They need p-values only."""
    associations = (association("u", "v", more="coefficient: Kendall tau-b"), association("w", "z", sign="negative"))
    for rule in ADJUSTMENTS:
        if rule != "step-down maxT":
            inference = f"alpha: 0.05, sidedness: one-sided, several_tests: {{adjust: {rule}, reason: as agreed}}"
            assert messages(*associations, inference=inference) == []

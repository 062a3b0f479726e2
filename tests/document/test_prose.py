"""Sentences with slots: words only in a template, every slot filled, every value used."""

import pytest

from rankdocket.document.model import Emphasis, Link, Number, Prose, Supplied
from rankdocket.document.prose import generated_text, joined, listed, only, prose, text_of

THREE = Number("tally/associations", "3", "3")


def test_slots_are_filled_in_order() -> None:
    """Words stay words, values stay what they are, prose in a slot is taken apart."""
    found = prose("Of {count} rows, {part}.", count=THREE, part=prose("{label} was read", label=Supplied("2,4-D")))
    assert found.pieces == ("Of ", THREE, " rows, ", Supplied("2,4-D"), " was read", ".")
    assert text_of(found) == "Of 3 rows, 2,4-D was read."


def test_a_slot_may_stand_twice() -> None:
    """One value then stands in both places."""
    assert text_of(prose("{n} and {n}", n=THREE)) == "3 and 3"


@pytest.mark.parametrize("template", ["The 5 rows", "p < 0.05", "Table ²", "row ٣"])
def test_a_digit_in_the_words_is_refused(template: str) -> None:
    """Every number has an address, in whatever script it is written."""
    with pytest.raises(ValueError, match="a number stands in the words"):
        prose(template)


@pytest.mark.parametrize("word", ["5 rows", "A1"])
def test_a_digit_in_words_given_to_a_slot_is_refused(word: str) -> None:
    """Words in a slot are the program’s own as well."""
    with pytest.raises(ValueError, match="give it an address"):
        prose("{what}", what=word)


def test_a_slot_without_a_value_is_refused() -> None:
    """The message names the slot."""
    with pytest.raises(ValueError, match=r"\{rows\} has no value"):
        prose("{rows} rows")


def test_a_value_without_a_slot_is_refused() -> None:
    """A number that would silently not be printed is a mistake."""
    with pytest.raises(ValueError, match=r"no slot for \['a', 'b'\]"):
        prose("rows", b=THREE, a=THREE)


@pytest.mark.parametrize("template", ["{n:.2f}", "{n!r}", "{n!s}", "{n.text}", "{n[0]}", "{}", "{n:>5}"])
def test_a_slot_with_a_formatting_code_is_refused(template: str) -> None:
    """Nothing is formatted outside the rules of printed numbers."""
    with pytest.raises(ValueError, match="formatting code"):
        prose(template, n=THREE)


def test_parts_are_joined_and_listed() -> None:
    """Empty parts leave no separator behind."""
    parts = (only("a"), only("b"), only("c"))
    assert text_of(joined(parts)) == "a b c"
    assert text_of(joined((Prose(()), only("a"), Prose(()), only("b")), "; ")) == "a; b"
    assert [text_of(listed(parts[:k])) for k in range(4)] == ["", "a", "a and b", "a, b and c"]


def test_the_programs_own_words_are_told_from_those_supplied() -> None:
    """Supplied words and literals are masked; numbers, links and symbols are the program’s own."""
    content = Prose(
        (
            "See ",
            Link("data", "2"),
            ": ",
            Supplied("no effect"),
            " ",
            Emphasis("proves", "code"),
            Emphasis("p", "italic"),
            THREE,
        )
    )
    assert generated_text(content) == "See 2: … …p3"

"""How editions are called and which name comes next."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.errors import RegisterError
from rankdocket.register.names import EditionName, name_after

_names = st.builds(EditionName, st.integers(1, 30), st.none() | st.text("ABXYZ", min_size=1, max_size=3))


@pytest.mark.parametrize(
    ("text", "name"), [("2", EditionName(2, None)), ("1A", EditionName(1, "A")), ("10AB", EditionName(10, "AB"))]
)
def test_a_name_is_read_as_it_is_written(text: str, name: EditionName) -> None:
    assert EditionName.parse(text) == name
    assert name.folder == text
    assert name.is_draft == (name.letter is not None)


@pytest.mark.parametrize("text", ["", "0", "01", "1a", "A", "-1", "1 ", "1A1", "١", "1Ä", "../1", "9" * 5000])
def test_anything_else_is_no_edition_and_the_answer_says_what_to_write(text: str) -> None:
    assert not EditionName.is_name(text)
    with pytest.raises(RegisterError, match="Write a number such as 2, or 2A for a draft"):
        EditionName.parse(text)


def test_a_name_cannot_be_made_of_parts_that_could_not_be_read_back() -> None:
    for number, letter in ((0, None), (1, ""), (1, "a"), (-1, "A")):
        with pytest.raises(ValueError, match="is not the name of an edition"):
            EditionName(number, letter)


def test_drafts_stand_before_their_edition_and_two_letters_after_one() -> None:
    texts = ["1A", "1B", "1Z", "1AA", "1AB", "1", "2A", "2", "10A", "10"]
    names = [EditionName.parse(text) for text in reversed(texts)]
    assert [name.folder for name in sorted(names, key=lambda name: name.order)] == texts


@pytest.mark.parametrize(
    ("used", "edition", "draft"),
    [
        ((), "1", "1A"),
        (("1A",), "1", "1B"),
        (("1A", "1Y", "1Z"), "1", "1AA"),
        (("1A", "1Z", "1AZ"), "1", "1BA"),
        (("1ZZ",), "1", "1AAA"),
        (("1A", "1B", "1"), "2", "2A"),
        (("1", "3"), "4", "4A"),
        (("1", "2A", "5A"), "2", "2B"),
    ],
)
def test_numbers_go_up_by_one_and_drafts_are_lettered_for_the_coming_edition(
    used: tuple[str, ...], edition: str, draft: str
) -> None:
    names = [EditionName.parse(text) for text in used]
    assert name_after(names, draft=False).folder == edition
    assert name_after(names, draft=True).folder == draft


@given(st.sets(_names), st.booleans())
def test_no_name_is_ever_given_twice(used: set[EditionName], draft: bool) -> None:
    assert name_after(used, draft) not in used


def test_a_thousand_drafts_have_a_thousand_names_in_order() -> None:
    names: list[EditionName] = []
    for _ in range(1000):
        names.append(name_after(names[-1:], draft=True))
    assert len(set(names)) == 1000
    assert names == sorted(names, key=lambda name: name.order)

"""YAML that a spec does not use, and YAML that is none."""

import pytest
import yaml

from rankdocket.study import nodes
from rankdocket.study.reader import read_spec
from study.faults import changed, spec_messages
from study.specs import PANEL, PLANKTON

REFUSED = (
    ("title: Chlorophyll", "title: &a Chlorophyll", "s.yaml:3:10: study.title: &a names a part of the file", 20),
    ("title: Chlorophyll and water", "title: *a #", "s.yaml:3:10: study.title: *a repeats another part", 20),
    ("title: Chlorophyll", "title: !!str Chlorophyll", "s.yaml:3:10: study.title: ", 20),
    ("  title:", "  <<: {client: x}\n  title:", "s.yaml:3:3: study: << copies keys", 20),
    ("study:", "%YAML 1.1\n---\nstudy:", "s.yaml:1:1: a line that begins with %", 20),
    ("  title:", "  title: x\n  title:", 's.yaml:4:3: study.title: "title" stands twice, first in line 3.', 21),
    ("  title:", "  ? [a]\n  : b\n  title:", "s.yaml:3:5: study: a key is a word", 22),
    ("  title:", '  {a: b}: "c"\n  title:', "s.yaml:3:3: study: a key is a word", 22),
    ("inference:", "---\ninference:", "s.yaml:31:1: a second document begins here", 23),
    ("  title:", f"  ? {'k' * 101}\n  : x\n  title:", "s.yaml:3:5: study: a key longer than 100", 24),
    ("title: ", f"title: {'x' * 20_001}", "s.yaml:3:10: a text longer than 20000 characters.", 24),
    ("alpha: 0.05", "alpha: " + "[" * 30 + "]" * 30, "s.yaml:32:29: nested deeper than 20 levels.", 24),
    ("  title:", "\ttitle:", "s.yaml:3:1: a tab stands in the indentation. Indent with spaces.", 18),
    ("title: C", "title: \x07C", "s.yaml:3:10: the character U+0007 cannot stand in a spec.", 19),
    ("title: C", "title: C\u2028", "s.yaml:3:11: the character U+2028 cannot stand in a spec.", 19),
    ("title: C", 'title: "\\0" # C', "s.yaml:3:10: study.title: the text holds U+0000", 19),
    ("alpha: 0.05", "alpha: ~", 's.yaml:32:10: inference.alpha: ~ is read as "nothing" by YAML.', 16),
    ('["", "n/a"]', '["",\n      ]\n  x: [a,]\n  y:\n    -', "s.yaml:13:6: data.y.1: nothing is written", 26),
    ('"LK-031"', '"LK-031', "s.yaml:9:22: ", 17),
    ("title: C", "title: a: b C", 's.yaml:3:11: a ": " stands where no key can be.', 17),
    ("title: Chlorophyll and water clarity in Lake Ormel", "words", "s.yaml:4:3: a key stands without its colon.", 17),
    ("title: C", "title: [C", "s.yaml:4:9: a bracket is opened and not closed, or a comma is missing.", 17),
    ("title: C", "title: @C", "s.yaml:3:10: a value cannot begin with this character.", 17),
    ("title: C", 'title: "\\q" # C', "s.yaml:3:11: a backslash in double quotes has no known letter after it.", 17),
    ("  title:", "   title:", "s.yaml:3:4: ", 17),
    ("alpha: 0.05", 'alpha: "0.05', "s.yaml:32:10: quotation marks are opened and not closed.", 17),
)


@pytest.mark.parametrize(("old", "new", "begins", "number"), REFUSED)
def test_what_a_spec_does_not_use_is_refused_in_its_place(old: str, new: str, begins: str, number: int) -> None:
    """Each part of YAML that could surprise a reader is refused with a sentence, its place and its number."""
    found = spec_messages(changed(PLANKTON, (old, new)))
    assert [message for message in found if message.startswith(begins) and message.endswith(f"(message {number})")]


def test_a_very_large_file_is_not_read() -> None:
    """A file beyond the size of any spec is refused before it is looked at."""
    assert spec_messages("x" * 1_000_001) == ["s.yaml: the file is larger than 1000000 bytes. (message 24)"]


def test_too_many_values_are_not_read() -> None:
    """A list that grows beyond the size of any spec is left."""
    (message,) = spec_messages("study: [" + "1," * 200_000 + "1]")
    assert "more than 200000 values" in message


def test_a_document_start_is_no_second_document() -> None:
    """Three hyphens at the top, and three full stops at the end, change nothing."""
    assert read_spec("---\n" + PLANKTON + "...\n", "s.yaml").study.number == "LK-031"


@pytest.mark.parametrize("loader", [yaml.SafeLoader, yaml.CSafeLoader])
def test_both_loaders_give_one_tree(loader: type, monkeypatch: pytest.MonkeyPatch) -> None:
    """With and without the compiled parser the tree, its places included, is the same."""
    expected = nodes.read_tree(PANEL, "s.yaml")
    monkeypatch.setattr(nodes, "_Loader", loader)
    assert nodes.read_tree(PANEL, "s.yaml") == expected


@pytest.mark.parametrize(("old", "new", "begins", "number"), REFUSED)
def test_without_the_compiled_parser_the_same_is_refused(
    old: str, new: str, begins: str, number: int, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The slower parser words its errors otherwise; ours keep their number."""
    monkeypatch.setattr(nodes, "_Loader", yaml.SafeLoader)
    found = spec_messages(changed(PLANKTON, (old, new)))
    assert [message for message in found if message.endswith(f"(message {number})")], begins


def test_plain_scalars_stay_the_text_that_stands_in_the_file() -> None:
    """on, 010, 1.10, 12:30, NO, -9 and 1e-3 are read as those characters."""
    words = ["on", "010", "1.10", "12:30", "NO", "-9", "1e-3", "0x1F", "1_000", "2026-04-09", "true"]
    text = changed(PLANKTON, ('["", "n/a"]', f"[{', '.join(words)}]"))
    assert list(read_spec(text, "s.yaml").data["survey"].missing_codes) == words


def test_a_leading_zero_is_kept_in_text_and_refused_in_a_number() -> None:
    """Station 007 stays 007; a row number 010 could be 8 or 10 and is refused."""
    assert read_spec(PANEL, "s.yaml").rows.leave_out[0].where == {"taster": "007", "booth": "NO"}
    assert spec_messages(changed(PLANKTON, ("    file:", "    column_names_in_row: 010\n    file:"))) == [
        (
            "s.yaml:8:26: data.survey.column_names_in_row: 010 begins with 0 and is read by some as a number to another "
            "base than ten. Write 10. (message 16)"
        )
    ]


def test_a_decimal_comma_in_a_list_is_two_entries_and_said_so() -> None:
    """0,5 in square brackets is two entries to YAML; a list that must have two entries is refused."""
    (message,) = spec_messages(changed(PLANKTON, ("[chlorophyll, clarity]", "[chlorophyll, clarity,5]")))
    assert message == (
        "s.yaml:27:5: associations.A1.between: the list is too long: 3 where 2 stand. Strike what is too much. "
        "(message 28)"
    )


@pytest.mark.parametrize("word", ["on", "off", "yes", "no", "y", "n", "null", "true", "false", "On", "NO"])
def test_words_that_yaml_bends_are_no_names(word: str) -> None:
    """A name that another reader of YAML would turn into true, false or nothing is refused."""
    (message,) = spec_messages(changed(PLANKTON, ("  A1:", f"  {word}:")))
    assert message == (
        f's.yaml:26:3: associations.{word}: "{word}" is a word that YAML reads as true, false or nothing. '
        "Use another name. (message 16)"
    )


def test_a_bent_word_as_a_key_is_named_as_such() -> None:
    """The key on, which others read as true, is refused as that trap."""
    found = spec_messages(changed(PLANKTON, ("  one_row_is:", "  on: 2026-04-09\n  one_row_is:")))
    assert found == [
        (
            's.yaml:11:3: rows.on: "on" is a word that YAML reads as true, false or nothing, and not a key of rows. '
            "(message 16)"
        )
    ]

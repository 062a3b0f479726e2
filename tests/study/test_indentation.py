"""A line that is indented wrongly is named itself, wherever the parser stopped."""

import pytest
import yaml

from rankdocket.study import nodes
from study.faults import changed, spec_messages
from study.specs import PANEL, PLANKTON

QUOTING = " Or, if it goes on with the text of the line above, put that whole text in quotes."

ONE_LINE = (
    # Deeper than the key above, which already has a value.
    (
        "    unit: m\n",
        "     unit: m\n",
        "23:6: line 23 is indented unlike its neighbours, by 5 spaces. Indent it by 4",
        True,
    ),
    ("  client:", "    client:", "4:5: line 4 is indented unlike its neighbours, by 4 spaces. Indent it by 2", True),
    # Less deep than its neighbours, and no open key has that depth.
    (
        "    missing",
        "   missing",
        "9:4: line 9 is indented unlike its neighbours, by 3 spaces. Indent it by 2 or 4",
        False,
    ),
    (
        "    label: Chl",
        "   label: Chl",
        "17:4: line 17 is indented unlike its neighbours, by 3 spaces. Indent it by 4",
        False,
    ),
    # The parser stops at the next line, or at the next entry.
    ("    file:", "   file:", "8:4: line 8 is indented unlike its neighbours, by 3 spaces. Indent it by 4", True),
    (
        "    unit: m\n",
        "  unit: m\n",
        "23:3: line 23 is indented unlike its neighbours, by 2 spaces. Indent it by 4",
        True,
    ),
    (
        "  chlorophyll:",
        " chlorophyll:",
        "15:2: line 15 is indented unlike its neighbours, by 1 space. Indent it by 2",
        False,
    ),
    ("study:", " study:", "1:2: line 1 is indented unlike its neighbours, by 1 space. Indent it by 0", False),
)


@pytest.mark.parametrize(("old", "new", "expected", "quoting"), ONE_LINE)
def test_the_line_is_named_with_the_depth_that_fits(old: str, new: str, expected: str, quoting: bool) -> None:
    """The message has the place of the line itself, its spaces and those it should have; quoting comes second."""
    hint = QUOTING if quoting else ""
    assert spec_messages(changed(PLANKTON, (old, new))) == [
        f"s.yaml:{expected}, like the keys it belongs to.{hint} (message 17)"
    ]


@pytest.mark.parametrize(
    ("loader", "spec"), [(yaml.CSafeLoader, PLANKTON), (yaml.CSafeLoader, PANEL), (yaml.SafeLoader, PLANKTON)]
)
@pytest.mark.parametrize("shift", [-2, -1, 1, 2, 4])
def test_any_line_moved_is_named(loader: type, spec: str, shift: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """Whichever line with a key or a dash is moved, and whichever parser reads, that line is the one named."""
    monkeypatch.setattr(nodes, "_Loader", loader)
    lines = spec.split("\n")
    refused = 0
    for position, line in enumerate(lines):
        spaces = len(line) - len(line.lstrip())
        if ":" not in line or spaces + shift < 0:
            continue
        moved = " " * (spaces + shift) + line.lstrip()
        found = spec_messages("\n".join([*lines[:position], moved, *lines[position + 1 :]]))
        if any(message.endswith("(message 17)") for message in found):
            refused += 1
            (message,) = found
            assert message.startswith(
                f"s.yaml:{position + 1}:{spaces + shift + 1}: line {position + 1} is indented unlike"
            )
            advised = message.split("Indent it by ")[1].split(",")[0].split(" or ")
            assert str(spaces) in advised
    assert refused > 10


def test_a_line_that_fits_nowhere_is_named_without_a_number() -> None:
    """Where no depth makes the line fit, it is named and no number of spaces is made up."""
    assert spec_messages(changed(PLANKTON, ('  number: "LK-031"', '  number: "LK-031"\n    - code: x'))) == [
        (
            "s.yaml:3:5: line 3 is indented unlike its neighbours, by 4 spaces. Align it with the keys it belongs to. "
            "(message 17)"
        )
    ]


def test_a_key_with_nothing_below_it_is_told_unless_the_lines_shifted() -> None:
    """What the parser made of the key above a shifted line is no fault of its own; an empty key elsewhere is."""
    (shifted,) = spec_messages(changed(PLANKTON, ("  number:", "number:")))
    assert shifted.startswith("s.yaml:2:1: line 2 is indented unlike its neighbours, by 0 spaces. Indent it by 2,")
    found = spec_messages(changed(PLANKTON, ('number: "LK-031"', "number:"), ("  time_order:", "   time_order:")))
    assert [message.split(" ")[0] for message in found] == ["s.yaml:2:3:", "s.yaml:13:4:"]


def test_a_colon_in_a_text_is_no_wrong_indentation() -> None:
    """Where all lines fit, a second colon is told as such, and a folded text keeps both possibilities."""
    assert spec_messages(changed(PLANKTON, ("title: C", "title: a: b C"))) == [
        's.yaml:3:11: a ": " stands where no key can be. Quote a text that holds a colon. (message 17)'
    ]
    (message,) = spec_messages(changed(PLANKTON, ("title: C", "title: Clarity\n    and: C")))
    assert message.startswith("s.yaml:4:5: line 4 is indented unlike its neighbours, by 4 spaces.")
    assert message.endswith(f"{QUOTING} (message 17)")


def test_texts_and_brackets_over_several_lines_are_no_keys() -> None:
    """Lines inside a text or a bracket may look like keys of any depth; the wrong line is below them."""
    text = changed(
        PLANKTON,
        ("question: Is", "question: |\n      a: b\n        c: d\n      Is"),
        ('["", "n/a"]', '[\n  "",\n       "n/a"\n    ]'),
        ("not applicable", '"not\n        a: b"'),
        ("  time_order", "   time_order"),
    )
    (message,) = spec_messages(text)
    assert message.startswith("s.yaml:20:4: line 20 is indented unlike its neighbours, by 3 spaces. Indent it by 2")

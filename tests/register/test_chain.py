"""The register: what its chain notices, names, and does not notice."""

import hashlib
import json
import string
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.canonical import Plain, canonical_bytes
from rankdocket.errors import RegisterError
from rankdocket.register import chain
from rankdocket.register.chain import GENESIS, Event, Line
from register.scenes import event


def _filed(*events: Event) -> bytes:
    lines: tuple[Line, ...] = ()
    for one in events:
        lines = (*lines, chain.compose(lines, one))
    return b"".join(line.raw + b"\n" for line in lines)


@pytest.fixture
def register(tmp_path: Path) -> Path:
    path = tmp_path / "register.jsonl"
    path.write_bytes(_filed(event("received", file="a.csv"), event("locked"), event(rows=24), event("checked")))
    return path


def test_a_line_carries_the_sha256_of_the_line_before_as_ordinary_tools_compute_it(register: Path) -> None:
    lines = register.read_bytes().splitlines()
    previous = [json.loads(line)["previous"] for line in lines]
    assert previous == ["0" * 64, *(hashlib.sha256(line).hexdigest() for line in lines[:-1])]
    assert [json.loads(line)["sequence"] for line in lines] == [1, 2, 3, 4]


def test_what_was_filed_is_read_back_with_its_digests(register: Path) -> None:
    lines = chain.read(register)
    assert [line.event for line in lines] == [
        event("received", file="a.csv"),
        event("locked"),
        event(rows=24),
        event("checked"),
    ]
    assert [line.raw for line in lines] == register.read_bytes().splitlines()
    assert chain.head(register) == lines[-1].digest == hashlib.sha256(lines[-1].raw).hexdigest()
    assert chain.check(register) == ()


def test_a_register_that_does_not_exist_yet_has_no_lines_but_checking_it_says_so(tmp_path: Path) -> None:
    path = tmp_path / "register.jsonl"
    assert chain.read(path) == ()
    assert chain.head(path) == GENESIS
    assert chain.check(path) == (f"{path} does not exist.",)


def test_any_single_changed_byte_is_found_and_its_line_named(register: Path) -> None:
    data = register.read_bytes()
    number = 1
    for position, byte in enumerate(data):
        for changed in {byte ^ 0x01, byte ^ 0x20, byte ^ 0x80, ord("\n"), ord(" ")} - {byte}:
            altered = data[:position] + bytes([changed]) + data[position + 1 :]
            problems = chain.examine(altered, "register.jsonl").problems
            assert any(f"line {number} " in problem for problem in problems), (position, byte, changed)
        number += byte == ord("\n")
    assert number == 5


def test_any_removed_line_but_the_last_is_found_and_the_line_that_took_its_place_named(register: Path) -> None:
    lines = register.read_bytes().splitlines(keepends=True)
    for removed in range(len(lines) - 1):
        register.write_bytes(b"".join(lines[:removed] + lines[removed + 1 :]))
        [problem] = chain.check(register)
        assert f"line {removed + 1} has sequence number {removed + 2} instead of {removed + 1}" in problem


def test_any_two_swapped_lines_are_found_and_the_first_named(register: Path) -> None:
    lines = register.read_bytes().splitlines(keepends=True)
    for first in range(len(lines)):
        for second in range(first + 1, len(lines)):
            swapped = list(lines)
            swapped[first], swapped[second] = swapped[second], swapped[first]
            register.write_bytes(b"".join(swapped))
            assert f"line {first + 1} has sequence number" in chain.check(register)[0]


def test_any_repeated_line_is_found_and_named(register: Path) -> None:
    lines = register.read_bytes().splitlines(keepends=True)
    for at in range(len(lines)):
        register.write_bytes(b"".join([*lines[: at + 1], *lines[at:]]))
        assert f"line {at + 2} has sequence number {at + 1} instead of {at + 2}" in chain.check(register)[0]


def test_a_line_replaced_by_another_well_formed_one_is_found_at_the_line_after_it(register: Path) -> None:
    lines = chain.read(register)
    other = chain.compose(lines[:1], event("locked", by="somebody else"))
    register.write_bytes(b"".join(raw + b"\n" for raw in (lines[0].raw, other.raw, lines[2].raw, lines[3].raw)))
    [problem] = chain.check(register)
    assert "line 3 does not carry the digest of the line before it" in problem


def test_lines_cut_off_the_end_are_not_noticed_by_the_chain_alone(register: Path) -> None:
    lines = register.read_bytes().splitlines(keepends=True)
    for left in range(len(lines)):
        register.write_bytes(b"".join(lines[:left]))
        assert chain.check(register) == ()


def test_lines_cut_off_the_end_are_noticed_by_whoever_kept_the_head_elsewhere(register: Path) -> None:
    head = chain.head(register)
    lines = register.read_bytes().splitlines(keepends=True)
    assert chain.check(register, head) == ()
    register.write_bytes(b"".join(lines[:-1]))
    [problem] = chain.check(register, head)
    assert problem == (
        f"No line of {register} has the digest {head}: since it was noted, that line was altered or cut off."
    )


def test_a_head_noted_before_later_lines_were_added_still_stands(register: Path) -> None:
    assert chain.check(register, chain.read(register)[1].digest) == ()
    assert chain.check(register, GENESIS) == ()


def test_a_last_line_that_was_written_in_part_is_called_torn(register: Path) -> None:
    data = register.read_bytes()
    register.write_bytes(data[:-9])
    assert chain.check(register) == (f"{register}: line 4 is torn: it does not end with a newline.",)


def test_reading_a_faulty_register_raises_with_path_line_and_what_to_do(register: Path) -> None:
    register.write_bytes(register.read_bytes().replace(b"a.csv", b"b.csv"))
    with pytest.raises(RegisterError) as caught:
        chain.read(register)
    assert str(caught.value) == (
        f"{register}: line 1 was altered: its members do not have the digest it carries. "
        f"Compare it with a copy kept elsewhere and restore that copy."
    )


@pytest.mark.parametrize(
    ("raw", "fault"),
    [
        (b"", "it is not JSON in UTF-8"),
        (b"{", "it is not JSON in UTF-8"),
        (b'"\xff"', "it is not JSON in UTF-8"),
        (b"[" * 100_000, "it is not JSON in UTF-8"),
        (b"[]", "it does not have the members of a register line"),
        (b"{}", "it does not have the members of a register line"),
    ],
)
def test_a_line_that_is_not_a_line_is_named_with_its_fault(register: Path, raw: bytes, fault: str) -> None:
    register.write_bytes(register.read_bytes() + raw + b"\n")
    assert chain.check(register) == (f"{register}: line 5 was altered: {fault}.",)


@pytest.mark.parametrize("value", [1.5, float("nan"), 2**60, "\ud800"])
def test_a_line_with_a_value_that_has_no_canonical_form_is_named(register: Path, value: object) -> None:
    members = json.loads(chain.read(register)[3].raw) | {"details": {"value": value}}
    register.write_bytes(register.read_bytes() + json.dumps(members).encode() + b"\n")
    assert chain.check(register) == (f"{register}: line 5 was altered: it holds something that has no canonical form.",)


@pytest.mark.parametrize(
    "change",
    [{"sequence": True}, {"sequence": "1"}, {"previous": 1}, {"details": []}, {"actor": None}, {"time": "yesterday"}],
)
def test_a_member_of_the_wrong_kind_is_found_even_when_its_digest_was_made_to_fit(change: dict[str, object]) -> None:
    members = json.loads(_filed(event())) | change
    del members["contents"]
    members["contents"] = hashlib.sha256(canonical_bytes(members)).hexdigest()
    [problem] = chain.examine(canonical_bytes(members) + b"\n", "register.jsonl").problems
    assert problem.startswith("register.jsonl: line 1 was altered: ")


def test_the_same_data_in_another_byte_form_is_not_the_line(register: Path) -> None:
    lines = register.read_bytes().splitlines()
    spaced = json.dumps(json.loads(lines[1])).encode()
    register.write_bytes(b"".join(line + b"\n" for line in (lines[0], spaced, *lines[2:])))
    assert chain.check(register) == (f"{register}: line 2 was altered: it is not in canonical form.",)


@pytest.mark.parametrize("time_", ["2025-03-01T09:10:00", "2025-03-01T09:10:00+01:00", "2025-03-01", "now", ""])
def test_an_event_refuses_a_time_that_is_not_in_utc(time_: str) -> None:
    with pytest.raises(ValueError, match="is not a time in UTC"):
        Event("issued", "edition 1", "A", time_, "local clock, not proven", "", "rankdocket 0.1.0", {})


def test_an_event_refuses_blank_words_and_claims_about_time_that_the_house_does_not_make() -> None:
    with pytest.raises(ValueError, match="actor is empty"):
        Event("issued", "edition 1", " ", "2025-03-01T09:10:00Z", "local clock, not proven", "", "p", {})
    with pytest.raises(ValueError, match="is not a source of time"):
        Event("issued", "edition 1", "A", "2025-03-01T09:10:00Z", "certified", "", "p", {})


_words = st.text(st.characters(codec="utf-8"), min_size=1).filter(lambda text: text.strip() != "")
_plain = st.recursive(
    st.none() | st.booleans() | st.integers(-(2**53) + 1, 2**53 - 1) | st.text(st.characters(codec="utf-8")),
    lambda inner: (
        st.lists(inner, max_size=3) | st.dictionaries(st.text(string.printable, max_size=5), inner, max_size=3)
    ),
    max_leaves=8,
)


@given(st.lists(st.tuples(_words, _words, _plain), max_size=4))
def test_whatever_words_an_event_holds_it_comes_back_as_it_was(parts: list[tuple[str, str, None]]) -> None:
    events = [
        Event(
            action,
            "o",
            actor,
            "2025-03-01T09:10:00+00:00",
            "time given, not read from the clock",
            "\n",
            "p",
            {"a": data},
        )
        for action, actor, data in parts
    ]
    examined = chain.examine(_filed(*events), "register.jsonl")
    assert examined.problems == ()
    assert [line.event for line in examined.lines] == events


def test_ten_thousand_lines_are_checked(tmp_path: Path) -> None:
    path = tmp_path / "register.jsonl"
    previous: tuple[Line, ...] = ()
    with path.open("wb") as file:
        for number in range(1, 10_001):
            members: dict[str, Plain] = {
                "action": "received",
                "object": f"file {number}",
                "actor": "A",
                "time": "2025-03-01T09:10:00Z",
                "time_source": "local clock, not proven",
                "reason": "",
                "program": "p",
                "details": {"file": "a.csv"},
                "sequence": number,
                "previous": previous[-1].digest if previous else GENESIS,
            }
            members["contents"] = hashlib.sha256(canonical_bytes(members)).hexdigest()
            raw = canonical_bytes(members)
            previous = (Line(number, "", hashlib.sha256(raw).hexdigest(), event(), raw),)
            file.write(raw + b"\n")
    assert chain.check(path) == ()
    assert len(chain.read(path)) == 10_000

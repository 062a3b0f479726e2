"""What the next seal makes of a seal that was killed, and the contradictions that no crash explains."""

import shutil
from dataclasses import replace
from pathlib import Path

import pytest

from rankdocket.canonical import Plain
from rankdocket.errors import RegisterError
from rankdocket.register import chain, manifest
from rankdocket.register.editions import enter, existing, recover, seal
from register.scenes import build, event, killed_at, seal_in_child, snapshot

KILLED = -9


def _study(place: Path, editions: int) -> Path:
    place.mkdir()
    for _ in range(editions):
        seal(place, False, build)
    return place


def _lines_filed(study: Path) -> int:
    """Count the whole lines of a register without the program's own reading."""
    register = study / "register.jsonl"
    return register.read_bytes().count(b"\n") if register.exists() else 0


def _every_visible_edition_is_whole(study: Path) -> bool:
    return all(manifest.check(study / "editions" / name.folder) == () for name in existing(study))


def _is_in_order(study: Path, editions: int) -> None:
    assert chain.check(study / "register.jsonl") == ()
    filed = [str(line.event.details["edition"]) for line in chain.read(study / "register.jsonl")]
    assert filed == [str(number) for number in range(1, editions + 1)]
    assert sorted(path.name for path in (study / "editions").iterdir()) == sorted(filed)
    assert _every_visible_edition_is_whole(study)


@pytest.mark.parametrize("half_a_write", [False, True])
@pytest.mark.parametrize("editions", [0, 1])
def test_killed_at_any_step_a_seal_is_as_if_it_had_never_begun_or_is_completed_by_the_next(
    tmp_path: Path, editions: int, half_a_write: bool
) -> None:
    outcomes = set()
    for step in range(1, 1000):
        study = _study(tmp_path / str(step), editions)
        before = snapshot(study / "editions")
        status = seal_in_child(study, killed_at(step, half_a_write))
        if status == 0:
            break
        assert status == KILLED
        assert _every_visible_edition_is_whole(study)
        filed = _lines_filed(study)
        outcomes.add(filed - editions)
        sealed = seal(study, False, build)
        assert sealed is not None
        assert sealed.name.number == filed + 1
        _is_in_order(study, filed + 1)
        kept = snapshot(study / "editions")
        assert {name: kept[name] for name in before} == before
    assert step > 20
    # Both sides of the point from which an edition exists were met.
    assert outcomes == {0, 1}


def test_killed_at_any_step_of_a_recovery_the_next_recovery_still_succeeds(tmp_path: Path) -> None:
    left_behind = []
    for first in range(1, 1000):
        origin = _study(tmp_path / f"{first}", 1)
        if seal_in_child(origin, killed_at(first, half_a_write=True)) == 0:
            break
        # What a recovery does depends on what it finds, so the same find need not be recovered from twice.
        if snapshot(origin) in left_behind:
            continue
        left_behind.append(snapshot(origin))
        for second in range(1, 1000):
            study = tmp_path / f"{first} {second}"
            shutil.copytree(origin, study)
            finished = seal_in_child(study, killed_at(second, half_a_write=True)) == 0
            assert _every_visible_edition_is_whole(study)
            recover(study)
            _is_in_order(study, _lines_filed(study))
            shutil.rmtree(study)
            if finished:
                break
    assert len(left_behind) > 8


def test_a_hidden_folder_without_its_line_is_removed_and_its_number_given_to_the_next(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    before = snapshot(study)
    (study / "editions" / ".sealing-2" / "received").mkdir(parents=True)
    (study / "editions" / ".sealing-2" / "received" / "a.csv").write_bytes(b"x")
    assert recover(study) == ("Edition 2 had been begun but had no line: what there was of it was removed.",)
    assert snapshot(study) == before
    assert recover(study) == ()


def test_a_hidden_folder_with_its_line_is_completed_and_the_seal_says_so(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 2)
    before = snapshot(study)
    (study / "editions" / "2").rename(study / "editions" / ".sealing-2")
    sealed = seal(study, False, build)
    assert sealed is not None
    assert sealed.name.folder == "3"
    assert sealed.mended == ("Edition 2 had its line but was still hidden: it was completed.",)
    after = snapshot(study)
    assert {name: after[name] for name in before if name != "register.jsonl"} == {
        name: data for name, data in before.items() if name != "register.jsonl"
    }


def test_a_torn_last_line_is_cut_off(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    before = snapshot(study)
    with (study / "register.jsonl").open("ab") as file:
        file.write(b'{"action":"iss')
    assert recover(study) == (
        f"The last line of {study / 'register.jsonl'} had been written in part: 14 bytes were cut off.",
    )
    assert snapshot(study) == before


def test_a_last_line_that_lacks_only_its_newline_gets_it_back(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    enter(study, event("told", whom="the client"))
    before = snapshot(study)
    register = study / "register.jsonl"
    register.write_bytes(register.read_bytes()[:-1])
    assert recover(study) == (f"The last line of {register} lacked its newline: it was added.",)
    assert snapshot(study) == before


def _refused_and_unchanged(study: Path, pattern: str) -> None:
    before = snapshot(study)
    for attempt in (lambda: recover(study), lambda: seal(study, False, build), lambda: enter(study, event("told"))):
        with pytest.raises(RegisterError, match=pattern):
            attempt()
    assert snapshot(study) == before


def test_an_edition_whose_line_was_cut_off_the_register_is_a_contradiction(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 2)
    register = study / "register.jsonl"
    register.write_bytes(register.read_bytes().splitlines(keepends=True)[0])
    _refused_and_unchanged(study, "editions/2 has no line in .*Restore the register from a copy")


def test_an_edition_whose_line_was_torn_is_a_contradiction_and_the_rest_of_the_line_is_kept(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 2)
    register = study / "register.jsonl"
    register.write_bytes(register.read_bytes()[:-20])
    _refused_and_unchanged(study, "editions/2 has no line in")


def test_editions_without_any_register_are_a_contradiction(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    (study / "register.jsonl").unlink()
    _refused_and_unchanged(study, "editions/1 has no line in")


@pytest.mark.parametrize("name", ["report.html", "SHA256SUMS"])
def test_a_hidden_edition_that_is_not_what_its_line_says_is_not_published(tmp_path: Path, name: str) -> None:
    study = _study(tmp_path / "study", 2)
    hidden = study / "editions" / ".sealing-2"
    (study / "editions" / "2").rename(hidden)
    (hidden / name).write_bytes((hidden / name).read_bytes() + b" ")
    _refused_and_unchanged(study, "has a line for edition 2, but its folder is not what the line says")


def test_a_hidden_edition_replaced_by_another_consistent_one_is_not_published(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 2)
    hidden = study / "editions" / ".sealing-2"
    shutil.rmtree(study / "editions" / "2")
    hidden.mkdir()
    (hidden / "report.html").write_bytes(b"forged")
    (hidden / "SHA256SUMS").write_bytes(manifest.sha256sums({"report.html": b"forged"}))
    _refused_and_unchanged(study, "SHA256SUMS does not have the digest that the line carries")


def test_an_edition_that_is_hidden_and_visible_at_once_is_a_contradiction(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    shutil.copytree(study / "editions" / "1", study / "editions" / ".sealing-1")
    _refused_and_unchanged(study, r"\.sealing-1 and .*editions/1 both exist")


def _filed_by_hand(study: Path, details: dict[str, Plain]) -> None:
    register = study / "register.jsonl"
    line = chain.compose(chain.read(register), replace(event(), details=details))
    with register.open("ab") as file:
        file.write(line.raw + b"\n")


def test_an_edition_filed_twice_is_a_contradiction(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    _filed_by_hand(study, {"edition": "1", "sums": "0" * 64})
    _refused_and_unchanged(study, "line 2 files edition 1 a second time")


@pytest.mark.parametrize(
    "details", [{"sums": "0" * 64}, {"edition": "../1", "sums": "0" * 64}, {"edition": "2", "sums": 7}]
)
def test_a_line_that_files_something_that_is_no_edition_is_a_contradiction(
    tmp_path: Path, details: dict[str, Plain]
) -> None:
    study = _study(tmp_path / "study", 1)
    _filed_by_hand(study, details)
    _refused_and_unchanged(study, "line 2 does not name an edition")


def test_other_things_in_the_folder_of_editions_are_left_alone(tmp_path: Path) -> None:
    study = _study(tmp_path / "study", 1)
    (study / "editions" / "notes.txt").write_bytes(b"ours")
    (study / "editions" / ".sealing-by-hand").mkdir()
    before = snapshot(study)
    assert recover(study) == ()
    assert snapshot(study) == before

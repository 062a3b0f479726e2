"""Numbering, filing and publishing editions: the ordinary course, refusals, and failures that leave no trace."""

import fcntl
import hashlib
import multiprocessing
import os
import shutil
import stat
import tempfile
import time
from collections.abc import Iterator
from pathlib import Path

import pytest

from rankdocket.errors import ComputeError, RegisterError
from rankdocket.register import chain, manifest
from rankdocket.register.chain import GENESIS
from rankdocket.register.editions import EditionName, Sealed, Sealing, enter, existing, next_name, recover, seal
from register.scenes import build, event, failing_at, in_child, interrupted_at, snapshot

NOBODY = 65534


def _seal(study: Path, draft: bool = False) -> Sealed:
    sealed = seal(study, draft, build)
    assert sealed is not None
    return sealed


def test_the_first_edition_is_1_and_everything_about_it_agrees(tmp_path: Path) -> None:
    sealed = _seal(tmp_path)
    assert (sealed.name, sealed.folder) == (EditionName(1, None), tmp_path / "editions" / "1")
    assert (sealed.folder / "received/a.csv").read_bytes() == b"x,y\n1,2\n"
    assert manifest.check(sealed.folder) == ()
    [line] = chain.read(tmp_path / "register.jsonl")
    assert sealed.head_before == GENESIS == line.previous
    assert sealed.line_digest == line.digest == chain.head(tmp_path / "register.jsonl")
    sums = hashlib.sha256((sealed.folder / "SHA256SUMS").read_bytes()).hexdigest()
    assert line.event.details == {"edition": "1", "sums": sums}
    assert (sealed.sums_digest, sealed.mended) == (sums, ())
    assert sorted(path.name for path in tmp_path.iterdir()) == [".seal.lock", "editions", "register.jsonl"]


def test_each_edition_is_built_with_its_own_name_and_the_head_before_its_line(tmp_path: Path) -> None:
    first, second = _seal(tmp_path), _seal(tmp_path)
    assert (second.folder / "report.html").read_bytes() == b"2"
    assert (second.folder / "head.txt").read_text() == first.line_digest == second.head_before


def test_drafts_are_lettered_for_the_coming_edition(tmp_path: Path) -> None:
    names = [_seal(tmp_path, draft).name.folder for draft in (True, True, False, True, False, False, True)]
    assert names == ["1A", "1B", "1", "2A", "2", "3", "4A"]
    assert [name.folder for name in existing(tmp_path)] == ["1A", "1B", "1", "2A", "2", "3", "4A"]
    assert chain.check(tmp_path / "register.jsonl") == ()


def test_a_number_is_not_used_again_after_its_folder_was_deleted(tmp_path: Path) -> None:
    _seal(tmp_path, draft=True)
    shutil.rmtree(_seal(tmp_path).folder)
    shutil.rmtree(tmp_path / "editions" / "1A")
    assert existing(tmp_path) == ()
    assert next_name(tmp_path, draft=False).folder == "2"
    assert _seal(tmp_path, draft=True).name.folder == "2A"
    assert _seal(tmp_path).name.folder == "2"


def test_the_next_name_counts_folders_as_well_as_lines(tmp_path: Path) -> None:
    (tmp_path / "editions" / "4").mkdir(parents=True)
    (tmp_path / "editions" / "notes").mkdir()
    assert next_name(tmp_path, draft=False).folder == "5"
    assert next_name(tmp_path, draft=True).folder == "5A"


def test_when_nothing_has_changed_nothing_is_written(tmp_path: Path) -> None:
    assert seal(tmp_path, False, lambda name, head: None) is None
    assert snapshot(tmp_path) == {}
    _seal(tmp_path)
    before = snapshot(tmp_path)
    assert seal(tmp_path, False, lambda name, head: None) is None
    assert snapshot(tmp_path) == before
    assert _seal(tmp_path).name.folder == "2"


def test_other_events_are_entered_between_editions_and_the_chain_runs_through_them(tmp_path: Path) -> None:
    received = enter(tmp_path, event("received", file="a.csv"))
    sealed = _seal(tmp_path)
    told = enter(tmp_path, event("told", edition="1"))
    assert sealed.head_before == received.digest
    assert told.previous == sealed.line_digest
    assert [line.event.action for line in chain.read(tmp_path / "register.jsonl")] == ["received", "issued", "told"]
    assert _seal(tmp_path).name.folder == "2"


def test_an_event_cannot_bring_the_details_that_the_seal_writes(tmp_path: Path) -> None:
    with pytest.raises(ValueError, match="sums among an event's details"):
        enter(tmp_path, event(sums="0" * 64))
    with pytest.raises(ValueError, match="edition among an event's details"):
        seal(tmp_path, False, lambda name, head: Sealing({}, event(edition="7")))
    assert snapshot(tmp_path) == {}


def test_what_the_builder_raises_comes_through_and_leaves_the_study_as_it_was(tmp_path: Path) -> None:
    def broken(name: EditionName, head: str) -> Sealing:
        raise ComputeError("the counts do not add up")

    _seal(tmp_path)
    before = snapshot(tmp_path)
    with pytest.raises(ComputeError, match="the counts do not add up"):
        seal(tmp_path, False, broken)
    assert snapshot(tmp_path) == before
    assert _seal(tmp_path).name.folder == "2"


def test_an_interruption_while_building_leaves_the_study_as_it_was(tmp_path: Path) -> None:
    def interrupted(name: EditionName, head: str) -> Sealing:
        raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        seal(tmp_path, False, interrupted)
    assert snapshot(tmp_path) == {}


@pytest.mark.parametrize("name", ["../report.html", "/report.html", "SHA256SUMS", "a\nb"])
def test_files_that_would_leave_the_edition_are_refused_before_anything_is_written(tmp_path: Path, name: str) -> None:
    with pytest.raises(RegisterError, match="cannot be the name of a file of an edition"):
        seal(tmp_path, False, lambda edition, head: Sealing({name: b""}, event()))
    assert snapshot(tmp_path) == {}


def _steps_of_a_seal(study: Path) -> int:
    """Count the calls to the disk that a whole seal makes, on a copy."""
    copy = study.parent / "counted"
    shutil.copytree(study, copy)
    for step in range(1, 1000):
        with pytest.MonkeyPatch.context() as patch:
            failing_at(step, patch.setattr, every_later=False)
            try:
                seal(copy, False, build)
            except RegisterError:
                continue
        return step - 1
    raise AssertionError("a seal does not end")


@pytest.mark.parametrize("editions_before", [0, 1])
def test_a_disk_that_is_full_at_any_one_step_leaves_the_study_as_it_was(tmp_path: Path, editions_before: int) -> None:
    study = tmp_path / "study"
    study.mkdir()
    for _ in range(editions_before):
        _seal(study)
    before, steps = snapshot(study), _steps_of_a_seal(study)
    assert steps > 20
    for step in range(1, steps + 1):
        with pytest.MonkeyPatch.context() as patch:
            failing_at(step, patch.setattr, every_later=False)
            with pytest.raises(RegisterError, match="Free space on that disk") as caught:
                seal(study, False, build)
        assert str(study) in str(caught.value)
        assert snapshot(study) == before, step
    assert _seal(study).name.number == editions_before + 1


@pytest.mark.parametrize("editions_before", [0, 1])
def test_an_interruption_at_any_step_leaves_the_study_as_it_was(tmp_path: Path, editions_before: int) -> None:
    study = tmp_path / "study"
    study.mkdir()
    for _ in range(editions_before):
        _seal(study)
    before = snapshot(study)
    for step in range(1, _steps_of_a_seal(study) + 1):
        with pytest.MonkeyPatch.context() as patch:
            interrupted_at(step, patch.setattr)
            with pytest.raises(KeyboardInterrupt):
                seal(study, False, build)
        assert snapshot(study) == before, step
    assert _seal(study).name.number == editions_before + 1


def test_a_disk_that_stays_full_from_any_step_on_leaves_a_state_that_the_next_seal_puts_in_order(
    tmp_path: Path,
) -> None:
    counted = tmp_path / "study"
    counted.mkdir()
    _seal(counted)
    for step in range(1, _steps_of_a_seal(counted) + 1):
        study = tmp_path / f"from {step}"
        study.mkdir()
        _seal(study)
        with pytest.MonkeyPatch.context() as patch:
            failing_at(step, patch.setattr, every_later=True)
            with pytest.raises(RegisterError, match="Free space on that disk"):
                seal(study, False, build)
        lines = chain.read(study / "register.jsonl")
        assert _seal(study).name.number == len(lines) + 1
        assert all(manifest.check(study / "editions" / name.folder) == () for name in existing(study))
        assert [name.number for name in existing(study)] == list(range(1, len(lines) + 2))


def test_an_entry_on_a_full_disk_is_refused_and_either_stands_whole_or_not_at_all(tmp_path: Path) -> None:
    refused = 0
    for every_later in (False, True):
        for step in range(1, 100):
            study = tmp_path / f"{every_later} {step}"
            study.mkdir()
            first = enter(study, event("received"))
            with pytest.MonkeyPatch.context() as patch:
                failing_at(step, patch.setattr, every_later=every_later)
                try:
                    enter(study, event("told"))
                except RegisterError as error:
                    refused += 1
                    taken_back = "may stand there" not in str(error)
                else:
                    break
            lines = chain.read(study / "register.jsonl")
            assert lines[0] == first
            assert len(lines) == 1 or not taken_back
            assert enter(study, event("told")).sequence == len(lines) + 1
    assert refused > 8


def test_everything_of_an_edition_is_on_disk_before_its_line_and_its_line_before_its_name(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    opened: dict[int, str] = {}
    done: list[str] = []
    calls = {name: getattr(os, name) for name in ("open", "write", "fsync", "rename")}

    def open_(path: str | Path, *arguments: int) -> int:
        descriptor: int = calls["open"](path, *arguments)
        opened[descriptor] = str(Path(path).relative_to(tmp_path))
        return descriptor

    def write(descriptor: int, data: bytes) -> int:
        done.append(f"write {opened[descriptor]}")
        return calls["write"](descriptor, data)  # type: ignore[no-any-return]

    def fsync(descriptor: int) -> None:
        done.append(f"sync {opened[descriptor]}")
        calls["fsync"](descriptor)

    def rename(source: Path, target: Path) -> None:
        done.append("rename")
        calls["rename"](source, target)

    for name, call in (("open", open_), ("write", write), ("fsync", fsync), ("rename", rename)):
        monkeypatch.setattr(os, name, call)
    _seal(tmp_path)
    line = done.index("write register.jsonl")
    hidden = "editions/.sealing-1"
    files = ("report.html", "received/a.csv", "head.txt", "SHA256SUMS")
    for file in files:
        assert done.index(f"write {hidden}/{file}") < done.index(f"sync {hidden}/{file}") < line
    for folder in (f"{hidden}/received", hidden, "editions"):
        assert max(done.index(f"sync {hidden}/{file}") for file in files) < done.index(f"sync {folder}") < line
    assert done[line:] == ["write register.jsonl", "sync register.jsonl", "sync .", "rename", "sync editions"]


def test_a_line_of_which_only_a_part_fitted_on_the_disk_is_taken_back(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    _seal(tmp_path)
    before, write = snapshot(tmp_path), os.write

    def short(descriptor: int, data: bytes) -> int:
        return write(descriptor, bytes(data)[:-7]) if bytes(data).startswith(b'{"action"') else write(descriptor, data)

    with monkeypatch.context() as patch:
        patch.setattr(os, "write", short)
        with pytest.raises(RegisterError, match="edition 2 was not sealed, nothing was changed"):
            seal(tmp_path, False, build)
        with pytest.raises(RegisterError, match="nothing was entered"):
            enter(tmp_path, event("told"))
    assert snapshot(tmp_path) == before


@pytest.fixture
def open_place() -> Iterator[Path]:
    """Yield a folder below which every user may look, unlike those of the test runner."""
    place = Path(tempfile.mkdtemp())
    place.chmod(0o755)
    yield place
    for path in place.rglob("*"):
        if path.is_dir():
            path.chmod(stat.S_IRWXU)
    shutil.rmtree(place)


def _refused_without_permission(study: Path, pattern: str) -> None:
    if os.geteuid() == 0:
        os.setegid(NOBODY)
        os.seteuid(NOBODY)
    with pytest.raises(RegisterError, match=pattern) as caught:
        seal(study, False, build)
    assert "Ask for permission to read and write there" in str(caught.value)


def test_a_read_only_study_is_refused_by_name_and_stays_as_it_was(open_place: Path) -> None:
    study = open_place / "study"
    study.mkdir()
    _seal(study)
    (study / ".seal.lock").unlink()
    study.chmod(0o555)
    before = snapshot(study)
    assert in_child(lambda: _refused_without_permission(study, f"^{study} cannot be locked: ")) == 0
    assert snapshot(study) == before


@pytest.mark.parametrize("read_only", ["editions", "register.jsonl"])
def test_a_study_of_which_one_thing_is_read_only_is_refused_and_stays_as_it_was(
    open_place: Path, read_only: str
) -> None:
    study = open_place / "study"
    study.mkdir()
    _seal(study)
    for path in (study, study / "editions", study / "register.jsonl"):
        path.chmod(0o777)
    (study / read_only).chmod(0o555)
    before = snapshot(study)
    assert in_child(lambda: _refused_without_permission(study, "edition 2 was not sealed, nothing was changed")) == 0
    assert snapshot(study) == before


def test_a_study_that_may_not_even_be_looked_at_is_refused(open_place: Path) -> None:
    study = open_place / "closed" / "study"
    study.mkdir(parents=True)
    (open_place / "closed").chmod(0o000)
    assert in_child(lambda: _refused_without_permission(study, f"^{study} cannot be locked: ")) == 0


def test_a_study_that_is_not_there_is_refused_by_name(tmp_path: Path) -> None:
    with pytest.raises(RegisterError, match="nowhere is not a folder"):
        seal(tmp_path / "nowhere", False, build)


def test_a_study_locked_by_another_process_for_too_long_is_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    with (tmp_path / ".seal.lock").open("w") as other:
        fcntl.flock(other, fcntl.LOCK_EX)
        monkeypatch.setattr(time, "sleep", lambda seconds: None)
        with pytest.raises(RegisterError, match="Another process has been writing"):
            seal(tmp_path, False, build)
    assert snapshot(tmp_path) == {}
    assert _seal(tmp_path).name.folder == "1"


def test_an_altered_register_is_not_continued(tmp_path: Path) -> None:
    _seal(tmp_path)
    register = tmp_path / "register.jsonl"
    register.write_bytes(register.read_bytes().replace(b"A. Sample", b"B. Sample"))
    before = snapshot(tmp_path)
    for attempt in (lambda: seal(tmp_path, False, build), lambda: enter(tmp_path, event()), lambda: recover(tmp_path)):
        with pytest.raises(RegisterError, match="line 1 was altered"):
            attempt()
    assert snapshot(tmp_path) == before


def _race(study: Path, count: int) -> None:
    for _ in range(count):
        seal(study, False, build)


def test_eight_processes_racing_for_two_hundred_seals_get_each_number_once_and_an_intact_chain(tmp_path: Path) -> None:
    racers = [multiprocessing.get_context("fork").Process(target=_race, args=(tmp_path, 25)) for _ in range(8)]
    for racer in racers:
        racer.start()
    for racer in racers:
        racer.join()
    assert [racer.exitcode for racer in racers] == [0] * 8
    lines = chain.read(tmp_path / "register.jsonl")
    assert [line.event.details["edition"] for line in lines] == [str(number) for number in range(1, 201)]
    assert [name.number for name in existing(tmp_path)] == list(range(1, 201))
    assert all(manifest.check(tmp_path / "editions" / str(number)) == () for number in range(1, 201))
    heads = [(tmp_path / "editions" / str(number) / "head.txt").read_text() for number in range(1, 201)]
    assert heads == [line.previous for line in lines]

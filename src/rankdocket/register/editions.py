"""Editions: numbered folders that are there whole or not at all, each with its line in the register.

A seal writes the folder under a hidden name, files the register's line, and renames the folder.  The line is the
point from which the edition exists: before it a crash leaves a hidden folder to remove, after it a hidden folder
to rename, and the next seal does either.
"""

import shutil
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Final, TypeAlias

from rankdocket.canonical import sha256
from rankdocket.register import chain, durable, manifest
from rankdocket.register.chain import GENESIS, Event, Line
from rankdocket.register.holdings import (
    EDITIONS_FOLDER,
    folder_of,
    hidden_folder_of,
    names_taken,
    register_of,
    sums_filed,
)
from rankdocket.register.names import EditionName, name_after
from rankdocket.register.recovery import mend

__all__ = ["Build", "EditionName", "Sealed", "Sealing", "enter", "existing", "next_name", "recover", "seal"]

_WRITTEN_BY_SEAL: Final = frozenset(("edition", "sums"))


@dataclass(frozen=True, slots=True)
class Sealing:
    """What is to be sealed: every file of the edition but its list of digests, and the event to file.

    ``files`` maps relative POSIX names, which may contain folders, to bytes.
    """

    files: Mapping[str, bytes]
    event: Event


@dataclass(frozen=True, slots=True)
class Sealed:
    """An edition that is on disk.

    Attributes
    ----------
    line_digest
        Digest of the edition's line: the register's new head, to be noted elsewhere.
    head_before
        Digest of the line before it, which the edition itself may quote.
    sums_digest
        Digest of the edition's SHA256SUMS as it stands in the line.
    mended
        What an earlier interruption had left and this seal put in order, as sentences.
    """

    name: EditionName
    folder: Path
    line_digest: str
    head_before: str
    sums_digest: str
    mended: tuple[str, ...]


Build: TypeAlias = Callable[[EditionName, str], Sealing | None]
"""Makes an edition from its name and the register's head; None when nothing has changed since the last one."""


@dataclass(frozen=True, slots=True)
class _Before:
    """The state to which a failed seal returns."""

    register_size: int | None
    had_editions: bool


def existing(study_folder: Path) -> tuple[EditionName, ...]:
    """Return the names of the edition folders of a study, the drafts of an edition before it."""
    return tuple(name for name in names_taken(study_folder) if folder_of(study_folder, name).is_dir())


def next_name(study_folder: Path, draft: bool) -> EditionName:
    """Return the name that the next edition or draft will have; raises as :func:`rankdocket.register.chain.read`."""
    return _next_name(study_folder, chain.read(register_of(study_folder)), draft)


def seal(study_folder: Path, draft: bool, build: Build) -> Sealed | None:
    """Give an edition its number, build, file and publish it while holding the study's lock.

    Whatever goes wrong, in ``build`` or on the disk, the register and the editions stay as they were.  Somebody who
    only reads may see the line a moment before the folder.

    Returns
    -------
    Sealed or None
        None when ``build`` says that nothing has changed: then nothing was written.

    Raises
    ------
    RegisterError
        If the study is locked for too long, contradicts its register or cannot be written.  What ``build`` raises
        comes through as it is.
    """
    with durable.exclusive(study_folder):
        mended = mend(study_folder)
        name = _next_name(study_folder, mended.lines, draft)
        head = mended.lines[-1].digest if mended.lines else GENESIS
        sealing = build(name, head)
        if sealing is None:
            return None
        _refuse(sealing.event, _WRITTEN_BY_SEAL)
        sums = manifest.sha256sums(sealing.files)
        details = {**sealing.event.details, "edition": name.folder, "sums": sha256(sums)}
        line = chain.compose(mended.lines, replace(sealing.event, details=details))
        _publish(study_folder, name, {**sealing.files, manifest.SUMS_FILE: sums}, line)
        return Sealed(name, folder_of(study_folder, name), line.digest, head, sha256(sums), mended.sentences)


def enter(study_folder: Path, event: Event) -> Line:
    """File a line about anything but an edition being sealed; all of it or nothing.

    Raises
    ------
    RegisterError
        As :func:`seal`.
    """
    _refuse(event, frozenset(("sums",)))
    register = register_of(study_folder)
    with durable.exclusive(study_folder):
        line = chain.compose(mend(study_folder).lines, event)
        size = durable.size_of(register)
        try:
            durable.append_once(register, line.raw + b"\n")
        except BaseException as error:
            outcome = _take_back(register, size)
            if isinstance(error, OSError):
                raise durable.refusal(f"{register}: {outcome}", error) from error
            raise
        return line


def recover(study_folder: Path) -> tuple[str, ...]:
    """Put in order what an interrupted seal left, and say in sentences what that was.

    A hidden folder without its line is removed, and its number was not used; one with its line is renamed after
    its files were checked; a last line of which only a part was written is cut off.

    Raises
    ------
    RegisterError
        If folders and register contradict each other in any other way, if a file of the edition is not as its line
        says, or if the disk refuses.
    """
    with durable.exclusive(study_folder):
        return mend(study_folder).sentences


def _next_name(study_folder: Path, lines: tuple[Line, ...], draft: bool) -> EditionName:
    return name_after({*sums_filed(study_folder, lines), *names_taken(study_folder)}, draft)


def _publish(study_folder: Path, name: EditionName, files: Mapping[str, bytes], line: Line) -> None:
    register, editions = register_of(study_folder), study_folder / EDITIONS_FOLDER
    hidden = hidden_folder_of(study_folder, name)
    before = _Before(durable.size_of(register), editions.exists())
    try:
        if not before.had_editions:
            editions.mkdir()
            durable.sync_folder(study_folder)
        durable.write_folder(hidden, files)
        durable.append_once(register, line.raw + b"\n")
        durable.rename(hidden, folder_of(study_folder, name))
    except BaseException as error:
        outcome = _undo(study_folder, name, before)
        if isinstance(error, OSError):
            raise durable.refusal(f"{study_folder}: edition {name.folder} was not sealed, {outcome}", error) from error
        raise


def _undo(study_folder: Path, name: EditionName, before: _Before) -> str:
    """Bring everything back, latest step first, and say how far that went.

    The order is what keeps a failure here harmless: as long as the line stands so does the whole folder, hidden or
    not, and the next recovery finds a state that it knows.
    """
    hidden, folder = hidden_folder_of(study_folder, name), folder_of(study_folder, name)
    try:
        if folder.exists() and not hidden.exists():
            durable.rename(folder, hidden)
        durable.cut_back(register_of(study_folder), before.register_size)
        if hidden.exists():
            shutil.rmtree(hidden)
        if not before.had_editions and hidden.parent.exists():
            hidden.parent.rmdir()
    except OSError:
        return "what was begun is still there and the next seal will complete or remove it"
    return "nothing was changed"


def _take_back(register: Path, size: int | None) -> str:
    try:
        durable.cut_back(register, size)
    except OSError:
        return "the line that was to be entered may stand there in part or whole, look before entering it again"
    return "nothing was entered"


def _refuse(event: Event, reserved: frozenset[str]) -> None:
    taken = sorted(reserved & event.details.keys())
    if taken:
        raise ValueError(f"{', '.join(taken)} among an event's details is written by the seal itself")

"""Writes that survive a power cut, and the lock that keeps two writers apart."""

import errno
import fcntl
import os
import time
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from pathlib import Path
from typing import Final

from rankdocket.errors import RegisterError

LOCK_FILE: Final = ".seal.lock"

_FILE_MODE: Final = 0o666
_PAUSE_SECONDS: Final = 0.02
_LONGEST_WAIT_SECONDS: Final = 120
"""A report takes seconds; somebody else's may be a large one."""


@contextmanager
def exclusive(study_folder: Path) -> Iterator[None]:
    """Hold the study's lock: the system gives it back even when this process is killed.

    Raises
    ------
    RegisterError
        If the folder is missing or not writable, or another process held the lock for two minutes.
    """
    try:
        if not study_folder.is_dir():
            raise RegisterError(f"{study_folder} is not a folder. Name the folder in which the study's spec stands.")
        # Opened for reading: colleagues who share the folder need not own the file to lock it.
        descriptor = os.open(study_folder / LOCK_FILE, os.O_RDONLY | os.O_CREAT, _FILE_MODE)
    except OSError as error:
        raise refusal(f"{study_folder} cannot be locked", error) from error
    try:
        _wait_for(descriptor, study_folder)
        yield
    finally:
        os.close(descriptor)


def _wait_for(descriptor: int, study_folder: Path) -> None:
    # Waits are counted, not timed: no clock is read in this room.
    for _ in range(int(_LONGEST_WAIT_SECONDS / _PAUSE_SECONDS)):
        try:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            time.sleep(_PAUSE_SECONDS)
        except OSError as error:
            raise refusal(f"{study_folder} cannot be locked", error) from error
        else:
            return
    raise RegisterError(
        f"Another process has been writing in {study_folder} for {_LONGEST_WAIT_SECONDS} s. "
        f"Wait until it has finished, then try again."
    )


def write_folder(folder: Path, files: Mapping[str, bytes]) -> None:
    """Make ``folder``, which must not exist, with all ``files`` (relative POSIX names) on disk before returning."""
    folders = {folder}
    for name in files:
        folders.update(folder / parent for parent in Path(name).parents)
    for inner in sorted(folders):
        inner.mkdir()
    for name, data in files.items():
        _write_new(folder / name, data)
    for inner in sorted(folders, reverse=True):
        sync_folder(inner)
    sync_folder(folder.parent)


def append_once(path: Path, data: bytes) -> None:
    """Add ``data`` to the end of the file at ``path`` in one write and wait until it is on disk.

    Raises
    ------
    OSError
        Also when only part of ``data`` went in; the caller takes it back with :func:`cut_back`.
    """
    descriptor = os.open(path, os.O_WRONLY | os.O_APPEND | os.O_CREAT, _FILE_MODE)
    try:
        if os.write(descriptor, data) != len(data):
            raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC), str(path))
        os.fsync(descriptor)
    finally:
        os.close(descriptor)
    sync_folder(path.parent)


def size_of(path: Path) -> int | None:
    """Return the size of the file in bytes, None when it does not exist."""
    try:
        return path.stat().st_size
    except FileNotFoundError:
        return None


def cut_back(path: Path, size: int | None) -> None:
    """Bring the file back to a size it had before, or to not existing; a file that has it is left alone."""
    if size_of(path) == size:
        return
    if size is None:
        path.unlink()
    else:
        descriptor = os.open(path, os.O_WRONLY)
        try:
            os.ftruncate(descriptor, size)
            os.fsync(descriptor)
        finally:
            os.close(descriptor)
    sync_folder(path.parent)


def rename(source: Path, target: Path) -> None:
    """Rename within one folder and wait until the new name is on disk."""
    source.rename(target)
    sync_folder(target.parent)


def sync_folder(folder: Path) -> None:
    """Wait until the names in ``folder`` are on disk."""
    descriptor = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(descriptor)
    finally:
        os.close(descriptor)


def refusal(what: str, error: OSError) -> RegisterError:
    """Return the error to raise when the system refused something: what failed, where, why and what to do."""
    where = f" ({error.filename})" if error.filename else ""
    if error.errno in (errno.ENOSPC, errno.EDQUOT):
        remedy = "Free space on that disk, then try again."
    elif error.errno in (errno.EACCES, errno.EPERM, errno.EROFS):
        remedy = "Ask for permission to read and write there, then try again."
    else:
        remedy = "Check that disk, then try again."
    return RegisterError(f"{what}: {error.strerror or error}{where}. {remedy}")


def _write_new(path: Path, data: bytes) -> None:
    descriptor = os.open(path, os.O_WRONLY | os.O_CREAT | os.O_EXCL, _FILE_MODE)
    try:
        left = memoryview(data)
        while left:
            left = left[os.write(descriptor, left) :]
        os.fsync(descriptor)
    finally:
        os.close(descriptor)

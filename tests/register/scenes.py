"""Small studies, events and child processes for the tests of the register."""

import errno
import os
import signal
from collections.abc import Callable
from pathlib import Path
from typing import Any

from rankdocket.canonical import Plain
from rankdocket.register.chain import Event
from rankdocket.register.editions import Build, EditionName, Sealing

DISK_CALLS = ("open", "write", "fsync", "mkdir", "rename", "ftruncate", "unlink", "rmdir")


def event(action: str = "issued", **details: Plain) -> Event:
    return Event(
        action=action,
        object="study MT-0417",
        actor="A. Sample, statistician",
        time="2025-03-01T09:10:00Z",
        time_source="local clock, not proven",
        reason="",
        program="rankdocket 0.1.0",
        details=details,
    )


def build(name: EditionName, head: str) -> Sealing:
    """Make a small edition with a folder in it; its files say which edition and which head they were made for."""
    files = {"report.html": name.folder.encode(), "received/a.csv": b"x,y\n1,2\n", "head.txt": head.encode()}
    return Sealing(files, event())


def snapshot(folder: Path) -> dict[str, bytes | None]:
    """Return every file below the folder with its bytes, every folder with None, the lock file aside."""
    return {
        path.relative_to(folder).as_posix(): None if path.is_dir() else path.read_bytes()
        for path in folder.rglob("*")
        if path.name != ".seal.lock"
    }


def in_child(work: Callable[[], object]) -> int:
    """Run ``work`` in a child process and return 0, 1 when it raised, or minus the signal that killed it."""
    child = os.fork()
    if child == 0:
        status = 1
        try:
            work()
            status = 0
        finally:
            os._exit(status)
    return os.waitstatus_to_exitcode(os.waitpid(child, 0)[1])


def killed_at(step: int, half_a_write: bool) -> Callable[[], None]:
    """Return what makes this process die at the given call to the disk, counted from 1.

    With ``half_a_write`` a write that is the fatal call gets half of its bytes onto the disk first.
    """

    def die(name: str, call: Callable[..., Any], arguments: tuple[Any, ...]) -> None:
        if half_a_write and name == "write":
            call(arguments[0], bytes(arguments[1])[: len(arguments[1]) // 2])
        os.kill(os.getpid(), signal.SIGKILL)

    return lambda: _at_call(step, die, setattr)


def failing_at(step: int, setter: Callable[..., None], every_later: bool) -> None:
    """Let the given call to the disk find it full, and with ``every_later`` all calls after it."""

    def fail(name: str, call: Callable[..., Any], arguments: tuple[Any, ...]) -> None:
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))

    _at_call(step, fail, setter, every_later=every_later)


def interrupted_at(step: int, setter: Callable[..., None]) -> None:
    """Let the user interrupt the program at the given call to the disk."""

    def interrupt(name: str, call: Callable[..., Any], arguments: tuple[Any, ...]) -> None:
        raise KeyboardInterrupt

    _at_call(step, interrupt, setter)


def _at_call(step: int, act: Callable[..., None], setter: Callable[..., None], every_later: bool = False) -> None:
    seen = 0

    def wrap(name: str, call: Callable[..., Any]) -> Callable[..., Any]:
        def wrapped(*arguments: Any, **named: Any) -> Any:
            nonlocal seen
            seen += 1
            if seen == step or (every_later and seen > step):
                act(name, call, arguments)
            return call(*arguments, **named)

        return wrapped

    for name in DISK_CALLS:
        setter(os, name, wrap(name, getattr(os, name)))


def seal_in_child(study: Path, prepare: Callable[[], None], make: Build = build) -> int:
    """Seal an edition in a child that first runs ``prepare``; returns as :func:`in_child`."""
    from rankdocket.register.editions import seal

    def work() -> None:
        prepare()
        seal(study, False, make)

    return in_child(work)

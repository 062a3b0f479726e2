"""The register: one line of canonical JSON an event, each carrying the digest of the line before.

The digest of a line is the SHA-256 of its bytes as filed, without the newline, so that ordinary tools can
recompute it.  A line also carries the digest of its own other members (``contents``): the last line has no
successor, and a register of one line would otherwise hold nothing against a slip of an editor.

What the chain shows is that lines were not altered, removed, moved or inserted by somebody who did not rewrite all
lines after them.  It does not notice that its last lines were cut off: for that the digest of a line has to be
known from elsewhere, which is what ``head`` of :func:`check` is for.
"""

import json
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import datetime, timedelta
from pathlib import Path
from typing import Final, Literal, TypeAlias, get_args

from rankdocket.canonical import Plain, canonical_bytes, digest_of, sha256
from rankdocket.errors import RegisterError

TimeSource: TypeAlias = Literal["local clock, not proven", "time given, not read from the clock"]
TIME_SOURCES: Final = get_args(TimeSource)

GENESIS: Final = "0" * 64
"""What stands as ``previous`` in the first line."""

REGISTER_FILE: Final = "register.jsonl"

_TEXTS: Final = ("action", "object", "actor", "time", "time_source", "reason", "program")
_NEVER_EMPTY: Final = ("action", "object", "actor", "program")
_MEMBERS: Final = frozenset((*_TEXTS, "details", "sequence", "previous", "contents"))


@dataclass(frozen=True, slots=True)
class Event:
    """Something that happened to a study.

    Attributes
    ----------
    action
        One verb in the past: "issued", "received", "withdrawn".
    object
        What it was done to: "edition 2".
    actor
        Who did it, as stated to the program.
    time
        ISO 8601 with offset zero: "2025-03-01T09:10:00Z".
    time_source
        One of :data:`TIME_SOURCES`; no time in a register is claimed to be proven.
    reason
        Why, in words; may be empty.
    program
        Name and version of the program that filed the line.
    details
        Whatever else belongs to the event, without floating-point numbers.

    Raises
    ------
    ValueError
        If a text that must say something is blank, the time is not in UTC or its source is not a known one.
    """

    action: str
    object: str
    actor: str
    time: str
    time_source: str
    reason: str
    program: str
    details: Mapping[str, Plain]

    def __post_init__(self) -> None:
        for member in _NEVER_EMPTY:
            if not getattr(self, member).strip():
                raise ValueError(f"the event's {member} is empty")
        if not _is_utc(self.time):
            raise ValueError(f"{self.time!r} is not a time in UTC such as 2025-03-01T09:10:00Z")
        if self.time_source not in TIME_SOURCES:
            raise ValueError(f"{self.time_source!r} is not a source of time: {', '.join(TIME_SOURCES)}")


@dataclass(frozen=True, slots=True)
class Line:
    """One line as filed: ``raw`` without the newline, ``digest`` its SHA-256, ``sequence`` from 1."""

    sequence: int
    previous: str
    digest: str
    event: Event
    raw: bytes


@dataclass(frozen=True, slots=True)
class Examined:
    """The lines of a register that can be read, and a sentence for each thing that is wrong with it."""

    lines: tuple[Line, ...]
    problems: tuple[str, ...]


def compose(after: tuple[Line, ...], event: Event) -> Line:
    """Return the line that would file ``event`` after the given lines."""
    sequence = len(after) + 1
    previous = after[-1].digest if after else GENESIS
    texts: dict[str, Plain] = {member: getattr(event, member) for member in _TEXTS}
    members = texts | {"details": event.details, "sequence": sequence, "previous": previous}
    raw = canonical_bytes(members | {"contents": digest_of(members)})
    return Line(sequence, previous, sha256(raw), event, raw)


def read(path: Path) -> tuple[Line, ...]:
    """Return the lines of the register at ``path``; a register that does not exist yet has none.

    Raises
    ------
    RegisterError
        If anything is wrong with it: the first line concerned and what is wrong.
    """
    return intact(_bytes_of(path) or b"", str(path))


def head(path: Path) -> str:
    """Return the digest of the last line, :data:`GENESIS` when there is none; raises as :func:`read`."""
    lines = read(path)
    return lines[-1].digest if lines else GENESIS


def check(path: Path, known: str | None = None) -> tuple[str, ...]:
    """Return a sentence for each thing that is wrong with the register at ``path``.

    Parameters
    ----------
    path
        The register's file.
    known
        The digest of a line as noted elsewhere when that line was the last one.  Only with it is an end that was
        cut off noticed.

    Raises
    ------
    RegisterError
        If the file cannot be read at all.
    """
    data = _bytes_of(path)
    if data is None:
        return (f"{path} does not exist.",)
    examined = examine(data, str(path))
    if known is None or known == GENESIS or known in {line.digest for line in examined.lines}:
        return examined.problems
    return (
        *examined.problems,
        f"No line of {path} has the digest {known}: since it was noted, that line was altered or cut off.",
    )


def intact(data: bytes, name: str) -> tuple[Line, ...]:
    """Return the lines of a register's bytes; raises as :func:`read`, calling the register ``name``."""
    examined = examine(data, name)
    if examined.problems:
        raise RegisterError(f"{examined.problems[0]} Compare it with a copy kept elsewhere and restore that copy.")
    return examined.lines


def examine(data: bytes, name: str) -> Examined:
    """Walk a register's bytes line by line; each fault is told once, at the line where it shows."""
    *whole, torn = data.split(b"\n")
    lines: list[Line] = []
    problems: list[str] = []
    expected, previous = 1, GENESIS
    before_is_sound = True
    for number, raw in enumerate(whole, start=1):
        try:
            line = _parse(raw)
        except ValueError as error:
            problems.append(f"{name}: line {number} was altered: {error}.")
            expected, previous, before_is_sound = expected + 1, sha256(raw), False
            continue
        fault = _misplaced(line, expected, previous if before_is_sound else line.previous)
        if fault:
            problems.append(f"{name}: line {number} {fault}.")
        lines.append(line)
        expected, previous, before_is_sound = line.sequence + 1, line.digest, True
    if torn:
        problems.append(f"{name}: line {len(whole) + 1} is torn: it does not end with a newline.")
    return Examined(tuple(lines), tuple(problems))


def _misplaced(line: Line, expected: int, previous: str) -> str:
    if line.sequence > expected:
        return f"has sequence number {line.sequence} instead of {expected}: lines before it were removed or moved"
    if line.sequence < expected:
        return f"has sequence number {line.sequence} instead of {expected}: it was inserted, repeated or moved"
    if line.previous != previous:
        return "does not carry the digest of the line before it: one of the two was replaced"
    return ""


def _parse(raw: bytes) -> Line:
    """Return the line; raises ValueError with the fault as the end of a sentence."""
    members = _members(raw)
    contents = members.pop("contents")
    if contents != digest_of(members):
        raise ValueError("its members do not have the digest it carries")
    sequence, previous, details = members["sequence"], members["previous"], members["details"]
    if type(sequence) is not int or not isinstance(previous, str) or not isinstance(details, Mapping):
        raise ValueError("a member is of the wrong kind")
    texts = {member: members[member] for member in _TEXTS}
    if not all(isinstance(text, str) for text in texts.values()):
        raise ValueError("a member is of the wrong kind")
    event = Event(**{member: str(text) for member, text in texts.items()}, details=details)
    return Line(sequence, previous, sha256(raw), event, raw)


def _members(raw: bytes) -> dict[str, Plain]:
    try:
        members = json.loads(raw.decode("utf-8"))
    except (ValueError, RecursionError):
        raise ValueError("it is not JSON in UTF-8") from None
    if not isinstance(members, dict) or members.keys() != _MEMBERS:
        raise ValueError("it does not have the members of a register line")
    try:
        filed = canonical_bytes(members)
    except (TypeError, ValueError, RecursionError):
        raise ValueError("it holds something that has no canonical form") from None
    if filed != raw:
        raise ValueError("it is not in canonical form")
    return members


def _is_utc(time: str) -> bool:
    try:
        return datetime.fromisoformat(time).utcoffset() == timedelta(0)
    except ValueError:
        return False


def _bytes_of(path: Path) -> bytes | None:
    try:
        return path.read_bytes()
    except FileNotFoundError:
        return None
    except OSError as error:
        raise RegisterError(f"{path} cannot be read: {error.strerror}. Ask for permission to read it.") from error

"""The list of a folder's files with their digests, in the plain format that ordinary tools verify."""

import hashlib
import os
import re
import stat
from collections.abc import Iterator, Mapping
from pathlib import Path, PurePosixPath
from typing import Final

from rankdocket.canonical import sha256
from rankdocket.errors import RegisterError

SUMS_FILE: Final = "SHA256SUMS"

_ENTRY: Final = re.compile(r"([0-9a-f]{64})  ([^\n]+)")
_UNPRINTABLE: Final = re.compile(r"[\x00-\x1f\x7f\\]")
"""A line end or a backslash would need the checking tool's escapes, which not every tool knows."""


def sha256sums(files: Mapping[str, bytes]) -> bytes:
    r"""Return the list for ``files`` (relative POSIX names): ``<digest>  <name>\n``, sorted by name.

    Raises
    ------
    RegisterError
        If a name leaves the folder, cannot be written into the list, or is that of the list itself.
    """
    for name in files:
        fault = fault_of_name(name)
        if fault:
            raise RegisterError(f"{name!r} cannot be the name of a file of an edition: {fault}. Rename it.")
    for name in files:
        for folder in PurePosixPath(name).parents:
            if str(folder) in files:
                raise RegisterError(f"{str(folder)!r} cannot be both a file and the folder of {name!r}. Rename one.")
    return b"".join(f"{sha256(files[name])}  {name}\n".encode() for name in sorted(files))


def fault_of_name(name: str) -> str:
    """Return why ``name`` may not stand in the list, empty when it may."""
    if name == SUMS_FILE:
        return "the list of digests has that name"
    if not name or name.startswith("/") or any(part in ("", ".", "..") for part in name.split("/")):
        return "it is not a path that stays inside the folder"
    if _UNPRINTABLE.search(name):
        return "it holds a control character or a backslash"
    try:
        name.encode()
    except UnicodeEncodeError:
        return "it is not valid Unicode"
    return ""


def check(folder: Path) -> tuple[str, ...]:
    """Return a sentence for each file below ``folder`` that is missing, altered or not in its list.

    Nothing outside ``folder`` is read, whatever the list says; a link is never followed.
    """
    try:
        listed = (folder / SUMS_FILE).read_bytes().decode("utf-8")
    except FileNotFoundError:
        return (f"{folder / SUMS_FILE} is missing: nothing in {folder} can be checked.",)
    except (OSError, UnicodeDecodeError):
        return (f"{folder / SUMS_FILE} cannot be read as text: nothing in {folder} can be checked.",)
    digests: dict[str, str] = {}
    problems: list[str] = []
    if listed and not listed.endswith("\n"):
        problems.append(f"{folder / SUMS_FILE} does not end with a newline: its end was cut off.")
    for number, text in enumerate(listed.removesuffix("\n").split("\n") if listed else (), start=1):
        entry = _ENTRY.fullmatch(text)
        if entry is None or fault_of_name(entry[2]) or entry[2] in digests:
            problems.append(f"{folder / SUMS_FILE}: line {number} is not a digest and the name of one more file.")
        else:
            digests[entry[2]] = entry[1]
    present = frozenset(_names_below(folder))
    for name, digest in digests.items():
        fault = _fault_of_file(folder / name, digest) if name in present else _fault_of_absence(folder / name)
        if fault:
            problems.append(f"{folder / name} {fault}.")
    extra = sorted(present - digests.keys() - {SUMS_FILE})
    return (*problems, *(f"{folder / name} is not listed in {SUMS_FILE}." for name in extra))


def _fault_of_file(path: Path, digest: str) -> str:
    try:
        # What is no plain file is not opened: a link would lead elsewhere and a pipe would wait for ever.
        if not stat.S_ISREG(path.lstat().st_mode):
            return "is a link or something else instead of a plain file"
        with path.open("rb") as file:
            found = hashlib.file_digest(file, "sha256").hexdigest()
    except OSError as error:
        return f"cannot be read: {error.strerror}"
    return "" if found == digest else "was altered: it does not have the digest listed"


def _fault_of_absence(path: Path) -> str:
    try:
        path.lstat()
    except PermissionError as error:
        return f"cannot be read: {error.strerror}"
    except OSError:
        return "is missing"
    return "is a folder or lies behind a link instead of being a plain file"


def _names_below(folder: Path) -> Iterator[str]:
    for parent, folders, files in os.walk(folder):
        links = [name for name in folders if (Path(parent) / name).is_symlink()]
        for name in (*files, *links):
            yield (Path(parent) / name).relative_to(folder).as_posix()

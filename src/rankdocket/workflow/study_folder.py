"""A study on disk: where its spec lies, what it names, and everything read from it in one go."""

import os
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from rankdocket.canonical import sha256
from rankdocket.errors import Fault, InputError, Place
from rankdocket.study.messages import Message, fault, in_file_order
from rankdocket.study.reader import read_spec
from rankdocket.study.spec import StudySpec
from rankdocket.study.table import StudyData, Table
from rankdocket.study.tables import read_table
from rankdocket.study.variables import read_variables
from rankdocket.workflow.received import received_faults

SPEC_FILE: Final = "study.yaml"


@dataclass(frozen=True, slots=True)
class Study:
    """A study as read.

    Attributes
    ----------
    folder
        Where the spec lies.
    spec_path
        The spec's path as the user wrote it; every message names it so.
    spec_bytes
        The spec's bytes as supplied.
    received
        Path of each data file as written in the spec → its bytes.
    """

    folder: Path
    spec_path: str
    spec_bytes: bytes
    spec: StudySpec
    received: Mapping[str, bytes]
    data: StudyData

    @property
    def spec_digest(self) -> str:
        """SHA-256 of the spec as supplied."""
        return sha256(self.spec_bytes)

    @property
    def data_digests(self) -> Mapping[str, str]:
        """Path as written in the spec → SHA-256 of the bytes."""
        return {path: sha256(content) for path, content in self.received.items()}


def spec_path_of(path: str) -> str:
    """Return the spec's path for a study given as its folder or as its spec, in the user's own writing."""
    return os.path.join(path, SPEC_FILE) if os.path.isdir(path) else path


def folder_path_of(path: str) -> str:
    """Return the folder's path for a study given as its folder or as its spec, in the user's own writing.

    Raises
    ------
    InputError
        If there is neither.
    """
    if not os.path.exists(path):
        raise _no_such_study(path, "there is no such study.", "Write its folder or its spec.")
    return path if os.path.isdir(path) else os.path.dirname(path) or os.curdir


def as_written(sentence: str, folder: Path, path: str) -> str:
    """Return a sentence on a file of the study with the folder's path as the user wrote it.

    ``folder`` is the same path in the form in which a sentence about files begins with it: without a leading "./",
    doubled separators or one at the end.
    """
    begins = f"{folder}{os.sep}"
    return os.path.join(path, sentence.removeprefix(begins)) if sentence.startswith(begins) else sentence


def open_study(path: str) -> Study:
    """Read a study given by its folder or its spec.

    Raises
    ------
    InputError
        With every fault of the spec, or, when the spec is right, every fault of the data files.
    """
    folder = Path(folder_path_of(path))
    spec_path = spec_path_of(path)
    if not os.path.exists(spec_path):
        remedy = f"A study's folder holds its spec under the name {SPEC_FILE}; or write the spec's own path."
        raise _no_such_study(path, f"there is no {SPEC_FILE} in this folder.", remedy)
    return read_study(folder, spec_path, _read(spec_path), lambda name: (folder / name).read_bytes())


def read_study(folder: Path, spec_path: str, spec_bytes: bytes, fetch: Callable[[str], bytes]) -> Study:
    """Read a study from the spec's bytes and a function that fetches a data file by its path in the spec."""
    spec = read_spec(_text(spec_bytes, spec_path), spec_path)
    received: dict[str, bytes] = {}
    faults = received_faults(spec)
    tables: dict[str, Table] = {}
    for name, wanted in spec.data.items():
        try:
            received[wanted.file] = fetch(wanted.file)
        except OSError as error:
            faults.append(_unreadable(wanted.place, f"data.{name}.file", wanted.file, error))
            continue
        try:
            tables[name] = read_table(received[wanted.file], wanted)
        except InputError as error:
            faults.extend(error.faults)
    if faults:
        raise InputError(in_file_order(faults))
    return Study(folder, spec_path, spec_bytes, spec, received, StudyData(tables, read_variables(spec, tables)))


def _no_such_study(path: str, what: str, remedy: str) -> InputError:
    return InputError((fault(Place(path or '""'), "", Message.NO_SUCH_STUDY, what, remedy),))


def _read(path: str) -> bytes:
    try:
        return Path(path).read_bytes()
    except OSError as error:
        raise InputError((_unreadable(Place(path), "", path, error),)) from None


def _text(data: bytes, path: str) -> str:
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data[: error.start].count(b"\n") + 1
        raise InputError(
            (
                fault(
                    Place(path, line),
                    "",
                    Message.ENCODING,
                    "a spec is UTF-8 text, and a byte in this line is not.",
                    "Save the file as UTF-8.",
                ),
            )
        ) from None


def _unreadable(place: Place, field: str, path: str, error: OSError) -> Fault:
    if isinstance(error, FileNotFoundError):
        what, remedy = f"there is no file {path!r}.", "Paths are relative to the folder of the spec."
    elif isinstance(error, IsADirectoryError):
        what, remedy = f"{path!r} is a folder.", "Name a file in it."
    else:
        what, remedy = f"the file {path!r} cannot be read.", "Ask for leave to read it."
    return fault(place, field, Message.FILE_NOT_READABLE, what, remedy)

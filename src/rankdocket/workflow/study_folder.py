"""A study on disk: where its spec lies, what it names, and everything read from it in one go."""

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


def spec_path_of(path: str) -> Path:
    """Return the spec's path for a study given as its folder or as its spec."""
    given = Path(path)
    return given / SPEC_FILE if given.is_dir() else given


def open_study(path: str) -> Study:
    """Read a study given by its folder or its spec.

    Raises
    ------
    InputError
        With every fault of the spec, or, when the spec is right, every fault of the data files.
    """
    spec_path = spec_path_of(path)
    spec_bytes = _read(spec_path, Place(str(spec_path)))
    folder = spec_path.parent
    return read_study(folder, str(spec_path), spec_bytes, lambda name: (folder / name).read_bytes())


def read_study(folder: Path, spec_path: str, spec_bytes: bytes, fetch: Callable[[str], bytes]) -> Study:
    """Read a study from the spec's bytes and a function that fetches a data file by its path in the spec."""
    spec = read_spec(_text(spec_bytes, spec_path), spec_path)
    received: dict[str, bytes] = {}
    faults: list[Fault] = []
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


def _read(path: Path, place: Place) -> bytes:
    try:
        return path.read_bytes()
    except OSError as error:
        raise InputError((_unreadable(place, "", str(path), error),)) from None


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
                    "Save the file as UTF-8. Nothing was computed.",
                ),
            )
        ) from None


def _unreadable(place: Place, field: str, path: str, error: OSError) -> Fault:
    if isinstance(error, FileNotFoundError):
        what, remedy = (
            f"there is no file {path!r}.",
            "Paths are relative to the folder of the spec. Nothing was computed.",
        )
    elif isinstance(error, IsADirectoryError):
        what, remedy = f"{path!r} is a folder.", "Name a file in it. Nothing was computed."
    else:
        what, remedy = f"the file {path!r} cannot be read.", "Ask for leave to read it. Nothing was computed."
    return fault(place, field, Message.FILE_NOT_READABLE, what, remedy)

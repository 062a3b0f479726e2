"""Where data files stand in a record copy: below ``received/``, whatever folder they came from."""

from pathlib import PurePosixPath
from typing import Final

from rankdocket.errors import Fault
from rankdocket.study.messages import Message, fault
from rankdocket.study.spec import StudySpec

RECEIVED: Final = "received/"


def received_name(path: str) -> str:
    """Return a data file's name in the record copy: its path as written, below ``received/`` once."""
    return path if path.startswith(RECEIVED) else f"{RECEIVED}{path}"


def received_faults(spec: StudySpec) -> list[Fault]:
    """Return a fault for each data file whose name in the record copy another file has, or needs for a folder."""
    faults: list[Fault] = []
    paths: dict[str, str] = {}
    for name, wanted in spec.data.items():
        place = received_name(wanted.file)
        other = next((paths[taken] for taken in paths if _clash(taken, place) and paths[taken] != wanted.file), None)
        if other is None:
            paths[place] = wanted.file
            continue
        what = f"{wanted.file!r} and {other!r} would both be {place!r} in the record copy of an edition."
        if place not in paths:
            what = f"{wanted.file!r} and {other!r} cannot lie side by side in the record copy of an edition."
        faults.append(fault(wanted.place, f"data.{name}.file", Message.PATH, what, "Rename one of the two files."))
    return faults


def _clash(one: str, other: str) -> bool:
    first, second = PurePosixPath(one), PurePosixPath(other)
    return first == second or first in second.parents or second in first.parents

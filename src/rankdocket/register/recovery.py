"""What an interrupted seal left behind, and how it is put in order.

The register's line decides: with it an edition exists and its folder is renamed, without it there is none and the
folder is removed.  All contradictions are looked for before anything is changed.
"""

import shutil
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path

from rankdocket.canonical import sha256
from rankdocket.errors import RegisterError
from rankdocket.register import chain, durable, manifest
from rankdocket.register.chain import Line
from rankdocket.register.holdings import (
    folder_of,
    hidden_folder_of,
    names_hidden,
    names_taken,
    register_of,
    sums_filed,
)
from rankdocket.register.names import EditionName


@dataclass(frozen=True, slots=True)
class Mended:
    """A register that is in order: its lines, and in sentences what had to be done for it."""

    lines: tuple[Line, ...]
    sentences: tuple[str, ...]


def mend(study_folder: Path) -> Mended:
    """Put the study in order; the caller holds its lock.

    Raises
    ------
    RegisterError
        If folders and register contradict each other in a way that no crash explains, or the disk refuses.
    """
    register = register_of(study_folder)
    try:
        data = register.read_bytes() if register.exists() else b""
        kept = _without_torn_end(data, register)
        lines = chain.intact(kept, str(register))
        filed = sums_filed(study_folder, lines)
        _refuse_strangers(study_folder, filed)
        hidden = names_hidden(study_folder)
        for name in hidden:
            if name in filed:
                _refuse_incomplete(study_folder, name, filed[name])
        sentences = [*_mend_end(register, data, kept), *(_settle(study_folder, name, filed) for name in hidden)]
    except OSError as error:
        raise durable.refusal(f"{study_folder} could not be put in order after an interruption", error) from error
    return Mended(lines, tuple(sentences))


def _without_torn_end(data: bytes, register: Path) -> bytes:
    """Return the bytes that are kept: a last line that lacks nothing but its newline is kept and gets one."""
    whole = data[: data.rfind(b"\n") + 1]
    if whole == data:
        return data
    return whole if chain.examine(data + b"\n", str(register)).problems else data + b"\n"


def _refuse_strangers(study_folder: Path, filed: Mapping[EditionName, str]) -> None:
    for name in names_taken(study_folder):
        if name not in filed:
            raise RegisterError(
                f"{folder_of(study_folder, name)} has no line in {register_of(study_folder)}: it was not sealed by "
                f"this program, or the end of the register was cut off. Restore the register from a copy, or move "
                f"the folder elsewhere."
            )


def _refuse_incomplete(study_folder: Path, name: EditionName, sums: str) -> None:
    hidden, folder = hidden_folder_of(study_folder, name), folder_of(study_folder, name)
    if folder.exists():
        raise RegisterError(f"{hidden} and {folder} both exist. Move the first one elsewhere.")
    problems = manifest.check(hidden)
    if not problems and sha256((hidden / manifest.SUMS_FILE).read_bytes()) != sums:
        problems = (f"{hidden / manifest.SUMS_FILE} does not have the digest that the line carries.",)
    if problems:
        raise RegisterError(
            f"{register_of(study_folder)} has a line for edition {name.folder}, but its folder is not what the line "
            f"says: {problems[0]} Restore {hidden} from a copy."
        )


def _mend_end(register: Path, data: bytes, kept: bytes) -> list[str]:
    if kept == data:
        return []
    if len(kept) > len(data):
        durable.append_once(register, b"\n")
        return [f"The last line of {register} lacked its newline: it was added."]
    durable.cut_back(register, len(kept))
    return [f"The last line of {register} had been written in part: {len(data) - len(kept)} bytes were cut off."]


def _settle(study_folder: Path, name: EditionName, filed: Mapping[EditionName, str]) -> str:
    hidden = hidden_folder_of(study_folder, name)
    if name in filed:
        durable.rename(hidden, folder_of(study_folder, name))
        return f"Edition {name.folder} had its line but was still hidden: it was completed."
    shutil.rmtree(hidden)
    durable.sync_folder(hidden.parent)
    return f"Edition {name.folder} had been begun but had no line: what there was of it was removed."

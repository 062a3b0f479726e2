"""What a study's folder holds of editions, and which of them its register has filed."""

from collections.abc import Iterable
from pathlib import Path
from typing import Final

from rankdocket.errors import RegisterError
from rankdocket.register.chain import REGISTER_FILE, Line
from rankdocket.register.durable import refusal
from rankdocket.register.names import EditionName

EDITIONS_FOLDER: Final = "editions"

_HIDDEN: Final = ".sealing-"


def register_of(study_folder: Path) -> Path:
    """Return where a study's register stands."""
    return study_folder / REGISTER_FILE


def folder_of(study_folder: Path, name: EditionName) -> Path:
    """Return where an edition stands."""
    return study_folder / EDITIONS_FOLDER / name.folder


def hidden_folder_of(study_folder: Path, name: EditionName) -> Path:
    """Return where an edition stands while it is being written."""
    return study_folder / EDITIONS_FOLDER / f"{_HIDDEN}{name.folder}"


def names_taken(study_folder: Path) -> tuple[EditionName, ...]:
    """Return the names of editions that anything in the folder of editions bears, in order."""
    return _in_order(_entries(study_folder))


def names_hidden(study_folder: Path) -> tuple[EditionName, ...]:
    """Return the names of the editions that were begun and are still hidden, in order."""
    return _in_order(text.removeprefix(_HIDDEN) for text in _entries(study_folder) if text.startswith(_HIDDEN))


def sums_filed(study_folder: Path, lines: tuple[Line, ...]) -> dict[EditionName, str]:
    """Return the digest of SHA256SUMS of every edition that a line has filed, also of those since deleted.

    Raises
    ------
    RegisterError
        If a line files something that is not an edition, or an edition a second time.
    """
    found: dict[EditionName, str] = {}
    for line in lines:
        edition, sums = line.event.details.get("edition"), line.event.details.get("sums")
        if sums is None:
            continue
        where = f"{register_of(study_folder)}: line {line.sequence}"
        if not isinstance(edition, str) or not isinstance(sums, str) or not EditionName.is_name(edition):
            raise RegisterError(f"{where} does not name an edition. Compare the register with a copy kept elsewhere.")
        name = EditionName.parse(edition)
        if name in found:
            raise RegisterError(
                f"{where} files edition {edition} a second time. Compare the register with a copy kept elsewhere."
            )
        found[name] = sums
    return found


def _entries(study_folder: Path) -> tuple[str, ...]:
    editions = study_folder / EDITIONS_FOLDER
    try:
        return tuple(entry.name for entry in editions.iterdir()) if editions.is_dir() else ()
    except OSError as error:
        raise refusal(f"{editions} cannot be read", error) from error


def _in_order(texts: Iterable[str]) -> tuple[EditionName, ...]:
    names = (EditionName.parse(text) for text in texts if EditionName.is_name(text))
    return tuple(sorted(names, key=lambda name: name.order))

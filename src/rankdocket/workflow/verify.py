"""Verify: make an edition again from its own record copy and say what agrees.

Three questions in turn: does the register's chain hold, are the edition's files those that were sealed, and does
computing everything afresh give the same files.  The answer names each thing that does not agree.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Literal, TypeAlias

from rankdocket.document.prose import numbers_of
from rankdocket.errors import RankdocketError
from rankdocket.register import manifest
from rankdocket.register.chain import GENESIS, Line
from rankdocket.register.holdings import folder_of
from rankdocket.workflow.differences import MALFORMED
from rankdocket.workflow.edition_files import ANALYSIS_BEFORE, PLAN_BEFORE, Issue, Progress, make_edition
from rankdocket.workflow.issue import DRAFTED, moment_of, not_made, replaced_by, why_altered
from rankdocket.workflow.received import received_name
from rankdocket.workflow.study_folder import Study, as_written, folder_path_of, read_study
from rankdocket.workflow.verify_files import compare
from rankdocket.workflow.verify_program import UnreadableError, Versions, change_since, versions_of
from rankdocket.workflow.verify_register import (
    before_against_line,
    chosen,
    digests_against_line,
    held_by,
    inputs_against_line,
    line_of,
)

Grade: TypeAlias = Literal["identical", "same", "different", "not verified"]


@dataclass(frozen=True, slots=True)
class Verification:
    """What verifying an edition came to.

    Attributes
    ----------
    edition
        The edition, as its folder is called.
    grade
        ``identical``: every byte was made again; ``same``: every number and everything stated, in other words or
        looks; ``different``: something does not agree; ``not verified``: nothing was found that does not agree, and
        something could not be checked.
    numbers, files
        How many printed numbers and files were held against the recomputation.
    problems
        A sentence for each thing that does not agree or could not be checked.
    remarks
        What differs without touching a number, and its likely cause.
    """

    edition: str
    grade: Grade
    numbers: int
    files: int
    problems: tuple[str, ...]
    remarks: tuple[str, ...]

    @property
    def agrees(self) -> bool:
        """True when everything was checked and nothing that counts differs."""
        return not self.problems


def verify(path: str, *, edition: str | None = None, progress: Progress = lambda _: None) -> Verification:
    """Verify an edition of the study at ``path``; the last issued one unless ``edition`` names another.

    Raises
    ------
    InputError
        If there is no such study or no such edition, on disk or in the register.
    RenderError
        If the system refuses a file while the edition is made again.
    """
    written = folder_path_of(path)
    folder = Path(written)
    held = held_by(folder)
    name = chosen(path, held.names, edition)
    problems = [as_written(problem, folder, written) for problem in held.problems]
    place = folder_of(folder, name)
    if not place.is_dir():
        return Verification(name.folder, "different", 0, 0, tuple(problems), ())
    line = line_of(held.lines, name)
    altered = manifest.check(place) if line is None else why_altered(place, line)
    problems += [as_written(problem, folder, written) for problem in altered]
    filed = _files_of(place)
    if line is None:
        return Verification(name.folder, "different", 0, len(filed), tuple(problems), ())
    record = _Record(folder, filed, held.lines[: line.sequence - 1], line)
    try:
        remade = _remade(record, progress)
    except OSError as error:
        raise not_made(line.event.object, written, error) from error
    problems += remade.problems
    grade: Grade = (
        "different" if problems else "not verified" if remade.unchecked else "same" if remade.remarks else "identical"
    )
    told = tuple(dict.fromkeys(map(_on_one_line, (*problems, *remade.unchecked))))
    return Verification(name.folder, grade, remade.numbers, len(filed), told, tuple(map(_on_one_line, remade.remarks)))


def _on_one_line(sentence: str) -> str:
    # What a sentence quotes was not written by us: it must neither feign lines of ours nor steer a terminal.
    signs = (" " if sign.isspace() else sign for sign in sentence)
    return "".join(sign if sign.isprintable() else sign.encode("unicode_escape").decode("ascii") for sign in signs)


@dataclass(frozen=True, slots=True)
class _Record:
    """One edition's files, its line in the register, and the lines before."""

    folder: Path
    filed: Mapping[str, bytes]
    before: tuple[Line, ...]
    line: Line


@dataclass(frozen=True, slots=True)
class _Remade:
    """What making an edition again showed."""

    problems: tuple[str, ...]
    unchecked: tuple[str, ...] = ()
    remarks: tuple[str, ...] = ()
    numbers: int = 0


def _files_of(place: Path) -> dict[str, bytes]:
    return {
        path.relative_to(place).as_posix(): path.read_bytes() for path in sorted(place.rglob("*")) if path.is_file()
    }


def _remade(record: _Record, progress: Progress) -> _Remade:
    problems = [*digests_against_line(record.filed, record.line), *before_against_line(record.filed, record.before)]
    try:
        then = versions_of(_file(record.filed, "versions.json"))
        study = _study(record)
        problems += inputs_against_line(record.filed, study.data_digests, then, record.line)
        made = make_edition(study, _issue(record, then), progress)
    except UnreadableError as error:
        return _Remade((*problems, str(error)))
    except OSError:
        raise
    except (RankdocketError, *MALFORMED) as error:
        return _Remade(
            tuple(problems), (f"The record copy cannot be computed again ({type(error).__name__}): {error}",)
        )
    found = compare(record.filed, made, study.spec, change_since(then))
    numbers = sum(1 for _ in numbers_of(made.document))
    return _Remade((*problems, *found.problems), found.unchecked, found.remarks, numbers)


def _file(filed: Mapping[str, bytes], name: str) -> bytes:
    if name not in filed:
        raise UnreadableError(f"{name} is missing in the record copy, so that nothing can be computed again.")
    return filed[name]


def _study(record: _Record) -> Study:
    return read_study(
        record.folder,
        "spec.yaml",
        _file(record.filed, "spec.yaml"),
        lambda path: _file(record.filed, received_name(path)),
    )


def _issue(record: _Record, then: Versions) -> Issue:
    line, before = record.line, record.before
    return Issue(
        edition=str(line.event.details["edition"]),
        status="draft" if line.event.action == DRAFTED else "issued",
        moment=moment_of(line),
        reason=line.event.reason,
        replaces=replaced_by(before),
        before={name: record.filed[name] for name in (ANALYSIS_BEFORE, PLAN_BEFORE) if name in record.filed},
        register_before=b"".join(earlier.raw + b"\n" for earlier in before),
        head_before=before[-1].digest if before else GENESIS,
        ingredients=then.ingredients,
        program_digest=then.program_digest,
        self_test=then.self_test,
        self_test_cases=then.self_test_cases,
    )

"""Verify: make an edition again from its own record copy and say what agrees.

Three questions in turn: does the register's chain hold, are the edition's files those that were sealed, and does
computing everything afresh give the same files.  The answer names each thing that does not agree.
"""

import json
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final, Literal, TypeAlias

from rankdocket.canonical import sha256
from rankdocket.document.prose import numbers_of
from rankdocket.errors import InputError, RegisterError
from rankdocket.register import chain, manifest
from rankdocket.register.chain import GENESIS, Line
from rankdocket.register.editions import EditionName, existing
from rankdocket.register.environment import components, program_digest
from rankdocket.register.holdings import folder_of, register_of
from rankdocket.workflow.differences import name_differences, shown_numbers
from rankdocket.workflow.edition_files import Issue, Progress, make_edition, received_name
from rankdocket.workflow.issue import DRAFTED, ISSUED, moment_of, replaced_by
from rankdocket.workflow.study_folder import read_study, spec_path_of
from rankdocket.writing.section import Ingredient

Grade: TypeAlias = Literal["identical", "same", "different"]

NUMBER_FILES: Final = ("analysis.json", "results.csv", "rows.csv", "plan.json")
"""Besides ranks-*.csv: files in which only numbers and data stand, so that any difference in them counts."""


@dataclass(frozen=True, slots=True)
class Verification:
    """What verifying an edition came to.

    Attributes
    ----------
    edition
        The edition, as its folder is called.
    grade
        ``identical``: every byte was made again; ``same``: every number and every printed text of a number;
        ``different``: something does not agree.
    numbers, files
        How many printed numbers and files were held against the recomputation.
    problems
        A sentence for each thing that does not agree.
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
        """True when nothing that counts differs."""
        return not self.problems


def verify(path: str, *, edition: str | None = None, progress: Progress = lambda _: None) -> Verification:
    """Verify an edition of the study at ``path``; the last issued one unless ``edition`` names another.

    Raises
    ------
    RegisterError
        If there is no such edition, or the register has no line for it.
    """
    if not Path(path).exists():
        raise RegisterError(f"{path}: there is no such study. Write its folder or its spec.")
    folder = spec_path_of(path).parent
    name = _chosen(folder, edition)
    register = register_of(folder)
    problems = list(chain.check(register))
    lines = () if problems else chain.read(register)
    place = folder_of(folder, name)
    filed = _files_of(place)
    problems += manifest.check(place)
    line = _line_of(lines, name)
    if line is None and not problems:
        problems.append(f"register: no line says that {name.folder} was sealed.")
    if line is not None and sha256(filed.get(manifest.SUMS_FILE, b"")) != line.event.details["sums"]:
        problems.append(
            f"register: the digest of SHA256SUMS of {name.folder} is not the one filed in line {line.sequence}."
        )
    if line is None:
        return Verification(name.folder, "different", 0, len(filed), tuple(problems), ())
    try:
        made, numbers = _made_again(folder, filed, lines, line, progress)
    except (InputError, KeyError, ValueError) as error:
        problems.append(f"the record copy cannot be computed again: {error}")
        return Verification(name.folder, "different", 0, len(filed), tuple(problems), ())
    other_program = _other_program(filed)
    found, remarks = _compare(filed, made, other_program)
    problems += found
    grade: Grade = "different" if problems else "same" if remarks else "identical"
    return Verification(name.folder, grade, numbers, len(filed), tuple(dict.fromkeys(problems)), remarks)


def _chosen(folder: Path, edition: str | None) -> EditionName:
    names = existing(folder)
    if edition is not None:
        wanted = EditionName.parse(edition)
        if wanted not in names:
            raise RegisterError(f"{folder}: there is no edition {edition}. Editions: {_listed(names)}.")
        return wanted
    issued = [name for name in names if not name.is_draft] or list(names)
    if not issued:
        raise RegisterError(
            f'{folder}: nothing has been issued. Write: rankdocket issue {folder} --reason "first issue"'
        )
    return issued[-1]


def _listed(names: tuple[EditionName, ...]) -> str:
    return ", ".join(name.folder for name in names) or "none"


def _files_of(place: Path) -> dict[str, bytes]:
    return {
        path.relative_to(place).as_posix(): path.read_bytes() for path in sorted(place.rglob("*")) if path.is_file()
    }


def _line_of(lines: tuple[Line, ...], name: EditionName) -> Line | None:
    for line in lines:
        if line.event.action in (ISSUED, DRAFTED) and line.event.details.get("edition") == name.folder:
            return line
    return None


def _made_again(
    folder: Path, filed: Mapping[str, bytes], lines: tuple[Line, ...], line: Line, progress: Progress
) -> tuple[Mapping[str, bytes], int]:
    before = lines[: line.sequence - 1]
    versions = json.loads(filed["versions.json"])
    study = read_study(folder, "spec.yaml", filed["spec.yaml"], lambda path: filed[received_name(path)])
    issue = Issue(
        edition=str(line.event.details["edition"]),
        status="draft" if line.event.action == DRAFTED else "issued",
        moment=moment_of(line),
        reason=line.event.reason,
        replaces=replaced_by(before),
        register_before=b"".join(earlier.raw + b"\n" for earlier in before),
        head_before=before[-1].digest if before else GENESIS,
        ingredients=tuple(_ingredient(item) for item in versions["components"]),
        program_digest=str(versions["program_digest"]),
        self_test=str(versions["self_test"]["outcome"]),
        self_test_cases=versions["self_test"]["cases"],
    )
    made = make_edition(study, issue, progress)
    return made.files, sum(1 for _ in numbers_of(made.document))


def _ingredient(item: Mapping[str, Any]) -> Ingredient:
    return Ingredient(str(item["what"]), str(item["version"]), str(item["role"]))


def _other_program(filed: Mapping[str, bytes]) -> tuple[str, ...]:
    """Return what today's installation has otherwise than the one that made the edition."""
    versions = json.loads(filed["versions.json"])
    then = {str(item["what"]): str(item["version"]) for item in versions["components"]}
    changed = tuple(
        f"{item.name} {then[item.name]} then, {item.version} now"
        for item in components()
        if then.get(item.name, item.version) != item.version
    )
    if versions["program_digest"] != program_digest():
        changed += ("the program's own files have changed since",)
    return changed


def _compare(
    filed: Mapping[str, bytes], made: Mapping[str, bytes], other_program: tuple[str, ...]
) -> tuple[list[str], tuple[str, ...]]:
    problems: list[str] = []
    remarks: list[str] = []
    for name in sorted((filed.keys() | made.keys()) - {manifest.SUMS_FILE}):
        if name not in filed or name not in made:
            sentence = f"{name}: only in the {'edition' if name in filed else 'recomputation'}."
            (remarks if other_program and not _counts(name) else problems).append(sentence)
            continue
        differences = name_differences(name, filed[name], made[name])
        if differences and other_program and not _counts(name):
            problems += _moved_numbers(name, filed[name], made[name])
            remarks.append(f"{name}: words or looks differ, {len(differences)} places.")
        elif differences and name.endswith(".pdf") and _same_text(differences):
            remarks.append(f"{name}: other bytes, the same text on every page.")
        else:
            problems += differences
    if remarks and other_program:
        remarks.append(f"Possible cause: {'; '.join(other_program)}.")
    return problems, tuple(remarks)


def _counts(name: str) -> bool:
    return name in NUMBER_FILES or name.startswith(("ranks-", "received/")) or name == "spec.yaml"


def _same_text(differences: tuple[str, ...]) -> bool:
    return len(differences) == 1 and differences[0].endswith("nothing in the content does.")


def _moved_numbers(name: str, filed: bytes, made: bytes) -> list[str]:
    """Name every number that both reports hold and the filed one prints otherwise, whatever changed around it."""
    if name == "document.json":
        then, today = _printed(json.loads(filed)), _printed(json.loads(made))
    elif name == "report.html":
        then, today = shown_numbers(filed.decode("utf-8")), shown_numbers(made.decode("utf-8"))
    else:
        return []
    return [
        f"{name}: {key} was printed as “{', '.join(sorted(texts))}”, recomputed “{', '.join(sorted(today[key]))}”."
        for key, texts in sorted(then.items())
        if key in today and not texts <= today[key]
    ]


def _printed(node: object) -> dict[str, set[str]]:
    found: dict[str, set[str]] = {}
    stack = [node]
    while stack:
        here = stack.pop()
        if isinstance(here, dict):
            if here.get("is") == "Number":
                found.setdefault(str(here["key"]), set()).add(str(here["text"]))
            stack.extend(here.values())
        elif isinstance(here, list):
            stack.extend(here)
    return found

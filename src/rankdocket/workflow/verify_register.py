"""What a study's register and folder say about its editions, and whether an edition's files are those it files."""

import shlex
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path

from rankdocket.canonical import Plain, digest_of, sha256
from rankdocket.errors import InputError, Place
from rankdocket.register import chain
from rankdocket.register.chain import Line
from rankdocket.register.editions import EditionName, existing
from rankdocket.register.holdings import folder_of, hidden_folder_of, register_of
from rankdocket.study.messages import Message, fault
from rankdocket.workflow.edition_files import ANALYSIS_BEFORE, PLAN_BEFORE
from rankdocket.workflow.issue import DRAFTED, ISSUED, last_sealed
from rankdocket.workflow.received import RECEIVED, received_name
from rankdocket.workflow.verify_program import Versions


@dataclass(frozen=True, slots=True)
class Held:
    """The editions of a study, in order, on disk or in its register; its lines, none when the chain does not hold."""

    names: tuple[EditionName, ...]
    lines: tuple[Line, ...]
    problems: tuple[str, ...]


def held_by(folder: Path) -> Held:
    """Return what the study in ``folder`` holds."""
    register = register_of(folder)
    if register.exists():
        found = chain.examine(register.read_bytes(), str(register))
    else:
        found = chain.Examined((), chain.check(register))
    on_disk = existing(folder)
    sealed: dict[EditionName, Line] = {}
    # What a broken chain still says about editions is not proof, and it is the only trace of those that were deleted.
    for line in found.lines:
        edition = str(line.event.details.get("edition"))
        if line.event.action in (ISSUED, DRAFTED) and EditionName.is_name(edition):
            sealed.setdefault(EditionName.parse(edition), line)
    problems = [*found.problems, *(_missing(folder, name, sealed[name]) for name in sealed if name not in on_disk)]
    if not found.problems:
        problems += [f"register: no line says that {name.folder} was sealed." for name in on_disk if name not in sealed]
    names = tuple(sorted({*sealed, *on_disk}, key=lambda name: name.order))
    return Held(names, () if found.problems else found.lines, tuple(problems))


def _missing(folder: Path, name: EditionName, line: Line) -> str:
    hidden = hidden_folder_of(folder, name)
    if hidden.is_dir():
        return f"{hidden} still has a hidden name although line {line.sequence} seals it: the next issue completes it."
    return (
        f"{folder_of(folder, name)} is missing: line {line.sequence} of the register holds {line.event.object}, "
        f"{line.event.action} on {line.event.time[:10]}. Restore the folder from a copy."
    )


def chosen(path: str, names: tuple[EditionName, ...], edition: str | None) -> EditionName:
    """Return the edition asked for, by default the last issued one.

    Raises
    ------
    InputError
        If the study at ``path`` does not have it.
    """
    if edition is not None:
        if not EditionName.is_name(edition):
            what, remedy = f"{edition!r} is not an edition.", "Write a number such as 2, or 2A for a draft."
            raise InputError((fault(Place("--edition"), "", Message.NAME, what, remedy),))
        wanted = EditionName.parse(edition)
        if wanted not in names:
            listed = ", ".join(name.folder for name in names)
            remedy = f"Write one of: {listed}." if names else _how_to_issue(path)
            raise _no_such_edition(path, f"there is no edition {edition}.", remedy)
        return wanted
    issued = [name for name in names if not name.is_draft] or list(names)
    if not issued:
        raise _no_such_edition(path, "nothing has been issued.", _how_to_issue(path))
    return issued[-1]


def _no_such_edition(path: str, what: str, remedy: str) -> InputError:
    return InputError((fault(Place(path), "", Message.NO_SUCH_EDITION, what, remedy),))


def _how_to_issue(path: str) -> str:
    return f'Write: rankdocket issue {shlex.quote(path)} --reason "first issue".'


def line_of(lines: tuple[Line, ...], name: EditionName) -> Line | None:
    """Return the line that seals an edition, where there is one."""
    for line in lines:
        if line.event.action in (ISSUED, DRAFTED) and line.event.details.get("edition") == name.folder:
            return line
    return None


def digests_against_line(filed: Mapping[str, bytes], line: Line) -> Iterator[str]:
    """Yield a sentence for each digest of the line that the filed spec, data, plan and analysis do not have."""
    for member, name in (("spec", "spec.yaml"), ("plan", "plan.json"), ("analysis", "analysis.json")):
        if name in filed and sha256(filed[name]) != line.event.details.get(member):
            yield f"register: the digest of {name} is not the one filed in line {line.sequence}."
    data = line.event.details.get("data")
    if not isinstance(data, Mapping):
        yield f"register: line {line.sequence} does not say which data the edition was made from."
        return
    for path, digest in data.items():
        name = received_name(path)
        if name in filed and sha256(filed[name]) != digest:
            yield f"register: the digest of {name} is not the one filed in line {line.sequence}."
    named = {received_name(path) for path in data}
    for name in sorted({name for name in filed if name.startswith(RECEIVED)} ^ named):
        where = "edition" if name in filed else f"register, line {line.sequence}"
        yield f"{name}: only in the {where}."


def inputs_against_line(
    filed: Mapping[str, bytes], data_digests: Mapping[str, str], then: Versions, line: Line
) -> Iterator[str]:
    """Yield a sentence when spec, data and program are not together what the line files, or the program's name is not."""
    data: dict[str, Plain] = dict(data_digests)
    inputs = digest_of({"spec": sha256(filed["spec.yaml"]), "data": data, "program": then.program_digest})
    if inputs != line.event.details.get("inputs"):
        yield (
            f"register: spec, data and the program's digest in versions.json do not give the digest of the inputs "
            f"that line {line.sequence} files."
        )
    if then.program != line.event.program:
        yield f"versions.json: names {then.program}, line {line.sequence} of the register {line.event.program}."


def before_against_line(filed: Mapping[str, bytes], lines_before: tuple[Line, ...]) -> Iterator[str]:
    """Yield a sentence for each file of the edition replaced that is not the one its own line files.

    Both files are absent when that edition had been deleted before this one was issued; the report then says so.
    """
    last = last_sealed(lines_before, draft=False)
    members = {ANALYSIS_BEFORE: "analysis", PLAN_BEFORE: "plan"}
    if filed.keys().isdisjoint(members):
        return
    for name, member in members.items():
        if last is None:
            yield f"{name}: the register says that nothing was replaced."
        elif name not in filed:
            yield f"{name}: missing, although {last.event.object} was replaced."
        elif sha256(filed[name]) != last.event.details.get(member):
            yield f"{name}: not the file of {last.event.object}, whose digest line {last.sequence} of the register holds."

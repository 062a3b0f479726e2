"""Issue: compute a study and seal a numbered edition, whole or not at all."""

import getpass
import os
import shlex
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from rankdocket.canonical import Plain, digest_of, sha256
from rankdocket.errors import RegisterError, RenderError
from rankdocket.register import chain, manifest
from rankdocket.register.chain import Event, Line
from rankdocket.register.editions import EditionName, Sealing, seal
from rankdocket.register.environment import components, program_digest
from rankdocket.register.holdings import folder_of, register_of
from rankdocket.workflow.edition_files import (
    ANALYSIS_BEFORE,
    PLAN_BEFORE,
    Issue,
    Made,
    Progress,
    make_edition,
    plan_digest,
)
from rankdocket.workflow.moment import Moment, now
from rankdocket.workflow.self_test import outcomes_to_plain, require_agreement, run_self_test, sentence
from rankdocket.workflow.study_folder import Study, as_written, folder_path_of, open_study
from rankdocket.writing.section import Ingredient

ISSUED: Final = "issued"
DRAFTED: Final = "drafted"
ACTOR_VARIABLE: Final = "RANKDOCKET_ACTOR"


@dataclass(frozen=True, slots=True)
class Issued:
    """What an issue came to.

    Attributes
    ----------
    changed
        False when the inputs were those of the last edition, so that nothing was written.
    edition
        The edition sealed, or the one that is still current.
    folder
        Its folder.
    head
        The register's head: to be deposited with somebody else.
    findings
        Association → finding word; ``None`` when nothing was computed because nothing had changed.
    pages
        Pages of the PDF; ``None`` as for ``findings``.
    """

    changed: bool
    edition: str
    folder: Path
    head: str
    findings: Mapping[str, str] | None
    pages: int | None


def issue(
    path: str, *, reason: str, draft: bool = False, actor: str | None = None, progress: Progress = lambda _: None
) -> Issued:
    """Compute the study at ``path`` and seal the next edition, or draft, of it.

    When the inputs are those of the last edition nothing is written; its files are then held against their digests,
    because pointing to a report that is no longer the one that was sealed would vouch for it.

    Parameters
    ----------
    path
        The study's folder or its spec.
    reason
        Why; printed and filed.
    draft
        Whether a lettered draft is sealed instead of an edition.
    actor
        Who issues it, as claimed; by default RANKDOCKET_ACTOR or the name of the account.
    progress
        Told in words how far the work is.

    Raises
    ------
    InputError, ComputeError, RenderError, RegisterError
        Nothing was sealed then, and the study's folder is as it was.  A RegisterError also when nothing has changed
        since the last edition and that edition is not as it was sealed.
    """
    study = open_study(path)
    moment = now()
    inputs = inputs_digest(study)
    made: list[Made] = []
    current: list[Issued] = []

    def build(name: EditionName, head_before: str) -> Sealing | None:
        lines = chain.read(register_of(study.folder))
        last = _still_current(study.folder, lines, draft, inputs)
        if last is not None:
            current.append(_unchanged_since(path, last, lines[-1].digest))
            return None
        case_outcomes = run_self_test()
        require_agreement(case_outcomes)
        facts = Issue(
            edition=name.folder,
            status="draft" if draft else "issued",
            moment=moment,
            reason=reason,
            replaces=replaced_by(lines),
            before=_files_before(study.folder, lines),
            register_before=b"".join(line.raw + b"\n" for line in lines),
            head_before=head_before,
            ingredients=tuple(Ingredient(item.name, item.version, item.role) for item in components()),
            program_digest=program_digest(),
            self_test=sentence(case_outcomes),
            self_test_cases=outcomes_to_plain(case_outcomes),
        )
        try:
            made.append(make_edition(study, facts, progress))
        except OSError as error:
            raise not_made(facts.name, folder_path_of(path), error) from error
        return Sealing(made[-1].files, _event(study, facts, made[-1], inputs, actor or claimed_actor()))

    sealed = seal(study.folder, draft, build)
    if sealed is None:
        return current[-1]
    return Issued(
        changed=True,
        edition=sealed.name.folder,
        folder=sealed.folder,
        head=sealed.line_digest,
        findings={name: finding.word or "no finding" for name, finding in made[-1].analysis.findings.items()},
        pages=made[-1].pages,
    )


def inputs_digest(study: Study) -> str:
    """Return one digest of everything a result depends on: the spec, the data and the program's own files."""
    return digest_of({"spec": study.spec_digest, "data": study.data_digests, "program": program_digest()})


def replaced_by(lines: tuple[Line, ...]) -> str | None:
    """Return the edition that the next one replaces, in words, or ``None``."""
    for line in reversed(lines):
        if line.event.action == ISSUED:
            return f"edition {line.event.details['edition']} of {line.event.time[:10]}"
    return None


def _files_before(folder: Path, lines: tuple[Line, ...]) -> dict[str, bytes]:
    """Return what the changes section needs of the edition that is replaced.

    Raises
    ------
    RegisterError
        If the record of that edition is not as it was sealed.
    """
    last = last_sealed(lines, draft=False)
    if last is None:
        return {}
    place = folder_of(folder, EditionName.parse(str(last.event.details["edition"])))
    try:
        found = {
            ANALYSIS_BEFORE: (place / "analysis.json").read_bytes(),
            PLAN_BEFORE: (place / "plan.json").read_bytes(),
        }
    except OSError:
        return {}  # deleted from the disk: the report says that nothing could be set against it
    for name, member in ((ANALYSIS_BEFORE, "analysis"), (PLAN_BEFORE, "plan")):
        if sha256(found[name]) != last.event.details.get(member):
            raise RegisterError(
                f"{place}: {member}.json is not the file that was sealed. Write: rankdocket verify {folder}"
            )
    return found


def last_sealed(lines: tuple[Line, ...], draft: bool) -> Line | None:
    """Return the line of the last edition, or of the last draft of the coming one."""
    for line in reversed(lines):
        if line.event.action == (DRAFTED if draft else ISSUED):
            return line
        if draft and line.event.action == ISSUED:
            return None  # an edition has been issued since: the next draft is one of another edition
    return None


def claimed_actor() -> str:
    """Return who acts, as far as this program can tell: it is a claim and not an identification."""
    named = os.environ.get(ACTOR_VARIABLE)
    if named:
        return named
    try:
        return getpass.getuser()
    except (KeyError, OSError):
        return "unnamed account"


def not_made(name: str, folder: str, error: OSError) -> RenderError:
    """Return the error to raise when the system refused a file while an edition was being made.

    Pages are laid out in the folder for temporary files before anything is written into the study's.
    """
    where = error.filename or "a file in the folder for temporary files, where pages are laid out"
    return RenderError(
        f"{folder}: {name} could not be made, because the system refused {where}: {error.strerror or error}. "
        "Look whether there is room, leave to write, and no limit on the size of a file; TMPDIR can name another "
        "folder. Nothing was sealed."
    )


def why_altered(folder: Path, line: Line) -> tuple[str, ...]:
    """Return a sentence for each file of an edition's folder that is not the one that ``line`` sealed."""
    problems = manifest.check(folder)
    sums = folder / manifest.SUMS_FILE
    if sums.is_file() and sha256(sums.read_bytes()) != line.event.details.get("sums"):
        told = f"the digest of {manifest.SUMS_FILE} of {folder.name} is not the one filed in line {line.sequence}."
        return (*problems, f"register: {told}")
    return problems


def _unchanged_since(path: str, last: Line, head: str) -> Issued:
    edition, written = str(last.event.details["edition"]), folder_path_of(path)
    folder = Path(written)
    place = folder_of(folder, EditionName.parse(edition))
    altered = why_altered(place, last)
    if altered:
        more = f" And {len(altered) - 1} more." if len(altered) > 1 else ""
        raise RegisterError(
            f"Nothing has changed since {last.event.object} and nothing was written, but {last.event.object} is not as "
            f"it was sealed: {as_written(altered[0], folder, written)}{more} To see everything that does not agree: "
            f"rankdocket verify {shlex.quote(path)} --edition {edition}"
        )
    return Issued(False, edition, place, head, None, None)


def _still_current(folder: Path, lines: tuple[Line, ...], draft: bool, inputs: str) -> Line | None:
    """Return the line of the last edition when it was made from these inputs and its folder is there."""
    last = last_sealed(lines, draft)
    if last is None or last.event.details.get("inputs") != inputs:
        return None
    return last if folder_of(folder, EditionName.parse(str(last.event.details["edition"]))).is_dir() else None


def _event(study: Study, facts: Issue, made: Made, inputs: str, actor: str) -> Event:
    details: dict[str, Plain] = {
        "inputs": inputs,
        "spec": study.spec_digest,
        "data": study.data_digests,
        "plan": plan_digest(study),
        "analysis": sha256(made.files["analysis.json"]),
    }
    program = next(item for item in facts.ingredients if item.what == "rankdocket")
    return Event(
        action=DRAFTED if facts.status == "draft" else ISSUED,
        object=facts.name,
        actor=actor,
        time=facts.moment.time,
        time_source=facts.moment.source,
        reason=facts.reason,
        program=f"rankdocket {program.version}",
        details=details,
    )


def moment_of(line: Line) -> Moment:
    """Return the moment that a line files."""
    return Moment(line.event.time, line.event.time_source)

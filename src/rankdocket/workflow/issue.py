"""Issue: compute a study and seal a numbered edition, whole or not at all."""

import getpass
import os
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from rankdocket.canonical import Plain, digest_of, sha256
from rankdocket.register import chain
from rankdocket.register.chain import Event, Line
from rankdocket.register.editions import EditionName, Sealed, Sealing, seal
from rankdocket.register.environment import components, program_digest
from rankdocket.register.holdings import folder_of, register_of
from rankdocket.workflow.edition_files import Issue, Made, Progress, make_edition, plan_digest
from rankdocket.workflow.moment import Moment, now
from rankdocket.workflow.self_test import outcomes_to_plain, require_agreement, run_self_test, sentence
from rankdocket.workflow.study_folder import Study, open_study
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
        Association → finding word; empty when nothing was computed.
    pages
        Pages of the PDF; 0 when nothing was computed.
    """

    changed: bool
    edition: str
    folder: Path
    head: str
    findings: Mapping[str, str]
    pages: int


def issue(
    path: str, *, reason: str, draft: bool = False, actor: str | None = None, progress: Progress = lambda _: None
) -> Issued:
    """Compute the study at ``path`` and seal the next edition, or draft, of it.

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
        Nothing was sealed then, and the study's folder is as it was.
    """
    study = open_study(path)
    moment = now()
    inputs = inputs_digest(study)
    made: list[Made] = []

    def build(name: EditionName, head_before: str) -> Sealing | None:
        lines = chain.read(register_of(study.folder))
        if _unchanged(study.folder, lines, draft, inputs):
            return None
        case_outcomes = run_self_test()
        require_agreement(case_outcomes)
        facts = Issue(
            edition=name.folder,
            status="draft" if draft else "issued",
            moment=moment,
            reason=reason,
            replaces=replaced_by(lines),
            register_before=b"".join(line.raw + b"\n" for line in lines),
            head_before=head_before,
            ingredients=tuple(Ingredient(item.name, item.version, item.role) for item in components()),
            program_digest=program_digest(),
            self_test=sentence(case_outcomes),
            self_test_cases=outcomes_to_plain(case_outcomes),
        )
        made.append(make_edition(study, facts, progress))
        return Sealing(made[-1].files, _event(study, facts, made[-1], inputs, actor or claimed_actor()))

    sealed = seal(study.folder, draft, build)
    if sealed is None:
        last = last_sealed(chain.read(register_of(study.folder)), draft)
        return Issued(
            False,
            _edition(last),
            study.folder / "editions" / _edition(last),
            chain.head(register_of(study.folder)),
            {},
            0,
        )
    return _issued(sealed, made[-1])


def inputs_digest(study: Study) -> str:
    """Return one digest of everything a result depends on: the spec, the data and the program's own files."""
    return digest_of({"spec": study.spec_digest, "data": study.data_digests, "program": program_digest()})


def replaced_by(lines: tuple[Line, ...]) -> str | None:
    """Return the edition that the next one replaces, in words, or ``None``."""
    for line in reversed(lines):
        if line.event.action == ISSUED:
            return f"edition {line.event.details['edition']} of {line.event.time[:10]}"
    return None


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


def _unchanged(folder: Path, lines: tuple[Line, ...], draft: bool, inputs: str) -> bool:
    last = last_sealed(lines, draft)
    if last is None or last.event.details.get("inputs") != inputs:
        return False
    return folder_of(folder, EditionName.parse(_edition(last))).is_dir()


def _edition(line: Line | None) -> str:
    return "" if line is None else str(line.event.details["edition"])


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


def _issued(sealed: Sealed, made: Made) -> Issued:
    return Issued(
        changed=True,
        edition=sealed.name.folder,
        folder=sealed.folder,
        head=sealed.line_digest,
        findings={name: finding.word or "no finding" for name, finding in made.analysis.findings.items()},
        pages=made.pages,
    )


def moment_of(line: Line) -> Moment:
    """Return the moment that a line files."""
    return Moment(line.event.time, line.event.time_source)

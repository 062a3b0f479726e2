"""Everything an edition holds, made from a study and what is known about its issue.

Issuing and verifying call the same function: an edition agrees when making it again gives the same bytes.
"""

import json
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from importlib.resources import files
from typing import Final

from rankdocket.analysis.analyse import analyse
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis
from rankdocket.canonical import Plain, canonical_bytes, digest_of, readable_bytes, sha256
from rankdocket.document.model import Document
from rankdocket.document.plain import document_to_plain
from rankdocket.render.rendition import Rendition, render
from rankdocket.study.plan import plan_of
from rankdocket.study.plan_changes import plan_changes
from rankdocket.study.writer import spec_as_used
from rankdocket.vocabulary import Status
from rankdocket.workflow.moment import Moment
from rankdocket.workflow.more_rows import MORE_ROWS, asks_for_more_rows
from rankdocket.workflow.received import received_name
from rankdocket.workflow.record_tables import record_tables
from rankdocket.workflow.study_folder import Study
from rankdocket.writing.section import Before, Ingredient, IssueFacts
from rankdocket.writing.write import write

VERSIONS_SCHEMA: Final = "urn:rankdocket:versions:1"
ANALYSIS_BEFORE: Final = "before/analysis.json"
PLAN_BEFORE: Final = "before/plan.json"
CHECKER: Final = "check.py"
PACKAGE: Final = "rankdocket.workflow"

Progress = Callable[[str], None]


@dataclass(frozen=True, slots=True)
class Issue:
    """What is known about one issue and cannot be computed from the study.

    Attributes
    ----------
    edition
        "2" or "1A", as the folder is called.
    replaces
        "edition 1 of 2026-04-02", or ``None``.
    before
        analysis.json and plan.json of the edition that is replaced, by their names here; empty for a first edition.
    register_before
        The register's bytes before this edition's line.
    head_before
        Digest of its last line.
    ingredients, program_digest, self_test
        What the report is made with, as it stands in versions.json.
    """

    edition: str
    status: Status
    moment: Moment
    reason: str
    replaces: str | None
    before: Mapping[str, bytes]
    register_before: bytes
    head_before: str
    ingredients: tuple[Ingredient, ...]
    program_digest: str
    self_test: str
    self_test_cases: Plain

    @property
    def name(self) -> str:
        """The edition in words."""
        return f"draft {self.edition}" if self.status == "draft" else f"edition {self.edition}"


@dataclass(frozen=True, slots=True)
class Made:
    """An edition made: its files by name, and the values they were made from."""

    files: Mapping[str, bytes]
    analysis: Analysis
    plain: Mapping[str, Plain]
    document: Document
    pages: int


def make_edition(study: Study, issue: Issue, progress: Progress) -> Made:
    """Make every file of an edition but its list of digests.

    Raises
    ------
    InputError, ComputeError, RenderError
        When the study cannot be used, computed or set; nothing is written here.
    """
    total = len(study.spec.associations)
    done: list[str] = []

    def count(name: str) -> None:
        done.append(name)
        progress(f"{len(done)} of {total} associations")

    analysis = analyse(study.spec, study.data, count)
    plain = analysis_to_plain(analysis)
    analysis_bytes = readable_bytes(plain)
    spec_text = spec_as_used(study.spec)
    document = write(analysis, plain, _facts(study, issue, sha256(analysis_bytes), spec_text))
    rendition = render(document, progress=progress)
    made = {
        "analysis.json": analysis_bytes,
        "document.json": readable_bytes(document_to_plain(document)),
        "spec.yaml": study.spec_bytes,
        "spec-as-used.yaml": spec_text.encode("utf-8"),
        "plan.json": canonical_bytes(plan_of(study.spec)),
        "versions.json": _versions(issue),
        "register-extract.jsonl": issue.register_before,
        CHECKER: files(PACKAGE).joinpath("record_checker.py").read_bytes(),
        "README.txt": _readme(study, issue),
        **issue.before,
        **{received_name(path): content for path, content in study.received.items()},
        **record_tables(analysis, plain),
        **rendition_files(rendition),
    }
    return Made(made, analysis, plain, document, rendition.pages)


def rendition_files(rendition: Rendition) -> dict[str, bytes]:
    """Return the files that are set from a document, by their names in an edition."""
    return {
        "report.pdf": rendition.pdf,
        "report.html": rendition.html,
        **{f"tables/{key}.csv": content for key, content in rendition.tables.items()},
        **{f"figures/{key}.svg": content for key, content in rendition.figures.items()},
        **{f"extracts/{name}": content for name, content in rendition.extracts.items()},
    }


def plan_digest(study: Study) -> str:
    """Return the digest of the canonical form of the planned keys."""
    return digest_of(plan_of(study.spec))


def _facts(study: Study, issue: Issue, analysis_digest: str, spec_text: str) -> IssueFacts:
    return IssueFacts(
        edition=issue.name,
        status=issue.status,
        date=issue.moment.date,
        created=issue.moment.time,
        time_source=issue.moment.source,
        reason=issue.reason,
        replaces=issue.replaces,
        spec_text=spec_text,
        spec_digest=study.spec_digest,
        analysis_digest=analysis_digest,
        head_before=issue.head_before,
        program_digest=issue.program_digest,
        self_test=issue.self_test,
        ingredients=issue.ingredients,
        before=_before(study, issue),
    )


def _before(study: Study, issue: Issue) -> Before | None:
    if not issue.before:
        return None
    return Before(
        plain=json.loads(issue.before[ANALYSIS_BEFORE]),
        plan_changes=plan_changes(
            json.loads(issue.before[PLAN_BEFORE]), json.loads(canonical_bytes(plan_of(study.spec)))
        ),
    )


def _versions(issue: Issue) -> bytes:
    return readable_bytes(
        {
            "schema": VERSIONS_SCHEMA,
            "components": [
                {"what": item.what, "version": item.version, "role": item.role} for item in issue.ingredients
            ],
            "program_digest": issue.program_digest,
            "self_test": {"outcome": issue.self_test, "cases": issue.self_test_cases},
        }
    )


def _readme(study: Study, issue: Issue) -> bytes:
    data = "\n".join(f"  {received_name(path)}" for path in study.received)
    ranks = "\n".join(f"  ranks-{name}.csv" for name in study.spec.associations)
    more = (
        f"  {MORE_ROWS}                  cells beyond x and y: covariates, other associations, groups\n"
        if asks_for_more_rows(study.spec)
        else ""
    )
    text = f"""Record copy of {study.spec.study.number}, {issue.name}
{study.spec.study.title}

Everything here opens without the program that made it: PDF, HTML, CSV, JSON, YAML and plain text, all UTF-8.

The report
  report.pdf, report.html        the same document twice; the HTML needs no network
  document.json                  the document as data: each number with its address, exact value and printed text

The numbers
  analysis.json                  everything computed; every printed number points into it
  rows.csv                       the complete rows of each association, as received and as values
{more}{ranks}
                                 the same rows with midranks and rank differences
  results.csv                    one line an association
  tables/, figures/, extracts/   each table as CSV, each figure as SVG, summary and methods as text

What it was made from
  spec.yaml                      the spec as supplied
  spec-as-used.yaml              the same with every default written out
  plan.json                      the planned keys in canonical form (RFC 8785)
{data}
                                 the data as received

What it replaces (from the second edition on)
  before/                        analysis.json and plan.json of the edition before, as its own record holds them

How it was made, and how to check it
  versions.json                  program, libraries, and the shipped cases recomputed before issue
  register-extract.jsonl         the register's lines before this edition
  SHA256SUMS                     in this folder: sha256sum -c SHA256SUMS
  check.py                       in this folder: python3 check.py (needs Python alone)
"""
    return text.encode("utf-8")

"""What a section is, and what every section is written from."""

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from rankdocket.analysis.results import Analysis
from rankdocket.canonical import Plain
from rankdocket.document.model import CaveatBlock, Section
from rankdocket.document.numbers import Numbers
from rankdocket.study.plan_changes import PlanChange
from rankdocket.vocabulary import Status


@dataclass(frozen=True, slots=True)
class Ingredient:
    """One thing that the report was made with: a library, a system library, the program itself."""

    what: str
    version: str
    role: str


@dataclass(frozen=True, slots=True)
class Before:
    """The edition that this one replaces: its analysis.json, and the planned keys that were others."""

    plain: Mapping[str, Plain]
    plan_changes: tuple[PlanChange, ...] = ()


@dataclass(frozen=True, slots=True)
class IssueFacts:
    """What the workflow knows about this issue and the engine does not.

    Attributes
    ----------
    edition
        "edition 2" or "draft 1A".
    date, created
        Date of issue and the full moment, ISO 8601; given from outside, no clock is read here.
    time_source
        How that moment was got, in words.
    reason
        Why this edition was issued.
    replaces
        "edition 1 of 2026-04-02", or ``None`` for a first edition.
    spec_text
        The spec as used, every default written out.
    spec_digest, analysis_digest
        SHA-256 of the spec’s bytes as filed and of analysis.json.
    head_before
        Digest of the register’s last line before this edition’s.
    program_digest
        SHA-256 over the program’s own files.
    self_test
        Sentence on the cases recomputed before this edition was sealed.
    before
        The edition that is replaced, where there is one.
    """

    edition: str
    status: Status
    date: str
    created: str
    time_source: str
    reason: str
    replaces: str | None
    spec_text: str
    spec_digest: str
    analysis_digest: str
    head_before: str
    program_digest: str
    self_test: str
    ingredients: tuple[Ingredient, ...]
    before: Before | None = None


@dataclass(frozen=True, slots=True)
class NumberedCaveat:
    """A caveat with its number in this report and the associations it names, none for one about the whole study."""

    block: CaveatBlock
    about: tuple[str, ...]
    weight: int


@dataclass(frozen=True, slots=True)
class Story:
    """Everything a section may draw on."""

    analysis: Analysis
    plain: Plain
    numbers: Numbers
    facts: IssueFacts
    caveats: tuple[NumberedCaveat, ...] = ()

    def caveats_about(self, name: str) -> tuple[NumberedCaveat, ...]:
        """Return the caveats of one association, in number order."""
        return tuple(caveat for caveat in self.caveats if name in caveat.about)


@dataclass(frozen=True, slots=True)
class SectionRule:
    """One section of the report.

    Attributes
    ----------
    key
        Stable identifier and link target.
    write
        The section itself.
    """

    key: str
    write: Callable[[Story], Section]

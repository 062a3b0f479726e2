"""Reports in memory for the tests of what is said: analysed, put into plain data and into words."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache

from analysis.invented import FALLING, MIXED, RISING, Invented, association, demonstration
from rankdocket.analysis.plain import analysis_to_plain
from rankdocket.analysis.results import Analysis
from rankdocket.canonical import Plain, readable_bytes, sha256
from rankdocket.document.model import Block, Document, Paragraph, Section, TableBlock
from rankdocket.document.prose import all_prose, text_of
from rankdocket.study.plan_changes import PlanChange
from rankdocket.study.writer import spec_as_used
from rankdocket.writing.caveats import CAVEATS
from rankdocket.writing.section import Before, Ingredient, IssueFacts, Story
from rankdocket.writing.write import tell, write


@dataclass(frozen=True, slots=True)
class Told:
    """A study told: the analysis, its plain form, what every section drew on, and the document."""

    analysis: Analysis
    plain: Mapping[str, Plain]
    story: Story
    document: Document

    def text(self) -> str:
        """Return everything printed, one run of text a line."""
        return "\n".join(text_of(content) for content in all_prose(self.document))

    def caveats(self) -> dict[str, list[str]]:
        """Return rule key → words of the caveats found by it."""
        return {rule.key: [text_of(found.prose) for found in rule.find(self.story)] for rule in CAVEATS}

    def section(self, key: str) -> Section:
        """Return a section, wherever it stands."""
        return next(section for section in sections_of(self.document) if section.key == key)

    def methods(self) -> list[str]:
        """Return the words of each paragraph below the heading of the methods."""
        parts = self.section("methods").sections
        return [text_of(block.prose) for part in parts for block in part.blocks if isinstance(block, Paragraph)]

    def block(self, key: str) -> Block:
        """Return the block with a key."""
        blocks = (block for section in sections_of(self.document) for block in section.blocks)
        return next(block for block in blocks if getattr(block, "key", None) == key)

    def table(self, key: str) -> TableBlock:
        """Return the table with a key."""
        found = self.block(key)
        assert isinstance(found, TableBlock)
        return found


@dataclass(frozen=True, slots=True, kw_only=True)
class Occasion:
    """Why a report is told: the reason, what it replaces, whether it is a draft."""

    reason: str = "first issue"
    replaces: str | None = None
    before: Before | None = None
    is_draft: bool = False


FIRST = Occasion()


def facts(*, analysis: Analysis, plain: Mapping[str, Plain], occasion: Occasion = FIRST) -> IssueFacts:
    """Return what the workflow would know about an issue."""
    return IssueFacts(
        edition="draft 1A" if occasion.is_draft else "edition 1",
        status="draft" if occasion.is_draft else "issued",
        date="2026-04-02",
        created="2026-04-02T10:00:00+00:00",
        time_source="the clock of the machine",
        reason=occasion.reason,
        replaces=occasion.replaces,
        spec_text=spec_as_used(analysis.spec),
        spec_digest="1" * 64,
        analysis_digest=sha256(readable_bytes(plain)),
        head_before="0" * 64,
        program_digest="2" * 64,
        self_test="3 of 3 cases agreed",
        ingredients=(Ingredient("rankdocket", "0.1.0", "the program itself"),),
        before=occasion.before,
    )


def told(analysis: Analysis, occasion: Occasion = FIRST) -> Told:
    """Put an analysis into words."""
    plain = analysis_to_plain(analysis)
    issue = facts(analysis=analysis, plain=plain, occasion=occasion)
    return Told(analysis, plain, tell(analysis, plain, issue), write(analysis, plain, issue))


PLAN_CHANGE = PlanChange("inference.alpha", '"0.05"', '"0.01"')


def replacing(
    old: Analysis, *, reason: str = "a corrected file", plan_changed: bool = False, is_draft: bool = False
) -> Occasion:
    """Return the occasion of an edition that replaces one in which ``old`` was found."""
    return Occasion(
        reason=reason,
        replaces="edition 1 of 2026-01-05",
        before=Before(analysis_to_plain(old), (PLAN_CHANGE,) if plan_changed else ()),
        is_draft=is_draft,
    )


@cache
def demonstration_report(name: str) -> Told:
    """Return the report on a demonstration study."""
    return told(demonstration(name))


EVERY_FINDING = Invented(
    columns={
        "u": RISING + " 11 12",
        "rising": RISING + " 11 12",
        "falling": "12 11 " + FALLING,
        "mixed": MIXED + " 12 11",
        "few": "1 2 3 4 - - - - - - - -",
        "one": " ".join(["5"] * 12),
    },
    associations={
        "A1": association("u", "rising"),
        "A2": association("u", "falling", more="smallest_of_interest: 0.30"),
        "A3": association("u", "mixed", role="secondary", sign="either", more="smallest_of_interest: 0.30"),
        "A4": association("u", "few", role="secondary"),
        "A5": association("u", "one"),
        "A6": association("falling", "mixed", role="exploratory", more="coefficient: Kendall tau-b"),
    },
    inference="alpha: 0.05, several_tests: {among: primary and secondary}",
    requirements="fewest_complete_rows: 5, most_missing: 1, most_tied: 1",
)
"""One association a finding word, and one outside the family."""


@cache
def study_of_every_finding() -> Told:
    """Return the report on a study in which every finding occurs."""
    return told(EVERY_FINDING.analysed())


def sections_of(document: Document) -> Iterator[Section]:
    """Yield every section of the document, sub-sections after the section they belong to."""
    waiting = [document.summary, *document.sections]
    while waiting:
        section = waiting.pop(0)
        yield section
        waiting = [*section.sections, *waiting]

"""Section 5: each requirement with its limit, what was found and what follows, then every caveat by number."""

from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.results import CheckOutcome
from rankdocket.document.model import Block, Column, Prose, Section, TableBlock
from rankdocket.document.prose import only
from rankdocket.writing.caveats.requirements import measure
from rankdocket.writing.phrases import EN_DASH_CELL, outcome_words, pointer
from rankdocket.writing.section import SectionRule, Story

_CONSEQUENCE = {"nothing": "none", "test": "test withheld", "all": "estimate and test withheld"}


def write(story: Story) -> Section:
    """Return the table of requirements and the numbered caveats."""
    blocks: list[Block] = [requirements_table(story, joint=True)]
    blocks.extend(caveat.block for caveat in story.caveats)
    return Section("requirements", "5", only("Requirements and caveats"), tuple(blocks))


def requirements_table(story: Story, *, joint: bool) -> TableBlock:
    """Return one row a check and association; without ``joint``, only checks that may be shown before results."""
    shown = {check.key for check in CHECKS if joint or not check.joint}
    labels = {check.key: check.label for check in CHECKS}
    return TableBlock(
        key="requirements-table",
        number="4",
        caption=only("Requirements of the method, association by association"),
        columns=(
            Column(only("Association"), "association", share=2),
            Column(only("Requirement"), "requirement", share=4),
            Column(only("Limit"), "limit", "right", share=2),
            Column(only("Found"), "found", "right", share=2),
            Column(only("Outcome"), "outcome", share=3),
            Column(only("In words"), "reason", share=7),
            Column(only("Withheld"), "withheld", share=3),
        ),
        rows=tuple(
            _row(story, name, labels[outcome.key], outcome)
            for name, result in story.analysis.results.items()
            for outcome in result.checks
            if outcome.key in shown
        ),
    )


def _row(story: Story, name: str, label: str, outcome: CheckOutcome) -> tuple[Prose, ...]:
    limit, found = measure(story, name, outcome, "limit"), measure(story, name, outcome, "found")
    return (
        only(pointer(name)),
        only(label),
        EN_DASH_CELL if limit is None else only(limit),
        EN_DASH_CELL if found is None else only(found),
        only(outcome_words(outcome)),
        only(outcome.reason),
        only(_CONSEQUENCE[outcome.withholds]),
    )


SECTION = SectionRule("requirements", write)

"""Appendix D: what made this report, digests, and how to recompute it."""

from rankdocket.document.model import Block, Column, Emphasis, FieldList, Items, Prose, Section, Supplied, TableBlock
from rankdocket.document.prose import only, prose
from rankdocket.writing.section import SectionRule, Story


def write(story: Story) -> Section:
    """Return the record page."""
    facts = story.facts
    rows: list[tuple[str, Prose]] = [
        ("Time of issue", prose("{time} ({source})", time=Supplied(facts.created), source=Supplied(facts.time_source))),
        ("Spec, SHA-256", only(Emphasis(facts.spec_digest, "code"))),
        ("analysis.json, SHA-256", only(Emphasis(facts.analysis_digest, "code"))),
        (
            "Register before this edition",
            only(Emphasis(facts.head_before, "code")) if facts.head_before.strip("0") else only("no line stood in it"),
        ),
        ("Program files, SHA-256", only(Emphasis(facts.program_digest, "code"))),
        ("Self-test", only(Supplied(facts.self_test))),
    ]
    rows += [
        (f"{table.source.path}, SHA-256", only(Emphasis(table.source.digest, "code")))
        for table in story.analysis.data.tables.values()
    ]
    rows += [
        (f"{table.source.path}, values", only(Emphasis(table.source.values_digest, "code")))
        for table in story.analysis.data.tables.values()
    ]
    if story.analysis.spec.inference.p_value.seed is not None:
        rows.append((_seed_of(story), only(story.numbers.label("inference/seed"))))
    blocks: tuple[Block, ...] = (
        FieldList(tuple(rows), key="digests"),
        TableBlock(
            key="versions",
            number="D.1",
            caption=only("What this report was made with"),
            columns=(
                Column(only("What"), "what", share=3),
                Column(only("Version"), "version", share=3),
                Column(only("Role in this report"), "role", share=6),
            ),
            rows=tuple(
                (only(Supplied(item.what)), only(Supplied(item.version)), only(item.role)) for item in facts.ingredients
            ),
        ),
        Items(_how_to(), numbered=True),
    )
    return Section("record", "D", only("Record"), blocks, opens="page")


def _how_to() -> tuple[Prose, ...]:
    return (
        prose(
            "Files unchanged since issue: {command} in the folder of the edition.",
            command=Emphasis("sha256sum -c SHA256SUMS", "code"),
        ),
        prose(
            "Numbers, without this program: {command} in the same folder recomputes ranks, coefficients and small exact counts.",
            command=Emphasis("python3 check.py", "code"),
        ),
        prose(
            "Everything, with this program: {command} in the folder of the study.",
            command=Emphasis("rankdocket verify study.yaml", "code"),
        ),
        only(
            "The register’s chain of digests shows an altered, removed or reordered line. It does not show that its last lines "
            "were cut off, nor a register rewritten as a whole: deposit the head digest with somebody else."
        ),
    )


def _seed_of(story: Story) -> str:
    drawn = story.analysis.spec.inference.interval.by == "BCa bootstrap"
    return "Seed of drawn orderings and resamples" if drawn else "Seed of drawn orderings"


SECTION = SectionRule("record", write)

"""Page 1: what this document is, which edition, who stands for it, whom it went to."""

from rankdocket.document.model import Block, FieldList, Link, Paragraph, Prose, SignatureBlock, SignatureLine, Supplied
from rankdocket.document.prose import listed, only, prose
from rankdocket.study.spec import Person
from rankdocket.writing.section import IssueFacts, Story


def control_page(story: Story) -> tuple[Block, ...]:
    """Return the blocks of the control page."""
    spec, facts = story.analysis.spec, story.facts
    rows: list[tuple[str, Prose]] = [
        ("Study number", only(Supplied(spec.study.number))),
        ("Client", only(Supplied(spec.study.client))),
        ("Edition", only(Supplied(facts.edition))),
        ("Status", only(facts.status)),
        ("Date of issue", only(Supplied(facts.date))),
        ("Reason for issue", only(Supplied(facts.reason))),
        (
            "Replaces",
            _replaced(facts),
        ),
        ("Written for", listed(tuple(only(reader) for reader in spec.report.readers))),
    ]
    if spec.report.marking:
        rows.append(("Marking", only(Supplied(spec.report.marking))))
    rows.append(("Distribution", _distribution(spec.report.distribution)))
    return (
        FieldList(tuple(rows), key="control"),
        SignatureBlock(_signatures(story)),
        Paragraph(
            prose(
                "The results relate only to the rows and variables described in section {section}. "
                "A printed copy cannot be recalled: the register of the study says which edition is current.",
                section=Link("data", "2"),
            ),
            "note",
        ),
    )


def _replaced(facts: IssueFacts) -> Prose:
    if facts.replaces is None:
        return only("nothing: no earlier edition was issued")
    if facts.status == "draft":
        return prose("nothing; the edition it prepares would replace {old}", old=Supplied(facts.replaces))
    return only(Supplied(facts.replaces))


def _distribution(names: tuple[str, ...]) -> Prose:
    if not names:
        return only("no distribution list in the plan")
    return listed(tuple(only(Supplied(name)) for name in names))


def _signatures(story: Story) -> tuple[SignatureLine, ...]:
    study = story.analysis.spec.study
    people: dict[str, Person | None] = {
        "prepared": study.prepared_by,
        "checked": study.checked_by,
        "released": study.released_by,
    }
    lines = []
    for act in story.analysis.spec.report.signatures:
        person = people[act]
        lines.append(
            SignatureLine(
                act,
                person.name if person else "",
                (person.role or "") if person else "",
                "not signed" if person else f"not {act}",
            )
        )
    return tuple(lines)

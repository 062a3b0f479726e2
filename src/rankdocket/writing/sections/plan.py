"""Appendix C: the spec as used, every default written out."""

from rankdocket.document.model import Paragraph, Section, Verbatim
from rankdocket.document.prose import only
from rankdocket.writing.section import SectionRule, Story


def write(story: Story) -> Section:
    """Return the spec as it was run."""
    return Section(
        "plan",
        "C",
        only("The spec as used"),
        (
            Paragraph(
                only(
                    "Every default is written out. The file as supplied lies beside it in the record copy. No amendment was made: "
                    "no plan was locked."
                )
            ),
            Verbatim(story.facts.spec_text),
        ),
        opens="page",
    )


SECTION = SectionRule("plan", write)

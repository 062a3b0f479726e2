"""Section 7: what changed since the edition before; the heading stands in every report."""

from rankdocket.document.model import Paragraph, Section, Supplied
from rankdocket.document.prose import only, prose
from rankdocket.writing.section import SectionRule, Story


def write(story: Story) -> Section:
    """Return the changes section."""
    facts = story.facts
    if facts.replaces is None:
        words = only("First edition: nothing was issued before it.")
    else:
        words = prose(
            "This edition replaces {old}. Reason given: {reason} The numbers of the edition before stand in its own record "
            "copy, which is kept.",
            old=Supplied(facts.replaces),
            reason=Supplied(facts.reason),
        )
    return Section("changes", "7", only("Changes since the last edition"), (Paragraph(words),))


SECTION = SectionRule("changes", write)

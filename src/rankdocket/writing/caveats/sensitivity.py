"""The caveat where another method, or other rows, would have changed a finding."""

from rankdocket.document.prose import listed, prose
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.phrases import pointer
from rankdocket.writing.section import Story
from rankdocket.writing.sensitivity import changing_in_words, intervals_in_words, table_link, table_of


def _would_change(story: Story) -> tuple[FoundCaveat, ...]:
    found = []
    for name in story.analysis.results:
        table = table_of(story, name)
        if table is None or not table.changing:
            continue
        parts, intervals = changing_in_words(story, name), intervals_in_words(story, name)
        if parts:
            found.append(
                FoundCaveat(
                    (name,),
                    prose(
                        "{name}: the finding would be another one {parts} ({table}).",
                        name=pointer(name),
                        parts=listed(parts),
                        table=table_link(story, name),
                    ),
                )
            )
        if intervals is not None:
            found.append(
                FoundCaveat(
                    (name,),
                    prose(
                        "{name}: zero lies on the other side of the limits by other rules for an interval than by the one "
                        "printed ({rules}; {table}).",
                        name=pointer(name),
                        rules=intervals,
                        table=table_link(story, name),
                    ),
                )
            )
    return tuple(found)


WOULD_CHANGE = CaveatRule("would_change", 66, _would_change)

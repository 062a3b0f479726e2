"""The caveat about intervals that cover less often than their level says."""

from typing import Final

from rankdocket.document.prose import listed, prose
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.coverage import coverage_share, has_low_coverage
from rankdocket.writing.phrases import level, pointer
from rankdocket.writing.section import Story


def _low(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(name for name in story.analysis.results if has_low_coverage(story, name))
    if not names:
        return ()
    parts = tuple(prose("{name} {share}", name=pointer(name), share=coverage_share(story, name)) for name in names)
    return (
        FoundCaveat(
            names,
            prose(
                "In simulated samples like these the interval held the true coefficient less often than its level of "
                "{level} says: {parts}. Read it as narrower than it should be.",
                level=level(story),
                parts=listed(parts),
            ),
        ),
    )


LOW_COVERAGE: Final = CaveatRule("low_coverage", 56, _low)

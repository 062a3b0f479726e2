"""What the methods text says about more than two variables: the rules that ran, with their slots."""

from collections.abc import Mapping
from typing import Final

from rankdocket.analysis.more_results import VARIANCE_WORDS, Absent, Difference, DifferenceMethod
from rankdocket.document.model import Prose
from rankdocket.document.prose import prose
from rankdocket.references import Description
from rankdocket.stats.differences import TWO_GROUPS
from rankdocket.stats.partial import PARTIAL_RHO
from rankdocket.stats.same_row_differences import NONE_SHARED, ONE_SHARED
from rankdocket.writing.citations import cite
from rankdocket.writing.section import Story

_DIFFERENCES: Final[Mapping[DifferenceMethod, Description]] = {
    "one variable shared": ONE_SHARED,
    "no variable shared": NONE_SHARED,
    "two groups": TWO_GROUPS,
}


def more_variables_descriptions(story: Story) -> tuple[tuple[Description, Mapping[str, Prose]], ...]:
    """Return the rules about more than two variables that gave something, each with the words of its slots."""
    more = story.analysis.more.values()
    found: list[tuple[Description, Mapping[str, Prose]]] = []
    if any(each.partial is not None and not isinstance(each.partial.answer, Absent) for each in more):
        found.append((PARTIAL_RHO, {}))
    differences = [each.comparison.difference for each in more if each.comparison is not None]
    differences += [
        each.subgroups.comparison.difference
        for each in more
        if each.subgroups is not None and each.subgroups.comparison is not None
    ]
    ran = {difference.method for difference in differences if isinstance(difference, Difference)}
    words = {"k": prose("{words} {cite}", words=VARIANCE_WORDS, cite=cite("bonett2000"))}
    return (*found, *((describe, words) for method, describe in _DIFFERENCES.items() if method in ran))

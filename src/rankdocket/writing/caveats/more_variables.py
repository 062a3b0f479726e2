"""Caveats about more than two variables: what a partial coefficient does not test, what groups do not show."""

from rankdocket.analysis.more_results import Absent
from rankdocket.document.prose import prose
from rankdocket.stats.coefficient import Coefficient
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import pointers
from rankdocket.writing.section import Story


def _given(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(
        name
        for name, more in story.analysis.more.items()
        if more.partial is not None and not isinstance(more.partial.answer, Absent)
    )
    if not names:
        return ()
    return (
        FoundCaveat(
            names,
            prose(
                "{names}: a partial rank correlation takes a straight line in the ranks of its covariates away and nothing "
                "else {cite}. It may stay away from zero although nothing is left once they are fully taken into account, "
                "and may be near zero although something is; what was not measured is not held fixed.",
                names=pointers(names),
                cite=cite("korn1984"),
            ),
        ),
    )


def _groups(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(
        name
        for name, more in story.analysis.more.items()
        if more.subgroups is not None
        and any(isinstance(group.coefficient, Coefficient) for group in more.subgroups.groups)
    )
    if not names:
        return ()
    return (
        FoundCaveat(
            names,
            prose(
                "{names}: groups hold fewer rows each than the association, and no finding is stated for one of them. "
                "“Shown here, not shown there” is no difference between groups, and the more groups are looked at, the "
                "more easily one of them stands out by chance.",
                names=pointers(names),
            ),
        ),
    )


GIVEN_COVARIATES = CaveatRule("given_covariates", 33, _given)
GROUPS = CaveatRule("groups", 34, _groups)

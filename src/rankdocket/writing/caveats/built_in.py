"""What it means that the plan declares a common origin of both variables, and how far that alone can reach."""

from rankdocket.analysis.checks.built_in import KEY
from rankdocket.analysis.results import CheckOutcome
from rankdocket.document.model import Prose, Supplied
from rankdocket.document.prose import listed, only, prose
from rankdocket.study.derivation import shared_origins
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.caveats.requirements import waiver_words, what_is_given
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import label, outcome_words, pointer, pointers
from rankdocket.writing.section import Story


def _find(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat((name,), _words(story, name, outcome))
        for name, result in story.analysis.results.items()
        for outcome in result.checks
        if outcome.key == KEY and outcome.state == "not met"
    )


def _words(story: Story, name: str, outcome: CheckOutcome) -> Prose:
    return prose(
        "{name}: the requirement “separate origins” is {state}: {reason} ({shared}), so that an association is built in, and "
        "zero is not what the rows would show if nothing else tied the two.{waived} {after}",
        name=pointer(name),
        state=outcome_words(outcome),
        reason=outcome.reason,
        shared=_shared_names(story, name),
        waived=waiver_words(outcome),
        after=what_is_given(story.analysis.results[name], outcome),
    )


def _shared_names(story: Story, name: str) -> Prose:
    """Return what both have in common: labels of variables, names of columns."""
    spec = story.analysis.spec
    association = spec.associations[name]
    names = shared_origins(spec, association.x, association.y)
    return listed(tuple(only(label(spec.variables[one]) if one in spec.variables else Supplied(one)) for one in names))


def _find_meaning(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(name for found in _find(story) for name in found.about)
    if not names:
        return ()
    numbers, at = story.numbers, "built_in_examples"
    return (
        FoundCaveat(
            names,
            prose(
                "{names}: variables of one origin move together, or against one another, by the way they were worked out "
                "{cite}. A common denominator and a part held against its whole push a coefficient up; a change held "
                "against its own baseline pushes it down. How far, by example: for quantities without any association "
                "among themselves, simulated by the authors of this program with {rows} rows, the mean rho was {ratio} for "
                "two ratios with a common denominator (standard deviation {spread} of the mean in all quantities) and "
                "{change} for a change against its baseline of equal spread.",
                names=pointers(names),
                cite=cite("pearson1897", "oldham1962"),
                rows=numbers.whole(f"{at}/rows"),
                ratio=numbers.coefficient(f"{at}/shared_denominator"),
                spread=numbers.percent(f"{at}/spread"),
                change=numbers.coefficient(f"{at}/change_against_baseline"),
            ),
        ),
    )


BUILT_IN = CaveatRule("built_in", 85, _find)
BUILT_IN_SIZE = CaveatRule("built_in_size", 58, _find_meaning)

"""Caveats about tests of size: what they rest on, and where test and interval of equivalence part."""

from rankdocket.analysis.size_results import SizeAnalysis
from rankdocket.document.model import Prose
from rankdocket.document.prose import only, prose
from rankdocket.stats.equivalence import is_within
from rankdocket.stats.interval import Interval
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import address, p_equals, pointer, pointers
from rankdocket.writing.section import Story
from rankdocket.writing.size import by_of, size_of_interest, tests_of


def _rests_on(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(name for name in _asked_about_size(story) if by_of(story, name) != "rank test")
    if not names:
        return ()
    words = (
        " The finding of {names} rests on such a test."
        if len(names) == 1
        else " The findings of {names} rest on such tests."
    )
    finding = prose(words, names=pointers(names))
    return (FoundCaveat(names, _basis(finding)),)


def _stands_beside(story: Story) -> tuple[FoundCaveat, ...]:
    names = _asked_about_size(story)
    if not names or any(by_of(story, name) != "rank test" for name in names):
        return ()
    return (FoundCaveat((), _basis(only(" No finding rests on them alone."))),)


def _asked_about_size(story: Story) -> tuple[str, ...]:
    return tuple(name for name, result in story.analysis.results.items() if isinstance(result.size, SizeAnalysis))


def _basis(finding: Prose) -> Prose:
    return prose(
        "Tests of a null value and of size are approximate: they take a variance that holds near normal-type dependence "
        "{cite} and count no orderings.{finding} A verdict about size is taken at alpha shared equally among the members of "
        "an adjusted family, which errs on the safe side.",
        cite=cite("bonett2000"),
        finding=finding,
    )


def _parted(story: Story) -> tuple[FoundCaveat, ...]:
    found = []
    for name in story.analysis.results:
        tests = tests_of(story, name)
        if tests is None or not isinstance(tests.interval, Interval):
            continue
        is_shown = tests.p_within <= tests.level
        if is_shown == is_within(tests.interval.low, tests.interval.high, float(tests.delta)):
            continue
        at, numbers = address(name, "size"), story.numbers
        decimals = numbers.decimals_for(address(name, "estimate", "value"))
        found.append(
            FoundCaveat(
                (name,),
                prose(
                    "{name}: a size within ±{size} is {shown} by two one-sided tests ({p}), and the {level} interval, {low} to "
                    "{high}, {lies} within it. The two are built differently; the test decides.",
                    name=pointer(name),
                    size=size_of_interest(story, name),
                    shown="shown" if is_shown else "not shown",
                    p=p_equals(story, f"{at}/p_within"),
                    level=numbers.percent(f"{at}/interval_of_equivalence/level"),
                    low=numbers.coefficient(f"{at}/interval_of_equivalence/low", decimals),
                    high=numbers.coefficient(f"{at}/interval_of_equivalence/high", decimals),
                    lies="does not lie" if is_shown else "lies",
                ),
            )
        )
    return tuple(found)


SIZE_FINDING = CaveatRule("size_finding", 65, _rests_on)
SIZE_BASIS = CaveatRule("size_basis", 31, _stands_beside)
EQUIVALENCE_AND_INTERVAL = CaveatRule("equivalence_and_interval", 68, _parted)

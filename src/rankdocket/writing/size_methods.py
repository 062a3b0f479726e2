"""The methods text of tests of size and of what the rows could show."""

from rankdocket.analysis.could_show import COULD_SHOW, WIDTH_BY
from rankdocket.analysis.size_results import SizeAnalysis
from rankdocket.document.model import Prose
from rankdocket.document.prose import joined, listed, only, prose
from rankdocket.stats.equivalence import EQUIVALENCE, MINIMUM_EFFECT, NULL_VALUE
from rankdocket.writing.could_show import has_answers, widths_by
from rankdocket.writing.described import described
from rankdocket.writing.phrases import address, pointer, pointers
from rankdocket.writing.section import Story
from rankdocket.writing.size import by_of, tests_of


def size_methods(story: Story) -> Prose:
    """Return how values and sizes were tested and what rested on it; empty where nothing was tested."""
    found = {
        name: result.size for name, result in story.analysis.results.items() if isinstance(result.size, SizeAnalysis)
    }
    valued = tuple(name for name, size in found.items() if size.value is not None)
    sized = tuple(name for name in found if tests_of(story, name) is not None)
    parts: list[Prose] = []
    if valued:
        parts.append(described(NULL_VALUE, factor=_factors(story, valued, "value/factor")))
    if sized:
        factors = _factors(story, sized, "factor")
        parts += [described(MINIMUM_EFFECT, factor=factors), described(EQUIVALENCE, factor=factors)]
        parts.append(
            only(
                "The verdict about size is the first that applies of: above the size, within it, different from zero but "
                "not shown above it, undecided. It is taken at alpha, divided by the number of members of an adjusted "
                "family; the interval of equivalence leaves out twice that level, rounded down, by the rule of the "
                "association’s own interval."
            )
        )
    decided = tuple(name for name in found if by_of(story, name) != "rank test")
    if decided:
        parts.append(
            prose(
                "For {names} the p-value of the claim entered the family instead of that of independence, which is "
                "printed beside it and decided nothing.",
                names=pointers(decided),
            )
        )
    return joined(tuple(parts))


def could_show_methods(story: Story) -> Prose:
    """Return how the table of what the rows could show was made; empty where it holds no answer."""
    if not has_answers(story):
        return only("")
    found = widths_by(story)
    widths = [
        described(WIDTH_BY[by], of=prose(" for {names}", names=pointers(found[by])) if len(found) > 1 else "")
        for by in WIDTH_BY
        if by in found
    ]
    return joined((described(COULD_SHOW, power=story.numbers.level("could_show/planned_power")), *widths))


def _factors(story: Story, names: tuple[str, ...], key: str) -> Prose:
    """Return "1.045", or "1.045 (A1, A2) and 1.02 (A3)"."""
    owners: dict[str, list[str]] = {}
    for name in names:
        owners.setdefault(story.numbers.as_filed(address(name, "size", key)).exact, []).append(name)
    numbers = [story.numbers.as_filed(address(own[0], "size", key)) for own in owners.values()]
    if len(numbers) == 1:
        return only(numbers[0])
    return listed(
        tuple(
            prose(
                "{factor} ({names})",
                factor=number,
                names=joined(tuple(only(pointer(name)) for name in own), ", "),
            )
            for number, own in zip(numbers, owners.values(), strict=True)
        )
    )

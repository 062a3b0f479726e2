"""What a report says about the simulated coverage of its intervals."""

from typing import Final

from rankdocket.analysis.coverage import coverage_of, judged
from rankdocket.document.model import Prose
from rankdocket.document.prose import only, prose
from rankdocket.stats.coverage.lookup import NotSimulated, SimulatedCoverage
from rankdocket.writing.phrases import address, coefficient_symbol
from rankdocket.writing.section import Story

UNTIED: Final = "no ties or small tie groups"

COVERAGE_SENTENCE: Final = (
    "Beside an interval stands its simulated coverage: the share of simulated samples, from a population whose coefficient "
    "is known, in which an interval by the same rule and at the same level held that coefficient. Its "
    "standard error near ninety-five percent is about three tenths of a percentage point where thousands of samples were "
    "drawn, and about one point where hundreds were, as for the bootstrap; their number stands beside it. It is "
    "taken from a table that comes with the program and can be made again, at the simulated number of rows nearest to that "
    "of the study, the nearest pattern of ties and the nearest size of the coefficient; the lowest coverage of all "
    "populations simulated at that number of rows stands beside it. The population of the study may be like none of them."
)


def coverage_rows(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    """Return the line of an association’s number list; none where it has no interval or nothing is filed."""
    found = coverage_of(story.analysis.results[name])
    if found is None:
        return ()
    if isinstance(found, NotSimulated):
        return (("Simulated coverage", only(found.reason)),)
    numbers = story.numbers
    spec = story.analysis.results[name].screened.spec
    value = prose(
        "{share} of {samples} samples at n\u00a0=\u00a0{n}, {symbol}\u00a0{value}, {where}{clause}; lowest at that n: {lowest} "
        "({family})",
        share=coverage_share(story, name),
        samples=numbers.whole(address(name, "interval", "coverage", "samples")),
        n=numbers.whole(address(name, "interval", "coverage", "n")),
        symbol=coefficient_symbol(spec),
        value=numbers.coefficient(address(name, "interval", "coverage", "value")),
        where=conditions(found),
        clause=" (wider than needed here)" if judged(found) == "wide" else "",
        lowest=numbers.share(address(name, "interval", "coverage", "lowest", "share")),
        family=found.lowest.family.words,
    )
    return (("Simulated coverage", value),)


def coverage_share(story: Story, name: str) -> Prose:
    """Return the coverage at the nearest conditions as a percentage."""
    return only(story.numbers.share(address(name, "interval", "coverage", "share")))


def conditions(found: SimulatedCoverage) -> str:
    """Return the pattern of ties and the kind of dependence; families with ties name their pattern themselves."""
    family = found.nearest.family
    return f"{UNTIED}, {family.words}" if family.pattern == UNTIED else family.words


def has_low_coverage(story: Story, name: str) -> bool:
    """Return whether the simulated coverage of the association’s interval is a caveat."""
    found = coverage_of(story.analysis.results[name])
    return isinstance(found, SimulatedCoverage) and judged(found) == "too low"

"""What a report says of intervals beside their limits: for what they hold, by which rule, and what the rule did."""

from typing import Final

from rankdocket.document.model import Prose, Supplied
from rankdocket.document.prose import joined, only, prose
from rankdocket.stats.interval import Interval, NoInterval, Restraint
from rankdocket.writing.phrases import address, interval_holds, interval_range, level
from rankdocket.writing.section import Story

RESTRAINT_WORDS: Final[dict[Restraint, str]] = {
    "guard": "a limit drawn back to the guard",
    "floor": "as narrow as the rule allows",
    "ceiling": "as wide as the rule allows",
    "fallback": "with a variance that stands in for its own",
}
"""What a rule did, as it stands behind its name; the cap has a row of its own."""


def interval_head(story: Story) -> Prose:
    """Return the head of a column of intervals: for what they hold; where p-values alone are adjusted, that too."""
    inference = story.analysis.spec.inference
    template = "{level} interval" if inference.sidedness == "two-sided" else "{level} bound, one-sided"
    if inference.interval.adjusted != "none":
        template += f", {inference.interval.adjusted}"
    elif inference.several_tests.adjust != "none":
        template += ", unadjusted"
    return prose(template, level=level(story))


def interval_cell(story: Story, name: str) -> Prose:
    """Return the limits for a table, with "alone" where the head speaks of adjusted intervals and this is none."""
    limits = interval_range(story, name)
    return prose("{limits}, alone", limits=limits) if interval_holds(story, name) == "alone" else limits


def intervals_hold(story: Story) -> Prose:
    """Return for what the intervals of the study hold, as one or two sentences."""
    holds = {interval_holds(story, name) for name in given(story)}
    alone = only("One marked “alone” holds for its association alone.")
    if "simultaneous" in holds:
        together = prose("The intervals of the family hold together at {level}.", level=level(story))
        return joined((together, alone)) if "alone" in holds else together
    if "after selection" in holds:
        selected = only("The intervals of the members shown are adjusted for their selection.")
        return joined((selected, alone)) if "alone" in holds else selected
    return only("Each interval holds for its association alone.")


def given(story: Story) -> tuple[str, ...]:
    """Return the associations with an interval."""
    return tuple(name for name, result in story.analysis.results.items() if isinstance(result.interval, Interval))


def interval_rows(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    """Return what the numbers of a spread say of the interval."""
    result, numbers = story.analysis.results[name], story.numbers
    rows: list[tuple[str, Prose]] = []
    if isinstance(result.interval, NoInterval):
        rows.append(("Interval", prose("none: {reason}", reason=result.interval.reason)))
    else:
        rows += _rule_rows(story, result.interval)
    alone = result.interval_alone
    if isinstance(alone, Interval):
        if isinstance(result.interval, Interval):
            rows.append(("Level of the interval", only(numbers.percent_down(address(name, "interval", "level")))))
        words = prose("{limits}, {level}", limits=interval_range(story, name, "interval_alone"), level=level(story))
        rows.append(("Interval for this association alone", words))
    resamples = resampled_at(story, name)
    if resamples is not None:
        rows.append(("Resamples", _resamples(story, name, resamples)))
    at = address(name, "attainable")
    if {numbers.coefficient(f"{at}/{end}").exact.rstrip("0").rstrip(".") for end in ("lowest", "highest")} != {
        "-1",
        "1",
    }:
        rows.append(
            (
                "Coefficients that the ties allow",
                prose(
                    "{lowest} to {highest}",
                    lowest=numbers.coefficient(f"{at}/lowest"),
                    highest=numbers.coefficient(f"{at}/highest"),
                ),
            )
        )
    return tuple(rows)


def resampled_at(story: Story, name: str) -> str | None:
    """Return the address of what became of an association’s resamples; ``None`` where no limit rests on any."""
    result = story.analysis.results[name]
    for which, interval in (("interval", result.interval), ("interval_alone", result.interval_alone)):
        if isinstance(interval, Interval) and interval.resampled is not None:
            return address(name, which, "resampled")
    return None


def _rule_rows(story: Story, interval: Interval) -> list[tuple[str, Prose]]:
    words: list[str] = [story.analysis.spec.inference.interval.by]
    words += [RESTRAINT_WORDS[restraint] for restraint in interval.restraints if restraint != "cap"]
    rows = [("Interval by", only(", ".join(words)))]
    if interval.cap_binds:
        rows.append(
            (
                "Cap",
                only(
                    "the estimate lay beyond the cap that the tie steps set; the interval is that of the cap, its outer "
                    "limit set to one in size"
                ),
            )
        )
    return rows


def _resamples(story: Story, name: str, at: str) -> Prose:
    return prose(
        "seed {seed}, stream {stream}; {drawn} drawn, {undefined} of them left out because a variable did not vary in them",
        seed=story.numbers.label("inference/seed"),
        stream=Supplied(" / ".join(story.analysis.results[name].interval_stream)),
        drawn=story.numbers.whole(f"{at}/drawn"),
        undefined=story.numbers.whole(f"{at}/undefined"),
    )

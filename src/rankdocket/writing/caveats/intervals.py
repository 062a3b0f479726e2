"""Caveats about intervals: what they rest on, where there is none, and what a rule had to do to its own arithmetic."""

from collections.abc import Iterator
from typing import Final

from rankdocket.analysis.checks.independence import KEY as INDEPENDENCE
from rankdocket.analysis.results import AssociationAnalysis, Estimate
from rankdocket.document.model import Prose
from rankdocket.document.prose import prose
from rankdocket.stats.attainable import attainable_range
from rankdocket.stats.influence import is_perfect
from rankdocket.stats.interval import Interval, Restraint
from rankdocket.vocabulary import IntervalBy
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.citations import cite
from rankdocket.writing.intervals import resampled_at
from rankdocket.writing.phrases import N, address, coefficient_symbol, interval_range, pointer, pointers
from rankdocket.writing.section import Story

ROUNDING: Final = 1e-12
"""A limit is rounded several times, the coefficient it may reach once."""

_NORMAL_TYPE: Final = (
    "The intervals rest on a variance that holds for normal-type dependence {cite}. Where the spread of one variable "
    "changes with the other, or nearly perfect order comes with a few gross errors, or values are coarsely tied, they "
    "cover the true value less often than their level says."
)
_OWN_ERROR: Final = (
    "The intervals rest on an error that the rows themselves give {cite}. For few distinct values near perfect order, and "
    "where the spread of one variable changes with the other, they cover the true value well less often than their level "
    "says."
)
_SIMULATED: Final = (
    "The intervals rest on the jackknife error of the rows themselves {cite}; that they hold their level approximately was found by simulation. Where the spread of one "
    "variable changes with the other and the coefficient is large in size, or where nearly perfect order comes with a "
    "few gross errors, they cover the true value less often than their level says."
)
_OTHER_COEFFICIENT: Final = (
    "The intervals rest on the variance of the product-moment correlation of normal values {cite}. For a rank "
    "coefficient they are too narrow, and cover the true value less often than their level says."
)
_RESTS_ON: Final[dict[IntervalBy, tuple[str, str]]] = {
    "guarded jackknife": (
        _SIMULATED,
        "tukey1958",
    ),
    "Bonett-Wright": (_NORMAL_TYPE, "bonett2000"),
    "influence values": (_OWN_ERROR, "croux2010"),
    "BCa bootstrap": (_OWN_ERROR, "efron1987"),
    "Fieller-Hartley-Pearson": (_NORMAL_TYPE, "fieller1957"),
    "Fisher z": (
        _OTHER_COEFFICIENT,
        "fisher1921",
    ),
}


def _with_interval(story: Story) -> Iterator[tuple[str, AssociationAnalysis, Interval]]:
    for name, result in story.analysis.results.items():
        if isinstance(result.interval, Interval):
            yield name, result, result.interval


def _is_perfect(result: AssociationAnalysis) -> bool:
    return isinstance(result.estimate, Estimate) and is_perfect(result.estimate.coefficient)


def _rests_on(story: Story) -> tuple[FoundCaveat, ...]:
    if not any(True for _ in _with_interval(story)):
        return ()
    template, key = _RESTS_ON[story.analysis.spec.inference.interval.by]
    return (FoundCaveat((), prose(template, cite=cite(key))),)


def _none(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat((name,), prose("{name}: {reason}.", name=pointer(name), reason=result.interval.reason))
        for name, result in story.analysis.results.items()
        if isinstance(result.estimate, Estimate)
        and not isinstance(result.interval, Interval)
        and not any(outcome.key == INDEPENDENCE and outcome.withholds != "nothing" for outcome in result.checks)
    )


def _perfect(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat(
            (name,),
            prose(
                "{name}: all rows follow one order, so that the sample holds no disagreement from which an error could be "
                "estimated.{interval}",
                name=pointer(name),
                interval=_limit_at_perfect_order(story, name),
            ),
        )
        for name, result in story.analysis.results.items()
        if _is_perfect(result)
    )


def _limit_at_perfect_order(story: Story, name: str) -> Prose | str:
    """Return on what the limit away from the perfect end rests; a bound at that end itself excludes nothing."""
    result = story.analysis.results[name]
    interval = result.interval
    if not isinstance(interval, Interval) or not isinstance(result.estimate, Estimate):
        return ""
    inner = "low" if result.estimate.coefficient.numerator > 0 else "high"
    if interval.direction != "two-sided" and inner != {"greater": "low", "less": "high"}[interval.direction]:
        return " The bound on the side that the plan expects excludes no value."
    limit = _limit(story, name, inner)
    if "guard" in interval.restraints:
        return prose(" {unseen}; hence the limit {limit}.", unseen=_unseen(story, name), limit=limit)
    return prose(" Hence the limit {limit}: half of the smallest visible discordance was assumed.", limit=limit)


def _guard(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat(
            (name,),
            prose(
                "{name}: the rows stand nearly in one order. {unseen}; a limit was drawn back to what is left of the "
                "coefficient then, {limit}.",
                name=pointer(name),
                unseen=_unseen(story, name),
                limit=_limit(story, name, "low" if interval.low > 0 else "high"),
            ),
        )
        for name, result, interval in _with_interval(story)
        if "guard" in interval.restraints and not _is_perfect(result)
    )


def _limit(story: Story, name: str, end: str) -> Prose:
    decimals = story.numbers.decimals_for(address(name, "estimate", "value"))
    return Prose((story.numbers.coefficient(address(name, "interval", end), decimals),))


def _unseen(story: Story, name: str) -> Prose:
    """Return which share of rows without any relation a sample of this size may well miss."""
    numbers, at = story.numbers, address(name, "interval", "unseen")
    return prose(
        "If up to {share} of such rows followed no relation at all, a sample of {n}\u00a0=\u00a0{rows} would contain none "
        "of them with probability {probability}",
        share=numbers.percent_down(f"{at}/share"),
        n=N,
        rows=numbers.whole(address(name, "rows", "complete")),
        probability=numbers.percent_short(f"{at}/probability"),
    )


def _restrained(story: Story, restraint: Restraint) -> tuple[str, ...]:
    return tuple(
        name
        for name, result, interval in _with_interval(story)
        if restraint in interval.restraints and not _is_perfect(result)
    )


def _cap(story: Story) -> tuple[FoundCaveat, ...]:
    names = _restrained(story, "cap")
    words = (
        "{names}: the estimate is nearer to perfect order than half of the smallest discordance that the ties could show. "
        "The interval is that of an estimate so far away, and its outer limit is one in size."
    )
    return (FoundCaveat(names, prose(words, names=pointers(names))),) if names else ()


def _fallback(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(name for name, _, interval in _with_interval(story) if "fallback" in interval.restraints)
    if not names:
        return ()
    if story.analysis.spec.inference.interval.by == "influence values":
        words = "{names}: so near to perfect order the influence values show next to no error. {variance}"
    else:
        words = "{names}: without one of the rows a variable does not vary, so that there is no jackknife. {variance}"
    found = []
    for of_rho, variance in ((True, "Bonett and Wright"), (False, "Fieller, Hartley and Pearson")):
        own = tuple(name for name in names if (_symbol(story, name) == "rho") == of_rho)
        stands = f"The variance of {variance}, which holds for normal-type dependence, stands in for it."
        if own:
            found.append(FoundCaveat(own, prose(words, names=pointers(own), variance=stands)))
    return tuple(found)


def _symbol(story: Story, name: str) -> str:
    return coefficient_symbol(story.analysis.spec.associations[name])


def _beyond(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat(
            (name,),
            prose(
                "{name}: the interval, {range}, reaches beyond the coefficients that rows with these ties can give, "
                "{lowest} to {highest}. What lies beyond concerns a population with other ties.",
                name=pointer(name),
                range=interval_range(story, name),
                lowest=story.numbers.coefficient(address(name, "attainable", "lowest")),
                highest=story.numbers.coefficient(address(name, "attainable", "highest")),
            ),
        )
        for name, result, interval in _with_interval(story)
        if _lies_beyond(result, interval)
    )


def _lies_beyond(result: AssociationAnalysis, interval: Interval) -> bool:
    screened = result.screened
    limits = attainable_range(screened.spec.coefficient, screened.x_ties, screened.y_ties)
    # The open end of a one-sided bound is no limit.
    below = interval.direction != "less" and interval.low < limits.lowest.value - ROUNDING
    above = interval.direction != "greater" and interval.high > limits.highest.value + ROUNDING
    return below or above


def _resamples(story: Story) -> tuple[FoundCaveat, ...]:
    found = []
    for name in story.analysis.results:
        at = resampled_at(story, name)
        if at is None or story.numbers.whole(f"{at}/undefined").exact == "0":
            continue
        words = prose(
            "{name}: in {undefined} of {drawn} resamples a variable did not vary; they were left out, and the interval "
            "speaks of samples in which both vary.",
            name=pointer(name),
            undefined=story.numbers.whole(f"{at}/undefined"),
            drawn=story.numbers.whole(f"{at}/drawn"),
        )
        found.append(FoundCaveat((name,), words))
    return tuple(found)


PERFECT: Final = CaveatRule("perfect_agreement", 55, _perfect)
GUARD: Final = CaveatRule("interval_guard", 54, _guard)
CAP: Final = CaveatRule("interval_cap", 53, _cap)
FALLBACK: Final = CaveatRule("interval_fallback", 52, _fallback)
BEYOND: Final = CaveatRule("interval_beyond_ties", 42, _beyond)
RESAMPLES: Final = CaveatRule("undefined_resamples", 37, _resamples)
NO_INTERVAL: Final = CaveatRule("no_interval", 35, _none)
INTERVAL_BASIS: Final = CaveatRule("interval_basis", 30, _rests_on)

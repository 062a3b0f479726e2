"""Requirements that were not met or are doubtful, each with what follows from it."""

from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.checks.attainable_p import KEY as ATTAINABLE
from rankdocket.analysis.checks.built_in import KEY as BUILT_IN
from rankdocket.analysis.checks.independence import KEY as INDEPENDENCE
from rankdocket.analysis.results import AssociationAnalysis, CheckOutcome, NotEstimable, Withheld
from rankdocket.document.model import Number, Prose
from rankdocket.document.prose import only, prose
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.phrases import address, full_stop, outcome_words, pointer
from rankdocket.writing.section import Story

_SHARED = INDEPENDENCE
"""The one check whose outcome is the same for every association: it gets a single caveat of its own."""


def measure(story: Story, name: str, outcome: CheckOutcome, side: str) -> Number | None:
    """Return the limit or the found figure of a check as a printed number."""
    filed = outcome.limit if side == "limit" else outcome.found
    if filed is None:
        return None
    key = address(name, "checks", outcome.key, side)
    match filed.kind:
        case "count":
            return story.numbers.whole(key)
        case "share":
            return story.numbers.share(key, address(name, "checks", outcome.key, "limit"))
        case "percent":
            return story.numbers.percent(key)
        case "p":
            return story.numbers.attainable_p(key) if side == "found" else story.numbers.level(key)


def _find(story: Story) -> tuple[FoundCaveat, ...]:
    return tuple(
        FoundCaveat((name,), _words(story, name, outcome))
        for name, result in story.analysis.results.items()
        for outcome in result.checks
        if outcome.state in ("not met", "doubtful") and outcome.key not in (_SHARED, BUILT_IN, "not_constant")
    )


def _words(story: Story, name: str, outcome: CheckOutcome) -> Prose:
    check = next(check for check in CHECKS if check.key == outcome.key)
    limit, figure = measure(story, name, outcome, "limit"), measure(story, name, outcome, "found")
    held = (
        prose(" (found {found}, limit {limit})", found=figure, limit=limit)
        if figure is not None and limit is not None
        else only("")
    )
    return prose(
        "{name}: the requirement “{label}” is {state}: {reason}{held}.{waived} {after}",
        name=pointer(name),
        label=check.label.lower(),
        state=outcome_words(outcome),
        reason=outcome.reason,
        held=held,
        waived=waiver_words(outcome),
        after=what_is_given(story.analysis.results[name], outcome),
    )


def waiver_words(outcome: CheckOutcome) -> Prose:
    """Return why the plan waives a requirement, as a sentence with a blank before it; nothing where it does not."""
    if outcome.waived is None:
        return only("")
    return prose(" Reason given in the plan for waiving it: {reason}", reason=full_stop(outcome.waived))


def what_is_given(result: AssociationAnalysis, outcome: CheckOutcome) -> str:
    """Return what stands in the end: one requirement may leave a result that another withholds."""
    if isinstance(result.estimate, NotEstimable):
        return "No coefficient exists for these rows."
    if isinstance(result.estimate, Withheld):
        return "Neither an estimate nor a test is given."
    if isinstance(result.test, Withheld):
        return "The estimate is given without a test."
    if outcome.key == ATTAINABLE and outcome.state == "not met":
        return "That nothing was shown could not have come out otherwise."
    return "The result stands with this reservation."


def _find_shared(story: Story) -> tuple[FoundCaveat, ...]:
    outcomes = {
        outcome.reason: outcome
        for result in story.analysis.results.values()
        for outcome in result.checks
        if outcome.key == _SHARED and outcome.state == "not met"
    }
    return tuple(
        FoundCaveat(
            (),
            prose(
                "Every test and every interval is withheld: {reason}. Rows that belong together, treated as if they did not, "
                "give false findings far more often than alpha says.",
                reason=reason,
            ),
        )
        for reason in outcomes
    )


DEPENDENT_ROWS = CaveatRule("dependent_rows", 100, _find_shared)
REQUIREMENTS = CaveatRule("requirements", 60, _find)

"""The adjustment in words: what alpha bounds, the permutations of a family, and the error of what they gave."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Final

from rankdocket.analysis.family import adjustment_of, error_rate_of
from rankdocket.analysis.max_t_result import FamilyMaxT
from rankdocket.document.model import Number, Prose, Supplied
from rankdocket.document.prose import joined, only, prose
from rankdocket.stats.adjustment import ErrorRate
from rankdocket.stats.max_t import MAX_T_DESCRIPTIONS
from rankdocket.writing.citations import cite
from rankdocket.writing.described import described
from rankdocket.writing.phrases import address, label, level, pointers
from rankdocket.writing.section import Story

_IN_FULL: Final[Mapping[ErrorRate, str]] = MappingProxyType(
    {
        "any false finding": "the chance of any false finding in the family",
        "share of false findings": "the false discovery rate, the expected share of false ones among the findings of the "
        "family",
    }
)
_IN_SHORT: Final[Mapping[ErrorRate, str]] = MappingProxyType(
    {"any false finding": "the chance of any false finding", "share of false findings": "the false discovery rate"}
)


def bounded(story: Story) -> str | None:
    """Return what alpha bounds in a family of several, as a sentence part; ``None`` where each test stands alone."""
    return _IN_SHORT.get(error_rate_of(story.analysis.spec)) if len(story.analysis.family) > 1 else None


def bound_sentence(story: Story) -> Prose:
    """Return what alpha bounds, and by which rule; empty where each test stands alone."""
    if bounded(story) is None:
        return only("")
    return prose(
        "By the adjustment of the family ({rule}) alpha bounds {what}.",
        rule=story.analysis.spec.inference.several_tests.adjust,
        what=_IN_FULL[error_rate_of(story.analysis.spec)],
    )


def bound_note(story: Story) -> Prose:
    """Return the same for the foot of a table, where step-down maxT names its condition at once."""
    family = story.analysis.max_t
    if family is None:
        return bound_sentence(story)
    return prose(
        "By the adjustment of the family (step-down maxT) alpha bounds the chance of any false finding in it, if "
        "{variable} is independent of all the variables of true nulls taken together.",
        variable=label(story.analysis.spec.variables[family.variable]),
    )


def adjustment_text(story: Story) -> Prose:
    """Return how the p-values of a family were adjusted, for the methods text; one alone asks for no adjustment."""
    rule, together = adjustment_of(story.analysis.spec), story.analysis.max_t
    adjust = story.analysis.spec.inference.several_tests.adjust
    if together is not None:
        return _max_t_text(story, together)
    if adjust == "none":
        return described(rule.describe)
    if len(story.analysis.family) < 2:
        return Prose(())
    if adjust == "step-down maxT":
        return only("No p-value of the family is given, so that there was nothing to adjust.")
    return described(rule.describe, family=story.numbers.whole("inference/family_size"))


def _max_t_text(story: Story, family: FamilyMaxT) -> Prose:
    numbers = story.numbers
    slots: dict[str, Number | Supplied] = {
        "family": numbers.whole("inference/family_size"),
        "variable": label(story.analysis.spec.variables[family.variable]),
    }
    if family.stream:
        slots |= {"draws": numbers.whole("inference/max_t/of"), "seed": numbers.label("inference/seed")}
    parts = [described(MAX_T_DESCRIPTIONS[family.method], **slots)]
    if family.stream:
        parts.append(
            prose(
                "The error of these draws was described by an interval for each adjusted p-value with level {level} "
                "{cite}. Where they put it below the association’s own p-value, it was set to that one.",
                level=level(story),
                cite=cite("clopper1934"),
            )
        )
    if family.held_back:
        parts.append(
            prose(
                "{names}, whose test is withheld, stood in every maximum, so that the adjusted p-value of another was "
                "not lowered.",
                names=pointers(family.held_back),
            )
        )
    return joined(tuple(parts))


def adjusted_rows(story: Story, name: str) -> tuple[tuple[str, Prose], ...]:
    """Return the adjusted p-value of an association and, where it was drawn, its error; nothing without one."""
    finding, numbers = story.analysis.findings[name], story.numbers
    if finding.p_adjusted is None:
        return ()
    p = numbers.p_value(address(name, "finding", "p_adjusted"))
    member = finding.max_t
    if member is None:
        return (("p, adjusted", only(p)),)
    at = address(name, "finding", "max_t")
    template = "{p}: in {count} of {of} permutations of the family the largest coefficient was at least as extreme"
    if member.share < finding.p_adjusted:
        template = (
            "{p}, its own, as the permutations of the family gave less by their error: in {count} of {of} the largest "
            "coefficient was at least as extreme"
        )
    adjusted = prose(template, p=p, count=numbers.whole(f"{at}/count"), of=numbers.whole(f"{at}/of"))
    if not numbers.has(f"{at}/p_low"):
        return (("p, adjusted", adjusted),)
    error = prose(
        "{level} interval of the share in all permutations: {low} to {high}",
        level=level(story),
        low=numbers.attainable_p(f"{at}/p_low"),
        high=numbers.attainable_p(f"{at}/p_high"),
    )
    return ("p, adjusted", adjusted), ("Error of these draws", error)

"""Caveats about several tests: the condition of the adjustment, and what a share of false findings means."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Final

from rankdocket.analysis.results import RankTest
from rankdocket.document.prose import prose
from rankdocket.vocabulary import Adjustment
from rankdocket.writing.adjustment import bounded
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import label
from rankdocket.writing.section import Story

_SHARE: Final = (
    "alpha bounds an expected share of false ones among the findings, not the chance of any: of several findings some "
    "may be false"
)

_CONDITIONS: Final[Mapping[Adjustment, tuple[str, tuple[str, ...]]]] = MappingProxyType(
    {
        "Hochberg": (
            (
                "By Hochberg’s rule alpha bounds the chance of any false finding if the p-values that belong to true nulls "
                "depend on one another positively, or not at all, as the inequality of Simes needs {cite}. The rows cannot "
                "show whether they do; Holm’s rule needs no such condition."
            ),
            ("simes1986", "sarkar1998"),
        ),
        "Benjamini-Hochberg": (
            (
                f"By the rule of Benjamini and Hochberg {_SHARE}. It does so if the p-values depend positively, or not at "
                "all, on those that belong to true nulls {cite}. The rows cannot show whether they do; the rule of Benjamini "
                "and Yekutieli needs no such condition."
            ),
            ("benjamini2001",),
        ),
        "Benjamini-Yekutieli": (
            f"By the rule of Benjamini and Yekutieli, however p-values depend on one another, {_SHARE} {{cite}}.",
            ("benjamini2001",),
        ),
    }
)
"""Rule → its caveat; a rule that is not here needs none."""

_MAX_T: Final = (
    "By step-down maxT alpha bounds the chance of any false finding if {variable} is independent of all the variables of "
    "true nulls taken together {cite}. Where it hangs together with several of them jointly and with none alone, that is "
    "not known to hold."
)


def _condition(story: Story) -> tuple[FoundCaveat, ...]:
    tested = any(isinstance(story.analysis.results[name].test, RankTest) for name in story.analysis.family)
    if bounded(story) is None or not tested:
        return ()
    if story.analysis.max_t is not None:
        variable = story.analysis.spec.variables[story.analysis.max_t.variable]
        words = prose(_MAX_T, variable=label(variable), cite=cite("westfall1993"))
        return (FoundCaveat(story.analysis.family, words),)
    adjust = story.analysis.spec.inference.several_tests.adjust
    if adjust not in _CONDITIONS:
        return ()
    template, works = _CONDITIONS[adjust]
    return (FoundCaveat(story.analysis.family, prose(template, cite=cite(*works))),)


CONDITION_OF_ADJUSTMENT = CaveatRule("condition_of_adjustment", 38, _condition)

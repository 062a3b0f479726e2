"""The catalogue of numbered sections, in print order.  Control page, summary and references frame them."""

from typing import Final

from rankdocket.writing.section import SectionRule
from rankdocket.writing.sections import (
    changes,
    data,
    listing,
    methods,
    plan,
    question,
    record,
    requirements,
    results,
    screening,
    worksheets,
)

BODY: Final[tuple[SectionRule, ...]] = (
    question.SECTION,
    data.SECTION,
    screening.SECTION,
    methods.SECTION,
    requirements.SECTION,
    results.SECTION,
    changes.SECTION,
)

APPENDICES: Final[tuple[SectionRule, ...]] = (
    worksheets.SECTION,
    listing.SECTION,
    plan.SECTION,
    record.SECTION,
)

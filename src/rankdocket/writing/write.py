"""Analysis to document: the report’s table of contents."""

from collections.abc import Mapping
from dataclasses import replace

from rankdocket.analysis.results import Analysis
from rankdocket.canonical import Plain
from rankdocket.document.model import Document, Furniture, Paragraph, Section
from rankdocket.document.numbers import Numbers
from rankdocket.document.prose import lint_document, only
from rankdocket.errors import RenderError
from rankdocket.writing.caveats import find_caveats
from rankdocket.writing.citations import cited_works
from rankdocket.writing.section import IssueFacts, Story
from rankdocket.writing.sections import APPENDICES, BODY
from rankdocket.writing.sections.control import control_page
from rankdocket.writing.sections.summary import summary


def write(analysis: Analysis, plain: Mapping[str, Plain], facts: IssueFacts) -> Document:
    """Return the report on ``analysis``; ``plain`` is its plain form, to which every number points.

    Raises
    ------
    RenderError
        If a sentence of the program’s own breaks the wording rules.
    """
    story = tell(analysis, plain, facts)
    document = Document(
        language="en-GB",
        furniture=_furniture(story),
        control=control_page(story),
        summary=summary(story),
        sections=(
            *(rule.write(story) for rule in BODY),
            Section("references", "", only("References"), ()),
            *(rule.write(story) for rule in APPENDICES),
        ),
        end_mark=f"End of report {analysis.spec.study.number}, {facts.edition}",
    )
    refuse_forbidden_words(document)
    return _with_references(document)


def tell(analysis: Analysis, plain: Mapping[str, Plain], facts: IssueFacts) -> Story:
    """Return the story that every section draws on, caveats numbered."""
    spec = analysis.spec
    numbers = Numbers(
        plain,
        spec.report.coefficient_decimals,
        spec.report.p_value_decimals,
        spec.report.number_style,
        spec.inference.alpha,
    )
    story = Story(analysis, plain, numbers, facts)
    return replace(story, caveats=find_caveats(story))


def refuse_forbidden_words(document: Document) -> None:
    """Fail a report whose own sentences claim more than the evidence."""
    hits = lint_document(document)
    if hits:
        listing = "; ".join(f"“{hit.phrase}” ({hit.rule})" for hit in hits)
        raise RenderError(f"the report’s own words break its wording rules: {listing}. Nothing was sealed.")


def _with_references(document: Document) -> Document:
    works = cited_works(document)
    listed = Section(
        "references",
        "",
        only("References"),
        (Paragraph(only("Works cited by the rules that ran."), "note"),),
    )
    sections = tuple(listed if section.key == "references" else section for section in document.sections)
    return replace(document, sections=sections, references=works)


def _furniture(story: Story) -> Furniture:
    study, facts = story.analysis.spec.study, story.facts
    return Furniture(
        study_number=study.number,
        title=study.title,
        short_title=study.title,
        marking=story.analysis.spec.report.marking or "",
        edition=facts.edition,
        status=facts.status,
        date=facts.date,
        created=facts.created,
        author=study.prepared_by.name if study.prepared_by else "",
    )

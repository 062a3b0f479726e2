"""Section 1: who asked, what, and each association with its role and expectation."""

from rankdocket.document.model import FieldList, Items, Paragraph, Prose, Section, Supplied
from rankdocket.document.prose import only, prose
from rankdocket.study.spec import AssociationSpec
from rankdocket.writing.findings import smallest_of_interest
from rankdocket.writing.phrases import label_with_unit, pointer, variables_of
from rankdocket.writing.section import SectionRule, Story


def write(story: Story) -> Section:
    """Return the instructions and the associations of the plan."""
    study = story.analysis.spec.study
    rows: list[tuple[str, Prose]] = [
        ("Asked by", only(Supplied(study.client))),
        ("Question", only(Supplied(study.question))),
        ("Population", only(Supplied(study.population)) if study.population else only("not stated")),
        (
            "Number of rows",
            only(Supplied(study.rows_were_fixed_by))
            if study.rows_were_fixed_by
            else only("how it was fixed is not stated"),
        ),
    ]
    return Section(
        "question",
        "1",
        only("Instructions and question"),
        (
            FieldList(tuple(rows), key="instructions"),
            Items(tuple(_plan_line(story, association) for association in story.analysis.spec.associations.values())),
            Paragraph(
                only("Why two variables move together was not asked of this analysis and cannot be answered by it."),
                "note",
            ),
        ),
        opens="page",
    )


def _plan_line(story: Story, association: AssociationSpec) -> Prose:
    x, y = variables_of(story, association)
    size = smallest_of_interest(story, association.name)
    interest = prose("; smallest size of interest {size}", size=size) if size is not None else only("")
    return prose(
        "{name}, {role}. {question} Between {x} and {y}, by {coefficient}; expected sign: {sign}{interest}.",
        name=pointer(association.name),
        role=association.role,
        question=Supplied(association.question),
        x=label_with_unit(x),
        y=label_with_unit(y),
        coefficient=association.coefficient,
        sign=association.hypothesis.expected_sign,
        interest=interest,
    )


SECTION = SectionRule("question", write)

"""Section 3: each variable alone."""

from rankdocket.document.model import Block, Column, Emphasis, Items, Paragraph, Prose, Section, Supplied, TableBlock
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import listed, only, prose
from rankdocket.study.spec import VariableSpec
from rankdocket.writing.phrases import EN_DASH_CELL, address, label_head
from rankdocket.writing.section import SectionRule, Story

_FIVE = ("smallest", "lower_quartile", "median", "upper_quartile", "largest")


def write(story: Story) -> Section:
    """Return the screening table and, for ordered labels, their order with counts."""
    variables = story.analysis.spec.variables
    blocks: list[Block] = [variables_table(story)]
    ordered = tuple(
        _levels(story, variable)
        for variable in variables.values()
        if story.analysis.data.variables[variable.name].labels
    )
    if ordered:
        blocks.append(Items(ordered))
    suspicious = suspicious_rows(story)
    if suspicious:
        blocks += [
            Paragraph(
                only(
                    "Rows that the plan calls suspicious; they stay in the analysis, and the sensitivity tables look at it "
                    "without them:"
                )
            ),
            Items(suspicious, numbered=True),
        ]
    return Section("screening", "3", only("Screening"), tuple(blocks))


def suspicious_rows(story: Story) -> tuple[Prose, ...]:
    """Return each row that the plan calls suspicious, once, with its reason."""
    found: dict[tuple[str, int], Prose] = {}
    for name, result in story.analysis.results.items():
        table = story.analysis.spec.variables[result.screened.spec.x].table
        for position, row in enumerate(result.screened.suspicious):
            if (table, row.row) not in found:
                found[table, row.row] = prose(
                    "Line {line} of {table}: {reason}",
                    line=story.numbers.label(address(name, "rows", "suspicious_lines", str(position))),
                    table=Emphasis(table, "code"),
                    reason=Supplied(row.reason),
                )
    return tuple(found.values())


def variables_table(story: Story) -> TableBlock:
    """Return the table of variables; quartiles of ordered labels are labels."""
    heads = ("Smallest", "Lower quartile", "Median", "Upper quartile", "Largest")
    return TableBlock(
        key="variables",
        number="3",
        caption=only("Each variable alone, among the rows that the plan does not leave out"),
        columns=(
            Column(only("Variable"), "variable", share=5),
            Column(only("Scale"), "scale", share=3),
            Column(only("n"), "n", "right", share=2),
            Column(only("Missing, by kind"), "missing", share=4),
            Column(only("Largest tie group"), "largest_tie", "right", share=2),
            Column(only("Distinct values"), "distinct", "right", share=3),
            *(Column(only(head), name, "decimal", share=3) for head, name in zip(heads, _FIVE, strict=True)),
            Column(only("Unit"), "unit", share=2),
        ),
        rows=tuple(_row(story, variable) for variable in story.analysis.spec.variables.values()),
        notes=(
            only(
                "Quartiles of numbers are interpolated between neighbouring values; between two ordered labels the lower "
                "label stands."
            ),
        ),
    )


def _row(story: Story, variable: VariableSpec) -> tuple[Prose, ...]:
    at = f"variables/{variable.name}"
    whole = story.numbers.whole
    return (
        only(label_head(variable)),
        only(variable.scale),
        only(whole(f"{at}/n")),
        _missing(story, variable.name),
        only(whole(f"{at}/largest_tie")),
        only(whole(f"{at}/distinct")),
        *(_point(story, variable, f"{at}/{name}") for name in _FIVE),
        only(Supplied(variable.unit)) if variable.unit and variable.unit != "1" else EN_DASH_CELL,
    )


def _point(story: Story, variable: VariableSpec, key: str) -> Prose:
    if not story.numbers.has(key):
        return EN_DASH_CELL
    if story.analysis.data.variables[variable.name].labels:
        return only(Supplied(str(look_up(story.plain, key))))
    return only(story.numbers.as_filed(key))


def _missing(story: Story, name: str) -> Prose:
    kinds = look_up(story.plain, f"variables/{name}/missing")
    if not isinstance(kinds, list) or not kinds:
        return only("no code declared")
    return listed(
        tuple(
            prose(
                "{meaning} {rows}",
                meaning=Supplied(str(look_up(story.plain, f"{at}/meaning"))),
                rows=story.numbers.whole(f"{at}/rows"),
            )
            for at in (f"variables/{name}/missing/{position}" for position in range(len(kinds)))
        )
    )


def _levels(story: Story, variable: VariableSpec) -> Prose:
    labels = story.analysis.data.variables[variable.name].labels
    return prose(
        "{variable}, from lowest to highest: {levels}.{respelled}",
        variable=label_head(variable),
        levels=listed(
            tuple(
                prose(
                    "{label} ({rows})",
                    label=Supplied(text),
                    rows=story.numbers.whole(f"variables/{variable.name}/levels/{position}/rows"),
                )
                for position, text in enumerate(labels)
            )
        ),
        respelled=_respelled(story, variable),
    )


def _respelled(story: Story, variable: VariableSpec) -> Prose:
    found = story.analysis.data.variables[variable.name].respelled
    used = tuple(spelling for spelling, rows in found.items() if rows)
    if not used:
        return only("")
    return prose(
        " Other spellings mapped by the plan: {spellings}.",
        spellings=listed(
            tuple(
                prose("“{other}” to {label}", other=Supplied(other), label=Supplied(variable.other_spellings[other]))
                for other in used
            )
        ),
    )


SECTION = SectionRule("screening", write)

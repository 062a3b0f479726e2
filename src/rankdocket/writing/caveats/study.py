"""Caveats about the whole study: supplied words, rows left out, and the usual cautions."""

from rankdocket.analysis.results import RankTest
from rankdocket.document.model import Emphasis, Link, Supplied
from rankdocket.document.prose import lint, listed, only, prose
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import address, pointer
from rankdocket.writing.section import Story


def supplied_texts(story: Story) -> tuple[tuple[str, str], ...]:
    """Return where each supplied text stands in the spec, and the text."""
    spec = story.analysis.spec
    texts = [("study.title", spec.study.title), ("study.question", spec.study.question)]
    texts += [
        (f"associations.{name}.question", association.question) for name, association in spec.associations.items()
    ]
    texts += [(f"variables.{name}.label", variable.label) for name, variable in spec.variables.items()]
    if spec.rows.independent_because is not None:
        texts.append(("rows.independent_because", spec.rows.independent_because))
    optional = {
        "study.population": spec.study.population,
        "study.rows_were_fixed_by": spec.study.rows_were_fixed_by,
        "inference.several_tests.reason": spec.inference.several_tests.reason,
    }
    texts += [(where, text) for where, text in optional.items() if text is not None]
    texts += [
        (f"rows.leave_out.{place}.reason", item.reason) for place, item in enumerate(spec.rows.leave_out, start=1)
    ]
    texts += [
        (f"associations.{name}.waived.{word}", reason)
        for name, association in spec.associations.items()
        for word, reason in association.waived.items()
    ]
    texts += [
        (f"rows.suspicious.{place}.reason", item.reason) for place, item in enumerate(spec.rows.suspicious, start=1)
    ]
    texts.append(("the reason for this edition", story.facts.reason))
    return tuple(texts)


def _supplied(story: Story) -> tuple[FoundCaveat, ...]:
    found = []
    for where, text in supplied_texts(story):
        hits = lint(text)
        if hits:
            found.append(
                FoundCaveat(
                    (),
                    prose(
                        "The words supplied at {where} say {phrases}. That is more than a rank correlation can support; "
                        "they are printed as supplied and are not a result.",
                        where=Emphasis(where, "code"),
                        phrases=listed(tuple(prose("“{phrase}”", phrase=Supplied(hit.phrase)) for hit in hits)),
                    ),
                )
            )
    return tuple(found)


def _incomplete(story: Story) -> tuple[FoundCaveat, ...]:
    names = tuple(
        name
        for name, result in story.analysis.results.items()
        if result.screened.flow.missing_x + result.screened.flow.missing_y + result.screened.flow.missing_both
    )
    if not names:
        return ()
    parts = tuple(
        prose(
            "{name} {lost}",
            name=pointer(name),
            lost=story.numbers.share(address(name, "checks", "missing_share", "found")),
        )
        for name in names
        if any(outcome.key == "missing_share" and outcome.found for outcome in story.analysis.results[name].checks)
    )
    return (
        FoundCaveat(
            names,
            prose(
                "Rows lacking a value were set aside for the association concerned ({parts} of the rows that the plan does "
                "not leave out). That is harmless "
                "only if values are missing for reasons that have nothing to do with what would have been observed.",
                parts=listed(parts),
            ),
        ),
    )


def _left_out(story: Story) -> tuple[FoundCaveat, ...]:
    variables = story.analysis.spec.variables
    first_of_table: dict[str, str] = {}
    for name, result in story.analysis.results.items():
        if result.screened.flow.left_out:
            first_of_table.setdefault(variables[result.screened.spec.x].table, name)
    return tuple(
        FoundCaveat(
            tuple(
                other
                for other, result in story.analysis.results.items()
                if variables[result.screened.spec.x].table == table
            ),
            prose(
                "The plan leaves out {count} of {read} rows of table {table}; each is listed with its reason in section "
                "{section}.",
                count=story.numbers.whole(address(name, "rows", "left_out")),
                read=story.numbers.whole(address(name, "rows", "read")),
                table=Emphasis(table, "code"),
                section=Link("data", "2"),
            ),
        )
        for table, name in first_of_table.items()
    )


def _association_only(story: Story) -> tuple[FoundCaveat, ...]:
    del story  # holds for every rank correlation
    return (
        FoundCaveat(
            (),
            only(
                "A rank correlation, where one is given, describes how two variables moved together in these rows. It does not say why, "
                "and a third quantity that moves with both can bring it about."
            ),
        ),
    )


def _independence_null(story: Story) -> tuple[FoundCaveat, ...]:
    if not any(isinstance(result.test, RankTest) for result in story.analysis.results.values()):
        return ()
    return (
        FoundCaveat(
            (),
            prose(
                "The test is one of independence: under dependence without a common direction it can reject more often "
                "than alpha says {cite}. The plots are there to be looked at.",
                cite=cite("diciccio2017"),
            ),
        ),
    )


def _decision(story: Story) -> tuple[FoundCaveat, ...]:
    del story  # holds for every report
    return (
        FoundCaveat(
            (),
            only(
                "The statistics here support a decision and do not make it. Decisions about health, safety or law belong "
                "to those licensed to take them and to the codes that hold locally."
            ),
        ),
    )


SUPPLIED_WORDS = CaveatRule("supplied_words", 90, _supplied)
INCOMPLETE_ROWS = CaveatRule("incomplete_rows", 40, _incomplete)
LEFT_OUT_ROWS = CaveatRule("left_out_rows", 45, _left_out)
ASSOCIATION_ONLY = CaveatRule("association_only", 20, _association_only)
INDEPENDENCE_NULL = CaveatRule("independence_null", 15, _independence_null)
DECISION = CaveatRule("decision", 10, _decision)

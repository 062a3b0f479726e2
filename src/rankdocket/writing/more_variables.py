"""More than two variables in an association’s spread: given covariates, compared with another association, in groups.

No finding word and no verdict stand here: all three tables are supplementary.
"""

from rankdocket.analysis.more_results import Absent, Comparison, Difference, GivenCovariates, Group, Subgroups
from rankdocket.document.model import Block, Column, Prose, Supplied, TableBlock
from rankdocket.document.prose import joined, listed, only, prose
from rankdocket.stats.coefficient import Coefficient
from rankdocket.stats.interval import Interval
from rankdocket.vocabulary import Direction
from rankdocket.writing.phrases import (
    EN_DASH_CELL,
    N,
    P,
    address,
    coefficient_symbol,
    label,
    level,
    pointer,
    variables_of,
)
from rankdocket.writing.section import Story

TWO_SIDED_P = prose("{p}, two-sided, approximate", p=P)
SUPPLEMENTARY = only("Supplementary: no finding rests on this table, and nothing in it enters the family.")


def more_variables_tables(story: Story, name: str, position: int) -> tuple[Block, ...]:
    """Return the tables that the plan asks for beyond the two variables of the ``position``-th association."""
    more = story.analysis.more[name]
    return tuple(
        table
        for table in (
            None if more.partial is None else _given_covariates(story, name, more.partial, position),
            None if more.comparison is None else _compared(story, name, more.comparison, position),
            None if more.subgroups is None else _groups(story, name, more.subgroups, position),
        )
        if table is not None
    )


def _given_covariates(story: Story, name: str, partial: GivenCovariates, position: int) -> TableBlock:
    numbers, at = story.numbers, address(name, "partial")
    n = only(numbers.whole(f"{at}/n"))
    held = listed(tuple(only(label(story.analysis.spec.variables[each])) for each in partial.covariates))
    given = not isinstance(partial.answer, Absent)
    tested = not isinstance(partial.p, Absent)
    value = only(numbers.coefficient(f"{at}/value")) if given else EN_DASH_CELL
    plain = only(numbers.coefficient(f"{at}/rho/value")) if given else EN_DASH_CELL
    notes = [
        prose(
            "Both rows rest on the {n} rows complete for all of these variables, ranked anew; the association itself has "
            "{complete}.",
            n=numbers.whole(f"{at}/n"),
            complete=numbers.whole(address(name, "rows", "complete")),
        )
    ]
    if isinstance(partial.answer, Absent):
        notes.append(_why(partial.answer, given=False))
    elif isinstance(partial.p, Absent):
        notes.append(prose("The p-value is withheld: {reason}.", reason=partial.p.reason))
    if tested:
        notes.append(
            prose(
                "{p} comes from Student’s t with {df} degrees of freedom and is approximate. No interval is offered for a "
                "partial rank correlation.",
                p=P,
                df=numbers.whole(f"{at}/df"),
            )
        )
    notes += [
        only(
            "It describes what midranks leave after a straight line through the midranks of the variables held fixed; it "
            "is not a test of conditional independence in general."
        ),
        SUPPLEMENTARY,
    ]
    sided = story.analysis.spec.inference.sidedness
    return TableBlock(
        key=f"given-covariates-{name}",
        number=f"8.{position}",
        caption=prose("{name} given covariates", name=pointer(name)),
        columns=(
            Column(only("Coefficient"), "coefficient", share=8),
            Column(only(N), "n", "right", share=2),
            Column(only("Estimate"), "estimate", "decimal", share=3),
            Column(prose("{p}, {sided}, approximate", p=P, sided=sided), "p", "decimal", share=4),
        ),
        rows=(
            (prose("Partial rank correlation given {held}", held=held), n, value, _p(story, f"{at}/test/p", tested)),
            (only("rho of the same rows, nothing held fixed"), n, plain, EN_DASH_CELL),
        ),
        notes=_as_notes(notes),
    )


def _compared(story: Story, name: str, comparison: Comparison, position: int) -> TableBlock:
    numbers, at = story.numbers, address(name, "comparison")
    n = only(numbers.whole(f"{at}/n"))
    given = not isinstance(comparison.coefficients, Absent)
    tested = isinstance(comparison.difference, Difference)
    other = pointer(comparison.other)
    rows = tuple(
        (
            _pair_head(story, one),
            n,
            only(numbers.coefficient(f"{at}/{place}/value")) if given else EN_DASH_CELL,
            EN_DASH_CELL,
            EN_DASH_CELL,
        )
        for place, one in (("first", name), ("second", comparison.other))
    )
    difference = (
        prose("{name} less {other}", name=pointer(name), other=other),
        n,
        only(numbers.coefficient(f"{at}/difference/value")) if given else EN_DASH_CELL,
        _limits(story, f"{at}/difference", "two-sided", f"{at}/difference/value") if tested else EN_DASH_CELL,
        _p(story, f"{at}/difference/p", tested),
    )
    notes = [
        prose(
            "All of it rests on the {n} rows complete for all of these variables, ranked anew; {name} itself has "
            "{complete}, {other} has {others}.",
            n=numbers.whole(f"{at}/n"),
            name=pointer(name),
            complete=numbers.whole(address(name, "rows", "complete")),
            other=other,
            others=numbers.whole(address(comparison.other, "rows", "complete")),
        )
    ]
    if isinstance(comparison.difference, Absent):
        notes.append(_why(comparison.difference, given=given))
    else:
        notes.append(
            only(
                "The two have one variable in common; z of Meng, Rosenthal and Rubin, made for product-moment correlations "
                "and approximate for ranks."
                if comparison.shared
                else "The two have no variable in common; z of Dunn and Clark in the form of Steiger, made for "
                "product-moment correlations and approximate for ranks."
            )
        )
    return TableBlock(
        key=f"compared-{name}",
        number=f"9.{position}",
        caption=prose("{name} compared with {other}", name=pointer(name), other=other),
        columns=(
            Column(only("rho"), "coefficient", share=8),
            Column(only(N), "n", "right", share=2),
            Column(only("Estimate"), "estimate", "decimal", share=3),
            Column(prose("{level} interval for the difference", level=level(story)), "interval", "right", share=5),
            Column(TWO_SIDED_P, "p", "decimal", share=4),
        ),
        rows=(*rows, difference),
        notes=_as_notes([*notes, SUPPLEMENTARY]),
    )


def _pair_head(story: Story, name: str) -> Prose:
    x, y = variables_of(story, story.analysis.spec.associations[name])
    return prose("{name}: {x} and {y}", name=pointer(name), x=label(x), y=label(y))


def _groups(story: Story, name: str, subgroups: Subgroups, position: int) -> TableBlock:
    at = address(name, "subgroups")
    symbol = coefficient_symbol(story.analysis.spec.associations[name])
    compared = subgroups.comparison is not None
    rows = tuple(
        _group_row(story, f"{at}/groups/{place}", group)[: 5 if compared else 4]
        for place, group in enumerate(subgroups.groups)
    )
    notes = _group_notes(story, at, subgroups)
    return TableBlock(
        key=f"groups-{name}",
        number=f"10.{position}",
        caption=prose("{name} in groups by {column}", name=pointer(name), column=Supplied(subgroups.column)),
        columns=(
            Column(only("Group"), "group", share=6),
            Column(only(N), "n", "right", share=2),
            Column(only(symbol), "estimate", "decimal", share=4),
            Column(_interval_head(story), "interval", "right", share=5),
            *((Column(TWO_SIDED_P, "p", "decimal", share=4),) if compared else ()),
        ),
        rows=rows,
        foot=_group_foot(story, f"{at}/difference", subgroups),
        notes=_as_notes(notes),
    )


def _interval_head(story: Story) -> Prose:
    sided = story.analysis.spec.inference.sidedness
    return prose(
        "{level} interval" if sided == "two-sided" else "{level} bound; of a difference, interval", level=level(story)
    )


def _group_row(story: Story, at: str, group: Group) -> tuple[Prose, ...]:
    numbers, head = story.numbers, only(Supplied(group.label))
    n = only(numbers.whole(f"{at}/n"))
    if not isinstance(group.coefficient, Coefficient):
        return (head, n, only(group.coefficient.reason), EN_DASH_CELL, EN_DASH_CELL)
    interval = (
        _limits(story, f"{at}/interval", group.interval.direction, f"{at}/value")
        if isinstance(group.interval, Interval)
        else EN_DASH_CELL
    )
    return (head, n, only(numbers.coefficient(f"{at}/value")), interval, EN_DASH_CELL)


def _group_foot(story: Story, at: str, subgroups: Subgroups) -> tuple[tuple[Prose, ...], ...]:
    comparison = subgroups.comparison
    if comparison is None:
        return ()
    first, second = subgroups.groups[comparison.first], subgroups.groups[comparison.second]
    tested = isinstance(comparison.difference, Difference)
    return (
        (
            prose("Difference: {first} less {second}", first=Supplied(first.label), second=Supplied(second.label)),
            EN_DASH_CELL,
            EN_DASH_CELL if isinstance(comparison.value, Absent) else only(story.numbers.coefficient(f"{at}/value")),
            _limits(story, at, "two-sided", f"{at}/value") if tested else EN_DASH_CELL,
            _p(story, f"{at}/p", tested),
        ),
    )


def _group_notes(story: Story, at: str, subgroups: Subgroups) -> list[Prose]:
    notes = [
        only(
            "A coefficient whose interval leaves zero out in one group and not in another does not say that the groups "
            "differ: “shown here, not shown there” is no difference. Only the difference itself, with its own interval, "
            "speaks about that. No finding and no p-value is given for a group."
        ),
        prose(
            "Complete rows in no group, their cell blank or a missing code: {rows}.",
            rows=story.numbers.whole(f"{at}/without_group"),
        ),
    ]
    withheld = {
        group.interval.reason
        for group in subgroups.groups
        if isinstance(group.coefficient, Coefficient) and not isinstance(group.interval, Interval)
    }
    notes += [prose("Intervals are not given: {reason}.", reason=reason) for reason in sorted(withheld)]
    comparison = subgroups.comparison
    if comparison is not None and isinstance(comparison.difference, Absent):
        given = not isinstance(comparison.value, Absent)
        difference = (
            "Neither {p} nor an interval is given for the difference: {reason}."
            if given
            else "The difference of the two groups is not given: {reason}."
        )
        slots = {"p": P} if given else {}
        notes.append(prose(difference, reason=comparison.difference.reason, **slots))
    elif comparison is not None:
        notes.append(
            only(
                "The two groups were compared on the inverse hyperbolic tangent scale, with one plus half of the squared "
                "coefficient, over the rows of the group less three, as the variance of each; approximate."
            )
        )
    return [*notes, SUPPLEMENTARY]


def _why(absent: Absent, *, given: bool) -> Prose:
    """Return what is not given, and why."""
    template = {
        (True, "withheld"): "The p-value and the interval of this table are withheld: {reason}.",
        (True, "not estimable"): "There is neither a p-value nor an interval: {reason}.",
        (False, "withheld"): "The estimates are withheld: {reason}.",
        (False, "not estimable"): "No estimate exists: {reason}.",
    }[given, absent.state]
    return prose(template, reason=absent.reason)


def _p(story: Story, key: str, tested: bool) -> Prose:
    return only(story.numbers.p_value(key)) if tested else EN_DASH_CELL


def _limits(story: Story, at: str, direction: Direction, estimate: str) -> Prose:
    """Return the limits filed below an address, with the decimals of the estimate."""
    decimals = story.numbers.decimals_for(estimate)
    low, high = (story.numbers.coefficient(f"{at}/{end}", decimals) for end in ("low", "high"))
    match direction:
        case "two-sided":
            return prose("{low} to {high}", low=low, high=high)
        case "greater":
            return prose("from {low} up", low=low)
        case "less":
            return prose("up to {high}", high=high)


def _as_notes(notes: list[Prose]) -> tuple[Prose, ...]:
    return (joined(tuple(notes)),)

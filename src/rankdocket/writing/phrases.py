"""Turns of phrase that several sections share: names of variables, an estimate with its interval, a p with its count."""

from typing import Final, Literal

from rankdocket.analysis.deciding import shows_direction
from rankdocket.analysis.results import AssociationAnalysis, CheckOutcome, Estimate, RankTest, Withheld
from rankdocket.document.model import Emphasis, Link, Prose, Supplied
from rankdocket.document.prose import joined, listed, only, prose, text_of
from rankdocket.stats.interval import Interval
from rankdocket.stats.null import TailShares
from rankdocket.study.spec import AssociationSpec, VariableSpec
from rankdocket.writing.section import Story

N = Emphasis("n", "italic")
P = Emphasis("p", "italic")
EN_DASH_CELL = only("–")

MOST_PRINTED: Final = 10**33
"""A count over more orderings than this, those of thirty rows, is not printed beside its p but filed only."""


def label(variable: VariableSpec) -> Supplied:
    """Return a variable’s label as supplied, to be read inside a sentence."""
    return Supplied(variable.label)


def label_head(variable: VariableSpec) -> Supplied:
    """Return a variable’s label at the head of a cell, a title or an axis."""
    return Supplied(capitalised(variable.label))


def label_with_unit(variable: VariableSpec) -> Supplied:
    """Return "Clamp load (N)"; a pure number and a variable without unit get the label alone."""
    if variable.unit is None or variable.unit == "1":
        return label_head(variable)
    return Supplied(f"{capitalised(variable.label)} ({variable.unit})")


def capitalised(text: str) -> str:
    """Return text with a capital at its head, unless it begins like "pH" or "mRNA"."""
    return text[:1].upper() + text[1:] if text[:2].isalpha() and text[:2].islower() else text


def variables_of(story: Story, association: AssociationSpec) -> tuple[VariableSpec, VariableSpec]:
    """Return the two variables of an association, horizontal axis first."""
    variables = story.analysis.spec.variables
    return variables[association.x], variables[association.y]


def pointer(name: str) -> Link:
    """Return a link to an association’s spread."""
    return Link(f"association-{name}", name)


def pointers(names: tuple[str, ...]) -> Prose:
    """Return "A1, A2 and A3" as links."""
    return listed(tuple(only(pointer(name)) for name in names))


def coefficient_symbol(association: AssociationSpec) -> str:
    """Return the coefficient as it stands in a sentence."""
    return "rho" if association.coefficient == "Spearman rho" else "tau-b"


def address(name: str, *steps: str) -> str:
    """Return the address of something in an association’s part of analysis.json."""
    return "/".join(("associations", name, *steps))


def estimate_with_interval(story: Story, name: str) -> Prose:
    """Return "0.85 (95% interval 0.27 to 0.98)", or that no interval stands there."""
    result = story.analysis.results[name]
    if not isinstance(result.estimate, Estimate):
        return only(state_word(result))
    estimate = story.numbers.coefficient(address(name, "estimate", "value"))
    if not isinstance(result.interval, Interval):
        return prose("{estimate} (no interval)", estimate=estimate)
    direction, holds = result.interval.direction, interval_holds(story, name)
    noun = {"two-sided": "interval", "greater": "lower bound", "less": "upper bound"}[direction]
    words = {
        "as planned": f"{{level}} {noun}",
        "alone": f"{{level}} {noun} alone",
        "simultaneous": f"simultaneous {{level}} {noun}",
        "after selection": f"{{level}} {noun} after selection",
    }[holds]
    if direction != "two-sided":
        words += ":"
    elif holds in ("alone", "after selection"):
        words += ","
    return prose(
        f"{{estimate}} ({words} {{range}})",
        estimate=estimate,
        level=level(story),
        range=interval_range(story, name),
    )


def interval_holds(story: Story, name: str) -> Literal["as planned", "alone", "simultaneous", "after selection"]:
    """Return for what the interval of an association holds: "alone" is said where the plan adjusts other intervals."""
    adjusted = story.analysis.spec.inference.interval.adjusted
    if adjusted == "none":
        return "as planned"
    return "alone" if story.analysis.results[name].interval_alone is None else adjusted


def interval_range(story: Story, name: str, which: Literal["interval", "interval_alone"] = "interval") -> Prose:
    """Return "0.27 to 0.98", or of a one-sided bound "from 0.27 up" or "up to 0.98".

    Limits have the decimals of the estimate, or more where they need them.
    """
    result = story.analysis.results[name]
    interval = result.interval if which == "interval" else result.interval_alone
    if not isinstance(interval, Interval):
        raise TypeError(f"{name} has no interval")
    decimals = story.numbers.decimals_for(address(name, "estimate", "value"))
    low = story.numbers.coefficient(address(name, which, "low"), decimals)
    high = story.numbers.coefficient(address(name, which, "high"), decimals)
    match interval.direction:
        case "two-sided":
            return prose("{low} to {high}", low=low, high=high)
        case "greater":
            return prose("from {low} up", low=low)
        case "less":
            return prose("up to {high}", high=high)


def interval_values(story: Story, name: str) -> Prose:
    """Return the same as it reads after "values of rho": "from 0.27 to 0.98"."""
    words = interval_range(story, name)
    interval = story.analysis.results[name].interval
    two_sided = isinstance(interval, Interval) and interval.direction == "two-sided"
    return prose("from {range}", range=words) if two_sided else words


def level(story: Story) -> Prose:
    """Return the confidence level as a percentage."""
    return only(story.numbers.percent("inference/confidence_level"))


def state_word(result: AssociationAnalysis) -> str:
    """Return "not estimable: …" or "withheld: …" for an association without an estimate."""
    estimate = result.estimate
    if isinstance(estimate, Estimate):
        raise TypeError("this association has an estimate")
    return f"{'withheld' if isinstance(estimate, Withheld) else 'not estimable'}: {estimate.reason}"


def outcome_words(outcome: CheckOutcome) -> str:
    """Return the state of a requirement, and that the plan waives it."""
    return outcome.state if outcome.waived is None else f"{outcome.state} (waived)"


def p_equals(story: Story, key: str) -> Prose:
    """Return "p = 0.024" or "p < 0.001"."""
    number = story.numbers.p_value(key)
    return prose(
        "{p}\u00a0{number}" if number.text.startswith(("<", ">")) else "{p}\u00a0=\u00a0{number}", p=P, number=number
    )


def p_with_count(story: Story, name: str) -> Prose:
    """Return the p-value of an association with the count or the method it comes from."""
    result = story.analysis.results[name]
    if not isinstance(result.test, RankTest):
        return only("")
    if isinstance(result.test.tails, TailShares):
        return prose("{p}, {method}", p=p_equals(story, address(name, "test", "p")), method=method_words(story, name))
    if result.test.tails.of > MOST_PRINTED:
        return prose(
            "{p}, counted over all orderings of the rows; both whole numbers stand in analysis.json",
            p=p_equals(story, address(name, "test", "p")),
        )
    count, of = address(name, "test", "count"), address(name, "test", "of")
    template = (
        "{p}, {count} of {of} orderings of the rows"
        if result.test.tails.is_exact
        else "{p}, {count} of {of} drawn orderings of the rows"
    )
    return prose(
        template,
        p=p_equals(story, address(name, "test", "p")),
        count=story.numbers.whole(count),
        of=story.numbers.whole(of),
    )


def method_words(story: Story, name: str) -> Prose:
    """Return where the p-value of a tested association comes from: "exact, no ties"."""
    test = story.analysis.results[name].test
    if not isinstance(test, RankTest):
        raise TypeError(f"{name} has no test")
    if test.tails.method == "exact algorithm, 12 digits":
        return prose("exact algorithm, {digits} digits", digits=story.numbers.whole(address(name, "test", "digits")))
    return only(test.tails.method)


def direction_sentence(story: Story, name: str) -> Prose:
    """Return which way the two variables went together in these rows.

    Only a finding that is shown is described as a tendency of the rows; otherwise the sign of the coefficient is put
    into words and no more.
    """
    result = story.analysis.results[name]
    x, y = variables_of(story, result.screened.spec)
    if not isinstance(result.estimate, Estimate):
        return only("")
    numerator = result.estimate.coefficient.numerator
    if numerator == 0:
        template = "In these rows the ranks of {x} and {y} leaned neither the same way nor opposite ways"
    elif story.analysis.findings[name].word in ("shown", "shown, opposite sign") and shows_direction(result):
        template = (
            "Rows ranked higher on {x} tended to be ranked higher on {y}"
            if numerator > 0
            else "Rows ranked higher on {x} tended to be ranked lower on {y}"
        )
    else:
        template = (
            "In these rows the ranks of {x} and {y} leaned the same way"
            if numerator > 0
            else "In these rows the ranks of {x} and {y} leaned opposite ways"
        )
    return prose(template, x=label(x), y=label(y))


def full_stop(text: str) -> Supplied:
    """Return supplied words that close a sentence, with a full stop where they bring none."""
    return Supplied(text if text.rstrip().endswith((".", "!", "?", "…")) else f"{text.rstrip()}.")


def sentences(*parts: Prose) -> Prose:
    """Return several sentences as one paragraph, empty ones left out."""
    return joined(tuple(part for part in parts if text_of(part)))

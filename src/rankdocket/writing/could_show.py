"""What the rows could show, as a table: from their number, their ties and the plan alone."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Final

from rankdocket.analysis.results import Estimate
from rankdocket.document.model import Column, Number, Prose, TableBlock
from rankdocket.document.numbers import Numbers, look_up
from rankdocket.document.prose import only, prose
from rankdocket.writing.phrases import EN_DASH_CELL, N, P, pointer, pointers
from rankdocket.writing.section import Story
from rankdocket.writing.size import by_of

_AT: Final = "could_show/rows_of"


def could_show_table(story: Story) -> TableBlock | None:
    """Return one row an association; no table where the plan withholds every estimate or none exists."""
    if not any(isinstance(result.estimate, Estimate) for result in story.analysis.results.values()):
        return None
    return TableBlock(
        key="could-show",
        number="7",
        caption=only("What these rows could show, whatever was found in them"),
        columns=(
            Column(only("Association"), "association", share=2),
            Column(only(N), "n", "right", share=2),
            Column(prose("Smallest attainable {p}", p=P), "attainable_p", share=3),
            Column(
                prose(
                    "Smallest size of rho found with power {power}",
                    power=story.numbers.level("could_show/planned_power"),
                ),
                "smallest_rho",
                share=4,
            ),
            Column(
                prose("Width of a {level} interval at rho\u00a0=\u00a0zero", level=_level(story)),
                "width_at_zero",
                share=4,
            ),
            Column(only("Width at the smallest size of interest"), "width_at_interest", share=4),
        ),
        rows=tuple(_row(story, name) for name in story.analysis.results),
        notes=(
            prose(
                "Worked out from the number of rows, their ties and the plan alone. The size of rho is that which the test "
                "of independence finds with that power at the strictest level that the adjustment of the family can put "
                "to it; it is approximate and does not allow for ties.",
            ),
            *_whose_widths(story),
            *_claims(story),
            *_reasons(story),
        ),
    )


def _claims(story: Story) -> tuple[Prose, ...]:
    """Return that another test than that of independence decides, where one does."""
    names = tuple(name for name in story.analysis.results if by_of(story, name) != "rank test")
    words = (
        "{names}: the finding is that of a claim, whose own test decides; the size given here is no answer about it."
    )
    return (prose(words, names=pointers(names)),) if names else ()


def has_answers(story: Story) -> bool:
    """Return whether any association has a smallest size of rho or the width of an interval."""
    return any(
        story.numbers.has(f"{_AT}/{name}/{key}/value")
        for name in story.analysis.results
        for key in ("smallest_rho", "width_at_zero")
    )


def widths_by(story: Story) -> dict[str, tuple[str, ...]]:
    """Return by what widths were found → the associations with such a width."""
    found: dict[str, list[str]] = {}
    for name in story.analysis.results:
        if story.numbers.has(f"{_AT}/{name}/width_by"):
            found.setdefault(str(look_up(story.plain, f"{_AT}/{name}/width_by")), []).append(name)
    return {by: tuple(names) for by, names in found.items()}


def could_show_words(numbers: Numbers, name: str, *, is_strict: bool) -> str:
    """Return the same of one association as the end of a line on a terminal, from " The planned power" on."""
    at = f"{_AT}/{name}"
    power = numbers.level("could_show/planned_power").text
    level = numbers.percent("could_show/interval_level").text
    strictest = " at the strictest level of the family" if is_strict else ""
    found = numbers.has(f"{at}/smallest_rho/value")
    parts = [
        f"with power {power}{strictest} a rho of {numbers.coefficient(f'{at}/smallest_rho/value').text} in size would be told from zero"
        if found
        else f"no smallest detectable rho: {_reason(numbers, f'{at}/smallest_rho')}"
    ]
    if not numbers.has(f"{at}/width_at_zero/value"):
        return "; ".join([*parts, f"no width of an interval: {_reason(numbers, f'{at}/width_at_zero')}"])
    widths = [f"{_width(numbers, f'{at}/width_at_zero').text} wide at zero"]
    if numbers.has(f"{at}/width_at_interest/value"):
        widths.append(f"{_width(numbers, f'{at}/width_at_interest').text} at the smallest size of interest")
    how = _HOW[str(look_up(numbers.plain, f"{at}/width_by"))]
    return "; ".join([*parts, f"a {level} interval would be about {' and '.join(widths)}, {how}"])


def _width(numbers: Numbers, at: str) -> Number:
    """Return a width; unlike a coefficient it has nothing to fear near 1."""
    return numbers.coefficient(f"{at}/value", numbers.coefficient_decimals)


def _whose_widths(story: Story) -> tuple[Prose, ...]:
    """Return whose widths the table shows, with the names where not all are by one rule."""
    found = widths_by(story)
    return tuple(
        prose(_NOTES[by], of=prose(" of {names}", names=pointers(names)) if len(found) > 1 else "")
        for by, names in found.items()
    )


def _level(story: Story) -> Number:
    return story.numbers.percent("could_show/interval_level")


def _row(story: Story, name: str) -> tuple[Prose, ...]:
    at, numbers = f"{_AT}/{name}", story.numbers

    def width(key: str) -> Prose:
        return only(_width(numbers, f"{at}/{key}")) if numbers.has(f"{at}/{key}/value") else EN_DASH_CELL

    attainable, smallest = f"{at}/attainable_p/value", f"{at}/smallest_rho/value"
    return (
        only(pointer(name)),
        only(numbers.whole(f"{at}/rows")),
        only(numbers.attainable_p(attainable)) if numbers.has(attainable) else EN_DASH_CELL,
        only(numbers.coefficient(smallest)) if numbers.has(smallest) else EN_DASH_CELL,
        width("width_at_zero"),
        width("width_at_interest"),
    )


_NOTES: Final[Mapping[str, str]] = MappingProxyType(
    {
        "guarded jackknife": "The widths{of} are those that the guarded jackknife interval has on average in untied rows of "
        "the bivariate normal law, as simulated; the interval of this report can be wider or narrower.",
        "Bonett-Wright": "The widths{of} are those of the textbook interval of Bonett and Wright; the interval of this "
        "report can be wider.",
    }
)
_HOW: Final[Mapping[str, str]] = MappingProxyType(
    {"guarded jackknife": "as simulated for untied rows", "Bonett-Wright": "by the textbook formula"}
)

_COLUMNS: Final = (
    ("attainable_p", "attainable p"),
    ("smallest_rho", "smallest size of rho"),
    ("width_at_zero", "width"),
)


def _reasons(story: Story) -> tuple[Prose, ...]:
    """Return why cells have no number, one sentence for the same cells and reason."""
    found: dict[tuple[str, str], list[str]] = {}
    for name in story.analysis.results:
        lacking: dict[str, list[str]] = {}
        for key, words in _COLUMNS:
            at = f"{_AT}/{name}/{key}"
            if story.numbers.has(f"{at}/reason"):
                lacking.setdefault(_reason(story.numbers, at), []).append(words)
        for reason, columns in lacking.items():
            found.setdefault((" and no ".join(columns), reason), []).append(name)
    return tuple(
        prose("{names}: no {words}: {reason}.", names=pointers(tuple(names)), words=words, reason=reason)
        for (words, reason), names in found.items()
    )


def _reason(numbers: Numbers, at: str) -> str:
    return str(look_up(numbers.plain, f"{at}/reason"))

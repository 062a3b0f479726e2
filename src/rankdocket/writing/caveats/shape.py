"""A coefficient near zero that is not the whole story: the rows are related in a way that has no one direction."""

from rankdocket.document.model import Link
from rankdocket.document.numbers import look_up
from rankdocket.document.prose import prose
from rankdocket.writing.caveat import CaveatRule, FoundCaveat
from rankdocket.writing.citations import cite
from rankdocket.writing.phrases import address, coefficient_symbol, label, pointer, variables_of
from rankdocket.writing.section import Story


def _find(story: Story) -> tuple[FoundCaveat, ...]:
    found = []
    for name, result in story.analysis.results.items():
        if not story.numbers.has(address(name, "shape", "hidden")):
            continue
        x, y = variables_of(story, result.screened.spec)
        way = look_up(story.plain, address(name, "shape", "hidden"))
        given, followed = (x, y) if way == "y on x" else (y, x)
        xi = address(name, "shape", "xi_y_on_x" if way == "y on x" else "xi_x_on_y")
        found.append(
            FoundCaveat(
                (name,),
                prose(
                    "{name}: look at the plot ({figure}): {symbol} is near zero, and yet {followed} visibly goes with {given} "
                    "in a way that has no one direction, such as up and down again: Chatterjee’s xi is {xi}, {spreads} "
                    "standard deviations above what rows without any relation give on average {cite}. A coefficient near "
                    "zero says only that no common direction prevails.",
                    name=pointer(name),
                    figure=Link(f"{name}-raw", f"Figure {name}a"),
                    symbol=coefficient_symbol(result.screened.spec),
                    followed=label(followed),
                    given=label(given),
                    xi=story.numbers.coefficient(f"{xi}/value"),
                    spreads=story.numbers.coefficient(f"{xi}/spreads", 1),
                    cite=cite("chatterjee2021"),
                ),
            )
        )
    return tuple(found)


HIDDEN_SHAPE = CaveatRule("hidden_shape", 78, _find)

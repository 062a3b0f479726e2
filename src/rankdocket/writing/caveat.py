"""What a caveat rule is: a look at the analysis that finds sentences the reader must see."""

from collections.abc import Callable
from dataclasses import dataclass

from rankdocket.document.model import Prose
from rankdocket.writing.section import Story


@dataclass(frozen=True, slots=True)
class FoundCaveat:
    """A caveat found: the associations that it names (none: the whole study) and its words."""

    about: tuple[str, ...]
    prose: Prose


@dataclass(frozen=True, slots=True)
class CaveatRule:
    """One kind of caveat.

    Attributes
    ----------
    key
        Stable identifier.
    weight
        How far up it stands when the summary has room for three: higher first.
    find
        The look.
    """

    key: str
    weight: int
    find: Callable[[Story], tuple[FoundCaveat, ...]]

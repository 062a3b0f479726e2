"""What the house holds of a work cited."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Reference:
    """A work cited.

    Attributes
    ----------
    short
        As it stands in running text: "Kendall 1945".
    full
        As it stands in the list of references.
    """

    key: str
    short: str
    full: str

"""Which declared label a text of the file was probably meant to be."""

from collections.abc import Sequence

from rankdocket.study.cells import is_number_like
from rankdocket.study.wording import nearest


def nearest_label(text: str, labels: Sequence[str]) -> str | None:
    """Return the label most like ``text``; a number is never taken for a misspelt other number."""
    return nearest(text, [label for label in labels if not (is_number_like(text) and is_number_like(label))])

"""What a rule says of itself, as prose with its works."""

from rankdocket.document.model import Emphasis, Number, Prose, Supplied
from rankdocket.document.prose import joined, only, prose
from rankdocket.references import Description
from rankdocket.writing.citations import cite


def described(description: Description, **slots: Number | Prose | Emphasis | Supplied | str) -> Prose:
    """Return what a rule says of itself, its works in brackets."""
    sentence = prose(description.sentence, **slots)
    if not description.cites:
        return sentence
    body, last = sentence.pieces[:-1], sentence.pieces[-1]
    if not isinstance(last, str) or not last.endswith("."):
        return joined((sentence, cite(*description.cites)))
    return joined((Prose((*body, last[:-1])), joined((cite(*description.cites), only(".")), "")))

"""Citations: a rule’s works in brackets, and the list of everything a document cites."""

from collections.abc import Mapping

from rankdocket.document.model import Citation, Paper, Prose
from rankdocket.document.prose import all_prose, joined, only
from rankdocket.references import REFERENCES


def cite(*keys: str) -> Prose:
    """Return "(Kendall 1945; Spearman 1904)".

    Raises
    ------
    KeyError
        If a key is not in the bibliography.
    """
    works = tuple(only(Citation(key, REFERENCES[key].short)) for key in keys)
    return joined((only("("), joined(works, "; "), only(")")), "")


def cited_works(document: Paper) -> Mapping[str, str]:
    """Return key → full text of every work that stands in the document, in alphabetical order of the list."""
    keys = {piece.key for content in all_prose(document) for piece in content.pieces if isinstance(piece, Citation)}
    return {key: REFERENCES[key].full for key in sorted(keys, key=lambda key: REFERENCES[key].full)}

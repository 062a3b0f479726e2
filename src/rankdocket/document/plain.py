"""Document to plain data and back: what document.json holds."""

import dataclasses
from collections.abc import Mapping, Sequence
from typing import Any, Final, cast

from rankdocket.canonical import Plain
from rankdocket.document import model
from rankdocket.document.model import Document

SCHEMA: Final = "urn:rankdocket:document:1"

_TYPES: Final[dict[str, type[Any]]] = {
    name: kind
    for name, kind in vars(model).items()
    if isinstance(kind, type) and dataclasses.is_dataclass(kind) and kind.__module__ == model.__name__
}


def document_to_plain(document: Document) -> Plain:
    """Return the document as plain data; each value of the model says what it ``is``."""
    return {"schema": SCHEMA, "document": _to_plain(document)}


def document_from_plain(plain: Plain) -> Document:
    """Return the document that :func:`document_to_plain` wrote.

    Raises
    ------
    ValueError
        If the data does not describe a document of this schema.
    """
    if not isinstance(plain, Mapping) or plain.get("schema") != SCHEMA:
        raise ValueError(f"this is not {SCHEMA}")
    document = _from_plain(plain["document"])
    if not isinstance(document, Document):
        raise ValueError("the data holds no document")
    return document


def _to_plain(value: object) -> Plain:
    if dataclasses.is_dataclass(value) and not isinstance(value, type):
        fields = {field.name: _to_plain(getattr(value, field.name)) for field in dataclasses.fields(value)}
        return {"is": type(value).__name__, **fields}
    if isinstance(value, Mapping):
        return {str(key): _to_plain(item) for key, item in value.items()}
    if isinstance(value, (tuple, list)):
        return [_to_plain(item) for item in value]
    if value is None or isinstance(value, (str, bool, int)):
        return value
    raise TypeError(f"a document holds no {type(value).__name__}")


def _from_plain(value: Plain) -> object:
    if isinstance(value, Mapping):
        if "is" not in value:
            return {key: _from_plain(item) for key, item in value.items()}
        name = str(value["is"])
        if name not in _TYPES:
            raise ValueError(f"{name!r} is no part of a document")
        try:
            return _TYPES[name](**{key: _from_plain(item) for key, item in value.items() if key != "is"})
        except TypeError as error:
            raise ValueError(f"{name}: {error}") from None
    if isinstance(value, Sequence) and not isinstance(value, str):
        return tuple(_from_plain(item) for item in value)
    return cast("object", value)

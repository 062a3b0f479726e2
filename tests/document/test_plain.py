"""A document and its plain form are the same thing in two shapes."""

import json
from collections.abc import Mapping
from dataclasses import replace
from typing import Any, get_args

import pytest

from document.specimen import BLOCKS, EVERY_BLOCK, MIXED
from rankdocket.canonical import Plain, canonical_bytes, readable_bytes
from rankdocket.document.model import Block, Document, FigureBlock, Piece
from rankdocket.document.plain import SCHEMA, document_from_plain, document_to_plain
from writing.reports import demonstration_report, study_of_every_finding

DOCUMENTS = {
    "every block": lambda: EVERY_BLOCK,
    "first-look": lambda: demonstration_report("first-look").document,
    "gasket-creep": lambda: demonstration_report("gasket-creep").document,
    "weld-smoke": lambda: demonstration_report("weld-smoke").document,
    "every finding": lambda: study_of_every_finding().document,
}


@pytest.fixture(params=list(DOCUMENTS))
def document(request: pytest.FixtureRequest) -> Document:
    return DOCUMENTS[request.param]()


def test_the_specimen_forgets_no_kind_of_block_or_piece() -> None:
    """A new member of a union must come into the specimen, or this fails."""
    assert {type(block) for block in BLOCKS} == set(get_args(Block))
    assert {type(piece) for piece in MIXED.pieces} == set(get_args(Piece))


def test_document_to_plain_to_document_is_identity(document: Document) -> None:
    """Also through the bytes that are filed, canonical or readable."""
    plain = document_to_plain(document)
    assert document_from_plain(plain) == document
    assert document_from_plain(json.loads(canonical_bytes(plain))) == document
    assert document_from_plain(json.loads(readable_bytes(plain))) == document


def test_plain_to_document_to_plain_is_identity(document: Document) -> None:
    """The bytes do not change on the way back either."""
    filed = canonical_bytes(document_to_plain(document))
    assert canonical_bytes(document_to_plain(document_from_plain(json.loads(filed)))) == filed


@pytest.mark.parametrize(
    ("plain", "message"),
    [
        ([], "this is not"),
        ({"schema": "urn:rankdocket:document:2", "document": {}}, "this is not urn:rankdocket:document:1"),
        ({"schema": SCHEMA, "document": {"a": 1}}, "holds no document"),
        (
            {"schema": SCHEMA, "document": {"is": "Paragraph", "prose": {"is": "Prose", "pieces": []}}},
            "holds no document",
        ),
        ({"schema": SCHEMA, "document": {"is": "Mapping"}}, "'Mapping' is no part of a document"),
        ({"schema": SCHEMA, "document": {"is": "Prose", "pieces": [], "colour": "red"}}, "Prose: .*colour"),
        ({"schema": SCHEMA, "document": {"is": "Prose"}}, "Prose: .*pieces"),
    ],
)
def test_data_that_describe_no_document_are_refused(plain: Plain, message: str) -> None:
    """The message says what was found instead."""
    with pytest.raises(ValueError, match=message):
        document_from_plain(plain)


def test_a_float_cannot_stand_in_a_document() -> None:
    """A number of a figure is decimal text."""
    figure = next(block for block in BLOCKS if isinstance(block, FigureBlock))
    with_float: dict[str, Any] = {"n": 0.5}
    wrong = replace(EVERY_BLOCK, control=(replace(figure, data=with_float),))
    with pytest.raises(TypeError, match="a document holds no float"):
        document_to_plain(wrong)


def test_every_value_says_what_it_is() -> None:
    """A reader without this program finds the kind of each part beside it."""
    plain = document_to_plain(EVERY_BLOCK)
    assert isinstance(plain, Mapping)
    body = plain["document"]
    assert isinstance(body, Mapping)
    assert (plain["schema"], body["is"]) == (SCHEMA, "Document")

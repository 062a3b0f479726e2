"""A document held against a fresh one: whatever it states and a fresh writing does not is named."""

import json
from collections.abc import Callable
from typing import Any

import pytest

from rankdocket.document.plain import document_from_plain
from rankdocket.study.reader import read_spec
from rankdocket.workflow.verify_document import Fresh, document_problems, word_remarks
from rankdocket.workflow.verify_files import document_of
from workflow.office import Sealed


def _fresh(issued: Sealed) -> Fresh:
    spec_text = (issued.edition / "spec-as-used.yaml").read_text(encoding="utf-8")
    return Fresh(
        document_of((issued.edition / "document.json").read_bytes()),
        json.loads((issued.edition / "analysis.json").read_bytes()),
        read_spec(spec_text, "spec-as-used.yaml"),
        spec_text,
    )


def _every(node: Any, kind: str) -> list[Any]:
    """Return every part of a kind in a document's plain form."""
    below = node.values() if isinstance(node, dict) else node if isinstance(node, list) else ()
    own = [node] if isinstance(node, dict) and node.get("is") == kind else []
    return own + [found for part in below for found in _every(part, kind)]


def _number(plain: Any, key: str) -> Any:
    return next(number for number in _every(plain, "Number") if number["key"] == key)


def _block(plain: Any, kind: str, key: str) -> Any:
    return next(block for block in _every(plain, kind) if block["key"] == key)


def _text(plain: Any) -> None:
    _number(plain, "associations/A1/estimate/value")["text"] = "0.99"


def _exact(plain: Any) -> None:
    _number(plain, "associations/A1/test/p")["exact"] = "0.001"


def _address(plain: Any) -> None:
    _number(plain, "associations/A1/test/p")["key"] = "associations/A9/test/p"


def _swapped(plain: Any) -> None:
    """Let two right numbers change places in one sentence."""
    for prose in _every(plain, "Prose"):
        numbers = [piece for piece in prose["pieces"] if isinstance(piece, dict) and piece["is"] == "Number"]
        if len(numbers) == 2 and numbers[0]["key"].startswith("associations/") and numbers[0] != numbers[1]:
            numbers[0]["text"], numbers[1]["text"] = numbers[1]["text"], numbers[0]["text"]
            for member in ("key", "exact"):
                numbers[0][member], numbers[1][member] = numbers[1][member], numbers[0][member]
            return
    raise AssertionError("no sentence with two numbers")


def _in_words(plain: Any) -> None:
    """Print a coefficient as words, without an address."""
    for prose in _every(plain, "Prose"):
        for place, piece in enumerate(prose["pieces"]):
            if isinstance(piece, dict) and piece.get("key") == "associations/A1/estimate/value":
                prose["pieces"][place] = "0.99"
                return


def _without_numbers(plain: Any) -> None:
    for prose in _every(plain, "Prose"):
        prose["pieces"] = [
            piece
            for piece in prose["pieces"]
            if not (isinstance(piece, dict) and piece.get("key") == "associations/A1/test/p")
        ]


def _without_row(plain: Any) -> None:
    _block(plain, "TableBlock", "results")["rows"] = []


def _date(plain: Any) -> None:
    _every(plain, "Furniture")[0]["date"] = "2020-01-01"


def _released(plain: Any) -> None:
    _every(plain, "SignatureLine")[0]["name"] = "A. N. Other"


def _spec(plain: Any) -> None:
    verbatim = _every(plain, "Verbatim")[0]
    verbatim["text"] = verbatim["text"].replace("0.05", "0.10")


def _quotation(plain: Any) -> None:
    supplied = next(piece for piece in _every(plain, "Supplied") if piece["text"] == "Harrow Lane Bakehouse")
    supplied["text"] = "Barrow Lane Bakehouse"


def _point(plain: Any) -> None:
    data = _block(plain, "FigureBlock", "A1-raw")["data"]
    name = next(name for name, value in data.items() if isinstance(value, list) and value)
    data[name] = data[name][1:]


def _described(plain: Any) -> None:
    figure = _block(plain, "FigureBlock", "A1-raw")
    figure["alternative"] = figure["alternative"].replace("rho 0.", "rho 9.")


@pytest.mark.parametrize(
    ("forge", "told"),
    [
        (_text, "associations/A1/estimate/value was printed as “0.99”, recomputed “"),
        (_exact, "associations/A1/test/p is “0.001” as filed, "),
        (_address, "associations/A9/test/p is printed as “"),
        (_swapped, "a fresh writing does not."),
        (_in_words, "“0.99” holds a number without an address."),
        (_without_numbers, "associations/A1/test/p is not printed."),
        (_without_row, "table results lacks the row A1."),
        (_date, "date of every page is “2020-01-01” as filed, "),
        (_released, "“prepared, A. N. Other, consulting statistician” stands on the control page and not in the spec."),
        (_spec, "is printed as a quotation and is none."),
        (_quotation, "the control page, control, Client states Barrow Lane Bakehouse"),
        (_point, "figure A1-raw is drawn from other values than a fresh one."),
        (_described, "figure A1-raw is described by other numbers than a fresh one: "),
    ],
)
def test_what_a_fresh_writing_does_not_state_is_named(issued: Sealed, forge: Callable[[Any], None], told: str) -> None:
    """A number, place, quotation, name, row or point that is not that of a fresh document is named."""
    plain = json.loads((issued.edition / "document.json").read_bytes())
    forge(plain)
    assert told in "\n".join(document_problems(document_from_plain(plain), _fresh(issued)))


def test_a_document_against_itself_has_nothing_to_name(issued: Sealed) -> None:
    """A document agrees with itself and has no words of its own."""
    fresh = _fresh(issued)
    assert tuple(document_problems(fresh.document, fresh)) == ()
    assert word_remarks(fresh.document, fresh.document) == ()


def test_other_words_are_quoted_and_state_nothing_else(issued: Sealed) -> None:
    """A sentence in other words is a remark with its place; the fresh sentence that it stands for is quoted as well."""
    fresh = _fresh(issued)
    text = (issued.edition / "document.json").read_text(encoding="utf-8")
    old, new = "A printed copy cannot be recalled", "Nobody can call a printed copy back"
    filed = document_of(text.replace(old, new).encode("utf-8"))
    assert tuple(document_problems(filed, fresh)) == ()
    theirs, ours = word_remarks(filed, fresh.document)
    assert theirs.startswith("the control page says “")
    assert theirs.endswith("”; this program has other words.")
    assert new in theirs
    assert ours.startswith("the control page does not say “")
    assert old in ours

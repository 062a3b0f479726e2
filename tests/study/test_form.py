"""The JSON Schema of the spec."""

import json
from typing import Any

import jsonschema
import pytest
import yaml

from rankdocket import vocabulary
from rankdocket.study.json_schema import json_schema
from rankdocket.study.reader import read_spec
from rankdocket.study.writer import spec_as_used
from study.faults import changed
from study.specs import PANEL, PLANKTON

SCHEMA = json_schema()


def accepts(text: str) -> bool:
    """Say whether the schema accepts what an ordinary reader of YAML finds in ``text``."""
    data = json.loads(json.dumps(yaml.safe_load(text), default=str))
    return bool(jsonschema.Draft202012Validator(SCHEMA).is_valid(data))


def test_the_schema_is_itself_valid() -> None:
    """The schema follows draft 2020-12 and names itself."""
    jsonschema.Draft202012Validator.check_schema(SCHEMA)
    assert SCHEMA["$id"] == "urn:rankdocket:spec:1"
    assert SCHEMA["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    assert SCHEMA["title"]


@pytest.mark.parametrize(
    "text", [PLANKTON, spec_as_used(read_spec(PLANKTON, "s")), spec_as_used(read_spec(PANEL, "s"))]
)
def test_sound_specs_are_accepted(text: str) -> None:
    """An editor that knows the schema finds nothing wrong in a sound spec, defaults written out or not."""
    assert accepts(text)


@pytest.mark.parametrize(
    ("old", "new"),
    [
        ("alpha: 0.05", "aplha: 0.05"),
        ("alpha: 0.05", "alpha: 0.6"),
        ("alpha: 0.05", "alpha: 0"),
        ("alpha: 0.05", "alpha: 0.05\n  Alpha: 1"),
        ("role: primary", "role: main"),
        ("  A1:", '  "1":'),
        ("  A1:", '  "no":'),
        ("received/survey.csv", "../survey.csv"),
        ("received/survey.csv", "/survey.csv"),
        ("received/survey.csv", "a//survey.csv"),
        ("[chlorophyll, clarity]", "[chlorophyll]"),
        ('    missing_codes: ["", "n/a"]\n', ""),
        ("title: Chlorophyll and water clarity in Lake Ormel", "title:"),
    ],
)
def test_misspelt_and_impossible_specs_are_refused(old: str, new: str) -> None:
    """What the reader refuses by its shape, the schema refuses too."""
    text = changed(PLANKTON, (old, new))
    assert not accepts(text)


def test_numbers_may_be_numbers_or_text() -> None:
    """A numeric key takes a JSON number and its text; a number where text is meant is accepted as text."""
    assert accepts(changed(PLANKTON, ("alpha: 0.05", 'alpha: "0.05"'), ("unit: m", "unit: 1"), ('"LK-031"', "417")))


def objects(part: Any, inside: str = "") -> list[tuple[str, dict[str, Any]]]:
    """Return every object of the schema that lists keys, with where it stands."""
    found = []
    if isinstance(part, dict):
        if isinstance(part.get("properties"), dict):
            found.append((inside, part))
        for key, value in part.items():
            found.extend(objects(value, f"{inside}/{key}"))
    if isinstance(part, list):
        for position, value in enumerate(part):
            found.extend(objects(value, f"{inside}/{position}"))
    return found


def test_every_key_is_described_and_no_other_is_allowed() -> None:
    """Each key says what it means, and an object with keys takes no further ones."""
    listed = objects(SCHEMA)
    assert len(listed) == 19
    for where, part in listed:
        assert part["additionalProperties"] is False, where
        for key, value in part["properties"].items():
            reference = value.get("$ref", "").removeprefix("#/$defs/")
            assert value.get("description") or SCHEMA["$defs"][reference]["description"], f"{where}/{key}"


def test_closed_lists_are_those_of_the_vocabulary() -> None:
    """The schema offers the words of the vocabulary, in its order."""
    definitions = SCHEMA["$defs"]
    assert definitions["VariableForm"]["properties"]["scale"]["enum"] == list(vocabulary.SCALES)
    assert definitions["SeveralTestsForm"]["properties"]["among"]["enum"] == list(vocabulary.FAMILIES)
    assert definitions["ReportForm"]["properties"]["readers"]["items"]["enum"] == list(vocabulary.READERS)


def test_nothing_may_be_null() -> None:
    """A key that is not needed is left out; the schema nowhere offers nothing as a value."""
    assert "null" not in json.dumps(SCHEMA).replace("|null|", "").replace("null_value", "")

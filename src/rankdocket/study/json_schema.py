"""The JSON Schema of a spec, from the forms that read it."""

from typing import Any, Final

from rankdocket.study.form import SpecForm

SCHEMA_DIALECT: Final = "https://json-schema.org/draft/2020-12/schema"
SCHEMA_ID: Final = "urn:rankdocket:spec:1"


def json_schema() -> dict[str, Any]:
    """Return the JSON Schema (draft 2020-12) of a spec, for editors and for other programs.

    It states the shape; what needs two keys at once, or the data, is not in it.
    """
    found = SpecForm.model_json_schema()
    head = {"$schema": SCHEMA_DIALECT, "$id": SCHEMA_ID, "title": "Spec of a rank correlation study"}
    cleaned = _cleaned(found)
    assert isinstance(cleaned, dict)
    return {**head, **cleaned}


def _cleaned(part: Any) -> Any:
    """Drop class names, and what says "or null": a key that is not needed is left out, never written as nothing."""
    if isinstance(part, list):
        return [_cleaned(item) for item in part]
    if not isinstance(part, dict):
        return part
    kept = {
        key: _cleaned(value)
        for key, value in part.items()
        if not (key == "default" and value is None) and not (key == "title" and isinstance(value, str))
    }
    choices = kept.get("anyOf")
    if isinstance(choices, list) and {"type": "null"} in choices:
        remaining = [choice for choice in choices if choice != {"type": "null"}]
        kept = {**{key: value for key, value in kept.items() if key != "anyOf"}, **remaining[0]}
    return kept

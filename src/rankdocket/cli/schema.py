"""``rankdocket schema``."""

import json

import click

from rankdocket.cli.help import OfficeCommand
from rankdocket.cli.output import Answer, Voice, answer, voiced


@click.command(
    "schema",
    cls=OfficeCommand,
    example="rankdocket schema > study.schema.json",
    short_help="print the JSON Schema of the spec",
)
@voiced
def schema_command(as_json: bool, quiet: bool, debug: bool) -> int:
    """Print the JSON Schema (2020-12) of the spec, for editors that complete and check as you type."""
    return answer(Voice(as_json, quiet, debug), _schema)


def _schema() -> Answer:
    from rankdocket.study.json_schema import json_schema

    schema = json_schema()
    return Answer(json.dumps(schema, ensure_ascii=False, indent=2, sort_keys=True), schema)

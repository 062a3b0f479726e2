"""What a command prints and how it ends: the answer on standard output, everything else on standard error."""

import difflib
import json
import sys
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, Final

import click

from rankdocket.canonical import Plain
from rankdocket.errors import ComputeError, InputError, RankdocketError, RegisterError, RenderError

EXIT_YES: Final = 0
EXIT_NO: Final = 1
EXIT_USAGE: Final = 2
EXIT_INPUT: Final = 3
EXIT_FAILED: Final = 4

ERROR_SCHEMA: Final = "urn:rankdocket:error:1"


@dataclass(frozen=True, slots=True)
class Voice:
    """How a command speaks: ``as_json`` exactly one object, ``quiet`` no answer in words, ``debug`` with traces."""

    as_json: bool
    quiet: bool
    debug: bool


@dataclass(frozen=True, slots=True)
class Answer:
    """What a command found: the words, the same as plain data, and the exit status."""

    words: str
    plain: Mapping[str, Plain]
    status: int = EXIT_YES


def voiced(function: Callable[..., Any]) -> Callable[..., Any]:
    """Give a command the options --json, --quiet and --debug."""
    for option in (
        click.option("--debug", is_flag=True, help="Show where in the program an error arose."),
        click.option("--quiet", is_flag=True, help="Print no answer in words; the exit status tells."),
        click.option("--json", "as_json", is_flag=True, help="Print the answer as one JSON object."),
    ):
        function = option(function)
    return function


def answer(voice: Voice, work: Callable[[], Answer]) -> int:
    """Do the work, print its answer or its error, and return the exit status."""
    try:
        found = work()
    except RankdocketError as error:
        if voice.debug:
            raise
        return _failed(voice, error)
    except OSError as error:
        if voice.debug or isinstance(error, BrokenPipeError):
            raise
        return _failed(voice, RegisterError(f"{error.filename or 'a file'}: {error.strerror or error}. Nothing was sealed."))
    if voice.as_json:
        click.echo(json.dumps(found.plain, ensure_ascii=False, sort_keys=True))
    elif not voice.quiet:
        click.echo(found.words)
    return found.status


def progress(voice: Voice) -> Callable[[str], None]:
    """Return what tells how far the work is: on a terminal's standard error, one line that is written over."""
    if voice.quiet or not sys.stderr.isatty():
        return lambda _: None
    return lambda text: click.echo(f"\r{text:<60}\r", err=True, nl=False)


def fail_usage(error: click.UsageError) -> None:
    """Say what is wrong with a command line, in our words."""
    where = error.ctx.command_path if error.ctx is not None else "rankdocket"
    click.echo(f"{where}: {_usage_words(error)} See: {where} --help", err=True)


def _usage_words(error: click.UsageError) -> str:
    match error:
        case click.NoSuchOption():
            known = [name for parameter in error.ctx.command.params for name in parameter.opts] if error.ctx else []
            return f"there is no {error.option_name}.{_nearest(error.option_name, known)}"
        case click.MissingParameter():
            name = error.param.human_readable_name if error.param is not None else "something"
            if isinstance(error.param, click.Option):
                return f"{error.param.opts[0]} is needed."
            return f"{name.upper()} is needed."
        case click.BadParameter():
            name = error.param.opts[0] if error.param is not None else "a value"
            return f"the value of {name} cannot be used."
        case _:
            words = error.format_message()
            if words.startswith("No such command"):
                given = words.split("'")[1]
                known = list(error.ctx.command.commands) if error.ctx and isinstance(error.ctx.command, click.Group) else []
                return f"there is no command {given}.{_nearest(given, known)}"
            if "unexpected extra argument" in words:
                return "there is one word too many."
            return "the command line cannot be read."


def _nearest(word: str, known: list[str]) -> str:
    near = difflib.get_close_matches(word, known, 1)
    return f" nearest: {near[0]}." if near else ""


def _failed(voice: Voice, error: RankdocketError) -> int:
    status = EXIT_INPUT if isinstance(error, InputError) else EXIT_FAILED
    kind = {InputError: "input", ComputeError: "compute", RenderError: "render", RegisterError: "register"}
    if voice.as_json:
        faults = error.faults if isinstance(error, InputError) else ()
        click.echo(
            json.dumps(
                {
                    "schema": ERROR_SCHEMA,
                    "kind": kind.get(type(error), "error"),
                    "message": str(error),
                    "faults": [
                        {
                            "file": fault.place.file,
                            "line": fault.place.line,
                            "column": fault.place.column,
                            "field": fault.field,
                            "what": fault.what,
                            "remedy": fault.remedy,
                            "number": fault.number,
                        }
                        for fault in faults
                    ],
                },
                ensure_ascii=False,
                sort_keys=True,
            )
        )
    else:
        click.echo(str(error), err=True)
    return status

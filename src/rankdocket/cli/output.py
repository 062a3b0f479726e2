"""What a command prints and how it ends: the answer on standard output, everything else on standard error."""

import difflib
import json
import os
import signal
import sys
import traceback
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Any, Final

import click

from rankdocket.canonical import Plain
from rankdocket.errors import ComputeError, Fault, InputError, RankdocketError, RegisterError, RenderError

EXIT_YES: Final = 0
EXIT_NO: Final = 1
EXIT_USAGE: Final = 2
EXIT_INPUT: Final = 3
EXIT_FAILED: Final = 4

_LINE: Final = 60
"""So wide is the line that tells how far the work is."""

NOTHING_COMPUTED: Final = "Nothing was computed."
"""Said once, behind the last fault, whenever the user's files cannot be used."""

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
    """Do the work, print its answer or its error, and return the exit status.

    What is done stays done: from then on the process no longer ends on an interrupt or a request to end, which would
    say that nothing was sealed. When the answer cannot be written, a reader who has gone leaves it to the status, and
    a full disk behind standard output is said on standard error.
    """
    try:
        found = work()
    except Exception as error:  # noqa: BLE001 - whatever a library raises, the user gets a sentence and status 4
        _clear(voice)
        if voice.debug:
            traceback.print_exception(error)
        return _failed(voice, _as_ours(error))
    _end_only_by_itself()
    _clear(voice)
    try:
        if voice.as_json:
            click.echo(json.dumps(found.plain, ensure_ascii=False, sort_keys=True))
        elif not voice.quiet:
            click.echo(found.words)
    except BrokenPipeError:
        close_quietly()
    except OSError as error:
        close_quietly()
        click.echo(f"The work is done and its answer could not be written: {error.strerror or error}.", err=True)
        return EXIT_FAILED
    return found.status


def _end_only_by_itself() -> None:
    for request in (signal.SIGINT, signal.SIGTERM):
        signal.signal(request, signal.SIG_IGN)


def close_quietly() -> None:
    """Let nobody read what is still to come: the reader has gone, and Python would complain again while closing."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def progress(voice: Voice) -> Callable[[str], None]:
    """Return what tells how far the work is: on a terminal's standard error, one line that is written over."""
    if not _shows_progress(voice):
        return lambda _: None
    return lambda text: click.echo(f"\r{text:<{_LINE}}\r", err=True, nl=False)


def _clear(voice: Voice) -> None:
    if _shows_progress(voice):
        click.echo(f"\r{'':<{_LINE}}\r", err=True, nl=False)


def _shows_progress(voice: Voice) -> bool:
    return not voice.quiet and sys.stderr.isatty()


def fail_usage(error: click.UsageError, as_json: bool) -> None:
    """Say what is wrong with a command line, in our words."""
    where = error.ctx.command_path if error.ctx is not None else "rankdocket"
    _say(as_json, "usage", f"{where}: {_usage_words(error)} See: {where} --help", ())


def fail_interrupted(as_json: bool) -> None:
    """Say that the work was interrupted."""
    _say(as_json, "interrupted", "Interrupted: nothing was sealed.", ())


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
        case click.BadOptionUsage():
            takes_none = "does not take" in error.format_message()
            return f"{error.option_name} {'takes no value' if takes_none else 'needs a value'}."
        case click.BadParameter():
            name = error.param.opts[0] if error.param is not None else "a value"
            return f"the value of {name} cannot be used."
        case _:
            words = error.format_message()
            if words.startswith("No such command"):
                given = words.split("'")[1]
                known = (
                    list(error.ctx.command.commands) if error.ctx and isinstance(error.ctx.command, click.Group) else []
                )
                return f"there is no command {given}.{_nearest(given, known)}"
            if "unexpected extra argument" in words:
                return "there is one word too many."
            return "the command line cannot be read."


def _nearest(word: str, known: list[str]) -> str:
    near = difflib.get_close_matches(word, known, 1)
    return f" nearest: {near[0]}." if near else ""


def _as_ours(error: Exception) -> RankdocketError:
    if isinstance(error, RankdocketError):
        return error
    if isinstance(error, OSError):
        where = error.filename or "a file that it did not name"
        return RegisterError(f"The system refused {where}: {error.strerror or error}. Nothing was sealed.")
    return RankdocketError(
        f"The program itself failed ({type(error).__name__}: {error}). Nothing was sealed; --debug shows where it failed."
    )


def _failed(voice: Voice, error: RankdocketError) -> int:
    kinds = {InputError: "input", ComputeError: "compute", RenderError: "render", RegisterError: "register"}
    faults = error.faults if isinstance(error, InputError) else ()
    message = str(error)
    if faults:
        message = f"{message}\n{NOTHING_COMPUTED}"
    _say(voice.as_json, kinds.get(type(error), "program"), message, faults)
    return EXIT_INPUT if isinstance(error, InputError) else EXIT_FAILED


def _say(as_json: bool, kind: str, message: str, faults: tuple[Fault, ...]) -> None:
    if not as_json:
        click.echo(message, err=True)
        return
    plain = {
        "schema": ERROR_SCHEMA,
        "kind": kind,
        "message": message,
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
    }
    click.echo(json.dumps(plain, ensure_ascii=False, sort_keys=True))

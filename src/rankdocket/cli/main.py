"""The command ``rankdocket``: which command, which exit status; the work is done in the workflow."""

import signal
import sys
from types import FrameType
from typing import Final, NoReturn

import click

from rankdocket.cli.help import OfficeCommand, OfficeGroup
from rankdocket.cli.issue import issue_command
from rankdocket.cli.output import EXIT_USAGE, close_quietly, fail_interrupted, fail_usage
from rankdocket.cli.schema import schema_command
from rankdocket.cli.screen import screen_command
from rankdocket.cli.size import size_command
from rankdocket.cli.verify import verify_command

EXIT_INTERRUPTED: Final = 130
"""Also when the system asks the program to end: either way nothing was sealed, and README knows one status for it."""

COMMANDS: Final[tuple[OfficeCommand, ...]] = (
    size_command,
    screen_command,
    issue_command,
    verify_command,
    schema_command,
)


@click.group(
    cls=OfficeGroup,
    example='rankdocket issue studies/first-look --reason "first issue"',
    invoke_without_command=True,
    context_settings={"help_option_names": ["--help"]},
)
@click.option("--version", is_flag=True, help="Print the version and stop.")
@click.pass_context
def rankdocket(context: click.Context, version: bool) -> None:
    """Rank correlation studies: from one spec file to a numbered report that stands up to a recheck."""
    if version:
        from importlib.metadata import version as version_of

        click.echo(f"rankdocket {version_of('rankdocket')}")
    elif context.invoked_subcommand is None:
        click.echo(context.get_help())


for _command in COMMANDS:
    rankdocket.add_command(_command)


def main() -> NoReturn:
    """Run the command line and end the process with its exit status."""
    as_json = "--json" in sys.argv  # also where the command line as a whole cannot be read
    if signal.getsignal(signal.SIGTERM) is signal.SIG_DFL:  # who had such requests ignored goes on having them ignored
        signal.signal(signal.SIGTERM, _interrupt)
    try:
        status = rankdocket.main(standalone_mode=False, prog_name="rankdocket")
    except click.UsageError as error:
        fail_usage(error, as_json)
        status = EXIT_USAGE
    except (KeyboardInterrupt, click.Abort):
        fail_interrupted(as_json)
        status = EXIT_INTERRUPTED
    except SystemExit:
        # How click ends when the reader of a help page has gone: that is no answer "no".
        close_quietly()
        status = 0
    sys.exit(status if isinstance(status, int) else 0)


def _interrupt(_number: int, _frame: FrameType | None) -> None:
    # A second request must not cut short what takes back the first one's half-done work.
    signal.signal(signal.SIGTERM, signal.SIG_IGN)
    raise KeyboardInterrupt

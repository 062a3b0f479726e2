"""``rankdocket screen``."""

import click

from rankdocket.cli.help import OfficeCommand
from rankdocket.cli.output import EXIT_NO, EXIT_YES, Answer, Voice, answer, voiced


@click.command(
    "screen",
    cls=OfficeCommand,
    example="rankdocket screen studies/first-look",
    short_help="look at data and requirements; no joint result is shown",
)
@click.argument("study")
@voiced
def screen_command(study: str, as_json: bool, quiet: bool, debug: bool) -> int:
    """Read STUDY (its folder or its spec) and show what arrived, each variable alone, and the requirements.

    Nothing joint is computed or shown: no coefficient, no sign, no plot of two variables. Ends with status 1 when a
    requirement is not met.
    """
    return answer(Voice(as_json, quiet, debug), lambda: _screen(study))


def _screen(study: str) -> Answer:
    from rankdocket.cli.refusals import require_usable_time

    require_usable_time()
    from rankdocket.workflow.screen import screen
    from rankdocket.writing.screening_page import screening_page

    screening = screen(study)
    return Answer(screening_page(screening), screening.plain, EXIT_YES if screening.all_met else EXIT_NO)

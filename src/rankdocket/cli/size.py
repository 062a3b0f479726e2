"""``rankdocket size``."""

import click

from rankdocket.cli.help import OfficeCommand
from rankdocket.cli.output import Answer, Voice, answer, voiced


@click.command(
    "size",
    cls=OfficeCommand,
    example="rankdocket size --to-show 0.40 --power 0.90 --questions 6",
    short_help="how many rows a study needs",
)
@click.option("--to-show", metavar="RHO", help="The rho that the study is to show, where it is there.")
@click.option("--power", metavar="SHARE", help="With which probability it is to be shown (default: 0.80).")
@click.option("--alpha", metavar="SHARE", help="The level that all questions keep together (default: 0.05).")
@click.option("--sidedness", metavar="WORDS", help="two-sided or one-sided (default: two-sided).")
@click.option("--questions", metavar="COUNT", help="Associations decided together, which share alpha (default: 1).")
@click.option("--to-measure", metavar="RHO", help="The rho expected, where an interval is planned for, not a test.")
@click.option("--within-width", metavar="WIDTH", help="How wide its interval may be on average; with --to-measure.")
@click.option("--level", metavar="SHARE", help="Of the interval: 0.90, 0.95 or 0.99 (default: 0.95).")
@click.option(
    "--expected-classes",
    metavar="SHARES",
    multiple=True,
    help='How often each value of a variable with ties is expected: "10 20 40 20 10"; twice for two variables.',
)
@click.option("--missing", metavar="SHARE", help="Share of the rows collected that will lack a value (default: 0).")
@click.option("--page", metavar="FILE", help="Write one page for a proposal: a name that ends in .html or .pdf.")
@voiced
def size_command(
    to_show: str | None,
    power: str | None,
    alpha: str | None,
    sidedness: str | None,
    questions: str | None,
    to_measure: str | None,
    within_width: str | None,
    level: str | None,
    expected_classes: tuple[str, ...],
    missing: str | None,
    page: str | None,
    as_json: bool,
    quiet: bool,
    debug: bool,
) -> int:
    """Say how many rows a study needs, before there are any: to show a rho, or to measure one within a width.

    The plan holds for variables that follow the bivariate normal law, ties as expected; it is for proposals, and says
    nothing about data that are there.
    """

    def work() -> Answer:
        from rankdocket.cli.refusals import require_page_name
        from rankdocket.cli.size_options import Given, read_question
        from rankdocket.workflow.size import size

        require_page_name(page)
        asked = Given(
            to_show,
            power,
            alpha,
            sidedness,
            questions,
            to_measure,
            within_width,
            level,
            expected_classes,
            missing,
        )
        sized = size(read_question(asked))
        if page is None:
            return Answer(sized.words, sized.plain)
        from rankdocket.workflow.size_page import write_page

        write_page(sized, page)
        return Answer(f"{sized.words}\n\nThe page lies at {page}", {**sized.plain, "page": page})

    return answer(Voice(as_json, quiet, debug), work)

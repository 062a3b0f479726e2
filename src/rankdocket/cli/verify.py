"""``rankdocket verify``."""

import click

from rankdocket.canonical import Plain
from rankdocket.cli.help import OfficeCommand
from rankdocket.cli.output import EXIT_NO, EXIT_YES, Answer, Voice, answer, progress, voiced


@click.command(
    "verify",
    cls=OfficeCommand,
    example="rankdocket verify studies/gasket-creep",
    short_help="make an edition again from its record copy and say what agrees",
)
@click.argument("study")
@click.option("--edition", metavar="N", help="Which edition (default: the last one issued).")
@voiced
def verify_command(study: str, edition: str | None, as_json: bool, quiet: bool, debug: bool) -> int:
    """Recompute an edition of STUDY from its own record copy and say what agrees.

    The register's chain, the digests of all files, and every number, table and page are held against a fresh
    computation; every edition of the register has to be there. Ends with status 1 when something does not agree, and
    names it.
    """
    voice = Voice(as_json, quiet, debug)
    return answer(voice, lambda: _verify(study, edition, voice))


def _verify(study: str, edition: str | None, voice: Voice) -> Answer:
    from rankdocket.cli.refusals import require_usable_time

    require_usable_time()
    from rankdocket.workflow.differences import counted
    from rankdocket.workflow.verify import verify

    found = verify(study, edition=edition, progress=progress(voice))
    seen = f"{counted(found.numbers, 'number')}, {counted(found.files, 'file')}"
    if found.agrees:
        lines = [
            f"Everything agrees ({seen}).",
            f"Edition {found.edition}: {found.grade}.",
        ]
    else:
        things = f"{counted(len(found.problems), 'thing')} {'does' if len(found.problems) == 1 else 'do'}"
        lines = [f"{things} not agree (edition {found.edition}: {seen} looked at):"]
        lines += [f"  {number}. {problem}" for number, problem in enumerate(found.problems, start=1)]
    lines += list(found.remarks)
    plain: dict[str, Plain] = {
        "schema": "urn:rankdocket:verification:1",
        "edition": found.edition,
        "grade": found.grade,
        "agrees": found.agrees,
        "numbers": found.numbers,
        "files": found.files,
        "problems": list(found.problems),
        "remarks": list(found.remarks),
    }
    return Answer("\n".join(lines), plain, EXIT_YES if found.agrees else EXIT_NO)

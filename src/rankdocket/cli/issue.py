"""``rankdocket issue``."""

import click

from rankdocket.canonical import Plain
from rankdocket.cli.help import OfficeCommand
from rankdocket.cli.output import Answer, Voice, answer, progress, voiced


@click.command(
    "issue",
    cls=OfficeCommand,
    example='rankdocket issue studies/first-look --reason "first issue"',
    short_help="compute a study and seal a numbered edition",
)
@click.argument("study")
@click.option("--reason", required=True, metavar="TEXT", help="Why this edition is issued; printed and filed.")
@click.option("--draft", is_flag=True, help="Seal a lettered draft, marked on every page, instead of an edition.")
@click.option("--by", "actor", metavar="NAME", help="Who issues it, as claimed (default: the account's name).")
@voiced
def issue_command(
    study: str, reason: str, draft: bool, actor: str | None, as_json: bool, quiet: bool, debug: bool
) -> int:
    """Compute STUDY (its folder or its spec) and seal the next numbered edition of it, whole or not at all.

    Unchanged inputs write nothing and say so. Print the head digest somewhere that is not in your own hands: the
    register cannot show that its last lines were cut off.
    """
    voice = Voice(as_json, quiet, debug)
    return answer(voice, lambda: _issue(study, reason, draft, actor, voice))


def _issue(study: str, reason: str, draft: bool, actor: str | None, voice: Voice) -> Answer:
    from rankdocket.cli.refusals import require_reason, require_usable_time

    require_reason(reason)
    require_usable_time()
    from rankdocket.workflow.issue import issue

    done = issue(study, reason=reason, draft=draft, actor=actor, progress=progress(voice))
    kind = "Draft" if draft else "Edition"
    plain: dict[str, Plain] = {
        "schema": "urn:rankdocket:issued:1",
        "changed": done.changed,
        "edition": done.edition,
        "folder": str(done.folder),
        "report": str(done.folder / "report.pdf"),
        "head": done.head,
        "findings": dict(done.findings),
        "pages": done.pages,
    }
    if not done.changed:
        words = (
            f"Nothing has changed since {kind.lower()} {done.edition}: nothing was written.\n"
            f"The report lies at {done.folder / 'report.pdf'}"
        )
        return Answer(words, plain)
    findings = ", ".join(f"{name} {word}" for name, word in done.findings.items())
    words = (
        f"{kind} {done.edition} is sealed, {done.pages} pages. Findings: {findings}.\n"
        f"  {done.folder / 'report.pdf'}\n"
        f"  {done.folder / 'report.html'}\n"
        f"Register head, to be deposited with somebody else: {done.head}"
    )
    return Answer(words, plain)

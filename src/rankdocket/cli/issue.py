"""``rankdocket issue``."""

from pathlib import Path

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

    Unchanged inputs write nothing and say so; the last edition's files are then held against their digests, and one
    that is no longer as it was sealed ends the command with status 4. Print the head digest somewhere that is not in
    your own hands: the register cannot show that its last lines were cut off.
    """
    voice = Voice(as_json, quiet, debug)
    return answer(voice, lambda: _issue(study, reason, draft, actor, voice))


def _issue(study: str, reason: str, draft: bool, actor: str | None, voice: Voice) -> Answer:
    from rankdocket.cli.refusals import require_reason, require_usable_time

    require_reason(reason)
    require_usable_time()
    from rankdocket.workflow.issue import issue
    from rankdocket.workflow.study_folder import as_written, folder_path_of

    done = issue(study, reason=reason, draft=draft, actor=actor, progress=progress(voice))
    written = folder_path_of(study)
    folder = as_written(str(done.folder), Path(written), written)
    kind = "Draft" if draft else "Edition"
    plain: dict[str, Plain] = {
        "schema": "urn:rankdocket:issued:1",
        "changed": done.changed,
        "edition": done.edition,
        "folder": folder,
        "report": f"{folder}/report.pdf",
        "head": done.head,
    }
    if done.findings is None:
        words = (
            f"Nothing has changed since {kind.lower()} {done.edition}: nothing was written.\n"
            f"The report lies at {folder}/report.pdf"
        )
        return Answer(words, plain)
    computed: dict[str, Plain] = {"findings": dict(done.findings), "pages": done.pages}
    findings = ", ".join(f"{name} {word}" for name, word in done.findings.items())
    words = (
        f"{kind} {done.edition} is sealed, {done.pages} pages. Findings: {findings}.\n"
        f"  {folder}/report.pdf\n"
        f"  {folder}/report.html\n"
        f"Register head, to be deposited with somebody else: {done.head}"
    )
    return Answer(words, plain | computed)

"""Verifying: a fresh edition is made again byte for byte, and whatever was altered is named, however well repaired.

Editions that another program made stand in test_verify_another_program.py.
"""

import json
import re
import shutil
from collections.abc import Callable
from pathlib import Path

import pytest

from rankdocket.cli.output import NOTHING_COMPUTED
from rankdocket.register import chain
from rankdocket.workflow.verify import verify
from workflow.office import (
    DATA,
    Ran,
    Sealed,
    forge,
    numbers_in,
    replaced_once,
    reseal,
    rewrite_line,
    run,
    with_black_boxes,
    with_line,
)


@pytest.fixture
def study(issued: Sealed, tmp_path: Path) -> Path:
    """A copy of the issued study that may be spoiled."""
    return Path(shutil.copytree(issued.study, tmp_path / "first-look"))


def _other_digit(text: str) -> str:
    """Return a number's text with its last digit changed."""
    return re.sub(r"\d(?=\D*$)", lambda found: str((int(found[0]) + 1) % 10), text)


def _problems(study: Path) -> str:
    found = verify(str(study))
    assert (found.grade, found.agrees) == ("different", False)
    return "\n".join(found.problems)


def _value_key(study: Path) -> dict[str, str]:
    document = json.loads((study / "editions" / "1" / "document.json").read_bytes())
    return next(number for number in numbers_in(document) if number["key"] == "associations/A1/estimate/value")


def test_a_fresh_edition_is_identical(issued: Sealed) -> None:
    """The command ends with 0 and says how many numbers and files agree; nothing is written."""
    names = sorted(path.name for path in issued.study.iterdir())
    ran = run("verify", "first-look", "--json", cwd=issued.study.parent)
    numbers = list(numbers_in(json.loads((issued.edition / "document.json").read_bytes())))
    files = [path for path in issued.edition.rglob("*") if path.is_file()]
    assert (ran.status, ran.err) == (0, "")
    assert ran.plain == {
        "schema": "urn:rankdocket:verification:1",
        "edition": "1",
        "grade": "identical",
        "agrees": True,
        "numbers": len(numbers),
        "files": len(files),
        "problems": [],
        "remarks": [],
    }
    assert sorted(path.name for path in issued.study.iterdir()) == names


def test_a_draft_is_verified_by_its_name(drafted: Sealed) -> None:
    """A draft is made again byte for byte as an edition is."""
    found = verify(str(drafted.study / "study.yaml"), edition="1A")
    assert (found.edition, found.grade) == ("1A", "identical")


def test_a_changed_rank_is_named(study: Path) -> None:
    """A rank changed in the worksheet file is named by file, line and column, although every digest was repaired."""
    lines = (study / "editions" / "1" / "ranks-A1.csv").read_text(encoding="utf-8").splitlines()
    cells = lines[3].split(",")
    column = lines[0].split(",").index("rank_x")
    was, cells[column] = cells[column], str(int(cells[column]) + 1)
    forge(study, "1", "ranks-A1.csv", replaced_once(lines[3], ",".join(cells)))
    assert f"ranks-A1.csv: line 4, rank_x is “{cells[column]}” as filed, “{was}” as recomputed." in _problems(study)


def test_a_changed_count_is_named(study: Path) -> None:
    """A count changed in analysis.json is named by its address, although every digest was repaired."""
    count = json.loads((study / "editions" / "1" / "analysis.json").read_bytes())["associations"]["A1"]["test"]["count"]
    forge(study, "1", "analysis.json", replaced_once(f'"count": "{count}"', f'"count": "{int(count) + 2}"'))
    told = f"analysis.json: associations/A1/test/count is “{int(count) + 2}” as filed, “{count}” as recomputed."
    assert told in _problems(study)


def test_a_changed_digit_on_the_page_is_named(study: Path) -> None:
    """One digit changed in report.html is named by the number's address, although every digest was repaired."""
    number = _value_key(study)
    old = f'data-key="{number["key"]}">{number["text"]}<'
    new = f'data-key="{number["key"]}">{_other_digit(number["text"])}<'
    forge(study, "1", "report.html", replaced_once(old, new))
    told = f"{number['key']} is printed as “{_other_digit(number['text'])}”, recomputed “{number['text']}”."
    assert f"report.html: {told}" in _problems(study)


def test_a_changed_digit_in_the_document_is_named(study: Path) -> None:
    """One digit changed in document.json is named by its place, although every digest was repaired."""
    number = _value_key(study)
    pattern = re.compile(rf'("key": "{number["key"]}",\s*"text": ")({re.escape(number["text"])})(")')
    forge(study, "1", "document.json", lambda text: pattern.sub(lambda m: m[1] + _other_digit(m[2]) + m[3], text, 1))
    told = f"text is “{_other_digit(number['text'])}” as filed, “{number['text']}” as recomputed."
    assert re.search(rf"document\.json: document/\S+/{re.escape(told)}", _problems(study))


@pytest.mark.slow
def test_a_changed_cell_of_the_data_as_received_is_named_with_all_that_follows(study: Path) -> None:
    """Data altered in the record copy give another worksheet and other sums: the files that differ are named."""
    forge(study, "1", DATA, with_line(5, lambda cells: [*cells[:2], "1"]))
    problems = _problems(study)
    assert f"register: the digest of {DATA} is not the one filed in line 1." in problems
    for name in ("analysis.json", "rows.csv", "ranks-A1.csv", "results.csv", "document.json", "report.pdf"):
        assert f"{name}: " in problems


def _append(path: Path) -> None:
    path.write_bytes(path.read_bytes() + b" ")


def test_files_that_were_touched_without_repair_are_named(study: Path) -> None:
    """A byte added to a file, a file removed and a file added are each named; the command ends with 1."""
    edition = study / "editions" / "1"
    _append(edition / "extracts" / "summary.txt")
    (edition / "figures" / "A1-raw.svg").unlink()
    (edition / "notes.txt").write_bytes(b"")
    ran = run("verify", ".", cwd=study)
    assert (ran.status, ran.err) == (1, "")
    assert re.match(r"\d+ things do not agree \(edition 1: \d+ numbers, \d+ files looked at\):\n  1\. ", ran.out)
    for told in (
        "extracts/summary.txt was altered",
        "figures/A1-raw.svg is missing",
        "notes.txt is not listed in SHA256SUMS",
        "figures/A1-raw.svg: only in the recomputation.",
        "notes.txt: only in the edition.",
    ):
        assert told in ran.out


@pytest.mark.parametrize(
    ("spoil", "told"),
    [
        (lambda data: b"", "register: no line says that 1 was sealed."),
        (lambda data: data[:-40], "line 1 is torn"),
        (lambda data: data.replace(b"first issue", b"First issue"), "line 1 was altered"),
    ],
    ids=["without its line", "torn", "altered"],
)
def test_a_register_that_was_cut_or_altered_is_named(study: Path, spoil: Callable[[bytes], bytes], told: str) -> None:
    """Without a sound line an edition does not agree, whatever its files say."""
    register = study / "register.jsonl"
    register.write_bytes(spoil(register.read_bytes()))
    assert told in _problems(study)


def test_a_list_of_digests_repaired_without_the_register_is_named(study: Path) -> None:
    """The register's line holds the digest of SHA256SUMS: another list is not the one that was sealed."""
    line = (study / "register.jsonl").read_bytes()
    forge(study, "1", "README.txt", replaced_once("Record copy", "Record  copy"))
    (study / "register.jsonl").write_bytes(line)
    problems = _problems(study)
    assert "register: the digest of SHA256SUMS of 1 is not the one filed in line 1." in problems
    assert "README.txt: line 1 reads “Record  copy of RD-0001, edition 1”" in problems


def test_a_repaired_chain_still_has_another_head(study: Path, issued: Sealed) -> None:
    """Who rewrote the register cannot give it the head that was deposited elsewhere."""
    deposited = chain.head(issued.study / "register.jsonl")
    forge(study, "1", "README.txt", replaced_once("Record copy", "Record  copy"))
    assert chain.check(study / "register.jsonl") == ()
    assert len(chain.check(study / "register.jsonl", deposited)) == 1


@pytest.fixture(scope="module")
def two_editions(issued: Sealed, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A study with editions 1 and 2, never altered."""
    study = Path(shutil.copytree(issued.study, tmp_path_factory.mktemp("two editions") / "first-look"))
    changed = with_line(5, lambda cells: [*cells[:2], "1"])((study / DATA).read_text(encoding="utf-8"))
    (study / DATA).write_text(changed, encoding="utf-8")
    assert run("issue", ".", "--reason", "a volume was corrected", cwd=study).status == 0
    return study


def test_a_plan_changed_between_editions_is_listed_key_by_key(
    issued: Sealed, here: Callable[..., Ran], tmp_path: Path
) -> None:
    """From the two plan.json files, in section 7 and under deviations; the edition verifies."""
    study = Path(shutil.copytree(issued.study, tmp_path / "first-look"))
    spec = (study / "study.yaml").read_text(encoding="utf-8")
    assert spec.count("alpha: 0.05") == 1
    (study / "study.yaml").write_text(spec.replace("alpha: 0.05", "alpha: 0.01"), encoding="utf-8")
    assert here("issue", ".", "--reason", "another alpha", cwd=study).status == 0
    page = re.sub(r"<[^>]+>", " ", (study / "editions" / "2" / "report.html").read_text(encoding="utf-8"))
    assert re.search(r"inference\.alpha\s+(?:\"|&#34;|&quot;)0\.05\S+\s+(?:\"|&#34;|&quot;)0\.01", page)
    assert "whose results had been seen: section" in page
    assert here("verify", ".", cwd=study).status == 0


def test_a_deleted_edition_is_missed_whichever_is_verified(
    two_editions: Path, here: Callable[..., Ran], tmp_path: Path
) -> None:
    """Verifying edition 2 names edition 1, which the register holds and the folder does not; everything else agrees."""
    study = Path(shutil.copytree(two_editions, tmp_path / "first-look"))
    shutil.rmtree(study / "editions" / "1")
    ran = here("verify", "./first-look/", cwd=tmp_path)
    assert (ran.status, ran.err) == (1, "")
    head, problem = ran.out.splitlines()
    assert re.fullmatch(r"1 thing does not agree \(edition 2: \d+ numbers, \d+ files looked at\):", head)
    assert problem == (
        "  1. ./first-look/editions/1 is missing: line 1 of the register holds edition 1, issued on 2026-02-02. "
        "Restore the folder from a copy."
    )


@pytest.mark.parametrize(("deleted", "asked"), [("1", ("--edition", "1")), ("2", ())])
def test_a_deleted_edition_that_is_asked_for_does_not_agree(
    two_editions: Path, here: Callable[..., Ran], tmp_path: Path, deleted: str, asked: tuple[str, ...]
) -> None:
    """An edition that only the register holds, asked for or the last one, is told to be missing: the answer is no."""
    study = Path(shutil.copytree(two_editions, tmp_path / "first-look"))
    shutil.rmtree(study / "editions" / deleted)
    ran = here("verify", "first-look", *asked, "--json", cwd=tmp_path)
    assert (ran.status, ran.err) == (1, "")
    plain = ran.plain
    assert (plain["edition"], plain["grade"], plain["numbers"], plain["files"]) == (deleted, "different", 0, 0)
    [problem] = plain["problems"]
    assert problem.startswith(f"first-look/editions/{deleted} is missing: line {deleted} of the register holds edition")


def test_a_deleted_draft_and_an_altered_register_are_both_named(
    drafted: Sealed, here: Callable[..., Ran], tmp_path: Path
) -> None:
    """A register that was altered still shows which draft it held; the only edition deleted is not "nothing issued"."""
    study = Path(shutil.copytree(drafted.study, tmp_path / "gasket-creep"))
    shutil.rmtree(study / "editions" / "1A")
    register = (study / "register.jsonl").read_bytes()
    (study / "register.jsonl").write_bytes(register + b"{}\n")
    ran = here("verify", "gasket-creep", cwd=tmp_path)
    assert (ran.status, ran.err) == (1, "")
    assert ran.out.startswith("2 things do not agree (edition 1A: 0 numbers, 0 files looked at):\n")
    assert "gasket-creep/register.jsonl: line 2 was altered: " in ran.out
    assert "gasket-creep/editions/1A is missing: line 1 of the register holds draft 1A, drafted on " in ran.out


def test_an_edition_that_is_still_hidden_is_told_apart_from_a_deleted_one(study: Path) -> None:
    """A crash between line and folder leaves a hidden folder, which the next issue completes."""
    (study / "editions" / "1").rename(study / "editions" / ".sealing-1")
    [problem] = verify(str(study)).problems
    assert problem.startswith(f"{study / 'editions' / '.sealing-1'} still has a hidden name although line 1 seals it: ")


def test_a_register_whose_end_was_cut_off_is_missed_by_the_edition_left_over(
    two_editions: Path, tmp_path: Path
) -> None:
    """An edition on disk without a line is named whichever edition is verified."""
    study = Path(shutil.copytree(two_editions, tmp_path / "first-look"))
    first, _second = chain.read(study / "register.jsonl")
    (study / "register.jsonl").write_bytes(first.raw + b"\n")
    assert verify(str(study), edition="1").problems == ("register: no line says that 2 was sealed.",)


@pytest.mark.parametrize(
    ("words", "told"),
    [
        ((".",), '.: nothing has been issued. Write: rankdocket issue . --reason "first issue". (message 56)'),
        ((".", "--edition", "4"), ".: there is no edition 4. Write: rankdocket issue . --reason"),
        (
            (".", "--edition", "four"),
            "--edition: 'four' is not an edition. Write a number such as 2, or 2A for a draft. (message 32)",
        ),
        (("./nowhere",), "./nowhere: there is no such study. Write its folder or its spec. (message 55)"),
        (("study.yam",), "study.yam: there is no such study. Write its folder or its spec. (message 55)"),
    ],
)
def test_what_was_never_issued_cannot_be_verified(
    first_look: Path, here: Callable[..., Ran], words: tuple[str, ...], told: str
) -> None:
    """A study or an edition that is not there is a fault of what was given: status 3, numbered, with what to write."""
    ran = here("verify", *words, cwd=first_look)
    assert (ran.status, ran.out) == (3, "")
    assert ran.err.startswith(told)
    assert ran.err.count(NOTHING_COMPUTED) == 1


def test_an_edition_that_does_not_exist_is_answered_with_those_that_do(
    two_editions: Path, here: Callable[..., Ran]
) -> None:
    """The path is told as it was written, and the editions that could be meant."""
    ran = here("verify", "./study.yaml", "--edition", "7", cwd=two_editions)
    assert ran.status == 3
    assert ran.err.startswith("./study.yaml: there is no edition 7. Write one of: 1, 2. (message 56)")


@pytest.mark.parametrize("member", ["spec", "data", "plan", "analysis", "inputs"])
def test_a_line_with_other_digests_of_what_went_in_is_named(study: Path, member: str) -> None:
    """A digest in the register's line that is not that of the filed spec, data, plan, analysis or all inputs is named."""
    other = "0" * 64
    rewrite_line(study, "1", {member: {DATA: other} if member == "data" else other})
    name = {"spec": "spec.yaml", "data": DATA, "plan": "plan.json", "analysis": "analysis.json"}.get(member)
    told = {
        f"register: the digest of {name} is not the one filed in line 1."
        if name
        else "register: spec, data and the program's digest in versions.json do not give the digest of the inputs that "
        "line 1 files."
    }
    assert set(_problems(study).splitlines()) == told


def test_a_black_box_on_every_page_is_named(study: Path) -> None:
    """A PDF with the same text and a box drawn over every page is not the one this program makes."""
    report = study / "editions" / "1" / "report.pdf"
    report.write_bytes(with_black_boxes(report.read_bytes()))
    reseal(study, "1")
    told = "report.pdf: the text of every page is the same, and something else in the file is not."
    assert _problems(study) == told


@pytest.mark.parametrize(
    ("name", "content"),
    [
        ("versions.json", "[]"),
        ("versions.json", '{"components": [1], "program_digest": 3, "self_test": null}'),
        ("analysis.json", "[" * 100_000),
        ("analysis.json", "7"),
        ("analysis.json", '{"schema": "\\ud800\\u001b[2J\\nEverything agrees"}'),
        ("document.json", '{"schema": "urn:rankdocket:document:1", "document": {"is": "Document"}}'),
        ("document.json", "null"),
        ("plan.json", '"plan"'),
        ("spec.yaml", "study: 3\n"),
        ("report.pdf", "%PDF-1.7\n"),
        ("report.html", "\udcff"),
        ("SHA256SUMS", "no digest\n"),
    ],
)
def test_a_file_of_another_kind_is_named(study: Path, here: Callable[..., Ran], name: str, content: str) -> None:
    """Whatever stands in a file of the record copy, verifying ends with 1 and names it, without a trace."""
    (study / "editions" / "1" / name).write_bytes(content.encode("utf-8", "surrogateescape"))
    if name != "SHA256SUMS":
        reseal(study, "1")
    ran = here("verify", ".", cwd=study)
    assert (ran.status, ran.err) == (1, "")
    assert name in ran.out
    assert "\x1b" not in ran.out
    assert not re.search("^Everything agrees", ran.out, re.MULTILINE)


@pytest.mark.parametrize("name", ["before/analysis.json", "before/plan.json"])
def test_what_the_changes_were_told_against_is_that_edition_s_own(
    two_editions: Path, tmp_path: Path, name: str
) -> None:
    """The replaced edition's analysis and plan, altered in the copy that its successor carries, are named."""
    study = Path(shutil.copytree(two_editions, tmp_path / "first-look"))
    forge(study, "2", name, lambda text: text.replace("0.05", "0.06", 1))
    told = f"{name}: not the file of edition 1, whose digest line 1 of the register holds."
    assert told in verify(str(study)).problems


@pytest.mark.parametrize("removed", [("plan.json",), ("analysis.json", "plan.json")], ids=["one", "both"])
def test_what_was_replaced_cannot_be_taken_out_of_the_record(
    two_editions: Path, tmp_path: Path, removed: tuple[str, ...]
) -> None:
    """Without the files of the edition replaced the changes that the report tells cannot be told again."""
    study = Path(shutil.copytree(two_editions, tmp_path / "first-look"))
    for name in removed:
        (study / "editions" / "2" / "before" / name).unlink()
    reseal(study, "2")
    problems = "\n".join(verify(str(study)).problems)
    if len(removed) == 1:
        assert "before/plan.json: missing, although edition 1 was replaced." in problems
    else:
        assert "document.json: document/" in problems


def test_an_edition_whose_forerunner_was_deleted_before_is_made_again(two_editions: Path, tmp_path: Path) -> None:
    """An edition issued without the one that it replaces has nothing to set against it, and is made again as it is."""
    study = Path(shutil.copytree(two_editions, tmp_path / "first-look"))
    shutil.rmtree(study / "editions" / "2")
    (study / DATA).write_text(
        with_line(6, lambda cells: [*cells[:2], "2"])((study / DATA).read_text(encoding="utf-8")), encoding="utf-8"
    )
    assert run("issue", ".", "--reason", "another volume was corrected", cwd=study).status == 0
    found = verify(str(study), edition="3")
    assert len(found.problems) == 1
    assert found.problems[0].startswith(f"{study / 'editions' / '2'} is missing: ")


def test_an_edition_that_replaces_another_is_identical(two_editions: Path) -> None:
    """The second edition with what it replaces is made again byte for byte."""
    assert verify(str(two_editions)).grade == "identical"


@pytest.mark.parametrize(
    ("first", "second"),
    [("rising_trial.csv", "received/rising_trial.csv"), ("received/doughs/a.csv", "doughs")],
)
def test_two_data_files_for_one_name_in_the_record_copy_are_refused(
    first_look: Path, here: Callable[..., Ran], first: str, second: str
) -> None:
    """Data files that would lie in each other's way in the record copy are a fault of the spec, told before computing."""
    spec = (first_look / "study.yaml").read_text(encoding="utf-8")
    other = f"  more:\n    file: {second}\n    missing_codes: []\n\nrows:"
    spec = spec.replace(DATA, first, 1).replace("\nrows:", other, 1).replace("column: ", "column: doughs / ")
    (first_look / "study.yaml").write_text(spec, encoding="utf-8")
    content = (first_look / DATA).read_bytes()
    for name in (first, second):
        (first_look / name).parent.mkdir(parents=True, exist_ok=True)
        (first_look / name).write_bytes(content)
    ran = here("issue", ".", "--reason", "first issue", cwd=first_look)
    assert (ran.status, ran.out) == (3, "")
    assert re.search(r"data\.more\.file: .* in the record copy of an edition\. Rename one .*\(message 33\)", ran.err)

"""Verifying: a fresh edition is made again byte for byte, and whatever was altered is named, however well repaired."""

import json
import re
import shutil
from collections.abc import Callable
from pathlib import Path

import pytest

from rankdocket.register import chain
from rankdocket.workflow.verify import verify
from workflow.office import DATA, Ran, Sealed, forge, numbers_in, replaced_once, run, with_line


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
    assert re.match(r"\d+ things in edition 1 do not agree \(\d+ numbers, \d+ files looked at\):\n  1\. ", ran.out)
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


def _with_another_version(text: str) -> str:
    versions = json.loads(text)
    next(item for item in versions["components"] if item["what"] == "rankdocket")["version"] = "0.0.9"
    return json.dumps(versions)


@pytest.mark.slow
def test_the_same_numbers_by_another_version_of_the_program_agree(study: Path) -> None:
    """When only words and looks moved since, the numbers agree and a remark says what has changed."""
    forge(study, "1", "versions.json", _with_another_version)
    same = verify(str(study))
    assert (same.grade, same.problems) == ("same", ())
    assert any("rankdocket 0.0.9 then" in remark for remark in same.remarks)


@pytest.mark.slow
def test_a_changed_digit_is_named_under_another_version_of_the_program(study: Path) -> None:
    """When the program has changed since, other words are a remark, and another digit on the page is not."""
    number = _value_key(study)
    forge(study, "1", "versions.json", _with_another_version)
    old = f'data-key="{number["key"]}">{number["text"]}<'
    forge(study, "1", "report.html", replaced_once(old, old.replace(number["text"], _other_digit(number["text"]))))
    found = verify(str(study))
    assert found.grade == "different"
    [problem] = found.problems
    assert problem.startswith(f"report.html: {number['key']} was printed as ")
    assert _other_digit(number["text"]) in problem.split("recomputed")[0]
    assert _other_digit(number["text"]) not in problem.split("recomputed")[1]
    assert any("rankdocket 0.0.9 then" in remark for remark in found.remarks)


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("verify", "."), ".: nothing has been issued. Write: rankdocket issue . --reason"),
        (("verify", ".", "--edition", "4"), ".: there is no edition 4. Editions: none."),
        (
            ("verify", ".", "--edition", "four"),
            "'four' is not an edition. Write a number such as 2, or 2A for a draft.",
        ),
        (("verify", "nowhere"), "nowhere: there is no such study."),
    ],
)
def test_what_was_never_issued_cannot_be_verified(
    first_look: Path, here: Callable[..., Ran], words: tuple[str, ...], told: str
) -> None:
    """An edition that is not there ends the command with 4 and says what there is."""
    ran = here(*words, cwd=first_look)
    assert (ran.status, ran.out) == (4, "")
    assert ran.err.startswith(told)

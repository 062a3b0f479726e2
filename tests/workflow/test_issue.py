"""Issuing: whole or not at all, never without need, never with a used number."""

import json
import resource
import shutil
import signal
import subprocess
from collections.abc import Callable
from pathlib import Path

import pytest

from rankdocket.cli.output import NOTHING_COMPUTED
from rankdocket.register import chain
from workflow.office import (
    DATA,
    LOCK,
    SPEC,
    Ran,
    Sealed,
    command,
    copy_of_program,
    copy_study,
    forge,
    replaced_once,
    run,
    snapshot,
    surroundings,
    with_line,
)

A_PAGE = 4096
"""Bytes: less than any page of a report takes."""


def _sixty_rows(text: str) -> str:
    """Return a data file with sixty rows of twenty values each: too many for an exact count in the time allowed."""
    rows = [f"E{number:02},{100 + number // 3},{2000 + number * 17 % 61 // 3}" for number in range(60)]
    return "\n".join([text.splitlines()[0], *rows]) + "\n"


FAULTS = [
    (
        SPEC,
        replaced_once("  alpha: 0.05", "  aplha: 0.05"),
        'study.yaml:43:3: inference.aplha: "aplha" is not a key of inference. nearest: alpha.',
        15,
    ),
    (
        SPEC,
        replaced_once("column: volume_ml", "column: volume_l"),
        'study.yaml:29:3: variables.volume.column: no column "volume_l"; nearest: volume_ml.',
        6,
    ),
    (
        SPEC,
        replaced_once(DATA, "received/risng.csv"),
        "study.yaml:11:3: data.doughs.file: there is no file 'received/risng.csv'.",
        53,
    ),
    (
        DATA,
        with_line(5, lambda cells: [cells[0], "many", *cells[2:]]),
        f'{DATA}:5: row 5, column rising_min: found "many".',
        1,
    ),
    (
        DATA,
        with_line(5, lambda cells: [*cells, "7"]),
        f"{DATA}:5: row 5: 4 fields where the names in row 1 give 3;",
        45,
    ),
    (DATA, _sixty_rows, "the p-value of A1 needs drawn permutations and the plan states no seed.", 54),
]


@pytest.mark.parametrize("fault", FAULTS, ids=lambda fault: f"message {fault[-1]}")
def test_a_fault_of_the_input_is_told_by_place_and_nothing_is_written(
    first_look: Path, here: Callable[..., Ran], fault: tuple[str, Callable[[str], str], str, int]
) -> None:
    """The error names file, line and column, what is wrong and what to write; the study's folder is as it was."""
    file, change, told, number = fault
    spoiled = change((first_look / file).read_text(encoding="utf-8"))
    (first_look / file).write_text(spoiled, encoding="utf-8")
    before = snapshot(first_look)
    ran = here("issue", ".", "--reason", "first issue", cwd=first_look)
    assert (ran.status, ran.out) == (3, "")
    assert ran.err.count(NOTHING_COMPUTED) == 1
    assert ran.err.endswith(f"\n{NOTHING_COMPUTED}\n")
    assert f"(message {number})" in next(line for line in ran.err.splitlines() if told in line)
    assert snapshot(first_look) == before


def test_all_faults_of_a_spec_come_in_one_go(first_look: Path, here: Callable[..., Ran]) -> None:
    """Three mistakes in one spec are three lines, in the order of the file, and three entries as JSON."""
    text = (first_look / SPEC).read_text(encoding="utf-8")
    for old, new in (("client:", "cleint:"), ("scale: measured", "scale: meassured"), ("alpha: 0.05", "alpha: 5")):
        text = replaced_once(old, new)(text)
    (first_look / SPEC).write_text(text, encoding="utf-8")
    ran = here("issue", ".", "--reason", "first issue", "--json", cwd=first_look)
    plain = ran.plain
    assert (ran.status, ran.err, plain["schema"], plain["kind"]) == (3, "", "urn:rankdocket:error:1", "input")
    fields = [fault["field"] for fault in plain["faults"]]
    assert [field for field in fields if "cleint" in field or field.endswith(("scale", "alpha"))] == [
        "study.cleint",
        "variables.rising.scale",
        "inference.alpha",
    ]
    lines = [fault["line"] for fault in plain["faults"]]
    assert lines == sorted(lines)


def test_a_data_file_that_may_not_be_read_is_an_input_fault(first_look: Path, here: Callable[..., Ran]) -> None:
    """A folder where the spec names a file cannot be read: the fault stands at the key that names it."""
    (first_look / DATA).unlink()
    (first_look / DATA).mkdir()
    ran = here("issue", ".", "--reason", "first issue", cwd=first_look)
    assert ran.status == 3
    assert ran.err.startswith("./study.yaml:11:3: data.doughs.file: 'received/rising_trial.csv' is a folder.")
    assert ran.err.count(NOTHING_COMPUTED) == 1
    assert sorted(path.name for path in first_look.iterdir()) == ["received", SPEC]


@pytest.mark.parametrize("reason", ["", "  ", "\t\n"])
def test_a_blank_reason_is_refused(first_look: Path, here: Callable[..., Ran], reason: str) -> None:
    """An edition needs a reason in words."""
    before = snapshot(first_look)
    ran = here("issue", ".", "--reason", reason, cwd=first_look)
    assert (ran.status, ran.out) == (3, "")
    assert "needs a reason" in ran.err
    assert ran.err.count(NOTHING_COMPUTED) == 1
    assert snapshot(first_look) == before


def test_a_time_that_is_no_number_is_refused(first_look: Path) -> None:
    """SOURCE_DATE_EPOCH is a whole number of seconds or an input fault."""
    ran = run("issue", ".", "--reason", "x", cwd=first_look, environment=surroundings(SOURCE_DATE_EPOCH="yesterday"))
    assert ran.status == 3
    assert ran.err.startswith("SOURCE_DATE_EPOCH: 'yesterday' is not a number of seconds since 1970.")
    assert ran.err.count(NOTHING_COMPUTED) == 1
    assert not (first_look / "register.jsonl").exists()


def test_unchanged_inputs_write_nothing(issued: Sealed, here: Callable[..., Ran]) -> None:
    """Issuing again with the same spec, data and program says so, files no line and ends with 0."""
    before = snapshot(issued.study)
    ran = here("issue", "first-look", "--reason", "once more", cwd=issued.study.parent)
    assert (ran.status, ran.err) == (0, "")
    assert ran.out.splitlines() == [
        "Nothing has changed since edition 1: nothing was written.",
        "The report lies at first-look/editions/1/report.pdf",
    ]
    assert snapshot(issued.study) == before


def test_unchanged_inputs_tell_no_number_that_was_not_computed(issued: Sealed, here: Callable[..., Ran]) -> None:
    """As JSON an answer without a computation has no pages and no findings instead of none of either."""
    ran = here("issue", "first-look", "--reason", "once more", "--json", cwd=issued.study.parent)
    assert (ran.status, ran.err) == (0, "")
    assert ran.plain == {
        "schema": "urn:rankdocket:issued:1",
        "changed": False,
        "edition": "1",
        "folder": "first-look/editions/1",
        "report": "first-look/editions/1/report.pdf",
        "head": chain.head(issued.study / "register.jsonl"),
    }


@pytest.mark.parametrize("name", ["results.csv", "SHA256SUMS"])
def test_an_altered_edition_is_not_pointed_to_as_the_current_one(
    issued: Sealed, tmp_path: Path, here: Callable[..., Ran], name: str
) -> None:
    """With unchanged inputs and a touched edition the command names what disagrees, ends with 4, writes nothing."""
    study = Path(shutil.copytree(issued.study, tmp_path / "a desk" / "first-look"))
    file = study / "editions" / "1" / name
    file.write_bytes(file.read_bytes() + b" ")
    before = snapshot(study)
    ran = here("issue", "./a desk/first-look/", "--reason", "once more", cwd=tmp_path)
    assert (ran.status, ran.out) == (4, "")
    told = "Nothing has changed since edition 1 and nothing was written, but edition 1 is not as it was sealed: "
    assert ran.err.startswith(f"{told}./a desk/first-look/editions/1/{name} ")
    assert ran.err.endswith("rankdocket verify './a desk/first-look/' --edition 1\n")
    assert snapshot(study) == before


def test_an_altered_edition_counts_what_else_disagrees(
    issued: Sealed, tmp_path: Path, here: Callable[..., Ran]
) -> None:
    """Of several things that disagree one is named and the others are counted."""
    study = Path(shutil.copytree(issued.study, tmp_path / "first-look"))
    for name in ("README.txt", "results.csv", "rows.csv"):
        (study / "editions" / "1" / name).unlink()
    ran = here("issue", ".", "--reason", "once more", cwd=study)
    assert ran.status == 4
    assert " editions/1/README.txt is missing. And 2 more. To see everything" in ran.err


def test_a_list_of_digests_made_anew_does_not_hide_an_altered_edition(
    issued: Sealed, tmp_path: Path, here: Callable[..., Ran]
) -> None:
    """When files and list agree with one another, the register's line still tells that they are not those sealed."""
    study = Path(shutil.copytree(issued.study, tmp_path / "first-look"))
    register = (study / "register.jsonl").read_bytes()
    forge(study, "1", "README.txt", replaced_once("Record copy", "Record  copy"))
    (study / "register.jsonl").write_bytes(register)
    ran = here("issue", ".", "--reason", "once more", cwd=study)
    assert ran.status == 4
    assert "the digest of SHA256SUMS of 1 is not the one filed in line 1." in ran.err


def test_paths_are_told_as_they_were_written(issued: Sealed, here: Callable[..., Ran], tmp_path: Path) -> None:
    """A leading "./" and a separator at the end stay what they were, in answers and in errors."""
    again = here("issue", "./first-look/", "--reason", "x", cwd=issued.study.parent)
    assert again.out.endswith("The report lies at ./first-look/editions/1/report.pdf\n")
    study = copy_study("first-look", tmp_path / "first-look")
    (study / DATA).unlink()
    ran = here("issue", ".//first-look//", "--reason", "x", cwd=tmp_path)
    assert ran.err.startswith(".//first-look//study.yaml:11:3: data.doughs.file: there is no file")


@pytest.mark.parametrize(
    ("path", "told"),
    [
        ("./nowhere", "./nowhere: there is no such study. Write its folder or its spec. (message 55)"),
        ("", '"": there is no such study. Write its folder or its spec. (message 55)'),
        ("received/", "received/: there is no study.yaml in this folder."),
    ],
)
@pytest.mark.parametrize("words", [("issue", "--reason", "x"), ("screen",)], ids=["issue", "screen"])
def test_a_study_that_is_not_there_is_an_input_fault(
    first_look: Path, here: Callable[..., Ran], words: tuple[str, ...], path: str, told: str
) -> None:
    """Neither a folder without a spec nor a path to nothing is a study: status 3, and nothing is written."""
    before = snapshot(first_look)
    ran = here(words[0], path, *words[1:], cwd=first_look)
    assert (ran.status, ran.out) == (3, "")
    assert ran.err.startswith(told)
    assert ran.err.count(NOTHING_COMPUTED) == 1
    assert snapshot(first_look) == before


def test_changed_data_make_the_next_edition_and_no_number_returns(issued: Sealed, tmp_path: Path) -> None:
    """Edition 2 says that it replaces edition 1; its number is its own although the folder of edition 1 is gone."""
    study = tmp_path / "first-look"
    shutil.copytree(issued.study, study)
    shutil.rmtree(study / "editions" / "1")
    changed = with_line(5, lambda cells: [*cells[:2], "1"])((study / DATA).read_text(encoding="utf-8"))
    (study / DATA).write_text(changed, encoding="utf-8")
    ran = run("issue", ".", "--reason", "a volume was corrected", "--json", cwd=study)
    assert (ran.status, ran.plain["edition"], ran.plain["changed"]) == (0, "2", True)
    assert [path.name for path in (study / "editions").iterdir()] == ["2"]
    first, second = chain.read(study / "register.jsonl")
    assert second.previous == first.digest
    assert second.event.reason == "a volume was corrected"
    document = (study / "editions" / "2" / "document.json").read_text(encoding="utf-8")
    assert "edition 1 of 2026-02-02" in document
    assert first.digest in document
    assert (study / "editions" / "2" / "register-extract.jsonl").read_bytes() == first.raw + b"\n"


def test_a_page_that_cannot_be_made_seals_nothing(tmp_path: Path) -> None:
    """A template that asks for something outside the report fails the issue with 4; the study is as it was."""
    sources = copy_of_program(tmp_path)
    frame = next(path for path in tmp_path.rglob("report.html.j2"))
    broken = replaced_once("<main>", '<main><img alt="" src="file:///no/such/picture.png">')(frame.read_text("utf-8"))
    frame.write_text(broken, encoding="utf-8")
    study = copy_study("first-look", tmp_path / "first-look")
    before = snapshot(study)
    ran = run("issue", "first-look", "--reason", "x", cwd=tmp_path, environment=surroundings(sources))
    assert (ran.status, ran.out) == (4, "")
    assert ran.err.startswith("The page asked for something outside the report: ")
    assert "Traceback" not in ran.err
    assert snapshot(study) == before
    assert not (study / "editions").exists()


def test_a_failure_that_nobody_foresaw_is_told_in_a_sentence(tmp_path: Path) -> None:
    """A template that is no template ends with 4 and a sentence, as JSON too; --debug shows where it failed."""
    sources = copy_of_program(tmp_path)
    frame = next(path for path in tmp_path.rglob("report.html.j2"))
    frame.write_text("{{ nothing.of.this }}", encoding="utf-8")
    study = copy_study("first-look", tmp_path / "first-look")
    before = snapshot(study)
    ran = run("issue", ".", "--reason", "x", "--json", "--debug", cwd=study, environment=surroundings(sources))
    assert (ran.status, ran.plain["kind"]) == (4, "program")
    assert "Nothing was sealed" in ran.plain["message"]
    assert "Traceback" in ran.err
    assert snapshot(study) == before


def test_a_shipped_case_that_fails_seals_nothing(tmp_path: Path) -> None:
    """Before anything is computed the shipped cases must come out; one that does not is named, and nothing sealed."""
    sources = copy_of_program(tmp_path)
    cases_file = sources / "rankdocket" / "workflow" / "self_test.json"
    cases = json.loads(cases_file.read_text(encoding="utf-8"))
    spoiled = next(case for case in cases["cases"] if "count_two_sided" in case)
    spoiled["count_two_sided"] += 2
    cases_file.write_text(json.dumps(cases), encoding="utf-8")
    study = copy_study("first-look", tmp_path / "first-look")
    before = snapshot(study)
    ran = run("issue", "first-look", "--reason", "x", cwd=tmp_path, environment=surroundings(sources))
    assert (ran.status, ran.out) == (4, "")
    assert ran.err.startswith(f"1 of {len(cases['cases'])} shipped cases does not come out on this machine: ")
    assert spoiled["name"] in ran.err
    assert snapshot(study) == before
    assert not (study / "editions").exists()


def test_a_file_that_the_system_refuses_is_told_with_what_it_was_for(first_look: Path) -> None:
    """Where no file may be larger than a page, the edition is not made: the study is named and as it was."""
    before = snapshot(first_look)
    done = subprocess.run(
        command("issue", "first-look", "--reason", "first issue"),
        cwd=first_look.parent,
        # A cut-off bytecode file would outlive the test.
        env=surroundings() | {"PYTHONDONTWRITEBYTECODE": "1"},
        capture_output=True,
        check=False,
        encoding="utf-8",
        preexec_fn=lambda: resource.setrlimit(resource.RLIMIT_FSIZE, (A_PAGE, A_PAGE)),
    )
    assert (done.returncode, done.stdout) == (4, "")
    assert done.stderr.startswith("first-look: edition 1 could not be made, because the system refused a file in the ")
    assert "laid out: File too large. " in done.stderr
    assert done.stderr.endswith("Nothing was sealed.\n")
    assert snapshot(first_look) == before


@pytest.mark.parametrize("request_to_end", [signal.SIGINT, signal.SIGTERM])
def test_an_interrupt_seals_nothing(first_look: Path, request_to_end: signal.Signals) -> None:
    """Asked to end in the middle of its work, the command says so, ends with 130, leaves the study as it was."""
    before = snapshot(first_look)
    with subprocess.Popen(
        command("issue", ".", "--reason", "first issue"),
        cwd=first_look,
        env=surroundings(),
        stdin=subprocess.DEVNULL,
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        # Whoever runs the tests in the background hands down an ignored interrupt.
        preexec_fn=lambda: signal.signal(signal.SIGINT, signal.SIG_DFL),  # noqa: PLW1509
    ) as process:
        while process.poll() is None and not (first_look / LOCK).exists():
            pass
        process.send_signal(request_to_end)
        out, err = process.communicate()
    assert (process.returncode, out) == (130, b"")
    assert err.decode().split() == ["Interrupted:", "nothing", "was", "sealed."]
    assert snapshot(first_look) == before

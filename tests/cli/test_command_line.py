"""The command line: our own words, the answer on one stream, the rest on the other, and what a status means."""

import json
import re
import shutil
import signal
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import jsonschema
import pytest
import yaml

from rankdocket.cli.main import COMMANDS
from workflow.office import STUDIES, Ran, Sealed, command, replaced_once, run, surroundings

NOT_OURS = (
    r"\bUsage:",
    r"\bTry ",
    r"\bError:",
    r"Show this message and exit",
    r"^Options:",
    r"^Commands:",
    r"\[OPTIONS\]",
    r"\[required\]",
    r"Missing (argument|option|command)",
    r"No such (option|command)",
    r"Did you mean",
    r"Invalid value",
    r"Got unexpected",
    r"Aborted!",
    r"requires an argument",
    r"does not take a value",
)
HEAVY = ("numpy", "scipy", "pandas", "pydantic", "yaml", "matplotlib", "weasyprint", "jinja2", "pypdf", "fontTools")

WRONG_LINES = [
    (("isue", "."), "rankdocket: there is no command isue. nearest: issue. See: rankdocket --help"),
    (("xyz",), "rankdocket: there is no command xyz. See: rankdocket --help"),
    (
        ("issue", ".", "--raeson", "x"),
        "rankdocket issue: there is no --raeson. nearest: --reason. See: rankdocket issue --help",
    ),
    (("issue", ".", "--reason"), "--reason needs a value."),
    (("issue", ".", "--reason", "x", "--draft=yes"), "--draft takes no value."),
    (("issue", "."), "rankdocket issue: --reason is needed. See: rankdocket issue --help"),
    (("issue", "--reason", "x"), "rankdocket issue: STUDY is needed. See: rankdocket issue --help"),
    (("verify",), "rankdocket verify: STUDY is needed. See: rankdocket verify --help"),
    (("screen", "a", "b"), "rankdocket screen: there is one word too many. See: rankdocket screen --help"),
    (("--versoin",), "rankdocket: there is no --versoin. nearest: --version. See: rankdocket --help"),
]


def _foreign(ran: Ran) -> list[str]:
    return [pattern for pattern in NOT_OURS if re.search(pattern, ran.out + ran.err, re.MULTILINE)]


@pytest.mark.parametrize(("words", "told"), WRONG_LINES)
def test_a_wrong_command_line_is_told_in_our_words(
    words: tuple[str, ...], told: str, here: Callable[..., Ran], tmp_path: Path
) -> None:
    """One sentence on standard error, the nearest word where there is one, and status 2."""
    ran = here(*words, cwd=tmp_path)
    assert (ran.status, ran.out) == (2, "")
    assert told in ran.err
    assert ran.err.count("\n") == 1
    assert _foreign(ran) == []


@pytest.mark.parametrize(("words", "told"), WRONG_LINES)
def test_a_wrong_command_line_with_json_is_one_object(
    words: tuple[str, ...], told: str, here: Callable[..., Ran], tmp_path: Path
) -> None:
    """With --json the same sentence stands in an error object on standard output."""
    ran = (
        here("issue", "--json", *words[1:], cwd=tmp_path)
        if words[0] == "issue"
        else here(*words, "--json", cwd=tmp_path)
    )
    assert (ran.status, ran.err) == (2, "")
    plain = json.loads(ran.out)
    assert (plain["schema"], plain["kind"], plain["faults"]) == ("urn:rankdocket:error:1", "usage", [])
    assert "\n" not in plain["message"]
    assert _foreign(ran) == []
    assert told.partition(" See:")[0] in plain["message"]


@pytest.mark.parametrize("name", [None, *(each.name for each in COMMANDS)])
def test_help_stands_in_our_order(name: str | None, here: Callable[..., Ran], tmp_path: Path) -> None:
    """Help says what a command does, then an example, then what can be added, in our words only."""
    ran = here(*([name] if name else []), "--help", cwd=tmp_path)
    assert (ran.status, ran.err) == (0, "")
    assert _foreign(ran) == []
    example, options = ran.out.index("For example:\n  rankdocket "), ran.out.index("What can be added:")
    assert 0 < example < options
    assert re.search(r"^  --help +Show this page and stop\.$", ran.out, re.MULTILINE)
    assert max(len(line) for line in ran.out.splitlines()) <= 100


def test_the_program_alone_shows_its_commands_in_office_order(here: Callable[..., Ran], tmp_path: Path) -> None:
    """Without a command the program shows its help, commands in the order in which they are used."""
    bare, help_page = here(cwd=tmp_path), here("--help", cwd=tmp_path)
    assert bare == help_page
    listed = re.findall(r"^  ([a-z]+) ", bare.out.split("Commands")[1], re.MULTILINE)
    assert listed == [each.name for each in COMMANDS] == ["size", "screen", "issue", "verify", "schema"]


def test_every_option_and_example_of_help_works(here: Callable[..., Ran], tmp_path: Path) -> None:
    """The example of each command is a command line that can be read: it fails for its study alone, or not at all."""
    for each in COMMANDS:
        words = [word.strip('"') for word in re.findall(r'"[^"]*"|\S+', each.example.split(" > ")[0])][1:]
        assert here(*words, cwd=tmp_path).status in {0, 3, 4}


def test_statuses(issued: Sealed, here: Callable[..., Ran], tmp_path: Path) -> None:
    """0 done and yes, 1 done and no, 2 wrong command line, 3 wrong files, 4 failed: errors on standard error only."""
    altered = Path(shutil.copytree(issued.study, tmp_path / "altered"))
    line = (altered / "register.jsonl").read_bytes()
    (altered / "register.jsonl").write_bytes(line.replace(b"first issue", b"First issue"))
    ended = {
        0: here("issue", "first-look", "--reason", "again", cwd=issued.study.parent),
        1: here("screen", str(STUDIES / "weld-smoke"), cwd=tmp_path),
        2: here("screen", cwd=tmp_path),
        3: here("screen", "nowhere", cwd=tmp_path),
        4: here("issue", "altered", "--reason", "again", cwd=tmp_path),
    }
    assert {status: ran.status for status, ran in ended.items()} == {status: status for status in ended}
    assert [status for status, ran in ended.items() if ran.out] == [0, 1]
    assert [status for status, ran in ended.items() if ran.err] == [2, 3, 4]
    assert ended[3].err.startswith("nowhere: there is no such study.")


def test_json_is_one_object_on_failure_too(here: Callable[..., Ran], issued: Sealed, tmp_path: Path) -> None:
    """Whatever happens, --json prints exactly one object with a schema name and nothing on standard error."""
    for words, folder, status in (
        (("screen", "nowhere"), tmp_path, 3),
        (("issue", "nowhere", "--reason", "x"), tmp_path, 3),
        (("issue", "first-look", "--reason", " "), issued.study.parent, 3),
        (("verify", "first-look", "--edition", "7"), issued.study.parent, 3),
        (("issue", "first-look", "--reason", "again"), issued.study.parent, 0),
        (("schema",), tmp_path, 0),
    ):
        ran = here(*words, "--json", cwd=folder)
        assert (ran.status, ran.err) == (status, "")
        assert ran.out.count("\n") == 1
        plain = json.loads(ran.out)
        assert isinstance(plain, dict)
        assert plain.get("schema", plain.get("$schema"))


def test_quiet_prints_no_answer_and_still_tells_errors(
    here: Callable[..., Ran], issued: Sealed, tmp_path: Path
) -> None:
    """--quiet leaves the status to tell the answer; an error is still said."""
    assert here("issue", "first-look", "--reason", "x", "--quiet", cwd=issued.study.parent) == Ran(0, "", "")
    wrong = here("screen", "nowhere", "--quiet", cwd=tmp_path)
    assert (wrong.status, wrong.out) == (3, "")
    assert "there is no such study" in wrong.err


def test_progress_is_shown_on_a_terminal_only(issued: Sealed, drafted: Sealed) -> None:
    """On a terminal one line tells how far the work is and is wiped; without one there is none; no colour anywhere."""
    assert issued.ran.err == ""
    told = [step.strip() for step in drafted.ran.err.split("\r") if step.strip()]
    assert "1 of 1 associations" in told
    assert told[-1] == "laying out the PDF"
    assert drafted.ran.err.endswith(f"\r{' ' * 60}\r")
    assert "\n" not in drafted.ran.err
    for ran in (issued.ran, drafted.ran):
        assert "\x1b" not in ran.out + ran.err
    assert len(drafted.ran.out.splitlines()) == 4


def test_the_program_names_its_version(here: Callable[..., Ran], tmp_path: Path) -> None:
    """--version prints name and version and stops."""
    ran = here("--version", cwd=tmp_path)
    assert (ran.status, ran.err) == (0, "")
    assert re.fullmatch(r"rankdocket \d+\.\d+\.\d+\n", ran.out)


@pytest.mark.parametrize(
    ("words", "status"), [(("schema",), 0), (("--help",), 0), (("screen", str(STUDIES / "weld-smoke")), 1)]
)
def test_a_reader_who_leaves_early_changes_no_status(words: tuple[str, ...], status: int, tmp_path: Path) -> None:
    """When whoever reads the output closes it, the command ends without a trace and with the status of its answer."""
    with subprocess.Popen(
        command(*words), cwd=tmp_path, env=surroundings(), stdout=subprocess.PIPE, stderr=subprocess.PIPE
    ) as process:
        assert process.stdout is not None
        process.stdout.close()
        assert process.stderr is not None
        told = process.stderr.read()
    assert (process.returncode, told) == (status, b"")


@pytest.mark.parametrize("as_json", [(), ("--json",)], ids=["words", "JSON"])
def test_an_answer_that_cannot_be_written_is_no_success(as_json: tuple[str, ...], tmp_path: Path) -> None:
    """A full disk behind standard output is told in one sentence on standard error, with status 4."""
    with Path("/dev/full").open("wb") as full:
        done = subprocess.run(
            command("schema", *as_json),
            cwd=tmp_path,
            env=surroundings(),
            stdout=full,
            stderr=subprocess.PIPE,
            check=False,
        )
    told = b"The work is done and its answer could not be written: No space left on device.\n"
    assert (done.returncode, done.stderr) == (4, told)


@pytest.mark.parametrize("request_to_end", [signal.SIGINT, signal.SIGTERM])
def test_a_request_to_end_after_the_answer_changes_nothing(request_to_end: signal.Signals, issued: Sealed) -> None:
    """Once the answer is out, no interrupt says that nothing was done: one answer, nothing else, status 0."""
    with subprocess.Popen(
        command("issue", "first-look", "--reason", "once more", "--json"),
        cwd=issued.study.parent,
        env=surroundings(),
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
    ) as process:
        assert process.stdout is not None
        first = process.stdout.readline()
        process.send_signal(request_to_end)
        rest, told = process.communicate()
    assert (process.returncode, rest, told) == (0, b"", b"")
    assert json.loads(first)["edition"] == "1"


def test_a_request_to_end_that_was_ignored_stays_ignored(here: Callable[..., Ran], tmp_path: Path) -> None:
    """Who started the program so that it ignores requests to end finds that it does."""
    signal.signal(signal.SIGTERM, signal.SIG_IGN)
    assert here("--version", cwd=tmp_path).status == 0
    assert signal.getsignal(signal.SIGTERM) is signal.SIG_IGN


@pytest.mark.parametrize("words", [("--help",), ("issue", "--help"), ("--version",), ("isue",)])
def test_help_loads_no_heavy_library(words: tuple[str, ...], tmp_path: Path) -> None:
    """Help, version and usage errors come before anything heavy is imported."""
    program = (
        "import sys\n"
        "from rankdocket.cli.main import main\n"
        f"sys.argv = ['rankdocket', *{words!r}]\n"
        "try:\n    main()\nexcept SystemExit:\n"
        f"    print('HEAVY', sorted(set({HEAVY!r}) & set(sys.modules)), file=sys.stderr)\n"
    )
    done = subprocess.run(
        [sys.executable, "-P", "-c", program],
        cwd=tmp_path,
        env=surroundings(),
        capture_output=True,
        check=True,
        encoding="utf-8",
    )
    assert done.stderr.splitlines()[-1] == "HEAVY []"


def test_the_package_alone_loads_no_heavy_library(tmp_path: Path) -> None:
    """``import rankdocket`` and a look at its names load nothing heavy."""
    program = f"import sys, rankdocket; dir(rankdocket); print(sorted(set({HEAVY!r}) & set(sys.modules)))"
    done = subprocess.run(
        [sys.executable, "-P", "-c", program], cwd=tmp_path, env=surroundings(), capture_output=True, check=True
    )
    assert done.stdout == b"[]\n"


def test_the_module_runs_as_the_command_does(tmp_path: Path) -> None:
    """``python -m rankdocket`` is the same program under the same name."""
    ran = run("isue", cwd=tmp_path)
    assert (ran.status, ran.out) == (2, "")
    assert ran.err == "rankdocket: there is no command isue. nearest: issue. See: rankdocket --help\n"


@pytest.fixture
def schema(here: Callable[..., Ran], tmp_path: Path) -> dict[str, object]:
    """The spec's JSON Schema as the command prints it."""
    found = json.loads(here("schema", cwd=tmp_path).out)
    assert isinstance(found, dict)
    return found


def _spec(name: str) -> dict[str, object]:
    text = (STUDIES / name / "study.yaml").read_text(encoding="utf-8")
    found = yaml.load(text, Loader=yaml.BaseLoader)
    assert isinstance(found, dict)
    return found


def test_the_schema_is_valid_and_accepts_the_demonstrations(schema: dict[str, object]) -> None:
    """The schema is one of 2020-12, and every demonstration spec, read as text, fits it."""
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    jsonschema.Draft202012Validator.check_schema(schema)
    validator = jsonschema.Draft202012Validator(schema)
    for name in ("first-look", "gasket-creep", "weld-smoke", "two-kilns"):
        assert [error.message for error in validator.iter_errors(_spec(name))] == []


@pytest.mark.parametrize(
    ("old", "new"),
    [("aplha", "alpha"), ("cleint", "client"), ("scael", "scale"), ("hypotesis", "hypothesis")],
)
def test_the_schema_refuses_a_misspelt_key(schema: dict[str, object], old: str, new: str) -> None:
    """A key that does not exist is refused at every depth."""
    spoiled = json.loads(replaced_once(f'"{new}":', f'"{old}":')(json.dumps(_spec("first-look"))))
    errors = list(jsonschema.Draft202012Validator(schema).iter_errors(spoiled))
    assert any(old in error.message for error in errors)

"""What the tests of an office's tasks share: copies of studies, the real command line, and a forger's tools."""

import io
import json
import os
import shutil
import subprocess
import sys
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any

from pypdf import PdfWriter
from pypdf.generic import ArrayObject, NameObject, StreamObject

import rankdocket
from rankdocket.canonical import Plain, digest_of, sha256
from rankdocket.register import chain
from rankdocket.register.manifest import SUMS_FILE, sha256sums

ROOT = Path(__file__).resolve().parents[2]
STUDIES = ROOT / "studies"
SOURCES = Path(rankdocket.__file__).resolve().parents[1]
GIVEN_TIME = "1770000000"
"""2026-02-02, in seconds since 1970."""

ACCOUNT = "quillfeather"
"""The name of the account under which every command of these tests runs."""

LOCK = ".seal.lock"

SPEC = "study.yaml"
DATA = "received/rising_trial.csv"
"""The data file of the first-look study; line 5 holds an ordinary row."""


@dataclass(frozen=True, slots=True)
class Ran:
    """How a command ended and what it printed."""

    status: int
    out: str
    err: str

    @property
    def plain(self) -> Any:
        """The one object that --json prints."""
        return json.loads(self.out)


@dataclass(frozen=True, slots=True)
class Sealed:
    """A study with an edition: its folder, the edition's folder, and how the command ran."""

    study: Path
    edition: Path
    ran: Ran


def copy_study(name: str, to: Path) -> Path:
    """Copy a demonstration study as a client would send it: spec and data, no edition."""
    to.mkdir(parents=True)
    shutil.copy(STUDIES / name / "study.yaml", to)
    shutil.copytree(STUDIES / name / "received", to / "received")
    return to


def surroundings(sources: Path = SOURCES, **settings: str) -> dict[str, str]:
    """Return the environment in which commands of these tests run."""
    known = {name: os.environ[name] for name in ("PATH", "HOME", "LD_LIBRARY_PATH") if name in os.environ}
    paths = [str(sources), *filter(None, os.environ.get("PYTHONPATH", "").split(os.pathsep))]
    return {
        **known,
        "PYTHONPATH": os.pathsep.join(paths),
        "LOGNAME": ACCOUNT,
        "USER": ACCOUNT,
        "SOURCE_DATE_EPOCH": GIVEN_TIME,
        **settings,
    }


def command(*words: str) -> list[str]:
    """Return the command line as the system starts it."""
    return [sys.executable, "-P", "-m", "rankdocket", *words]


def run(*words: str, cwd: Path, environment: Mapping[str, str] | None = None) -> Ran:
    """Run the command line as a user does, in a process of its own."""
    done = subprocess.run(
        command(*words),
        cwd=cwd,
        env=environment or surroundings(),
        stdin=subprocess.DEVNULL,
        capture_output=True,
        check=False,
        encoding="utf-8",
    )
    return Ran(done.returncode, done.stdout, done.stderr)


def snapshot(folder: Path) -> dict[str, bytes]:
    """Return every file below a folder but the lock, by name."""
    return {
        path.relative_to(folder).as_posix(): path.read_bytes()
        for path in sorted(folder.rglob("*"))
        if path.is_file() and path.name != LOCK
    }


def numbers_in(node: object) -> Iterator[dict[str, str]]:
    """Yield every number of a document.json."""
    if isinstance(node, dict):
        if node.get("is") == "Number":
            yield node
        for below in node.values():
            yield from numbers_in(below)
    elif isinstance(node, list):
        for below in node:
            yield from numbers_in(below)


def keys_in(node: object) -> Iterator[str]:
    """Yield every key of plain data, at any depth."""
    if isinstance(node, dict):
        yield from node
        for below in node.values():
            yield from keys_in(below)
    elif isinstance(node, list):
        for below in node:
            yield from keys_in(below)


def forge(study: Path, edition: str, name: str, change: Callable[[str], str]) -> None:
    """Alter a file of an edition and repair everything that tells: list of digests, register line, chain."""
    path = study / "editions" / edition / name
    before = path.read_text(encoding="utf-8")
    after = change(before)
    assert after != before
    path.write_text(after, encoding="utf-8")
    reseal(study, edition)


def reseal(study: Path, edition: str) -> None:
    """Repair what tells that a file was altered: list of digests, register line, chain."""
    folder = study / "editions" / edition
    files = {path: data for path, data in snapshot(folder).items() if path != SUMS_FILE}
    sums = sha256sums(files)
    (folder / SUMS_FILE).write_bytes(sums)
    rewrite_line(study, edition, {"sums": sha256(sums), "analysis": sha256(files["analysis.json"])})


def repair_inputs(study: Path, edition: str) -> None:
    """Repair what the register's line says of spec, data, plan and program, as a thorough forger would."""
    folder = study / "editions" / edition
    line = next(line for line in chain.read(study / "register.jsonl") if line.event.details["edition"] == edition)
    named = line.event.details["data"]
    assert isinstance(named, Mapping)
    spec = sha256((folder / "spec.yaml").read_bytes())
    data: dict[str, Plain] = {path: sha256((folder / path).read_bytes()) for path in named}
    program = json.loads((folder / "versions.json").read_bytes())["program_digest"]
    inputs = digest_of({"spec": spec, "data": data, "program": program})
    plan = sha256((folder / "plan.json").read_bytes())
    rewrite_line(study, edition, {"spec": spec, "data": data, "plan": plan, "inputs": inputs})


def rewrite_line(study: Path, edition: str, members: Mapping[str, Plain]) -> None:
    """Write other details into the register's line of an edition and chain all lines anew."""
    forged: tuple[chain.Line, ...] = ()
    for line in chain.read(study / "register.jsonl"):
        event = line.event
        if event.details.get("edition") == edition:
            event = replace(event, details={**event.details, **members})
        forged = (*forged, chain.compose(forged, event))
    (study / "register.jsonl").write_bytes(b"".join(line.raw + b"\n" for line in forged))


def replaced_once(old: str, new: str) -> Callable[[str], str]:
    """Return a change that replaces the first ``old``, which must be there."""

    def change(text: str) -> str:
        assert old in text
        return text.replace(old, new, 1)

    return change


def with_line(number: int, change: Callable[[list[str]], list[str]]) -> Callable[[str], str]:
    """Return a change of the cells of one line (counted from 1) of a table."""

    def change_text(text: str) -> str:
        lines = text.splitlines()
        lines[number - 1] = ",".join(change(lines[number - 1].split(",")))
        return "\n".join(lines) + "\n"

    return change_text


def copy_of_program(to: Path) -> Path:
    """Copy the package with its templates into a folder of its own; return what belongs on PYTHONPATH."""
    without = shutil.ignore_patterns("__pycache__", ".*")
    shutil.copytree(SOURCES / "rankdocket", to / "src" / "rankdocket", ignore=without)
    if not (SOURCES / "rankdocket" / "report_templates").is_dir():
        shutil.copytree(SOURCES.parent / "report_templates", to / "report_templates", ignore=without)
    return to / "src"


def with_black_boxes(pdf: bytes) -> bytes:
    """Return a PDF with a black box drawn over each page and not a letter of its text changed."""
    writer = PdfWriter(clone_from=io.BytesIO(pdf))
    for page in writer.pages:
        box = StreamObject()
        box.set_data(b"q 0 0 0 rg 60 60 480 700 re f Q")
        drawn = page[NameObject("/Contents")]
        page[NameObject("/Contents")] = ArrayObject([drawn.indirect_reference or drawn, writer._add_object(box)])
    changed = io.BytesIO()
    writer.write(changed)
    return changed.getvalue()

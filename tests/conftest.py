"""Studies and editions that several rooms' tests look at; each edition is issued once a session and never altered."""

import os
import pty
import signal
import subprocess
import sys
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from rankdocket.cli.main import main
from workflow.office import Ran, Sealed, command, copy_study, run, surroundings

REASON = "first issue"


@pytest.fixture
def here(capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch) -> Iterator[Callable[..., Ran]]:
    """The command line in this very process: the same words, streams and exit status without a second of start-up.

    What it makes of interrupts and requests to end is taken back after each test.
    """
    before = {request: signal.getsignal(request) for request in (signal.SIGINT, signal.SIGTERM)}

    def run_here(*words: str, cwd: Path) -> Ran:
        monkeypatch.chdir(cwd)
        monkeypatch.setattr(sys, "argv", ["rankdocket", *words])
        for name, value in surroundings().items():
            monkeypatch.setenv(name, value)
        with pytest.raises(SystemExit) as ended:
            main()
        printed = capsys.readouterr()
        assert isinstance(ended.value.code, int)
        return Ran(ended.value.code, printed.out, printed.err)

    yield run_here
    for request, handler in before.items():
        signal.signal(request, handler)


@pytest.fixture
def first_look(tmp_path: Path) -> Path:
    """A fresh copy of the first-look study."""
    return copy_study("first-look", tmp_path / "first-look")


@pytest.fixture(scope="session")
def issued(tmp_path_factory: pytest.TempPathFactory) -> Sealed:
    """First look, issued by the command line."""
    study = copy_study("first-look", tmp_path_factory.mktemp("desk") / "first-look")
    environment = surroundings(PYTHONHASHSEED="1", TZ="UTC")
    ran = run("issue", "first-look", "--reason", REASON, cwd=study.parent, environment=environment)
    return Sealed(study, study / "editions" / "1", ran)


@pytest.fixture(scope="session")
def issued_apart(tmp_path_factory: pytest.TempPathFactory) -> Sealed:
    """The same study issued elsewhere: another folder, name, hash seed, time zone and locale; answered as JSON."""
    study = copy_study("first-look", tmp_path_factory.mktemp("another desk") / "deeper" / "a copy of it")
    environment = surroundings(PYTHONHASHSEED="4242", TZ="Pacific/Auckland", LC_ALL="C")
    words = ("issue", "a copy of it/study.yaml", "--reason", REASON, "--by", "Quentin Elsewhere", "--json")
    ran = run(*words, cwd=study.parent, environment=environment)
    return Sealed(study, study / "editions" / "1", ran)


@pytest.fixture(scope="session")
def drafted(tmp_path_factory: pytest.TempPathFactory) -> Sealed:
    """A draft of the gasket study, made with a terminal as standard error."""
    study = copy_study("gasket-creep", tmp_path_factory.mktemp("terminal") / "gasket-creep")
    terminal, its_end = pty.openpty()
    with subprocess.Popen(
        command("issue", "gasket-creep", "--reason", "for the reviewer", "--draft"),
        cwd=study.parent,
        env=surroundings(TERM="xterm-256color"),
        stdin=subprocess.DEVNULL,
        stdout=subprocess.PIPE,
        stderr=its_end,
    ) as process:
        os.close(its_end)
        seen = _everything_from(terminal)
        out = process.stdout.read() if process.stdout else b""
    os.close(terminal)
    return Sealed(study, study / "editions" / "1A", Ran(process.returncode, out.decode(), seen.decode()))


def _everything_from(terminal: int) -> bytes:
    seen = b""
    while True:
        try:
            read = os.read(terminal, 4096)
        except OSError:  # how the system says that the other end is closed
            return seen
        if not read:
            return seen
        seen += read

"""What is built runs where only it is installed."""

import subprocess
import sys
import venv
import zipfile
from pathlib import Path

import pytest

from house.ground import ROOT, SRC, TEMPLATES
from workflow.office import GIVEN_TIME, copy_study

pytestmark = pytest.mark.slow


@pytest.fixture(scope="module")
def wheel(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The wheel, built from this checkout."""
    folder = tmp_path_factory.mktemp("wheel")
    subprocess.run(
        [sys.executable, "-m", "build", "--wheel", "--outdir", str(folder), str(ROOT)], check=True, capture_output=True
    )
    [built] = folder.glob("*.whl")
    return built


def test_the_wheel_holds_program_looks_and_cases(wheel: Path) -> None:
    """Every module, every template, the shipped cases and the mark of types are in the wheel; tests are not."""
    names = set(zipfile.ZipFile(wheel).namelist())
    modules = {f"rankdocket/{path.relative_to(SRC).as_posix()}" for path in SRC.rglob("*.py")}
    looks = {
        f"rankdocket/report_templates/{path.relative_to(TEMPLATES).as_posix()}"
        for path in TEMPLATES.rglob("*")
        if path.is_file()
    }
    data = {
        "workflow/self_test.json",
        "stats/nulls/spearman_counts.npz",
        "stats/nulls/cumulant_polys.json",
        "stats/guarded_widths.csv",
        "stats/coverage/two_sided.csv",
        "stats/coverage/populations.csv",
    }
    assert modules | looks | {"rankdocket/py.typed"} | {f"rankdocket/{name}" for name in data} <= names
    tops = {name.split("/")[0] for name in names}
    assert {top for top in tops if not top.endswith(".dist-info")} == {"rankdocket"}
    assert [name for name in names if "cache" in name] == []


def test_the_wheel_alone_issues_and_verifies_a_study(wheel: Path, tmp_path: Path) -> None:
    """Installed in an environment of its own, beside the libraries of this one, the command seals and verifies."""
    room = tmp_path / "room"
    venv.EnvBuilder(with_pip=True).create(room)
    python = room / "bin" / "python"
    subprocess.run(
        [python, "-m", "pip", "install", "--no-deps", "--no-index", "--quiet", str(wheel)],
        check=True,
        capture_output=True,
    )
    site = Path(
        subprocess.run(
            [python, "-c", "import sysconfig; print(sysconfig.get_path('purelib'))"],
            check=True,
            capture_output=True,
            encoding="utf-8",
        ).stdout.strip()
    )
    # Read after the room's own packages: the libraries are shared, the program is the one from the wheel.
    shared = [entry for entry in sys.path if Path(entry).name in {"site-packages", "dist-packages"}]
    (site / "neighbours.pth").write_text("\n".join(shared) + "\n", encoding="utf-8")
    study = copy_study("first-look", tmp_path / "first-look")
    surroundings = {"PATH": str(room / "bin"), "HOME": str(tmp_path), "SOURCE_DATE_EPOCH": GIVEN_TIME}

    def run(*words: str) -> subprocess.CompletedProcess[str]:
        return subprocess.run(words, cwd=tmp_path, env=surroundings, capture_output=True, check=False, encoding="utf-8")

    where = run(str(python), "-c", "import rankdocket; print(rankdocket.__file__)")
    assert Path(where.stdout.strip()).is_relative_to(room), where.stderr
    command = str(room / "bin" / "rankdocket")
    sealed = run(command, "issue", "first-look", "--reason", "first issue")
    assert (sealed.returncode, sealed.stderr) == (0, "")
    assert (study / "editions" / "1" / "report.pdf").read_bytes().startswith(b"%PDF-")
    verified = run(command, "verify", "first-look")
    assert (verified.returncode, verified.stderr) == (0, "")
    assert "Edition 1: identical." in verified.stdout

"""The PDF of a page, laid out in a process of its own, where no font, locale or zone of the machine can reach it."""

import json
import os
import subprocess
import sys
from dataclasses import dataclass
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import Final

from rankdocket.errors import RenderError
from rankdocket.render.pdf_worker import OUTCOME_NAME, PAGE_NAME, PDF_NAME

_NO_FONTS: Final = (
    '<?xml version="1.0"?>\n<!DOCTYPE fontconfig SYSTEM "urn:fontconfig:fonts.dtd">\n<fontconfig></fontconfig>\n'
)
_KEPT_VARIABLES: Final = ("PATH", "LD_LIBRARY_PATH", "DYLD_FALLBACK_LIBRARY_PATH", "SYSTEMROOT")
_LAST_LINES: Final = 3

MISSING_LIBRARIES: Final = (
    "The PDF cannot be made, because system libraries for page layout are missing ({detail}). On Debian and Ubuntu "
    "one command installs them: apt-get install --no-install-recommends libpangoft2-1.0-0 libharfbuzz-subset0. "
    "The HTML report needs none of them."
)


@dataclass(frozen=True, slots=True)
class Pdf:
    """A PDF file and the number of its pages."""

    file: bytes
    pages: int


def pdf_of(page: str) -> Pdf:
    """Lay out a page made for print.

    Raises
    ------
    RenderError
        If system libraries are missing, the page asks for a file from outside, or the layout engine has
        anything to complain of.
    """
    with TemporaryDirectory(prefix="rankdocket-") as name:
        folder = Path(name)
        (folder / "fonts.conf").write_text(_NO_FONTS, encoding="utf-8")
        (folder / PAGE_NAME).write_text(page, encoding="utf-8")
        done = subprocess.run(  # noqa: S603 - our own module, no text of the user's in the command
            [sys.executable, "-P", "-m", "rankdocket.render.pdf_worker", name],
            env=_environment(folder),
            cwd=name,
            stdin=subprocess.DEVNULL,
            capture_output=True,
            check=False,
        )
        outcome = folder / OUTCOME_NAME
        if done.returncode == 0 and outcome.is_file():
            pages = json.loads(outcome.read_text(encoding="utf-8"))["pages"]
            return Pdf((folder / PDF_NAME).read_bytes(), pages)
        told = json.loads(outcome.read_text(encoding="utf-8")) if outcome.is_file() else {}
    raise RenderError(_reason(told, done))


def _environment(folder: Path) -> dict[str, str]:
    """Return the whole environment of the layout process: what the machine must give, and what we fix."""
    kept = {name: os.environ[name] for name in _KEPT_VARIABLES if name in os.environ}
    modules = os.pathsep.join(os.path.abspath(entry) for entry in sys.path if entry)
    return kept | {
        "PYTHONPATH": modules,
        "PYTHONDONTWRITEBYTECODE": "1",
        "PYTHONHASHSEED": "0",
        "PYTHONUTF8": "1",
        "FONTCONFIG_FILE": str(folder / "fonts.conf"),
        "HOME": str(folder),
        "TZ": "UTC",
        "LANG": "C.UTF-8",
        "LC_ALL": "C.UTF-8",
    }


def _reason(told: dict[str, object], done: subprocess.CompletedProcess[bytes]) -> str:
    match told:
        case {"missing": str(detail)}:
            return MISSING_LIBRARIES.format(detail=detail)
        case {"refused": str(what)}:
            return f"The page asked for something outside the report: {what}."
        case {"complaints": list(texts)}:
            return f"The PDF could not be laid out cleanly: {'; '.join(map(str, texts))}."
        case _:
            last = done.stderr.decode("utf-8", "replace").strip().splitlines()[-_LAST_LINES:]
            return f"The layout process ended with status {done.returncode}: {' / '.join(last) or 'no message'}."

"""Prints what the program costs on this machine: python tests/benchmarks/run.py

Times are processor seconds of one run and depend on the machine; the ratios within one run travel better.  Nothing
here is asserted, and pytest does not collect it.
"""

import resource
import subprocess
import sys
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import fields
from pathlib import Path
from tempfile import TemporaryDirectory

sys.path.insert(0, str(Path(__file__).resolve().parents[1]))

from workflow.office import command, copy_study, surroundings

STUDIES = ("first-look", "gasket-creep", "weld-smoke")
REPEATS = 3


def main() -> None:
    print("A process of its own, start-up included (processor seconds, the least of three; peak memory)")
    with TemporaryDirectory() as name:
        folder = Path(name)
        _told("rankdocket --help", folder, lambda place: (command("--help"), place))
        _told("first-look: screen", folder, lambda place: (command("screen", "."), copy_study("first-look", place)))
        for study in STUDIES:
            words = command("issue", ".", "--reason", "measured")
            _told(f"{study}: spec to sealed edition", folder, lambda place, s=study, w=words: (w, copy_study(s, place)))
    for study in STUDIES:
        _stages(study)


def _told(what: str, folder: Path, prepare: Callable[[Path], tuple[list[str], Path]]) -> None:
    spent = []
    for turn in range(REPEATS):
        words, place = prepare(folder / f"{what[:12].replace(' ', '-').replace(':', '')}-{len(what)}-{turn}")
        place.mkdir(parents=True, exist_ok=True)
        spent.append(_run(words, place))
    seconds, memory = min(spent), max(kilobytes for _, kilobytes in spent)
    print(f"  {what:<40} {seconds[0]:6.2f} s   {memory / 1024:5.0f} MB")


def _run(words: list[str], place: Path) -> tuple[float, int]:
    """Run a command; return its processor seconds and the largest memory of any process it was made of."""
    reporter = (
        "import resource, subprocess, sys; done = subprocess.run(sys.argv[1:], stdout=subprocess.DEVNULL); "
        "used = resource.getrusage(resource.RUSAGE_CHILDREN); "
        "print(used.ru_utime + used.ru_stime, used.ru_maxrss, done.returncode)"
    )
    done = subprocess.run(
        [sys.executable, "-c", reporter, *words],
        cwd=place,
        env=surroundings(),
        capture_output=True,
        check=True,
        text=True,
    )
    seconds, kilobytes, status = done.stdout.split()
    if status != "0":
        raise SystemExit(f"{' '.join(words)} ended with {status}: {done.stderr}")
    return float(seconds), int(kilobytes)


def _stages(study: str) -> None:
    """Print where the time of one issue goes, in a process that has everything imported."""
    from rankdocket.analysis.analyse import analyse
    from rankdocket.analysis.plain import analysis_to_plain
    from rankdocket.document.model import FigureBlock
    from rankdocket.render.anchors import all_blocks
    from rankdocket.render.figures import draw
    from rankdocket.render.html import page
    from rankdocket.render.pdf import pdf_of
    from rankdocket.workflow.report import report
    from rankdocket.workflow.self_test import run_self_test
    from rankdocket.workflow.study_folder import open_study
    from rankdocket.writing.section import IssueFacts
    from rankdocket.writing.write import write

    nothing = dict.fromkeys(("replaces",), None) | {"ingredients": (), "status": "draft"}
    texts = {field.name: "2026-02-02T00:00:00Z" for field in fields(IssueFacts) if field.name not in nothing}
    facts = IssueFacts(**texts, **nothing)

    spent: dict[str, float] = {}

    @contextmanager
    def stage(name: str) -> Iterator[None]:
        before = _processor_seconds()
        yield
        spent[name] = _processor_seconds() - before

    with TemporaryDirectory() as name:
        folder = str(copy_study(study, Path(name) / study))
        document = report(folder).document  # everything imported, every font looked up
        with stage("read spec and data"):
            opened = open_study(folder)
        with stage("recompute shipped cases"):
            run_self_test()
        with stage("analyse"):
            analysis = analyse(opened.spec, opened.data)
            plain = analysis_to_plain(analysis)
        with stage("write"):
            write(analysis, plain, facts)
        with stage("draw figures"):
            figures = {
                block.key: draw(block).element for block in all_blocks(document) if isinstance(block, FigureBlock)
            }
        with stage("set the page, twice"):
            page(document, figures, "screen")
            printed = page(document, figures, "print")
        with stage("lay out the PDF"):
            pdf = pdf_of(printed)
    whole = sum(spent.values())
    print(f"\n{study}: {whole:.2f} processor seconds, {pdf.pages} pages, {whole / pdf.pages * 1000:.0f} ms a page")
    for name, seconds in spent.items():
        print(f"  {name:<26} {seconds:6.2f} s  {seconds / whole:5.0%}")
    print(f"  reading and analysing against laying out the PDF: 1 to {_ratio(spent):.1f}")


def _ratio(spent: dict[str, float]) -> float:
    return spent["lay out the PDF"] / (spent["read spec and data"] + spent["analyse"])


def _processor_seconds() -> float:
    children = resource.getrusage(resource.RUSAGE_CHILDREN)
    return time.process_time() + children.ru_utime + children.ru_stime


if __name__ == "__main__":
    main()

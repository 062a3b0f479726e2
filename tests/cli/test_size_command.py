"""``rankdocket size``: its answer, its refusals, and the page it writes."""

import json
import shlex
from collections.abc import Callable
from pathlib import Path

import pytest
from pypdf import PdfReader

from workflow.office import ROOT, Ran

Here = Callable[..., Ran]

SHOW = ("size", "--to-show", "0.40")
MEASURE = ("size", "--to-measure", "0.4", "--within-width", "0.3")


def test_the_answer_is_a_sentence_and_a_table(here: Here, tmp_path: Path) -> None:
    """The sentence first, then rows of rho by columns of power, then the caveats; no line runs off a terminal."""
    ran = here(*SHOW, cwd=tmp_path)
    assert (ran.status, ran.err) == (0, "")
    lines = ran.out.splitlines()
    assert lines[0] == "To show a rho of 0.40 with power 0.80, 48 complete rows are needed, tested at 0.05 two-sided."
    assert "0.40           48           64           79" in lines
    assert sum(line.startswith("Caveat ") for line in lines) == 3
    assert max(map(len, lines)) <= 100
    assert list(tmp_path.iterdir()) == []


def test_json_holds_the_numbers_as_text(here: Here, tmp_path: Path) -> None:
    """One object with a schema; what is no count is text of at most twelve digits, and what was asked stands in it."""
    ran = here(*SHOW, "--questions", "6", "--missing", "0.1", "--json", cwd=tmp_path)
    assert (ran.status, ran.err, ran.out.count("\n")) == (0, "", 1)
    plain = json.loads(ran.out, parse_float=lambda text: pytest.fail(f"{text} is no text"))
    assert plain["schema"] == "urn:rankdocket:size:1"
    assert plain["question"] == {
        "aim": "to show",
        "rho": "0.40",
        "power": "0.80",
        "alpha": "0.05",
        "alpha_each": "0.00833333333333",
        "sidedness": "two-sided",
        "questions": 6,
        "level": "0.95",
        "missing": "0.10",
        "expected_classes": [None, None],
    }
    assert (plain["rows"], plain["rows_to_collect"]) == (72, 80)
    assert plain["rho_left"] == "0.4"
    assert plain["by_form"]["two variances"]["rows"] == 72


def test_ties_may_be_expected_in_one_variable_or_two(here: Here, tmp_path: Path) -> None:
    """The option is given once or twice; ties ask for more rows, those of both variables for more still."""
    classes = ("--expected-classes", "10 20 40 20 10")
    rows = [
        here(*SHOW, *classes[:0], "--json", cwd=tmp_path).plain["rows"],
        here(*SHOW, *classes, "--json", cwd=tmp_path).plain["rows"],
        here(*SHOW, *classes, *classes, "--json", cwd=tmp_path).plain["rows"],
    ]
    assert rows == sorted(set(rows))


REFUSED = [
    ((), "--to-show: nothing says what the rows are needed for.", 27),
    ((*SHOW[1:], "--to-measure", "0.3"), "--to-measure: one command plans for one aim", 40),
    ((*SHOW[1:], "--within-width", "0.3"), "--within-width: a width is planned for when", 42),
    ((*MEASURE[1:], "--power", "0.8"), "--power: it belongs to a test", 42),
    (("--to-measure", "0.4"), "--within-width: --to-measure needs the width", 41),
    (("--to-show", "0.4o"), '--to-show: "0.4o" is not a decimal number.', 30),
    (("--to-show", "4e-1"), '--to-show: "4e-1" is not a decimal number.', 30),
    (("--to-show", ""), '--to-show: "" is not a decimal number.', 30),
    (("--to-show", "0"), '--to-show: "0" is not between 0.001 and 0.999 in size.', 31),
    (("--to-show", "1"), '--to-show: "1" is not between 0.001 and 0.999 in size.', 31),
    (("--to-measure", "-0.96", "--within-width", "0.3"), '"-0.96" is not between 0 and 0.95 in size.', 31),
    (("--to-measure", "0.4", "--within-width", ""), '--within-width: "" is not a decimal number.', 30),
    (("--to-measure", "0.4", "--within-width", "2"), '--within-width: "2" is not between 0.01 and 1.9.', 31),
    ((*SHOW[1:], "--power", "0.4"), '--power: "0.4" is not between 0.5 and 0.999.', 31),
    ((*SHOW[1:], "--alpha", "5%"), '--alpha: "5%" is not a decimal number.', 30),
    ((*SHOW[1:], "--alpha", "-0.05"), '--alpha: "-0.05" is not between', 31),
    ((*SHOW[1:], "--missing", "1"), '--missing: "1" is not between 0 and 0.95.', 31),
    ((*SHOW[1:], "--questions", "six"), '--questions: "six" is not a whole number from 1 to 1,000,000.', 49),
    ((*SHOW[1:], "--questions", "2.0"), '--questions: "2.0" is not a whole number', 49),
    ((*SHOW[1:], "--sidedness", "two sided"), '"two sided" is no sidedness. nearest: two-sided.', 29),
    ((*SHOW[1:], "--level", "0.94"), "--level: the width of the interval was not simulated at 0.94.", 29),
    ((*SHOW[1:], "--expected-classes", "10"), '--expected-classes: "10" holds 1 shares', 28),
    ((*SHOW[1:], "--expected-classes", "10 0"), '--expected-classes: "0" is not between', 31),
    ((*SHOW[1:], *("--expected-classes", "1 1") * 3), "--expected-classes: it is given 3 times", 50),
    (
        ("--to-show", "0.01", *("--expected-classes", "1000000 0.000001") * 2),
        "--expected-classes: no plan can be made: the expected ties leave next to nothing of rho.",
        31,
    ),
    ((*SHOW[1:], "--page", "rows.docx"), '--page: "rows.docx" ends neither in .html nor in .pdf', 32),
]


@pytest.mark.parametrize(("options", "told", "number"), REFUSED)
def test_what_cannot_be_planned_is_refused(
    options: tuple[str, ...], told: str, number: int, here: Here, tmp_path: Path
) -> None:
    """Each fault is told with its option, what to write and its message number; status 3, nothing is written."""
    ran = here("size", *options, cwd=tmp_path)
    assert (ran.status, ran.out) == (3, "")
    first, last = ran.err.splitlines()
    assert told in first
    assert first.endswith(f"(message {number})")
    assert last == "Nothing was computed."
    assert list(tmp_path.iterdir()) == []


def test_all_faults_come_at_once(here: Here, tmp_path: Path) -> None:
    """Four options that cannot be used are four faults of one answer, also as JSON."""
    wrong = ("--to-show", "x", "--power", "2", "--sidedness", "both", "--questions", "0")
    assert len(here("size", *wrong, cwd=tmp_path).err.splitlines()) == 5
    faults = here("size", *wrong, "--json", cwd=tmp_path).plain["faults"]
    assert {fault["file"] for fault in faults} == {"--to-show", "--power", "--sidedness", "--questions"}


@pytest.mark.parametrize("name", ["rows.html", "rows.pdf"])
def test_a_page_is_written_once_and_comes_again(name: str, here: Here, tmp_path: Path) -> None:
    """The same command finds its page as it is; a page with other contents is never written over."""
    ran = here(*SHOW, "--page", name, cwd=tmp_path)
    assert (ran.status, ran.err) == (0, "")
    assert ran.out.endswith(f"\n\nThe page lies at {name}\n")
    written = (tmp_path / name).read_bytes()
    assert here(*SHOW, "--page", name, "--json", cwd=tmp_path).plain["page"] == name
    assert (tmp_path / name).read_bytes() == written
    other = here(*MEASURE, "--page", name, cwd=tmp_path)
    assert (other.status, other.out) == (3, "")
    assert other.err.startswith(f"{name}: something else of this name is there, and nothing is written over.")
    assert (tmp_path / name).read_bytes() == written
    assert [path.name for path in tmp_path.iterdir()] == [name]


def test_the_pdf_says_what_the_terminal_says(here: Here, tmp_path: Path) -> None:
    """The one page of the PDF holds the answer, every row of the table, and where the formula comes from."""
    ran = here(*SHOW, "--page", "rows.pdf", cwd=tmp_path)
    [page] = PdfReader(tmp_path / "rows.pdf").pages
    text = " ".join(page.extract_text().split())
    assert ran.out.splitlines()[0] in text
    for line in ran.out.splitlines()[5:10]:
        assert " ".join(line.split()) in text
    assert "Psychometrika 65" in text


def test_a_folder_that_is_not_there_is_told(here: Here, tmp_path: Path) -> None:
    """Where the page cannot be written the system's word is passed on, with status 4."""
    ran = here(*SHOW, "--page", "nowhere/rows.html", cwd=tmp_path)
    assert (ran.status, ran.out) == (4, "")
    assert ran.err.startswith("The system refused nowhere/rows.html: No such file or directory.")


def test_readme_shows_what_the_program_prints(here: Here, tmp_path: Path) -> None:
    """The command in README and its output are the real ones."""
    readme = (ROOT / "README.md").read_text(encoding="utf-8")
    line, _, printed = readme.partition("\n$ rankdocket size ")[2].partition("\n```\n")[0].partition("\n")
    assert line
    assert here("size", *shlex.split(line), cwd=tmp_path).out == printed + "\n"

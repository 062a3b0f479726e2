"""The house's rules that a program can hold: words, sizes, sentences, rounding, and what lies at the top."""

import ast
import re
import subprocess
import sys

import rankdocket
from house.ground import ROOT, SRC, TEMPLATES, definitions, names_given, tracked, trees
from workflow.office import Sealed, surroundings

NEVER = frozenset(
    (
        "project",
        "job",
        "dataset",
        "datasets",
        "preprocess",
        "assumption",
        "assumptions",
        "registry",
        "plugin",
        "coef",
        "robustness",
        "significant",
        "significance",
        "star",
        "stars",
        "payload",
        "log",
        "cache",
        "diff",
        "batch",
        "bundle",
        "util",
        "utils",
        "helper",
        "helpers",
        "manager",
        "common",
        "clean",
    )
)
"""Words of the "never" column, and of file names, that no name in the program is made of."""

ROUNDING_CALLS = frozenset(("round", "quantize", "create_decimal", "rint", "around", "plus", "set_printoptions"))
MAY_ROUND = {
    "document/numbers.py": "the only rounding of a printed number",
    "analysis/filing.py": "twelve significant digits of a filed value",
    "workflow/record_checker.py": "repeats the filing on purpose, without the program",
    "render/canvas.py": "coordinates of a drawing on its sheet",
    "render/blocks.py": "widths of columns in ems",
    "render/ticks.py": "labels of axes, which are exact multiples of their step",
}
MOST_LINES = 400
MAY_BE_LONGER = {
    "src/rankdocket/workflow/record_checker.py": (
        700,
        "one file by decision: it leaves the house in every record copy, and recomputes what every kind of result files",
    ),
}

TOP = {
    ".ci",
    ".gitignore",
    ".readme",
    "DEVELOPERS.md",
    "README.md",
    "pyproject.toml",
    "report_templates",
    "src",
    "studies",
    "tests",
}


def test_names_keep_to_the_vocabulary() -> None:
    """No module, function, class, argument or variable is named with a word that the house does not say."""
    hits = [
        f"{path}: {name}"
        for path, tree in trees().items()
        for name in (path.rsplit("/", 1)[-1].removesuffix(".py"), *names_given(tree))
        if not NEVER.isdisjoint(word.lower() for word in re.findall(r"[A-Z]?[a-z]+|[A-Z]+", name))
    ]
    assert hits == []


def test_nothing_in_the_program_looks_like_a_test() -> None:
    """No name in the package begins with test_ or Test, so that no collector takes it for one."""
    assert [
        f"{path}: {name}"
        for path, tree in trees().items()
        for name in names_given(tree)
        if re.match("test_|Test", name)
    ] == []
    assert [path for path in trees() if path.rsplit("/", 1)[-1].startswith("test_")] == []


def _rounds(node: ast.AST) -> bool:
    match node:
        case ast.Call(func=ast.Name(id=name)) | ast.Call(func=ast.Attribute(attr=name)):
            return name in ROUNDING_CALLS
        case ast.FormattedValue(format_spec=ast.JoinedStr() as spec):
            return "." in ast.unparse(spec).replace("self.", "")
        case ast.BinOp(op=ast.Mod(), left=ast.Constant(value=str())):
            return True
        case ast.Constant(value=str(text)):
            return re.search(r"\{[^{}]*:[^{}]*\.\d", text) is not None
        case _:
            return False


def test_rounding_has_its_places() -> None:
    """Only the files of the list round anything, each for its reason; a file on the list that rounds nothing goes."""
    rounding = {path for path, tree in trees().items() if any(_rounds(node) for node in ast.walk(tree))}
    assert rounding == set(MAY_ROUND)


def test_files_fit_in_a_head() -> None:
    """No file of the program and no template is longer than 400 lines, but for the list, each for its reason."""
    files = [*SRC.rglob("*.py"), *(path for path in TEMPLATES.rglob("*") if path.is_file())]
    lengths = {path.relative_to(ROOT).as_posix(): len(path.read_text(encoding="utf-8").splitlines()) for path in files}
    longer = {name: length for name, length in lengths.items() if length > MOST_LINES}
    assert longer.keys() == MAY_BE_LONGER.keys()
    assert all(length <= MAY_BE_LONGER[name][0] for name, length in longer.items())


def test_everything_public_says_what_it_is() -> None:
    """Every module and every public function, class and method has a docstring."""
    silent = [path for path, tree in trees().items() if tree.body and not ast.get_docstring(tree)]
    silent += [
        f"{path}: {name}"
        for path, tree in trees().items()
        for name, node in definitions(tree)
        if not any(part.startswith("_") for part in name.split(".")) and "." not in name and not ast.get_docstring(node)
    ]
    assert silent == []


def test_functions_take_few_arguments() -> None:
    """More than five parameters mean a missing type; a command has one for each of its options."""
    many = [
        f"{path}: {name}"
        for path, tree in trees().items()
        for name, node in definitions(tree)
        if isinstance(node, ast.FunctionDef)
        and not path.startswith("cli/")
        and len([arg for arg in (*node.args.posonlyargs, *node.args.args) if arg.arg not in {"self", "cls"}]) > 5
    ]
    assert many == []


def test_nothing_is_left_for_later() -> None:
    """No file holds a mark of unfinished work, a skipped test or an expected failure."""
    marks = re.compile(
        "|".join(("TO" + "DO", "FIX" + "ME", "XX" + "X", r"pytest\.mark\.sk" + "ip", r"pytest\.mark\.xf" + "ail"))
    )
    hits = [
        name
        for name in tracked()
        if name.endswith((".py", ".j2", ".css", ".yaml", ".toml", ".md"))
        and marks.search((ROOT / name).read_text("utf-8"))
    ]
    assert hits == []


def test_the_top_holds_only_what_belongs_there() -> None:
    """The top level has the program, its looks, studies, tests and papers, and nothing else."""
    found = {name.split("/")[0] for name in tracked()}
    assert {"README.md", "pyproject.toml", "src", "tests"} <= found <= TOP


def test_no_file_of_the_program_names_a_place_of_a_machine() -> None:
    """No absolute path stands in a text of the program or in a template."""
    machine = re.compile(r"""["'(= ](?:/(?:home|root|tmp|work|usr|var|opt|etc|Users|mnt|srv)/|[A-Z]:\\)""")
    files = [*SRC.rglob("*.py"), *(path for path in TEMPLATES.rglob("*") if path.is_file())]
    assert [
        path.relative_to(ROOT).as_posix() for path in files if machine.search(path.read_text(encoding="utf-8"))
    ] == []


def test_the_name_space_is_open_to_type_checkers() -> None:
    """The package says that its types can be relied on, and every public name is there and has a home."""
    assert (SRC / "py.typed").is_file()
    assert [name for name in rankdocket.__all__ if getattr(rankdocket, name, None) is None] == []


def test_warnings_do_not_come_from_the_program(issued: Sealed) -> None:
    """Screening with every warning made an error ends as it does without."""
    done = subprocess.run(
        [sys.executable, "-P", "-W", "error", "-m", "rankdocket", "screen", str(issued.study)],
        env=surroundings(),
        capture_output=True,
        check=False,
    )
    assert (done.returncode, done.stderr) == (0, b"")

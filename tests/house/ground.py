"""Where the house stands, and its source files as syntax trees."""

import ast
import shutil
import subprocess
from collections.abc import Iterator
from functools import cache
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
SRC = ROOT / "src" / "rankdocket"
TEMPLATES = ROOT / "report_templates"


@cache
def trees() -> dict[str, ast.Module]:
    """Return path below the package → syntax tree of every module."""
    return {
        path.relative_to(SRC).as_posix(): ast.parse(path.read_text(encoding="utf-8"))
        for path in sorted(SRC.rglob("*.py"))
    }


def tracked() -> tuple[str, ...]:
    """Return the files that the repository holds; without git, all that lie there and are not made by a tool."""
    git = shutil.which("git")
    if git is not None:
        listing = [git, "-c", "safe.directory=*", "ls-files"]
        found = subprocess.run(listing, cwd=ROOT, capture_output=True, check=False, encoding="utf-8")
        if found.returncode == 0:
            return tuple(found.stdout.splitlines())
    return tuple(
        path.relative_to(ROOT).as_posix()
        for path in sorted(ROOT.rglob("*"))
        if path.is_file() and not _MADE_BY_TOOLS.intersection(path.relative_to(ROOT).parts)
    )


_MADE_BY_TOOLS = {
    "__pycache__",
    ".git",
    ".venv",
    "build",
    "dist",
    ".mypy_cache",
    ".pytest_cache",
    ".import_linter_cache",
    ".ruff_cache",
    ".hypothesis",
}


def definitions(tree: ast.Module) -> Iterator[tuple[str, ast.FunctionDef | ast.ClassDef]]:
    """Yield every function and class with its dotted name, methods and inner classes included."""
    waiting: list[tuple[str, ast.AST]] = [("", tree)]
    while waiting:
        prefix, node = waiting.pop()
        for child in ast.iter_child_nodes(node):
            if isinstance(child, (ast.FunctionDef, ast.ClassDef)):
                name = f"{prefix}{child.name}"
                yield name, child
                waiting.append((f"{name}.", child))


def names_given(tree: ast.Module) -> Iterator[str]:
    """Yield every name that a module gives to something: functions, classes, arguments, variables, attributes."""
    for node in ast.walk(tree):
        match node:
            case ast.FunctionDef(name=name) | ast.ClassDef(name=name) | ast.arg(arg=name):
                yield name
            case ast.Name(id=name, ctx=ast.Store()) | ast.Attribute(attr=name, ctx=ast.Store()):
                yield name
            case _:
                continue

"""The table of versions and the digest of the program."""

import getpass
import os
import platform
import re
import shutil
import subprocess
import sys
from importlib.metadata import version
from pathlib import Path

from rankdocket.register import environment
from rankdocket.register.environment import components, program_digest


def test_the_table_names_everything_that_may_move_a_digit_or_a_byte() -> None:
    names = [component.name for component in components()]
    assert names[:2] == ["rankdocket", "Python"]
    assert {"numpy", "scipy", "pydantic", "PyYAML", "jinja2", "matplotlib", "weasyprint", "pydyf"} <= set(names)
    assert names[-5:] == ["Pango", "HarfBuzz", "zlib", "operating system", "processor"]
    assert all(component.version and component.role for component in components())


def test_versions_are_those_of_the_installed_libraries() -> None:
    found = {component.name: component.version for component in components()}
    assert found["numpy"] == version("numpy")
    assert found["PyYAML"] == version("pyyaml")
    assert found["Python"] == platform.python_version()
    assert re.fullmatch(r"[0-9]+(\.[0-9]+)+", found["HarfBuzz"])
    assert re.fullmatch(r"[0-9]+(\.[0-9]+)+", found["Pango"])


def test_neither_host_nor_user_nor_path_stands_in_the_table() -> None:
    words = {word for component in components() for word in (component.name, component.version, component.role)}
    assert not words & {platform.node(), getpass.getuser(), str(Path.home())}
    assert not any(os.sep in word for word in words)


def test_the_table_imports_none_of_the_libraries_it_names() -> None:
    script = (
        "import sys; from rankdocket.register.environment import components; components();"
        "print(sorted({'numpy', 'scipy', 'pydantic', 'yaml', 'jinja2', 'matplotlib', 'weasyprint'} & sys.modules.keys()))"
    )
    assert _python(script, _source_folder()) == "[]"


def test_a_library_that_is_not_there_is_said_to_be_not_found() -> None:
    # Without site packages only the standard library is left.
    script = (
        f"import sys; sys.path.insert(0, {str(_source_folder())!r});"
        "from rankdocket.register.environment import components;"
        "print({c.name: c.version for c in components()}['numpy'])"
    )
    run = subprocess.run([sys.executable, "-I", "-S", "-c", script], capture_output=True, text=True, check=True)
    assert run.stdout.strip() == "not found"


def test_the_programs_digest_moves_with_any_of_its_files_and_with_nothing_else(tmp_path: Path) -> None:
    package = _copy_of_package(tmp_path / "a" / "src")
    digest = _digest_from(package)
    assert digest == _digest_from(_copy_of_package(tmp_path / "b" / "src"))
    (package / "__pycache__").mkdir(exist_ok=True)
    (package / "__pycache__" / "more.pyc").write_bytes(b"1")
    assert _digest_from(package) == digest
    with (package / "canonical.py").open("ab") as file:
        file.write(b"\n")
    assert _digest_from(package) != digest


def test_templates_beside_the_source_count_as_those_inside_an_installed_package(tmp_path: Path) -> None:
    source = _copy_of_package(tmp_path / "tree" / "src")
    without = _digest_from(source)
    (tmp_path / "tree" / "report_templates" / "css").mkdir(parents=True)
    (tmp_path / "tree" / "report_templates" / "css" / "page.css").write_bytes(b"p {}")
    installed = _copy_of_package(tmp_path / "installed")
    shutil.copytree(tmp_path / "tree" / "report_templates", installed / "report_templates")
    assert _digest_from(source) == _digest_from(installed) != without


def test_the_programs_digest_is_64_hexadecimal_digits() -> None:
    assert re.fullmatch("[0-9a-f]{64}", program_digest())


def _source_folder() -> Path:
    return Path(environment.__file__).parents[2]


def _copy_of_package(into: Path) -> Path:
    package = into / "rankdocket"
    leave = shutil.ignore_patterns("__pycache__", "report_templates")
    shutil.copytree(_source_folder() / "rankdocket", package, ignore=leave)
    return package


def _digest_from(package: Path) -> str:
    return _python("from rankdocket.register.environment import program_digest as d; print(d())", package.parent)


def _python(script: str, source: Path) -> str:
    run = subprocess.run(
        [sys.executable, "-c", script],
        capture_output=True,
        text=True,
        check=True,
        env={**os.environ, "PYTHONPATH": str(source)},
    )
    return run.stdout.strip()

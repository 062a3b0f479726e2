"""What made an edition: the program, the libraries and the machine's family, without host, user or path."""

import ctypes
import platform
import zlib
from dataclasses import dataclass
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path
from typing import Final

from rankdocket.canonical import digest_of, sha256

NOT_FOUND: Final = "not found"

_PACKAGE: Final = Path(__file__).resolve().parent.parent
_TEMPLATES: Final = "report_templates"

_DISTRIBUTIONS: Final = (
    ("numpy", "arithmetic on arrays"),
    ("scipy", "distributions and special functions"),
    ("pydantic", "shape of the spec"),
    ("PyYAML", "reading the spec"),
    ("jinja2", "page templates"),
    ("matplotlib", "figures"),
    ("weasyprint", "page layout"),
    ("pydyf", "writing the PDF"),
    ("fonttools", "embedding the type faces"),
)
_PANGO_FILES: Final = ("libpango-1.0.so.0", "libpango-1.0.0.dylib", "libpango-1.0-0.dll")
_HARFBUZZ_FILES: Final = ("libharfbuzz.so.0", "libharfbuzz.0.dylib", "libharfbuzz-0.dll")
_SHARED: Final = (
    ("Pango", "line breaking", "pango_version_string", _PANGO_FILES),
    ("HarfBuzz", "shaping of text", "hb_version_string", _HARFBUZZ_FILES),
)


@dataclass(frozen=True, slots=True)
class Component:
    """One line of an edition's table of versions: what, which version, its role in the report."""

    name: str
    version: str
    role: str


def components() -> tuple[Component, ...]:
    """Return everything that may move a digit or a byte of an edition, in the order of the printed table.

    A library that is not there has the version :data:`NOT_FOUND`.  No library is imported for it, except that the
    two shared libraries of the layout are asked for their own version.
    """
    return (
        Component("rankdocket", _version_of("rankdocket"), "the program"),
        Component("Python", platform.python_version(), "runs the program"),
        *(Component(name, _version_of(name), role) for name, role in _DISTRIBUTIONS),
        *(Component(name, _shared_version(names, call), role) for name, role, call, names in _SHARED),
        Component("zlib", zlib.ZLIB_RUNTIME_VERSION, "compression inside the PDF"),
        Component("operating system", platform.system() or NOT_FOUND, "family only"),
        Component("processor", platform.machine() or NOT_FOUND, "architecture only"),
    )


def program_digest() -> str:
    """Return one digest of the names and bytes of the program's own files: code, data and page templates.

    It is the same for an installed package and for the source tree it was built from: templates are counted as if
    they stood inside the package, where installing puts them.
    """
    roots = {"": _PACKAGE}
    beside = _PACKAGE.parent.parent / _TEMPLATES
    if not (_PACKAGE / _TEMPLATES).is_dir() and beside.is_dir():
        roots[f"{_TEMPLATES}/"] = beside
    return digest_of(
        {
            prefix + path.relative_to(root).as_posix(): sha256(path.read_bytes())
            for prefix, root in roots.items()
            for path in root.rglob("*")
            if path.is_file() and _is_source(path.relative_to(root))
        }
    )


def _is_source(path: Path) -> bool:
    return not any(part == "__pycache__" or part.startswith(".") for part in path.parts)


def _version_of(distribution: str) -> str:
    try:
        return version(distribution)
    except PackageNotFoundError:
        return NOT_FOUND


def _shared_version(names: tuple[str, ...], call: str) -> str:
    for name in names:
        try:
            function = getattr(ctypes.CDLL(name), call)
        except (OSError, AttributeError):
            continue
        function.restype = ctypes.c_char_p
        found = function()
        return found.decode("ascii") if isinstance(found, bytes) else NOT_FOUND
    return NOT_FOUND

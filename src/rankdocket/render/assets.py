"""Where the looks lie: the templates folder, in a checkout and in an installed package."""

from importlib.util import find_spec
from pathlib import Path
from typing import Final

from rankdocket.errors import RenderError

TEMPLATES_NAME: Final = "report_templates"
FRAME_NAME: Final = "report.html.j2"
LEAF_NAME: Final = "leaf.html.j2"


def templates_folder() -> Path:
    """Return the folder of the report templates.

    An installed package carries it inside itself; in a checkout it stands beside ``src``.

    Raises
    ------
    RenderError
        If neither place holds it.
    """
    package = Path(__file__).resolve().parent.parent
    for folder in (package / TEMPLATES_NAME, package.parent.parent / TEMPLATES_NAME):
        if (folder / FRAME_NAME).is_file():
            return folder
    raise RenderError(f"The folder {TEMPLATES_NAME} is missing from this installation; install the package again.")


def package_file(package: str, inside: str) -> Path:
    """Return the path of a data file that an installed package carries.

    Raises
    ------
    RenderError
        If the package or the file is not there.
    """
    spec = find_spec(package)
    for folder in (spec.submodule_search_locations or ()) if spec is not None else ():
        path = Path(folder) / inside
        if path.is_file():
            return path
    raise RenderError(f"The file {inside} of the package {package} is missing; install the package again.")

"""The page about rows, written to a file of the user's choice."""

from pathlib import Path

from rankdocket.errors import InputError, Place
from rankdocket.render.leaf import leaf_html, leaf_pdf
from rankdocket.study.messages import Message, fault
from rankdocket.workflow.size import Sized
from rankdocket.writing.size_page import size_leaf


def write_page(sized: Sized, name: str) -> None:
    """Write the page to ``name``, whole or not at all; a file that holds it already is left as it is.

    Parameters
    ----------
    sized
        What is said.
    name
        A path that ends in ".html" or ".pdf".

    Raises
    ------
    InputError
        If another file stands there: nothing of the user's is overwritten.
    RenderError
        If the page cannot be made.
    """
    content = _content(sized, name)
    path = Path(name)
    if path.exists():
        if path.is_file() and path.read_bytes() == content:
            return
        raise InputError(
            (
                fault(
                    Place(name),
                    "",
                    Message.ENTRY_TWICE,
                    "something else of this name is there, and nothing is written over.",
                    "Give another name to --page, or move the old file away.",
                ),
            )
        )
    _put(path, content)


def _content(sized: Sized, name: str) -> bytes:
    leaf = size_leaf(sized.story, sized.program)
    return leaf_html(leaf) if name.endswith(".html") else leaf_pdf(leaf).file


def _put(path: Path, content: bytes) -> None:
    with path.open("xb") as file:
        try:
            file.write(content)
            file.flush()
        except BaseException:
            path.unlink()
            raise

"""Size: how many rows a study needs, before there are any."""

import textwrap
from collections.abc import Mapping
from dataclasses import dataclass
from importlib.metadata import version
from typing import Final

from rankdocket.analysis.sizing import SizeQuestion
from rankdocket.analysis.sizing import size as size_of
from rankdocket.analysis.sizing_plain import size_to_plain
from rankdocket.canonical import Plain
from rankdocket.document.model import Block, CaveatBlock, Paragraph
from rankdocket.errors import InputError, Place
from rankdocket.render.text import block_text
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.study.messages import Message, fault
from rankdocket.writing.size_page import size_answer, told
from rankdocket.writing.size_words import Told

LINE: Final = 100
"""Signs of a line on a terminal."""


@dataclass(frozen=True, slots=True)
class Sized:
    """An answer: in words, as plain data, and as what a page is written from."""

    words: str
    plain: Mapping[str, Plain]
    story: Told
    program: str


def size(question: SizeQuestion) -> Sized:
    """Return how many rows are needed.

    Raises
    ------
    InputError
        If no plan can be made for the rho that the expected ties leave.
    """
    answer = size_of(question)
    if isinstance(answer, NoAnswer):
        raise InputError(
            (
                fault(
                    Place("--expected-classes"),
                    "",
                    Message.OUT_OF_RANGE,
                    f"no plan can be made: {answer.reason}.",
                    "Expect more even shares, or another rho.",
                ),
            )
        )
    program = version("rankdocket")
    plain = size_to_plain(answer, program)
    story = told(answer, plain)
    return Sized("\n\n".join(map(_spoken, size_answer(story))), plain, story, program)


def _spoken(block: Block) -> str:
    """Return a block as a terminal shows it: running text wrapped, a table as it is set."""
    text = block_text(block)
    return textwrap.fill(text, LINE) if isinstance(block, (Paragraph, CaveatBlock)) else text

"""How the tests of this room gather what an input is refused with."""

from collections.abc import Callable

from rankdocket.errors import InputError
from rankdocket.study.reader import read_spec


def messages(call: Callable[[], object]) -> list[str]:
    """Return the messages of the InputError that ``call`` raises; no error gives an empty list."""
    try:
        call()
    except InputError as error:
        return [str(fault) for fault in error.faults]
    return []


def spec_messages(text: str) -> list[str]:
    return messages(lambda: read_spec(text, "s.yaml"))


def changed(text: str, *changes: tuple[str, str]) -> str:
    """Return ``text`` with each first part, which must be there, replaced once by its second."""
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text

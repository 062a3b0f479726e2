"""Typed reading of the plain data that a figure carries; a drawing draws nothing it does not understand."""

from collections.abc import Mapping, Sequence
from decimal import Decimal, InvalidOperation

from rankdocket.canonical import Plain
from rankdocket.errors import RenderError


def text_of(data: Mapping[str, Plain], name: str) -> str:
    """Return a text; absent counts as empty.

    Raises
    ------
    RenderError
        If something else stands there.
    """
    found = data.get(name)
    if found is None:
        return ""
    if not isinstance(found, str):
        raise RenderError(f"The figure data {name!r} are {found!r}; a text was expected.")
    return found


def decimal_of(data: Mapping[str, Plain], name: str) -> Decimal | None:
    """Return a decimal number written as text, or ``None`` where there is none.

    Raises
    ------
    RenderError
        If it is not a finite decimal number.
    """
    found = data.get(name)
    if found is None:
        return None
    try:
        number = Decimal(found) if isinstance(found, str) else None
    except InvalidOperation:
        number = None
    if number is None or not number.is_finite():
        raise RenderError(f"The figure data {name!r} are {found!r}; a decimal number as text was expected.")
    return number


def number_of(data: Mapping[str, Plain], name: str) -> Decimal:
    """Return a decimal number that must be there.

    Raises
    ------
    RenderError
        If it is absent or not a finite decimal number.
    """
    found = decimal_of(data, name)
    if found is None:
        raise RenderError(f"The figure data lack {name!r}.")
    return found


def count_of(data: Mapping[str, Plain], name: str) -> int:
    """Return a whole number of at least 1.

    Raises
    ------
    RenderError
        If anything else stands there.
    """
    found = data.get(name)
    if not isinstance(found, int) or isinstance(found, bool) or found < 1:
        raise RenderError(f"The figure data {name!r} are {found!r}; a count of at least 1 was expected.")
    return found


def part_of(data: Mapping[str, Plain], name: str) -> Mapping[str, Plain]:
    """Return an object that must be there.

    Raises
    ------
    RenderError
        If anything else stands there.
    """
    found = data.get(name)
    if not isinstance(found, Mapping):
        raise RenderError(f"The figure data {name!r} are {found!r}; an object was expected.")
    return found


def parts_of(data: Mapping[str, Plain], name: str) -> tuple[Mapping[str, Plain], ...]:
    """Return a list of objects; absent counts as empty.

    Raises
    ------
    RenderError
        If anything else stands there.
    """
    found = data.get(name, ())
    if isinstance(found, str) or not isinstance(found, Sequence):
        raise RenderError(f"The figure data {name!r} are {found!r}; a list was expected.")
    objects = tuple(item for item in found if isinstance(item, Mapping))
    if len(objects) != len(found):
        raise RenderError(f"The figure data {name!r} hold something that is not an object.")
    return objects

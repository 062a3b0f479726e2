"""What can go wrong, in the coordinates of the person who can mend it.

Three classes: an :class:`InputError` lists every fault of the user's files at once, a :class:`ComputeError`
and a :class:`RenderError` say that nothing was sealed, a :class:`RegisterError` concerns editions and the
register.  Findings about data (too few rows, a constant column) are never exceptions.
"""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True, order=True)
class Place:
    """A point in a file as its reader counts: lines and columns from 1; ``file`` as the user wrote it."""

    file: str
    line: int | None = None
    column: int | None = None

    def __str__(self) -> str:
        parts = [self.file]
        if self.line is not None:
            parts.append(str(self.line))
            if self.column is not None:
                parts.append(str(self.column))
        return ":".join(parts)


@dataclass(frozen=True, slots=True)
class Fault:
    """One thing that is wrong, where it is, and what to write instead.

    Attributes
    ----------
    place
        The file and, where known, the line and column.
    field
        The key's address in the spec (``associations.A2.hypothesis``) or the row and column of a data cell;
        empty when the whole file is meant.
    what
        What was found and what was expected, as sentences.
    remedy
        The exact line to write or the step to take.
    number
        The stable message number, printed as ``(message 12)``.
    """

    place: Place
    field: str
    what: str
    remedy: str
    number: int

    def __str__(self) -> str:
        field = f" {self.field}:" if self.field else ""
        remedy = f" {self.remedy}" if self.remedy else ""
        return f"{self.place}:{field} {self.what}{remedy} (message {self.number})"


class RankdocketError(Exception):
    """Base of every error that this program raises on purpose."""


class InputError(RankdocketError):
    """The user's files cannot be used as they are: every fault found, in file order.

    Parameters
    ----------
    faults
        At least one fault.
    """

    def __init__(self, faults: tuple[Fault, ...]) -> None:
        if not faults:
            raise ValueError("an InputError needs at least one fault")
        self.faults = faults
        super().__init__("\n".join(str(fault) for fault in faults))

    def __reduce__(self) -> tuple[type["InputError"], tuple[tuple[Fault, ...]]]:
        # The default would hand the joined text to __init__ when the error comes back from a worker process.
        return (InputError, (self.faults,))


class ComputeError(RankdocketError):
    """A computation broke one of its own laws; nothing was sealed."""


class RenderError(RankdocketError):
    """A page could not be made; nothing was sealed."""


class RegisterError(RankdocketError):
    """An edition or the register is not as it must be, or cannot be written; nothing was sealed."""

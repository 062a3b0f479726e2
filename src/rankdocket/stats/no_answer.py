"""That a question has no answer, and why."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class NoAnswer:
    """That there is no answer, and why, as the end of a sentence without its full stop."""

    reason: str

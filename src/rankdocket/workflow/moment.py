"""The time of an act: the one place where the clock is read."""

import os
from dataclasses import dataclass
from datetime import UTC, datetime

from rankdocket.errors import InputError, Place
from rankdocket.study.messages import Message, fault


@dataclass(frozen=True, slots=True)
class Moment:
    """A point in time in UTC, ISO 8601, and how it was got, in the register's words."""

    time: str
    source: str

    @property
    def date(self) -> str:
        """The day alone."""
        return self.time[:10]


def now() -> Moment:
    """Return the time of the local clock, or the one given in SOURCE_DATE_EPOCH (reproducible-builds.org).

    Raises
    ------
    InputError
        If SOURCE_DATE_EPOCH is set and is not a whole number of seconds.
    """
    given = os.environ.get("SOURCE_DATE_EPOCH")
    if given is None:
        return Moment(_iso(datetime.now(UTC)), "local clock, not proven")
    try:
        return Moment(_iso(datetime.fromtimestamp(int(given), UTC)), "time given, not read from the clock")
    except (ValueError, OverflowError, OSError):
        raise InputError(
            (
                fault(
                    Place("SOURCE_DATE_EPOCH"),
                    "",
                    Message.DATE,
                    f"{given!r} is not a number of seconds since 1970.",
                    "Write a whole number, or unset it.",
                ),
            )
        ) from None


def _iso(moment: datetime) -> str:
    return moment.strftime("%Y-%m-%dT%H:%M:%SZ")

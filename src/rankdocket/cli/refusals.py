"""What a command refuses although the command line could be read."""

from rankdocket.errors import InputError, Place
from rankdocket.study.messages import Message, fault
from rankdocket.workflow.moment import now


def require_reason(reason: str) -> None:
    """Refuse a blank reason: it is printed on the control page and filed.

    Raises
    ------
    InputError
        If the reason holds no word.
    """
    if not reason.strip():
        raise InputError(
            (
                fault(
                    Place("--reason"),
                    "",
                    Message.NOTHING_WRITTEN,
                    "an edition needs a reason, and this one is blank.",
                    'Write: --reason "first issue".',
                ),
            )
        )


def require_usable_time() -> None:
    """Refuse a given time that is none before any library is imported: one of them stumbles over it by itself.

    Raises
    ------
    InputError
        If SOURCE_DATE_EPOCH is set and is not a whole number of seconds.
    """
    now()

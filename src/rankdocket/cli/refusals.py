"""What a command refuses although the command line could be read."""

from rankdocket.errors import InputError, Place
from rankdocket.study.messages import Message, fault
from rankdocket.study.wording import shown
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


def require_page_name(name: str | None) -> None:
    """Refuse a name for a page that says neither HTML nor PDF.

    Raises
    ------
    InputError
        If the name ends otherwise.
    """
    if name is not None and not name.endswith((".html", ".pdf")):
        raise InputError(
            (
                fault(
                    Place("--page"),
                    "",
                    Message.NAME,
                    f"{shown(name)} ends neither in .html nor in .pdf, so that it is not clear what to write.",
                    "Write: --page rows-needed.pdf.",
                ),
            )
        )

"""The options of ``rankdocket size`` as one question: every fault of them at once, none guessed away."""

from dataclasses import dataclass, fields
from decimal import Decimal
from typing import Final

from rankdocket.analysis.sizing import Circumstances, MeasureQuestion, Shares, ShowQuestion, SizeQuestion
from rankdocket.errors import Fault, InputError, Place
from rankdocket.stats.guarded_width import LARGEST_RHO, LEVELS
from rankdocket.study.messages import Message, fault
from rankdocket.study.wording import shown, suggestion
from rankdocket.vocabulary import SIDEDNESS, Sidedness

MOST_CLASSES: Final = 20
"""A variable with more distinct values than this is planned for as one without ties."""

MOST_QUESTIONS: Final = 1_000_000
MOST_SIGNS: Final = 12
"""Longest number that is read: no plan turns on more digits."""


@dataclass(frozen=True, slots=True)
class Given:
    """The options as they were typed; ``None`` for one that was not given."""

    to_show: str | None
    power: str | None
    alpha: str | None
    sidedness: str | None
    questions: str | None
    to_measure: str | None
    within_width: str | None
    level: str | None
    expected_classes: tuple[str, ...]
    missing: str | None


@dataclass(frozen=True, slots=True)
class _Range:
    """The decimals that an option takes: from ``low`` to ``high``, with an example.

    ``places`` is a 0 with as many places as each number is shown with at least.
    """

    low: Decimal
    high: Decimal
    example: str
    places: Decimal = Decimal("0.00")


_RHO_SHOWN: Final = _Range(Decimal("0.001"), Decimal("0.999"), "0.40")
_RHO_MEASURED: Final = _Range(Decimal(0), Decimal(str(LARGEST_RHO)), "0.40")
_WIDTH: Final = _Range(Decimal("0.01"), Decimal("1.9"), "0.30")
_POWER: Final = _Range(Decimal("0.5"), Decimal("0.999"), "0.80")
_ALPHA: Final = _Range(Decimal("0.000001"), Decimal("0.5"), "0.05")
_MISSING: Final = _Range(Decimal(0), Decimal("0.95"), "0.10")
_SHARE: Final = _Range(Decimal("0.000001"), Decimal(1_000_000), "20", Decimal(0))

_FOR_SHOWING: Final = ("power", "alpha", "sidedness", "questions")


class _Reader:
    """Reads one option after the other and keeps what is wrong with them."""

    def __init__(self) -> None:
        self.faults: list[Fault] = []

    def refuse(self, option: str, number: Message, what: str, remedy: str) -> None:
        self.faults.append(fault(Place(option), "", number, what, remedy))

    def decimal(self, option: str, text: str, allowed: _Range, *, signed: bool = False) -> Decimal:
        """Return the decimal of an option; where it cannot be used, what is wrong is kept and the example returned."""
        remedy = f"Write a decimal number with a point, as in: {option} {allowed.example}."
        if not _is_plain(text):
            self.refuse(option, Message.NOT_A_NUMBER, f"{shown(text)} is not a decimal number.", remedy)
            return Decimal(allowed.example)
        number = Decimal(text)
        if not allowed.low <= (abs(number) if signed else number) <= allowed.high:
            size = " in size" if signed else ""
            what = f"{shown(text)} is not between {allowed.low:f} and {allowed.high:f}{size}."
            self.refuse(option, Message.OUT_OF_RANGE, what, remedy)
            return Decimal(allowed.example)
        return number + allowed.places

    def count(self, option: str, text: str, most: int) -> int:
        """Return a whole number from 1 to ``most``."""
        number = int(text) if text.isascii() and text.isdecimal() and len(text) < len(str(most)) + 1 else 0
        if not 1 <= number <= most:
            what = f"{shown(text)} is not a whole number from 1 to {most:,}."
            self.refuse(option, Message.NOT_A_COUNT, what, f"Write: {option} 6.")
            return 1
        return number

    def sidedness(self, text: str) -> Sidedness:
        """Return the word of the closed list."""
        if text == "two-sided":
            return "two-sided"
        if text == "one-sided":
            return "one-sided"
        remedy = suggestion(text, SIDEDNESS, "Write one of")
        self.refuse("--sidedness", Message.NOT_IN_LIST, f"{shown(text)} is no sidedness.", remedy)
        return "two-sided"

    def level(self, text: str) -> Decimal:
        """Return a level at which the width was simulated."""
        number = self.decimal("--level", text, _Range(LEVELS[0], LEVELS[-1], str(LEVELS[1])))
        for level in LEVELS:
            if number == level:
                return level
        words = ", ".join(map(str, LEVELS))
        self.refuse(
            "--level",
            Message.NOT_IN_LIST,
            f"the width of the interval was not simulated at {text}.",
            f"Write one of: {words}.",
        )
        return LEVELS[1]

    def classes(self, text: str) -> Shares:
        """Return how often each distinct value is expected."""
        words = text.split()
        if not 2 <= len(words) <= MOST_CLASSES:
            what = f"{shown(text)} holds {len(words)} shares, and 2 to {MOST_CLASSES} are needed, one for each value."
            self.refuse("--expected-classes", Message.WRONG_SHAPE, what, 'Write: --expected-classes "10 20 40 20 10".')
            return (Decimal(1), Decimal(1))
        return tuple(self.decimal("--expected-classes", word, _SHARE) for word in words)


def read_question(given: Given) -> SizeQuestion:
    """Return what is asked.

    Raises
    ------
    InputError
        With every option that is out of its range, cannot be read, does not apply or is missing.
    """
    reader = _Reader()
    rows = _circumstances(given, reader)
    question: SizeQuestion | None = None
    if given.to_show is not None and given.to_measure is not None:
        reader.refuse(
            "--to-measure",
            Message.CONTRADICTION,
            "one command plans for one aim, and --to-show is given too.",
            "Leave one of the two out; the larger of two plans serves both aims.",
        )
    elif given.to_show is not None:
        question = _show(given, rows, reader)
    elif given.to_measure is not None:
        question = _measure(given, rows, reader)
    else:
        reader.refuse(
            "--to-show",
            Message.KEY_MISSING,
            "nothing says what the rows are needed for.",
            "Write: --to-show 0.40, or: --to-measure 0.40 --within-width 0.30.",
        )
    if question is None or reader.faults:
        raise InputError(tuple(reader.faults))
    return question


def _circumstances(given: Given, reader: _Reader) -> Circumstances:
    if len(given.expected_classes) > 2:
        reader.refuse(
            "--expected-classes",
            Message.MORE_THAN_TWO,
            f"it is given {len(given.expected_classes)} times, and an association has two variables.",
            "Give it once for one variable with ties, twice for two.",
        )
    first, second = (*map(reader.classes, given.expected_classes[:2]), None, None)[:2]
    return Circumstances(
        first,
        second,
        reader.decimal("--missing", given.missing, _MISSING) if given.missing is not None else Decimal(0),
        reader.level(given.level) if given.level is not None else LEVELS[1],
    )


def _show(given: Given, rows: Circumstances, reader: _Reader) -> ShowQuestion:
    if given.within_width is not None:
        reader.refuse(
            "--within-width",
            Message.DOES_NOT_APPLY,
            "a width is planned for when rho is to be measured, and here it is to be shown.",
            "Leave it out, or write --to-measure instead of --to-show.",
        )
    return ShowQuestion(
        reader.decimal("--to-show", given.to_show or "", _RHO_SHOWN, signed=True),
        reader.decimal("--power", given.power if given.power is not None else "0.80", _POWER),
        reader.decimal("--alpha", given.alpha if given.alpha is not None else "0.05", _ALPHA),
        reader.sidedness(given.sidedness) if given.sidedness is not None else "two-sided",
        reader.count("--questions", given.questions, MOST_QUESTIONS) if given.questions is not None else 1,
        rows,
    )


def _measure(given: Given, rows: Circumstances, reader: _Reader) -> MeasureQuestion:
    for name in (field.name for field in fields(given) if field.name in _FOR_SHOWING):
        if getattr(given, name) is not None:
            reader.refuse(
                f"--{name}",
                Message.DOES_NOT_APPLY,
                "it belongs to a test, and here an interval is planned for.",
                "Leave it out, or write --to-show instead of --to-measure.",
            )
    rho = reader.decimal("--to-measure", given.to_measure or "", _RHO_MEASURED, signed=True)
    if given.within_width is None:
        width = Decimal(1)
        reader.refuse(
            "--within-width",
            Message.NEEDED_BY_ANOTHER,
            "--to-measure needs the width that the interval is to have, and it is not given.",
            "Write: --within-width 0.30.",
        )
    else:
        width = reader.decimal("--within-width", given.within_width, _WIDTH)
    return MeasureQuestion(rho, width, rows)


def _is_plain(text: str) -> bool:
    """Return whether only digits, at most one point and a sign in front stand there: no exponent, no infinity."""
    unsigned = text[1:] if text[:1] in ("+", "-") else text
    return unsigned.isascii() and unsigned.replace(".", "", 1).isdecimal() and len(unsigned) <= MOST_SIGNS

"""Where an axis is marked and what stands there, in exact decimals."""

from dataclasses import dataclass
from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal
from typing import Final

from rankdocket.render.fonts import SANS_TEXT, width

_STEPS: Final = (Decimal(10), Decimal(5), Decimal(2), Decimal(1))
_LONGEST_STEP: Final = Decimal("1.4")
"""How much longer than wished a step may be before the next shorter one is taken."""
_MINUS: Final = "\u2212"
_SUPERSCRIPTS: Final = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")
_LARGEST_PLAIN: Final = 6
_SMALLEST_PLAIN: Final = -4
"""Powers of ten between which tick labels are written out in full."""

_LEADING: Final = 1.18


@dataclass(frozen=True, slots=True)
class Scale:
    """A range of values and the marks on it.

    Attributes
    ----------
    low, high
        Ends of the range; ``low < high``.
    ticks
        Value and label of each mark, rising.
    power
        The labels times ten to this power are the values.
    """

    low: Decimal
    high: Decimal
    ticks: tuple[tuple[Decimal, str], ...]
    power: int = 0

    def place(self, value: Decimal) -> float:
        """Return where a value lies: 0 at ``low``, 1 at ``high``."""
        return float((value - self.low) / (self.high - self.low))


def even_scale(low: Decimal, high: Decimal, wanted: int) -> Scale:
    """Return a range from ``low`` to ``high`` with about ``wanted`` marks at round values within it."""
    if low == high:
        spread = abs(low) / 2 or Decimal(1)
        low, high = low - spread, high + spread
    longest = (high - low) / wanted * _LONGEST_STEP
    unit = Decimal(1).scaleb(longest.adjusted())
    step = next(unit * part for part in _STEPS if unit * part <= longest)
    first = (low / step).to_integral_value(ROUND_CEILING)
    last = (high / step).to_integral_value(ROUND_FLOOR)
    values = [step * (first + i) for i in range(int(last - first) + 1)]
    largest = max(abs(low), abs(high)).adjusted()
    power = 0 if step.adjusted() >= _SMALLEST_PLAIN and largest <= _LARGEST_PLAIN else largest
    # The step is 1, 2, 5 or 10 units, so that its leading digit is also its last.
    places = max(0, power - step.adjusted())
    return Scale(low, high, tuple((value, _label(value.scaleb(-power), places)) for value in values), power)


def rank_scale(n: int) -> Scale:
    """Return the range of the midranks of ``n`` rows, marked at whole ranks."""
    low, high = Decimal("0.5"), Decimal(n) + Decimal("0.5")
    step = 1
    while n > 8 * step:
        step = step * 2 if str(step)[0] in "15" else step * 5 // 2
    values = [1, *range(step, n + 1, step)] if step > 1 else list(range(1, n + 1))
    return Scale(low, high, tuple((Decimal(value), str(value)) for value in values))


def power_label(power: int) -> str:
    """Return the factor an axis title carries: ``× 10⁶``, empty for none."""
    return f"× 10{str(power).translate(_SUPERSCRIPTS)}" if power else ""


def wrapped(text: str, room: float, size: float) -> list[str]:
    """Break a text into lines no wider than ``room`` points at ``size`` points; a longer word has its own line."""
    lines: list[str] = []
    for word in text.split():
        longer = f"{lines[-1]} {word}" if lines else word
        if lines and width(longer, SANS_TEXT) * size <= room:
            lines[-1] = longer
        else:
            lines.append(word)
    return lines


def leading(size: float) -> float:
    """Return the distance of base lines for type of ``size`` points."""
    return size * _LEADING


def _label(value: Decimal, places: int) -> str:
    text = f"{value:.{places}f}"
    return text.replace("-", _MINUS) if value else text.lstrip("-")

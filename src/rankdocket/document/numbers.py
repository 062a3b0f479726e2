"""Value to printed number: the only rounding in the house.

Every number of a report is looked up by its address in the plain analysis and rounded once, half to even, from
the value filed there, so that what is printed and what is filed cannot part.  A display never changes the side
of alpha on which a p-value lies.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import ROUND_FLOOR, ROUND_HALF_EVEN, ROUND_UP, Context, Decimal
from fractions import Fraction
from typing import Final

from rankdocket.canonical import Plain
from rankdocket.document.model import Number
from rankdocket.vocabulary import NumberStyle

MINUS: Final = "\u2212"
NARROW_SPACE: Final = "\u202f"
MOST_DECIMALS: Final = 15
"""A filed value has 12 significant digits; more decimals than this never separate two of them in print."""

COUNTED: Final = ("exact, no ties", "exact, conditional on the ties")
"""Methods of a test, as analysis.json files them, whose p-values were counted over all orderings in whole numbers."""

COUNTED_TOGETHER: Final = "all permutations"
"""How analysis.json says that a family was adjusted together over all permutations, none of them drawn."""

DURATIONS: Final = (("second", 1, 100), ("minute", 60, 100), ("hour", 3_600, 48), ("day", 86_400, 365))
"""Units of a duration: name, seconds, and how many of it give way to the next unit."""

MEMORIES: Final = (("MiB", 2**20), ("GiB", 2**30), ("TiB", 2**40))
"""Units of memory (IEC 80000-13) with their bytes; a thousand of one give way to the next."""

MOST_SMALL_DECIMALS: Final = 6
"""Decimals of a smallest attainable p: beyond them it is told apart from nobody's alpha."""

MOST_ERROR_DECIMALS: Final = 9
"""Decimals of a stated error: beyond them it moves no printed p."""

NEAR_ONE: Final = Decimal("0.95")
"""From here on a coefficient gets one more decimal (JCGM 100:2008, 7.2.6: three digits near unity)."""

FEW_ROWS: Final = 100
"""Below this many rows a share is printed without decimals (AMA Manual of Style, 11th edition, from memory)."""

_WIDE: Final = Context(prec=400, rounding=ROUND_HALF_EVEN)


def look_up(plain: Plain, key: str) -> Plain:
    """Return the value at the address ``key`` (keys and list positions joined by ``/``).

    Raises
    ------
    KeyError
        If nothing stands there.
    """
    found = plain
    for step in key.split("/"):
        if isinstance(found, Mapping):
            found = found[step]
        elif isinstance(found, Sequence) and not isinstance(found, str) and _is_position(step, len(found)):
            found = found[int(step)]
        else:
            raise KeyError(key)
    return found


def _is_position(step: str, length: int) -> bool:
    """Return whether a step is a list position as it is written in an address: "0", "17", never "-1" or "01"."""
    return step.isascii() and step.isdecimal() and str(int(step)) == step and int(step) < length


@dataclass(frozen=True, slots=True)
class Numbers:
    """Makes :class:`Number` values from one plain analysis in one printing style.

    Attributes
    ----------
    plain
        The analysis as filed.
    coefficient_decimals, p_value_decimals
        Decimals of the study’s report.
    style
        Whether a zero stands before the decimal point of coefficients and p-values.
    alpha
        The level of the study’s decision rule.
    """

    plain: Plain
    coefficient_decimals: int
    p_value_decimals: int
    style: NumberStyle
    alpha: Decimal

    def _exact(self, key: str) -> str:
        value = look_up(self.plain, key)
        if isinstance(value, bool) or not isinstance(value, (str, int)):
            raise TypeError(f"{key} holds no number: {value!r}")
        return str(value)

    def has(self, key: str) -> bool:
        """Return whether anything stands at the address ``key``."""
        try:
            look_up(self.plain, key)
        except KeyError:
            return False
        return True

    def whole(self, key: str) -> Number:
        """Return a count, with commas from a thousand on."""
        exact = self._exact(key)
        return Number(key, exact, _signed(f"{int(exact):,}"))

    def label(self, key: str) -> Number:
        """Return a whole number that names something (a line of a file, a seed): no separators."""
        exact = self._exact(key)
        return Number(key, exact, exact)

    def as_filed(self, key: str) -> Number:
        """Return a decimal with all its digits (a rank, a sum of squares), with commas from a thousand on."""
        exact = self._exact(key)
        return Number(key, exact, _signed(f"{Decimal(exact):,f}"))

    def level(self, key: str) -> Number:
        """Return a level or a size that the plan states, with the digits it has and the zero of the style."""
        exact = self._exact(key)
        return Number(key, exact, self._styled(Decimal(exact)))

    def share(self, key: str, limit: str | None = None) -> Number:
        """Return a filed fraction ``a/b`` as a percentage; fewer than a hundred rows get no decimals.

        Decimals are added until a share that is neither nothing nor everything does not read as if it were, and one
        that differs from the limit at the address ``limit`` does not read as equal to it.
        """
        exact = self._exact(key)
        value = _decimal(Fraction(exact)) * 100
        of = int(exact.partition("/")[2] or FEW_ROWS)
        others = {Decimal(0), Decimal(100)}
        if limit is not None:
            others.add(Decimal(self._exact(limit)) * 100)
        places = 0 if of < FEW_ROWS else 1
        while places < MOST_DECIMALS and _rounded(value, places) in others and value not in others:
            places += 1
        return Number(key, exact, f"{_rounded(value, places)}%")

    def percent(self, key: str) -> Number:
        """Return a filed decimal between 0 and 1 as a percentage with the digits that it has."""
        exact = self._exact(key)
        return Number(key, exact, f"{_plain_text(Decimal(exact) * 100)}%")

    def percent_down(self, key: str) -> Number:
        """Return a filed decimal as :meth:`percent_short` does, but rounded down, as a lower bound is."""
        return self._percent(key, ROUND_FLOOR)

    def percent_short(self, key: str) -> Number:
        """Return a filed decimal above 0 and below 1 as a percentage with its first digits.

        It has one decimal, or as many more as give itself and what is missing to everything three digits each.
        """
        return self._percent(key, ROUND_HALF_EVEN)

    def _percent(self, key: str, rounding: str) -> Number:
        exact = self._exact(key)
        value = Decimal(exact)
        places = max(1, -value.adjusted(), -(1 - value).adjusted())
        printed = (value * 100).quantize(Decimal(1).scaleb(-places), rounding=rounding)
        return Number(key, exact, f"{_plain_text(printed)}%")

    def decimals_for(self, key: str) -> int:
        """Return the decimals of the coefficient at ``key``, which its interval shares."""
        more = abs(Decimal(self._exact(key))) >= NEAR_ONE
        return max(self.coefficient_decimals, 3) if more else self.coefficient_decimals

    def coefficient(self, key: str, decimals: int | None = None) -> Number:
        """Return a coefficient or a limit of its interval.

        Digits are added until a value that is not 0 or 1 in size is not printed as if it were.
        """
        exact = self._exact(key)
        value = Decimal(exact)
        places = self.decimals_for(key) if decimals is None else decimals
        while places < MOST_DECIMALS and _rounded(value, places).copy_abs() in (0, 1) and abs(value) not in (0, 1):
            places += 1
        return Number(key, exact, self._styled(_rounded(value, places)))

    def p_value(self, key: str) -> Number:
        """Return a p-value: never 0, never on the other side of alpha, "(exactly)" when it equals alpha."""
        exact = self._exact(key)
        value = Decimal(exact)
        smallest = Decimal(1).scaleb(-self.p_value_decimals)
        while smallest > self.alpha:
            smallest = smallest.scaleb(-1)
        if value == self.alpha:
            # "Exact" is said of counted orderings only, never of drawn ones (house rule).
            equal = self._styled(self.alpha)
            return Number(key, exact, f"{equal} (exactly)" if self._is_counted(key) else equal)
        if value == 1:
            return Number(key, exact, "1")
        if value < smallest:
            return Number(key, exact, f"<{NARROW_SPACE}{self._styled(smallest)}")
        places = self.p_value_decimals
        if _rounded(value, places) == 1:
            return Number(key, exact, f">{NARROW_SPACE}{self._styled(1 - Decimal(1).scaleb(-places))}")
        while places < MOST_DECIMALS and self._misleads(_rounded(value, places), value):
            places += 1
        return Number(key, exact, self._styled(_rounded(value, places)))

    def attainable_p(self, key: str) -> Number:
        """Return the smallest p that a sample allows: as any p, but down to a millionth with its first digit."""
        exact = self._exact(key)
        value = Decimal(exact)
        if value >= Decimal(1).scaleb(-self.p_value_decimals) or value == self.alpha:
            return self.p_value(key)
        smallest = Decimal(1).scaleb(-MOST_SMALL_DECIMALS)
        while smallest > self.alpha:
            smallest = smallest.scaleb(-1)
        if value < smallest:
            return Number(key, exact, f"<{NARROW_SPACE}{self._styled(smallest)}")
        places = -value.adjusted()
        while places < MOST_DECIMALS and self._misleads(_rounded(value, places), value):
            places += 1
        return Number(key, exact, self._styled(_rounded(value, places)))

    def duration(self, key: str) -> Number:
        """Return a forecast of seconds in the unit that suits it: "40 minutes"; nobody waits longer than a year."""
        exact = self._exact(key)
        seconds = Decimal(exact)
        if seconds < 1:
            return Number(key, exact, f"{_first_digits(seconds, ROUND_HALF_EVEN).normalize():f} seconds")
        for name, size, most in DURATIONS:
            amount = _rounded(seconds / size, 0)
            if amount < most:
                shown = max(amount, Decimal(1))
                return Number(key, exact, f"{shown} {name}{'' if shown == 1 else 's'}")
        return Number(key, exact, "more than a year")

    def error(self, key: str) -> Number:
        """Return how wrong a p-value can be at most: its first digits, rounded up, and no more than nine decimals."""
        exact = self._exact(key)
        value = max(Decimal(exact), Decimal(1).scaleb(-MOST_ERROR_DECIMALS))
        return Number(key, exact, self._styled(_first_digits(value, ROUND_UP).normalize()))

    def memory(self, key: str) -> Number:
        """Return a forecast of bytes in the unit that suits it: "1.2 GiB"."""
        exact = self._exact(key)
        for unit, size in MEMORIES:
            amount = Decimal(exact) / size
            if amount < 1_000:
                return Number(key, exact, f"{_rounded(amount, 0 if amount >= 10 else 1)}{NARROW_SPACE}{unit}")
        return Number(key, exact, f"more than a thousand{NARROW_SPACE}{MEMORIES[-1][0]}")

    def _is_counted(self, key: str) -> bool:
        """Return whether the p-value at ``key`` belongs to an association that has no test whose p was not counted."""
        if self._is_of_a_claim(key):
            return False
        together, beside = "inference/max_t/method", f"{key.rpartition('/')[0]}/method"
        if key.endswith("/finding/p_adjusted") and self.has(together):
            return look_up(self.plain, together) == COUNTED_TOGETHER
        method = beside if self.has(beside) else f"{'/'.join(key.split('/')[:2])}/test/method"
        return not self.has(method) or look_up(self.plain, method) in COUNTED

    def _is_of_a_claim(self, key: str) -> bool:
        """Return whether the p-value at ``key`` comes from an approximate test of a value or of a size."""
        by = f"{'/'.join(key.split('/')[:2])}/finding/by"
        return "/size/" in key or ("/finding/" in key and self.has(by) and look_up(self.plain, by) != "rank test")

    def _misleads(self, printed: Decimal, value: Decimal) -> bool:
        crossed = (printed <= self.alpha) != (value <= self.alpha) or printed == self.alpha
        return crossed or printed in (0, 1)

    def _styled(self, value: Decimal) -> str:
        text = f"{value:f}"
        if self.style == "no leading zero" and abs(value) < 1:
            text = text.replace("0.", ".", 1)
        return _signed(text)


def _first_digits(value: Decimal, rounding: str) -> Decimal:
    """Return a value above 0 with its first two digits."""
    return value.quantize(Decimal(1).scaleb(value.adjusted() - 1), rounding=rounding)


def _rounded(value: Decimal, places: int) -> Decimal:
    quantised = value.quantize(Decimal(1).scaleb(-places), context=_WIDE)
    return quantised.copy_abs() if quantised == 0 else quantised


def _decimal(value: Fraction) -> Decimal:
    return _WIDE.divide(Decimal(value.numerator), Decimal(value.denominator))


def _plain_text(value: Decimal) -> str:
    text = f"{value:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def _signed(text: str) -> str:
    return text.replace("-", MINUS)

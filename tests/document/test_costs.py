"""How a forecast of time and memory is printed."""

from decimal import Decimal

import pytest

from rankdocket.document.numbers import Numbers


def printed(seconds: str = "0", memory: str = "0") -> tuple[str, str]:
    plain = {"seconds": seconds, "memory": memory}
    numbers = Numbers(plain, 2, 3, "leading zero", Decimal("0.05"))
    return numbers.duration("seconds").text, numbers.memory("memory").text


@pytest.mark.parametrize(
    ("seconds", "words"),
    [
        ("0.002", "0.002 seconds"),
        ("0.236", "0.24 seconds"),
        ("1.4", "1 second"),
        ("12.5", "12 seconds"),
        ("99.4", "99 seconds"),
        ("100", "2 minutes"),
        ("2400", "40 minutes"),
        ("7200", "2 hours"),
        ("172800", "2 days"),
        ("31000000", "359 days"),
        ("31536000", "more than a year"),
        ("1" + "0" * 60, "more than a year"),
    ],
)
def test_a_duration_is_told_in_the_unit_that_suits_it(seconds: str, words: str) -> None:
    """Two or three digits and a unit: a forecast is not known better."""
    assert printed(seconds=seconds)[0] == words


@pytest.mark.parametrize(
    ("memory", "words"),
    [
        ("1048576", "1.0 MiB"),
        ("41943040", "40 MiB"),
        ("1288490189", "1.2 GiB"),
        ("53687091200", "50 GiB"),
        ("2199023255552", "2.0 TiB"),
        ("1" + "0" * 40, "more than a thousand TiB"),
    ],
)
def test_memory_is_told_in_the_unit_that_suits_it(memory: str, words: str) -> None:
    """One decimal below ten; the unit counts in powers of two, as its name says."""
    assert printed(memory=memory)[1].replace("\u202f", " ") == words


@pytest.mark.parametrize(
    ("error", "words"),
    [
        ("0.00000042", "0.00000042"),
        ("0.000000421", "0.00000043"),
        ("0.012", "0.012"),
        ("0.0000000001", "0.000000001"),
        ("0.05", "0.05"),
    ],
)
def test_an_error_is_rounded_up(error: str, words: str) -> None:
    """What is stated is never smaller than what was found."""
    numbers = Numbers({"error": error}, 2, 3, "leading zero", Decimal("0.05"))
    assert numbers.error("error").text == words


def test_an_address_is_known_or_not() -> None:
    """Whether something stands at an address is asked in one place."""
    numbers = Numbers({"a": {"b": ["1"]}}, 2, 3, "leading zero", Decimal("0.05"))
    assert [numbers.has(key) for key in ("a", "a/b/0", "a/b/1", "a/c", "")] == [True, True, False, False, False]

"""How a filed value is printed: the house rule on rounding and the rules that keep a display from misleading."""

from decimal import ROUND_HALF_EVEN, Decimal

import pytest
from hypothesis import assume, example, given
from hypothesis import strategies as st

from rankdocket.canonical import Plain
from rankdocket.document.numbers import MINUS, NARROW_SPACE, Numbers, look_up
from rankdocket.vocabulary import NumberStyle

PLAIN: Plain = {"a": {"b": ["7", {"c": 12}]}, "text": "words", "claim": True}


def numbers(
    value: Plain, *, alpha: str = "0.05", style: NumberStyle = "leading zero", coefficient: int = 2, p_value: int = 3
) -> Numbers:
    return Numbers({"v": value}, coefficient, p_value, style, Decimal(alpha))


def p_text(value: str, *, alpha: str = "0.05", style: NumberStyle = "leading zero", p_value: int = 3) -> str:
    return numbers(value, alpha=alpha, style=style, p_value=p_value).p_value("v").text


def coefficient_text(value: str, *, style: NumberStyle = "leading zero", decimals: int | None = None) -> str:
    return numbers(value, style=style).coefficient("v", decimals).text


def as_number(text: str) -> Decimal:
    """Return a printed number as a number."""
    return Decimal(text.replace(MINUS, "-").replace(",", ""))


@st.composite
def filed_values(draw: st.DrawFn, lowest: int = 1) -> str:
    """Values between 0 and 1 as they are filed: at most twelve significant digits."""
    digits = draw(st.integers(lowest, 10**12))
    return f"{Decimal(digits).scaleb(-12):f}"


def test_a_value_is_found_by_keys_and_positions() -> None:
    """Steps are joined by a slash; a position counts from 0."""
    assert look_up(PLAIN, "a/b/0") == "7"
    assert look_up(PLAIN, "a/b/1/c") == 12


@pytest.mark.parametrize("key", ["x", "a/x", "a/b/2", "a/b/-1", "a/b/one", "text/0", "a/b/1/c/d"])
def test_an_address_without_a_value_is_a_key_error(key: str) -> None:
    """Whatever is wrong with an address, it is told in one way."""
    with pytest.raises(KeyError):
        look_up(PLAIN, key)


@pytest.mark.parametrize("value", [True, None, ["1"], {"a": "1"}])
def test_what_is_no_number_is_not_printed_as_one(value: Plain) -> None:
    """A claim, nothing, a list and an object are refused."""
    with pytest.raises(TypeError, match="v holds no number"):
        numbers(value).as_filed("v")


def test_a_number_keeps_its_address_and_its_filed_value() -> None:
    """What is printed points to what is filed, unrounded."""
    number = numbers("0.846881160829").coefficient("v")
    assert (number.key, number.exact, number.text) == ("v", "0.846881160829", "0.85")


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0, "0"),
        (999, "999"),
        (1000, "1,000"),
        ("5040", "5,040"),
        ("6227020800", "6,227,020,800"),
        (-1204, "\u22121,204"),
    ],
)
def test_counts_get_commas_from_a_thousand_on(value: Plain, text: str) -> None:
    """Counts filed as text, because they are large, are printed like the others."""
    assert numbers(value).whole("v").text == text


def test_a_number_that_names_something_has_no_commas() -> None:
    """A line of a file or a seed is a name."""
    assert numbers(20260).label("v").text == "20260"


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("3.5", "3.5"),
        ("-2", "\u22122"),
        ("0.05", "0.05"),
        ("12.25", "12.25"),
        ("999.75", "999.75"),
        ("1000", "1,000"),
        ("-1234567.25", "\u22121,234,567.25"),
    ],
)
def test_a_rank_or_a_sum_of_squares_is_printed_with_all_its_digits(value: str, text: str) -> None:
    """Nothing is rounded there; thousands are grouped as in counts."""
    assert numbers(value).as_filed("v").text == text


@pytest.mark.parametrize(
    ("value", "style", "text"),
    [
        ("0.05", "leading zero", "0.05"),
        ("0.30", "leading zero", "0.30"),
        ("-0.612637", "leading zero", "\u22120.612637"),
        ("0.05", "no leading zero", ".05"),
        ("-0.612637", "no leading zero", "\u2212.612637"),
        ("1", "no leading zero", "1"),
        ("1.00000000000", "no leading zero", "1.00000000000"),
    ],
)
def test_a_level_keeps_its_digits_and_has_the_zero_of_the_style(value: str, style: NumberStyle, text: str) -> None:
    """Alpha, a size of interest and a worksheet’s coefficient stand beside numbers of that style."""
    assert numbers(value, style=style).level("v").text == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        # Percent without decimals below a hundred rows, one from there on (AMA Manual of Style, 11th edition).
        ("0/7", "0%"),
        ("7/7", "100%"),
        ("2/7", "29%"),
        ("1/8", "12%"),  # 12.5, half to even
        ("3/8", "38%"),  # 37.5, half to even
        ("98/99", "99%"),
        ("1/100", "1.0%"),
        ("33/100", "33.0%"),
        ("1/3000", "0.03%"),  # never 0% for something
        ("1/800", "0.1%"),  # 0.125
        ("3/2000", "0.2%"),  # 0.15, half to even
        ("1/2000", "0.05%"),
        ("1999/2000", "99.95%"),  # never 100% for less
    ],
)
def test_a_share_has_decimals_from_a_hundred_rows_on(value: str, text: str) -> None:
    """The denominator, not reduced, tells how many rows there were."""
    assert numbers(value).share("v").text == text


def test_a_share_that_differs_from_its_limit_does_not_read_as_equal_to_it() -> None:
    """ "Found 20%, limit 20%, not met" would look like a mistake."""
    made = Numbers({"found": "10/49", "limit": "0.20"}, 2, 3, "leading zero", Decimal("0.05"))
    assert made.share("found", "limit").text == "20.4%"


@pytest.mark.parametrize(
    ("value", "text"), [("0.95", "95%"), ("0.20", "20%"), ("0.999", "99.9%"), ("1", "100%"), ("0", "0%")]
)
def test_a_level_is_printed_as_a_percentage_with_its_own_digits(value: str, text: str) -> None:
    """A level of the plan is neither rounded nor filled up."""
    assert numbers(value).percent("v").text == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("0.125", "0.12"),
        ("0.135", "0.14"),
        ("-0.125", "\u22120.12"),
        ("0.1250000001", "0.13"),
        ("0.4", "0.40"),
        ("0", "0.00"),
        ("-0.0", "0.00"),
    ],
)
def test_a_coefficient_is_rounded_half_to_even_from_the_filed_value(value: str, text: str) -> None:
    """Rule A of ISO 80000-1, once; a true minus; no minus before 0."""
    assert coefficient_text(value) == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("0.949999999999", "0.95"),
        ("0.95", "0.950"),
        ("-0.9514", "\u22120.951"),
        ("0.9869", "0.987"),
        ("1", "1.000"),
        ("-1.00000000000", "\u22121.000"),
    ],
)
def test_from_095_on_a_coefficient_has_three_decimals(value: str, text: str) -> None:
    """Three digits near unity (JCGM 100:2008, 7.2.6)."""
    assert coefficient_text(value) == text


@pytest.mark.parametrize(
    ("value", "decimals", "text"),
    [
        ("0.998", 2, "0.998"),
        ("-0.9996", 2, "\u22120.9996"),
        ("0.999999999999", 3, "0.999999999999"),
        ("0.0004", 2, "0.0004"),
        ("-0.0049", 2, "\u22120.005"),
        ("0.005", 2, "0.005"),
        ("0.0051", 2, "0.01"),
        ("0.000000000001", 2, "0.000000000001"),
        ("0", 3, "0.000"),
        ("-1.0", 2, "\u22121.00"),
    ],
)
def test_a_limit_is_never_printed_as_0_or_1_unless_it_is(value: str, decimals: int, text: str) -> None:
    """Digits are added until the limit no longer seems to touch."""
    assert coefficient_text(value, decimals=decimals) == text


@given(filed_values(), st.booleans(), st.integers(2, 6))
def test_a_printed_coefficient_is_the_filed_one_rounded_once(value: str, negative: bool, decimals: int) -> None:
    """Sign and whether it is 0 or 1 survive; there is no minus zero."""
    exact = Decimal(f"-{value}" if negative else value)
    text = coefficient_text(str(exact), decimals=decimals)
    printed = as_number(text)
    places = -int(printed.as_tuple().exponent)
    assert places >= decimals
    assert printed == exact.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_EVEN)
    assert (abs(printed) in (0, 1)) == (abs(exact) in (0, 1))
    assert text.startswith(MINUS) == (exact < 0)


@given(st.lists(filed_values(), min_size=3, max_size=3), st.integers(2, 6))
def test_rounding_keeps_the_estimate_between_its_limits(values: list[str], decimals: int) -> None:
    """Lower at most estimate at most upper, as printed (with one number of decimals for all three, or more)."""
    low, estimate, high = sorted(values, key=Decimal)
    printed = [as_number(coefficient_text(value, decimals=decimals)) for value in (low, estimate, high)]
    assert printed == sorted(printed)


@pytest.mark.parametrize(
    ("value", "text"), [("0.4837", ".48"), ("-0.4837", "\u2212.48"), ("0", ".00"), ("1", "1.000"), ("0.987", ".987")]
)
def test_without_leading_zero_a_coefficient_begins_at_the_point(value: str, text: str) -> None:
    """The other number style; a 1 keeps its digit."""
    assert coefficient_text(value, style="no leading zero") == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("0.0238095238095", "0.024"),
        ("0.0662698412698", "0.066"),
        ("0.0125", "0.012"),
        ("0.0135", "0.014"),
        ("0.001", "0.001"),
        ("0.00099999999999", f"<{NARROW_SPACE}0.001"),
        ("0.0000000000001", f"<{NARROW_SPACE}0.001"),
        ("0.0496", "0.0496"),
        ("0.0499999999999", "0.0499999999999"),
        ("0.0503", "0.0503"),
        ("0.05", "0.05 (exactly)"),
        ("0.0500", "0.05 (exactly)"),
        ("0", f"<{NARROW_SPACE}0.001"),
        ("0.9994", "0.999"),
        ("0.9995", f">{NARROW_SPACE}0.999"),  # half to even it would read 1.000
        ("0.999999999999", f">{NARROW_SPACE}0.999"),
        ("1", "1"),
    ],
)
def test_a_p_value_is_printed_on_its_side_of_alpha(value: str, text: str) -> None:
    """Digits are added near alpha; equality is said in words; nothing small reads as 0, nothing below 1 as 1."""
    assert p_text(value) == text


def test_the_number_style_holds_for_p_values_too() -> None:
    """The zero before the point goes everywhere in the number."""
    assert p_text("0.0238095", style="no leading zero") == ".024"
    assert p_text("0.05", style="no leading zero") == ".05 (exactly)"
    assert p_text("0.0002", style="no leading zero") == f"<{NARROW_SPACE}.001"
    assert p_text("0.9998", style="no leading zero") == f">{NARROW_SPACE}.999"


@pytest.mark.parametrize(
    ("value", "decimals", "text"),
    [
        ("0.995", 2, f">{NARROW_SPACE}0.99"),
        ("0.9949", 2, "0.99"),
        ("0.99996", 4, f">{NARROW_SPACE}0.9999"),
        ("0.99996", 5, "0.99996"),
    ],
)
def test_the_bound_near_1_has_the_decimals_of_the_report(value: str, decimals: int, text: str) -> None:
    """A p-value that rounds to 1 is said to lie above the largest printed value below it."""
    assert p_text(value, p_value=decimals) == text


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("0.0003", "0.0003"),
        ("0.0007", "0.001"),
        ("0.00049999", "0.00049999"),
        ("0.0005", "0.0005 (exactly)"),
        ("0.00000000000000000082", f"<{NARROW_SPACE}0.0001"),
    ],
)
def test_an_alpha_below_the_last_decimal_is_respected(value: str, text: str) -> None:
    """The bound printed for very small values lies at or below alpha, whatever alpha is."""
    assert p_text(value, alpha="0.0005") == text


@given(filed_values(), st.integers(1, 500_000), st.integers(2, 6))
@example("0.05", 50_000, 3)
@example("0.0500000000001", 50_000, 3)
@example("0.0499999999999", 50_000, 2)
@example("0.000000000001", 1, 6)
@example("0.9995", 50_000, 3)
def test_the_display_never_changes_the_side_of_alpha(value: str, millionths: int, decimals: int) -> None:
    """What a reader concludes from the printed p is what follows from the filed one."""
    alpha, exact = Decimal(millionths) / 1_000_000, Decimal(value)
    text = p_text(value, alpha=str(alpha), p_value=decimals)
    assert text.endswith("(exactly)") == (exact == alpha)
    if text.startswith("<"):
        bound = as_number(text[2:])
        assert exact < bound <= alpha
        return
    if text.startswith(">"):
        assert alpha < as_number(text[2:]) < exact < 1
        return
    printed = as_number(text.removesuffix(" (exactly)"))
    assert (printed <= alpha) == (exact <= alpha)
    assert printed > 0
    assert (printed == 1) == (exact == 1)


@given(filed_values(lowest=10**9), st.integers(1, 50))
def test_a_p_value_is_rounded_once(value: str, hundredths: int) -> None:
    """Half to even, from the filed value, at as many places as are printed; 1 only for 1."""
    text = p_text(value, alpha=str(Decimal(hundredths) / 100))
    assume(not text.endswith("(exactly)"))
    rounds_to_1 = Decimal(value).quantize(Decimal("0.001"), rounding=ROUND_HALF_EVEN) == 1
    assert text.startswith(">") == (rounds_to_1 and Decimal(value) < 1)
    assume(not text.startswith(">"))
    printed = as_number(text)
    assert printed > 0
    assert printed == Decimal(value).quantize(
        Decimal(1).scaleb(int(printed.as_tuple().exponent)), rounding=ROUND_HALF_EVEN
    )


@pytest.mark.parametrize(
    ("value", "text"),
    [
        ("0.000793650793651", "0.0008"),
        ("0.0238095238095", "0.024"),
        ("0.00000193", "0.000002"),
        ("0.0000000193", f"<{NARROW_SPACE}0.000001"),
        ("0.05", "0.05 (exactly)"),
        ("0.0833333333333", "0.083"),
    ],
)
def test_the_smallest_attainable_p_is_printed_down_to_a_millionth(value: str, text: str) -> None:
    """Whoever plans a sample wants to see how far below alpha it could reach, not only that it is small."""
    assert numbers(value).attainable_p("v").text == text


@pytest.mark.parametrize(
    ("value", "alpha", "text"),
    [
        ("0", "0.05", f"<{NARROW_SPACE}0.000001"),  # the lower end of the interval of a p with no draw as extreme
        ("0", "0.0000001", f"<{NARROW_SPACE}0.0000001"),
        ("0.000000999", "0.05", f"<{NARROW_SPACE}0.000001"),
        ("0.000001", "0.05", "0.000001"),
        ("0.00096", "0.05", "0.0010"),
        ("0.00052", "0.0005", "0.00052"),
        ("0.00048", "0.0005", "0.00048"),
        ("0.0005", "0.0005", "0.0005 (exactly)"),
        ("0.00000006", "0.0000001", f"<{NARROW_SPACE}0.0000001"),
    ],
)
def test_a_small_p_stays_on_its_side_of_a_small_alpha_and_is_never_0(value: str, alpha: str, text: str) -> None:
    """What bounds it lies at or below alpha; what is printed of it lies on the side on which it lies itself."""
    assert numbers(value, alpha=alpha).attainable_p("v").text == text


@given(filed_values(), st.integers(1, 500_000), st.integers(2, 6))
@example("0.00052", 500, 3)
def test_the_display_of_a_small_p_never_changes_its_side_of_alpha(value: str, millionths: int, decimals: int) -> None:
    """As for every other p-value."""
    alpha, exact = Decimal(millionths) / 1_000_000, Decimal(value)
    text = numbers(value, alpha=str(alpha), p_value=decimals).attainable_p("v").text
    assert text.endswith("(exactly)") == (exact == alpha)
    if text.startswith(("<", ">")):
        assert (exact <= alpha) == text.startswith("<")
        return
    printed = as_number(text.removesuffix(" (exactly)"))
    assert printed > 0
    assert (printed <= alpha) == (exact <= alpha)


@pytest.mark.parametrize(
    ("value", "down", "short"),
    [
        # 1 less 0.025 to the power 1/n for ten, twenty, a hundred and a hundred thousand rows.
        ("0.308497107819", "30.8%", "30.8%"),
        ("0.168428097300", "16.8%", "16.8%"),
        ("0.0362166967", "3.62%", "3.62%"),
        ("0.0000368881", "0.00368%", "0.00369%"),
        ("0.9833333333334", "98.33%", "98.33%"),
        ("0.998996", "99.899%", "99.9%"),
        ("0.975", "97.5%", "97.5%"),
        ("0.0083333333333", "0.833%", "0.833%"),
        ("0.264846939700", "26.4%", "26.5%"),
    ],
)
def test_a_bound_in_percent_is_not_told_as_more_than_it_is(value: str, down: str, short: str) -> None:
    """A share that could go unseen and a level are rounded down, a probability to the nearest; neither ends at 0 or 100%."""
    found = numbers(value)
    assert (found.percent_down("v").text, found.percent_short("v").text) == (down, short)

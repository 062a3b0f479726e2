"""The analysis as it is filed: text and whole numbers only, at addresses that every printed number can point to."""

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from math import factorial

import pytest
from hypothesis import given
from hypothesis import strategies as st

from analysis.invented import DEMONSTRATIONS, RISING, Invented, association, demonstration
from rankdocket.analysis.checks import CHECKS
from rankdocket.analysis.filing import DIGITS, exact_decimal, filed, filed_beside, half
from rankdocket.analysis.plain import SCHEMA, analysis_to_plain, data_to_plain, screened_to_plain
from rankdocket.analysis.results import Estimate, RankTest
from rankdocket.analysis.screen import screen_all
from rankdocket.canonical import LARGEST_INTEGER, Plain, canonical_bytes, readable_bytes
from rankdocket.document.numbers import look_up
from writing.reports import EVERY_FINDING

STUDIES = (*DEMONSTRATIONS, "every finding")


@pytest.fixture(params=STUDIES)
def plain(request: pytest.FixtureRequest) -> dict[str, Plain]:
    name = request.param
    return analysis_to_plain(EVERY_FINDING.analysed() if name == "every finding" else demonstration(name))


def leaves(plain: Plain, at: str = "") -> Iterator[tuple[str, Plain]]:
    """Yield address and value of everything that is neither list nor object."""
    if isinstance(plain, Mapping):
        for key, item in plain.items():
            yield from leaves(item, f"{at}/{key}".lstrip("/"))
    elif isinstance(plain, Sequence) and not isinstance(plain, str):
        for place, item in enumerate(plain):
            yield from leaves(item, f"{at}/{place}")
    else:
        yield at, plain


def test_everything_filed_is_text_a_whole_number_or_a_claim(plain: dict[str, Plain]) -> None:
    """No float, no null; what is absent has no key."""
    assert {type(value) for _, value in leaves(plain)} <= {str, int, bool}
    assert plain["schema"] == SCHEMA


def test_the_canonical_form_exists_and_reads_back(plain: dict[str, Plain]) -> None:
    """Both byte forms hold the same data, and writing them again gives the same bytes."""
    filed_bytes = canonical_bytes(plain)
    assert json.loads(filed_bytes) == json.loads(readable_bytes(plain))
    assert canonical_bytes(json.loads(filed_bytes)) == filed_bytes
    assert b"NaN" not in filed_bytes
    assert re.search(rb"[:\[,]null\b", filed_bytes) is None


def test_a_count_that_is_none_is_null() -> None:
    """Thirty-one untied rows have a p-value and no count; nothing else is null."""
    columns = {"u": " ".join(map(str, range(31))), "v": " ".join(str(7 * place % 31) for place in range(31))}
    made = analysis_to_plain(Invented(columns=columns).analysed())
    assert [address for address, value in leaves(made) if value is None] == ["associations/A1/test/count"]


def test_every_leaf_is_found_at_its_address(plain: dict[str, Plain]) -> None:
    """No key holds a slash, so that an address means one thing."""
    for address, value in leaves(plain):
        assert look_up(plain, address) == value


def test_the_tally_counts_what_is_filed(plain: dict[str, Plain]) -> None:
    """Findings add up to the associations."""
    associations = plain["associations"]
    assert isinstance(associations, Mapping)
    words = [look_up(found, "finding/word") for found in associations.values()]
    assert look_up(plain, "tally/associations") == len(words)
    tally = look_up(plain, "tally/findings")
    assert isinstance(tally, Mapping)
    assert dict(tally) == {word: words.count(word) for word in words}
    states = [look_up(found, "estimate/state") for found in associations.values()]
    assert look_up(plain, "tally/estimates") == states.count("estimated")
    tests = [look_up(found, "test/state") for found in associations.values()]
    assert look_up(plain, "tally/tests") == tests.count("tested")


def test_a_part_that_is_missing_has_a_state_and_a_reason(plain: dict[str, Plain]) -> None:
    """Estimate, test and interval are each there or say why not."""
    associations = plain["associations"]
    assert isinstance(associations, Mapping)
    given_states = {"estimate": "estimated", "test": "tested", "interval": "given"}
    for found in associations.values():
        for part, given_state in given_states.items():
            absent = look_up(found, f"{part}/state") != given_state
            described = look_up(found, part)
            assert isinstance(described, Mapping)
            assert ("reason" in described) == absent
            assert (set(described) == {"state", "reason"}) == absent


def test_the_worksheet_gives_the_coefficient_by_hand() -> None:
    """Products over the root of both squares, and the form with tie terms, from the filed midranks alone."""
    plain = analysis_to_plain(demonstration("gasket-creep"))
    sheet = {
        key: look_up(plain, f"associations/A1/worksheet/{key}")
        for key in ("row", "x", "y", "rank_x", "rank_y", "difference", "squared")
    }
    assert all(isinstance(column, list) and len(column) == 7 for column in sheet.values())
    assert sheet["x"] == ["355", "310", "520", "340", "460", "355", "410"]
    # By hand: 310 340 355 355 410 460 520 and 4 5 6 8 9 11 12.
    assert sheet["rank_x"] == ["3.5", "1", "7", "2", "6", "3.5", "5"]
    assert sheet["rank_y"] == ["5", "1", "6", "3", "7", "2", "4"]
    assert sheet["difference"] == ["-1.5", "0", "1", "-1", "-1", "1.5", "1"]
    assert sheet["squared"] == ["2.25", "0", "1", "1", "1", "2.25", "1"]
    assert look_up(plain, "associations/A1/estimate/squared_differences") == "8.5"
    assert look_up(plain, "associations/A1/estimate/value") == look_up(plain, "associations/A1/estimate/corrected_form")
    assert str(look_up(plain, "associations/A1/estimate/value")).startswith("0.84688")


def test_counts_too_large_for_other_readers_are_text() -> None:
    """Thirteen rows untied: 13! is 6,227,020,800; with ties in thirty rows 30! has 33 digits."""
    tied = " ".join(["1"] * 15 + ["2"] * 15)
    found = replace(Invented(), columns={"u": tied, "v": tied}).analysed()
    plain = analysis_to_plain(found)
    of = look_up(plain, "associations/A1/test/of")
    assert of == str(factorial(30))
    assert int(of) > LARGEST_INTEGER
    assert look_up(plain, "associations/A1/test/count") == str(2 * factorial(15) ** 2)
    assert look_up(plain, "associations/A1/ties_x/cube_sum") == str(2 * (15**3 - 15))


def test_exact_values_are_filed_beside_their_decimals() -> None:
    """p is count over of, rounded to twelve digits half to even."""
    found = demonstration("gasket-creep")
    plain = analysis_to_plain(found)
    result = found.results["A1"]
    assert isinstance(result.test, RankTest)
    assert isinstance(result.estimate, Estimate)
    count, of, p = (str(look_up(plain, f"associations/A1/test/{key}")) for key in ("count", "of", "p"))
    assert (count, of, p) == ("120", "5040", "0.0238095238095")
    coefficient = result.estimate.coefficient
    integers = [str(look_up(plain, f"associations/A1/estimate/{key}")) for key in ("numerator", "x_square", "y_square")]
    assert integers == [str(value) for value in (coefficient.numerator, coefficient.x_square, coefficient.y_square)]


def test_what_is_known_before_results_is_the_same_afterwards() -> None:
    """A screening files the same data, rows and checks, and nothing joint."""
    found = demonstration("weld-smoke")
    plain = analysis_to_plain(found)
    before = data_to_plain(found.spec, found.data)
    assert {key: plain[key] for key in before} == before
    for name, screened in screen_all(found.spec, found.data).items():
        outcomes = tuple(check.examine(screened, found.spec) for check in CHECKS if not check.joint)
        shown = screened_to_plain(screened, outcomes)
        for address, value in leaves(shown):
            assert look_up(plain, f"associations/{name}/{address}") == value
        assert set(shown) == {"x", "y", "rows", "ties_x", "ties_y", "checks"}


def test_a_seed_and_smallest_sizes_are_filed_as_text() -> None:
    """A seed may be larger than a JSON number can be."""
    seed = 2**63 - 1
    invented = replace(
        Invented(),
        associations={"A1": association(more="smallest_of_interest: 0.30"), "A2": association()},
        inference=f"alpha: 0.05, p_value: {{permutations: 999, most_draws: 999, seed: {seed}}}",
    )
    plain = analysis_to_plain(invented.analysed())
    assert look_up(plain, "inference/seed") == str(seed)
    assert look_up(plain, "inference/smallest_of_interest") == {"A1": "0.30"}


@given(st.fractions(min_value=-1, max_value=1))
def test_a_value_is_filed_with_twelve_significant_digits(value: Fraction) -> None:
    """Never in exponent form, never minus zero, off by at most half a unit of the last digit."""
    text = filed(value)
    number = Fraction(text)
    assert "e" not in text.lower()
    assert text != "-0"
    assert len(text.lstrip("-").replace(".", "").lstrip("0")) <= DIGITS
    assert abs(number - value) <= abs(value) / (2 * 10 ** (DIGITS - 1))


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (Fraction(1, 3), "0.333333333333"),
        (Fraction(-2, 3), "-0.666666666667"),
        (Decimal("0.1234567890125"), "0.123456789012"),  # half to even
        (Decimal("0.1234567890135"), "0.123456789014"),
        (Decimal("0.050"), "0.05"),
        (0.1, "0.1"),
        (-0.0, "0"),
        (1e-7, "0.0000001"),
        (Fraction(3000), "3000"),
    ],
)
def test_filed_values_by_hand(value: Fraction | Decimal | float, text: str) -> None:
    """A float is taken at its exact binary value; zeros at the end are dropped."""
    assert filed(value) == text


@pytest.mark.parametrize(("doubled", "text"), [(7, "3.5"), (8, "4"), (-3, "-1.5"), (-1, "-0.5"), (0, "0"), (-4, "-2")])
def test_half_of_a_doubled_rank(doubled: int, text: str) -> None:
    """Midranks are halves."""
    assert half(doubled) == text


def test_a_finite_decimal_is_filed_in_full_and_others_are_refused() -> None:
    """Sums of squared rank differences are quarters."""
    assert exact_decimal(Fraction(34, 4)) == "8.5"
    assert exact_decimal(Fraction(9, 4)) == "2.25"
    assert exact_decimal(Fraction(12)) == "12"
    with pytest.raises(ValueError, match="no finite decimal form"):
        exact_decimal(Fraction(1, 3))


def test_equal_studies_are_filed_in_equal_bytes() -> None:
    """A float of one run is a float of the next: nothing depends on the run."""
    first, second = (canonical_bytes(analysis_to_plain(EVERY_FINDING.analysed())) for _ in range(2))
    assert first == second
    assert RISING in EVERY_FINDING.columns["u"]


def test_a_p_that_twelve_digits_would_merge_with_alpha_is_filed_with_more() -> None:
    """A reader of analysis.json must come to the side of alpha on which the fractions put the finding."""
    level = Decimal("0.0123015873016")
    above = Fraction(31, 2520)
    assert Decimal(filed(above)) == level
    assert Decimal(filed_beside(above, level)) != level
    assert (Decimal(filed_beside(above, level)) > level) == (above > Fraction(level))
    assert filed_beside(Fraction(level), level) == str(level)

"""A screening shows what may be known before anything joint is, and says what would stop an issue."""

from dataclasses import replace
from typing import Any

import pytest

from analysis.invented import MISSING, Invented, association
from rankdocket.analysis.screening import Screening, screen_study
from rankdocket.document.numbers import look_up
from rankdocket.writing.screening_page import screening_page

MANY = " ".join(str(place // 3) for place in range(60))
MANY_TOO = " ".join(str(place * 17 % 61 // 3) for place in range(60))
FEW = " ".join(str(place // 3) if place % 3 == 0 and place < 15 else MISSING for place in range(60))
PLAN = {"A1": association(), "A2": association("u", "w")}
LARGE = Invented(columns={"u": MANY, "v": MANY_TOO, "w": FEW}, associations=PLAN)
"""A1 has sixty rows with many ties, whose orderings are too many to count; A2 has five."""

SEEDED = "alpha: 0.05, p_value: {most_draws: 99999, seed: 11}"


def screening(invented: Invented) -> Screening:
    return screen_study(*invented.read())


def test_what_needs_draws_and_has_no_seed_is_named() -> None:
    """The association alone whose orderings cannot all be counted; a seed settles it."""
    without, with_seed = screening(LARGE), screening(replace(LARGE, inference=SEEDED))
    assert (without.seedless, with_seed.seedless) == (("A1",), ())
    assert look_up(without.plain, "without_seed") == ["A1"]
    assert look_up(with_seed.plain, "without_seed") == []
    assert (without.all_met, with_seed.all_met) == (False, True)


@pytest.mark.parametrize(
    "parts",
    [{"rows": "leave_out: []"}, {"requirements": "fewest_complete_rows: 61, most_missing: 1, most_tied: 1"}],
    ids=["dependent rows", "too few rows"],
)
def test_a_test_that_will_be_withheld_asks_for_no_seed(parts: dict[str, Any]) -> None:
    """There is nothing to draw for; the requirement is not met all the same."""
    found = screening(replace(LARGE, **parts))
    assert found.seedless == ()
    assert not found.all_met


def test_the_page_asks_for_a_seed_where_one_is_missing() -> None:
    """Among the questions to the client, with a line to write."""
    asked, not_asked = (screening_page(screening(replace(LARGE, inference=text))) for text in ("alpha: 0.05", SEEDED))
    assert "A1: permutations must be drawn and the plan states no seed. Write one, as p_value: {" in asked
    assert "states no seed" not in not_asked
    assert "None: every requirement that can be looked at now is met." in not_asked


def test_the_page_tells_the_smallest_p_of_the_null_that_will_be_used() -> None:
    """From 99,999 draws no p lies below 1/100,000; five rows, counted through, reach 1/60."""
    page = screening_page(screening(replace(LARGE, inference=SEEDED)))
    assert "A1: 60 complete rows; the smallest possible p is 0.00001." in page
    assert "A2: 5 complete rows; the smallest possible p is 0.017." in page

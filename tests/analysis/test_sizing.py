"""How many rows are needed: the answer, its table and curves, and how they are filed."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rankdocket.analysis.sizing import (
    Circumstances,
    MeasureAnswer,
    MeasureQuestion,
    ShowAnswer,
    ShowQuestion,
    size,
)
from rankdocket.analysis.sizing_plain import size_to_plain
from rankdocket.canonical import canonical_bytes
from rankdocket.stats.no_answer import NoAnswer
from rankdocket.stats.tied_target import rho_under_ties

PLAIN = Circumstances(None, None, Decimal(0), Decimal("0.95"))
FIVE = (Decimal(10), Decimal(20), Decimal(40), Decimal(20), Decimal(10))
SHOW = ShowQuestion(Decimal("0.40"), Decimal("0.80"), Decimal("0.05"), "two-sided", 1, PLAIN)
MEASURE = MeasureQuestion(Decimal("0.40"), Decimal("0.30"), PLAIN)

ROWS_ELSEWHERE = {
    "0.20": (196, 261),
    "0.30": (87, 115),
    "0.40": (48, 64),
    "0.50": (30, 40),
    "0.60": (21, 27),
    "0.70": (15, 19),
    "0.80": (11, 13),
}
"""Rho → rows for power 0.80 and 0.90, two-sided at 0.05: computed apart from this program (methods B8, n by B)."""

rhos = st.decimals(Decimal("0.001"), Decimal("0.999"), places=3)


def _shown(question: ShowQuestion) -> ShowAnswer:
    found = size(question)
    assert isinstance(found, ShowAnswer)
    return found


def _measured(question: MeasureQuestion) -> MeasureAnswer:
    found = size(question)
    assert isinstance(found, MeasureAnswer)
    return found


@pytest.mark.parametrize("rho", ROWS_ELSEWHERE)
def test_the_answer_and_its_table_agree_with_one_computed_elsewhere(rho: str) -> None:
    """The rows of the answer and of every line of the table that the other one has."""
    found = _shown(replace(SHOW, rho=Decimal(rho)))
    assert found.rows == ROWS_ELSEWHERE[rho][0]
    assert found.powers == (Decimal("0.80"), Decimal("0.90"), Decimal("0.95"))
    lines = {str(line.rho): line.needed[:2] for line in found.lines}
    common = lines.keys() & ROWS_ELSEWHERE.keys()
    assert rho in common
    assert {key: lines[key] for key in common} == {key: ROWS_ELSEWHERE[key] for key in common}


def test_six_questions_of_one_are_planned_like_alpha_over_six() -> None:
    """Sharing alpha among six questions is deciding one at a sixth of it."""
    six = _shown(replace(SHOW, questions=6))
    one = _shown(replace(SHOW, alpha=Decimal("0.05") / 6))
    assert six.rows == one.rows == 72
    assert six.rows > _shown(SHOW).rows > _shown(replace(SHOW, sidedness="one-sided")).rows


def test_expected_ties_are_planned_for() -> None:
    """The rows are those of the rho that the ties leave, in the answer and in every line of the table."""
    tied = _shown(replace(SHOW, rows=replace(PLAIN, first=FIVE, second=FIVE)))
    assert tied.left == rho_under_ties(0.4, FIVE, FIVE) < 0.4
    assert tied.rows > 48
    assert tied.rows == tied.lines[2].needed[0]
    assert [line.left < float(line.rho) for line in tied.lines] == [True] * 5


@given(st.integers(4, 10_000), st.decimals(Decimal(0), Decimal("0.95"), places=3))
def test_rows_to_collect_leave_the_rows_needed(rows: int, missing: Decimal) -> None:
    """So many are collected that the complete rows remain on average, and with one fewer they would not."""
    collected = replace(PLAIN, missing=missing).collected(rows)
    kept = 1 - Fraction(missing)
    assert (collected - 1) * kept < rows <= collected * kept


@given(rhos, st.booleans())
def test_neighbours_stand_around_the_target(rho: Decimal, below: bool) -> None:
    """The table has the target once, rising, with its own sign, inside 1, at even distances, two below it."""
    target = -rho if below else rho
    values = [line.rho for line in _shown(replace(SHOW, rho=target)).lines]
    assert values == sorted(set(values))
    assert values.count(target) == 1
    assert all(each * target > 0 and abs(each) < 1 for each in values)
    assert sum(abs(each) < abs(target) for each in values) == 2
    assert len({other - one for one, other in pairwise(values)}) == 1


def test_curves_begin_and_end_where_something_happens() -> None:
    """Powers rise from the fewest rows that could reach alpha to 0.99 for the rho aimed at, neighbours beside it."""
    found = _shown(SHOW)
    own, *beside = found.curves
    assert [str(curve.rho) for curve in found.curves] == ["0.40", "0.30", "0.50"]
    powers = [power for _, power in own.points]
    assert powers == sorted(powers)
    assert own.points[0][0] == 5
    assert powers[-1] >= 0.99 > powers[-2]
    assert all(
        low[1] < mid[1] < high[1] for low, mid, high in zip(beside[0].points, own.points, beside[1].points, strict=True)
    )


def test_a_width_is_planned_for_the_interval_of_the_house() -> None:
    """The rows give the width with the simulated factor, which the answer states; the formula alone would ask for 132."""
    found = _measured(MEASURE)
    assert found.textbook.rows == 132 < found.rows
    assert found.width <= 0.3
    assert 1 < found.factor < 1.05
    assert found.rows == found.lines[2].needed[2]
    mean, textbook = found.curves
    assert all(one > other for (_, one), (_, other) in zip(mean.points, textbook.points, strict=True))


def test_a_rho_of_nothing_can_be_measured() -> None:
    """Where rho is expected to be 0 its neighbours are those above it."""
    found = _measured(replace(MEASURE, rho=Decimal("0.00")))
    assert [str(line.rho) for line in found.lines] == ["0.00", "0.10", "0.20"]


def test_what_was_not_simulated_has_a_reason() -> None:
    """Nearer to 1 than 0.95 a test is planned and no width is told; a line of a table says why it is empty."""
    near = _shown(replace(SHOW, rho=Decimal("0.97")))
    assert isinstance(near.width, NoAnswer)
    assert size_to_plain(near, "0")["interval_width"] == {"reason": near.width.reason}
    *_, within, beyond = _measured(replace(MEASURE, rho=Decimal("0.86"))).lines
    assert (str(within.rho), str(beyond.rho)) == ("0.86", "0.96")
    assert all(isinstance(each, int) for each in within.needed)
    assert all(isinstance(each, NoAnswer) for each in beyond.needed)
    assert isinstance(size(replace(MEASURE, rho=Decimal("0.97"))), NoAnswer)


def test_ties_that_leave_nothing_are_told() -> None:
    """When one value holds all but every row, no plan is made, and the reason is said."""
    alone = (Decimal(1_000_000), Decimal("0.000001"))
    found = size(replace(SHOW, rho=Decimal("0.01"), rows=replace(PLAIN, first=alone, second=alone)))
    assert isinstance(found, NoAnswer)
    assert "next to nothing" in found.reason


@pytest.mark.parametrize("question", [SHOW, MEASURE, replace(SHOW, rho=Decimal("0.001"), power=Decimal("0.999"))])
def test_an_answer_is_filed_in_the_house_manner(question: ShowQuestion | MeasureQuestion) -> None:
    """It has a schema, texts for everything that is no count, and one byte form, the same each time."""
    found = size(question)
    assert not isinstance(found, NoAnswer)
    plain = size_to_plain(found, "1.2.3")
    assert (plain["schema"], plain["program"], plain["rows"]) == ("urn:rankdocket:size:1", "1.2.3", found.rows)
    again = size(question)
    assert not isinstance(again, NoAnswer)
    assert canonical_bytes(plain) == canonical_bytes(size_to_plain(again, "1.2.3"))


def test_no_plan_has_fewer_rows_than_an_interval_needs() -> None:
    """At an alpha of one half two rows could be in perfect order; four are planned, and their power is told."""
    found = _shown(
        replace(SHOW, rho=Decimal("0.99"), alpha=Decimal("0.50"), sidedness="one-sided", power=Decimal("0.50"))
    )
    assert found.needed.fewest_attainable == 2
    assert found.rows == 4 == found.lines[-1].needed[0]
    assert isinstance(found.power, float)
    assert [rows for rows, _ in found.curves[0].points][:2] == [4, 5]


def test_neighbours_of_the_smallest_target_have_their_rows() -> None:
    """Below 0.001 nothing can be asked for; its neighbours in the table are planned all the same."""
    lines = _shown(replace(SHOW, rho=Decimal("0.001"))).lines
    assert [str(line.rho) for line in lines] == ["0.0008", "0.0009", "0.0010", "0.0011", "0.0012"]
    assert all(isinstance(each, int) for line in lines for each in line.needed)
